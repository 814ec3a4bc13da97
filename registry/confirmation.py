"""Records from memory: whether independent values confirm them.

A record obtained from memory counts as compiled at most until independent
values, seen in other sources, agree with it.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from fractions import Fraction

from registry import rules
from registry.curve import Curve
from registry.dossier import Dossier, Entry
from registry.numerals import last_digit_unit, parse_number
from registry.quantities import UNITS
from registry.records import EVIDENCE, Correlation, Dataset, FixedPoint

__all__ = ["Counted", "count_correlation", "count_fixed_point"]


@dataclass(frozen=True)
class Counted:
    """The evidence a record counts as.

    Attributes
    ----------
    evidence : str
        What it ranks as.
    agreeing, compared : int
        Independent values that agree, and all that could be compared; zero
        for a record seen in its source, which needs none.
    """

    evidence: str
    agreeing: int = 0
    compared: int = 0


@dataclass(frozen=True)
class _Value:
    """An independent value with the half units of its last digits, in SI."""

    kelvin: float
    value: float
    half_kelvin: float
    half_value: float


def needs_confirmation(evidence: str, obtained: str) -> bool:
    """True for a record from memory whose evidence is better than compiled."""
    return obtained == "memory" and EVIDENCE.index(evidence) < EVIDENCE.index("compiled")


def count_correlation(entry: Entry[Correlation], curve: Curve, dossier: Dossier, triple: float | None) -> Counted:
    """The evidence a correlation counts as.

    Parameters
    ----------
    entry : Entry
        The correlation.
    curve : Curve
        Its curve.
    dossier : Dossier
        Where independent values are looked for: accepted datasets and fixed
        points of other sources, seen there.
    triple : float or None
        The triple temperature, K, if one is known.

    Returns
    -------
    Counted
        Its own evidence if it was seen, or if at least two independent values
        inside its window agree within 1 % and no more disagree than agree;
        else compiled at most.
    """
    record = entry.record
    if not needs_confirmation(record.evidence, record.obtained):
        return Counted(record.evidence)
    low, high = curve.window
    values = [v for v in _independent_values(record, dossier, triple) if low <= v.kelvin <= high]
    agreeing = sum(_agrees(curve, v) for v in values)
    holds = agreeing >= rules.CONFIRMING_VALUES and 2 * agreeing >= len(values)
    return Counted(record.evidence if holds else "compiled", agreeing, len(values))


def _agrees(curve: Curve, v: _Value) -> bool:
    found = curve.value(v.kelvin)
    if not found > 0.0:
        return False
    digits = v.half_value / v.value + abs(curve.log_rate(v.kelvin)) * v.half_kelvin
    return abs(found / v.value - 1.0) <= rules.CONFIRMING_PERCENT / 100.0 + digits


def _independent_values(record: Correlation, dossier: Dossier, triple: float | None) -> Iterator[_Value]:
    for entry in dossier.datasets:
        data = entry.record
        same = data.property == record.property and data.phase == record.phase
        if entry.accepted and same and data.obtained == "seen" and data.source != record.source:
            yield from _dataset_values(data, dossier.compound.record.grams_per_mole())
    for point in dossier.fixed_points:
        fixed = point.record
        if point.accepted and fixed.obtained == "seen" and fixed.source != record.source:
            yield from _fixed_point_value(fixed, record.property, triple)


def _dataset_values(data: Dataset, molar_mass: float) -> Iterator[_Value]:
    temperature, unit = UNITS[data.temperature_unit], UNITS[data.value_unit]
    factor = unit.factor * (Fraction(molar_mass) if unit.per_molar_mass else 1)
    for point in data.points:
        yield _Value(
            float(temperature.to_si(parse_number(point.temperature))),
            float(parse_number(point.value) * factor),
            float(last_digit_unit(point.temperature) * temperature.factor / 2),
            float(last_digit_unit(point.value) * factor / 2),
        )


_AT_ONE_ATMOSPHERE = {
    "normal-boiling-temperature": "vapor-pressure",
    "normal-sublimation-temperature": "sublimation-pressure",
}


def _fixed_point_value(fixed: FixedPoint, prop: str, triple: float | None) -> Iterator[_Value]:
    """A boiling or triple point as a point of a pressure curve."""
    half = float(last_digit_unit(fixed.value) * UNITS[fixed.unit].factor / 2)
    if _AT_ONE_ATMOSPHERE.get(fixed.quantity) == prop:
        yield _Value(fixed.value_si(), rules.STANDARD_ATMOSPHERE, half, 0.0)
    elif fixed.quantity == "triple-point-pressure" and prop in ("vapor-pressure", "sublimation-pressure") and triple:
        yield _Value(triple, fixed.value_si(), 0.0, half)


def count_fixed_point(entry: Entry[FixedPoint], dossier: Dossier) -> Counted:
    """The evidence a fixed point counts as; one independent value within 0.1 % confirms it."""
    record = entry.record
    if not needs_confirmation(record.evidence, record.obtained):
        return Counted(record.evidence)
    others = [
        other.record.value_si()
        for other in dossier.accepted_points(record.quantity)
        if other.record.obtained == "seen" and other.record.source != record.source
        and other.record.qualifier != "rounded"
    ]  # fmt: skip
    own = record.value_si()
    agreeing = sum(abs(value / own - 1.0) <= rules.FIXED_POINT_PERCENT / 100.0 for value in others if own)
    return Counted(record.evidence if agreeing else "compiled", agreeing, len(others))
