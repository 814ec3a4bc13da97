"""The line of equilibrium between two phases: Clapeyron's equation on a coverage.

The enthalpy of vaporization or sublimation follows from the slope of the
pressure and the volumes of both phases (`registry.equilibrium.volumes`). Where the
truncated virial series no longer holds, Watson's relation carries the
enthalpy from the highest temperature at which it does, down to zero at the
critical temperature.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from functools import cached_property, partial

import numpy as np
from numpy.typing import NDArray

from registry.candidate import Candidate
from registry.coverage import Coverage, build_coverage
from registry.equilibrium.clapeyron import ideal_enthalpy, transition_enthalpy, watson_enthalpy
from registry.equilibrium.volumes import Volumes
from registry.errors import BadInput
from registry.forms.form import Array
from registry.numerals import to_float
from registry.refusals import Refusal
from registry.sampling import find_change
from registry.verdicts import refuse

__all__ = ["Anchor", "PhaseBoundary", "SaturationBatch", "require_boundary"]

BOUNDARIES = ("vapor-pressure", "sublimation-pressure", "melting-pressure")
MELTING = "melting-pressure"


def require_boundary(prop: str) -> None:
    """Raise `BadInput` unless a property is the pressure along an equilibrium line."""
    if prop not in BOUNDARIES:
        raise BadInput(
            f"A slope with its enthalpy belongs to vapor-pressure, sublimation-pressure or melting-pressure; "
            f"{prop} was given."
        )


@dataclass(frozen=True)
class Anchor:
    """Where Watson's relation starts: the highest temperature at which the virial series holds.

    Attributes
    ----------
    temperature, enthalpy : float
        K and J/mol; NaN for the enthalpy if there is nothing to carry: no
        such temperature is covered, or it is of sublimation.
    critical : float
        Critical temperature, K.
    """

    temperature: float
    enthalpy: float
    critical: float


class PhaseBoundary:
    """The line of equilibrium between two phases that a coverage describes.

    Parameters
    ----------
    coverage : Coverage
        Of a vapour, sublimation or melting pressure.
    """

    def __init__(self, coverage: Coverage) -> None:
        require_boundary(coverage.property)
        self.coverage = coverage

    @property
    def melts(self) -> bool:
        """True for a melting line, which has no vapour."""
        return self.coverage.property == MELTING

    @cached_property
    def volumes(self) -> Volumes:
        """The molar volumes of vapour and condensed phase."""
        return Volumes(self.coverage)

    @cached_property
    def correlated(self) -> Coverage:
        """Who answers for the enthalpy of vaporization itself."""
        dossier, metastable = self.coverage.dossier, self.coverage.metastable
        return build_coverage(dossier, "enthalpy-of-vaporization", metastable=metastable)

    @cached_property
    def anchor(self) -> Anchor | None:
        """Where Watson's relation takes over; None if the virial series holds wherever anything answers."""
        if self.melts or not self.volumes.limited:
            return None
        critical = self.volumes.points["critical-temperature"].record.value_si()
        found = [stretch for stretch in self.coverage.stretches if stretch.candidate is not None]
        for number, stretch in enumerate(reversed(found)):
            assert stretch.candidate is not None
            top = math.nextafter(stretch.high, 0.0)
            if self._holds(stretch.candidate, top):
                return self._anchor_at(top, critical) if number else None
            if self._holds(stretch.candidate, stretch.low):
                last, _ = find_change(partial(self._holds, stretch.candidate), stretch.low, top)
                return self._anchor_at(last, critical)
        return Anchor(-math.inf, math.nan, critical)

    def _anchor_at(self, kelvin: float, critical: float) -> Anchor:
        if self.volumes.solid:
            return Anchor(kelvin, math.nan, critical)
        at = np.array([kelvin])
        pressure, slope = self._pressures(at)
        return Anchor(kelvin, float(self._enthalpies(at, pressure, slope)[0]), critical)

    def _holds(self, candidate: Candidate, kelvin: float) -> bool:
        return bool(self.volumes.holds(np.array([kelvin]), np.array([candidate.curve.value(kelvin)]))[0])

    def _pressures(self, flat: Array) -> tuple[Array, Array]:
        """Pressures and slopes, Pa and Pa/K, NaN where nothing answers."""
        pressure, places = self.coverage.evaluate(flat)
        slope = np.full(flat.shape, np.nan)
        chosen = np.take(self.coverage.owners, places)
        for index, candidate in enumerate(self.coverage.answering):
            mine = np.flatnonzero((chosen == index) & ~np.isnan(pressure))
            if mine.size:
                slope[mine] = candidate.curve.rates(flat[mine])
        return pressure, slope

    def _enthalpies(self, flat: Array, pressure: Array, slope: Array) -> Array:
        """By Clapeyron's equation, J/mol."""
        change = self.volumes.vapour(flat, pressure) - self.volumes.condensed(flat)
        return transition_enthalpy(flat, slope, change)

    def evaluate(self, kelvin: Array) -> SaturationBatch:
        """Slopes and enthalpies at temperatures.

        Parameters
        ----------
        kelvin : array of float, any shape
            Temperatures, K.

        Returns
        -------
        SaturationBatch
            NaN where nothing may answer.
        """
        flat = np.ascontiguousarray(kelvin, dtype=float).reshape(-1)
        with np.errstate(all="ignore"):
            pressure, slope = self._pressures(flat)
            if self.melts:
                nothing = np.full(flat.shape, np.nan)
                enthalpy, ideal, change = self._melting_enthalpies(flat, slope), nothing, nothing
            else:
                ideal = ideal_enthalpy(flat, pressure, slope)
                enthalpy = self._carry(flat, pressure, self._enthalpies(flat, pressure, slope))
                # the inverse of Clapeyron's equation: also right where Watson's relation gave the enthalpy
                change = enthalpy / (flat * slope)
        shape = np.shape(kelvin)
        columns = (column.reshape(shape) for column in (flat, pressure, slope, enthalpy, ideal, change))
        return SaturationBatch(self, *columns)

    def _carry(self, flat: Array, pressure: Array, enthalpy: Array) -> Array:
        """Watson's relation beyond the anchor."""
        anchor = self.anchor
        if anchor is None:
            return enthalpy
        carried = watson_enthalpy(flat, anchor.temperature, anchor.enthalpy, anchor.critical)
        beyond = (flat > anchor.temperature) & ~np.isnan(pressure)
        return np.where(beyond, carried, enthalpy)

    def _melting_enthalpies(self, flat: Array, slope: Array) -> Array:
        """The constant enthalpy of a line that is Clapeyron's own, J/mol; NaN for any other."""
        found = np.full(flat.shape, np.nan)
        places = self.coverage.evaluate(flat)[1]
        chosen = np.take(self.coverage.owners, places)
        for index, candidate in enumerate(self.coverage.answering):
            if candidate.record.form == "clapeyron-melting":
                found[(chosen == index) & ~np.isnan(slope)] = to_float(candidate.record.coefficients["H"])
        return found


