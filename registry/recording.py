"""One record, new or revised: what must hold before it is appended."""

from __future__ import annotations

from registry.admission import check_identity, check_kinship, check_references, check_value
from registry.errors import BadInput, InvalidRecord, UnknownKey
from registry.holdings import Holdings, check_expected
from registry.judgement import propose
from registry.naming import word_kind
from registry.plan import Plan
from registry.records import RECORDED, Record

__all__ = ["plan_record", "plan_revision"]


def plan_record(holdings: Holdings, record: Record, *, accept: bool = False) -> Plan:
    """A record under a key that is still free.

    Raises
    ------
    BadInput
        If the key is taken, or records of this kind follow from decisions.
    InvalidRecord
        If the record does not fit the others.
    """
    _check_kind(record)
    taken = holdings.state(record.kind, record.key)
    if taken is not None:
        changed = f" `rangebook revise {record.key}` changes it." if record.kind != "name" else ""
        raise BadInput(
            f"The {word_kind(record.kind)} {record.key} is recorded already, in revision {taken.newest.revision}."
            f"{changed}"
        )
    return _plan(holdings, record, 1, accept)


def plan_revision(holdings: Holdings, record: Record, expect: int | None = None, *, accept: bool = False) -> Plan:
    """A revision of a record.

    Parameters
    ----------
    holdings : Holdings
        The library.
    record : Record
        As it shall be.
    expect : int, optional
        The revision it was made from.
    accept : bool
        Accept it in the same change.

    Raises
    ------
    UnknownKey
        If there is no such record.
    RevisedMeanwhile
        If the newest revision is not the expected one.
    BadInput
        If nothing would change.
    InvalidRecord
        If the record does not fit the others.
    """
    _check_kind(record)
    newest = holdings.newest(record.kind, record.key)
    if newest is None:
        raise UnknownKey(record.kind, record.key)
    check_expected(newest, expect, record.content())
    if newest.record == record:
        raise BadInput(f"The {word_kind(record.kind)} {record.key} is just so already, in revision {newest.revision}.")
    if problems := list(check_identity(record, newest.record)):
        raise InvalidRecord(record.kind, record.key, problems)
    return _plan(holdings, record, newest.revision + 1, accept)


def _check_kind(record: Record) -> None:
    if record.kind not in RECORDED:
        instead = " Withdraw it, and say it anew: `rangebook prefer`." if record.kind == "preference" else ""
        raise BadInput(f"A {record.kind} is not recorded by hand: it follows from what people decide.{instead}")


def _plan(holdings: Holdings, record: Record, revision: int, accept: bool) -> Plan:
    problems = [*check_references(record, holdings.record), *check_kinship(record, holdings.record)]
    if problems := problems or list(check_value(record, holdings.record)):
        raise InvalidRecord(record.kind, record.key, problems)
    return propose(record, revision, accept=accept)
