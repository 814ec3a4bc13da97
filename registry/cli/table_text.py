"""A table as a person reads it in a terminal."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from registry.cli.screen import CAUTION, format_facts, name_past, wrap
from registry.properties import PROPERTIES
from registry.reports.columns import Columns, Line
from registry.reports.digits import Digits
from registry.tables.tabulation import Block
from registry.tables.tally import Tally, Used

__all__ = ["write_text"]

_ANSWERED = "answered by"


def write_text(columns: Columns, tally: Tally, label: str) -> Iterator[str]:
    """The table as lines of text, block by block, then what stands behind it.

    Parameters
    ----------
    columns : Columns
        The units.
    tally : Tally
        The rows, which it counts.
    label : str
        How the position is called that is looked at; empty for the newest.

    Yields
    ------
    str
        Some lines.
    """
    coverage = columns.table.coverage
    yield f"{coverage.dossier.compound.record.name}: {PROPERTIES[coverage.property].title}{name_past(label)}\n"
    if columns.table.note:
        yield f"{wrap(columns.table.note, 0)}\n"
    form = _Form(columns)
    yield f"\n{form.head()}"
    for block in tally.blocks():
        yield form.lay(block)
    for used in tally.used:
        yield f"\n{_tell(used)}"
    yield f"\n{wrap(CAUTION, 0)}\n"


class _Form:
    """Columns as wide as the ends of the table need."""

    def __init__(self, columns: Columns) -> None:
        self._columns = columns
        self._digits = Digits(columns)
        self._widths = self._digits.widths()

    def head(self) -> str:
        """Two lines: what each column is, and its unit."""
        names, units = zip(*self._digits.heads, strict=True)
        return f"{self._join(names, _ANSWERED)}{self._join(units, '')}"

    def lay(self, block: Block) -> str:
        """The lines of a block, with one before each row that lies across a seam or a gap."""
        return "".join(f"{self._between(line)}{self._row(line)}" for line in self._columns.lines(block))

    def _row(self, line: Line) -> str:
        marks = [mark for mark in line.note.marks if mark in ("draft", "declined", "withdrawn", "metastable")]
        who = f"refused: {line.note.reason}" if line.note.reason else line.correlation
        return self._join(self._digits.show(line), who + (f" ({', '.join(marks).upper()})" if marks else ""))

    def _between(self, line: Line) -> str:
        show, note = self._columns.show_temperature, line.note
        seams = (f"  -- seam {self._columns.word_seam(s)}, {s.below} -> {s.above}\n" for s in note.seams)
        gaps = (f"  -- gap from {show(g.low)} to {show(g.high)}: nothing may answer there\n" for g in note.gaps)
        return "".join([*gaps, *seams])

    def _join(self, cells: Sequence[str], last: str) -> str:
        padded = (cell.rjust(width) for cell, width in zip(cells, self._widths, strict=True))
        return f"  {'  '.join([*padded, last])}".rstrip() + "\n"


def _tell(used: Used) -> str:
    """One correlation with its source."""
    facts = (*used.grounds, *(("caution", caution) for caution in used.cautions))
    return "".join(f"{line}\n" for line in [f"  {used.title}", *format_facts(facts, indent=4)])
