"""What became of a record, and what differs between two positions, record by record."""

from __future__ import annotations

import dataclasses
from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from typing import Any

from registry.dossier import Entry
from registry.entries import enter_states, read_origin, word_cause
from registry.records import REVIEWED, Correlation, Preference, Withdrawal
from registry.store.history import Change
from registry.store.library_file import View
from registry.store.reading import Decision
from registry.store.rows import Row

__all__ = [
    "Event",
    "FieldChange",
    "RecordChange",
    "compare_contents",
    "find_affected",
    "find_touched",
    "list_events",
    "list_record_changes",
]

TOLD = (
    "compound", "name", "source", "correlation", "fixed-point", "printed-value", "dataset", "preference", "edition",
    "library",
)  # fmt: skip
"""Kinds that a comparison lists; reviews and withdrawals show in the standing of what they are about."""


Touched = Mapping[str, set[str]]
"""Keys by kind."""


@dataclass(frozen=True)
class FieldChange:
    """One field that differs; an empty text is nothing."""

    name: str
    before: str
    after: str


@dataclass(frozen=True)
class Event:
    """Something that happened to a record.

    Attributes
    ----------
    change : Change
        Who, when and why.
    what : str
        ``recorded``, ``revised``, ``noted``, ``accepted``, ``declined``,
        ``withdrawal proposed``, ``withdrawn``, ``source withdrawn``,
        ``source accepted again``, or a preference with its standing.
    revision : int
        The revision it is about; 0 if it is about none.
    note : str
        What was said.
    fields : tuple of FieldChange
        What a revision changed.
    origin : str
        The library and position it came from, if it came from another one.
    """

    change: Change
    what: str
    revision: int
    note: str = ""
    fields: tuple[FieldChange, ...] = ()
    origin: str = ""


@dataclass(frozen=True)
class RecordChange:
    """A record that differs between two positions.

    Attributes
    ----------
    kind, key : str
        The record.
    what : str
        ``added``, ``removed``, ``revised``, ``withdrawn``, ``accepted``,
        ``declined``, ``draft`` (a revision waits) or ``reinstated``.
    before, after : int
        The revision that counts at either position; 0 where there is none.
    standing_before, standing_after : str
        Its standing there.
    note : str
        What was said with the standing.
    fields : tuple of FieldChange
        What differs between the two.
    """

    kind: str
    key: str
    what: str
    before: int
    after: int
    standing_before: str = ""
    standing_after: str = ""
    note: str = ""
    fields: tuple[FieldChange, ...] = ()


def compare_contents(before: Mapping[str, Any], after: Mapping[str, Any]) -> tuple[FieldChange, ...]:
    """Two contents field by field, coefficients one by one.

    Examples
    --------
    >>> compare_contents({"coefficients": {"A": "8"}}, {"coefficients": {"A": "8.2"}})
    (FieldChange(name='A', before='8', after='8.2'),)
    """
    one, two = dict(_flatten(before)), dict(_flatten(after))
    names = dict.fromkeys([*one, *two])
    return tuple(FieldChange(n, one.get(n, ""), two.get(n, "")) for n in names if one.get(n, "") != two.get(n, ""))


def _flatten(content: Mapping[str, Any]) -> Iterator[tuple[str, str]]:
    for name, value in content.items():
        if isinstance(value, Mapping):
            yield from ((str(inner), str(text)) for inner, text in value.items())
        elif isinstance(value, list):
            yield from ((f"{name[:-1]} {i}", _join_point(point)) for i, point in enumerate(value, 1))
        else:
            yield name, str(value)


def _join_point(point: Mapping[str, str]) -> str:
    return ", ".join(f"{name} {text}" for name, text in point.items())


def list_events(view: View, kind: str, key: str) -> list[Event]:
    """Everything that happened to a record, in order.

    Parameters
    ----------
    view : View
        The library at a position.
    kind, key : str
        The record.

    Returns
    -------
    list of Event
        Its revisions with what they changed, reviews, withdrawals of it and
        of its sources, and preferences that name it.
    """
    revisions = view.revisions(kind, key)
    # what was proposed and decided in one change is told in that order
    events = [*_list_revisions(view, revisions), *_list_proposals(view, kind, key), *_list_words(view, kind, key)]
    if kind in REVIEWED:
        for source in {row.content["source"] for row in revisions if "source" in row.content}:
            events += _list_source_words(view, source)
    if kind == Correlation.kind:
        events += _list_preferences(view, key)
    return sorted(events, key=lambda event: event.change.number)


def _list_revisions(view: View, revisions: list[Row]) -> Iterator[Event]:
    before: Mapping[str, Any] = {}
    for row in revisions:
        fields = compare_contents(before, row.content) if row.revision > 1 else ()
        what = "recorded" if row.revision == 1 else "revised"
        yield Event(view.change(row.change), what, row.revision, fields=fields, origin=_name_origin(view, row.change))
        before = row.content


def _name_origin(view: View, number: int) -> str:
    origin = read_origin(view, number)
    return f"library {origin.library}, change {origin.root.partition(':')[0]}" if origin is not None else ""


def _list_words(view: View, kind: str, key: str) -> Iterator[Event]:
    for decision in view.decisions(kind, key):
        what = "noted" if decision.standing == "draft" else decision.standing
        yield _tell(view, decision, what)


