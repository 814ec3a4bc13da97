"""Two libraries' revisions of one record: which follows which, and where both went their own way."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from enum import Enum

from registry.errors import BadInput, Clash, quote
from registry.exchange.provenance import Provenance, digest_content
from registry.holdings import Holdings
from registry.records import Record

__all__ = ["Relation", "compare", "describe_clash", "settle"]

ALL = "all"


class Relation(Enum):
    """How a record of a package stands to what the library has."""

    NEW = "new"
    """Nothing is recorded under its key."""
    NEWEST = "newest"
    """The newest revision says the same."""
    COUNTING = "counting"
    """The revision that counts says the same; a newer one waits or was declined."""
    AHEAD = "ahead"
    """It follows the newest revision here."""
    BEHIND = "behind"
    """The revisions here follow it."""
    CLASH = "clash"
    """Both sides have revised the record, each its own way."""
    KEPT = "kept"
    """They have, and what is here shall stay."""


def compare(holdings: Holdings, record: Record, provenance: Provenance) -> Relation:
    """How a record of a package stands to the library.

    Parameters
    ----------
    holdings : Holdings
        The library.
    record : Record
        Of the package.
    provenance : Provenance
        What the package says of the revisions before it.

    Notes
    -----
    Contents are compared, not numbers of revisions: the same revision has
    another number in another library.
    """
    newest = holdings.newest(record.kind, record.key)
    if newest is None:
        return Relation.NEW
    if newest.record == record:
        return Relation.NEWEST
    counting = holdings.counting(record.kind, record.key)
    if counting is not None and counting.record == record:
        return Relation.COUNTING
    base, theirs = provenance.base(record), digest_content(record.content())
    if theirs == base:
        return Relation.BEHIND  # only its standing may have changed there
    ours = [digest_content(row.content) for row in holdings.view.revisions(record.kind, record.key)]
    return _relate(ours, theirs, base, provenance.before(record))


def _relate(ours: Sequence[str], theirs: str, base: str, before: Sequence[str]) -> Relation:
    shared = _last(ours, base)
    if shared == len(ours) - 1:
        return Relation.AHEAD
    # nothing was revised here since a package taken later than the base, or before ever seeing the base
    if ours[-1] in before and (shared < 0 or _last(before, ours[-1]) > _last(before, base)):
        return Relation.AHEAD
    return Relation.BEHIND if _last(ours, theirs) > shared else Relation.CLASH


def _last(digests: Sequence[str], wanted: str) -> int:
    """The place of the last one that is wanted; -1 if there is none."""
    return max((place for place, digest in enumerate(digests) if digest == wanted), default=-1)


def describe_clash(holdings: Holdings, record: Record) -> Clash:
    """Both sides of a conflict, with who recorded the one that is here."""
    newest = holdings.newest(record.kind, record.key)
    assert newest is not None
    change = holdings.view.change(newest.change)
    return Clash(
        record.kind, record.key, newest.record.content(), record.content(), newest.revision, change.author,
        change.recorded_at,
    )  # fmt: skip


def settle(clashes: Sequence[Clash], ours: Iterable[str], theirs: Iterable[str]) -> tuple[list[Clash], set[str]]:
    """What is left of conflicts after somebody said which side counts.

    Parameters
    ----------
    clashes : sequence of Clash
        Every conflict.
    ours, theirs : iterable of str
        Keys, or ``all`` for the rest.

    Returns
    -------
    list of Clash
        Those that nothing was said of.
    set of str
        The keys of those that stay as they are here.

    Raises
    ------
    BadInput
        If a key is no conflict, or is named for both sides.
    """
    mine, other = set(ours), set(theirs)
    keys = {clash.key for clash in clashes}
    if twice := sorted(mine & other):
        raise BadInput(f"{quote(twice[0])} is named for both sides (--ours and --theirs). Say which counts.")
    if unknown := sorted((mine | other) - keys - {ALL}):
        shown = ", ".join(sorted(keys)) or "none"
        raise BadInput(f"{quote(unknown[0])} is no conflict of this package; the conflicts are: {shown}.")
    if ALL in mine:
        mine |= keys - other
    if ALL in other:
        other |= keys - mine
    return [clash for clash in clashes if clash.key not in mine | other], mine
