"""A library of schema 1, as the program of its time left it: two invented compounds, four changes.

Among its records are a withdrawn and a declined correlation, a preference, revisions, and a draft that waits over an
accepted revision. ``facts/schema_1_answers.csv`` has what that program answered at its first and last change.
"""

from __future__ import annotations

import csv
import sqlite3
from contextlib import closing
from pathlib import Path

FACTS = Path(__file__).parent / "facts"


def make_old_library(path: Path) -> Path:
    """The library of schema 1 at a path."""
    with closing(sqlite3.connect(path)) as db:
        db.executescript((FACTS / "schema_1.sql").read_text(encoding="utf-8"))
    return path


def read_old_answers() -> list[dict[str, str]]:
    """Rows with position, compound, property, kelvin, answered_by (a key or the reason of a refusal), value."""
    with (FACTS / "schema_1_answers.csv").open(encoding="utf-8", newline="") as file:
        return list(csv.DictReader(file))
