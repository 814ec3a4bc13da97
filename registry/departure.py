"""From a library to what a package holds: all that counts, or what is new since a position."""

from __future__ import annotations

from collections.abc import Iterable
from typing import Any

from registry.dossier import Entry
from registry.editions import Position, find_position, root_at
from registry.entries import enter_all, enter_newest, enter_states, rest_on, restore, withdrawn_sources, word_cause
from registry.exchange.layout import PACKED
from registry.exchange.provenance import Provenance, digest_content
from registry.records import Source, Withdrawal
from registry.store.library_file import View
from registry.store.reading import Decision

__all__ = ["select_all", "select_since"]

Names = set[tuple[str, str]]


def select_all(view: View) -> list[Entry[Any]]:
    """Everything, each key in the revision that counts."""
    return [entry for kind in PACKED for entry in enter_all(view, kind)]


def select_since(view: View, since: Position) -> tuple[list[Entry[Any]], Provenance]:
    """What was recorded, revised, reviewed or withdrawn after a position.

    Parameters
    ----------
    view : View
        The library.
    since : str, int or date
        An edition, a change or a date.

    Returns
    -------
    list of Entry
        Each key in the revision that counts; where that is as it was, in the
        draft that waits over it. With a source that was withdrawn since, or
        accepted again, goes everything that rests on it.
    Provenance
        What lets another library tell its own revisions from these.
    """
    then = view.at(find_position(view, since))
    touched, judged = _find_touched(view, then.position)
    names = touched | {(entry.record.kind, entry.key) for entry in rest_on(view, judged)}
    before = {(entry.record.kind, entry.key): entry for entry in _enter(then, names)}
    entries = [_choose_new(view, entry, before.get((entry.record.kind, entry.key))) for entry in _enter(view, names)]
    bases: dict[str, dict[str, str]] = {}
    earlier: dict[str, dict[str, list[str]]] = {}
    for (kind, key), entry in before.items():
        bases.setdefault(kind, {})[key] = digest_content(entry.record.content())
    for entry in entries:
        rows = view.revisions(entry.record.kind, entry.key)
        if digests := [digest_content(row.content) for row in rows if row.revision < entry.revision]:
            earlier.setdefault(entry.record.kind, {})[entry.key] = digests
    name, _ = view.identity()
    withdrawn = _find_withdrawn(view, entries, judged)
    return entries, Provenance(
        name, root_at(view, view.position), str(since), root_at(view, then.position), bases, earlier, withdrawn
    )


def _choose_new(view: View, entry: Entry[Any], before: Entry[Any] | None) -> Entry[Any]:
    """What is new of a key: the revision that counts, or the draft over it if that counted then already."""
    if not entry.waiting or before is None or (before.revision, before.standing) != (entry.revision, entry.standing):
        return entry
    return enter_newest(view.states(entry.record.kind, [entry.key])[0])


def _find_touched(view: View, since: int) -> tuple[Names, set[str]]:
    """What changes after a position are about; and the sources among it that were judged."""
    added = view.changed(since)
    touched = {(kind, key) for kind, key in added if kind in PACKED}
    aims = {_aim_of(row.content) for row in view.current("review", [key for kind, key in added if kind == "review"])}
    return touched | aims, {key for kind, key in aims if kind == Source.kind}


def _aim_of(review: dict[str, Any]) -> tuple[str, str]:
    """What a review is about in the end: that of a withdrawal, what is withdrawn."""
    kind, key = review["of_kind"], review["of_key"]
    if kind == Withdrawal.kind:
        _, kind, key = key.split(":", 2)
    return kind, key


def _enter(view: View, names: Iterable[tuple[str, str]]) -> list[Entry[Any]]:
    of_kind = {kind: [key for each, key in names if each == kind] for kind in PACKED}
    return [entry for kind, keys in of_kind.items() for entry in enter_states(view, view.states(kind, keys))]


def _find_withdrawn(view: View, entries: list[Entry[Any]], judged: set[str]) -> dict[str, tuple[str, str]]:
    """The withdrawn sources that rows rest on, with cause and reason."""
    cited = {entry.record.source for entry in entries if entry.standing and hasattr(entry.record, "source")}
    withdrawn = withdrawn_sources(view.states("source", cited | judged))
    return {key: (_word_kind(decision), word_cause(decision)) for key, decision in withdrawn.items()}


def _word_kind(decision: Decision) -> str:
    record = restore(decision.cause)
    return record.cause if isinstance(record, Withdrawal) else "other"
