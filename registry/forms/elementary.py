"""A kernel from a plain expression, for the forms that few correlations use."""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from registry.forms.form import Array, Scratch

__all__ = ["Expression"]


@dataclass(frozen=True)
class Expression:
    """Value and rate as NumPy expressions in the temperature.

    Attributes
    ----------
    value, slope : callable
        ``value(t, p)`` and its derivative with respect to t, elementwise.
    bounds : callable
        ``bounds(p)`` gives the open interval in which they mean something.
    """

    value: Callable[[Array, tuple[Any, ...]], Array]
    slope: Callable[[Array, tuple[Any, ...]], Array]
    bounds: Callable[[tuple[Any, ...]], tuple[float, float]] = lambda p: (0.0, math.inf)
    stacks: bool = False

    def fill(self, t: Array, p: tuple[Any, ...], out: Array, scratch: Scratch) -> None:
        out[:] = self.value(t, p)

    def rate(self, t: Array, p: tuple[Any, ...]) -> Array:
        return self.slope(t, p)

    def domain(self, p: tuple[Any, ...]) -> tuple[float, float]:
        return self.bounds(p)
