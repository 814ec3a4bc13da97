"""One temperature at a time, against one indexed query on the same file."""

from __future__ import annotations

import sqlite3
from contextlib import closing
from dataclasses import replace
from pathlib import Path
from typing import Any

import numpy as np
from invented import FIVE_WINDOWS, write_package
from processes import build_environment, run_command
from timing import compare

from registry.errors import UnknownKey
from registry.library import Library
from registry.opening import start_library

COMPOUNDS = ("water", "n-decane", "ethanol")
"""Answered near 335 K by the IAPWS-IF97, an Antoine and a Wagner correlation."""
POINT_QUERY = "SELECT content FROM record WHERE kind = ? AND key = ? AND revision = ?"


def measure_scalars(folder: Path, size: int, rounds: int) -> list[dict[str, Any]]:
    """Warm lookups of one temperature, for compounds with different forms."""
    place = folder / "scalars.db"
    with (
        start_library(place) as library,
        closing(sqlite3.connect(f"{place.as_uri()}?mode=ro", uri=True)) as connection,
    ):
        entries = [_measure_compound(library, connection.cursor(), name, size, rounds) for name in COMPOUNDS]
        seen = _watch_another_process(library, folder, place)
    entries[0]["verified"]["another_process"] = seen
    entries[0]["verified"]["holds"] &= seen["holds"]
    return entries


def _measure_compound(
    library: Library, cursor: sqlite3.Cursor, compound: str, size: int, rounds: int
) -> dict[str, Any]:
    asked = np.linspace(330.0, 340.0, size).tolist()
    record = library.lookup(compound, asked[0]).correlation
    wanted = ("correlation", record.key, 1)

    def look() -> None:
        for kelvin in asked:
            library.lookup(compound, kelvin)

    def query() -> None:
        for _ in asked:
            cursor.execute(POINT_QUERY, wanted).fetchone()

    found = compare(look, query, rounds).describe()
    same = library.lookup(compound, asked).values.tolist() == [library.lookup(compound, t).value for t in asked]
    read = cursor.execute(POINT_QUERY, wanted).fetchone() is not None
    return {
        "name": f"one temperature, {compound}", "bar": 4.0, **found, "calls": size, "form": record.form,
        "reference": POINT_QUERY, "verified": {"equals_array": same, "row_found": read, "holds": same and read},
    }  # fmt: skip


def _watch_another_process(library: Library, folder: Path, place: Path) -> dict[str, Any]:
    """A lookup, warm, before and after other processes change the library."""
    environment = build_environment(folder, place)
    compound, first = FIVE_WINDOWS[0].compound, FIVE_WINDOWS[0]
    revised = replace(first, coefficients={**first.coefficients, "A": "21.3690"})
    values: list[float | None] = [_value(library, compound)]
    for name, record in (("first", first), ("revised", revised)):
        package = write_package(folder / name, [record, *FIVE_WINDOWS[1:]])
        run_command(["load", str(package), "--as", "benchmark", "--accept", "--note", "Invented."], environment)
        values += [_value(library, compound), _value(library, compound)]
    before, *after = values
    holds = before is None and None not in after and after[0] == after[1] != after[2] == after[3]
    return {"values": values, "holds": holds}


def _value(library: Library, compound: str) -> float | None:
    try:
        return library.lookup(compound, 320.0).value
    except UnknownKey:
        return None
