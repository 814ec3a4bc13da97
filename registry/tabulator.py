"""Reading a library in tables."""

from __future__ import annotations

import math
import operator
from fractions import Fraction
from typing import TYPE_CHECKING

from registry.errors import BadInput, quote
from registry.properties import PROPERTIES
from registry.reader import Reader

# a lookup makes no table
if TYPE_CHECKING:
    from registry.tables.tabulation import Table

__all__ = ["Tabulator"]


class Tabulator(Reader):
    """Reading a library as `Reader` does, and in tables.

    Parameters
    ----------
    file : LibraryFile
        The open database.
    position : int, optional
        The change up to which everything is read; the newest one if none is
        given.
    lock : RLock, optional
        Of the reader that this one is a view of, and that owns the file.
    """

    def tabulate(
        self, compound: str, low: float, high: float, *, step: float | None = None, points: int | None = None,
        property: str = "vapor-pressure", phase: str | None = None, metastable: bool = False, drafts: bool = False,
        one: bool = False,
    ) -> Table:  # fmt: skip
        """Values at evenly spaced temperatures, as rows that are made while they are read.

        Parameters
        ----------
        compound : str
            Key, name, synonym, CAS number or formula, case aside.
        low, high : float
            The first temperature, and the last one at most, K.
        step : float, optional
            From one temperature to the next, K. Numbers count as they are
            written: 0.1 is a tenth, and steps do not drift.
        points : int, optional
            How many temperatures, both ends among them; instead of `step`.
        property, phase, metastable, drafts
            As for `lookup`.
        one : bool
            Let one correlation answer over the whole span, the one that ranks
            first of those that cover all of it.

        Returns
        -------
        Table
            Its rows say where the answering correlation changes and by how
            much the value jumps there; a refused row has a reason.

        Raises
        ------
        Refused
            If one correlation is asked for and none covers the whole span.
        UnknownKey, BadInput
            As for `lookup`, or if the ends, the step or the number of points
            cannot be.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     table = library.tabulate("water", 273.16, 647.0, step=0.1)
        >>> len(table)
        3739
        """
        from registry.tables.spacing import space_temperatures
        from registry.tables.tabulation import build_table

        ends = _read_exact(low, "temperature"), _read_exact(high, "temperature")
        by = None if step is None else _read_exact(step, "step")
        spacing = space_temperatures(*ends, by, None if points is None else _read_whole(points))
        coverage = self.coverage(compound, property=property, phase=phase, metastable=metastable, drafts=drafts)
        return build_table(coverage, spacing, float(ends[0]), float(ends[1]), one=one)

    def tabulate_at_pressures(
        self, compound: str, low: float, high: float, *, step: float | None = None, points: int | None = None,
        property: str = "vapor-pressure", phase: str | None = None, metastable: bool = False, drafts: bool = False,
        one: bool = False,
    ) -> Table:  # fmt: skip
        """Temperatures at given pressures, as rows that are made while they are read.

        Parameters
        ----------
        compound : str
            Key, name, synonym, CAS number or formula, case aside.
        low, high : float
            The first pressure, and the last one at most, Pa.
        step : float, optional
            From one pressure to the next, Pa.
        points : int, optional
            How many pressures, with one ratio between neighbours and both
            ends among them; instead of `step`. With neither, 1, 2 and 5 times
            each power of ten.
        property : str
            A property that is a pressure.
        phase, metastable, drafts
            As for `lookup`.
        one : bool
            Let one correlation answer throughout, the one that ranks first of
            those that have all the pressures.

        Returns
        -------
        Table
            Its rows have the pressure as value; a refused one a temperature
            of NaN, and a reason.

        Raises
        ------
        Refused
            If one correlation is asked for and none has all the pressures.
        UnknownKey, BadInput
            As for `tabulate`, or if the property is no pressure.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     for row in library.tabulate_at_pressures("water", 1e5, 1e6):
        ...         print(row.value, round(row.temperature, 3))
        100000.0 372.756
        200000.0 393.362
        500000.0 424.986
        1000000.0 453.036
        """
        from registry.inverse.temperatures import require_pressure
        from registry.quantities import UNITS
        from registry.tables.pressure_table import build_pressure_table
        from registry.tables.spacing import space_pressures

        ends = _read_exact(low, "pressure"), _read_exact(high, "pressure")
        by = None if step is None else _read_exact(step, "step")
        many = None if points is None else _read_whole(points)
        spacing = space_pressures(*ends, UNITS["Pa"], by, many)
        coverage = self.coverage(compound, property=property, phase=phase, metastable=metastable, drafts=drafts)
        require_pressure(PROPERTIES[coverage.property])
        return build_pressure_table(self._invert(coverage), spacing, float(ends[0]), float(ends[1]), one=one)


def _read_exact(number: float, what: str) -> Fraction:
    """The decimal number that a float is written as."""
    try:
        plain = number.item() if hasattr(number, "item") else number
        if isinstance(plain, (int, float)) and math.isfinite(plain) and plain > 0:
            return Fraction(str(plain))
    except (ValueError, OverflowError):
        pass  # an array of several, or an integer beyond every double
    raise BadInput(f"{quote(number)} is no {what}; a finite number above 0 is allowed.")


def _read_whole(number: int) -> int:
    try:
        return operator.index(number)
    except TypeError:
        raise BadInput(f"{quote(number)} is no number of points; a whole number is allowed.") from None
