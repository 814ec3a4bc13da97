"""The files of a package and their columns: one table, read and written by it.

A package is an open Tabular Data Package: `datapackage.json` with Table
Schemas, and CSV files that a person can edit in a spreadsheet.
"""

from __future__ import annotations

import dataclasses
from collections.abc import Iterator
from dataclasses import dataclass
from typing import Any

from registry import cells
from registry.cells import Cell, choice
from registry.exchange.coefficients import COEFFICIENTS
from registry.records import (
    REVIEWED,
    STANDINGS,
    Compound,
    CompoundName,
    Correlation,
    Dataset,
    FixedPoint,
    Point,
    Preference,
    PrintedValue,
    Record,
    Source,
)

__all__ = ["FILES", "PACKED", "Column", "File", "descriptor"]


@dataclass(frozen=True)
class Column:
    """One column of a file.

    Attributes
    ----------
    name : str
        Its header.
    cell : Cell
        What a cell may hold.
    required : bool
        True if no cell may be empty.
    optional : bool
        True if the column may be left out altogether.
    """

    name: str
    cell: Cell
    required: bool = False
    optional: bool = False


@dataclass(frozen=True)
class File:
    """One CSV file of a package.

    Attributes
    ----------
    name : str
        Its file name.
    record : type
        What a row makes.
    columns : tuple of Column
        In the order in which they are written.
    key : tuple of str
        The columns that tell rows apart.
    refers : mapping of str to str
        Columns that name a row of another file, by that file's name.
    """

    name: str
    record: type[Record] | type[Point]
    columns: tuple[Column, ...]
    key: tuple[str, ...]
    refers: dict[str, str]

    @property
    def kind(self) -> str:
        """The kind of its records; empty for points, which are part of one."""
        return getattr(self.record, "kind", "")

    @property
    def reviewed(self) -> bool:
        """True if its records have a standing."""
        return self.kind in REVIEWED


_STANDING = Column("standing", choice(*STANDINGS), required=True)
_STANDING_NOTE = Column("standing_note", cells.LONG, optional=True)
_LATER = ("metastable_below",)
"""Columns that stand after the note and may be left out."""


def _columns(record: Any, keyed: bool, reviewed: bool) -> Iterator[Column]:
    late = []
    for field in dataclasses.fields(record):
        if field.name == "key" and not keyed:
            continue
        if field.name == "coefficients":
            yield Column(field.name, COEFFICIENTS, required=True)
        elif "cell" in field.metadata:
            optional = field.name in ("note", "qualifier", *_LATER)
            column = Column(field.name, field.metadata["cell"], field.metadata["required"], optional)
            if field.name in _LATER:
                late.append(column)
                continue
            if field.name == "note" and reviewed:
                yield _STANDING
            yield column
    if reviewed and record is Preference:
        yield _STANDING
    yield from late
    if reviewed:
        yield _STANDING_NOTE


def _file(name: str, record: Any, key: tuple[str, ...] = ("key",), **refers: str) -> File:
    reviewed = getattr(record, "kind", "") in REVIEWED
    return File(name, record, tuple(_columns(record, "key" in key, reviewed)), key, refers)


_POINTS = dataclasses.replace(
    _file("points.csv", Point, ("dataset", "temperature", "value"), dataset="datasets.csv"),
    columns=(Column("dataset", cells.KEY, required=True), *_columns(Point, False, False)),
)

_ROWS = (
    _file("compounds.csv", Compound, source="sources.csv"),
    _file("names.csv", CompoundName, ("compound", "name"), compound="compounds.csv"),
    _file("sources.csv", Source),
    _file("correlations.csv", Correlation, compound="compounds.csv", source="sources.csv"),
    _file("fixed_points.csv", FixedPoint, compound="compounds.csv", source="sources.csv"),
    _file("printed_values.csv", PrintedValue, correlation="correlations.csv"),
    _file("datasets.csv", Dataset, compound="compounds.csv", source="sources.csv"),
    _POINTS,
    _file("preferences.csv", Preference, correlation="correlations.csv", over="correlations.csv"),
)

FILES: dict[str, File] = {row.name: row for row in _ROWS}

PACKED = tuple(file.kind for file in _ROWS if file.kind)
"""Kinds of record that a package holds."""


def descriptor(present: list[str], *, whole: bool = True) -> dict[str, Any]:
    """The `datapackage.json` of a package with these files.

    Parameters
    ----------
    present : list of str
        The files.
    whole : bool
        False for a part of a library, whose rows may refer to what the other
        side has: no foreign keys are stated.

    Notes
    -----
    Table Schema as of the Data Package standard, version 1; foreign keys are
    stated only where the other file is present and the reference is filled.
    """
    return {
        "profile": "tabular-data-package",
        "name": "rangebook-library",
        "title": "Pure-compound temperature correlations with their sources",
        "resources": [_resource(FILES[name], present if whole else []) for name in present],
    }


def _resource(file: File, present: list[str]) -> dict[str, Any]:
    schema: dict[str, Any] = {"fields": [_field(column) for column in file.columns], "missingValues": [""]}
    if file.name != "points.csv":  # a source may print one point twice
        schema["primaryKey"] = list(file.key)
    keys = [
        {"fields": column, "reference": {"resource": target.removesuffix(".csv"), "fields": "key"}}
        for column, target in file.refers.items()
        if target in present
    ]
    if keys:
        schema["foreignKeys"] = keys
    return {
        "profile": "tabular-data-resource", "name": file.name.removesuffix(".csv"), "path": file.name,
        "format": "csv", "mediatype": "text/csv", "encoding": "utf-8", "schema": schema,
    }  # fmt: skip


def _field(column: Column) -> dict[str, Any]:
    """Every field is text: a number is kept as printed."""
    constraints: dict[str, Any] = {"maxLength": column.cell.limit}
    if column.required:
        constraints["required"] = True
    if column.cell.values:
        constraints["enum"] = list(column.cell.values)
    return {"name": column.name, "type": "string", "description": column.cell.allowed, "constraints": constraints}
