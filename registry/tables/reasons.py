"""The reasons of many refusals, each worked out once for the numbers that share it."""

from __future__ import annotations

import bisect
from collections.abc import Callable, Iterable

from registry import rules
from registry.coverage import Coverage
from registry.refusals import Refusal

__all__ = ["Reasons", "cut_temperatures"]


class Reasons:
    """Why nothing answers, for many numbers.

    Parameters
    ----------
    cuts : iterable of float
        Numbers at which, within one place, a reason can change.
    explain : callable
        Gives the refusal at one number.
    """

    def __init__(self, cuts: Iterable[float], explain: Callable[[float], Refusal]) -> None:
        self._cuts = sorted(cuts)
        self._explain = explain
        self._known: dict[tuple[int, int, int], str] = {}

    def reason(self, number: float, place: int) -> str:
        """The reason at a number that has no answer, and that lies in a place."""
        # a number at a cut is a case of its own
        between = bisect.bisect_left(self._cuts, number), bisect.bisect_right(self._cuts, number)
        known = self._known.get((place, *between))
        if known is None:
            known = self._known[place, *between] = self._explain(number).reason
        return known


def cut_temperatures(coverage: Coverage) -> list[float]:
    """The temperatures, K, at which a reason can change within a stretch."""
    limits, tolerance = coverage.limits, rules.BOUND_TOLERANCE
    waiting = (c.reach for c in coverage.candidates if not c.entry.accepted)
    return [limits.lower, limits.upper, *(b for low, high in waiting for b in (low - tolerance, high + tolerance))]
