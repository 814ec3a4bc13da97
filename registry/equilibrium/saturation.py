"""Slope and enthalpy of an equilibrium at one temperature, with everything behind them."""

from __future__ import annotations

from dataclasses import dataclass
from functools import cached_property

import numpy as np

from registry.answering import answer_one
from registry.answers import Answer
from registry.equilibrium.boundary import PhaseBoundary, SaturationBatch
from registry.equilibrium.volumes import IDEAL_GAS, Choice
from registry.forms.reciprocal import GAS_CONSTANT
from registry.readings import Reading

__all__ = ["Correlated", "Saturation", "find_saturation"]


@dataclass(frozen=True)
class Correlated:
    """What a correlation of the enthalpy itself gives, beside the one from the slope.

    Attributes
    ----------
    key : str
        Its key.
    value : float
        J/mol.
    difference_percent : float
        By how much the enthalpy from the slope differs, percent of `value`.
    standing : str
        Its standing: a draft answers too where drafts were asked for.
    """

    key: str
    value: float
    difference_percent: float
    standing: str = "accepted"


@dataclass(frozen=True)
class Saturation:
    """Slope and enthalpy at one temperature; what costs is computed when it is asked for.

    Attributes
    ----------
    answer : Answer
        The pressure, with everything behind it.
    boundary : PhaseBoundary
        The line of equilibrium it lies on.

    Examples
    --------
    >>> import registry
    >>> with registry.open_library("shelf.db") as library:
    ...     found = library.slope("benzene", 353.24)
    >>> round(found.slope), round(found.enthalpy), round(found.ideal_enthalpy)
    (3119, 30722, 31971)
    >>> found.vapour.method, found.condensed.method
    ('second virial coefficient, Tsonopoulos', 'Rackett')
    """

    answer: Answer
    boundary: PhaseBoundary

    def __repr__(self) -> str:
        where = f"at {self.temperature!r} K by {self.answer.correlation.key}"
        return f"<{type(self).__name__} {self.pressure!r} Pa, {self.slope!r} Pa/K {where}>"

    @cached_property
    def _row(self) -> SaturationBatch:
        return self.boundary.evaluate(np.array(self.temperature))

    @property
    def compound(self) -> str:
        """The key of the compound."""
        return self.answer.compound

    @property
    def temperature(self) -> float:
        """The temperature as asked, K."""
        return self.answer.temperature

    @property
    def pressure(self) -> float:
        """The pressure, Pa."""
        return self.answer.value

    @property
    def slope(self) -> float:
        """dp/dT along the line of equilibrium, Pa/K."""
        return float(self._row.slopes)

    @property
    def percent_per_kelvin(self) -> float:
        """How steep the line is, percent of the pressure per kelvin."""
        return float(self._row.percent_per_kelvin)

    @property
    def enthalpy(self) -> float | None:
        """Enthalpy of the transition, J/mol: of vaporization or sublimation with the real vapour.

        None on a melting line whose record states none, and where no
        temperature is covered at which the vapour's volume is known.
        """
        return _number(self._row.enthalpies)

    @property
    def ideal_enthalpy(self) -> float | None:
        """R T^2 dlnp/dT, J/mol: an ideal vapour, no condensed volume; None on a melting line."""
        return _number(self._row.ideal_enthalpies)

    @property
    def enthalpy_per_volume(self) -> float:
        """T dp/dT, J/m3: the enthalpy of the transition over its change of volume."""
        return self.temperature * self.slope

    @property
    def volume_change(self) -> float | None:
        """Volume of the vapour less that of the condensed phase, m3/mol; None where there is no enthalpy."""
        return None if self.boundary.melts else _number(self._row.volume_changes)

    @property
    def condensed_volume(self) -> float | None:
        """Molar volume of the condensed phase, m3/mol; zero where neglected, None on a melting line."""
        if self.boundary.melts:
            return None
        return float(self.boundary.volumes.condensed(np.array([self.temperature]))[0])

    @property
    def vapour_volume(self) -> float | None:
        """Molar volume of the vapour, m3/mol; beyond the virial series what the enthalpy makes it."""
        change, condensed = self.volume_change, self.condensed_volume
        return None if change is None or condensed is None else change + condensed

    @property
    def compressibility_change(self) -> float | None:
        """dZ = p dV/(R T), which is the enthalpy over the ideal one."""
        change = self.volume_change
        return None if change is None else self.pressure * change / (GAS_CONSTANT * self.temperature)

    @property
    def second_virial(self) -> float | None:
        """The second virial coefficient at this temperature, m3/mol; None for an ideal gas or a melting line."""
        if self.boundary.melts or self.vapour.method == IDEAL_GAS:
            return None
        return float(self.boundary.volumes.second_virial(np.array([self.temperature]))[0])

    @cached_property
    def carried_from(self) -> float | None:
        """The temperature from which Watson's relation carried the enthalpy, K; None where it did not."""
        anchor = self.boundary.anchor
        if anchor is None or self.temperature <= anchor.temperature or self.enthalpy is None:
            return None
        return anchor.temperature

    @property
    def method(self) -> str:
        """What gave the enthalpy: Clapeyron, Watson's relation, or the record of a melting line; empty if nothing."""
        if self.enthalpy is None:
            return ""
        if self.boundary.melts:
            return f"recorded: {self.answer.correlation.key}"
        return "Clapeyron" if self.carried_from is None else f"Watson from {self.carried_from:.1f} K"

    @property
    def vapour(self) -> Choice:
        """How the vapour's volume was found, and why not better; where Watson's relation starts, if it was used."""
        return Choice("") if self.boundary.melts else self.boundary.volumes.choose_vapour(self._known_at)

    @property
    def condensed(self) -> Choice:
        """How the condensed phase's volume was found, and why not better."""
        return Choice("") if self.boundary.melts else self.boundary.volumes.choose_condensed(self._known_at)

    @property
    def fixed_points(self) -> tuple[str, ...]:
        """Keys of the fixed points that the enthalpy rests on."""
        return () if self.boundary.melts else self.boundary.volumes.keys_used(self._known_at)

    @property
    def _known_at(self) -> float:
        return self.temperature if self.carried_from is None else self.carried_from

    @cached_property
    def correlated(self) -> Correlated | None:
        """What a correlation of the enthalpy itself gives there; None where none covers it."""
        if self.answer.property != "vapor-pressure" or self.enthalpy is None:
            return None
        value, candidate = self.boundary.correlated.value_at(self.temperature)
        if candidate is None or not value > 0.0:
            return None
        return Correlated(candidate.key, value, 100.0 * (self.enthalpy / value - 1.0), candidate.entry.standing)

    @property
    def cautions(self) -> tuple[str, ...]:
        """What to know before relying on the numbers."""
        own = []
        if self.answer.reading.uncertainty:
            own.append("The uncertainty of the temperature is not carried to slope and enthalpy.")
        if self.boundary.melts:
            return (*self.answer.cautions, *own)
        if self.enthalpy is None:
            own.append(
                "The truncated virial series does not hold here, and there is nothing to carry the enthalpy from: "
                "only the slope is known."
            )
        elif self.vapour.method == IDEAL_GAS:
            own.append("The vapour is taken as an ideal gas: the enthalpy is too high, the more the denser the vapour.")
            if not self.boundary.volumes.limited:
                own.append("No critical point is recorded: nothing tells how far from ideal the vapour is.")
        return (*self.answer.cautions, *own)


def find_saturation(boundary: PhaseBoundary, kelvin: float, reading: Reading | None = None) -> Saturation:
    """Slope and enthalpy at one temperature.

    Parameters
    ----------
    boundary : PhaseBoundary
        The line of equilibrium.
    kelvin : float
        The temperature on ITS-90, K.
    reading : Reading, optional
        The temperature as it was read, where it has an uncertainty or a scale.

    Returns
    -------
    Saturation
        With everything behind it.

    Raises
    ------
    Refused
        Where no correlation may answer.
    BadInput
        If it is no temperature.
    """
    answer = answer_one(boundary.coverage, kelvin, reading)
    # an extrapolation or an estimate is given to those alone who ask for it by name
    assert isinstance(answer, Answer)
    return Saturation(answer, boundary)


def _number(value: np.typing.NDArray[np.float64]) -> float | None:
    number = float(value)
    return None if np.isnan(number) else number
