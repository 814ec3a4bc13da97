"""Reviews, withdrawals, preferences, who keeps the library: who may decide what, and what is appended."""

from __future__ import annotations

import unicodedata
from typing import Any

from registry.admission import check_kinship, find_cycle
from registry.canonical import digest
from registry.cells import KEY
from registry.dossier import Entry
from registry.errors import BadInput, InvalidRecord, UnknownKey, quote
from registry.holdings import Holdings, check_expected
from registry.naming import join_names, nearest_names, word_kind
from registry.plan import Plan, draft_of
from registry.records import RECORDED, REVIEWED, Keeping, Preference, Record, Review, Withdrawal
from registry.store.history import Draft, fold_term

__all__ = [
    "accept_at_once",
    "judge",
    "plan_keeping",
    "plan_preference",
    "plan_review",
    "plan_withdrawal",
    "propose",
    "propose_withdrawal",
    "withdraw_at_once",
]

WITHDRAWN = ("correlation", "fixed-point", "dataset", "preference", "source")
"""Kinds that can be withdrawn."""


def judge(record: Record, revision: int, standing: str, note: str) -> Draft:
    """The review that gives a revision a standing."""
    review = Review(of_kind=record.kind, of_key=record.key, of_revision=str(revision), standing=standing, note=note)
    return draft_of(review, review.effects(record.content()))


def propose_withdrawal(record: Record, revision: int, cause: str, reason: str) -> Draft:
    """The withdrawal of a revision, which waits for review."""
    return draft_of(_withdraw(record, revision, cause, reason))


def _withdraw(record: Record, revision: int, cause: str, reason: str) -> Withdrawal:
    return Withdrawal(of_kind=record.kind, of_key=record.key, of_revision=str(revision), cause=cause, reason=reason)


def withdraw_at_once(holdings: Holdings, record: Record, revision: int, cause: str, reason: str) -> list[Draft]:
    """A withdrawal together with its acceptance."""
    withdrawal = _withdraw(record, revision, cause, reason)
    return list(propose(withdrawal, _next_revision(holdings, withdrawal), accept=True).drafts)


def propose(record: Record, revision: int, *, accept: bool) -> Plan:
    """A record, and with it its acceptance if that is wanted and it is reviewed at all."""
    accepted = [judge(record, revision, "accepted", "")] if accept and record.kind in REVIEWED else []
    return Plan((draft_of(record), *accepted), record, revision)


def _next_revision(holdings: Holdings, record: Record) -> int:
    """The revision that a record would become."""
    state = holdings.state(record.kind, record.key)
    return state.newest.revision + 1 if state is not None else 1


def plan_keeping(holdings: Holdings, kept_by: str) -> Plan | None:
    """Who keeps the library, ``team`` or ``one-person``; None if it says so already."""
    if _kept_by(holdings) == kept_by:
        return None
    name, started_at = holdings.view.identity()
    record = Keeping(name=name, started_at=started_at, kept_by=kept_by)
    return Plan((draft_of(record),), record, _next_revision(holdings, record))


def _kept_by(holdings: Holdings) -> str:
    """Who keeps the library, as far as it says so."""
    record = holdings.record(Keeping.kind, Keeping.kind)
    return record.kept_by if isinstance(record, Keeping) else ""


def _is_solo(holdings: Holdings) -> bool:
    """True if the library says that one person keeps it."""
    return _kept_by(holdings) == "one-person"


def _check_reviewer(holdings: Holdings, author: str, reviewer: str, what: str) -> None:
    """Nobody reviews what they recorded themselves, but where one person keeps the library."""
    if _fold_name(author) == _fold_name(reviewer) and not _is_solo(holdings):
        raise BadInput(
            f"{what} was recorded by {author}, and somebody else must review it. "
            "A library that one person keeps says so once: `rangebook start --solo`."
        )


def _fold_name(name: str) -> str:
    """A person's name as it is compared: case, runs and kinds of blanks and widths of letters aside."""
    return fold_term(unicodedata.normalize("NFKC", fold_term(name)))


