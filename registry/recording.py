"""From a package to what must be appended: only what is new or different."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

from registry.errors import CellProblem, InvalidPackage
from registry.exchange.loading import Item, find_cycle, read_items
from registry.records import KINDS, REVIEWED, Preference, Record, Review
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
    """

    drafts: tuple[Draft, ...]
    counts: dict[str, int]


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
    counts = Counter({"added": 0, "revised": 0, "reviewed": 0, "unchanged": 0})
    drafts = [draft for item in items for draft in _plan_item(item, existing, counts)]
    return LoadPlan(tuple(drafts), dict(counts))


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


def _plan_item(item: Item, existing: _Existing, counts: Counter[str]) -> Iterator[Draft]:
    record = item.record
    row = existing.row(record.kind, record.key)
    content = record.content()
    revision = row.revision if row is not None else 0
    changed = row is None or row.content != content
    if changed:
        counts["added" if row is None else "revised"] += 1
        revision += 1
        yield draft_of(record)
    reviewed = False
    if record.kind in REVIEWED:
        before = ("draft", "") if changed else existing.standing(record.kind, record.key, revision)
        reviewed = (item.standing, item.standing_note) != before
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
