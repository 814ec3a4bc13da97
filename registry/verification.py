"""Verifying a library: everything that is recorded, recomputed and held against what is stored.

Verification finds whatever was changed behind the program's back, as long as
something that depends on it was left as it was. Somebody who rewrites the
whole file, every digest and root with it, makes another library that holds:
that is found only by a root that was noted elsewhere.
"""

from __future__ import annotations

import gc
import re
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from typing import Any

from registry.errors import BadInput, quote
from registry.findings import Finding, Verification, show, text_of
from registry.inspection import Inspection
from registry.merkle import EMPTY_ROOT, consistency_holds, consistency_proof
from registry.store.auditing import EXPECTED_VERSION, Audit, Damage, Undecodable, expected_schema, is_damage, open_audit
from registry.store.library_file import LibraryFile

__all__ = ["verify"]

Progress = Callable[[int, int], None]
Noted = tuple[int, bytes]

STEPS = 200
"""How often progress is told."""


def verify(file: LibraryFile, against: str | None = None, progress: Progress | None = None) -> Verification:
    """Verify a library in one read transaction.

    Parameters
    ----------
    file : LibraryFile
        The library.
    against : str, optional
        A root noted earlier, ``size:root``, whose history this library must
        extend.
    progress : callable, optional
        ``progress(done, all)`` is told how many records were gone through.

    Returns
    -------
    Verification
        What was found; tampered cells of any kind are findings, not errors.

    Raises
    ------
    BadInput
        If `against` is no root.
    LibraryBusy
        If another process holds the file for too long.
    NotALibrary
        If SQLite cannot read the file at all.
    """
    noted = read_root(against) if against is not None else None
    with _collecting_nothing():
        try:
            with open_audit(file.path) as audit:
                return _Verifier(audit).verify(noted, progress)
        except Undecodable:
            with open_audit(file.path, any_text=True) as audit:
                return _Verifier(audit).verify(noted, progress)


@contextmanager
def _collecting_nothing() -> Iterator[None]:
    # rows and contents make no cycles: to look for some among them costs a tenth of the whole
    was_on = gc.isenabled()
    gc.disable()
    try:
        yield
    finally:
        if was_on:
            gc.enable()


def read_root(text: str) -> Noted:
    """A root as it was noted, ``size:root``.

    Examples
    --------
    >>> size, root = read_root("0:e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855")
    >>> size, root == EMPTY_ROOT
    (0, True)
    """
    found = re.fullmatch(r"(\d{1,15}):([0-9a-fA-F]{64})", text.strip(), re.ASCII)
    if not found:
        raise BadInput(
            f"{quote(text)} is no root of a history; a root such as 12:5dc9... is allowed, the number of changes and "
            "64 hexadecimal digits, as `rangebook verify` and `rangebook editions` print it."
        )
    return int(found[1]), bytes.fromhex(found[2])


