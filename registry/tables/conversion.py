"""Many values to another unit, each rounded once."""

from __future__ import annotations

import math
from collections.abc import Sequence
from fractions import Fraction

from registry.errors import BadQuantity
from registry.quantities import Unit, unit_names

__all__ = ["Conversion"]

_WHOLE = 2**53
"""Up to here every whole number is a double."""


class Conversion:
    """The way from one unit to another, worked out once.

    Parameters
    ----------
    source, target : Unit
        Units of one dimension.
    molar_mass : float, optional
        Molar mass, g/mol; needed between a molar and a mass basis.

    Raises
    ------
    BadQuantity
        If the dimensions differ, or the molar mass is needed and not given.

    Examples
    --------
    >>> from registry.quantities import UNITS
    >>> Conversion(UNITS["Pa"], UNITS["mmHg"]).many([101325.0])
    [759.9998917256113]
    """

    def __init__(self, source: Unit, target: Unit, molar_mass: float | None = None) -> None:
        if source.dimension != target.dimension:
            names = ", ".join(unit_names(source.dimension))
            raise BadQuantity(target.name, f"a {source.dimension} unit is one of {names}.")
        slope = source.factor / target.factor
        offset = source.shift * slope
        if source.per_molar_mass != target.per_molar_mass:
            if molar_mass is None:
                raise BadQuantity(target.name, f"it needs the molar mass when the value is in {source.name}.")
            mass = Fraction(molar_mass) if source.per_molar_mass else 1 / Fraction(molar_mass)
            slope, offset = slope * mass, offset * mass
        self._set(slope, offset - target.shift)

    def _set(self, slope: Fraction, offset: Fraction) -> None:
        """Whole numbers in which one value is (n * times + d * plus) / (d * over), for n / d."""
        self._times = slope.numerator * offset.denominator
        self._plus = offset.numerator * slope.denominator
        self._over = slope.denominator * offset.denominator

    def many(self, values: Sequence[float]) -> list[float]:
        """The values in the other unit; NaN stays NaN."""
        times, plus, over = self._times, self._plus, self._over
        # one product or quotient of doubles is rounded once by itself
        if not plus and over == 1 and times <= _WHOLE:
            return [value * times for value in values] if times > 1 else list(values)
        if not plus and times == 1 and over <= _WHOLE:
            return [value / over for value in values]
        return [self._one(value) for value in values]

    def _one(self, value: float) -> float:
        if not math.isfinite(value):
            return value
        above, below = value.as_integer_ratio()
        # the quotient of two integers is rounded once
        return (above * self._times + below * self._plus) / (below * self._over)
