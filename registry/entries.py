"""Stored rows as records with their standing, and all of a compound's together."""

from __future__ import annotations

from collections.abc import Iterator
from typing import Any

from registry.dossier import Dossier, Entry
from registry.records import KINDS, REVIEWED, Record, Review
from registry.store.library_file import View
from registry.store.reading import Row

__all__ = ["entry_of", "in_force", "read_dossier", "with_standing"]


def entry_of(row: Row, standing: str = "", note: str = "", reviewed_in: int = 0) -> Entry[Any]:
    """A stored row as an entry."""
    record: Record = KINDS[row.kind].restore(row.key, row.content)
    return Entry(record, row.revision, row.change, standing, note, reviewed_in)


def with_standing(view: View, rows: list[Row]) -> list[Entry[Any]]:
    """Entries with the standing that reviews give them; a draft where none does."""
    keys = {(row.kind, row.key, row.revision): Review.key_for(row.kind, row.key, row.revision) for row in rows}
    wanted = [key for (kind, _, _), key in keys.items() if kind in REVIEWED]
    reviews = {row.key: row for row in view.current("review", wanted)}

    def enter(row: Row) -> Entry[Any]:
        if row.kind not in REVIEWED:
            return entry_of(row)
        review = reviews.get(keys[row.kind, row.key, row.revision])
        if review is None:
            return entry_of(row, "draft")
        return entry_of(row, review.content["standing"], review.content.get("note", ""), review.change)

    return [enter(row) for row in rows]


def in_force(entries: list[Entry[Any]]) -> Iterator[Entry[Any]]:
    """For each key the revision that counts.

    The newest accepted one stays in force while a newer draft waits or was
    declined; a withdrawal ends it.
    """
    by_key: dict[tuple[str, str], list[Entry[Any]]] = {}
    for entry in entries:
        by_key.setdefault((entry.record.kind, entry.key), []).append(entry)
    for revisions in by_key.values():
        revisions.sort(key=lambda entry: entry.revision, reverse=True)
        decided = (entry for entry in revisions if entry.standing in ("accepted", "withdrawn", ""))
        yield next(decided, revisions[0])


def read_dossier(view: View, key: str) -> Dossier:
    """Everything recorded about one compound, each key in the revision that counts."""
    compound = entry_of(view.current("compound", [key])[0])
    entries = list(in_force(with_standing(view, view.linked("compound", key))))
    of_kind: dict[str, list[Any]] = {kind: [] for kind in KINDS}
    for entry in entries:
        of_kind[entry.record.kind].append(entry)
    keys = {entry.key for entry in of_kind["correlation"]}
    preferences = [
        entry
        for entry in in_force(with_standing(view, view.revisions("preference")))
        if {entry.record.correlation, entry.record.over} & keys
    ]
    cited = {entry.record.source for kind in ("correlation", "fixed-point", "dataset") for entry in of_kind[kind]}
    sources = {row.key: KINDS["source"].restore(row.key, row.content) for row in view.current("source", cited)}
    return Dossier(
        compound, tuple(of_kind["correlation"]), tuple(of_kind["fixed-point"]), tuple(of_kind["dataset"]),
        tuple(preferences), sources, view.position,  # type: ignore[arg-type]
    )  # fmt: skip
