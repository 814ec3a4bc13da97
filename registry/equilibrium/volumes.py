"""Molar volumes of the two phases along a coverage, and how each was found.

The vapour's from the second virial coefficient, the liquid's as recorded or
by Rackett's equation; what lacks its constants is an ideal gas, or neglected.
"""

from __future__ import annotations

import math
from collections.abc import Mapping
from dataclasses import dataclass
from functools import cached_property

import numpy as np
from numpy.typing import NDArray

from registry.coverage import Coverage, build_coverage
from registry.dossier import Entry
from registry.equilibrium import virial
from registry.forms.corresponding import RACKETT
from registry.forms.form import Array
from registry.forms.reciprocal import GAS_CONSTANT
from registry.limits import CRITICAL_CONSTANTS, best_fixed_point
from registry.naming import join_names
from registry.records import FixedPoint

__all__ = ["IDEAL_GAS", "NEGLECTED", "TSONOPOULOS", "Choice", "Volumes", "rackett_volume"]

TSONOPOULOS = "second virial coefficient, Tsonopoulos"
IDEAL_GAS = "ideal gas"
RACKETT_NAME = "Rackett"
NEGLECTED = "neglected"


def rackett_volume(
    kelvin: Array, critical_temperature: float, critical_pressure: float, acentric_factor: float
) -> Array:
    """The saturated liquid's molar volume by Rackett's equation.

    Z_RA is 0.29056 - 0.08775 omega: T. Yamada, R. D. Gunn, J. Chem. Eng. Data
    18, 234 (1973).

    Parameters
    ----------
    kelvin : array of float
        Temperature, K, at most the critical one.
    critical_temperature, critical_pressure, acentric_factor : float
        K, Pa, and a number.

    Returns
    -------
    array of float
        m3/mol.

    Examples
    --------
    Argon at its boiling point, cm3/mol:

    >>> round(1e6 * float(rackett_volume(np.array(87.302), 150.687, 4.863e6, -0.00219)), 3)
    28.552
    """
    log_z = math.log(0.29056 - 0.08775 * acentric_factor)
    density = critical_pressure / (GAS_CONSTANT * critical_temperature)
    found: Array = 1.0 / RACKETT.value(kelvin, (critical_temperature, density, log_z))
    return found


@dataclass(frozen=True)
class Choice:
    """The method that gave a volume.

    Attributes
    ----------
    method : str
        Its name.
    because : str
        Why no better one; empty if there is none.
    """

    method: str
    because: str = ""


class Volumes:
    """The volumes of vapour and condensed phase of one compound.

    Parameters
    ----------
    coverage : Coverage
        Of the vapour pressure or the sublimation pressure.

    Attributes
    ----------
    solid : bool
        True if the condensed phase is solid; its volume is neglected.
    points : mapping of str to Entry
        The recorded critical constants by quantity.
    missing : tuple of str
        Those that are not recorded.
    """

    def __init__(self, coverage: Coverage) -> None:
        self._coverage = coverage
        self.solid = coverage.property == "sublimation-pressure"
        found = {quantity: best_fixed_point(coverage.dossier, quantity) for quantity in CRITICAL_CONSTANTS}
        self.points: Mapping[str, Entry[FixedPoint]] = {q: point for q, point in found.items() if point is not None}
        self.missing = tuple(quantity for quantity, point in found.items() if point is None)

    @cached_property
    def _constants(self) -> tuple[float, float, float] | None:
        """Critical temperature and pressure and the acentric factor, K and Pa."""
        if self.missing:
            return None
        tc, pc, omega = (self.points[quantity].record.value_si() for quantity in CRITICAL_CONSTANTS)
        return tc, pc, omega

    @cached_property
    def density(self) -> Coverage:
        """Who answers for the saturated liquid density."""
        dossier, metastable = self._coverage.dossier, self._coverage.metastable
        return build_coverage(dossier, "saturated-liquid-density", metastable=metastable)

    @property
    def limited(self) -> bool:
        """True if it is known where the vapour's volume stops to hold."""
        return "critical-temperature" in self.points and "critical-pressure" in self.points

    def second_virial(self, kelvin: Array) -> Array:
        """The second virial coefficient, m3/mol; zero for an ideal gas.

        On a saturation line it is negative by nature. Tsonopoulos gives
        others only far below its data, for a negative acentric factor.
        """
        if self._constants is None:
            return np.zeros_like(kelvin)
        return np.minimum(virial.second_virial(kelvin, *self._constants), 0.0)

    def vapour(self, kelvin: Array, pressure: Array) -> Array:
        """The molar volume of the vapour, m3/mol."""
        return virial.vapour_volume(kelvin, pressure, self.second_virial(kelvin))

    def holds(self, kelvin: Array, pressure: Array) -> NDArray[np.bool_]:
        """True where the truncated series may be used."""
        if not self.limited:
            return np.isfinite(pressure)
        tc, pc = (self.points[quantity].record.value_si() for quantity in CRITICAL_CONSTANTS[:2])
        term = self.second_virial(kelvin) * pressure / (GAS_CONSTANT * kelvin)
        found: NDArray[np.bool_] = (pressure / pc <= virial.HIGHEST_RATIO * kelvin / tc) & (term >= virial.LEAST_TERM)
        return found

    def condensed(self, kelvin: Array) -> Array:
        """The molar volume of the condensed phase, m3/mol; zero where it is neglected."""
        if self.solid:
            return np.zeros_like(kelvin)
        recorded = 1e-3 * self._coverage.dossier.compound.record.grams_per_mole() / self.density.evaluate(kelvin)[0]
        otherwise = np.zeros_like(kelvin) if self._constants is None else rackett_volume(kelvin, *self._constants)
        return np.where(np.isnan(recorded), otherwise, recorded)

    def choose_vapour(self, kelvin: float) -> Choice:
        """How the vapour's volume is found."""
        if self.missing:
            return Choice(IDEAL_GAS, f"no {_join(self.missing)} is recorded")
        if not self.second_virial(np.array([kelvin]))[0]:
            return Choice(IDEAL_GAS, "Tsonopoulos gives no negative coefficient so far below the critical temperature")
        return Choice(TSONOPOULOS)

    def choose_condensed(self, kelvin: float) -> Choice:
        """How the condensed phase's volume is found."""
        if self.solid:
            return Choice(NEGLECTED, "it is a solid")
        value, candidate = self.density.value_at(kelvin)
        if candidate is not None and value > 0.0:
            # on trial where drafts were asked for
            mark = candidate.entry.mark
            return Choice(f"recorded: {candidate.key}" + (f" ({mark})" if mark else ""))
        recorded = "covers this temperature" if self.density.answering else "is recorded"
        reason = f"no saturated liquid density {recorded}"
        if self.missing:
            return Choice(NEGLECTED, f"{reason}, nor is any {_join(self.missing)}")
        return Choice(RACKETT_NAME, reason)

    def keys_used(self, kelvin: float) -> tuple[str, ...]:
        """Keys of the fixed points that the volumes at a temperature rest on."""
        methods = (self.choose_vapour(kelvin).method, self.choose_condensed(kelvin).method)
        whole = TSONOPOULOS in methods or RACKETT_NAME in methods
        # the critical point alone says how far a volume holds
        wanted = CRITICAL_CONSTANTS if whole else CRITICAL_CONSTANTS[:2] if self.limited else ()
        return tuple(self.points[quantity].key for quantity in wanted)


def _join(quantities: tuple[str, ...]) -> str:
    return join_names((quantity.replace("-", " ") for quantity in quantities), "or")
