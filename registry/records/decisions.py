"""What people decide about records, and what a library says of itself.

Preferences, reviews and withdrawals are about records; editions name positions
of the history, and a library says who keeps it and where a load came from.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator, Mapping
from dataclasses import dataclass
from typing import Any, ClassVar

from registry import cells
from registry.cells import choice
from registry.errors import Problem
from registry.records.record import STANDINGS, Record, entry

Effect = tuple[tuple[str, str, int], str, tuple[str, str, int] | None]
"""A revision, its standing, and the revision that says why if that is not the review itself."""

CAUSES = ("erratum", "retraction", "superseded", "other")
"""Why something is withdrawn."""


@dataclass(frozen=True)
class Preference(Record):
    """A steward's preference of one correlation over another."""

    kind: ClassVar[str] = "preference"
    key: str = entry(cells.KEY)
    correlation: str = entry(cells.KEY)
    over: str = entry(cells.KEY)
    reason: str = entry(cells.LONG)

    def _checks(self) -> tuple[Callable[[], Iterable[Problem]], ...]:
        return (self._self_problems,)

    @property
    def pair(self) -> tuple[str, str]:
        """The correlation, and the one it goes before."""
        return self.correlation, self.over

    def _self_problems(self) -> Iterator[Problem]:
        if self.correlation == self.over:
            yield Problem("over", self.over, "a correlation cannot be preferred over itself.")


@dataclass(frozen=True)
class Review(Record):
    """A decision on one revision of one record: the standing it gives.

    A note on a draft, and what an older program recorded as withdrawn, are
    reviews too.
    """

    kind: ClassVar[str] = "review"
    key: str = ""
    of_kind: str = entry(cells.TEXT)
    of_key: str = entry(cells.TEXT)
    of_revision: str = entry(cells.NUMBER)
    standing: str = entry(choice(*STANDINGS))
    note: str = entry(cells.LONG, required=False)

    def _own_key(self) -> str:
        return f"{self.of_kind}:{self.of_key}@{self.of_revision}"

    def effects(self, aim: Mapping[str, Any]) -> tuple[Effect, ...]:
        """What it makes of revisions.

        Parameters
        ----------
        aim : mapping
            The content of the revision it is about; an accepted withdrawal
            withdraws what that says.

        Returns
        -------
        tuple of (revision, standing, cause)
            A revision is kind, key and number; the cause is the revision that
            says why, None for the review itself.
        """
        about = (self.of_kind, self.of_key, int(self.of_revision))
        own: Effect = (about, self.standing, None)
        if self.of_kind == Withdrawal.kind and self.standing == "accepted":
            return (own, ((aim["of_kind"], aim["of_key"], int(aim["of_revision"])), "withdrawn", about))
        return (own,)


@dataclass(frozen=True)
class Withdrawal(Record):
    """The withdrawal of a revision and all before it; once accepted, it answers no more."""

    kind: ClassVar[str] = "withdrawal"
    key: str = ""
    of_kind: str = entry(cells.TEXT)
    of_key: str = entry(cells.TEXT)
    of_revision: str = entry(cells.NUMBER)
    cause: str = entry(choice(*CAUSES))
    reason: str = entry(cells.LONG)

    def _own_key(self) -> str:
        return self.key_for(self.of_kind, self.of_key)

    @staticmethod
    def key_for(kind: str, key: str) -> str:
        """The key of the withdrawal of a record."""
        return f"withdrawal:{kind}:{key}"


@dataclass(frozen=True)
class Edition(Record):
    """A named position of the history, with its root and its rules version.

    The root is written ``size:root``: so many changes, and the RFC 9162 root
    over their headers in hexadecimal.
    """

    kind: ClassVar[str] = "edition"
    key: str = ""
    name: str = entry(cells.EDITION)
    position: str = entry(cells.NUMBER)
    root: str = entry(cells.ROOT)
    rules: str = entry(cells.NUMBER)
    note: str = entry(cells.LONG)

    def _own_key(self) -> str:
        return self.name.casefold()


@dataclass(frozen=True)
class Keeping(Record):
    """Which library this is, and whether one person keeps it or a team."""

    kind: ClassVar[str] = "library"
    key: str = ""
    name: str = entry(cells.TEXT)
    started_at: str = entry(cells.TEXT)
    kept_by: str = entry(choice("team", "one-person"))

    def _own_key(self) -> str:
        return self.kind  # there is one for each library


@dataclass(frozen=True)
class Origin(Record):
    """Where the records of a change came from: another library, at one of its positions."""

    kind: ClassVar[str] = "origin"
    key: str = ""
    library: str = entry(cells.TEXT)
    root: str = entry(cells.ROOT)
    since: str = entry(cells.TEXT, required=False)

    def _own_key(self) -> str:
        return f"origin:{self.library}:{self.root.partition(':')[0]}"
