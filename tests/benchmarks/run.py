"""Measure what the program costs beside the plain way, by ratio within one run.

    python tests/benchmarks/run.py [--output results.json] [--quick]

Writes every ratio with its spread, its bar and what was verified to one JSON
file and prints a table. Exits with 1 if a value is wrong; a ratio over its bar
is shown, not an error: it depends on the machine.
"""

from __future__ import annotations

import argparse
import importlib.metadata
import json
import os
import platform
import sqlite3
import sys
import tempfile
from pathlib import Path
from typing import Any

ROOT = Path(__file__).resolve().parents[2]
sys.path.append(str(ROOT))  # last: an installed package is measured rather than the tree

from arrays import measure_five_windows, measure_keeping_memory, measure_three_forms  # noqa: E402
from growth import measure_growth  # noqa: E402
from history import measure_verifying  # noqa: E402
from inverse import measure_inverse  # noqa: E402
from processes import measure_process  # noqa: E402
from scalars import measure_scalars  # noqa: E402
from tables import measure_tables  # noqa: E402
from timing import TIMED, WARM  # noqa: E402

METHOD = (
    f"A round is {WARM} unmeasured and {TIMED} timed calls of ours, then as many of the reference; the ratio is the "
    "median over rounds of the medians' ratio. Whole processes are run in turn; the ratio is that of the medians. "
    "Memory is the peak of one call, by tracemalloc. "
    "Verifying is timed once a round, and the reference once after it. "
    "The entries with memory kept are measured after all others, with an allocator that gives nothing back."
)


def describe_machine() -> dict[str, Any]:
    """What the numbers depend on."""
    versions = {name: importlib.metadata.version(name) for name in ("numpy", "sqlalchemy", "typer", "rich")}
    return {
        "python": platform.python_version(), "implementation": platform.python_implementation(),
        "system": platform.platform(), "processors": os.cpu_count(), "sqlite": sqlite3.sqlite_version, **versions,
        "load_average": list(os.getloadavg()) if hasattr(os, "getloadavg") else None,
    }  # fmt: skip


def measure_all(quick: bool) -> list[dict[str, Any]]:
    """Every entry, in libraries made for it in a temporary folder."""
    size, calls, rounds, runs, changes = (40_000, 50, 2, 3, 1_000) if quick else (1_000_000, 2_000, 9, 41, 100_000)
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name).resolve()
        entries = [
            *measure_three_forms(folder, size, rounds),
            *measure_five_windows(folder, size, rounds),
            *measure_inverse(folder, size, rounds),
            *measure_process(folder, runs),
            *measure_scalars(folder, calls, rounds),
            *measure_growth(folder, changes, rounds),
            *measure_verifying(folder, changes, rounds),
            *measure_tables(folder, size // 10, rounds),
            *measure_keeping_memory(folder / "kept", size, rounds),
        ]
    return [{**entry, "holds": None if entry["bar"] is None else entry["ratio"] <= entry["bar"]} for entry in entries]


def format_table(entries: list[dict[str, Any]]) -> str:
    """Name, ratio with its spread, bar, and whether it holds."""
    lines = [f"{'name':64}{'ratio':>8}{'spread':>16}{'bar':>6}  holds"]
    for entry in entries:
        spread = f"{entry['ratio_lowest']:.3f}-{entry['ratio_highest']:.3f}"
        bar = "" if entry["bar"] is None else f"{entry['bar']:.1f}"
        holds = {True: "yes", False: "no", None: ""}[entry["holds"]]
        lines.append(f"{entry['name']:64}{entry['ratio']:8.3f}{spread:>16}{bar:>6}  {holds}".rstrip())
    return "\n".join(lines)


def main() -> int:
    """Measure, write, print; 1 if a value is wrong."""
    parser = argparse.ArgumentParser(description=(__doc__ or "").splitlines()[0])
    parser.add_argument("--output", type=Path, default=Path(__file__).with_name("results.json"))
    parser.add_argument("--quick", action="store_true", help="small sizes and few rounds: shows that it runs")
    given = parser.parse_args()
    machine = describe_machine()
    entries = measure_all(given.quick)
    wrong = [entry["name"] for entry in entries if not entry.get("verified", {"holds": True})["holds"]]
    found = {"quick": given.quick, "method": METHOD, "machine": machine, "verified": not wrong, "entries": entries}
    given.output.write_text(json.dumps(found, indent=2, ensure_ascii=False) + "\n", encoding="utf-8")
    print(format_table(entries))
    for name in wrong:
        print(f"wrong values: {name}", file=sys.stderr)
    return 1 if wrong else 0


if __name__ == "__main__":
    sys.exit(main())
