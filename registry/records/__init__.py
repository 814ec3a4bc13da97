"""The records of a library: frozen, complete at construction, text as printed.

Every field is text. A record that breaks an invariant cannot be built:
`InvalidRecord` names all its problems at once. Content read back from a
library was checked when it was recorded and is restored as it is.
"""

from __future__ import annotations

from registry.records.correlation import Correlation
from registry.records.decisions import CAUSES, Edition, Keeping, Origin, Preference, Review, Withdrawal
from registry.records.ground import Dataset, FixedPoint, Point, PrintedValue
from registry.records.record import EVIDENCE, STANDINGS, Record, Reference
from registry.records.substances import Compound, CompoundName, Source

__all__ = [
    "CAUSES",
    "EVIDENCE",
    "KINDS",
    "RECORDED",
    "REVIEWED",
    "STANDINGS",
    "Compound",
    "CompoundName",
    "Correlation",
    "Dataset",
    "Edition",
    "FixedPoint",
    "Keeping",
    "Origin",
    "Point",
    "Preference",
    "PrintedValue",
    "Record",
    "Reference",
    "Review",
    "Source",
    "Withdrawal",
]

KINDS: dict[str, type[Record]] = {
    cls.kind: cls
    for cls in (
        Compound, CompoundName, Source, Correlation, FixedPoint, PrintedValue, Dataset, Preference, Withdrawal,
        Review, Edition, Keeping, Origin,
    )
}  # fmt: skip
"""Every kind of record, by its name."""

RECORDED = ("compound", "name", "source", "correlation", "fixed-point", "printed-value", "dataset")
"""Kinds that people record; the others follow from what they decide."""

REVIEWED = ("correlation", "fixed-point", "dataset", "preference", "withdrawal")
"""Kinds that can change an answer, and so have a standing."""
