"""Records to a package: the same content gives the same bytes."""

from __future__ import annotations

import dataclasses
import json
from collections.abc import Iterable, Iterator
from pathlib import Path
from typing import Any

from registry.exchange.coefficients import join_coefficients
from registry.exchange.layout import FILES, File, descriptor
from registry.exchange.package import DESCRIPTOR, write_package
from registry.exchange.provenance import PROPERTY, Provenance
from registry.exchange.rows import write_rows
from registry.records import Correlation, Dataset, Record

__all__ = ["build_files", "dump_items"]

Standing = tuple[str, str]


def build_files(items: Iterable[tuple[Record, Standing]], provenance: Provenance | None = None) -> dict[str, bytes]:
    """The files of a package.

    Parameters
    ----------
    items : iterable of (Record, (standing, note))
        What to write; sorted here, so that the order does not matter.
    provenance : Provenance, optional
        For a part of a library: where it comes from, and since when.

    Returns
    -------
    dict of str to bytes
        File name to content, the descriptor first.
    """
    entries = sorted(items, key=lambda item: item[0].key)
    tables = {name: list(_rows(file, entries)) for name, file in FILES.items()}
    present = list(FILES)  # empty ones too: their headers are a template
    described = descriptor(present, whole=provenance is None)
    if provenance is not None:
        described[PROPERTY] = provenance.describe()
    text = json.dumps(described, indent=2, ensure_ascii=False) + "\n"
    return {DESCRIPTOR: text.encode(), **{name: write_rows(FILES[name], tables[name]) for name in present}}


def dump_items(
    path: Path, items: Iterable[tuple[Record, Standing]], provenance: Provenance | None = None
) -> dict[str, int]:
    """Write a package; gives the number of rows a file."""
    files = build_files(items, provenance)
    write_package(path, files)
    return {name: data.count(b"\n") - 1 for name, data in files.items() if name != DESCRIPTOR}


def _rows(file: File, entries: list[tuple[Record, Standing]]) -> Iterator[dict[str, str]]:
    if file.name == "points.csv":
        for record, _ in entries:
            if isinstance(record, Dataset):
                yield from ({"dataset": record.key, **dataclasses.asdict(point)} for point in record.points)
        return
    for record, (standing, note) in entries:
        if type(record) is file.record:
            row = {column.name: _text(record, column.name) for column in file.columns}
            if file.reviewed:
                row |= {"standing": standing, "standing_note": note}
            yield row


def _text(record: Record, name: str) -> str:
    value: Any = getattr(record, name, "")
    if name == "coefficients" and isinstance(record, Correlation):
        return join_coefficients(record.ordered_coefficients())
    return str(value)
