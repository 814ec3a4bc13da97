"""Ratios within one run: each side measured in its own steady state.

A side that allocates leaves the memory allocator in its own state, so calls
of two sides are not mixed one by one: a round is a few calls of one side,
warm, then a few of the other. Whatever slows the machine slows both.
"""

from __future__ import annotations

import ctypes
import statistics
import time
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

WARM, TIMED = 2, 5

Call = Callable[[], object]

_TRIM_THRESHOLD, _MMAP_THRESHOLD = -1, -3
"""Parameters of mallopt(3) in the GNU C library."""


@dataclass(frozen=True)
class Measured:
    """The seconds of both sides, one pair of medians a round."""

    ours: tuple[float, ...]
    reference: tuple[float, ...]

    @property
    def ratios(self) -> list[float]:
        """Ours over the reference, round by round."""
        return [a / b for a, b in zip(self.ours, self.reference, strict=True)]

    def describe(self) -> dict[str, Any]:
        """The median ratio with its spread over rounds, and the seconds behind it."""
        ratios = self.ratios
        return {
            "ratio": statistics.median(ratios),
            "ratio_lowest": min(ratios),
            "ratio_highest": max(ratios),
            "seconds": statistics.median(self.ours),
            "reference_seconds": statistics.median(self.reference),
            "rounds": len(ratios),
        }


def clock(call: Call) -> float:
    """The seconds of one call."""
    start = time.perf_counter()
    call()
    return time.perf_counter() - start


def steady_seconds(call: Call) -> float:
    """The median of timed calls after unmeasured ones."""
    for _ in range(WARM):
        call()
    return statistics.median(clock(call) for _ in range(TIMED))


def compare(ours: Call, reference: Call, rounds: int) -> Measured:
    """Two sides, round by round."""
    pairs = [(steady_seconds(ours), steady_seconds(reference)) for _ in range(rounds)]
    return Measured(*zip(*pairs, strict=True))


def find_dearest(calls: dict[str, Call], rounds: int) -> tuple[str, dict[str, float]]:
    """The name of the slowest call, and the seconds of each: medians over rounds."""
    found: dict[str, list[float]] = {name: [] for name in calls}
    for _ in range(rounds):
        for name, call in calls.items():
            found[name].append(steady_seconds(call))
    seconds = {name: statistics.median(values) for name, values in found.items()}
    return max(seconds, key=seconds.__getitem__), seconds


def keep_freed_memory() -> bool:
    """From here on the C library holds on to freed memory; False if it cannot be told so.

    By default the GNU C library gives large freed arrays back to the system,
    and whoever allocates them again pays for every page anew.
    """
    try:
        mallopt = ctypes.CDLL(None).mallopt
    except (AttributeError, OSError, TypeError):
        return False
    return bool(mallopt(_TRIM_THRESHOLD, 2**30) and mallopt(_MMAP_THRESHOLD, 2**25))
