"""Vapour pressures by corresponding states: estimates, never chosen by themselves.

References
----------
.. [1] B. I. Lee, M. G. Kesler, AIChE J. 21, 510 (1975).
.. [2] D. Ambrose, J. Walton, Pure Appl. Chem. 61, 1395 (1989) (constants from
   memory; they close to six digits at Tr = 0.7).
.. [3] K. S. Pitzer et al., J. Am. Chem. Soc. 77, 3433 (1955).
"""

from __future__ import annotations

import math
from collections.abc import Callable
from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from registry.coverage import Coverage
from registry.dossier import Dossier, Entry
from registry.errors import BadInput, quote
from registry.limits import CRITICAL_CONSTANTS, best_fixed_point
from registry.naming import join_names
from registry.readings import Reading
from registry.records import FixedPoint
from registry.values import Value

__all__ = [
    "METHODS",
    "Estimate",
    "Estimator",
    "Method",
    "MissingConstant",
    "acentric_factor",
    "find_method",
    "require_vapour_pressure",
]

Array = NDArray[np.float64]


def _lee_kesler(reduced: Array, acentric: float) -> Array:
    log, sixth = np.log(reduced), reduced**6
    f0 = 5.92714 - 6.09648 / reduced - 1.28862 * log + 0.169347 * sixth
    f1 = 15.2518 - 15.6875 / reduced - 13.4721 * log + 0.43577 * sixth
    return f0 + acentric * f1


_AMBROSE_WALTON = (
    (-5.97616, 1.29874, -0.60394, -1.06841),
    (-5.03365, 1.11505, -5.41217, -7.46628),
    (-0.64771, 2.41539, -4.26979, 3.25259),
)


def _ambrose_walton(reduced: Array, acentric: float) -> Array:
    tau = 1.0 - reduced
    powers = (tau, tau**1.5, tau**2.5, tau**5)
    f0, f1, f2 = (sum(c * power for c, power in zip(row, powers, strict=True)) / reduced for row in _AMBROSE_WALTON)
    return f0 + acentric * (f1 + acentric * f2)


class MissingConstant(BadInput):
    """A constant that an estimate needs is not recorded."""


@dataclass(frozen=True)
class Method:
    """A corresponding-states method: one row of the table.

    Attributes
    ----------
    name : str
        The word used in commands.
    title : str
        The published name.
    log_reduced : callable
        ``log_reduced(Tr, omega)`` gives ln(p/pc), elementwise.
    reference : str
        Where it is published.
    typical_error : str
        How far off it usually is, as published.
    """

    name: str
    title: str
    log_reduced: Callable[[Array, float], Array]
    reference: str
    typical_error: str


_ROWS = (
    Method(
        "lee-kesler", "Lee-Kesler", _lee_kesler, "B. I. Lee, M. G. Kesler, AIChE J. 21, 510 (1975)",
        "below 2 % above the normal boiling point; below it, and for polar compounds, up to 10 % or more and mostly "
        "too low (from memory)",
    ),
    Method(
        "ambrose-walton", "Ambrose-Walton", _ambrose_walton, "D. Ambrose, J. Walton, Pure Appl. Chem. 61, 1395 (1989)",
        "about 1 % above Tr 0.65 and a few percent at Tr 0.5; more for polar compounds (from memory)",
    ),
)  # fmt: skip

METHODS: dict[str, Method] = {row.name: row for row in _ROWS}
"""The methods by name."""


LOWEST_REDUCED = 0.5
"""T/Tc below which no published comparison says how far off an estimate is (from memory)."""


def find_method(name: str) -> Method:
    """The method of a name, case aside.

    Examples
    --------
    >>> find_method("Lee-Kesler").reference
    'B. I. Lee, M. G. Kesler, AIChE J. 21, 510 (1975)'
    """
    method = METHODS.get(name.strip().casefold()) if isinstance(name, str) else None
    if method is None:
        raise BadInput(f"There is no estimation method {quote(name)}; the methods are {join_names(METHODS, 'and')}.")
    return method


def require_vapour_pressure(method: Method, prop: str) -> None:
    """Raise `BadInput` unless a property is the one that a method estimates."""
    if prop != "vapor-pressure":
        raise BadInput(f"{method.title} estimates vapour pressures, not {prop}. Leave --estimate out.")


def acentric_factor(reduced_pressure: float) -> float:
    """The acentric factor from p/pc on the vapour-pressure curve at Tr = 0.7 [3]_.

    Examples
    --------
    >>> round(acentric_factor(0.023), 6)
    0.638272
    """
    return -math.log10(reduced_pressure) - 1.0


