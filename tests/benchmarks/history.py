"""What a long history costs: verifying it, against plain JSON and SHA-256 of the same records."""

from __future__ import annotations

import dataclasses
import hashlib
import json
import random
import sqlite3
from collections.abc import Iterator
from contextlib import closing
from pathlib import Path
from typing import Any

from invented import MARK, SOURCE, THREE_FORMS
from timing import Measured, clock

from registry.library import Library
from registry.opening import open_library, start_library
from registry.plan import draft_of
from registry.records import Compound, Correlation
from registry.store.history import Draft

COMPOUNDS = 500
TIME = "2026-12-01T00:00:00.000000Z"
REFERENCE = 'json.dumps(content, sort_keys=True, separators=(",", ":"), ensure_ascii=False) and hashlib.sha256 of it'


def measure_verifying(folder: Path, records: int, rounds: int) -> list[dict[str, Any]]:
    """Histories of as many records, in changes of five and of one."""
    return [
        _measure(build_history(folder / f"history-{size}.db", records, size), records, size, rounds)
        for size in (5, 1)
    ]  # fmt: skip


def build_history(place: Path, records: int, size: int) -> Path:
    """A library of invented correlations, so many in each change; one in ten revises an earlier one."""
    with start_library(place, "none") as library, library._file.writing() as (_, append):
        compounds = [
            Compound(key=f"invented-{i}", name=f"invented {i} (no substance)", formula="C7H10ClFO", note=MARK)
            for i in range(COMPOUNDS)
        ]
        append("benchmark", "Invented ground.", TIME, [draft_of(record) for record in (SOURCE, *compounds)])
        drafts = _invent_drafts(records)
        for number in range(records // size):
            append(f"person {number % 7}", f"Invented change {number}.", TIME, [next(drafts) for _ in range(size)])
    return place


def _invent_drafts(count: int) -> Iterator[Draft]:
    chance = random.Random(0)
    keys = 0
    for _ in range(count):
        new = keys < 10 or chance.random() < 0.9
        number = keys if new else chance.randrange(keys)
        keys += new
        yield draft_of(_invent_correlation(chance, number))


def _invent_correlation(chance: random.Random, number: int) -> Correlation:
    pattern = THREE_FORMS[number % len(THREE_FORMS)]
    name, printed = next(iter(pattern.coefficients.items()))
    return dataclasses.replace(
        pattern,
        key=f"{pattern.form}-invented-{number}",
        compound=f"invented-{number % COMPOUNDS}",
        coefficients={**pattern.coefficients, name: f"{float(printed) * chance.uniform(0.99, 1.01):.6g}"},
        locator=f"p. {chance.randrange(1, 900)}, table {number % 40}",
    )


def _measure(place: Path, records: int, size: int, rounds: int) -> dict[str, Any]:
    with closing(sqlite3.connect(place)) as connection:
        contents = [json.loads(text) for (text,) in connection.execute("SELECT content FROM record ORDER BY id")]

    def digest_plainly() -> None:
        for content in contents:
            text = json.dumps(content, sort_keys=True, separators=(",", ":"), ensure_ascii=False)
            hashlib.sha256(text.encode()).hexdigest()

    with open_library(place) as library:
        library.verify()
        measured = Measured(*zip(*((clock(library.verify), clock(digest_plainly)) for _ in range(rounds)), strict=True))
        found = library.verify()
        noticed = _tamper(place, library)
    return {
        "name": f"verify a history, {size} record{'s' * (size > 1)} a change", "bar": 3.0, **measured.describe(),
        "reference": REFERENCE, "records": found.records, "changes": found.changes,
        "bytes_per_change": place.stat().st_size / found.changes,
        "verified": {"untouched": found.holds, "tampered_is_noticed": noticed, "holds": found.holds and noticed},
    }  # fmt: skip


def _tamper(place: Path, library: Library) -> bool:
    """True if one changed digit in the middle of the history is found, and nothing else."""
    with closing(sqlite3.connect(place)) as connection:
        connection.execute("DROP TRIGGER record_no_update")
        middle = connection.execute("SELECT max(id) / 2 FROM record").fetchone()[0]
        connection.execute("UPDATE record SET content = replace(content, 'table', 'tabel') WHERE id = ?", (middle,))
        connection.commit()
        key = connection.execute("SELECT key FROM record WHERE id = ?", (middle,)).fetchone()[0]
    findings = library.verify().findings
    return {(finding.table, finding.key) for finding in findings} == {
        ("schema", "trigger record_no_update"), ("record", key),
    }  # fmt: skip
