"""Positions by name: editions, changes and dates."""

from __future__ import annotations

import re
from datetime import UTC, date, datetime, timedelta
from operator import index
from typing import Any

from registry import rules
from registry.entries import enter_newest
from registry.errors import BadInput, UnknownKey, quote
from registry.holdings import Holdings
from registry.moments import format_time, show_time
from registry.naming import nearest_names
from registry.plan import Plan, draft_of
from registry.records import Edition
from registry.store.library_file import View

__all__ = ["Position", "find_edition", "find_position", "plan_edition", "root_at"]

Position = int | str | date
"""The name of an edition, the number of a change, or a date (its end, UTC)."""

_DAY = re.compile(r"\d{4}-\d\d-\d\d")
_MOMENT = re.compile(r"\d{4}-\d\d-\d\d[T ]\d\d:\d\d(?::\d\d(?:\.\d{1,6})?)?Z")


def root_at(view: View, size: int) -> str:
    """The root over the first `size` changes, as an auditor notes it: ``size:root``."""
    return f"{size}:{view.root(size).hex()}"


def plan_edition(holdings: Holdings, name: str, note: str) -> Plan:
    """An edition of the newest position.

    Raises
    ------
    InvalidRecord
        If the name or the note cannot be one.
    BadInput
        If there is an edition of that name, case aside.
    """
    view = holdings.view
    record = Edition(
        name=name, position=str(view.position), root=root_at(view, view.position), rules=str(rules.VERSION), note=note
    )
    before = holdings.newest("edition", record.key)
    if before is not None:
        raise BadInput(
            f"There is an edition {before.record.name} already, frozen at change {before.record.position}. "
            "An edition is never moved; choose another name."
        )
    return Plan((draft_of(record),), record, 1)


def find_edition(view: View, name: str) -> Edition:
    """The edition of a name, case aside.

    Raises
    ------
    UnknownKey
        If there is none; carries the nearest names.
    BadInput
        If it stands on rules that this program does not have.
    """
    states = view.states("edition", [name.casefold()])
    if not states:
        names = [row.content["name"] for row in view.kind("edition")]
        raise UnknownKey("edition", name, nearest=nearest_names(name, names) or names[-3:])
    edition: Edition = enter_newest(states[0]).record
    if edition.rules != str(rules.VERSION):
        raise BadInput(
            f"The edition {edition.name} stands on rules {edition.rules}; this program has rules {rules.VERSION} "
            "and would answer differently. Install the rangebook that made it."
        )
    return edition


def find_position(view: View, place: Position) -> int:
    """The number of the change that a name, a number or a date means.

    Parameters
    ----------
    view : View
        The library.
    place : int, str or date
        The number of a change; the name of an edition; a date, which means
        the last change at or before its end, UTC; or a UTC time such as
        ``2026-12-01T12:00Z``.

    Returns
    -------
    int
        A position of the library.

    Raises
    ------
    UnknownKey
        If there is no edition of that name.
    BadInput
        If there is no such change, or nothing was recorded by then.
    """
    if not isinstance(place, str | date):
        return _check_number(view, _as_number(place))
    text = _as_text(place)
    if re.fullmatch(r"\d{1,15}", text, re.ASCII):
        return _check_number(view, int(text))
    if _DAY.fullmatch(text):
        return _find_before(view, text, _read_day(text), timedelta(days=1))
    if _MOMENT.fullmatch(text):
        return _find_before(view, text, _read_moment(text), timedelta(microseconds=1))
    return int(find_edition(view, text).position)


def _as_number(place: Any) -> int:
    try:
        if not isinstance(place, bool):
            return index(place)
    except TypeError:
        pass
    raise BadInput(f"{quote(place)} is no position; an edition, a change or a date is allowed.")


def _as_text(place: str | date) -> str:
    """A place as text; a moment without a time zone is taken as UTC."""
    if isinstance(place, datetime):
        try:
            return format_time(place.astimezone(UTC) if place.tzinfo else place)
        except OverflowError:
            raise BadInput(f"{quote(place.isoformat())} is no time: in UTC it is beyond the year 9999.") from None
    return place if isinstance(place, str) else place.isoformat()


def _check_number(view: View, number: int) -> int:
    if not 1 <= number <= view.position:
        raise BadInput(f"There is no change {number}; the changes are 1 to {view.position}.")
    return number


def _read_day(text: str) -> datetime:
    try:
        return datetime.fromisoformat(text).replace(tzinfo=UTC)
    except ValueError:
        raise BadInput(f"{quote(text)} is no date; a date such as 2026-12-01 is allowed.") from None


def _read_moment(text: str) -> datetime:
    try:
        return datetime.fromisoformat(text)
    except ValueError:
        raise BadInput(f"{quote(text)} is no time; a UTC time such as 2026-12-01T12:00Z is allowed.") from None


def _find_before(view: View, text: str, start: datetime, length: timedelta) -> int:
    """The last change before the end of a day or moment."""
    try:
        bound = start + length
    except OverflowError:  # the last day there is
        bound = datetime.max
    found = view.find_position(format_time(bound))
    if not found:
        raise BadInput(
            f"Nothing was recorded by {text}; the first change is of {show_time(view.change(1).recorded_at)}."
        )
    return found