class _Verifier:
    """The steps of one verification, and what they have found so far."""

    def __init__(self, audit: Audit) -> None:
        self._audit = audit
        self._findings: list[Finding] = []
        self._notes: list[str] = []
        self._inspection = Inspection(audit, self._findings.append)
        self._roots: dict[int, bytes] = {0: EMPTY_ROOT}

    def verify(self, noted: Noted | None, progress: Progress | None) -> Verification:
        checks = self._audit.start_checks()
        try:
            self._check_schema()
            self._check_history(noted, progress)
            self._check_identity()
            self._check_editions()
            if noted is not None:
                self._check_against(*noted)
        except Damage as error:
            if not is_damage(error):
                raise
            self._say("file", f"SQLite cannot read on: {error}")
        self._take_checks(*checks())
        if remark := self._audit.journal_remark():
            self._notes.append(remark)
        passed = self._inspection
        return Verification(
            not self._findings, passed.tree.noted(), passed.tree.size, passed.records, len(passed.editions),
            tuple(self._findings), tuple(self._notes),
        )  # fmt: skip

    def _say(self, table: str, what: str, key: str = "") -> None:
        self._findings.append(Finding(table, None, "", key, None, None, what))

    def _check_schema(self) -> None:
        """The statements that made the tables, indexes and triggers."""
        found, expected = self._audit.schema(), expected_schema()
        for name in sorted({*found, *expected}):
            if name not in found:
                self._say("schema", f"the {name} is missing", name)
            elif name not in expected:
                self._say("schema", f"the {name} does not belong to a library", name)
            elif found[name] != expected[name]:
                self._say("schema", f"the {name} is not as rangebook makes it", name)
        if "table alembic_version" in found and (version := self._audit.version()) != [EXPECTED_VERSION]:
            told = ", ".join(show(value) for value in version) or "nothing"
            self._say("alembic_version", f"it says {told}, and {EXPECTED_VERSION} was expected")

    def _take_checks(self, damages: list[str], dangling: list[tuple[Any, ...]]) -> None:
        for line in damages:
            self._say("file", f"SQLite's integrity check says: {text_of(line)}")
        for table, row, parent, _ in dangling:
            self._say(text_of(table), f"row {row} refers to a {parent} that is not there", text_of(row))

    def _check_history(self, noted: Noted | None, progress: Progress | None) -> None:
        total = self._audit.count("record")
        step, told = max(1, total // STEPS), 0
        for number in self._inspection.changes():
            if noted is not None and number == noted[0]:
                self._roots[number] = self._inspection.tree.root()
            if progress is not None and self._inspection.records >= told + step:
                told = self._inspection.records
                progress(told, total)
        if not self._inspection.tree.size:
            self._say("change", "there is none, and every library begins with one")
        if progress is not None:
            progress(total, total)

    def _check_identity(self) -> None:
        """The row that says which library this is, by the first record that says so."""
        rows = self._audit.library()
        if len(rows) != 1:
            self._say("library", f"one row was expected, and {len(rows)} stand there")
        keepings = self._inspection.keepings
        if not keepings:
            self._notes.append(
                "No record says which library this is, as in libraries of an older rangebook: its name and start "
                "could not be verified. `rangebook upgrade` records them."
            )
        for number, name, started_at in rows:
            if number != 1:
                self._say("library", f"its id is {show(number)}, and 1 was expected", str(number))
            for what, value in (("name", name), ("started_at", started_at)) if keepings else ():
                if value != (said := keepings[0].get(what)):
                    self._say("library", f"its {what} is {show(value)}, and change 1 says {show(said)}", str(number))

    def _node_at(self, level: int, place: int) -> bytes:
        return bytes.fromhex(self._audit.node(level, place))

    def _check_editions(self) -> None:
        """Each edition's history is the beginning of the next one's, and of the library's."""
        head = self._inspection.tree.size, self._inspection.tree.root()
        before: Noted | None = None
        name = ""
        for row, content in self._inspection.editions:
            try:
                noted = read_root(content["root"])
            except (BadInput, KeyError, AttributeError, TypeError):
                continue  # said already: it is not the root of its history
            if before is not None and not self._extends(before, noted):
                self._report_edition(row, f"its history does not begin with that of the edition {show(name)}")
            if not self._extends(noted, head):
                self._report_edition(row, "the library's history does not begin with its own")
            before, name = noted, content.get("name", "")

    def _extends(self, first: Noted, second: Noted) -> bool:
        if first[0] > self._inspection.tree.size or second[0] > self._inspection.tree.size or first[0] > second[0]:
            return False
        try:
            proof = consistency_proof(first[0], second[0], self._node_at)
        except (TypeError, ValueError):  # a node is missing or no hash
            return False
        return consistency_holds(first[0], second[0], first[1], second[1], proof)

    def _report_edition(self, row: tuple[Any, ...], what: str) -> None:
        self._findings.append(Finding.of_record(row, what))

    def _check_against(self, size: int, root: bytes) -> None:
        tree = self._inspection.tree
        told = f"{size}:{root.hex()[:12]}..."
        if size > tree.size:
            self._say(
                "history", f"this library does not extend the history with root {told}: it has {tree.size} changes"
            )
        elif (found := self._roots.get(size, b"")) != root:
            self._say(
                "history",
                f"this library does not extend the history with root {told}: its first {size} changes have the root "
                f"{found.hex()[:12]}...",
            )
        elif not self._extends((size, root), (tree.size, tree.root())):
            self._say(
                "history", f"the stored nodes do not prove that this library extends the history with root {told}"
            )
