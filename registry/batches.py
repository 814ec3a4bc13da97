"""What a lookup gives for many temperatures at once."""

from __future__ import annotations

from collections.abc import Callable
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry.choices import Choices
from registry.coverage import Coverage
from registry.errors import BadInput
from registry.properties import PROPERTIES
from registry.refusals import Refusal
from registry.verdicts import refuse

__all__ = ["ACCEPTED", "BEYOND", "ESTIMATE", "Batch"]

ACCEPTED, BEYOND, ESTIMATE = 0, 1, 2
"""Where a value comes from: a window, beyond one, a corresponding-states method."""


class Batch(Choices):
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
        super().__init__(coverage, values, places)
        self.temperatures = temperatures
        self.values = values
        self._owners = owners
        self._origins = origins
        self._explain = explain

    @cached_property
    def chosen(self) -> NDArray[np.int16]:
        """Index into `correlations` for each temperature, -1 where refused or estimated."""
        if self._owners is None:
            return super().chosen
        chosen = self._owners.astype(np.int16)
        chosen[self.refused] = -1
        return chosen

    @cached_property
    def marks(self) -> NDArray[np.str_]:
        """``beyond``, ``estimate`` or ``draft`` for each temperature; empty for an accepted answer or a refusal."""
        marks = self.coverage.mark_owners(self.chosen)
        if self._origins is not None:
            marks[(self._origins == BEYOND) & ~self.refused] = "beyond"
            marks[(self._origins == ESTIMATE) & ~self.refused] = "estimate"
        return marks

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
