"""A table as an .xlsx workbook: the rows on one sheet, what stands behind them on another."""

from __future__ import annotations

import contextlib
import math
import os
import tempfile
from collections.abc import Iterator
from pathlib import Path
from typing import Any, BinaryIO

from registry.errors import BadInput
from registry.properties import PROPERTIES
from registry.reports.columns import Columns, Line
from registry.tables.tally import Tally, Used

__all__ = ["check_workbook", "write_workbook"]

MOST_ROWS = 1_048_575
"""Rows below the header that a sheet holds (ECMA-376)."""

_AS_TEXT = {"strings_to_formulas": False, "strings_to_urls": False, "strings_to_numbers": False}


def check_workbook(rows: int) -> None:
    """Say no where a workbook cannot be made."""
    try:
        import xlsxwriter  # noqa: F401
    except ImportError:
        raise BadInput(
            "An .xlsx file needs the package XlsxWriter, which is not installed. "
            "`pip install XlsxWriter`, where rangebook is installed, adds it; csv needs nothing."
        ) from None
    if rows > MOST_ROWS:
        raise BadInput(f"A sheet holds {MOST_ROWS:,} rows; the table has {rows:,}. Take a larger step, or csv.")


def write_workbook(path: Path, columns: Columns, tally: Tally, caution: str) -> None:
    """Write the table to a file.

    Numbers are written as numbers and texts as texts, whatever they start
    with. Each row is written before the next is made.

    Parameters
    ----------
    path : Path
        Where; a file there is replaced.
    columns : Columns
        The units.
    tally : Tally
        The rows, which it counts.
    caution : str
        The sentence at the end of the second sheet.
    """
    import xlsxwriter

    # its working files go whatever happens
    with tempfile.TemporaryDirectory(prefix="rangebook-") as folder, path.open("wb") as file:
        book = xlsxwriter.Workbook(file, {"constant_memory": True, "tmpdir": folder, **_AS_TEXT})
        try:
            bold = book.add_format({"bold": True})
            _write_rows(book.add_worksheet("table"), bold, columns, tally)
            _write_sources(book.add_worksheet("sources"), bold, _tell_sources(columns, tally, caution))
            _pack(book, file)
        finally:
            _let_go(book)


def _let_go(book: Any) -> None:
    """Close the working files, which the package leaves open where writing fails."""
    for sheet in book.worksheets():
        rows = getattr(sheet, "row_data_fh", None)
        if rows is not None:
            with contextlib.suppress(OSError):
                rows.close()


def _pack(book: Any, file: BinaryIO) -> None:
    """Pack the sheets into the file; without room for them an OSError, as from any other file."""
    from xlsxwriter.exceptions import FileCreateError

    cause = None
    try:
        book.close()
    except FileCreateError as error:
        cause = OSError(error.args[0].errno, error.args[0].strerror)
        # room for the end that an archive writes when it is let go, so that it does not complain
        os.ftruncate(file.fileno(), 0)
    if cause is not None:
        raise cause


def _write_sources(sheet: Any, bold: Any, sources: Iterator[tuple[str, str]]) -> None:
    sheet.set_column(0, 0, 16)
    sheet.set_column(1, 1, 100)
    for number, (label, text) in enumerate(sources):
        sheet.write_string(number, 0, label, bold)
        sheet.write_string(number, 1, text)


def _write_rows(sheet: Any, bold: Any, columns: Columns, tally: Tally) -> None:
    sheet.set_column(0, 2, 22)
    sheet.set_column(3, 3, 32)
    sheet.set_column(4, 4, 9)
    sheet.set_column(5, 5, 40)
    sheet.freeze_panes(1, 0)
    for place, name in enumerate(columns.names):
        sheet.write_string(0, place, name, bold)
    number = 0
    for block in tally.blocks():
        for line in columns.lines(block):
            number += 1
            _write_line(sheet, number, columns, line)


def _write_line(sheet: Any, number: int, columns: Columns, line: Line) -> None:
    for place, value in enumerate((line.given, line.found, line.expanded)):
        if math.isfinite(value):
            sheet.write_number(number, place, value)
    if line.revision is not None:
        sheet.write_string(number, 3, line.correlation)
        sheet.write_number(number, 4, line.revision)
    if line.note.marks:
        sheet.write_string(number, 5, columns.word_marks(line.note))


def _tell_sources(columns: Columns, tally: Tally, caution: str) -> Iterator[tuple[str, str]]:
    coverage = columns.table.coverage
    yield "compound", f"{coverage.dossier.compound.record.name} ({coverage.dossier.compound.key})"
    yield "property", PROPERTIES[coverage.property].title
    yield "uncertainty", "as stated in the source, at coverage factor 2 (k=2)"
    yield "position", f"{coverage.dossier.position} (the change up to which the library was read)"
    if columns.table.note:
        yield "note", columns.table.note
    for used in tally.used:
        yield from _tell_used(used)
    for _, seam in tally.seams:
        yield "seam", f"{columns.word_seam(seam)}, {seam.below} -> {seam.above}"
    for refusal in tally.refusals:
        yield "refused", f"{tally.refused[refusal.reason]} rows, {refusal.reason}: {refusal.explanation}"
    yield "caution", caution


def _tell_used(used: Used) -> Iterator[tuple[str, str]]:
    yield "correlation", used.title
    yield from used.grounds
    for caution in used.cautions:
        yield "caution", caution
