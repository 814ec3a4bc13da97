"""From a package to what must be appended: only what is new or different."""

from __future__ import annotations

from collections import Counter
from collections.abc import Iterable, Iterator
from dataclasses import dataclass
from pathlib import Path
from typing import Any

import numpy as np

from registry.curve import Curve
from registry.dossier import Entry
from registry.entries import in_force, with_standing
from registry.errors import CellProblem, InvalidPackage
from registry.exchange.loading import Item, read_items
from registry.records import REVIEWED, Compound, Correlation, Preference, Record, Review
from registry.store.history import Draft
from registry.store.library_file import View

__all__ = ["LoadPlan", "plan_load"]

_MAY_COUNT = ("accepted", "draft")


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


def plan_load(view: View, package: Path) -> LoadPlan:
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

    def __init__(self, view: View) -> None:
        self._view = view
        self._entries: dict[str, list[Entry[Any]]] = {}
        self._newest: dict[str, dict[str, Entry[Any]]] = {}
        self._counting: dict[str, dict[str, Entry[Any]]] = {}

    def all(self, kind: str) -> list[Entry[Any]]:
        """Every revision of every record of a kind, with its standing."""
        if kind not in self._entries:
            entries = with_standing(self._view, self._view.revisions(kind))
            self._entries[kind] = entries
            self._newest[kind] = {entry.key: entry for entry in entries}  # revisions come in order
            self._counting[kind] = {entry.key: entry for entry in in_force(entries)}
        return self._entries[kind]

    def newest(self, kind: str, key: str) -> Entry[Any] | None:
        """The newest revision, or None."""
        self.all(kind)
        return self._newest[kind].get(key)

    def counting(self, kind: str, key: str) -> Entry[Any] | None:
        """The revision in force, or None."""
        self.all(kind)
        return self._counting[kind].get(key)

    def record(self, kind: str, key: str) -> Record | None:
        """The newest revision's record, or None."""
        entry = self.newest(kind, key)
        return entry.record if entry is not None else None


def _plan_item(item: Item, existing: _Existing, counts: Counter[str], told: list[str]) -> Iterator[Draft]:
    record = item.record
    newest = existing.newest(record.kind, record.key)
    if newest is None:
        counts["added"] += 1
        yield draft_of(record)
        yield from _review(item, 1, ("draft", ""))
        return
    if newest.record != record:
        counting = existing.counting(record.kind, record.key)
        if counting is not None and (counting.record, _standing(counting)) == (record, _standing(item)):
            counts["unchanged"] += 1  # it is what counts already; the draft over it goes on waiting
            return
        counts["revised"] += 1
        before, after = newest.record.content(), record.content()
        fields = sorted(name for name in {**before, **after} if before.get(name) != after.get(name))
        told.append(f"{record.kind} {record.key}: {', '.join(fields)} revised")
        yield draft_of(record)
        yield from _review(item, newest.revision + 1, ("draft", ""))
        return
    reviews = list(_review(item, newest.revision, _standing(newest)))
    counts["reviewed" if reviews else "unchanged"] += 1
    if reviews:
        told.append(f"{record.kind} {record.key}: {newest.standing} -> {item.standing}")
    yield from reviews


def _standing(of: Item | Entry[Any]) -> tuple[str, str]:
    return of.standing, of.standing_note


def _review(item: Item, revision: int, before: tuple[str, str]) -> Iterator[Draft]:
    """The review that gives a revision its standing, if it has another one so far."""
    if item.record.kind in REVIEWED and _standing(item) != before:
        review = Review(
            of_kind=item.record.kind, of_key=item.record.key, of_revision=str(revision),
            standing=item.standing, note=item.standing_note,
        )  # fmt: skip
        yield draft_of(review)


def draft_of(record: Record) -> Draft:
    """A record as the store appends it."""
    return Draft(record.kind, record.key, record.content(), record.references(), record.terms())


def _check_preferences(items: list[Item], existing: _Existing, package: Path) -> None:
    """Refuse preferences that would go round in a circle, with those recorded and those that wait."""
    loaded = {item.record.key: item for item in items if isinstance(item.record, Preference)}
    if not loaded:
        return
    pairs = {(i.record.correlation, i.record.over) for i in loaded.values() if i.standing in _MAY_COUNT}  # type: ignore[attr-defined]
    for entry in existing.all("preference"):
        item = loaded.get(entry.key)
        # what a load accepts, declines or withdraws ends the revisions before it; a draft does not
        ended = item is not None and item.standing != "draft" and item.standing != "declined"
        counts = existing.counting("preference", entry.key) is entry and entry.standing == "accepted"
        waits = existing.newest("preference", entry.key) is entry and entry.standing == "draft"
        if (counts or waits) and not ended:
            pairs.add((entry.record.correlation, entry.record.over))
    if cycle := find_cycle(sorted(pairs)):
        why = f"the preferences, with those recorded already, go round in a circle: {' over '.join(cycle)}."
        raise InvalidPackage(str(package), [CellProblem("preferences.csv", 0, "", "", why)])


def _check_usable(items: list[Item], existing: _Existing, package: Path) -> None:
    """A correlation gives a value somewhere in its window, and a withdrawal is not taken back in silence."""
    problems: list[CellProblem] = []
    masses = {item.record.key: item.record for item in items if isinstance(item.record, Compound)}
    for item in items:
        record = item.record
        if record.kind in REVIEWED and item.standing == "accepted" and not item.standing_note:
            newest = existing.newest(record.kind, record.key)
            before = newest.standing if newest is not None else ""
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


def find_cycle(pairs: Iterable[tuple[str, str]]) -> list[str]:
    """A chain of preferences that comes back to its start, or an empty list.

    Examples
    --------
    >>> find_cycle([("a", "b"), ("b", "c"), ("c", "a")])
    ['a', 'b', 'c', 'a']
    """
    below: dict[str, list[str]] = {}
    for key, over in pairs:
        below.setdefault(key, []).append(over)
    done: set[str] = set()
    for start in below:
        trail, stack = [start], [iter(below[start])]
        while stack:
            nxt = next(stack[-1], None)
            if nxt is None:
                done.add(trail.pop())
                stack.pop()
            elif nxt in trail:
                return [*trail[trail.index(nxt) :], nxt]
            elif nxt not in done:
                trail.append(nxt)
                stack.append(iter(below.get(nxt, ())))
    return []
