"""What people decide: preferences between correlations, and reviews."""

from __future__ import annotations

from collections.abc import Callable, Iterable, Iterator
from dataclasses import dataclass
from typing import ClassVar

from registry import cells
from registry.cells import choice
from registry.errors import Problem
from registry.records.record import STANDINGS, Record, Reference, entry


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

    def _self_problems(self) -> Iterator[Problem]:
        if self.correlation == self.over:
            yield Problem("over", self.over, "a correlation cannot be preferred over itself.")


@dataclass(frozen=True)
class Review(Record):
    """A decision on one revision of one record: the standing it gives."""

    kind: ClassVar[str] = "review"
    key: str = ""
    of_kind: str = entry(cells.TEXT)
    of_key: str = entry(cells.TEXT)
    of_revision: str = entry(cells.NUMBER)
    standing: str = entry(choice(*STANDINGS))
    note: str = entry(cells.LONG, required=False)

    def __post_init__(self) -> None:
        object.__setattr__(self, "key", self.key_for(self.of_kind, self.of_key, int(self.of_revision)))
        super().__post_init__()

    @staticmethod
    def key_for(kind: str, key: str, revision: int) -> str:
        """The key of the review of one revision."""
        return f"{kind}:{key}@{revision}"

    def references(self) -> tuple[Reference, ...]:
        return (Reference("of", self.of_kind, self.of_key),)
