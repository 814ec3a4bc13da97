"""Records from memory: whether independent values confirm them.

A record obtained from memory counts as compiled at most until independent
values, seen in other sources, agree with it.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from fractions import Fraction

import numpy as np

from registry import rules
from registry.curve import Curve
from registry.dossier import Dossier, Entry
from registry.numerals import last_digit_unit, parse_number
from registry.quantities import UNITS
from registry.records import EVIDENCE, Correlation, Dataset, FixedPoint
from registry.scales import SCALES

__all__ = ["Counted", "Value", "count_correlation", "count_fixed_point", "gather_values"]


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
class Value:
    """A value seen in some source, with the half units of its last digits, in SI."""

    source: str
    phase: str
    kelvin: float
    value: float
    half_kelvin: float
    half_value: float


def needs_confirmation(evidence: str, obtained: str) -> bool:
    """True for a record from memory whose evidence is better than compiled."""
    return obtained == "memory" and EVIDENCE.index(evidence) < EVIDENCE.index("compiled")


def gather_values(dossier: Dossier, prop: str, triple: float | None) -> tuple[Value, ...]:
    """Every value by which correlations for a property can be confirmed.

    Parameters
    ----------
    dossier : Dossier
        All that is recorded about the compound.
    prop : str
        The property.
    triple : float or None
        The triple temperature, K, if one is known.

    Returns
    -------
    tuple of Value
        The points of accepted datasets and the accepted fixed points that were
        seen in their source.
    """
    values: list[Value] = []
    for entry in dossier.datasets:
        data = entry.record
        if entry.accepted and data.property == prop and data.obtained == "seen":
            values += _dataset_values(data, dossier.compound.record.grams_per_mole())
    for point in dossier.fixed_points:
        if point.accepted and point.record.obtained == "seen":
            values += _fixed_point_value(point.record, prop, triple)
    return tuple(values)


def count_correlation(record: Correlation, curve: Curve, values: Sequence[Value]) -> Counted:
    """The evidence a correlation counts as.

    Parameters
    ----------
    record : Correlation
        The correlation.
    curve : Curve
        Its curve.
    values : sequence of Value
        What `gather_values` found; those of its own source are left out.

    Returns
    -------
    Counted
        Its own evidence if it was seen, or if at least two independent values
        inside its window agree within 1 % and no more disagree than agree;
        else compiled at most.
    """
    if not needs_confirmation(record.evidence, record.obtained):
        return Counted(record.evidence)
    low, high = curve.window
    independent = [
        v for v in values if v.source != record.source and v.phase in ("", record.phase) and low <= v.kelvin <= high
    ]
    agreeing = _count_agreeing(curve, independent) if independent else 0
    holds = agreeing >= rules.CONFIRMING_VALUES and 2 * agreeing >= len(independent)
    return Counted(record.evidence if holds else "compiled", agreeing, len(independent))


def _count_agreeing(curve: Curve, values: Sequence[Value]) -> int:
    """How many values lie within 1 % and the digits they are printed with."""
    kelvin = np.array([v.kelvin for v in values])
    expected = np.array([v.value for v in values])
    found = curve.values(kelvin)
    with np.errstate(all="ignore"):
        steepness = np.abs(curve.rates(kelvin) / found)
        digits = np.array([v.half_value for v in values]) / expected
        digits += steepness * np.array([v.half_kelvin for v in values])
        agrees = np.abs(found / expected - 1.0) <= rules.CONFIRMING_PERCENT / 100.0 + digits
    return int(np.count_nonzero(agrees & (found > 0.0)))


def _dataset_values(data: Dataset, molar_mass: float) -> Iterator[Value]:
    temperature, unit = UNITS[data.temperature_unit], UNITS[data.value_unit]
    scale = SCALES[data.temperature_scale]
    factor = unit.factor * (Fraction(molar_mass) if unit.per_molar_mass else 1)
    for point in data.points:
        yield Value(
            data.source,
            data.phase,
            scale.to_its90(float(temperature.to_si(parse_number(point.temperature)))),
            float(parse_number(point.value) * factor),
            float(last_digit_unit(point.temperature) * temperature.factor / 2),
            float(last_digit_unit(point.value) * factor / 2),
        )


_AT_ONE_ATMOSPHERE = {
    "normal-boiling-temperature": "vapor-pressure",
    "normal-sublimation-temperature": "sublimation-pressure",
}


def _fixed_point_value(fixed: FixedPoint, prop: str, triple: float | None) -> Iterator[Value]:
    """A boiling or triple point as a point of a pressure curve."""
    half = float(last_digit_unit(fixed.value) * UNITS[fixed.unit].factor / 2)
    if _AT_ONE_ATMOSPHERE.get(fixed.quantity) == prop:
        yield Value(fixed.source, "", fixed.value_si(), rules.STANDARD_ATMOSPHERE, half, 0.0)
    elif fixed.quantity == "triple-point-pressure" and prop in ("vapor-pressure", "sublimation-pressure") and triple:
        yield Value(fixed.source, "", triple, fixed.value_si(), 0.0, half)


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
