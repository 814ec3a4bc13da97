"""Clapeyron and Clausius-Clapeyron against published worked examples, each named."""

from __future__ import annotations

import math

import numpy as np
import pytest
from test_forms import make_record

from registry.curve import Curve
from registry.equilibrium.clapeyron import (
    clapeyron_slope,
    ideal_enthalpy,
    melting_temperature,
    second_pressure,
    second_temperature,
    transition_enthalpy,
    two_point_enthalpy,
    watson_enthalpy,
)
from registry.forms.reciprocal import GAS_CONSTANT
from tests.shelf import own_curve

RANKINE = 5.0 / 9.0
PSI = 6894.757293168361
FOOT = 0.3048
POUND = 0.45359237
FOOT_POUND = POUND * 9.80665 * FOOT  # J


def test_steam_slope_of_de_nevers_5_1():
    """N. de Nevers, Physical and Chemical Equilibrium, Example 5.1: 0.291432 psi/degR (778 ft lbf/Btu)."""
    enthalpy = 970.3 * 778.0 * FOOT_POUND / POUND  # J/kg
    volume = 26.78 * FOOT**3 / POUND  # m3/kg
    slope = clapeyron_slope(671.7 * RANKINE, enthalpy, volume)
    assert slope * RANKINE / PSI == pytest.approx(0.291432, abs=5e-7)
    assert transition_enthalpy(671.7 * RANKINE, slope, volume) == pytest.approx(enthalpy, rel=1e-15)


def test_ice_of_de_nevers_5_2():
    """Example 5.2: from 0.0887 psia at 492.018 degR, 1218.7 Btu/lbm, R 1.987/18, to 0.005 psia: -23.88 degF."""
    # the example's R in Btu/lbm/degR; the enthalpy per mole that makes it ours
    enthalpy = 1218.7 / (1.987 / 18.0) * GAS_CONSTANT * RANKINE
    kelvin = second_temperature(492.018 * RANKINE, 0.0887, enthalpy, 0.005)
    # the example counts degrees Fahrenheit from 460, as its 492.018 for 32.018 shows
    assert kelvin / RANKINE - 460.0 == pytest.approx(-23.88, abs=0.005)


def test_two_points_of_de_nevers_5_3():
    """Example 5.3: 10 psia at 652.9 degR and 100 psia at 787.5 degR, carried to 1155.2 degR: 3499.187 psia."""
    first, second = (652.9 * RANKINE, 10.0), (787.5 * RANKINE, 100.0)
    enthalpy = two_point_enthalpy(first, second)
    assert second_pressure(*first, enthalpy, 1155.2 * RANKINE) == pytest.approx(3499.187, abs=5e-4)
    assert second_pressure(*second, enthalpy, 1155.2 * RANKINE) == pytest.approx(3499.187, abs=5e-4)


def test_naphthalene_of_atkins():
    """P. W. Atkins, Physical Chemistry, exercise: 49 111.12 J/mol with R = 8.31 and 273.16; boils at 488.1 K."""
    first, second = (85.8 + 273.16, 1.3), (119.3 + 273.16, 5.3)
    enthalpy = two_point_enthalpy(first, second)
    assert enthalpy * 8.31 / GAS_CONSTANT == pytest.approx(49111.12, abs=0.005)
    # R cancels between the two steps
    assert second_temperature(*first, enthalpy, 101.325) == pytest.approx(488.1, abs=0.05)


WORKED_PRESSURES = [
    # 38.56 kJ/mol at 78.4 degC, to 50.0 degC, R 8.314; the page rounds the ratio to 3.188. Tutorial text, seen
    ("ethanol", 351.55, 760.0, 38560.0 / 8.314 * GAS_CONSTANT, 323.15, 238.38, 0.005),
    ("ethanol as printed", 351.55, 760.0, 38560.0, 323.15, 238.3, 0.1),
    # 24 900 J/mol, 315.6 K at 1 atm, to 298.0 K: printed 0.57 atm, 434 Torr. Tutor's answer, seen
    ("a liquid", 315.6, 1.0, 24900.0, 298.0, 0.57, 0.005),
    ("a liquid in Torr", 315.6, 760.0, 24900.0, 298.0, 434.0, 1.0),
    # K. V. Narayanan, A Textbook of Chemical Engineering Thermodynamics, Example 6.2: 2275 x 18 kJ/kmol, R 8.314
    ("water", 373.0, 101.3, 2275.0 * 18.0 / 8.314 * GAS_CONSTANT, 363.0, 70.4086, 5e-5),
]


@pytest.mark.parametrize(("name", "kelvin", "pressure", "enthalpy", "at", "expected", "within"), WORKED_PRESSURES)
def test_second_pressures_of_textbooks(name, kelvin, pressure, enthalpy, at, expected, within):
    """Worked Clausius-Clapeyron pressures, and the way back."""
    found = second_pressure(kelvin, pressure, enthalpy, at)
    assert found == pytest.approx(expected, abs=within), name
    assert second_temperature(kelvin, pressure, enthalpy, found) == pytest.approx(at, rel=1e-14)
    assert two_point_enthalpy((kelvin, pressure), (at, found)) == pytest.approx(enthalpy, rel=1e-12)


