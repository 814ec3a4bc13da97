"""What the commands print with --json."""

from __future__ import annotations

import dataclasses
import math
from collections.abc import Iterable
from typing import TYPE_CHECKING, Any

from registry.answers import Answer
from registry.coverage import Coverage, Stretch
from registry.display import suit_unit
from registry.dossier import Entry
from registry.limits import Limits
from registry.quantities import UNITS, Unit, convert
from registry.readings import Reading
from registry.records import Record
from registry.refusals import Refusal
from registry.store.history import Change
from registry.uncertainty import COVERAGE_FACTOR
from registry.values import Value

# a lookup compares nothing, and seldom estimates
if TYPE_CHECKING:
    from registry.chronicle import FieldChange
    from registry.comparison import NumberChange
    from registry.difference import Preview
    from registry.estimates import Estimate
    from registry.extrapolation import Extrapolation
    from registry.scale_effects import ScaleEffect

__all__ = [
    "describe_answer",
    "describe_change",
    "describe_coverage",
    "describe_entry",
    "describe_fields",
    "describe_number",
    "describe_preview",
    "describe_reading",
    "describe_refusal",
    "describe_value",
    "value_in",
]


def value_in(found: Value, to: Unit | None) -> tuple[float, Unit]:
    """The value in the unit asked for, or in the one that suits it."""
    unit = to or suit_unit(found.value, UNITS[found.unit])
    return convert(found.value, UNITS[found.unit], unit, found.grams_per_mole), unit


def describe_value(found: Value, to: Unit | None) -> dict[str, Any]:
    """One value, wherever it comes from; its `mark` says so."""
    if found.mark == "estimate":
        from registry.estimates import Estimate

        assert isinstance(found, Estimate)
        return {**_describe_head(found, to), **_describe_estimate(found)}
    assert isinstance(found, Answer)
    return describe_answer(found, to)


def _describe_head(found: Value, to: Unit | None) -> dict[str, Any]:
    """What every value has, and how its temperature was read."""
    value, unit = value_in(found, to)
    return {
        "temperature_K": found.temperature,
        **describe_reading(found.reading),
        "value": value,
        "unit": unit.name,
        "value_SI": found.value,
        "mark": found.mark or None,
    }


def describe_reading(reading: Reading) -> dict[str, Any]:
    """How a temperature was read, where there is more to it than its number."""
    scaled = reading.scale != "ITS-90"
    asked = {"temperature_scale": reading.scale, "scale_shift_K": reading.shift} if scaled else {}
    if reading.uncertainty:
        asked |= {"temperature_uncertainty_K": reading.uncertainty, "temperature_coverage_factor": reading.factor}
    return asked


def describe_answer(answer: Answer, to: Unit | None) -> dict[str, Any]:
    """One answer of a correlation."""
    record = answer.correlation
    beyond = {}
    if answer.mark == "beyond":
        from registry.extrapolation import Extrapolation

        assert isinstance(answer, Extrapolation)
        beyond = _describe_extrapolation(answer)
    return {
        **_describe_head(answer, to),
        **beyond,
        "correlation": record.key,
        "revision": answer.revision,
        "phase": record.phase,
        "window_K": list(answer.window),
        "evidence": record.evidence,
        "counts_as": answer.counts_as,
        "standing": answer.standing,
        "obtained": record.obtained,
        "uncertainty_percent": answer.uncertainty_percent,
        "uncertainty": _describe_budget(answer),
        "scale_effects": [_describe_scale_effect(effect) for effect in answer.scale_effects],
        "percent_per_kelvin": answer.percent_per_kelvin,
        "factor_per_10_K": answer.factor_per_10_kelvin,
        "source": {"key": record.source, "citation": answer.citation, "locator": record.locator},
        "chosen_because": answer.chosen_because,
        "candidates": [dataclasses.asdict(verdict) for verdict in answer.candidates],
        "cautions": list(answer.cautions),
    }


def _describe_budget(answer: Answer) -> dict[str, Any]:
    budget = answer.budget
    return {
        "stated_percent": budget.stated_percent,
        "stated_coverage_factor": budget.stated_factor,
        "temperature_percent": budget.temperature_percent,
        "expanded_percent": budget.expanded_percent,
        "rounding_percent": budget.rounding_percent,
        "rounding_bound_percent": budget.rounding_bound_percent,
        "coverage_factor": COVERAGE_FACTOR,
    }


def _describe_scale_effect(effect: ScaleEffect) -> dict[str, Any]:
    return {"scale": effect.scale, "supposed": effect.supposed, "shift_K": effect.shift, "percent": effect.percent}


def _describe_extrapolation(answer: Extrapolation) -> dict[str, Any]:
    neighbours = [
        {"correlation": n.correlation, "distance_K": n.distance, "value_SI": n.value, "percent": n.percent}
        for n in answer.neighbours
    ]
    return {"distance_K": answer.distance, "neighbours": neighbours}


