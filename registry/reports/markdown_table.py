"""A table as a Markdown pipe table, with its sources beneath."""

from __future__ import annotations

import re
from collections.abc import Iterator, Sequence

from registry.reports.columns import Columns, Line
from registry.reports.digits import Digits
from registry.tables.tally import Tally, Used

__all__ = ["escape", "write_markdown"]


def escape(text: str) -> str:
    """Text that Markdown shows as it is, in a cell too.

    Examples
    --------
    >>> escape("a|b <i>")
    'a\\\\|b \\\\<i\\\\>'
    """
    return re.sub(r"([\\`*_\[\]<>|#~])", r"\\\1", " ".join(text.split()))


def write_markdown(columns: Columns, tally: Tally, caution: str) -> Iterator[str]:
    """The table as text, block by block, then its correlations with their sources.

    Parameters
    ----------
    columns : Columns
        The units.
    tally : Tally
        The rows, which it counts.
    caution : str
        The sentence at the end.

    Yields
    ------
    str
        Some lines.
    """
    digits = Digits(columns)
    heads = [f"{name}, {unit}" for name, unit in digits.heads]
    yield f"{_row([*heads, 'answered by', 'mark'])}{_row(['---:', '---:', '---:', '---', '---'])}"
    for block in tally.blocks():
        yield "".join(_row(_cells(columns, digits, line)) for line in columns.lines(block))
    yield "\n".join(_tell_rest(columns, tally, caution))


def _cells(columns: Columns, digits: Digits, line: Line) -> Sequence[str]:
    return [*digits.show(line), line.correlation, columns.word_marks(line.note)]


def _row(cells: Sequence[str]) -> str:
    return f"| {' | '.join(escape(cell) if cell.strip('-:') else cell for cell in cells)} |\n"


def _tell_rest(columns: Columns, tally: Tally, caution: str) -> Iterator[str]:
    coverage = columns.table.coverage
    if columns.table.note:
        yield f"\n{escape(columns.table.note)}"
    yield ""
    yield from (f"- {_tell_source(used)}" for used in tally.used)
    yield f"\n{escape(coverage.dossier.compound.record.name)}, library position {coverage.dossier.position}."
    yield f"\n{escape(caution)}\n"


def _tell_source(used: Used) -> str:
    grounds = "; ".join(f"{label}: {text}" for label, text in used.grounds)
    return escape(" ".join([f"{used.title}; {grounds}.", *used.cautions]))
