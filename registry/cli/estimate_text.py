"""Estimates as a person reads them."""

from __future__ import annotations

from registry.cli.screen import emphasize, print_facts, say
from registry.cli.temperatures import Asked
from registry.dossier import Entry
from registry.estimates import Estimate
from registry.records import FixedPoint
from registry.values import Value

__all__ = ["print_estimates"]


def print_estimates(told: list[tuple[Asked, Value]]) -> None:
    """The method and the constants behind estimates of one compound."""
    first = told[0][1]
    assert isinstance(first, Estimate)
    cautions = dict.fromkeys(caution for _, each in told for caution in getattr(each, "cautions", ()))
    say(f"  {emphasize(first.method.title)}, an estimate by corresponding states")
    print_facts(
        (
            ("method", first.method.reference),
            *(("from", _word_point(point)) for point in first.points),
            *(("caution", caution) for caution in cautions),
        ),
        indent=4,
    )


def _word_point(point: Entry[FixedPoint]) -> str:
    record = point.record
    unit = "" if record.unit == "1" else f" {record.unit}"
    name = record.quantity.replace("-", " ")
    return f"{name} {record.value}{unit} ({point.key}, revision {point.revision}, {record.obtained})"
