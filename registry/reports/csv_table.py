"""A table as comma-separated values (RFC 4180), every number with all its digits."""

from __future__ import annotations

import csv
import io
from collections.abc import Iterator

from registry.reports.columns import Columns, Line
from registry.tables.tally import Tally

__all__ = ["guard_text", "write_csv"]


def guard_text(text: str) -> str:
    """A text that no spreadsheet runs as a formula.

    Examples
    --------
    >>> guard_text("=1+1"), guard_text("seam")
    ("'=1+1", 'seam')
    """
    return f"'{text}" if text[:1] in ("=", "+", "-", "@", "\t", "\r") else text


def write_csv(columns: Columns, tally: Tally) -> Iterator[str]:
    """The table as text, block by block: one header, then the rows; an empty cell where there is nothing.

    Parameters
    ----------
    columns : Columns
        The units.
    tally : Tally
        The rows, which it counts.

    Yields
    ------
    str
        Some lines, each ended by CR and LF.
    """
    yield _join([[guard_text(name) for name in columns.names]])
    for block in tally.blocks():
        yield _join(_cells(columns, line) for line in columns.lines(block))


def _cells(columns: Columns, line: Line) -> tuple[object, ...]:
    found = line.found if line.found == line.found else ""
    spread = line.expanded if line.expanded == line.expanded else ""
    mark = columns.word_marks(line.note) if line.note.marks else ""
    return line.given, found, spread, guard_text(line.correlation), line.revision, guard_text(mark)


def _join(rows: object) -> str:
    stream = io.StringIO()
    # a float is written by repr, which reads back as the same double
    csv.writer(stream).writerows(rows)  # type: ignore[arg-type]
    return stream.getvalue()