def plan_review(
    holdings: Holdings, key: str, standing: str, note: str, reviewer: str, *, kind: str = "",
    expect: int | None = None, again: bool = False,
) -> Plan:  # fmt: skip
    """The review of what waits under a key; `again` for what was declined or withdrawn.

    Raises
    ------
    UnknownKey
        If nothing is recorded under the key.
    BadInput
        If nothing waits there, more than one record does, or the reviewer
        recorded it.
    RevisedMeanwhile
        If the revision that waits is not the one expected.
    """
    entry = _find_reviewable(holdings, key, standing, kind, again)
    record = entry.record
    if expect is not None and entry.revision != expect:
        before = next((r for r in holdings.view.revisions(record.kind, record.key) if r.revision == expect), None)
        check_expected(entry, expect, before.content if before else {})
    what = f"Revision {entry.revision} of the {word_kind(record.kind)} {record.key}"
    _check_reviewer(holdings, holdings.view.change(entry.change).author, reviewer, what)
    if isinstance(record, Preference) and standing == "accepted":
        _check_round(holdings, record)
    if isinstance(record, Withdrawal) and standing == "accepted":
        _check_aim(holdings, record)
    return Plan((judge(record, entry.revision, standing, note),), record, entry.revision)


def _check_aim(holdings: Holdings, withdrawal: Withdrawal) -> None:
    """What was accepted after the revision to be withdrawn is not taken out with it in silence."""
    state = holdings.state(withdrawal.of_kind, withdrawal.of_key)
    decided = state.decision.revision if state is not None and state.decision is not None else 0
    if decided > int(withdrawal.of_revision):
        raise BadInput(
            f"The withdrawal is of revision {withdrawal.of_revision} of the {withdrawal.of_kind} {withdrawal.of_key}; "
            f"revision {decided} was decided on since. Decline it; `rangebook withdraw` takes out what is in force."
        )


def _find_reviewable(holdings: Holdings, key: str, standing: str, kind: str, again: bool) -> Entry[Any]:
    """What waits under a key; what was declined or withdrawn, to be accepted again."""
    found = [entry for entry in _entries_under(holdings, key) if kind in ("", entry.record.kind)]
    if not found:
        raise _miss(holdings, key, kind, "reviewed", "counts as soon as it is recorded")
    waiting = [entry for entry in found if entry.standing == "draft"]
    ended = [entry for entry in found if entry.standing in ("declined", "withdrawn")]
    if not waiting and again and standing == "accepted":
        # a withdrawal that was accepted is not reviewed again: what it withdrew is
        waiting = [entry for entry in ended if entry.record.kind != "withdrawal" or len(ended) == 1]
    if len(waiting) == 1:
        return waiting[0]
    if waiting:
        several = join_names((f"the {word_kind(entry.record.kind)} {entry.key}" for entry in waiting), "and")
        raise BadInput(f"Both wait for review: {several}. Say which with --kind, or give the key of the withdrawal.")
    shown = join_names(
        (f"revision {e.revision} of the {word_kind(e.record.kind)} {e.key} is {e.standing}" for e in found), "and"
    )
    hint = ""
    if standing == "declined":
        hint = " `rangebook withdraw` takes out what is in force."
    elif ended:
        hint = " To accept after all what was declined or withdrawn, add --again."
    raise BadInput(f"Nothing under {quote(key)} waits for review: {shown}.{hint}")


def _miss(holdings: Holdings, key: str, kind: str, done: str, instead: str) -> BadInput:
    """What to say where nothing under a key can be reviewed or withdrawn: it is of another kind, or not there."""
    for each in [kind] if kind else RECORDED:
        if holdings.state(each, key) is not None:
            return BadInput(f"The {word_kind(each)} {key} is not {done}: it {instead}.")
    recorded = {row.key for each in ([kind] if kind else WITHDRAWN) for row in holdings.view.kind(each)}
    return UnknownKey(kind or "record", key, nearest=nearest_names(key, recorded))


