"""The places of a table's rows.

Every place is computed from its number in whole numbers and rounded once;
none is added up from the one before, so that steps do not drift.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction

from registry.errors import BadInput
from registry.quantities import UNITS, Unit
from registry.tables.conversion import Conversion

__all__ = ["MOST_ROWS", "Even", "Geometric", "Listed", "Spacing", "space_pressures", "space_temperatures"]

MOST_ROWS = 10_000_000
"""Rows of the longest table."""

_DECIMALS = 9
"""Decimals that are shown at most."""

_FEW = 4
"""Decimals up to which places are shown exactly."""


@dataclass(frozen=True)
class Even:
    """Places that lie a step apart.

    Attributes
    ----------
    first, step : fractions.Fraction
        In SI units.
    count : int
        How many there are.
    """

    first: Fraction
    step: Fraction
    count: int

    def numbers(self, start: int, stop: int, unit: Unit) -> list[float]:
        """The places from number `start` to before `stop` in a unit, each the nearest double."""
        first, step = _in_unit(self.first, unit), self.step / unit.factor
        below = math.lcm(first.denominator, step.denominator)
        at, by = int(first * below), int(step * below)
        return [(at + i * by) / below for i in range(start, stop)]

    def decimals(self, unit: Unit) -> int:
        """How many decimals show the places: exactly where a few do, else to four and to a hundredth of the step."""
        first, step = _in_unit(self.first, unit), self.step / unit.factor
        exact = max(_decimals(first), _decimals(step))
        return exact if exact <= _FEW else min(exact, max(_magnitude(step) + 2, _FEW))


@dataclass(frozen=True)
class Listed:
    """Places that are listed one by one, in SI units."""

    places: tuple[Fraction, ...]

    @property
    def count(self) -> int:
        """How many there are."""
        return len(self.places)

    def numbers(self, start: int, stop: int, unit: Unit) -> list[float]:
        """As for `Even`."""
        return [float(_in_unit(place, unit)) for place in self.places[start:stop]]

    def decimals(self, unit: Unit) -> int:
        """As for `Even`."""
        return max(_decimals(_in_unit(place, unit)) for place in self.places)


@dataclass(frozen=True)
class Geometric:
    """Places with one ratio between neighbours, both ends among them, Pa."""

    low: Fraction
    high: Fraction
    count: int

    def numbers(self, start: int, stop: int, unit: Unit) -> list[float]:
        """As for `Even`; between the ends to double precision."""
        ends = {0: self.low, self.count - 1: self.high}
        low, high, last = float(self.low), float(self.high), self.count - 1
        # not by their ratio, which may be beyond every double
        places = [low ** ((last - i) / last) * high ** (i / last) for i in range(start, stop)]
        found = Conversion(UNITS["Pa"], unit).many(places)
        for i in ends:
            if start <= i < stop:
                found[i - start] = float(_in_unit(ends[i], unit))
        return found

    def decimals(self, unit: Unit) -> int:
        """Four digits of the lowest place."""
        return min(_DECIMALS, max(_magnitude(_in_unit(self.low, unit)) + 3, 0))


Spacing = Even | Listed | Geometric


def _in_unit(exact: Fraction, unit: Unit) -> Fraction:
    return exact / unit.factor - unit.shift


def _decimals(exact: Fraction) -> int:
    """The decimals that a number needs, up to the most that are shown."""
    return next((n for n in range(_DECIMALS) if (exact * 10**n).denominator == 1), _DECIMALS)


def _magnitude(exact: Fraction) -> int:
    """The decimal in which the first digit stands: 1 for 0.25, -1 for 25."""
    return -math.floor(math.log10(abs(float(exact)))) if exact else 0


def space_temperatures(low: Fraction, high: Fraction, step: Fraction | None, points: int | None) -> Spacing:
    """The temperatures of a table.

    Parameters
    ----------
    low, high : fractions.Fraction
        Its ends, K.
    step : fractions.Fraction, optional
        From one to the next, K; the end is among them where the steps meet
        it.
    points : int, optional
        How many, evenly spaced, both ends among them; instead of `step`.

    Returns
    -------
    Spacing
        Their places.

    Raises
    ------
    BadInput
        If the ends, the step or the number cannot be, or both or none of the
        last two are given.

    Examples
    --------
    >>> from registry.quantities import UNITS
    >>> tenths = space_temperatures(Fraction(273), Fraction(1273), Fraction(1, 10), None)
    >>> tenths.count, tenths.numbers(3, 4, UNITS["K"]), tenths.numbers(10000, 10001, UNITS["K"])
    (10001, [273.3], [1273.0])
    """
    _check_ends(low, high, "K")
    _check_one_given(step, points)
    if step is not None:
        return _space_steps(low, high, step)
    if points is not None:
        return Even(low, (high - low) / (_check_points(points) - 1), points)
    raise BadInput("A table needs a step or a number of points. Give one of them.")


def space_pressures(low: Fraction, high: Fraction, unit: Unit, step: Fraction | None, points: int | None) -> Spacing:
    """The pressures of a table of temperatures.

    Parameters
    ----------
    low, high : fractions.Fraction
        Its ends, Pa.
    unit : Unit
        The unit in which round numbers are round.
    step : fractions.Fraction, optional
        From one to the next, Pa.
    points : int, optional
        How many, with one ratio between neighbours, both ends among them.
        With neither the round numbers between the ends: 1, 2 and 5 times a
        power of ten; of gauge pressures also those below zero, and zero.

    Returns
    -------
    Spacing
        Their places.

    Raises
    ------
    BadInput
        As for temperatures, or if there is no round number.

    Examples
    --------
    >>> from registry.quantities import UNITS
    >>> kpa = UNITS["kPa"]
    >>> space_pressures(Fraction(1000), Fraction(50000), kpa, None, None).numbers(0, 9, kpa)
    [1.0, 2.0, 5.0, 10.0, 20.0, 50.0]
    """
    _check_ends(low, high, "Pa")
    _check_one_given(step, points)
    if step is not None:
        return _space_steps(low, high, step)
    if points is not None:
        return Geometric(low, high, _check_points(points))
    return _list_round(low, high, unit)


def _check_ends(low: Fraction, high: Fraction, unit: str) -> None:
    if low >= high:
        ends = f"starts at {float(low):.9g} {unit} and ends at {float(high):.9g} {unit}"
        raise BadInput(f"The table {ends}. Give two ends, the lower one first.")


def _check_one_given(step: Fraction | None, points: int | None) -> None:
    if step is not None and points is not None:
        raise BadInput("Both a step and a number of points were given. Give one of them.")


def _check_points(points: int) -> int:
    if points < 2:
        raise BadInput(f"A table of {points} points was asked for; at least 2 are needed, one at each end.")
    return _check_rows(points, "Ask for fewer.")


def _check_rows(count: int, advice: str) -> int:
    if count > MOST_ROWS:
        raise BadInput(f"That makes {count:,} rows; at most {MOST_ROWS:,} are allowed. {advice}")
    return count


def _space_steps(low: Fraction, high: Fraction, step: Fraction) -> Even:
    if step <= 0:
        raise BadInput("The step is not above zero; a difference such as 5 K is allowed.")
    return Even(low, step, _check_rows(int((high - low) // step) + 1, "Take a larger step."))


def _list_round(low: Fraction, high: Fraction, unit: Unit) -> Listed:
    start, end = _in_unit(low, unit), _in_unit(high, unit)
    places = tuple(unit.to_si(number) for number in _round_numbers(start, end))
    if not places:
        raise BadInput(
            f"No round number (1, 2 or 5 times a power of ten) lies from {float(start):.6g} to {float(end):.6g} "
            f"{unit.name}. Give a step or a number of points."
        )
    return Listed(places)


def _round_numbers(start: Fraction, end: Fraction) -> Iterator[Fraction]:
    """Rising; those of a span that holds zero go down to a hundredth of its larger end, and zero is among them."""
    if start > 0:
        yield from _round_above(start, end)
        return
    least = -end if end < 0 else max(-start, end) / 100
    yield from reversed([-number for number in _round_above(least, -start)])
    if end >= 0:
        yield Fraction(0)
        yield from _round_above(least, end)


def _round_above(least: Fraction, most: Fraction) -> Iterator[Fraction]:
    power = Fraction(10) ** (math.floor(math.log10(float(least))) - 1)
    while power <= most:
        yield from (m * power for m in (1, 2, 5) if least <= m * power <= most)
        power *= 10
