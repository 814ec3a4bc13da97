"""Stored states as records with their standing, and all of a compound's together."""

from __future__ import annotations

import dataclasses
from collections.abc import Collection, Iterable, Mapping
from typing import Any

from registry.cells import LONG
from registry.dossier import Dossier, Entry
from registry.records import KINDS, REVIEWED, Origin, Record, Source
from registry.store.library_file import View
from registry.store.reading import Decision, State
from registry.store.rows import Row

__all__ = [
    "enter_all",
    "enter_in_force",
    "enter_newest",
    "enter_states",
    "follow_source",
    "read_dossier",
    "read_origin",
    "rest_on",
    "restore",
    "withdrawn_sources",
    "word_cause",
    "word_source",
]


def restore(row: Row) -> Any:
    """A stored row as a record."""
    record: Record = KINDS[row.kind].restore(row.key, row.content)
    return record


def word_cause(decision: Decision) -> str:
    """What was said with a decision: the note of a review, the reason of a withdrawal."""
    said: str = decision.cause.content.get("note") or decision.cause.content.get("reason", "")
    return said


def enter_newest(state: State) -> Entry[Any]:
    """The newest revision of a key, whether it counts or waits."""
    newest = state.newest
    if newest.kind not in REVIEWED:
        plain = Entry(restore(newest), newest.revision, newest.change)
        # a source may have been withdrawn
        return _with_decision(newest, state.decision) if state.decision else plain
    latest = state.latest
    if latest is None or latest.revision != newest.revision:
        return Entry(restore(newest), newest.revision, newest.change, "draft")
    return _with_decision(newest, latest)


def _with_decision(row: Row, decision: Decision) -> Entry[Any]:
    said = word_cause(decision)
    return Entry(restore(row), row.revision, row.change, decision.standing, said, decision.change)


def enter_in_force(state: State) -> Entry[Any]:
    """The revision of a key that counts.

    The newest accepted one stays in force while a newer draft waits or was
    declined; a withdrawal ends it. Where nothing was decided yet, the newest.
    """
    newest = enter_newest(state)
    if state.newest.kind not in REVIEWED or state.decided is None or state.decision is None:
        return newest
    waiting = newest.revision if newest.standing == "draft" and newest.revision != state.decided.revision else 0
    return dataclasses.replace(_with_decision(state.decided, state.decision), waiting=waiting)


def enter_states(view: View, states: Iterable[State]) -> list[Entry[Any]]:
    """The revision of each key that counts; what rests on a withdrawn source is withdrawn with it."""
    entries = [enter_in_force(state) for state in states]
    withdrawn = withdrawn_sources(_cited_sources(view, entries))
    return [follow_source(entry, withdrawn) for entry in entries]


def _cited_sources(view: View, entries: Iterable[Entry[Any]]) -> list[State]:
    """The sources of what has a standing, and may lose it with its source."""
    cited = {source for entry in entries if entry.standing and (source := getattr(entry.record, "source", ""))}
    return view.states("source", cited) if cited else []


def withdrawn_sources(states: Iterable[State]) -> Mapping[str, Decision]:
    """The sources among these that are withdrawn, each with the decision."""
    return {
        state.newest.key: state.decision
        for state in states
        if state.decision is not None and state.decision.standing == "withdrawn"
    }


def word_source(source: str, reason: str) -> str:
    """The note of what is withdrawn because its source is, at most as long as a note may be."""
    return LONG.fit(f"its source {source} is withdrawn: {reason}")


def read_origin(view: View, change: int) -> Origin | None:
    """Where the records of a change came from, if another library's package brought them."""
    rows = view.added(change, Origin.kind)
    return restore(rows[0]) if rows else None


def follow_source(entry: Entry[Any], sources: Mapping[str, Decision]) -> Entry[Any]:
    """An entry as it stands with its source: withdrawn, if that is among these."""
    decision = sources.get(getattr(entry.record, "source", ""))
    if decision is None or entry.record.kind not in REVIEWED or entry.standing in ("withdrawn", "declined"):
        return entry
    note = word_source(entry.record.source, word_cause(decision))
    return dataclasses.replace(
        entry, standing="withdrawn", standing_note=note, reviewed_in=decision.change, trial=False
    )


def enter_all(view: View, kind: str) -> list[Entry[Any]]:
    """Every record of a kind, by key, in the revision that counts."""
    return enter_states(view, view.states(kind))


def rest_on(view: View, sources: Collection[str]) -> list[Entry[Any]]:
    """Everything that counts or waits and rests on one of some sources."""
    entries = enter_states(view, view.linked("source", sources))
    return [entry for entry in entries if entry.record.kind in REVIEWED and entry.record.source in sources]


def read_dossier(view: View, key: str, *, drafts: bool = False) -> Dossier:
    """Everything recorded about one compound, each key in the revision that counts.

    Parameters
    ----------
    view : View
        The library at a position.
    key : str
        The key of the compound.
    drafts : bool
        Let the newest draft of a correlation stand for it.
    """
    compound = enter_newest(view.states("compound", [key])[0])
    states = view.linked("compound", [key])
    keys = [state.newest.key for state in states if state.newest.kind == "correlation"]
    states += view.linked("correlation", keys, "preference") if keys else []
    entries = [enter_in_force(state) for state in states]
    if drafts:
        entries = [_let_answer(entry, state) for entry, state in zip(entries, states, strict=True)]
    of_sources = _cited_sources(view, entries)
    withdrawn = withdrawn_sources(of_sources)
    of_kind: dict[str, list[Any]] = {kind: [] for kind in KINDS}
    for entry in entries:
        of_kind[entry.record.kind].append(follow_source(entry, withdrawn))
    sources: dict[str, Source] = {state.newest.key: restore(state.newest) for state in of_sources}
    return Dossier(
        compound, tuple(of_kind["correlation"]), tuple(of_kind["fixed-point"]), tuple(of_kind["dataset"]),
        tuple(of_kind["preference"]), sources, view.position,
    )  # fmt: skip


def _let_answer(entry: Entry[Any], state: State) -> Entry[Any]:
    """A correlation's newest draft in place of what counts, marked as on trial."""
    newest = enter_newest(state)
    if state.newest.kind == "correlation" and newest.standing == "draft":
        return dataclasses.replace(newest, trial=True)
    return entry