def _tell(view: View, decision: Decision, what: str) -> Event:
    return Event(view.change(decision.change), what, decision.revision, word_cause(decision))


def _list_proposals(view: View, kind: str, key: str) -> Iterator[Event]:
    own = Withdrawal.key_for(kind, key)
    for row in view.revisions("withdrawal", own):
        said = f"{row.content['cause']}: {row.content['reason']}"
        yield Event(view.change(row.change), "withdrawal proposed", int(row.content["of_revision"]), said)
    for decision in view.decisions("withdrawal", own):
        if decision.standing == "declined":
            yield _tell(view, decision, "withdrawal declined")


def _list_source_words(view: View, source: str) -> Iterator[Event]:
    for decision in view.decisions("source", source):
        what = "source withdrawn" if decision.standing == "withdrawn" else "source accepted again"
        yield Event(view.change(decision.change), what, 0, f"{source}: {word_cause(decision)}")


def _list_preferences(view: View, key: str) -> Iterator[Event]:
    for state in view.linked("correlation", [key], Preference.kind):
        row = state.newest
        pair = f"{row.content['correlation']} over {row.content['over']}"
        for one in view.revisions(Preference.kind, row.key):
            yield Event(view.change(one.change), "preference recorded", 0, f"{pair}: {one.content['reason']}")
        for event in _list_proposals(view, Preference.kind, row.key):
            yield dataclasses.replace(event, what=f"preference {event.what}", revision=0, note=f"{pair}: {event.note}")
        for decision in view.decisions(Preference.kind, row.key):
            said = ": ".join(filter(None, (pair, word_cause(decision))))
            yield Event(view.change(decision.change), f"preference {decision.standing}", 0, said)


def list_record_changes(before: View, after: View, keys: Touched) -> list[RecordChange]:
    """What differs between two positions, record by record.

    Parameters
    ----------
    before, after : View
        The library at either position; they may stand in any order.
    keys : mapping
        What `find_touched` gives for them.

    Returns
    -------
    list of RecordChange
        By kind and key.
    """
    found: list[RecordChange] = []
    for kind in TOLD:
        one = {e.key: e for e in _enter(before, kind, keys.get(kind, ()))}
        two = {e.key: e for e in _enter(after, kind, keys.get(kind, ()))}
        for key in sorted({*one, *two}):
            found += _compare_entries(one.get(key), two.get(key))
    return found


def _enter(view: View, kind: str, keys: Any) -> list[Entry[Any]]:
    return enter_states(view, view.states(kind, keys)) if keys else []


def find_touched(before: View, after: View) -> Touched:
    """Every key that the changes between two positions have something to do with, by kind."""
    early, late = sorted((before, after), key=lambda view: view.position)
    keys: dict[str, set[str]] = {}
    for kind, key in late.changed(early.position):
        keys.setdefault(kind, set()).add(key)
    # a review is about a record or a withdrawal, and that is about a record
    for kind in ("review", "withdrawal"):
        for row in late.current(kind, keys.get(kind, ())):
            keys.setdefault(row.content["of_kind"], set()).add(row.content["of_key"])
    for state in late.linked("source", keys.get("source", ())):
        if state.newest.kind in REVIEWED:
            keys.setdefault(state.newest.kind, set()).add(state.newest.key)
    return keys


def _compare_entries(one: Entry[Any] | None, two: Entry[Any] | None) -> Iterator[RecordChange]:
    entry = two or one
    assert entry is not None
    record = entry.record
    before, after = (one.revision if one else 0), (two.revision if two else 0)
    standings = one.standing if one else "", two.standing if two else ""
    waits = two is not None and two.waiting and two.waiting != (one.waiting if one else 0)
    if (before, standings[0]) == (after, standings[1]) and not waits:
        return
    contents = one.record.content() if one else {}, two.record.content() if two else {}
    fields = compare_contents(*contents) if one and two else ()
    said = two.standing_note if two else ""
    if (before, standings[0]) != (after, standings[1]):
        what = _name_change(one, two)
        yield RecordChange(record.kind, record.key, what, before, after, *standings, said, fields)
    if waits and two is not None:
        yield RecordChange(record.kind, record.key, "draft", after, two.waiting, standings[1], "draft")


def _name_change(one: Entry[Any] | None, two: Entry[Any] | None) -> str:
    if one is None:
        return "added"
    if two is None:
        return "removed"
    if two.standing != one.standing and two.standing in ("withdrawn", "declined"):
        return two.standing
    if two.revision != one.revision:
        return "revised"
    return "reinstated" if one.standing in ("withdrawn", "declined") else two.standing


def find_affected(before: View, after: View, keys: Touched) -> list[str]:
    """The compounds whose answers may differ between two positions, by what `find_touched` gives for them."""
    late = max(before, after, key=lambda view: view.position)
    pairs = late.current("preference", keys.get("preference", ()))
    preferred = {row.content["correlation"] for row in pairs}
    found = set(keys.get("compound", ()))
    for kind, more in (("correlation", preferred), ("fixed-point", set()), ("dataset", set())):
        found |= {row.content["compound"] for row in late.current(kind, keys.get(kind, set()) | more)}
    return sorted(found)
