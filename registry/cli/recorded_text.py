"""What a command has recorded, as a line or two."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from registry.cli.screen import print_json, print_table, say
from registry.dossier import Entry
from registry.naming import word_kind
from registry.records import REVIEWED, Preference, Record, Withdrawal
from registry.signature import Recorded

__all__ = ["print_recorded"]


def print_recorded(
    what: str, done: Recorded, as_json: bool, *, told: str = "", resting: Sequence[Entry[Any]] = (),
    waits: bool = False,
) -> None:  # fmt: skip
    """One change: what became of which record, what else it takes along, and what comes next.

    Parameters
    ----------
    what : str
        What became of it, as a participle.
    done : Recorded
        The change.
    as_json : bool
        One JSON object instead of text.
    told : str
        The same in words for people, where a participle is not enough.
    resting : sequence of Entry
        What rests on a source that goes.
    waits : bool
        True if it waits for review.
    """
    if as_json:
        print_json(
            {
                "change": done.change.number, "recorded_at": done.change.recorded_at, "author": done.change.author,
                "kind": done.record.kind, "key": done.record.key, "revision": done.revision, "what": what,
                "waits": waits, "resting": [{"kind": e.record.kind, "key": e.key} for e in resting],
            }
        )  # fmt: skip
        return
    say(f"Change {done.change.number}: {_name(done.record, done.revision)} {told or what}.")
    if resting:
        taken = "go with it once it is reviewed" if waits else "went with it"
        say(f"{len(resting)} {'record rests' if len(resting) == 1 else 'records rest'} on it and {taken}:")
        print_table(("kind", "key", "standing"), [(word_kind(e.record.kind), e.key, e.standing) for e in resting])
    if waits and done.record.kind in REVIEWED:
        say(f"It waits for review: rangebook review {_review_key(done.record)} --accept --note ...")


def _name(record: Record, revision: int) -> str:
    if isinstance(record, Withdrawal):
        return f"the {word_kind(record.of_kind)} {record.of_key}"
    if isinstance(record, Preference):
        return f"{record.correlation} over {record.over}"
    shown = f", revision {revision}," if revision > 1 else ""
    return f"the {word_kind(record.kind)} {record.key}{shown}"


def _review_key(record: Record) -> str:
    return f"{record.of_key} --kind withdrawal" if isinstance(record, Withdrawal) else record.key
