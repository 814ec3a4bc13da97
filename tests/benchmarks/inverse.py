"""Temperatures at many pressures against the values at as many temperatures, by the same coverage."""

from __future__ import annotations

from collections.abc import Sequence
from pathlib import Path
from typing import Any

import numpy as np
from arrays import draw, start_invented
from invented import FIVE_WINDOWS, THREE_FORMS, Array, write_plain
from timing import compare

from registry.library import Library
from registry.opening import start_library
from registry.records import Correlation

BAR = 12.0
CLOSES = 1e-10
"""Kelvin within which a temperature comes back from its own pressure."""


def verify_windows(kelvin: Array, pascal: Array, found: Array, correlations: Sequence[Correlation]) -> dict[str, Any]:
    """Whether each temperature comes back, or its pressure is refused where the plain expressions of two windows
    have it."""
    having = np.zeros(pascal.size, dtype=int)
    for record in correlations:
        low, high = write_plain(record)(np.array(record.window_kelvin()))
        having += (pascal >= low) & (pascal <= high)
    refused = np.isnan(found)
    # at a bound itself the last digit decides
    wrong = int(np.count_nonzero(refused != (having > 1)))
    return _describe(kelvin, found, wrong, int(np.count_nonzero(refused)))


def verify_all(kelvin: Array, found: Array) -> dict[str, Any]:
    """Whether every temperature comes back."""
    return _describe(kelvin, found, int(np.count_nonzero(np.isnan(found))), 0)


def _describe(kelvin: Array, found: Array, wrong: int, refused: int) -> dict[str, Any]:
    off = float(np.nanmax(np.abs(found - kelvin)))
    return {
        "points": kelvin.size, "refused_where_two_have_it": refused, "wrongly_refused_or_answered": wrong,
        "largest_difference_K": off, "holds": wrong == 0 and off <= CLOSES,
    }  # fmt: skip


def _measure(
    library: Library, compound: str, kelvin: Array, rounds: int, name: str, correlations: Sequence[Correlation] = ()
) -> dict[str, Any]:
    pascal = library.lookup(compound, kelvin).values
    measured = compare(
        lambda: library.temperature_at(compound, pascal), lambda: library.lookup(compound, kelvin), rounds
    )
    found = library.temperature_at(compound, pascal).temperatures
    return {
        "name": f"temperatures at pressures, {name}", "bar": BAR, **measured.describe(), "points": kelvin.size,
        "reference": "the values at as many temperatures, by the same coverage",
        "verified": verify_windows(kelvin, pascal, found, correlations) if correlations else verify_all(kelvin, found),
    }  # fmt: skip


def measure_inverse(folder: Path, size: int, rounds: int) -> list[dict[str, Any]]:
    """The inverse over invented windows with seams, and over the published coverage of water."""
    entries = []
    invented = (("five Antoine windows", FIVE_WINDOWS), ("three forms", THREE_FORMS))
    for name, correlations in invented:
        with start_invented(folder / "inverse", correlations) as library:
            kelvin = draw(correlations, size)
            entries.append(_measure(library, correlations[0].compound, kelvin, rounds, name, correlations))
    with start_library(folder / "inverse" / "published.db", "published") as library:
        kelvin = np.random.default_rng(20240229).uniform(273.16, 647.096, size)
        entries.append(_measure(library, "water", kelvin, rounds, "water"))
    return entries
