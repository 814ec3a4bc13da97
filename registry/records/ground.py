"""What correlations are held against: fixed points, printed values, datasets."""

from __future__ import annotations

import dataclasses
from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass
from functools import partial
from typing import Any, ClassVar, Self

from registry import cells
from registry.cells import choice
from registry.errors import Problem
from registry.numerals import parse_number
from registry.properties import PROPERTIES
from registry.quantities import UNITS, unit_names
from registry.records.record import (
    EVIDENCE_WORD,
    OBTAINED_WORD,
    SCALE,
    TEMPERATURE_UNIT,
    UNIT,
    Record,
    cell_problems,
    entry,
    phase_problems,
    scale_problems,
    temperature_problems,
    uncertainty_problems,
    value_unit_problems,
)
from registry.scales import SCALES

QUANTITIES = {
    "triple-point-temperature": "temperature", "triple-point-pressure": "pressure",
    "normal-boiling-temperature": "temperature", "normal-sublimation-temperature": "temperature",
    "critical-temperature": "temperature", "critical-pressure": "pressure",
    "lambda-point-temperature": "temperature", "lambda-point-pressure": "pressure",
    "acentric-factor": "number", "molar-mass": "molar-mass",
}  # fmt: skip


@dataclass(frozen=True)
class FixedPoint(Record):
    """A triple point, boiling point, critical point or acentric factor, with its own source."""

    kind: ClassVar[str] = "fixed-point"
    key: str = entry(cells.KEY)
    compound: str = entry(cells.KEY)
    quantity: str = entry(choice(*QUANTITIES))
    value: str = entry(cells.NUMBER)
    unit: str = entry(UNIT)
    temperature_scale: str = entry(SCALE, required=False)
    qualifier: str = entry(choice("defining", "rounded", "table-bound"), required=False)
    evidence: str = entry(EVIDENCE_WORD)
    uncertainty: str = entry(cells.TEXT, required=False)
    source: str = entry(cells.KEY)
    locator: str = entry(cells.TEXT)
    obtained: str = entry(OBTAINED_WORD)
    note: str = entry(cells.LONG, required=False)

    def _checks(self) -> tuple[Callable[[], Iterable[Problem]], ...]:
        return (
            self._value_problems,
            lambda: scale_problems(self.temperature_scale, "unit", self.unit),
            lambda: uncertainty_problems(self.uncertainty, QUANTITIES[self.quantity]),
        )

    def _value_problems(self) -> Iterator[Problem]:
        dimension = QUANTITIES[self.quantity]
        if UNITS[self.unit].dimension != dimension:
            yield Problem("unit", self.unit, f"{self.quantity} is in one of {', '.join(unit_names(dimension))}.")
        elif dimension != "number" and self.value_si() <= 0.0:
            yield Problem("value", self.value, f"a {self.quantity} is above zero.")

    def value_si(self) -> float:
        """The value in SI units (K on ITS-90, Pa, g/mol for a molar mass)."""
        value = float(UNITS[self.unit].to_si(parse_number(self.value)))
        if QUANTITIES[self.quantity] == "temperature" and self.temperature_scale:
            return SCALES[self.temperature_scale].to_its90(value)
        return value


@dataclass(frozen=True)
class PrintedValue(Record):
    """A value that a source prints for its own correlation: shows that it was copied right."""

    kind: ClassVar[str] = "printed-value"
    key: str = entry(cells.KEY)
    correlation: str = entry(cells.KEY)
    temperature: str = entry(cells.NUMBER)
    temperature_unit: str = entry(TEMPERATURE_UNIT)
    value: str = entry(cells.NUMBER)
    value_unit: str = entry(UNIT)
    locator: str = entry(cells.TEXT)
    obtained: str = entry(OBTAINED_WORD)
    note: str = entry(cells.LONG, required=False)

    def _checks(self) -> tuple[Callable[[], Iterable[Problem]], ...]:
        return (lambda: temperature_problems("temperature", self.temperature, self.temperature_unit),)


@dataclass(frozen=True)
class Point:
    """One point of a dataset, as printed, in the dataset's units."""

    temperature: str = entry(cells.NUMBER)
    value: str = entry(cells.NUMBER)
    temperature_uncertainty: str = entry(cells.NUMBER, required=False)
    value_uncertainty: str = entry(cells.NUMBER, required=False)
    note: str = entry(cells.LONG, required=False)


@dataclass(frozen=True)
class Dataset(Record):
    """Points from one source: measurements, or an independent table."""

    kind: ClassVar[str] = "dataset"
    key: str = entry(cells.KEY)
    compound: str = entry(cells.KEY)
    property: str = entry(choice(*PROPERTIES))
    phase: str = entry(cells.PHASE)
    temperature_unit: str = entry(TEMPERATURE_UNIT)
    value_unit: str = entry(UNIT)
    temperature_scale: str = entry(SCALE)
    evidence: str = entry(EVIDENCE_WORD)
    uncertainty: str = entry(cells.TEXT, required=False)
    source: str = entry(cells.KEY)
    locator: str = entry(cells.TEXT)
    obtained: str = entry(OBTAINED_WORD)
    note: str = entry(cells.LONG, required=False)
    points: tuple[Point, ...] = ()

    def _checks(self) -> tuple[Callable[[], Iterable[Problem]], ...]:
        of_points = (partial(self._point_problems, number, point) for number, point in enumerate(self.points))
        return (
            lambda: phase_problems(self.property, self.phase),
            lambda: value_unit_problems(self.value_unit, PROPERTIES[self.property].dimension),
            lambda: scale_problems(self.temperature_scale, "temperature_unit", self.temperature_unit),
            lambda: uncertainty_problems(self.uncertainty, PROPERTIES[self.property].dimension),
            self._emptiness_problems,
            *of_points,
        )

    def _emptiness_problems(self) -> Iterator[Problem]:
        if not self.points:
            yield Problem("key", self.key, "points.csv has no point of it; a dataset has at least one.")

    def _point_problems(self, number: int, point: Point) -> Iterator[Problem]:
        """Problems of one point; the field says which."""
        place = f"points.{number}."
        bad = list(cell_problems(point, place))
        if bad:
            yield from bad
            return
        yield from temperature_problems(f"{place}temperature", point.temperature, self.temperature_unit)
        prop, value = PROPERTIES[self.property], parse_number(point.value)
        if prop.positive and value <= 0:
            yield Problem(f"{place}value", point.value, f"a {self.property} is above zero.")
        elif value < 0 and not prop.signed:
            yield Problem(f"{place}value", point.value, f"{self.property} is not below zero.")
        for name in ("temperature_uncertainty", "value_uncertainty"):
            text = getattr(point, name)
            if text and parse_number(text) <= 0:
                yield Problem(place + name, text, "an uncertainty is above zero; leave it empty if none is stated.")

    def content(self) -> dict[str, Any]:
        rows = [{f.name: v for f in dataclasses.fields(p) if (v := getattr(p, f.name))} for p in self.points]
        return {**super().content(), "points": rows}

    @classmethod
    def restore(cls, key: str, content: Mapping[str, Any]) -> Self:
        record = super().restore(key, content)
        object.__setattr__(record, "points", tuple(Point(**row) for row in content["points"]))
        return record
