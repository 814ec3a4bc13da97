"""What a lookup gives for many temperatures at once."""

from __future__ import annotations

from collections.abc import Callable
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry.coverage import Coverage, Seam
from registry.errors import BadInput
from registry.properties import PROPERTIES
from registry.records import Correlation
from registry.refusals import Refusal
from registry.verdicts import refuse

__all__ = ["ACCEPTED", "BEYOND", "ESTIMATE", "Batch"]

ACCEPTED, BEYOND, ESTIMATE = 0, 1, 2
"""Where a value comes from: a window, beyond one, a corresponding-states method."""


class Batch:
    """Values for an array of temperatures, with the choice behind each.

    Attributes
    ----------
    temperatures : array of float
        As asked, K.
    values : array of float, same shape
        In the SI unit of the property; NaN where refused.
    coverage : Coverage
        What the values come from.
    """

    def __init__(
        self, temperatures: NDArray[np.float64], values: NDArray[np.float64],
        places: NDArray[np.signedinteger[Any]], coverage: Coverage,
        owners: NDArray[np.signedinteger[Any]] | None = None, origins: NDArray[np.int8] | None = None,
        explain: Callable[[float], Refusal] | None = None,
    ) -> None:  # fmt: skip
        values.flags.writeable = False
        self.temperatures = temperatures
        self.values = values
        self.coverage = coverage
        self._places = places
        self._owners = owners
        self._origins = origins
        self._explain = explain

    def __repr__(self) -> str:
        answered = self.values.size - int(self.refused.sum())
        return f"<Batch of {self.values.size} for {self.coverage.dossier.compound.key}, {answered} answered>"

    @cached_property
    def chosen(self) -> NDArray[np.int16]:
        """Index into `correlations` for each temperature, -1 where refused or estimated."""
        chosen = np.empty(self.values.shape, dtype=np.int16)
        if self._owners is not None:
            chosen[...] = self._owners
        else:
            np.take(self.coverage.owners, self._places, out=chosen, mode="wrap")
        refused = self.refused
        if refused.any():
            chosen[refused] = -1
        return chosen

    @property
    def correlations(self) -> tuple[Correlation, ...]:
        """The correlations that answer somewhere, in the order of temperature."""
        return tuple(candidate.record for candidate in self.coverage.answering)

    @cached_property
    def refused(self) -> NDArray[np.bool_]:
        """True where nothing may answer."""
        return np.isnan(self.values)

    @cached_property
    def marks(self) -> NDArray[np.str_]:
        """``beyond``, ``estimate`` or ``draft`` for each temperature; empty for an accepted answer or a refusal."""
        standings = [candidate.entry.standing for candidate in self.coverage.answering]
        names = np.array(["" if standing == "accepted" else standing for standing in standings] + [""], dtype="<U9")
        marks = names[self.chosen]
        if self._origins is not None:
            marks[(self._origins == BEYOND) & ~self.refused] = "beyond"
            marks[(self._origins == ESTIMATE) & ~self.refused] = "estimate"
        return marks

    @property
    def seams(self) -> tuple[Seam, ...]:
        """Where the answering correlation changes, with the jump."""
        return self.coverage.seams

    @property
    def unit(self) -> str:
        """The SI unit of the values."""
        return PROPERTIES[self.coverage.property].unit

    def refusal(self, index: int | tuple[int, ...]) -> Refusal:
        """Why the temperature at an index was refused.

        Parameters
        ----------
        index : int or tuple of int
            Where in the array.

        Returns
        -------
        Refusal
            With reason, explanation and nearest windows.

        Raises
        ------
        BadInput
            If the temperature there was answered.
        """
        if not self.refused[index]:
            raise BadInput(f"The temperature at {index} was answered: {self.values[index]} {self.unit}.")
        kelvin = float(self.temperatures[index])
        return self._explain(kelvin) if self._explain else refuse(self.coverage, kelvin)
