"""What verification finds: where it stands, and what was expected there."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any

__all__ = ["Finding", "Verification", "integer", "show", "text_of"]


@dataclass(frozen=True)
class Finding:
    """One place of a library that is not as recorded.

    Attributes
    ----------
    table : str
        The table, or ``schema``, ``file`` or ``history``.
    change : int or None
        The change it belongs to.
    kind, key : str
        The record it is about, as it stands there now; a node of the tree
        has the key ``level/place``. Empty where it is about no record.
    revision, place : int or None
        The revision of the record, and its place within the change.
    what : str
        What was expected, and what was found.
    """

    table: str
    change: int | None
    kind: str
    key: str
    revision: int | None
    place: int | None
    what: str

    @classmethod
    def of_record(cls, row: tuple[Any, ...], what: str) -> Finding:
        """A finding about a stored record, whose row begins with change, place, id, kind, key, revision."""
        change, place, _, kind, key, revision = row[:6]
        return cls("record", integer(change), text_of(kind), text_of(key), integer(revision), integer(place), what)

    def __str__(self) -> str:
        record = f"{self.kind} {self.key}".strip() + (f" revision {self.revision}" if self.revision else "")
        place = "" if self.place is None or not self.change or self.table == "node" else f", place {self.place}"
        parts = [record, f"change {self.change}{place}" if self.change is not None else ""]
        about = ", ".join(part for part in parts if part)
        return f"{self.table}{': ' if about else ''}{about}: {self.what}"


@dataclass(frozen=True)
class Verification:
    """Whether a library holds, and what does not.

    Attributes
    ----------
    holds : bool
        True if nothing was found.
    root : str
        The root over the history, ``size:root``, recomputed.
    changes, records, editions : int
        How many were verified.
    findings : tuple of Finding
        What does not hold.
    notes : tuple of str
        What could not be verified, or should be known.
    """

    holds: bool
    root: str
    changes: int
    records: int
    editions: int
    findings: tuple[Finding, ...]
    notes: tuple[str, ...]


def show(value: Any, limit: int = 60) -> str:
    """A stored value within a sentence: shortened, and printable whatever it is."""
    if value is None:
        return "nothing"
    shown = repr(value) if isinstance(value, (str, bytes)) else str(value)
    return shown if len(shown) <= limit else f"{shown[: limit // 2]}...{shown[-10:]}"


def text_of(value: Any) -> str:
    """A stored value as text that can be printed; nothing as an empty one."""
    return "" if value is None else str(value).encode("utf-8", "backslashreplace").decode()


def integer(value: Any) -> int | None:
    """A stored value if it is an integer."""
    return value if isinstance(value, int) else None
