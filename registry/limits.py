"""Phase limits: where a curve belongs to its phase, whatever its window says."""

from __future__ import annotations

import math
from dataclasses import dataclass

import numpy as np
from numpy.typing import ArrayLike, NDArray

from registry.confirmation import count_fixed_point
from registry.dossier import Dossier, Entry
from registry.properties import PROPERTIES
from registry.records import EVIDENCE, FixedPoint

__all__ = ["CRITICAL_CONSTANTS", "Limits", "best_fixed_point", "find_limits"]

CRITICAL_CONSTANTS = ("critical-temperature", "critical-pressure", "acentric-factor")
"""The fixed points that corresponding states take."""


def best_fixed_point(dossier: Dossier, quantity: str) -> Entry[FixedPoint] | None:
    """The accepted fixed point that ranks first, or None.

    Rounded values come last; then the evidence decides, then the newer
    source, then the key.
    """

    def rank(entry: Entry[FixedPoint]) -> tuple[bool, int, int, str]:
        record = entry.record
        evidence = EVIDENCE.index(count_fixed_point(entry, dossier).evidence)
        return record.qualifier == "rounded", evidence, -dossier.year(record.source), record.key

    return min(dossier.accepted_points(quantity), key=rank, default=None)


@dataclass(frozen=True)
class Limits:
    """The temperatures between which a property's curves answer.

    Attributes
    ----------
    lower, upper : float
        K; 0 or infinity where nothing limits or nothing is recorded.
    lower_point, upper_point : Entry or None
        The fixed points they come from.
    unchecked : tuple of str
        Quantities that should limit but are not recorded.
    """

    lower: float = 0.0
    upper: float = math.inf
    lower_point: Entry[FixedPoint] | None = None
    upper_point: Entry[FixedPoint] | None = None
    unchecked: tuple[str, ...] = ()

    def hold(self, kelvin: ArrayLike) -> NDArray[np.bool_]:
        """True where a temperature, K, lies between them, both included; never for what is no temperature."""
        at = np.asarray(kelvin, dtype=float)
        held: NDArray[np.bool_] = (at >= self.lower) & (at <= self.upper) & (at > 0.0) & np.isfinite(at)
        return held


def find_limits(dossier: Dossier, prop: str) -> Limits:
    """The phase limits of one property of a compound."""
    row = PROPERTIES[prop]
    lower = best_fixed_point(dossier, row.lower) if row.lower else None
    upper = best_fixed_point(dossier, row.upper) if row.upper else None
    missing = tuple(
        quantity for quantity, point in ((row.lower, lower), (row.upper, upper)) if quantity and point is None
    )
    return Limits(
        lower.record.value_si() if lower else 0.0,
        upper.record.value_si() if upper else math.inf,
        lower, upper, missing,
    )  # fmt: skip
