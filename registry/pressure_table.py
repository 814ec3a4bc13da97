"""Tables of temperatures at given pressures."""

from __future__ import annotations

import math
from dataclasses import replace
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry.coverage import Coverage
from registry.inversion import END_TOLERANCE, Inversion
from registry.naming import join_names
from registry.quantities import UNITS
from registry.reasons import Reasons
from registry.refusals import Refusal
from registry.spacing import Spacing
from registry.span import demand_one_at_values
from registry.tabulation import Row, Table
from registry.verdicts import refuse

__all__ = ["PressureTable", "build_pressure_table"]

Array = NDArray[np.float64]


class PressureTable(Table):
    """The temperature at each of many pressures, where the answering correlation has that value.

    Attributes
    ----------
    coverage : Coverage
        Who answers.
    spacing : Spacing
        The pressures.
    note : str
        What to know of the whole table; empty if nothing.
    """

    @property
    def given(self) -> str:
        """What the rows are spaced in."""
        return "pressure"

    @cached_property
    def _inversion(self) -> Inversion:
        return Inversion(self.coverage)

    def extremes(self) -> tuple[list[float], list[float]]:
        """Temperatures, K, at which the curves that have some of the pressures begin or end, and the values there."""
        low, high = self.span
        branches = [b for b in self._inversion.branches if b.least <= high and low <= b.greatest]
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
        ends = {end for branch in self._inversion.branches for end in branch.ends}
        near = (end + side * END_TOLERANCE * abs(end) for end in ends for side in (-1.0, 0.0, 1.0))
        return Reasons(near, self._refuse)

    def refusal(self, row: Row) -> Refusal:
        """Why a row was refused.

        Parameters
        ----------
        row : Row
            A row that is marked as refused.

        Returns
        -------
        Refusal
            With the reason, the nearest windows and what can be done.
        """
        return self._refuse(row.value)

    def _refuse(self, value: float) -> Refusal:
        return refuse_value(self._inversion, value)


def refuse_value(inversion: Inversion, value: float) -> Refusal:
    """Why no one temperature has a value."""
    coverage = inversion.coverage
    name, prop = coverage.dossier.compound.key, coverage.property
    found = inversion.find_all(value)
    if not coverage.candidates:
        return replace(refuse(coverage, 1.0), temperature=math.nan)
    if found:
        told = join_names([f"{kelvin:.9g} K ({branch.candidate.key})" for kelvin, branch in found], "and")
        text = f"{value:.9g} Pa is the {prop} of {name} at {told}: two answers meet at a seam."
        return Refusal(math.nan, "several-temperatures", text)
    least = min((b.least for b in inversion.branches), default=math.nan)
    most = max((b.greatest for b in inversion.branches), default=math.nan)
    reach = f"its windows reach from {least:.6g} to {most:.6g} Pa"
    text = f"No temperature has a {prop} of {value:.9g} Pa for {name}; {reach}."
    return Refusal(math.nan, "outside-windows", text)


def build_pressure_table(
    coverage: Coverage, spacing: Spacing, low: float, high: float, *, one: bool = False
) -> PressureTable:
    """A table of temperatures at pressures.

    Parameters
    ----------
    coverage : Coverage
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
        return PressureTable(coverage, spacing)
    alone, note = demand_one_at_values(coverage, low, high)
    return PressureTable(alone, spacing, note)
