"""From a package to what must be appended: only what is new or different."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from registry.curve import Curve
from registry.errors import CellProblem, InvalidPackage
from registry.exchange.loading import Item, find_cycle, read_items
from registry.records import KINDS, REVIEWED, Compound, Correlation, Preference, Record, Review
from registry.store.history import Draft

__all__ = ["LoadPlan", "plan_load"]


@dataclass(frozen=True)
class LoadPlan:
    """What a load would append.

    Attributes
    ----------
    drafts : tuple of Draft
        The records, in order.
    counts : mapping
        ``added``, ``revised``, ``reviewed``, ``unchanged``.
    changed : tuple of str
        What is revised or reviewed, a line each.
    """

    drafts: tuple[Draft, ...]
    counts: dict[str, int]
    changed: tuple[str, ...]


def plan_load(view: Any, package: Path) -> LoadPlan:
    """Read a package and compare it with the library.

    Parameters
    ----------
    view : View
        The library, inside a write transaction.
    package : Path
        The package.

    Returns
    -------
    LoadPlan
        Empty if everything is there already.
    """
    existing = _Existing(view)
    items = read_items(package, existing.record)
    _check_preferences(items, existing, package)
    _check_usable(items, existing, package)
    counts = Counter({"added": 0, "revised": 0, "reviewed": 0, "unchanged": 0})
    changed: list[str] = []
    drafts = [draft for item in items for draft in _plan_item(item, existing, counts, changed)]
    return LoadPlan(tuple(drafts), dict(counts), tuple(changed))


class _Existing:
    """What the library has, read kind by kind when first asked for."""

    def __init__(self, view: Any) -> None:
        self._view = view
        self._rows: dict[str, dict[str, Any]] = {}

    def row(self, kind: str, key: str) -> Any:
        """The stored row, or None."""
        if kind not in self._rows:
            self._rows[kind] = {row.key: row for row in self._view.kind(kind)}
        return self._rows[kind].get(key)

    def record(self, kind: str, key: str) -> Record | None:
        """The record, or None."""
        row = self.row(kind, key)
        return KINDS[kind].restore(row.key, row.content) if row is not None else None

    def standing(self, kind: str, key: str, revision: int) -> tuple[str, str]:
        """Standing and note of a revision; a draft where no review says otherwise."""
        row = self.row("review", Review.key_for(kind, key, revision))
        return (row.content["standing"], row.content.get("note", "")) if row is not None else ("draft", "")

    def preferences(self) -> Iterator[tuple[str, Preference, str]]:
        """Key, record and standing of every preference."""
        self.row("preference", "")
        for key, row in self._rows["preference"].items():
            record = Preference.restore(key, row.content)
            yield key, record, self.standing("preference", key, row.revision)[0]


def _plan_item(item: Item, existing: _Existing, counts: Counter[str], told: list[str]) -> Iterator[Draft]:
    record = item.record
    row = existing.row(record.kind, record.key)
    content = record.content()
    revision = row.revision if row is not None else 0
    changed = row is None or row.content != content
    if changed:
        counts["added" if row is None else "revised"] += 1
        if row is not None:
            fields = [name for name in {**row.content, **content} if row.content.get(name) != content.get(name)]
            told.append(f"{record.kind} {record.key}: {', '.join(sorted(fields))} revised")
        revision += 1
        yield draft_of(record)
    reviewed = False
    if record.kind in REVIEWED:
        before = ("draft", "") if changed else existing.standing(record.kind, record.key, revision)
        reviewed = (item.standing, item.standing_note) != before
        if reviewed and not changed:
            told.append(f"{record.kind} {record.key}: {before[0]} -> {item.standing}")
        if reviewed:
            review = Review(
                of_kind=record.kind, of_key=record.key, of_revision=str(revision),
                standing=item.standing, note=item.standing_note,
            )  # fmt: skip
            yield draft_of(review)
    if not changed:
        counts["reviewed" if reviewed else "unchanged"] += 1


def draft_of(record: Record) -> Draft:
    """A record as the store appends it."""
    return Draft(record.kind, record.key, record.content(), record.references(), record.terms())


def _check_preferences(items: list[Item], existing: _Existing, package: Path) -> None:
    """Refuse preferences that go round in a circle with those already recorded."""
    loaded = {item.record.key: item for item in items if isinstance(item.record, Preference)}
    if not loaded:
        return
    pairs = [(i.record.correlation, i.record.over) for i in loaded.values() if i.standing in ("accepted", "draft")]  # type: ignore[attr-defined]
    pairs += [
        (record.correlation, record.over)
        for key, record, standing in existing.preferences()
        if key not in loaded and standing in ("accepted", "draft")
    ]
    if cycle := find_cycle(iter(pairs)):
        why = f"with those recorded already the preferences go round in a circle: {' over '.join(cycle)}."
        raise InvalidPackage(str(package), [CellProblem("preferences.csv", 0, "", "", why)])


def _check_usable(items: list[Item], existing: _Existing, package: Path) -> None:
    """A correlation gives a value somewhere in its window, and a withdrawal is not taken back in silence."""
    problems: list[CellProblem] = []
    masses = {item.record.key: item.record for item in items if isinstance(item.record, Compound)}
    for item in items:
        record = item.record
        if record.kind in REVIEWED and item.standing == "accepted" and not item.standing_note:
            row = existing.row(record.kind, record.key)
            before = existing.standing(record.kind, record.key, row.revision)[0] if row is not None else ""
            if before in ("withdrawn", "declined"):
                why = f"the library has it {before}; to accept it again say why in standing_note."
                problems.append(CellProblem(item.file, item.line, "standing", "accepted", why))
        if isinstance(record, Correlation):
            compound = masses.get(record.compound) or existing.record("compound", record.compound)
            if isinstance(compound, Compound) and not _has_value(record, compound.grams_per_mole()):
                given = "; ".join(f"{name}={text}" for name, text in record.coefficients.items())
                why = "with these coefficients and units the form gives no usable value anywhere in the window."
                problems.append(CellProblem(item.file, item.line, "coefficients", given, why))
    if problems:
        raise InvalidPackage(str(package), problems)


def _has_value(record: Correlation, molar_mass: float) -> bool:
    curve = Curve.of(record, molar_mass)
    low, high = curve.window
    if not low < high:
        return False
    values = curve.values(np.linspace(low, high, 33))
    return bool((np.isfinite(values) & (values > 0.0)).any())