def test_mercury_melts_higher_under_pressure():
    """Narayanan, Example 6.3, in consistent units: 234.33 K at 1 bar becomes 234.3858 K at 10 bar."""
    volume = 1.0 / 13690.0 - 1.0 / 14193.0
    assert melting_temperature(234.33, 1e5, 9787.6, volume, 10e5) == pytest.approx(234.3858, abs=5e-5)


def test_tin_under_a_thousand_atmospheres():
    """505 K, 58.6 J/g, 0.00389 cm3/g, 100 MPa: about 508.4 K (common practice, no source)."""
    found = melting_temperature(505.0, 0.1e6, 58.6e3, 0.00389e-3, 100e6)
    assert found == pytest.approx(508.4, abs=0.05)
    # a curve of the form for it gives the pressure back: with 118.71 g/mol, 6956.4 J/mol and 0.461782 cm3/mol
    record = make_record(
        "clapeyron-melting", {"T0": "505", "p0": "0.1", "H": "6956.4", "dV": "0.461782"}, temperature_unit="K",
        value_unit="MPa", window_min="505", window_max="520",
    )  # fmt: skip
    assert Curve.of(record, 118.71).value(found) == pytest.approx(100e6, rel=1e-5)


def test_ice_melts_lower_under_pressure():
    """Brij Lal, Subrahmanyam, Heat and Thermodynamics, Example 6.1: -0.00748 K per atmosphere at 273 K."""
    volume = (1.0 - 1.0908) * 1e-3  # m3/kg
    enthalpy = 80.0 * 4.2e3  # J/kg
    atmosphere = 0.76 * 13600.0 * 9.81  # 76 cm Hg
    assert atmosphere / clapeyron_slope(273.0, enthalpy, volume) == pytest.approx(-0.00748, abs=1e-6)
    assert melting_temperature(273.0, 0.0, enthalpy, volume, atmosphere) - 273.0 == pytest.approx(-0.00748, abs=1e-6)


def test_enthalpy_of_fusion_of_a_gate_paper():
    """GATE question: dp/dT -5.0665e6 Pa/K, dV -4.5e-6 m3/mol, -2 degC: 6182 J/mol (the page uses 271 K: 6178.6)."""
    assert transition_enthalpy(271.15, -5.0665e6, -4.5e-6) == pytest.approx(6182.0, abs=0.5)
    assert transition_enthalpy(271.0, -5.0665e6, -4.5e-6) == pytest.approx(6178.6, abs=0.05)


def test_watson_of_water_and_benzene():
    """K. M. Watson (1943): water 2257 J/g at 100 degC is 1372.2 at 300 degC (a textbook prints 1371); benzene."""
    assert float(watson_enthalpy(np.array(573.15), 373.15, 2257.0, 647.1)) == pytest.approx(1372.2, abs=0.05)
    assert float(watson_enthalpy(np.array(298.15), 353.24, 30.72, 562.16)) == pytest.approx(33.578, abs=1e-3)
    # at the critical temperature nothing is left, nor within the rounding that a bound allows
    assert watson_enthalpy(np.array([562.16, 562.16 + 1e-9]), 353.24, 30.72, 562.16).tolist() == [0.0, 0.0]


def test_ideal_enthalpy_of_benzene():
    """The Wagner 2.5-5 set of Poling et al. at 353.24 K makes dH/dZ = 31.936 kJ/mol (Smith & Van Ness: dH 30.72)."""
    curve = own_curve("benzene-poling-5")
    pressure, slope = curve.value(353.24), float(curve.rates(np.array([353.24]))[0])
    assert ideal_enthalpy(353.24, pressure, slope) == pytest.approx(31936.0, abs=0.5)
    # with the vapour's and the liquid's volume of the same example (B -995.3, liquid 95.9 cm3/mol)
    change = 1.0 - (995.3e-6 + 95.9e-6) * 101325.0 / (GAS_CONSTANT * 353.24)
    assert change == pytest.approx(0.96236, abs=1e-5)
    assert change * ideal_enthalpy(353.24, pressure, slope) == pytest.approx(30734.0, abs=1.0)


def test_clausius_clapeyron_line_has_its_own_enthalpy():
    """Along ln p = a - b/T the ideal enthalpy is R b everywhere."""
    for kelvin in (200.0, 300.0, 450.0):
        pressure = math.exp(20.0 - 4000.0 / kelvin)
        slope = pressure * 4000.0 / kelvin**2
        assert ideal_enthalpy(kelvin, pressure, slope) == pytest.approx(4000.0 * GAS_CONSTANT, rel=1e-14)
