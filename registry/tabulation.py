"""Tables of a property over a span: rows made as they are read, whatever their number."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from functools import cached_property, lru_cache, partial
from typing import Any, NamedTuple

import numpy as np
from numpy.typing import NDArray

from registry import rules
from registry.candidate import Candidate
from registry.coverage import Coverage, Seam, Stretch
from registry.properties import PROPERTIES
from registry.quantities import UNITS
from registry.reasons import Reasons, cut_temperatures
from registry.refusals import Refusal
from registry.spacing import Spacing
from registry.span import demand_one
from registry.verdicts import refuse

__all__ = ["BLOCK", "Block", "Note", "Row", "Table", "build_table"]

Array = NDArray[np.float64]

BLOCK = 1024
"""Rows that are held at a time."""

_THIN = 1e-6
"""Kelvin below which a stretch is only the tolerance of two bounds that meet."""


@dataclass(frozen=True)
class Note:
    """What there is to say of a row besides its numbers.

    Attributes
    ----------
    marks : tuple of str
        Of ``refused``, ``draft``, ``metastable``, ``seam`` and
        ``across-gap``.
    reason : str
        Of a refused row; as in a refusal.
    seams : tuple of Seam
        The seams that lie between the row before and this one.
    gaps : tuple of Stretch
        The gaps that lie wholly between them.
    """

    marks: tuple[str, ...]
    reason: str = ""
    seams: tuple[Seam, ...] = ()
    gaps: tuple[Stretch, ...] = ()


PLAIN = Note(())


class Row(NamedTuple):
    """One row of a table, in SI units.

    Attributes
    ----------
    temperature : float
        K; NaN where a pressure was refused.
    value : float
        In the SI unit of the property; NaN where a temperature was refused.
    expanded : float or None
        The stated uncertainty at coverage factor 2: percent of the value; at
        given pressures that of the temperature, K. None if none is stated.
    correlation : str
        The key of the correlation that answers; empty in a refused row.
    note : Note
        Its marks, and what they mean.
    """

    temperature: float
    value: float
    expanded: float | None
    correlation: str
    note: Note


@dataclass(frozen=True)
class Block:
    """Some rows that follow one another.

    Attributes
    ----------
    start : int
        The number of the first, from 0.
    kelvin, values : array of float
        Temperatures, K, and values in SI units.
    expanded : array of float
        As in `Row`; NaN if none is stated.
    owners : list of int
        Index of the candidate in `Coverage.answering`; -1 in a refused row.
    notes : dict of int to Note
        The notes that say anything, by the number of the row in the block.
    """

    start: int
    kelvin: Array
    values: Array
    expanded: Array
    owners: list[int]
    notes: dict[int, Note] = field(default_factory=dict)


class Table:
    """Values of a property at evenly spaced temperatures, or temperatures at given pressures.

    Rows are made while they are read and not kept: a long table takes no more
    memory than a short one.

    Attributes
    ----------
    coverage : Coverage
        Who answers.
    spacing : Spacing
        The places of the rows.
    note : str
        What to know of the whole table; empty if nothing.

    Examples
    --------
    >>> import registry
    >>> with registry.open_library("shelf.db") as library:
    ...     for row in library.tabulate("ethanol", 290.0, 295.0, step=2.5):
    ...         print(row.temperature, round(row.value, 1), row.correlation, *row.note.marks)
    290.0 4805.4 ethanol-antoine-low
    292.5 5601.4 ethanol-antoine-low
    295.0 6546.4 ethanol-poling-5 seam
    """

    def __init__(self, coverage: Coverage, spacing: Spacing, note: str = "") -> None:
        self.coverage = coverage
        self.spacing = spacing
        self.note = note

    @property
    def given(self) -> str:
        """What the rows are spaced in: ``temperature`` or ``pressure``."""
        return "temperature"

    @property
    def span(self) -> tuple[float, float]:
        """The first and the last place, in SI units."""
        unit, count = UNITS["K" if self.given == "temperature" else "Pa"], self.spacing.count
        first, last = (self.spacing.numbers(i, i + 1, unit)[0] for i in (0, count - 1))
        return first, last

    @property
    def unit(self) -> str:
        """The SI unit of the values."""
        return PROPERTIES[self.coverage.property].unit

    def extremes(self) -> tuple[list[float], list[float]]:
        """Temperatures, K, at which a correlation begins or ends to answer in the table, and the values there."""
        low, high = self.span
        ends = [
            kelvin for stretch in self.coverage.between(low, high) if stretch.candidate
            for kelvin in (max(low, stretch.low), min(high, math.nextafter(stretch.high, 0.0)))
        ]  # fmt: skip
        return ends, self.coverage.evaluate(np.array(ends))[0].tolist()

    def __len__(self) -> int:
        return self.spacing.count

    def __iter__(self) -> Iterator[Row]:
        keys = [candidate.key for candidate in self.coverage.answering]
        for block in self.blocks():
            columns = zip(block.kelvin.tolist(), block.values.tolist(), block.expanded.tolist(), block.owners,
                          strict=True)  # fmt: skip
            for number, (kelvin, value, spread, owner) in enumerate(columns):
                stated = None if math.isnan(spread) else spread
                yield Row(kelvin, value, stated, keys[owner] if owner >= 0 else "", block.notes.get(number, PLAIN))

    def blocks(self) -> Iterator[Block]:
        """The rows in order, about a thousand at a time."""
        marker = _Marker(self.coverage)
        for start in range(0, self.spacing.count, BLOCK):
            kelvin, values, places = self._solve(start, min(start + BLOCK, self.spacing.count))
            refused = np.isnan(values) | np.isnan(kelvin)
            owners = np.where(refused, -1, self.coverage.owners[places]).tolist()
            expanded = self._expand(kelvin, values, owners)
            notes = marker.mark(kelvin, places.tolist(), owners)
            for number in np.flatnonzero(refused).tolist():
                notes[number] = _note_refused(self._reason(kelvin, values, places, number))
            yield Block(start, kelvin, values, expanded, owners, notes)

    def _solve(self, start: int, stop: int) -> tuple[Array, Array, NDArray[np.signedinteger[Any]]]:
        """Temperatures, values and stretches of some rows."""
        kelvin = np.array(self.spacing.numbers(start, stop, UNITS["K"]))
        return kelvin, *self.coverage.evaluate(kelvin)

    def _reason(self, kelvin: Array, values: Array, places: NDArray[Any], number: int) -> str:
        return self._reasons.reason(float(kelvin[number]), int(places[number]))

    @cached_property
    def _reasons(self) -> Reasons:
        return Reasons(cut_temperatures(self.coverage), partial(refuse, self.coverage))

    def refusal(self, row: Row) -> Refusal:
        """Why a row was refused, with the nearest windows.

        Parameters
        ----------
        row : Row
            A row that is marked as refused.

        Returns
        -------
        Refusal
            As a lookup of that row gives it.
        """
        return refuse(self.coverage, row.temperature)

    def _expand(self, kelvin: Array, values: Array, owners: Sequence[int]) -> Array:
        """The stated uncertainties of a block, percent at coverage factor 2."""
        percents = np.full(kelvin.shape, np.nan)
        owned = np.array(owners)
        for number in set(owners) - {-1}:
            mine = owned == number
            percents[mine] = self.coverage.answering[number].expanded_percents(kelvin[mine], values[mine])
        return percents


@lru_cache
def _note_refused(reason: str) -> Note:
    """One note for all rows refused for the same reason."""
    return Note(("refused",), reason)


def build_table(coverage: Coverage, spacing: Spacing, low: float, high: float, *, one: bool = False) -> Table:
    """A table of values at temperatures.

    Parameters
    ----------
    coverage : Coverage
        Who answers where.
    spacing : Spacing
        The temperatures, K.
    low, high : float
        The ends of the span as asked, K.
    one : bool
        Let one correlation answer over the whole span.

    Returns
    -------
    Table
        Nothing is computed yet.

    Raises
    ------
    Refused
        If one correlation is asked for and none covers the whole span.
    """
    if not one:
        return Table(coverage, spacing)
    alone, note = demand_one(coverage, low, high)
    return Table(alone, spacing, note)


class _Marker:
    """Finds what lies between a row and the one before, over all the blocks of a table."""

    def __init__(self, coverage: Coverage) -> None:
        self._stretches = coverage.stretches
        self._seams = dict(zip(_find_changes(coverage.stretches), coverage.seams, strict=True))
        self._standing = [_word_standing(candidate) for candidate in coverage.answering]
        self._stable_from = coverage.limits.lower - rules.BOUND_TOLERANCE if coverage.metastable else 0.0
        self._place = -1
        self._refused = False

    def mark(self, kelvin: Array, places: Sequence[int], owners: Sequence[int]) -> dict[int, Note]:
        """The notes of a block on the rows that have an answer."""
        notes: dict[int, Note] = {}
        metastable = kelvin < self._stable_from
        special = bool(metastable.any()) or any(self._standing)
        for number, (place, owner) in enumerate(zip(places, owners, strict=True)):
            if owner < 0:
                self._refused = True
                continue
            if place != self._place or special:
                note = self._note(place, owner, bool(metastable[number]))
                if note.marks:
                    notes[number] = note
            self._place, self._refused = place, False
        return notes

    def _note(self, place: int, owner: int, metastable: bool) -> Note:
        seams, gaps = self._cross(place) if 0 <= self._place < place else ((), ())
        marks = (
            self._standing[owner],
            "metastable" if metastable else "",
            "seam" if seams else "",
            "across-gap" if gaps else "",
        )
        return Note(tuple(mark for mark in marks if mark), "", seams, gaps)

    def _cross(self, place: int) -> tuple[tuple[Seam, ...], tuple[Stretch, ...]]:
        """The seams up to a stretch, and the gaps that no row stands in."""
        seams = tuple(self._seams[i] for i in range(self._place, place) if i in self._seams)
        between = () if self._refused else self._stretches[self._place + 1 : place]
        return seams, tuple(s for s in between if s.candidate is None and s.high - s.low > _THIN)


def _find_changes(stretches: Sequence[Stretch]) -> Iterator[int]:
    """The numbers of the stretches at whose upper end one correlation takes over from another."""
    pairs = zip(stretches, stretches[1:], strict=False)
    return (i for i, (left, right) in enumerate(pairs) if left.candidate and right.candidate)


def _word_standing(candidate: Candidate) -> str:
    standing = candidate.entry.standing
    return "" if standing == "accepted" else standing