@dataclass(frozen=True)
class SaturationBatch:
    """Slopes and enthalpies for an array of temperatures; NaN where refused.

    Attributes
    ----------
    boundary : PhaseBoundary
        What they come from.
    temperatures, pressures : array of float
        K and Pa.
    slopes : array of float
        dp/dT, Pa/K.
    enthalpies : array of float
        Of vaporization or sublimation with the real vapour, J/mol; on a
        melting line of fusion, where its record states one.
    ideal_enthalpies : array of float
        With an ideal vapour and no condensed volume, J/mol.
    volume_changes : array of float
        Volume of the vapour less that of the condensed phase, m3/mol.
    """

    boundary: PhaseBoundary
    temperatures: Array
    pressures: Array
    slopes: Array
    enthalpies: Array
    ideal_enthalpies: Array
    volume_changes: Array

    def __repr__(self) -> str:
        name = self.boundary.coverage.dossier.compound.key
        answered = self.slopes.size - int(self.refused.sum())
        return f"<SaturationBatch of {self.slopes.size} for {name}, {answered} answered>"

    @property
    def percent_per_kelvin(self) -> Array:
        """How steep the line is, percent of the pressure per kelvin."""
        with np.errstate(all="ignore"):
            found: Array = 100.0 * self.slopes / self.pressures
        return found

    @property
    def refused(self) -> NDArray[np.bool_]:
        """True where nothing may answer."""
        return np.isnan(self.slopes)

    @property
    def marks(self) -> NDArray[np.str_]:
        """``draft`` for each temperature at which one answers; empty for an accepted correlation or a refusal."""
        coverage = self.boundary.coverage
        chosen = np.take(coverage.owners, coverage.evaluate(self.temperatures)[1])
        return coverage.mark_owners(np.where(self.refused, -1, chosen))

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
            raise BadInput(f"The temperature at {index} was answered: {self.slopes[index]} Pa/K.")
        return refuse(self.boundary.coverage, float(self.temperatures[index]))