def _entries_under(holdings: Holdings, key: str) -> list[Entry[Any]]:
    """The newest revision of everything with a standing that a key may mean."""
    kinds = [kind for kind in REVIEWED if kind != "withdrawal"]
    names = [*((kind, key) for kind in kinds), ("withdrawal", key)]
    names += [("withdrawal", Withdrawal.key_for(kind, key)) for kind in WITHDRAWN]
    found = [entry for name in names if (entry := holdings.newest(*name)) is not None]
    source = holdings.newest("source", key)
    return [*found, source] if source is not None and source.standing == "withdrawn" else found


def plan_withdrawal(
    holdings: Holdings, key: str, cause: str, reason: str, *, kind: str = "", accept: bool = False
) -> Plan:
    """The withdrawal of what counts under a key.

    Raises
    ------
    UnknownKey
        If nothing that can be withdrawn is recorded under the key.
    BadInput
        If several records have the key, or it is withdrawn already, or its
        withdrawal waits for review.
    """
    kinds = [each for each in WITHDRAWN if kind in ("", each)]
    found = [entry for each in kinds if (entry := holdings.counting(each, key)) is not None]
    if not found:
        raise _miss(holdings, key, kind, "withdrawn", "is corrected by `rangebook revise`")
    if len(found) > 1:
        raise BadInput(f"{quote(key)} may be a {join_names(e.record.kind for e in found)}. Say which with --kind.")
    entry = found[0]
    record = entry.record
    if entry.standing == "withdrawn":
        raise BadInput(f"The {word_kind(record.kind)} {key} is withdrawn already: {entry.standing_note}")
    before = holdings.newest("withdrawal", Withdrawal.key_for(record.kind, key))
    if before is not None and before.standing == "draft":
        raise BadInput(
            f"A withdrawal of the {word_kind(record.kind)} {key} waits for review already: {before.record.reason}"
        )
    withdrawal = _withdraw(record, entry.revision, cause, reason)
    return propose(withdrawal, _next_revision(holdings, withdrawal), accept=accept)


def plan_preference(holdings: Holdings, key: str, over: str, reason: str, *, accept: bool = False) -> Plan:
    """A steward's preference of one correlation over another.

    Raises
    ------
    UnknownKey
        If one of them is not recorded.
    BadInput
        If the two are for different things, the preference is recorded
        already, or it would close a circle.
    """
    for each in (key, over):
        if holdings.state("correlation", each) is None:
            raise UnknownKey("correlation", each)
    record = Preference(key=_name_preference(key, over), correlation=key, over=over, reason=reason)
    if problems := list(check_kinship(record, holdings.record)):
        raise InvalidRecord(record.kind, record.key, problems)
    before = holdings.newest(record.kind, record.key)
    if before is not None and before.standing in ("accepted", "draft"):
        raise BadInput(f"{key} is preferred over {over} already ({before.standing}): {before.record.reason}")
    _check_round(holdings, record)
    return propose(record, _next_revision(holdings, record), accept=accept)


def _check_round(holdings: Holdings, record: Preference) -> None:
    pairs = holdings.preferences([record.correlation, record.over]) | {record.pair}
    if cycle := find_cycle(sorted(pairs)):
        raise BadInput(
            f"The preferences would go round in a circle: {' over '.join(cycle)}. Withdraw one of them first."
        )


def _name_preference(key: str, over: str) -> str:
    """A key for a pair; where both are long, cut, with so much of a digest that two pairs never share it."""
    name = f"{key}-over-{over}"
    if len(name) <= KEY.limit:
        return name
    mark = digest(name.encode())[:16]
    return f"{name[: KEY.limit - 1 - len(mark)]}-{mark}"


def accept_at_once(holdings: Holdings, wanted: bool) -> bool:
    """Whether what is recorded is accepted with it, which only the single keeper of a library may ask for."""
    if wanted and not _is_solo(holdings):
        raise BadInput(
            "Recording and accepting in one go is for a library that one person keeps (`rangebook start --solo`). "
            "Here somebody else reviews it: `rangebook review`."
        )
    return wanted
