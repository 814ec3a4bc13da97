"""Arrays of temperatures against one plain NumPy expression over the same points."""

from __future__ import annotations

import tracemalloc
from collections.abc import Sequence
from functools import partial
from pathlib import Path
from typing import Any

import numpy as np
from invented import FIVE_WINDOWS, THREE_FORMS, Array, write_package, write_plain
from timing import Call, compare, find_dearest, keep_freed_memory

from registry.batches import Batch
from registry.library import Library
from registry.opening import start_library
from registry.records import Correlation

AGREE = 1e-12
"""Relative difference within which a value equals the plain expression."""


def start_invented(folder: Path, correlations: Sequence[Correlation]) -> Library:
    """A new library with one invented compound."""
    compound = correlations[0].compound
    library = start_library(folder / f"{compound}.db", "none")
    package = write_package(folder / compound, correlations)
    library.load(package, author="benchmark", reason="Invented; not data.", accept=True)
    return library


def draw(correlations: Sequence[Correlation], size: int) -> Array:
    """Temperatures in random order over all the windows, K."""
    low, high = correlations[0].window_kelvin()[0], correlations[-1].window_kelvin()[1]
    return np.random.default_rng(20240229).uniform(low, high, size)


def verify(batch: Batch, correlations: Sequence[Correlation]) -> dict[str, Any]:
    """Whether each temperature got its own window's curve, and the value of that curve's plain expression."""
    t, worst, elsewhere = batch.temperatures, 0.0, 0
    places = {record.key: place for place, record in enumerate(batch.correlations)}
    for record in correlations:
        low, high = record.window_kelvin()
        mine = (t >= low) & (t <= high)
        elsewhere += int(np.count_nonzero(batch.chosen[mine] != places.get(record.key)))
        difference = np.abs(batch.values[mine] / write_plain(record)(t[mine]) - 1.0)
        worst = max(worst, float(np.max(difference)))  # NaN, so no agreement, where one was refused
    refused = int(np.count_nonzero(batch.refused))
    return {
        "points": t.size, "refused": refused, "answered_by_another": elsewhere,
        "largest_relative_difference": worst, "holds": not refused and not elsewhere and worst <= AGREE,
    }  # fmt: skip


def peak_over_input(call: Call, kelvin: Array) -> float:
    """The peak of memory taken by one call, over the size of its input."""
    call()
    tracemalloc.start()
    try:
        call()
        return tracemalloc.get_traced_memory()[1] / kelvin.nbytes
    finally:
        tracemalloc.stop()


def measure_three_forms(folder: Path, size: int, rounds: int) -> list[dict[str, Any]]:
    """Choosing and evaluating over three forms, against the dearest of their plain expressions."""
    kelvin, compound = draw(THREE_FORMS, size), THREE_FORMS[0].compound
    calls = {record.form: partial(write_plain(record), kelvin) for record in THREE_FORMS}
    dearest, seconds = find_dearest(calls, rounds)
    with start_invented(folder, THREE_FORMS) as library:

        def look() -> Array:
            return library.lookup(compound, kelvin).values

        def look_and_ask_who() -> Array:
            return library.lookup(compound, kelvin).chosen

        values = compare(look, calls[dearest], rounds).describe()
        chosen = compare(look_and_ask_who, calls[dearest], rounds).describe()
        entry = {
            "name": "three forms, random order", "bar": 1.0, **values, "points": size,
            "reference": f"plain {dearest} expression", "plain_seconds": seconds,
            "peak_memory_over_input": peak_over_input(look, kelvin),
            "reference_peak_memory_over_input": peak_over_input(calls[dearest], kelvin),
            "verified": verify(library.lookup(compound, kelvin), THREE_FORMS),
        }  # fmt: skip
    extra = {
        "name": "three forms, touching chosen too", "bar": None, **chosen, "points": size,
        "reference": f"plain {dearest} expression", "chosen_adds": chosen["ratio"] - values["ratio"],
    }  # fmt: skip
    return [entry, extra]


def measure_five_windows(folder: Path, size: int, rounds: int) -> list[dict[str, Any]]:
    """Five windows of Antoine's equation, in random and in sorted order, against one plain expression."""
    drawn, compound = draw(FIVE_WINDOWS, size), FIVE_WINDOWS[0].compound
    plain = write_plain(FIVE_WINDOWS[len(FIVE_WINDOWS) // 2])
    entries = []
    with start_invented(folder, FIVE_WINDOWS) as library:
        for order, kelvin, bar in (("random", drawn, 1.4), ("sorted", np.sort(drawn), 1.0)):
            measured = compare(
                lambda at=kelvin: library.lookup(compound, at).values, lambda at=kelvin: plain(at), rounds
            )
            entries.append({
                "name": f"five Antoine windows, {order} order", "bar": bar, **measured.describe(), "points": size,
                "reference": "plain Antoine expression (base e, kelvin, pascal)",
                "verified": verify(library.lookup(compound, kelvin), FIVE_WINDOWS),
            })  # fmt: skip
    return entries


def measure_keeping_memory(folder: Path, size: int, rounds: int) -> list[dict[str, Any]]:
    """The same where freed memory is kept, as in a process that holds much: no bar, to read the others by.

    It stays so for the rest of the process; measure it last.
    """
    kept = keep_freed_memory()
    entries = [*measure_three_forms(folder, size, rounds), *measure_five_windows(folder, size, rounds)]
    return [{**entry, "name": f"{entry['name']}, memory kept", "bar": None, "memory_kept": kept} for entry in entries]
