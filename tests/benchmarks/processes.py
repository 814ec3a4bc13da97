"""A whole `rangebook lookup` process against one that only imports the libraries it stands on."""

from __future__ import annotations

import os
import statistics
import subprocess
import sys
from pathlib import Path
from typing import Any

from timing import Measured, clock

import registry
from registry.opening import open_library, start_library

COMMAND = "from registry.cli.entry import main; main()"
IMPORTS = "import sqlalchemy, typer, rich, numpy"


def build_environment(folder: Path, place: Path) -> dict[str, str]:
    """As for an installed program: compiled modules are kept, and the library exists."""
    kept = {name: value for name, value in os.environ.items() if not name.startswith(("PYTHON", "RANGEBOOK"))}
    return {
        **kept,
        "PYTHONPATH": str(Path(registry.__file__).parents[1]),
        "PYTHONPYCACHEPREFIX": str(folder / "compiled"),
        "RANGEBOOK_LIBRARY": str(place),
    }


def run_command(arguments: list[str], environment: dict[str, str], code: str = COMMAND) -> str:
    """What a process prints; raises if it fails."""
    command = [sys.executable, "-c", code, *arguments]
    done = subprocess.run(command, env=environment, capture_output=True, text=True, encoding="utf-8", check=True)
    return done.stdout


def measure_process(folder: Path, runs: int) -> list[dict[str, Any]]:
    """Runs of both processes in turn."""
    place = folder / "published.db"
    start_library(place).close()
    environment = build_environment(folder, place)
    printed: set[str] = set()

    def look() -> None:
        printed.add(run_command(["lookup", "water", "25C"], environment))

    def import_only() -> None:
        run_command([], environment, IMPORTS)

    for call in (look, import_only, look, import_only):  # compiles modules and fills the file cache
        call()
    pairs = [(clock(look), clock(import_only)) for _ in range(runs)]
    measured = Measured(*zip(*pairs, strict=True))
    found = measured.describe()
    with open_library(place) as library:
        expected = f"{library.lookup('water', 298.15).to('kPa'):.6g}"
    shown = printed.pop() if len(printed) == 1 else ""
    return [{
        "name": "rangebook lookup water 25C", "bar": 1.3, **found,
        # not a median of ratios: two runs next to each other share nothing but the machine
        "ratio": found["seconds"] / found["reference_seconds"],
        "quartiles": statistics.quantiles(measured.ours),
        "reference_quartiles": statistics.quantiles(measured.reference),
        "reference": IMPORTS,
        "verified": {"printed": shown, "expected": expected, "holds": expected in shown},
    }]  # fmt: skip
