"""Records as a person reads them: everything recorded, as printed."""

from __future__ import annotations

import dataclasses
from typing import Any

from registry.archive import Archive
from registry.cli.screen import emphasize, name_past, print_facts, print_table, say
from registry.dossier import Entry
from registry.exchange.coefficients import join_coefficients
from registry.forms.catalogue import FORMS
from registry.moments import show_time
from registry.naming import word_kind
from registry.records import Correlation, Dataset, FixedPoint, PrintedValue, Record, Source
from registry.store.history import Change

__all__ = ["print_record"]


def print_record(
    book: Archive, label: str, entry: Entry[Any], related: list[Entry[Any]], changes: dict[int, Change]
) -> None:
    """A record, who recorded it, and what refers to it."""
    record = entry.record
    standing = f", {entry.standing}" if entry.standing else ""
    say(f"{emphasize(record.key)}: {word_kind(record.kind)}, revision {entry.revision}{standing}{name_past(label)}")
    source = getattr(record, "source", "")
    print_facts(
        [
            *_facts(record),
            ("citation", book.source_citation(source) if source else ""),
            ("review", _word_review(entry, changes)),
            ("recorded", _word_change(changes[entry.change])),
            ("waiting", f"revision {entry.waiting} waits for review" if entry.waiting else ""),
        ]
    )
    if isinstance(record, Dataset):
        _print_points(record)
    _print_related(record, related)


def _word_change(change: Change) -> str:
    """A change as a line: number, author, time to the second, reason."""
    return f"change {change.number} by {change.author}, {show_time(change.recorded_at)}: {change.reason}"


def _word_review(entry: Entry[Any], changes: dict[int, Change]) -> str:
    if not entry.reviewed_in:
        return ""
    why = entry.standing_note
    note = f" ({why})" if why and why != changes[entry.reviewed_in].reason else ""
    return f"{entry.standing}{note} in {_word_change(changes[entry.reviewed_in])}"


def _facts(record: Record) -> list[tuple[str, str]]:
    """Field by field, as recorded; a correlation shows its equation too."""
    if isinstance(record, Correlation):
        return _correlation_facts(record)
    skipped = {"key", "points"}
    fields = [field.name for field in dataclasses.fields(record) if field.name not in skipped]
    return [(name.replace("_", " "), str(getattr(record, name))) for name in fields]


def _correlation_facts(record: Correlation) -> list[tuple[str, str]]:
    form = FORMS[record.form]
    return [
        ("compound", record.compound),
        ("property", f"{record.property}, {record.phase}"),
        ("form", f"{form.name} ({form.title})"),
        ("equation", form.equation),
        ("coefficients", join_coefficients(record.ordered_coefficients())),
        ("units", f"T in {record.temperature_unit}, value in {record.value_unit}"),
        ("window", f"{record.window_min} to {record.window_max} {record.window_unit} ({record.window_basis})"),
        ("metastable", f"below {record.metastable_below}" if record.metastable_below else ""),
        ("scale", record.temperature_scale),
        ("evidence", record.evidence),
        ("uncertainty", record.uncertainty or "not stated"),
        ("source", record.source),
        ("locator", record.locator),
        ("obtained", record.obtained),
        ("note", record.note),
        ("form by", form.reference),
    ]


def _print_points(record: Dataset) -> None:
    say()
    columns = [
        (record.temperature_unit, [point.temperature for point in record.points]),
        (f"+/- {record.temperature_unit}", [point.temperature_uncertainty for point in record.points]),
        (record.value_unit, [point.value for point in record.points]),
        (f"+/- {record.value_unit}", [point.value_uncertainty for point in record.points]),
        ("note", [point.note for point in record.points]),
    ]
    filled = [(header, cells) for header, cells in columns if any(cells)]
    rows = list(zip(*(cells for _, cells in filled), strict=True))
    print_table([header for header, _ in filled], rows, right=(True, True, True, True))


def _print_related(record: Record, related: list[Entry[Any]]) -> None:
    kinds = ("name", "correlation", "fixed-point", "printed-value", "dataset", "preference", "compound")
    for kind in kinds:
        rows = [_related_row(record, entry) for entry in related if entry.record.kind == kind]
        if rows:
            say()
            say(f"  {emphasize(_PLURAL[kind])}")
            print_table(*_layout(kind, rows), indent=4)


_PLURAL = {
    "name": "Also called", "correlation": "Correlations", "fixed-point": "Fixed points", "dataset": "Datasets",
    "printed-value": "Values the source prints for it", "preference": "Preferences",
    "compound": "Compounds that cite it",
}  # fmt: skip


def _related_row(record: Record, entry: Entry[Any]) -> tuple[str, ...]:
    other = entry.record
    if isinstance(other, Correlation):
        window = f"{other.window_min} to {other.window_max} {other.window_unit}"
        what = other.compound if isinstance(record, Source) else other.property
        return (other.key, what, window, other.evidence, other.obtained, entry.standing)
    if isinstance(other, FixedPoint):
        text = f"{other.value} {other.unit}" if other.unit != "1" else other.value
        return (other.key, other.quantity, text, other.obtained, entry.standing, other.qualifier)
    if isinstance(other, PrintedValue):
        at, value = f"{other.temperature} {other.temperature_unit}", f"{other.value} {other.value_unit}"
        return (other.key, at, value, other.obtained)
    if isinstance(other, Dataset):
        return (other.key, other.property, str(len(other.points)), other.evidence, entry.standing)
    if other.kind == "preference":
        return (f"{other.correlation} over {other.over}", entry.standing, other.reason)
    return (other.name,)


def _layout(kind: str, rows: list[tuple[str, ...]]) -> tuple[tuple[str, ...], list[tuple[str, ...]]]:
    headers = {
        "correlation": ("key", "for", "window", "evidence", "obtained", "standing"),
        "fixed-point": ("key", "quantity", "value", "obtained", "standing", "qualifier"),
        "printed-value": ("key", "at", "value", "obtained"),
        "dataset": ("key", "property", "points", "evidence", "standing"),
        "preference": ("preferred", "standing", "reason"),
        "name": ("name",),
        "compound": ("compound",),
    }
    return headers[kind], rows