class Estimator:
    """A method with the constants of a compound.

    Parameters
    ----------
    method : Method
        The method.
    points : sequence of Entry
        The fixed points that it takes: critical temperature and pressure,
        acentric factor.
    coverage : Coverage
        Of the vapour pressure of the compound.

    Examples
    --------
    >>> import registry
    >>> with registry.open_library("shelf.db") as library:
    ...     answer = library.lookup("acetylene", 250.0, estimate="ambrose-walton")
    >>> answer.mark, answer.method.title, round(answer.to("kPa"), 1)
    ('estimate', 'Ambrose-Walton', 1367.6)
    """

    def __init__(self, method: Method, points: tuple[Entry[FixedPoint], ...], coverage: Coverage) -> None:
        self.method = method
        self.points = points
        self.coverage = coverage
        self.critical_temperature, self.critical_pressure, self.acentric = (e.record.value_si() for e in points)

    @classmethod
    def of(cls, method: Method, coverage: Coverage) -> Estimator:
        """The method for the compound of a coverage.

        Parameters
        ----------
        method : Method
            The method.
        coverage : Coverage
            Of the vapour pressure; no other property is estimated.

        Returns
        -------
        Estimator
            With the fixed points that rank first.

        Raises
        ------
        BadInput
            If it is about another property; a `MissingConstant` if one is not
            recorded.
        """
        require_vapour_pressure(method, coverage.property)
        return cls(method, _find_points(method, coverage.dossier), coverage)

    def values(self, kelvin: Array) -> Array:
        """The estimated vapour pressures, Pa.

        Parameters
        ----------
        kelvin : array of float, any shape
            Temperatures, K.

        Returns
        -------
        array of float, same shape
            NaN above the critical and below the triple temperature, where
            there is no liquid.
        """
        kelvin = np.asarray(kelvin, dtype=float)
        inside = self.coverage.limits.hold(kelvin)
        values = np.full(kelvin.shape, np.nan)
        reduced = kelvin[inside] / self.critical_temperature
        with np.errstate(all="ignore"):
            values[inside] = self.critical_pressure * np.exp(self.method.log_reduced(reduced, self.acentric))
        return values

    def log_rate(self, kelvin: float) -> float:
        """d ln p / dT, 1/K, by a complex step: exact to rounding."""
        step = 1e-30
        reduced = np.array([complex(kelvin / self.critical_temperature, step)])
        return float(self.method.log_reduced(reduced, self.acentric).imag[0] / step / self.critical_temperature)

    def answer(self, kelvin: float, reading: Reading | None = None) -> Estimate | None:
        """The estimate at one temperature, K; None where there is no liquid."""
        value = float(self.values(np.array([kelvin]))[0])
        return Estimate(kelvin, value, self, reading) if math.isfinite(value) else None


class Estimate(Value):
    """A vapour pressure by a corresponding-states method, not by a correlation."""

    __slots__ = ("_estimator",)

    def __init__(self, temperature: float, value: float, estimator: Estimator, reading: Reading | None = None) -> None:
        super().__init__(temperature, value, estimator.coverage, reading)
        self._estimator = estimator

    def __repr__(self) -> str:
        return f"<Estimate {self.value!r} {self.unit} at {self.temperature!r} K by {self.method.name}>"

    @property
    def mark(self) -> str:
        """``estimate``."""
        return "estimate"

    @property
    def method(self) -> Method:
        """The method."""
        return self._estimator.method

    @property
    def points(self) -> tuple[Entry[FixedPoint], ...]:
        """The fixed points it was made from: critical temperature and pressure, acentric factor."""
        return self._estimator.points

    @property
    def origin(self) -> str:
        """The name of the method."""
        return self.method.name

    @property
    def log_rate(self) -> float:
        """d ln value / dT there, 1/K."""
        return self._estimator.log_rate(self.temperature)

    @property
    def reduced_temperature(self) -> float:
        """T/Tc."""
        return self.temperature / self._estimator.critical_temperature

    @property
    def cautions(self) -> tuple[str, ...]:
        """What to know before relying on the value."""
        memory = [e.record.quantity.replace("-", " ") for e in self.points if e.record.obtained == "memory"]
        return (
            f"It is an estimate, not a measured or evaluated value. Typical error: {self.method.typical_error}.",
            *self._caution_range(),
            *self.caution_spread(),
            *((f"From memory: {join_names(memory, 'and')}.",) if memory else ()),
            *(() if self._coverage.limits.lower else ("No triple point is recorded, so the phase was not checked.",)),
        )

    def _caution_range(self) -> tuple[str, ...]:
        if self.reduced_temperature >= LOWEST_REDUCED:
            return ()
        return (
            f"It lies at {self.reduced_temperature:.3g} of the critical temperature: below {LOWEST_REDUCED:g} "
            "the typical error says nothing.",
        )


def _find_points(method: Method, dossier: Dossier) -> tuple[Entry[FixedPoint], ...]:
    found = {quantity: best_fixed_point(dossier, quantity) for quantity in CRITICAL_CONSTANTS}
    missing = [quantity.replace("-", " ") for quantity, point in found.items() if point is None]
    if missing:
        raise MissingConstant(
            f"--estimate {method.name} needs the {join_names(missing, 'and')} of {dossier.compound.key}, which no "
            "accepted fixed point says."
        )
    return tuple(point for point in found.values() if point is not None)
