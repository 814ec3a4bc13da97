"""Tables of temperatures at given pressures."""

from __future__ import annotations

from collections.abc import Sequence
from functools import cached_property, partial
from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry.inverse.inversion import END_TOLERANCE, Inversion
from registry.inverse.refusals import InverseRefusal
from registry.inverse.verdicts import refuse_pressure
from registry.quantities import UNITS
from registry.tables.reasons import Reasons
from registry.tables.spacing import Spacing
from registry.tables.span import demand_one_at_values
from registry.tables.tabulation import Row, Table

__all__ = ["PressureTable", "build_pressure_table"]

Array = NDArray[np.float64]


class PressureTable(Table):
    """The temperature at each of many pressures, where the answering correlation has that value.

    Parameters
    ----------
    inversion : Inversion
        Who answers where.
    spacing : Spacing
        The pressures.
    note : str
        What to know of the whole table; empty if nothing.

    Attributes
    ----------
    coverage : Coverage
        Who answers.
    spacing : Spacing
        The pressures.
    note : str
        What to know of the whole table; empty if nothing.
    """

    def __init__(self, inversion: Inversion, spacing: Spacing, note: str = "") -> None:
        super().__init__(inversion.coverage, spacing, note)
        self._inversion = inversion

    @property
    def given(self) -> str:
        """What the rows are spaced in."""
        return "pressure"

    def extremes(self) -> tuple[list[float], list[float]]:
        """Temperatures, K, at which the curves that have some of the pressures begin or end, and the values there."""
        low, high = self.span
        inversion = self._inversion
        branches = [b for b in inversion.branches if inversion.answers(b) and b.least <= high and low <= b.greatest]
        ends = [kelvin for branch in branches for kelvin in (branch.low, branch.high)]
        return ends, [value for branch in branches for value in branch.ends]

    def _solve(self, start: int, stop: int) -> tuple[Array, Array, NDArray[np.signedinteger[Any]]]:
        values = np.array(self.spacing.numbers(start, stop, UNITS["Pa"]))
        kelvin, places = self._inversion.solve(values)
        return kelvin, values, places

    def _reason(self, kelvin: Array, values: Array, places: NDArray[Any], number: int) -> str:
        return self._reasons.reason(float(values[number]), int(places[number]))

    @cached_property
    def _reasons(self) -> Reasons:
        ends = {end for branch in (*self._inversion.branches, *self._inversion.unaccepted) for end in branch.ends}
        near = (end + side * END_TOLERANCE * abs(end) for end in ends for side in (-1.0, 0.0, 1.0))
        return Reasons(near, partial(refuse_pressure, self._inversion))

    def refusal(self, row: Row) -> InverseRefusal:
        """Why a row was refused.

        Parameters
        ----------
        row : Row
            A row that is marked as refused.

        Returns
        -------
        InverseRefusal
            With the reason, both sides and what can be done.
        """
        return refuse_pressure(self._inversion, row.value)

    def _expand(self, kelvin: Array, values: Array, owners: Sequence[int]) -> Array:
        """The stated uncertainties of the pressures, carried to the temperatures by the slope, K."""
        spreads, owned = super()._expand(kelvin, values, owners), np.array(owners)
        for number in set(owners) - {-1}:
            mine = owned == number
            rates = np.abs(self.coverage.answering[number].curve.rates(kelvin[mine]) / values[mine])
            with np.errstate(divide="ignore"):
                spreads[mine] = np.where(rates > 0.0, spreads[mine] / (100.0 * rates), np.nan)
        return spreads


def build_pressure_table(
    inversion: Inversion, spacing: Spacing, low: float, high: float, *, one: bool = False
) -> PressureTable:
    """A table of temperatures at pressures.

    Parameters
    ----------
    inversion : Inversion
        Who answers where, for a property that is a pressure.
    spacing : Spacing
        The pressures, Pa.
    low, high : float
        The ends of the span as asked, Pa.
    one : bool
        Let one correlation answer over the whole span.

    Returns
    -------
    PressureTable
        Nothing is computed yet.

    Raises
    ------
    Refused
        If one correlation is asked for and none has all the pressures.
    """
    if not one:
        return PressureTable(inversion, spacing)
    alone, note = demand_one_at_values(inversion.coverage, low, high)
    return PressureTable(Inversion(alone), spacing, note)
