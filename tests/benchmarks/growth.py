"""What a lookup costs as the history grows: the same answer out of 100 changes and out of 100,000."""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Iterator
from itertools import count, islice
from pathlib import Path
from typing import Any

from invented import FIVE_WINDOWS, MARK, SOURCE
from timing import compare

from registry.judgement import judge
from registry.library import Library
from registry.opening import open_library, start_library
from registry.plan import draft_of
from registry.records import Compound, Preference, Record
from registry.store.history import Draft

FEW = 100
ASKED = FIVE_WINDOWS[0].compound
KELVIN = 320.0
TIME = "2026-12-01T00:00:00.000000Z"
CALLS = 200

Drafts = Iterator[list[Draft]]


def measure_growth(folder: Path, many: int, rounds: int) -> list[dict[str, Any]]:
    """A lookup among `many` changes against one among 100, for three shapes of history."""
    return [entry for name, shape in SHAPES.items() for entry in _measure_shape(folder, name, shape, many, rounds)]


def build_library(place: Path, changes: int, shape: Callable[[], Drafts]) -> Path:
    """A library whose first changes hold the compound asked for, and the others the shape."""
    with start_library(place, "none") as library, library._file.writing() as (_, append):
        append("Ann", MARK, TIME, [draft_of(SOURCE), draft_of(_invent_compound(ASKED))])
        append("Ann", MARK, TIME, [draft for record in FIVE_WINDOWS for draft in _accept(record, 1)])
        for drafts in islice(shape(), changes - 3):
            append("Bob", MARK, TIME, drafts)
    return place


def _invent_compound(key: str) -> Compound:
    return Compound(key=key, name=f"{key} (no substance)", formula="C7H10ClFO", note=MARK)


def _accept(record: Record, revision: int) -> list[Draft]:
    return [draft_of(record), judge(record, revision, "accepted", "")]


def _spread() -> Drafts:
    """Ever more compounds, each with ten accepted correlations, one a change."""
    for number in count():
        compound = f"invented-{number // 11}"
        if number % 11 == 0:
            yield [draft_of(_invent_compound(compound))]
        else:
            key = f"{compound}-window-{number % 11}"
            yield _accept(_change(FIVE_WINDOWS[number % 5], key, compound=compound), 1)


def _deepen() -> Drafts:
    """Ever more about the five correlations asked for: accepted revisions of them and of a preference, and reviews."""
    preference: Record = Preference(
        key="invented-preference", correlation=FIVE_WINDOWS[0].key, over=FIVE_WINDOWS[1].key, reason=MARK
    )  # fmt: skip
    revisions = Counter({record.key: 1 for record in FIVE_WINDOWS})
    for number in count():
        record = preference if number % 4 == 3 else FIVE_WINDOWS[number // 4 % 5]
        if number % 4 == 1:
            yield [judge(record, revisions[record.key], "accepted", MARK)]
            continue
        revisions[record.key] += 1
        word = {"reason" if record is preference else "note": f"{MARK} {revisions[record.key]}"}
        yield _accept(_change(record, record.key, **word), revisions[record.key])


def _change(record: Record, key: str, **fields: str) -> Record:
    """The record with other words in it; not checked anew, which would take longer than recording it."""
    return record.restore(key, {**record.content(), **fields})


SHAPES = {"over many compounds": _spread, "of one compound": _deepen}


def _measure_shape(
    folder: Path, name: str, shape: Callable[[], Drafts], many: int, rounds: int
) -> list[dict[str, Any]]:
    """First lookup in a library just opened, in a past position, and in an open library."""
    places = [
        build_library(folder / f"{name}-{changes}.db".replace(" ", "-"), changes, shape) for changes in (many, FEW)
    ]
    size = (places[0].stat().st_size - places[1].stat().st_size) / (many - FEW)
    with open_library(places[0]) as large, open_library(places[1]) as small:
        pairs = {
            "just opened": [lambda place=place: _look_cold(place) for place in places],
            "half-way back": [lambda library=library: _look_back(library) for library in (large, small)],
            "warm": [lambda library=library: _look_warm(library) for library in (large, small)],
        }
        held = [large.position, small.position]
        found = {way: compare(ours, reference, rounds).describe() for way, (ours, reference) in pairs.items()}
        values = {_look_cold(place) for place in places} | {_look_back(library) for library in (large, small)}
    holds = len(values) == 1 and held == [many, FEW]
    return [
        {
            "name": f"lookup, long history {name}, {way}", "bar": 1.3, **measured, "changes": many,
            "reference": f"the same with {FEW} changes", "bytes_per_change": size,
            "verified": {"values": sorted(values), "positions": held, "holds": holds},
        }
        for way, measured in found.items()
    ]  # fmt: skip


def _look_cold(place: Path) -> float:
    with open_library(place) as library:
        return library.lookup(ASKED, KELVIN).value


def _look_back(library: Library) -> float:
    return library.at(library.position // 2).lookup(ASKED, KELVIN).value


def _look_warm(library: Library) -> float:
    for _ in range(CALLS):
        value = library.lookup(ASKED, KELVIN).value
    return value
