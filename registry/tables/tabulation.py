"""Tables of a property over a span: rows made as they are read, whatever their number."""

from __future__ import annotations

import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from functools import cached_property, partial
from typing import Any, NamedTuple

import numpy as np
from numpy.typing import NDArray

from registry.coverage import Coverage
from registry.properties import PROPERTIES
from registry.quantities import UNITS
from registry.refusals import Refusal
from registry.tables.notes import PLAIN, Marker, Note, note_refused
from registry.tables.reasons import Reasons, cut_temperatures
from registry.tables.spacing import Spacing
from registry.tables.span import demand_one
from registry.verdicts import refuse

__all__ = ["BLOCK", "Block", "Row", "Table", "build_table"]

Array = NDArray[np.float64]

BLOCK = 1024
"""Rows that are held at a time."""


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

    def __repr__(self) -> str:
        what = f"{self.coverage.property} of {self.coverage.dossier.compound.key}"
        return f"<{type(self).__name__} of {len(self)} rows, {what}>"

    def __iter__(self) -> Iterator[Row]:
        keys = [candidate.key for candidate in self.coverage.answering]
        for block in self.blocks():
            columns = zip(block.kelvin.tolist(), block.values.tolist(), block.expanded.tolist(), block.owners,
                          strict=True)  # fmt: skip
            for number, (kelvin, value, spread, owner) in enumerate(columns):
                stated = None if math.isnan(spread) else spread
                yield Row(kelvin, value, stated, keys[owner] if owner >= 0 else "", block.notes.get(number, PLAIN))

    def blocks(self) -> Iterator[Block]:
        """The rows in order.

        Yields
        ------
        Block
            About a thousand of them.
        """
        marker = Marker(self.coverage)
        for start in range(0, self.spacing.count, BLOCK):
            kelvin, values, places = self._solve(start, min(start + BLOCK, self.spacing.count))
            refused = np.isnan(values) | np.isnan(kelvin)
            owners = np.where(refused, -1, self.coverage.owners[places]).tolist()
            expanded = self._expand(kelvin, values, owners)
            notes = marker.mark(kelvin, places.tolist(), owners)
            for number in np.flatnonzero(refused).tolist():
                notes[number] = note_refused(self._reason(kelvin, values, places, number))
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
        return self.coverage.expanded_percents(kelvin, values, np.array(owners))


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
