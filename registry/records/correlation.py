"""A correlation: one form with coefficients, from one source."""

from __future__ import annotations

import dataclasses
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass
from typing import ClassVar

from registry import cells
from registry.cells import choice, word
from registry.errors import BadQuantity, Problem
from registry.forms.catalogue import FORMS
from registry.numerals import parse_number
from registry.properties import PROPERTIES
from registry.quantities import UNITS, parse_temperature
from registry.records.record import (
    EVIDENCE_WORD,
    OBTAINED_WORD,
    SCALE,
    TEMPERATURE_UNIT,
    UNIT,
    Record,
    entry,
    phase_problems,
    scale_problems,
    uncertainty_problems,
    value_unit_problems,
)


@dataclass(frozen=True)
class Correlation(Record):
    """One form with coefficients for one compound and property, from one source."""

    kind: ClassVar[str] = "correlation"
    key: str = entry(cells.KEY)
    compound: str = entry(cells.KEY)
    property: str = entry(choice(*PROPERTIES))
    phase: str = entry(cells.PHASE)
    form: str = entry(word("the name of an equation form is allowed; `rangebook forms` lists them.", *FORMS))
    coefficients: Mapping[str, str] = dataclasses.field(default_factory=dict)
    temperature_unit: str = entry(TEMPERATURE_UNIT)
    value_unit: str = entry(UNIT)
    window_min: str = entry(cells.NUMBER)
    window_max: str = entry(cells.NUMBER)
    window_unit: str = entry(TEMPERATURE_UNIT)
    window_basis: str = entry(choice("printed", "assumed", "memory"))
    temperature_scale: str = entry(SCALE)
    evidence: str = entry(EVIDENCE_WORD)
    uncertainty: str = entry(cells.TEXT, required=False)
    source: str = entry(cells.KEY)
    locator: str = entry(cells.TEXT)
    obtained: str = entry(OBTAINED_WORD)
    note: str = entry(cells.LONG, required=False)
    metastable_below: str = entry(cells.TEXT, required=False)

    def _checks(self) -> tuple[Callable[[], Iterable[Problem]], ...]:
        return (
            self._form_problems,
            self._coefficient_problems,
            self._unit_problems,
            lambda: phase_problems(self.property, self.phase),
            lambda: value_unit_problems(self.value_unit, PROPERTIES[self.property].dimension),
            lambda: scale_problems(self.temperature_scale, "temperature_unit", self.temperature_unit),
            self._window_problems,
            lambda: uncertainty_problems(self.uncertainty, PROPERTIES[self.property].dimension),
            self._metastable_problems,
        )

    def _form_problems(self) -> Iterator[Problem]:
        form, prop = FORMS[self.form], PROPERTIES[self.property]
        if prop.name not in form.properties:
            yield Problem("form", self.form, f"the form is for {' and '.join(form.properties)}.")

    def _coefficient_problems(self) -> Iterator[Problem]:
        if why := FORMS[self.form].coefficients.complaint(self.coefficients):
            yield Problem("coefficients", "; ".join(f"{k}={v}" for k, v in self.coefficients.items()), why)

    def _unit_problems(self) -> Iterator[Problem]:
        form = FORMS[self.form]
        if form.absolute and self.temperature_unit not in ("K", "degR"):
            yield Problem("temperature_unit", self.temperature_unit, "the form counts from absolute zero: K or degR.")
        if form.value_unit and self.value_unit != form.value_unit:
            yield Problem("value_unit", self.value_unit, f"the form gives {form.value_unit}.")

    def _window_problems(self) -> Iterator[Problem]:
        low, high = self.window_kelvin()
        if not 0.0 < low < high:
            given = f"{self.window_min} to {self.window_max} {self.window_unit}"
            yield Problem("window_min", given, "the lower bound must lie above 0 K and below the upper bound.")

    def _metastable_problems(self) -> Iterator[Problem]:
        if self.metastable_below and (why := _temperature_complaint(self.metastable_below)):
            yield Problem("metastable_below", self.metastable_below, why)

    def ordered_coefficients(self) -> list[tuple[str, str]]:
        """Coefficients as printed, in the order in which the form takes them."""
        return [(name, self.coefficients[name]) for name in FORMS[self.form].coefficients.names(self.coefficients)]

    def window_kelvin(self) -> tuple[float, float]:
        """The printed window, K: each bound the double nearest to its exact value."""
        unit = UNITS[self.window_unit]
        return float(unit.to_si(parse_number(self.window_min))), float(unit.to_si(parse_number(self.window_max)))


def _temperature_complaint(text: str) -> str:
    try:
        parse_temperature(text)
    except BadQuantity as error:
        return error.allowed
    return ""
