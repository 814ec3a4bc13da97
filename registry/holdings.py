"""What a library has under a key, looked at while something is about to be recorded."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from typing import Any

from registry.dossier import Entry
from registry.entries import enter_in_force, enter_newest, follow_source, withdrawn_sources
from registry.errors import BadInput, RevisedMeanwhile
from registry.naming import word_kind
from registry.records import Record
from registry.store.library_file import View
from registry.store.reading import State

__all__ = ["Holdings", "check_expected"]

Pair = tuple[str, str]


class Holdings:
    """The states of keys, read when first asked for.

    Parameters
    ----------
    view : View
        The library, within one transaction.
    """

    def __init__(self, view: View) -> None:
        self.view = view
        self._states: dict[tuple[str, str], State | None] = {}

    def state(self, kind: str, key: str) -> State | None:
        """Where a key stands, or None if nothing is recorded under it."""
        if (kind, key) not in self._states:
            self._states[kind, key] = next(iter(self.view.states(kind, [key])), None)
        return self._states[kind, key]

    def newest(self, kind: str, key: str) -> Entry[Any] | None:
        """The newest revision, or None."""
        state = self.state(kind, key)
        return enter_newest(state) if state is not None else None

    def counting(self, kind: str, key: str) -> Entry[Any] | None:
        """The revision that counts, or None."""
        state = self.state(kind, key)
        return enter_in_force(state) if state is not None else None

    def follow_source(self, entry: Entry[Any]) -> Entry[Any]:
        """An entry as it stands with its source: withdrawn, if that is."""
        state = self.state("source", getattr(entry.record, "source", ""))
        return follow_source(entry, withdrawn_sources([state])) if state is not None else entry

    def record(self, kind: str, key: str) -> Record | None:
        """The newest revision's record, or None."""
        entry = self.newest(kind, key)
        return entry.record if entry is not None else None

    def preferences(self, keys: Iterable[str], ended: Sequence[str] = ()) -> set[Pair]:
        """The preferences that count or wait among all that these correlations are chained to.

        Parameters
        ----------
        keys : iterable of str
            Correlations.
        ended : sequence of str
            Keys of preferences whose revisions no longer count.

        Returns
        -------
        set of (str, str)
            Key, and key it is preferred over.
        """
        found: set[Pair] = set()
        seen: set[str] = set()
        ahead = set(keys)
        while ahead:
            seen |= ahead
            near: set[Pair] = set()
            for state in self.view.linked("correlation", ahead, "preference"):
                counting, newest = enter_in_force(state), enter_newest(state)
                if counting.key not in ended:
                    near |= {e.record.pair for e in (counting, newest) if e.standing in ("accepted", "draft")}
            found |= near
            ahead = {key for pair in near for key in pair} - seen
        return found


def check_expected(newest: Entry[Any], expect: int | None, mine: Mapping[str, object]) -> None:
    """What was made from a revision is recorded only while that is the newest.

    Parameters
    ----------
    newest : Entry
        The newest revision.
    expect : int or None
        The revision it was made from; None checks nothing.
    mine : mapping
        What is to be recorded.

    Raises
    ------
    BadInput
        If there never was such a revision.
    RevisedMeanwhile
        If there is a newer one.
    """
    record = newest.record
    if expect is None or expect == newest.revision:
        return
    if not 0 < expect < newest.revision:
        raise BadInput(
            f"The {word_kind(record.kind)} {record.key} has no revision {expect}; its newest is revision "
            f"{newest.revision}. `rangebook history {record.key}` lists them."
        )
    raise RevisedMeanwhile(record.kind, record.key, expect, newest.revision, mine, record.content())
