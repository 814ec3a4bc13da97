"""What follows from the records: the links, terms and standings that a library keeps to find them by."""

from __future__ import annotations

import dataclasses
import json
from collections import Counter
from collections.abc import Callable, Iterable
from typing import Any

from registry.findings import Finding, integer, show, text_of
from registry.records import KINDS, Record, Review, Withdrawal
from registry.records.record import REFERRED
from registry.store.auditing import Audit, ByChange
from registry.store.history import fold_term

__all__ = ["Derivation"]

Report = Callable[[Finding], None]
Aims = tuple[Any, ...]
Stored = tuple[Any, ...]

_COLUMNS = {
    "link": ("change", "kind", "key", "role", "to_kind", "to_key"),
    "term": ("change", "text", "kind", "key"),
    "standing": ("change", "id", "kind", "key", "revision", "standing", "record", "cause"),
}
_ROLES = tuple(sorted(REFERRED.items()))
_FIELDS = tuple(role for role, _ in _ROLES)
_NAMED = frozenset(name for name, cls in KINDS.items() if cls.terms is not Record.terms)
_LINKING = frozenset(
    name
    for name, cls in KINDS.items()
    if any(field.name in REFERRED for field in dataclasses.fields(cls))  # type: ignore[arg-type]
)
_OF_A_REVISION = (Review.kind, Withdrawal.kind)


class Derivation:
    """The derived rows of each change, held against the stored ones.

    Parameters
    ----------
    audit : Audit
        The library.
    revisions : dict
        By kind, the newest revision of every key gone through so far.
    report : callable
        Takes what is found.
    """

    def __init__(self, audit: Audit, revisions: dict[str, dict[str, int]], report: Report) -> None:
        self._audit = audit
        self._revisions = revisions
        self._report = report
        self._expected: dict[str, list[Stored]] = {table: [] for table in _COLUMNS}
        self._tables = [(ByChange(audit.stream(table)), expected, table) for table, expected in self._expected.items()]
        # of each key what it refers to, all revisions together; equal ones are kept once
        self._aims: dict[str, dict[str, Aims]] = {kind: {} for kind in KINDS}
        self._pool: dict[Aims, Aims] = {}
        self._unresolved: list[tuple[Stored, Aims]] = []
        self._former: dict[tuple[str, str], set[Stored]] = {}
        self._texts: dict[tuple[str, str], set[str]] = {}
        self._words = 0
        self._judged: list[tuple[Stored, dict[str, Any]]] = []

    def enter(self, row: Stored, content: dict[str, Any]) -> None:
        """One record: what it refers to, is found under and makes of others.

        Parameters
        ----------
        row : tuple
            change, place, id, kind, key, revision, as stored.
        content : dict
            Its content.
        """
        kind = row[3]
        if kind in _LINKING:
            aims = tuple(map(content.get, _FIELDS))
            known = self._pool.get(aims)
            if known is None:
                self._unresolved.append((row, aims))
                known = self._pool[aims] = aims
            of_kind = self._aims[kind]
            before = of_kind.get(row[4])
            if before is not known:
                self._link(row, known, before)
                of_kind[row[4]] = known
        if kind in _NAMED:
            self._name(row, content)
        if kind in _OF_A_REVISION:
            self._judged.append((row, content))

    def _link(self, row: Stored, aims: Aims, before: Aims | None) -> None:
        change, _, _, kind, key = row[:5]
        new = [(change, kind, key, *role, aim) for role, aim in zip(_ROLES, aims, strict=True) if aim]
        if before is not None:
            met = self._former.setdefault((kind, key), set())
            met |= {(*role, aim) for role, aim in zip(_ROLES, before, strict=True) if aim}
            new = [link for link in new if link[3:] not in met]
        self._expected["link"] += new

    def _name(self, row: Stored, content: dict[str, Any]) -> None:
        change, _, _, kind, key = row[:5]
        met = self._texts.setdefault((kind, key), set())
        new = {fold_term(text) for text in KINDS[kind].restore(key, content).terms()} - met
        met |= new
        self._expected["term"] += [(change, text, kind, key) for text in new]

    def settle(self, number: int, last_id: int) -> None:
        """Compare what a change implies with what is stored of it, once all its records were entered."""
        if self._unresolved:
            self._resolve()
        if self._judged:
            self._judge(last_id)
        for stored, expected, table in self._tables:
            if expected or stored.number <= number:
                found = stored.take(number)
                # within a change the store sorts them, and SQLite need not keep that order
                if found != expected and (len(found) != len(expected) or set(found) != set(expected)):
                    self._compare(table, expected, found)
                expected.clear()

    def finish(self) -> None:
        """Whatever belongs to no change."""
        for stored, _, table in self._tables:
            for row in stored.finish():
                self._report_row(table, row, "is of a change that is not there")

    def _resolve(self) -> None:
        for row, aims in self._unresolved:
            for (role, to_kind), aim in zip(_ROLES, aims, strict=True):
                if aim and aim not in self._revisions[to_kind]:
                    self._pool.pop(aims, None)  # whoever refers to it next is named too
                    self._say(row, f"its {role} is {show(aim)}, and no {to_kind} of that key stands there by then")
        self._unresolved.clear()

    def _judge(self, last_id: int) -> None:
        for row, content in self._judged:
            try:
                about = (content["of_kind"], content["of_key"], int(content["of_revision"]))
                aim = self._find(about, last_id)
                if aim is None:
                    self._say(row, f"it is about {_name_revision(about)}, which does not stand there by then")
                elif row[3] == Review.kind:
                    review = Review.restore(row[4], content)
                    # only of a withdrawal it matters what it says
                    said = json.loads(aim[1]) if about[0] == Withdrawal.kind else {}
                    self._effect(row, review.effects(said), last_id)
            except (ValueError, TypeError, KeyError, AttributeError, RecursionError) as error:
                self._say(row, f"what it decides cannot be read: {type(error).__name__} {show(str(error))}")
        self._judged.clear()

    def _find(self, about: tuple[Any, Any, int], last_id: int) -> Stored | None:
        found = self._audit.find_record(*about)
        return found if found is not None and found[0] <= last_id else None

    def _effect(self, row: Stored, effects: Iterable[Any], last_id: int) -> None:
        for revision, word, cause in effects:
            aim = self._find(revision, last_id)
            why = (row[2],) if cause is None else self._find(cause, last_id)
            if aim is None or why is None:
                self._say(row, f"it is about {_name_revision(revision)}, which does not stand there by then")
                continue
            self._words += 1
            self._expected["standing"].append((row[0], self._words, *revision, word, aim[0], why[0]))

    def _compare(self, table: str, expected: list[Stored], found: list[Stored]) -> None:
        for row in Counter(expected) - Counter(found):
            self._report_row(table, row, "is missing")
        for row in Counter(found) - Counter(expected):
            self._report_row(table, row, "does not follow from the records")

    def _report_row(self, table: str, row: Stored, what: str) -> None:
        named = dict(zip(_COLUMNS[table], row, strict=True))
        told = ", ".join(f"{name} {show(value)}" for name, value in named.items())
        self._report(Finding(
            table, integer(row[0]), text_of(named["kind"]), text_of(named["key"]),
            integer(named.get("revision")), None, f"the row {told} {what}",
        ))  # fmt: skip

    def _say(self, row: Stored, what: str) -> None:
        change, place, _, kind, key, revision = row[:6]
        self._report(
            Finding("record", integer(change), text_of(kind), text_of(key), integer(revision), integer(place), what)
        )


def _name_revision(about: Any) -> str:
    kind, key, revision = about
    return f"the {kind} {show(key)} revision {revision}"
