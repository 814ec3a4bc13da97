"""A long table written as CSV, against csv.writer with the same cells; its memory against that of a short one."""

from __future__ import annotations

import csv
import io
import tracemalloc
from pathlib import Path
from typing import Any

from timing import compare

from registry.library import Library
from registry.opening import open_library, start_library
from registry.quantities import UNITS
from registry.reports.columns import Columns
from registry.reports.csv_table import write_csv
from registry.tables.tally import Tally

SHORT = 1_000
"""Rows of the table that the memory of the long one is compared with."""

LOW, HIGH = 240.0, 510.0


class Sink:
    """Takes text and keeps none."""

    def write(self, text: str) -> int:
        """How much was written."""
        return len(text)


def write_table(library: Library, rows: int, sink: Any) -> None:
    """A table of ethanol over two correlations, part by part."""
    columns = Columns(library.tabulate("ethanol", LOW, HIGH, points=rows), UNITS["K"], UNITS["kPa"])
    for part in write_csv(columns, Tally(columns.table)):
        sink.write(part)


def peak(library: Library, rows: int) -> int:
    """The peak of memory taken while a table is written, bytes."""
    tracemalloc.start()
    try:
        write_table(library, rows, Sink())
        return tracemalloc.get_traced_memory()[1]
    finally:
        tracemalloc.stop()


def measure_tables(folder: Path, rows: int, rounds: int) -> list[dict[str, Any]]:
    """Time against the plain writer of cells that are there already, and memory."""
    place = folder / "tables.db"
    start_library(place).close()
    with open_library(place) as library:
        text = io.StringIO(newline="")
        write_table(library, rows, text)
        header, *cells = csv.reader(io.StringIO(text.getvalue(), newline=""))
        numbers = [[float(t), float(v), percent, key, int(revision), mark]
                   for t, v, percent, key, revision, mark in cells]  # fmt: skip
        again = io.StringIO(newline="")
        csv.writer(again).writerows([header, *numbers])

        def write_plainly() -> None:
            csv.writer(Sink()).writerows(numbers)

        measured = compare(lambda: write_table(library, rows, Sink()), write_plainly, rounds).describe()
        values = library.lookup("ethanol", [row[0] for row in numbers]).values / 1000.0
        peak(library, SHORT)
        short, long = peak(library, SHORT), peak(library, rows)
    same = again.getvalue() == text.getvalue() and [row[1] for row in numbers] == values.tolist()
    return [
        {
            "name": "a long table as csv", "bar": 3.0, **measured, "rows": rows,
            "rows_per_second": rows / measured["seconds"], "reference": "csv.writer with the same cells, ready-made",
            "verified": {"rows": len(numbers), "holds": same and len(numbers) == rows},
        },
        {
            "name": "memory of a long table over a short one", "bar": 1.5, "ratio": long / short,
            "ratio_lowest": long / short, "ratio_highest": long / short, "rows": rows, "short_rows": SHORT,
            "peak_bytes": long, "reference_peak_bytes": short, "reference": f"{SHORT:,} rows of the same table",
            "verified": {"rows": len(numbers), "holds": same},
        },
    ]  # fmt: skip
