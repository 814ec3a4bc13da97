"""Everything recorded about one compound at one position of a library."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, field
from typing import Generic, TypeVar

from registry.records import Compound, Correlation, Dataset, FixedPoint, Preference, Record, Source

__all__ = ["Dossier", "Entry"]

R = TypeVar("R", bound=Record, covariant=True)


@dataclass(frozen=True)
class Entry(Generic[R]):
    """One revision of a record, with where it stands.

    Attributes
    ----------
    record : Record
        The record.
    revision : int
        Its revision, from 1.
    change : int
        The change that recorded it.
    standing : str
        ``accepted``, ``draft``, ``declined`` or ``withdrawn``; empty for
        kinds that are not reviewed.
    standing_note : str
        What the reviewer said.
    reviewed_in : int
        The change that gave it its standing; 0 if none did.
    waiting : int
        A newer revision that waits for review; 0 if there is none.
    trial : bool
        True for a draft that is let answer because drafts were asked for.
    """

    record: R
    revision: int
    change: int
    standing: str = ""
    standing_note: str = ""
    reviewed_in: int = 0
    waiting: int = 0
    trial: bool = False

    @property
    def key(self) -> str:
        """The key of the record."""
        return self.record.key

    @property
    def accepted(self) -> bool:
        """True if it may take part in an answer."""
        return self.standing == "accepted" or self.trial

    @property
    def mark(self) -> str:
        """Its standing where it is not accepted, as of a draft on trial; else empty."""
        return "" if self.standing == "accepted" else self.standing


@dataclass(frozen=True)
class Dossier:
    """Everything recorded about one compound at one position.

    Attributes
    ----------
    compound : Entry
        The compound itself.
    correlations, fixed_points, datasets, preferences : tuple of Entry
        All of them, whatever their standing.
    sources : mapping
        Source records by key.
    position : int
        The change up to which this was read.
    """

    compound: Entry[Compound]
    correlations: tuple[Entry[Correlation], ...] = ()
    fixed_points: tuple[Entry[FixedPoint], ...] = ()
    datasets: tuple[Entry[Dataset], ...] = ()
    preferences: tuple[Entry[Preference], ...] = ()
    sources: Mapping[str, Source] = field(default_factory=dict)
    position: int = 0

    def for_property(self, prop: str) -> tuple[Entry[Correlation], ...]:
        """The correlations for one property."""
        return tuple(entry for entry in self.correlations if entry.record.property == prop)

    def accepted_points(self, quantity: str) -> Iterator[Entry[FixedPoint]]:
        """The accepted fixed points of one quantity."""
        return (e for e in self.fixed_points if e.accepted and e.record.quantity == quantity)

    def preferred(self) -> frozenset[tuple[str, str]]:
        """Pairs (preferred key, key it is preferred over) that are accepted."""
        return frozenset(self.preference_reasons())

    def preference_reasons(self) -> dict[tuple[str, str], str]:
        """The reason of each accepted preference, by its pair of keys."""
        return {e.record.pair: e.record.reason for e in self.preferences if e.accepted}

    def cite(self, source: str) -> str:
        """The citation of a source; its key if none is recorded."""
        record = self.sources.get(source)
        return record.citation if record is not None else source

    def year(self, source: str) -> int:
        """The year of a source, 0 if it states none."""
        record = self.sources.get(source)
        return int(record.year) if record is not None and record.year else 0
