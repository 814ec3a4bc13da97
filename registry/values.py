"""A value at a temperature, wherever it comes from."""

from __future__ import annotations

import math
from fractions import Fraction

from registry.coverage import Coverage
from registry.errors import BadInput
from registry.properties import PROPERTIES
from registry.quantities import UNITS, Unit, convert, find_unit, gauge_unit
from registry.readings import Reading

__all__ = ["Value", "find_target_unit"]


COARSE_PERCENT = 20.0
"""Percent from which a line and an exponential part by a tenth of it."""


class Value:
    """A value at a temperature: an answer of a correlation, or an estimate.

    Parameters
    ----------
    temperature : float
        On ITS-90, K.
    value : float
        In the SI unit of the property.
    coverage : Coverage
        What the lookup was made in.
    reading : Reading, optional
        The temperature as it was read, if it has an uncertainty or a scale.
    """

    __slots__ = ("_coverage", "_reading", "_temperature", "_value")

    def __init__(self, temperature: float, value: float, coverage: Coverage, reading: Reading | None = None) -> None:
        self._temperature = temperature
        self._value = value
        self._coverage = coverage
        self._reading = reading

    @property
    def temperature(self) -> float:
        """The temperature on ITS-90, K."""
        return self._temperature

    @property
    def value(self) -> float:
        """The value in the SI unit of the property."""
        return self._value

    @property
    def mark(self) -> str:
        """``beyond`` or ``estimate`` where no window covers, the standing of a draft; empty for an accepted answer."""
        return ""

    @property
    def reading(self) -> Reading:
        """The temperature as it was read, with its uncertainty and scale."""
        return self._reading or Reading(self._temperature)

    @property
    def compound(self) -> str:
        """The key of the compound."""
        return self._coverage.dossier.compound.key

    @property
    def unit(self) -> str:
        """The SI unit of `value`."""
        return PROPERTIES[self._coverage.property].unit

    @property
    def position(self) -> int:
        """The change up to which the library was read."""
        return self._coverage.dossier.position

    @property
    def grams_per_mole(self) -> float:
        """The molar mass of the compound, g/mol."""
        return self._coverage.dossier.compound.record.grams_per_mole()

    @property
    def origin(self) -> str:
        """What gives it: the key of a correlation, or the name of a method."""
        raise NotImplementedError

    @property
    def log_rate(self) -> float:
        """d ln value / dT there, 1/K."""
        raise NotImplementedError

    @property
    def percent_per_kelvin(self) -> float:
        """How steep the curve is there, percent of the value per kelvin."""
        return 100.0 * self.log_rate

    @property
    def temperature_percent(self) -> float:
        """What the uncertainty of the temperature asked does to the value, by the slope.

        Percent at coverage factor 2; 0 if the temperature is exact.
        """
        spread = self.reading.expanded_uncertainty
        return 100.0 * abs(self.log_rate) * spread if spread else 0.0

    def caution_spread(self) -> tuple[str, ...]:
        """A sentence where the slope alone is too coarse to carry the uncertainty of the temperature."""
        if not COARSE_PERCENT < self.temperature_percent < math.inf:
            return ()
        return (
            f"The uncertainty of the temperature makes {self.temperature_percent:.3g} % by the slope alone; "
            "over so wide a range the curve bends, and up and down are not alike.",
        )

    @property
    def factor_per_10_kelvin(self) -> float:
        """exp(10 K times d ln value / dT): the local factor for 10 K more."""
        exponent = 10.0 * self.log_rate
        # beyond 709.7 no double holds it
        return math.exp(exponent) if exponent < 700.0 else math.inf

    def to(self, unit: str, atmosphere: float | None = None) -> float:
        """The value in another unit.

        Parameters
        ----------
        unit : str
            A unit of the property's dimension; a gauge unit needs `atmosphere`.
        atmosphere : float, optional
            The local atmospheric pressure, Pa.

        Returns
        -------
        float
            The value, rounded once.

        Raises
        ------
        BadQuantity
            If the unit is unknown, of another dimension, or gauge without an
            atmosphere.
        """
        prop = PROPERTIES[self._coverage.property]
        if not isinstance(unit, str):
            raise BadInput(f"{unit!r} is no unit; a text such as kPa is allowed.")
        target = find_target_unit(unit, prop.dimension, atmosphere)
        return convert(self.value, UNITS[prop.unit], target, self.grams_per_mole)

    # last, for the name hides the decorator
    @property
    def property(self) -> str:
        """What it is a value of."""
        return self._coverage.property


def find_target_unit(unit: str, dimension: str, atmosphere: float | None) -> Unit:
    """A unit for output; a gauge unit where the atmosphere is stated."""
    if atmosphere is not None and dimension == "pressure":
        return gauge_unit(unit, Fraction(atmosphere))
    return find_unit(unit, dimension)
