"""The columns of a table in the units asked for."""

from __future__ import annotations

import math
from collections.abc import Iterator
from typing import NamedTuple

from registry.coverage import Seam
from registry.display import format_percent, format_plain, suit_unit
from registry.quantities import UNITS, Unit
from registry.tables.conversion import Conversion
from registry.tables.notes import PLAIN, Note
from registry.tables.tabulation import Block, Table

__all__ = ["Columns", "Line", "suit_value_unit"]


class Line(NamedTuple):
    """One row in the units asked for.

    Attributes
    ----------
    given, found : float
        Temperature and value, or pressure and temperature; what was refused
        is NaN.
    expanded : float
        The stated uncertainty of what was found at coverage factor 2: percent
        of a value, kelvins of a temperature; NaN if none is stated.
    correlation : str
        Who answers; empty in a refused row.
    revision : int or None
        Its revision.
    note : Note
        The marks of the row.
    """

    given: float
    found: float
    expanded: float
    correlation: str
    revision: int | None
    note: Note


class Columns:
    """A table's columns with their names and units.

    Parameters
    ----------
    table : Table
        What they hold.
    temperature, value : Unit
        The units of its temperatures and values.

    Attributes
    ----------
    names : tuple of str
        The name of each column with its unit, in words that a program reads.
    """

    def __init__(self, table: Table, temperature: Unit, value: Unit) -> None:
        self.table = table
        self.temperature = temperature
        self.value = value
        mass = table.coverage.dossier.compound.record.grams_per_mole()
        self._to_value = Conversion(UNITS[table.unit], value, mass)
        self._to_temperature = Conversion(UNITS["K"], temperature)
        candidates = table.coverage.answering
        self._keys = [*(c.key for c in candidates), ""]
        self._revisions = [*(c.entry.revision for c in candidates), None]
        heads = (f"temperature_{temperature.name}", f"{table.coverage.property.replace('-', '_')}_{value.name}")
        heads = heads if self.by_temperature else heads[::-1]
        self.names = (
            *heads,
            f"uncertainty_{'percent' if self.by_temperature else 'K'}_k2",
            "correlation",
            "revision",
            "mark",
        )

    @property
    def by_temperature(self) -> bool:
        """True if the rows are at given temperatures, False if at given pressures."""
        return self.table.given == "temperature"

    def lines(self, block: Block) -> Iterator[Line]:
        """The rows of a block."""
        stop = block.start + len(block.owners)
        unit = self.temperature if self.by_temperature else self.value
        # a place is rounded once, from the exact one
        given = self.table.spacing.numbers(block.start, stop, unit)
        if self.by_temperature:
            found = self._to_value.many(block.values.tolist())
        else:
            found = self._to_temperature.many(block.kelvin.tolist())
        keys, revisions, notes = self._keys, self._revisions, block.notes
        columns = zip(given, found, block.expanded.tolist(), block.owners, strict=True)
        for number, (place, result, spread, owner) in enumerate(columns):
            yield Line(place, result, spread, keys[owner], revisions[owner], notes.get(number, PLAIN))

    def ends(self) -> list[float]:
        """What is given in the first and in the last row."""
        unit, count = self.temperature if self.by_temperature else self.value, self.table.spacing.count
        return [self.table.spacing.numbers(i, i + 1, unit)[0] for i in (0, count - 1)]

    def show_temperature(self, kelvin: float) -> str:
        """A temperature, K, in the unit of the column and with it."""
        return f"{format_plain(round(self._to_temperature.many([kelvin])[0], 6))} {self.temperature.name}"

    def word_seam(self, seam: Seam) -> str:
        """Where a seam lies, and how far the value jumps there."""
        return f"at {self.show_temperature(seam.temperature)}: {format_percent(seam.jump_percent, '+')}"

    def word_marks(self, note: Note) -> str:
        """The marks of a row in words."""
        if note is PLAIN:
            return ""
        if note.reason:
            return f"refused: {note.reason}"
        plain = [mark for mark in note.marks if mark not in ("seam", "across-gap")]
        seams = [f"seam {self.word_seam(seam)}" for seam in note.seams]
        gaps = [f"across a gap, {self.show_temperature(g.low)} to {self.show_temperature(g.high)}" for g in note.gaps]
        return "; ".join([*plain, *seams, *gaps])


def suit_value_unit(table: Table) -> Unit:
    """The one unit that suits a whole column of values; kPa for pressures of which each would suit another."""
    si, sizes = UNITS[table.unit], [abs(value) for value in table.extremes()[1] if math.isfinite(value)]
    suited = {suit_unit(size, si) for size in (min(sizes), max(sizes))} if sizes else {suit_unit(1000.0, si)}
    return suited.pop() if len(suited) == 1 else UNITS["kPa"]
