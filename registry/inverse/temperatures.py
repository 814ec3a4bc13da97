"""What an inverse gives: the temperature at a pressure, or the temperatures at many."""

from __future__ import annotations

from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry.answers import Answer
from registry.choices import Choices
from registry.errors import BadInput, Refused
from registry.inverse.inversion import Inversion
from registry.inverse.refusals import InverseRefusal
from registry.inverse.verdicts import is_pressure, refuse_pressure
from registry.naming import join_names
from registry.properties import PROPERTIES, Property

__all__ = ["Temperatures", "require_pressure", "solve_many", "solve_one"]


def require_pressure(prop: Property) -> None:
    """Raise BadInput for a property that is no pressure."""
    if prop.dimension != "pressure":
        names = join_names([row.name for row in PROPERTIES.values() if row.dimension == "pressure"])
        raise BadInput(f"A temperature is found at a pressure: {prop.name} is none. Ask for {names}.")


def solve_one(inversion: Inversion, pressure: float) -> Answer:
    """The temperature at one pressure.

    Parameters
    ----------
    inversion : Inversion
        Who answers where.
    pressure : float
        Pa.

    Returns
    -------
    Answer
        With the temperature that was found and the pressure as asked.

    Raises
    ------
    Refused
        Where no one temperature has it; carries an `InverseRefusal`.
    BadInput
        If it is no pressure.
    """
    kelvin, places = inversion.solve(np.array([pressure]))
    place = int(places[0])
    if place < 0 or not is_pressure(inversion.coverage, pressure):
        refusal = refuse_pressure(inversion, pressure)
        raise BadInput(refusal.explanation) if refusal.reason == "not-a-pressure" else Refused(refusal)
    candidate = inversion.coverage.stretches[place].candidate
    assert candidate is not None
    return Answer(float(kelvin[0]), pressure, candidate, inversion.coverage)


def solve_many(inversion: Inversion, pressures: NDArray[np.float64]) -> Temperatures:
    """The temperatures at many pressures, Pa, any shape."""
    return Temperatures(pressures, *inversion.solve(pressures), inversion)


class Temperatures(Choices):
    """Temperatures for an array of pressures, with the choice behind each.

    Attributes
    ----------
    pressures : array of float
        As asked, Pa.
    temperatures : array of float, same shape
        K; NaN where refused.
    coverage : Coverage
        What they come from.
    """

    def __init__(
        self, pressures: NDArray[np.float64], temperatures: NDArray[np.float64],
        places: NDArray[np.signedinteger[Any]], inversion: Inversion,
    ) -> None:  # fmt: skip
        super().__init__(inversion.coverage, temperatures, places)
        self.pressures = pressures
        self.temperatures = temperatures
        self._inversion = inversion

    def refusal(self, index: int | tuple[int, ...]) -> InverseRefusal:
        """Why the pressure at an index was refused.

        Parameters
        ----------
        index : int or tuple of int
            Where in the array.

        Returns
        -------
        InverseRefusal
            With reason, explanation and both sides.

        Raises
        ------
        BadInput
            If the pressure there was answered.
        """
        if not self.refused[index]:
            raise BadInput(f"The pressure at {index} was answered: {self.temperatures[index]} K.")
        return refuse_pressure(self._inversion, float(self.pressures[index]))
