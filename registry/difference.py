"""What differs between two positions, or would with a revision: in numbers, and record by record."""

from __future__ import annotations

import dataclasses
from collections.abc import Callable
from dataclasses import dataclass
from typing import Any

from registry.chronicle import (
    FieldChange,
    RecordChange,
    compare_contents,
    find_affected,
    find_touched,
    list_record_changes,
)
from registry.comparison import NumberChange, compare_curves, compare_dossiers
from registry.curve import Curve
from registry.deviation import Deviation
from registry.dossier import Dossier, Entry
from registry.entries import read_dossier
from registry.properties import PROPERTIES
from registry.records import REVIEWED, Compound, Correlation, Record
from registry.store.library_file import View

__all__ = ["Difference", "Preview", "find_difference", "find_preview"]


@dataclass(frozen=True)
class Difference:
    """What differs between two positions.

    Attributes
    ----------
    before, after : int
        The positions.
    numbers : tuple of NumberChange
        Where answers differ, by compound, property and temperature.
    records : tuple of RecordChange
        The records that differ, by kind and key.
    """

    before: int
    after: int
    numbers: tuple[NumberChange, ...]
    records: tuple[RecordChange, ...]


@dataclass(frozen=True)
class Preview:
    """What a revision would change, were it accepted.

    Attributes
    ----------
    before : Entry
        The newest revision so far.
    fields : tuple of FieldChange
        What differs.
    own : Deviation or None
        For a correlation, how far its values move over the window that both
        share; None where they share none.
    numbers : tuple of NumberChange
        Where the answers of the library would differ.
    """

    before: Entry[Any]
    fields: tuple[FieldChange, ...]
    own: Deviation | None
    numbers: tuple[NumberChange, ...]


def find_difference(before: View, after: View) -> Difference:
    """What differs between two positions of a library, each as a view."""
    keys = find_touched(before, after)
    numbers = [
        change
        for compound in find_affected(before, after, keys)
        for change in compare_dossiers(_read_dossier(before, compound), _read_dossier(after, compound))
    ]
    records = list_record_changes(before, after, keys)
    return Difference(before.position, after.position, tuple(numbers), tuple(records))


def _read_dossier(view: View, compound: str) -> Dossier | None:
    return read_dossier(view, compound) if view.current("compound", [compound]) else None


def find_preview(before: Entry[Any], record: Record, find_dossier: Callable[[str], Dossier]) -> Preview:
    """What a revision would change, were it accepted.

    Parameters
    ----------
    before : Entry
        The newest revision so far.
    record : Record
        As it would be.
    find_dossier : callable
        ``find_dossier(compound)`` gives all that is recorded about it.
    """
    fields = compare_contents(before.record.content(), record.content())
    compound = record.key if isinstance(record, Compound) else getattr(record, "compound", "")
    if not compound or not (record.kind in REVIEWED or isinstance(record, Compound)):
        return Preview(before, fields, None, ())
    dossier = find_dossier(compound)
    supposed = _suppose(dossier, Entry(record, before.revision + 1, 0, "accepted"))
    own = None
    if isinstance(record, Correlation):
        mass = dossier.compound.record.grams_per_mole()
        curves = Curve.of(before.record, mass), Curve.of(record, mass)
        own = compare_curves(*curves, positive=PROPERTIES[record.property].positive)
    return Preview(before, fields, own, compare_dossiers(dossier, supposed))


_PLACES = {"correlation": "correlations", "fixed-point": "fixed_points", "dataset": "datasets"}


def _suppose(dossier: Dossier, entry: Entry[Any]) -> Dossier:
    """A dossier in which an entry takes the place of the one under its key."""
    if isinstance(entry.record, Compound):
        return dataclasses.replace(dossier, compound=entry)
    name = _PLACES[entry.record.kind]
    others = [other for other in getattr(dossier, name) if other.key != entry.key]
    changed: dict[str, Any] = {name: tuple(sorted([*others, entry], key=lambda each: each.key))}
    return dataclasses.replace(dossier, **changed)
