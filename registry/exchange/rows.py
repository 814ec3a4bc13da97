"""CSV text to rows and back, strictly."""

from __future__ import annotations

import csv
import difflib
import io
import unicodedata
from collections.abc import Iterable, Iterator, Sequence
from dataclasses import dataclass

from registry.errors import CellProblem
from registry.exchange.layout import File

__all__ = ["Row", "parse_rows", "write_rows"]


@dataclass(frozen=True)
class Row:
    """One row of a file: the line it starts at and its cells by column."""

    line: int
    cells: dict[str, str]


def parse_rows(file: File, data: bytes, problems: list[CellProblem]) -> list[Row]:
    """The rows of a CSV file; what is wrong goes to `problems`.

    Parameters
    ----------
    file : File
        The layout of the file.
    data : bytes
        UTF-8, with or without a byte order mark.
    problems : list of CellProblem
        Receives every bad place.

    Returns
    -------
    list of Row
        The rows that could be read.
    """
    try:
        text = data.decode("utf-8-sig")
    except UnicodeDecodeError as error:
        line = data.count(b"\n", 0, error.start) + 1
        why = f"byte {data[error.start]:#04x} is no UTF-8; save the file as UTF-8."
        problems.append(CellProblem(file.name, line, "", "", why))
        return []
    if "\x00" in text:
        line = text.count("\n", 0, text.index("\x00")) + 1
        problems.append(CellProblem(file.name, line, "", "", "it holds a NUL character."))
        return []
    return list(_read(file, unicodedata.normalize("NFC", text), problems))


def _read(file: File, text: str, problems: list[CellProblem]) -> Iterator[Row]:
    reader = csv.reader(io.StringIO(text, newline=""), strict=True)
    header: list[str] | None = None
    line = 1
    try:
        for fields in reader:
            start, line = line, reader.line_num + 1
            if header is None:
                header = fields
                if not _header_holds(file, header, problems):
                    return
            elif not any(fields):  # a spreadsheet leaves such rows behind
                continue
            elif len(fields) != len(header):
                cells = "1 cell" if len(fields) == 1 else f"{len(fields)} cells"
                why = f"it has {cells}, the header has {len(header)}."
                problems.append(CellProblem(file.name, start, "", "", why))
            else:
                yield Row(start, dict(zip(header, fields, strict=True)))
    except csv.Error as error:
        large = "field larger" in str(error)
        why = f"a cell is longer than {csv.field_size_limit()} characters." if large else f"it is no CSV: {error}."
        problems.append(CellProblem(file.name, line, "", "", why))
    if header is None:
        problems.append(CellProblem(file.name, 1, "", "", "it is empty; the first line names the columns."))


def _header_holds(file: File, header: Sequence[str], problems: list[CellProblem]) -> bool:
    names = [column.name for column in file.columns]
    before = len(problems)
    if len(header) == 1 and (mark := next((m for m in ";\t|" if m in header[0]), "")):
        why = f"the cells are parted by {mark!r}; save the file with commas."
        problems.append(CellProblem(file.name, 1, "", header[0], why))
        return False
    if "" in header:
        problems.append(CellProblem(file.name, 1, "", "", f"column {header.index('') + 1} has no name."))
        return False
    for column in file.columns:
        if column.name not in header and not column.optional:
            problems.append(CellProblem(file.name, 1, column.name, "", "the column is missing."))
    for name in header:
        if name not in names:
            near = difflib.get_close_matches(name[:60], names, n=1)
            hint = f" Did you mean {near[0]}?" if near else ""
            problems.append(CellProblem(file.name, 1, "", name, f"there is no such column.{hint}"))
        elif header.count(name) > 1:
            problems.append(CellProblem(file.name, 1, name, "", "the column stands twice."))
            break
    return len(problems) == before


def write_rows(file: File, rows: Iterable[dict[str, str]]) -> bytes:
    """A CSV file with all columns of the layout, UTF-8, lines ended by LF."""
    stream = io.StringIO(newline="")
    writer = csv.DictWriter(stream, [column.name for column in file.columns], lineterminator="\n", restval="")
    writer.writeheader()
    writer.writerows(rows)
    return stream.getvalue().encode()
