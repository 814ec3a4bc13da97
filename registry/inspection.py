"""Going through the history change by change: what each row says, and whether that can be what was recorded."""

from __future__ import annotations

import json
import math
from collections.abc import Callable, Iterator
from hashlib import sha256
from typing import Any

from registry.canonical import digest, encode_string, encode_text, is_canonical
from registry.derivation import Derivation
from registry.findings import Finding, show, text_of
from registry.merkle import hash_leaf, root_of
from registry.records import KINDS
from registry.regrowth import Regrowth
from registry.store.auditing import Audit
from registry.store.history import Change, envelope
from registry.store.matching import is_after

__all__ = ["Inspection"]

Stored = tuple[Any, ...]

UNREADABLE = (ValueError, TypeError, KeyError, AttributeError, RecursionError)
"""What reading a cell that anybody may have written can end in."""

FAR = 1000
"""Missing changes that are looked for one by one, beyond as many as there are."""

_parse_first = json.JSONDecoder().raw_decode
_FIELDS = tuple(Change.__dataclass_fields__)


class Inspection:
    """One pass over a library.

    Parameters
    ----------
    audit : Audit
        The library.
    report : callable
        Takes what is found.

    Attributes
    ----------
    tree : Regrowth
        The tree over the changes gone through so far.
    records : int
        Records gone through so far.
    keepings : list of dict
        What the records of the library itself say, in order.
    editions : list of (row, content)
        The editions, in order.
    """

    def __init__(self, audit: Audit, report: Callable[[Finding], None]) -> None:
        self._audit = audit
        self._report = report
        self.records = 0
        self.tree = Regrowth(audit, report)
        self.keepings: list[dict[str, Any]] = []
        self.editions: list[tuple[Stored, dict[str, Any]]] = []
        self._revisions: dict[str, dict[str, int]] = {kind: {} for kind in KINDS}
        self._first = 1
        self._firsts = [1]
        self._time = ""
        self._said = 0

    def changes(self) -> Iterator[int]:
        """Go through the library; yields the number of each change when it is done."""
        self._derivation = Derivation(self._audit, self._revisions, self._report)
        self._enter = self._derivation.enter
        self._rows = self._audit.stream("record")
        self._ahead: Stored | None = next(self._rows, None)
        most = 2 * self._audit.count("change") + FAR
        done = 0
        for row in self._audit.stream("change"):
            number = row[0]
            if not isinstance(number, int) or not done < number <= most:
                self._say_change(number, f"there is a change numbered {number} after change {done}")
                continue
            while done + 1 < number:
                done += 1
                self._say_change(done, "the change is missing")
                self._pass(done, None)
                yield done
            done = number
            self._pass(number, row)
            yield number
        while self._has_lost(done + 1):
            done += 1
            self._say_change(done, "the change is missing")
            self._pass(done, None)
            yield done
        self._pass_over(math.inf)
        self._derivation.finish(done)
        self.tree.finish()

    def _has_lost(self, number: int) -> bool:
        """True if a change after the last one has left records and its leaf behind."""
        row = self._ahead if self._ahead is None or self._ahead[0] == number else self._pass_over(number)
        return row is not None and row[0] == number and self._audit.node(0, number - 1) is not None

    def _pass(self, number: int, header: Stored | None) -> None:
        """One change: its records, what follows from them, its header."""
        digests: list[bytes] = []
        stored: list[Any] = []
        place, editions = 0, len(self.editions)
        row = self._ahead
        if row is not None and row[0] != number:
            row = self._pass_over(number)
        if row is None or row[0] != number or row[2] not in self._firsts:
            self._first = self._firsts[0]
        else:
            # where the count of the change before and its rows differ, the next id tells which of them is right
            self._first = row[2]
        while row is not None and row[0] == number:
            if row[1] != place:
                place = self._skip(row, place)
            digests.append(self._inspect(row, place))
            stored.append(row[7])
            place += 1
            row = next(self._rows, None)
        self._ahead = row
        self.records += len(digests)
        self._firsts = [self._first + place]
        if header is not None and header[4] != place and isinstance(header[4], int):
            self._firsts += [self._first + header[4], self._first + len(digests)]
        self._derivation.settle(number, self._first + place - 1)
        if len(self.editions) > editions:
            for edition, content in self.editions[editions:]:
                self._check_edition(edition, content)
        self.tree.add(self._read_header(number, header, digests, stored))

    def _pass_over(self, number: float) -> Stored | None:
        """Records of no change, or of one that is not there: normally none."""
        row = self._ahead
        while row is not None and not is_after(row[0], number, equal=True):
            self._say(row, f"it stands in change {show(row[0])}, which is not there")
            self.records += 1
            row = next(self._rows, None)
        self._ahead = row
        return row

    def _skip(self, row: Stored, place: int) -> int:
        """The place of a record that does not stand at the next one."""
        if isinstance(row[1], int) and row[1] > place and row[2] == self._first + row[1]:
            missing = f"place {place}" if row[1] == place + 1 else f"places {place} to {row[1] - 1}"
            self._report(Finding("record", row[0], "", "", None, place, f"no record stands at {missing} of the change"))
            return row[1]
        return place

    def _inspect(self, row: Stored, place: int) -> bytes:
        """The digest of a record, recomputed; whatever is wrong with its row is reported."""
        _, at, number, kind, key, revision, content, stored = row
        try:
            newest = self._revisions[kind]
            expected = newest[key] = newest.get(key, 0) + 1
            parsed, _ = _parse_first(content)
            text = f'{{"content":{content},"key":{encode_string(key)},"kind":"{kind}","revision":{revision}}}'
            found = sha256(text.encode())
            self._enter(row, parsed)
            if (
                found.hexdigest() == stored
                and revision == expected
                and at == place
                and number == self._first + place
                and type(parsed) is dict
                and is_canonical(content, parsed)
            ):
                if kind == "edition":
                    self.editions.append((row, parsed))
                elif kind == "library":
                    self.keepings.append(parsed)
                return found.digest()
        except UNREADABLE:
            pass
        return self._diagnose(row, place)

    def _diagnose(self, row: Stored, place: int) -> bytes:
        """Say everything that is wrong with the row of a record."""
        _, at, number, kind, *_, stored = row
        said = self._said
        if kind not in KINDS:
            self._say(row, f"its kind is {show(kind)}, and there is none of that name")
        if at != place:
            self._say(row, f"it stands at place {show(at)}, and place {place} comes next")
        if number != self._first + place:
            self._say(row, f"its id is {show(number)}, and {self._first + place} was expected")
        found = self._recompute(row)
        if found is None or found.hex() != stored:
            told = f"SHA-256 gives {found.hex()[:12]}..." if found else "its cells are not of the types recorded"
            self._say(row, f"it is not what was recorded: its digest is {show(stored, 20)}, and {told}")
        if kind in KINDS:
            self._check_revision(row, found is not None and found.hex() == stored)
        self._check_content(row)
        if self._said == said:
            self._say(row, "its content cannot be what rangebook recorded")
        return found or b""

    def _recompute(self, row: Stored) -> bytes | None:
        _, _, _, kind, key, revision, content, _ = row
        if not all(isinstance(cell, str) for cell in (kind, key, content)) or not isinstance(revision, int):
            return None
        try:
            return bytes.fromhex(digest(envelope(kind, key, revision, content)))
        except ValueError:  # text that is no UTF-8
            return None

    def _check_revision(self, row: Stored, genuine: bool) -> None:
        newest, key, revision = self._revisions[row[3]], row[4], row[5]
        expected = newest[key]
        if isinstance(revision, int) and genuine and revision != expected:
            self._say(row, f"it is revision {revision}, and revision {expected} comes next")
            newest[key] = revision
        elif revision != expected:
            self._say(row, f"its revision is {show(revision)}, and {expected} was expected")

    def _check_content(self, row: Stored) -> None:
        try:
            parsed = json.loads(row[6])
            if not isinstance(parsed, dict):
                self._say(row, f"its content is {show(row[6])}, and an object was expected")
            elif encode_text(parsed) != row[6]:
                self._say(row, "its content is not written in canonical JSON")
            elif row[3] in KINDS:
                KINDS[row[3]].restore(row[4], parsed).terms()
        except UNREADABLE as error:
            self._say(row, f"its content cannot be read: {type(error).__name__} {show(str(error))}")

    def _check_edition(self, row: Stored, content: dict[str, Any]) -> None:
        position, root = self.tree.size, self.tree.noted()
        if content.get("position") != str(position):
            self._say(row, f"it names position {show(content.get('position'))}, and was frozen at {position}")
        if content.get("root") != root:
            told = f"its root is {show(content.get('root'), 30)}, and the history up to it has {root[:20]}..."
            self._say(row, told)

    def _read_header(self, number: int, row: Stored | None, digests: list[bytes], stored: list[Any]) -> bytes:
        """The leaf that a change is in the tree; whatever is wrong with its row is reported."""
        if row is None:
            return self.tree.recorded_leaf(number)
        _, author, reason, at, records, records_root, header = row
        try:
            text = (
                f'{{"author":{encode_string(author)},"number":{number},"reason":{encode_string(reason)},'
                f'"recorded_at":{encode_string(at)},"records":{records},"records_root":"{records_root}"}}'
            )
            good = (
                text == header and records == len(digests) and at >= self._time and _root_over(digests) == records_root
            )
            leaf = hash_leaf(text.encode())
        except UNREADABLE:
            good, leaf = False, b""
        if good:
            self._time = at
            return leaf
        return self._diagnose_header(number, row, digests, stored)

    def _diagnose_header(self, number: int, row: Stored, digests: list[bytes], stored: list[Any]) -> bytes:
        """Say everything that is wrong with the row of a change."""
        header, before = row[6], self._said
        columns = dict(zip(_FIELDS, row[:6], strict=True))
        said = _parse(header)
        for name, value in columns.items():
            if said is not None and said.get(name) != value:
                self._say_change(number, f"its {name} is {show(value)}, and its header says {show(said.get(name))}")
        text = encode_text({name: v if isinstance(v, int) else text_of(v) for name, v in columns.items()})
        if said is None or (said == columns and text != header):
            self._say_change(
                number, f"its header is {show(header)}, and the canonical JSON of its columns was expected"
            )
        if columns["records"] != len(digests):
            self._say_change(number, f"it holds {show(columns['records'])} records, and {len(digests)} stand there")
        if isinstance(row[3], str) and row[3] < self._time:
            self._say_change(number, f"it was recorded at {row[3]}, before the change before it, {self._time}")
        if said == columns and isinstance(row[4], int) and row[4] > len(digests):
            told = f"no record stands at place {len(digests)} and after, of {row[4]} recorded"
            self._report(Finding("record", number, "", "", None, len(digests), told))
        # a record that is not what was recorded is named itself
        roots = [_root_over(digests), _root_over([_unhex(value) for value in stored])]
        if row[5] not in roots:
            told = f"the root over its records is {show(row[5], 20)}, and they give {roots[0][:12]}..."
            self._say_change(number, told)
        if self._said == before and row[5] == roots[0]:
            self._say_change(number, "its row cannot be what rangebook recorded")
        if said == columns and isinstance(row[3], str):
            self._time = max(self._time, row[3])
        return self.tree.choose_leaf(number, [header, text])

    def _say(self, row: Stored, what: str) -> None:
        self._said += 1
        self._report(Finding.of_record(row, what))

    def _say_change(self, number: int, what: str) -> None:
        self._said += 1
        self._report(Finding("change", number, "", "", None, None, what))


def _parse(header: Any) -> dict[str, Any] | None:
    try:
        said = json.loads(header)
    except UNREADABLE:
        return None
    return said if isinstance(said, dict) else None


def _root_over(digests: list[bytes]) -> str:
    if len(digests) == 1:  # the root over one leaf is that leaf
        return hash_leaf(digests[0]).hex()
    return root_of([hash_leaf(found) for found in digests]).hex()


def _unhex(value: Any) -> bytes:
    try:
        return bytes.fromhex(value)
    except (TypeError, ValueError):
        return b""
