"""The span of a table as people type it: two ends and a step, of temperature or pressure."""

from __future__ import annotations

import re
from dataclasses import dataclass
from fractions import Fraction

from registry.cli.pressures import read_atmosphere
from registry.coverage import Coverage
from registry.errors import BadInput, BadQuantity, GaugePressure, quote
from registry.inverse.inversion import Inversion
from registry.properties import find_property
from registry.quantities import UNITS, Unit, find_unit, gauge_unit, is_unit, parse_temperature, read_quantity
from registry.reports.columns import suit_value_unit
from registry.tables.pressure_table import build_pressure_table
from registry.tables.spacing import Spacing, space_pressures, space_temperatures
from registry.tables.tabulation import Table, build_table

__all__ = ["Span", "read_span"]

_NUMBER = re.compile(r"\s*[-+\u2212]?[\d.]+(?:[eE][-+\u2212]?\d+)?")

_EXAMPLES = {"temperature": "298.15K or 25C", "pressure": "101.325kPa"}


@dataclass(frozen=True)
class Span:
    """What the rows of a table are at.

    Attributes
    ----------
    low, high : fractions.Fraction
        The ends, K or Pa.
    unit : Unit
        The unit of the lower end.
    spacing : Spacing
        The places between them.
    atmosphere : fractions.Fraction or None
        The local atmosphere, Pa, if it was stated.
    """

    low: Fraction
    high: Fraction
    unit: Unit
    spacing: Spacing
    atmosphere: Fraction | None

    @property
    def by_temperature(self) -> bool:
        """True if the ends are temperatures."""
        return self.unit.dimension == "temperature"

    def build(self, coverage: Coverage, one: bool) -> Table:
        """The table."""
        if not self.by_temperature:
            return build_pressure_table(Inversion(coverage), self.spacing, float(self.low), float(self.high), one=one)
        return build_table(coverage, self.spacing, float(self.low), float(self.high), one=one)

    def choose_units(self, table: Table, value: str, temperature: str) -> tuple[Unit, Unit]:
        """The units of temperatures and values: as asked for, else of the lower end, else what suits."""
        dimension = UNITS[table.unit].dimension
        own = self.unit if self.by_temperature else UNITS["K"]
        shown = find_unit(temperature, "temperature") if temperature else own
        if not value:
            return shown, suit_value_unit(table) if self.by_temperature else self.unit
        if self.atmosphere is not None and dimension == "pressure":
            return shown, gauge_unit(value, self.atmosphere)
        return shown, find_unit(value, dimension)


def read_span(low: str, high: str, step: str, points: int | None, atmosphere: str, prop: str) -> Span:
    """The span that options name.

    Parameters
    ----------
    low, high : str
        Two temperatures, or two pressures for a table of temperatures.
    step : str
        A difference of the same kind; empty if none is given.
    points : int or None
        How many rows.
    atmosphere : str
        The local atmosphere, for gauge units; empty if not stated.
    prop : str
        The property of the table.

    Returns
    -------
    Span
        With every place exact.

    Raises
    ------
    BadInput
        If a text cannot be read, or they do not fit together.
    """
    local = read_atmosphere(atmosphere) if atmosphere else None
    dimension = _find_dimension(low)
    _check_kind("--to", high, dimension)
    _check_kind("--step", step, dimension)
    start, unit = _read_end(low, dimension, local)
    end, _ = _read_end(high, dimension, local)
    by = _read_step(step, dimension) if step else None
    if dimension == "temperature":
        return Span(start, end, unit, space_temperatures(start, end, by, points), local)
    if UNITS[find_property(prop).unit].dimension != "pressure":
        raise BadInput(f"{prop} is no pressure, so --from {quote(low)} does not fit. Give two temperatures.")
    return Span(start, end, unit, space_pressures(start, end, unit, by, points), local)


def _find_dimension(low: str) -> str:
    """What the lower end is by its unit; a temperature where it cannot be read."""
    return "pressure" if _is_of(low, "pressure") else "temperature"


def _is_of(text: str, dimension: str) -> bool:
    """True if the unit of a text is of a dimension, whatever its number."""
    return is_unit(_NUMBER.sub("", text, count=1).strip(), dimension)


def _check_kind(option: str, text: str, dimension: str) -> None:
    """Say so where a pressure stands beside a temperature."""
    other = "pressure" if dimension == "temperature" else "temperature"
    if text and _is_of(text, other):
        raise BadInput(f"{option} {quote(text)} is a {other}, and --from a {dimension}. Give both as one or the other.")


def _read_end(text: str, dimension: str, local: Fraction | None) -> tuple[Fraction, Unit]:
    """An end in SI, exact, and its unit."""
    if dimension == "temperature":
        parse_temperature(text)  # says what is wrong with one
        number, unit = read_quantity(text, dimension, _EXAMPLES[dimension])
        return unit.to_si(number), unit
    number, unit = read_quantity(text, dimension, _EXAMPLES[dimension], local)
    if unit.to_si(number) <= 0:
        raise BadQuantity(text, "an absolute pressure is greater than zero.")
    return unit.to_si(number), unit


def _read_step(text: str, dimension: str) -> Fraction:
    """A difference in SI: its unit counts by its size alone."""
    try:
        number, unit = read_quantity(text, dimension, "5K or 9F" if dimension == "temperature" else "10kPa")
    except GaugePressure:
        raise BadQuantity(text, "a step is a difference, in a unit such as kPa.") from None
    if number <= 0:
        raise BadQuantity(text, "a step is greater than zero.")
    return number * unit.factor
