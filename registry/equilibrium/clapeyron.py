"""Clapeyron's and the Clausius-Clapeyron equations, on numbers and arrays in SI.

`clapeyron_slope` and `transition_enthalpy` are exact: E. Clapeyron, J. Ec.
Polytech. 14, 153 (1834). The relations between two points take the vapour as
ideal, the condensed volume as nothing and the enthalpy as constant: R.
Clausius, Ann. Phys. 155, 500 (1850). The melting line takes enthalpy and
volume as constant. Watson's relation carries an enthalpy of vaporization to
another temperature: K. M. Watson, Ind. Eng. Chem. 35, 398 (1943).
"""

from __future__ import annotations

import math
from typing import TypeVar

import numpy as np

from registry.forms.form import Array
from registry.forms.reciprocal import GAS_CONSTANT

__all__ = [
    "WATSON_EXPONENT",
    "clapeyron_slope",
    "ideal_enthalpy",
    "melting_temperature",
    "second_pressure",
    "second_temperature",
    "transition_enthalpy",
    "two_point_enthalpy",
    "watson_enthalpy",
]

Real = TypeVar("Real", float, Array)

WATSON_EXPONENT = 0.38


def clapeyron_slope(kelvin: Real, enthalpy: Real, volume_change: Real) -> Real:
    """The slope dp/dT = dH/(T dV) of an equilibrium line.

    Parameters
    ----------
    kelvin : float or array
        Temperature, K.
    enthalpy : float or array
        Enthalpy of the transition, J/mol (or J/kg, with m3/kg).
    volume_change : float or array
        Change of volume in the same direction, m3/mol.

    Returns
    -------
    float or array
        Pa/K.

    Examples
    --------
    Benzene at its boiling point: 30 734 J/mol, vapour 0.027989 m3/mol, liquid 9.59e-5 m3/mol.

    >>> round(clapeyron_slope(353.24, 30734.0, 0.027989 - 9.59e-5))
    3119
    """
    return enthalpy / (kelvin * volume_change)


def transition_enthalpy(kelvin: Real, slope: Real, volume_change: Real) -> Real:
    """The enthalpy dH = T dV dp/dT of a transition: Clapeyron's equation, the other way round.

    Parameters
    ----------
    kelvin : float or array
        Temperature, K.
    slope : float or array
        dp/dT along the equilibrium line, Pa/K.
    volume_change : float or array
        Change of volume, m3/mol.

    Returns
    -------
    float or array
        J/mol.

    Examples
    --------
    >>> round(transition_enthalpy(271.15, -5.0665e6, -4.5e-6))
    6182
    """
    return kelvin * slope * volume_change


def ideal_enthalpy(kelvin: Real, pressure: Real, slope: Real) -> Real:
    """R T^2 dlnp/dT: the enthalpy with an ideal vapour and no condensed volume.

    Parameters
    ----------
    kelvin : float or array
        Temperature, K.
    pressure : float or array
        Vapour pressure, Pa.
    slope : float or array
        dp/dT, Pa/K.

    Returns
    -------
    float or array
        J/mol; for a real vapour the enthalpy divided by its change of compressibility factor.

    Examples
    --------
    >>> round(ideal_enthalpy(373.15, 101418.0, 3619.0))
    41312
    """
    return GAS_CONSTANT * kelvin * kelvin * (slope / pressure)


def second_pressure(kelvin: float, pressure: float, enthalpy: float, at: float) -> float:
    """The pressure at another temperature along a Clausius-Clapeyron line.

    Parameters
    ----------
    kelvin, pressure : float
        A point of the line, K and Pa (or any unit of pressure).
    enthalpy : float
        Constant enthalpy of vaporization or sublimation, J/mol.
    at : float
        The other temperature, K.

    Returns
    -------
    float
        In the unit of `pressure`.

    Examples
    --------
    Ethanol, 38.56 kJ/mol, 760 Torr at 78.4 degC, to 50.0 degC:

    >>> round(second_pressure(351.55, 760.0, 38560.0, 323.15), 2)
    238.39
    """
    return pressure * math.exp(-enthalpy / GAS_CONSTANT * (1.0 / at - 1.0 / kelvin))


def second_temperature(kelvin: float, pressure: float, enthalpy: float, at: float) -> float:
    """The temperature at another pressure along a Clausius-Clapeyron line.

    Parameters
    ----------
    kelvin, pressure : float
        A point of the line, K and Pa (or any unit of pressure).
    enthalpy : float
        Constant enthalpy of vaporization or sublimation, J/mol.
    at : float
        The other pressure, in the unit of `pressure`.

    Returns
    -------
    float
        K.

    Examples
    --------
    >>> round(second_temperature(351.55, 760.0, 38560.0, 238.38), 2)
    323.15
    """
    return 1.0 / (1.0 / kelvin - GAS_CONSTANT / enthalpy * math.log(at / pressure))


def two_point_enthalpy(first: tuple[float, float], second: tuple[float, float]) -> float:
    """The enthalpy that makes a Clausius-Clapeyron line pass through two points.

    Parameters
    ----------
    first, second : tuple of float
        Temperature, K, and pressure, in any one unit.

    Returns
    -------
    float
        J/mol.

    Examples
    --------
    Naphthalene, 1.3 kPa at 358.96 K and 5.3 kPa at 392.46 K (49 111 with R = 8.31):

    >>> round(two_point_enthalpy((358.96, 1.3), (392.46, 5.3)))
    49137
    """
    return GAS_CONSTANT * math.log(second[1] / first[1]) / (1.0 / first[0] - 1.0 / second[0])


def melting_temperature(kelvin: float, pressure: float, enthalpy: float, volume_change: float, at: float) -> float:
    """The melting temperature at another pressure: T = T0 exp((p - p0) dV/dH).

    Parameters
    ----------
    kelvin, pressure : float
        A point of the melting line, K and Pa.
    enthalpy : float
        Constant enthalpy of fusion, J/mol or J/kg.
    volume_change : float
        Constant volume of the liquid less that of the solid, m3/mol or m3/kg.
    at : float
        The other pressure, Pa.

    Returns
    -------
    float
        K.

    Examples
    --------
    Tin at 505 K, 58.6 J/g and 0.00389 cm3/g, under 100 MPa more:

    >>> round(melting_temperature(505.0, 0.0, 58.6e3, 0.00389e-3, 100e6), 2)
    508.36
    """
    return kelvin * math.exp((at - pressure) * volume_change / enthalpy)


def watson_enthalpy(kelvin: Array, known_kelvin: float, known_enthalpy: float, critical: float) -> Array:
    """Watson's relation: dH = dH1 [(1 - Tr)/(1 - Tr1)]^0.38.

    Parameters
    ----------
    kelvin : array of float
        Temperature, K, at most the critical one.
    known_kelvin, known_enthalpy : float
        Where the enthalpy is known, K, and the enthalpy there, J/mol.
    critical : float
        Critical temperature, K.

    Returns
    -------
    array of float
        J/mol; zero at the critical temperature.

    Examples
    --------
    Water, 2257 J/g at 100 degC, to 300 degC:

    >>> round(float(watson_enthalpy(np.array(573.15), 373.15, 2257.0, 647.1)), 1)
    1372.2
    """
    left = np.maximum(critical - kelvin, 0.0) / (critical - known_kelvin)
    found: Array = known_enthalpy * np.power(left, WATSON_EXPONENT)
    return found
