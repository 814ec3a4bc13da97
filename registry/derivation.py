"""What follows from the records: the links, terms and standings that a library keeps to find them by."""

from __future__ import annotations

import contextlib
import json
from collections.abc import Callable, Iterable
from typing import Any

from registry.findings import Finding, integer, show, text_of
from registry.records import KINDS, Record, Review, Withdrawal
from registry.records.record import REFERRED
from registry.store.auditing import Audit
from registry.store.history import fold_term
from registry.store.matching import Matching

__all__ = ["Derivation"]

Report = Callable[[Finding], None]
Aims = tuple[Any, ...]
Stored = tuple[Any, ...]

_COLUMNS = {
    "link": ("change", "kind", "key", "role", "to_kind", "to_key"),
    "term": ("change", "text", "kind", "key"),
    "standing": ("change", "id", "kind", "key", "revision", "standing", "record", "cause"),
}
PACE = 200
"""Changes after which stored rows are compared."""

_ROLES = {
    kind: tuple((role, to_kind) for role, to_kind in sorted(REFERRED.items()) if hasattr(cls, role))
    for kind, cls in KINDS.items()
}
_NAMES = {kind: tuple(role for role, _ in roles) for kind, roles in _ROLES.items()}
_NAMED = frozenset(name for name, cls in KINDS.items() if cls.terms is not Record.terms)
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
        self._tables = {table: self._match(table) for table in _COLUMNS}
        self._links: list[Stored] = []
        self._terms: list[Stored] = []
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
        names = _NAMES[kind]
        if names:
            aims = tuple(map(content.get, names))
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
        new = [
            (change, kind, key, role, to_kind, aim)
            for (role, to_kind), aim in zip(_ROLES[kind], aims, strict=True)
            if aim
        ]
        if before is not None:
            met = self._former.setdefault((kind, key), set())
            met |= {(role, aim) for (role, _), aim in zip(_ROLES[kind], before, strict=True) if aim}
            new = [link for link in new if (link[3], link[5]) not in met]
        self._links += new

    def _name(self, row: Stored, content: dict[str, Any]) -> None:
        change, _, _, kind, key = row[:5]
        met = self._texts.setdefault((kind, key), set())
        new = {fold_term(text) for text in KINDS[kind].restore(key, content).terms()} - met
        met |= new
        self._terms += [(change, text, kind, key) for text in new]

    def settle(self, number: int, last_id: int) -> None:
        """Compare what a change implies with what is stored of it, once all its records were entered."""
        if self._unresolved:
            self._resolve()
        if self._judged:
            self._judge(last_id)
        if self._links:
            self._expect("link", self._links)
        if self._terms:
            self._expect("term", self._terms)
        if number % PACE == 0:
            for matching in self._tables.values():
                matching.settle(number)

    def _expect(self, table: str, new: list[Stored]) -> None:
        if len(new) > 1:
            _sort(new)  # as the store does: equal runs are compared at once
        self._tables[table].expected += new
        new.clear()

    def finish(self, number: int) -> None:
        """Compare what is left, up to the last change and beyond."""
        for matching in self._tables.values():
            matching.settle(number)
            matching.finish()

    def _match(self, table: str) -> Matching:
        return Matching(
            self._audit.stream(table),
            lambda row: self._report_row(table, row, "is missing"),
            lambda row: self._report_row(table, row, "does not follow from the records"),
        )

    def _resolve(self) -> None:
        for row, aims in self._unresolved:
            for (role, to_kind), aim in zip(_ROLES[row[3]], aims, strict=True):
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
        kind, key, revision = about
        if not (isinstance(kind, str) and isinstance(key, str) and 0 < revision < 2**63):
            return None
        found = self._audit.find_record(kind, key, revision)
        return found if found is not None and found[0] <= last_id else None

    def _effect(self, row: Stored, effects: Iterable[Any], last_id: int) -> None:
        for revision, word, cause in effects:
            if not isinstance(word, str):
                raise TypeError(f"{word} is no standing")
            aim = self._find(revision, last_id)
            why = (row[2],) if cause is None else self._find(cause, last_id)
            if aim is None or why is None:
                self._say(row, f"it is about {_name_revision(revision)}, which does not stand there by then")
                continue
            self._words += 1
            self._tables["standing"].expected.append((row[0], self._words, *revision, word, aim[0], why[0]))

    def _report_row(self, table: str, row: Stored, what: str) -> None:
        named = dict(zip(_COLUMNS[table], row, strict=True))
        told = ", ".join(f"{name} {show(value)}" for name, value in named.items())
        self._report(Finding(
            table, integer(row[0]), text_of(named["kind"]), text_of(named["key"]),
            integer(named.get("revision")), None, f"the row {told} {what}",
        ))  # fmt: skip

    def _say(self, row: Stored, what: str) -> None:
        self._report(Finding.of_record(row, what))


def _sort(rows: list[Stored]) -> None:
    with contextlib.suppress(TypeError):  # a tampered record may refer to anything
        rows.sort()


def _name_revision(about: Any) -> str:
    kind, key, revision = about
    return f"the {kind} {show(key)} revision {revision}"