def _describe_estimate(estimate: Estimate) -> dict[str, Any]:
    method = estimate.method
    return {
        "correlation": None,
        "method": {
            "name": method.name, "title": method.title, "reference": method.reference,
            "typical_error": method.typical_error,
        },
        "inputs": [
            {
                "quantity": e.record.quantity, "value_SI": e.record.value_si(), "fixed_point": e.key,
                "revision": e.revision, "source": e.record.source, "obtained": e.record.obtained,
            }
            for e in estimate.points
        ],
        "reduced_temperature": estimate.reduced_temperature,
        "uncertainty_percent": None,
        "uncertainty": {
            "stated_percent": None, "stated_coverage_factor": None,
            "temperature_percent": estimate.temperature_percent, "expanded_percent": None, "rounding_percent": None,
            "rounding_bound_percent": None, "coverage_factor": COVERAGE_FACTOR,
        },
        "percent_per_kelvin": estimate.percent_per_kelvin,
        "factor_per_10_K": estimate.factor_per_10_kelvin,
        "cautions": list(estimate.cautions),
    }  # fmt: skip


def describe_refusal(refusal: Refusal) -> dict[str, Any]:
    """One refusal."""
    return {
        "temperature_K": refusal.temperature,
        "reason": refusal.reason,
        "explanation": refusal.explanation,
        "nearest": [
            {"correlation": n.correlation, "window_K": list(n.window), "distance_K": n.distance}
            for n in refusal.nearest
        ],
    }


def describe_coverage(coverage: Coverage) -> dict[str, Any]:
    """The map of one property of a compound."""
    return {
        "compound": coverage.dossier.compound.key,
        "property": coverage.property,
        "phase": coverage.phase or None,
        "limits": _describe_limits(coverage.limits),
        "stretches": [_describe_stretch(stretch) for stretch in coverage.stretches if stretch.candidate],
        "gaps_K": [[gap.low, gap.high] for gap in coverage.gaps],
        "seams": [
            {"temperature_K": s.temperature, "below": s.below, "above": s.above, "jump_percent": s.jump_percent}
            for s in coverage.seams
        ],
        "candidates": [
            {
                "correlation": c.key, "revision": c.entry.revision, "standing": c.entry.standing,
                "phase": c.record.phase, "window_K": list(c.record.window_kelvin()), "reach_K": list(c.reach),
                "evidence": c.record.evidence, "counts_as": c.counted.evidence, "obtained": c.record.obtained,
            }
            for c in coverage.candidates
        ],
    }  # fmt: skip


def _describe_limits(limits: Limits) -> dict[str, Any]:
    return {
        "lower_K": limits.lower or None,
        "lower_point": limits.lower_point.key if limits.lower_point else None,
        "upper_K": limits.upper if math.isfinite(limits.upper) else None,
        "upper_point": limits.upper_point.key if limits.upper_point else None,
        "not_recorded": list(limits.unchecked),
    }


def _describe_stretch(stretch: Stretch) -> dict[str, Any]:
    assert stretch.candidate is not None
    entry = stretch.candidate.entry
    return {"from_K": stretch.low, "to_K": stretch.high, "correlation": entry.key, "revision": entry.revision}


def describe_change(change: Change) -> dict[str, Any]:
    """Who changed the library, when and why."""
    return {
        "change": change.number,
        "author": change.author,
        "reason": change.reason,
        "recorded_at": change.recorded_at,
    }


def describe_fields(fields: Iterable[FieldChange]) -> list[dict[str, Any]]:
    """What differs field by field; null where there is nothing."""
    return [{"field": f.name, "before": f.before or None, "after": f.after or None} for f in fields]


def describe_number(change: NumberChange) -> dict[str, Any]:
    """A range in which answers differ."""
    return {
        "compound": change.compound, "property": change.property, "phase": change.phase, "from_K": change.low,
        "to_K": change.high, "kind": change.kind, "largest_percent": change.largest_percent, "at_K": change.at,
        "mean_percent": change.mean_percent,
        "before": [{"correlation": key, "revision": revision} for key, revision in change.before],
        "after": [{"correlation": key, "revision": revision} for key, revision in change.after],
    }  # fmt: skip


def describe_preview(record: Record, preview: Preview) -> dict[str, Any]:
    """What a revision would change."""
    own = preview.own
    return {
        "kind": record.kind, "key": record.key, "revision": preview.before.revision, "dry_run": True,
        "fields": describe_fields(preview.fields),
        "largest_percent": own.largest_percent if own else None, "at_K": own.at if own else None,
        "mean_percent": own.mean_percent if own else None,
        "numbers": [describe_number(change) for change in preview.numbers],
    }  # fmt: skip


def describe_entry(entry: Entry[Any]) -> dict[str, Any]:
    """A record with its revision, standing and change."""
    content = {"kind": entry.record.kind, "key": entry.key, **entry.record.content()}
    standing = {"standing": entry.standing, "standing_note": entry.standing_note} if entry.standing else {}
    waiting = {"waiting": entry.waiting} if entry.waiting else {}
    return {**content, "revision": entry.revision, "change": entry.change, **standing, **waiting}
