"""The reasons of many refusals, each worked out once for the temperatures that share it."""

from __future__ import annotations

import bisect

from registry import rules
from registry.coverage import Coverage
from registry.verdicts import refuse

__all__ = ["Reasons"]


class Reasons:
    """Why nothing answers, for many temperatures.

    Parameters
    ----------
    coverage : Coverage
        Who answers where.
    """

    def __init__(self, coverage: Coverage) -> None:
        self._coverage = coverage
        limits, tolerance = coverage.limits, rules.BOUND_TOLERANCE
        waiting = [c.reach for c in coverage.candidates if not c.entry.accepted]
        bounds = [bound for low, high in waiting for bound in (low - tolerance, high + tolerance)]
        # within a stretch a reason changes only at these
        self._cuts = sorted([limits.lower, limits.upper, *bounds])
        self._known: dict[tuple[int, int, int], str] = {}

    def reason(self, kelvin: float, place: int) -> str:
        """The reason at a temperature, K, that lies in the stretch of that number and has no answer."""
        between = bisect.bisect_left(self._cuts, kelvin), bisect.bisect_right(self._cuts, kelvin)
        known = self._known.get((place, *between))
        if known is None:
            known = self._known[place, *between] = refuse(self._coverage, kelvin).reason
        return known
