"""Saturation pressure as air-conditioning engineers compute it, against the curves of the shelf.

PsychroLib (SI: degC in, Pa out) holds the equations of the ASHRAE Handbook,
Fundamentals (2017), ch. 1, eq. 5 and 6: those of R. W. Hyland and A. Wexler,
ASHRAE Trans. 89(2A), 500 (1983). It goes over from ice to liquid at the
triple point, 0.01 degC, not at 0 degC as the handbook prints, and spans -100
to 200 degC. It is an independent program with an independent copy of the
coefficients.

What separates it from the formulations of IAPWS, measured here as the largest
difference over the grid:

==================  ===============  ==========  =================================
IAPWS formulation   range            difference  where
==================  ===============  ==========  =================================
IF97                0.01 to 200 degC   0.026 %   200 degC, the end of the fit
SR1-86(1992)        0.01 to 200 degC   0.022 %   40 degC, broad
R14-08(2011), ice   -100 to 0 degC     0.033 %   -47 degC, broad
==================  ===============  ==========  =================================

All three are differences of the formulas: the data behind them, the fit, and
IAPWS' own spread (SR1-86 and IF97 part by 0.018 % at 187 degC). No
difference of temperature scale is left in them: IAPWS stands on ITS-90, and
the numbers show that the temperature in the 1983 equations is thermodynamic
temperature, which ITS-90 follows, and not IPTS-68. On their own scale they
give 101325 Pa at 373.124 K, where water boils on ITS-90, and not at 373.15 K,
where it boils on IPTS-68. Reading them as IPTS-68 makes every difference worse.

Where an equation does stand on IPTS-68 the scale explains the greater part:
A. Wexler (1976) parts from SR1-86 by 0.092 % as printed and by 0.003 % once
converted, tested below.
"""

from __future__ import annotations

import dataclasses

import numpy as np
import psychrolib
import pytest

from registry.curve import Curve
from registry.scales import SCALES
from tests.shelf import own_curve

TRIPLE = 0.01
LIQUID = np.concatenate([[np.nextafter(TRIPLE, 1.0)], np.linspace(0.25, 200.0, 800)])
ICE = np.append(np.linspace(-100.0, 0.0, 401), TRIPLE)


@pytest.fixture(autouse=True)
def _si_units():
    psychrolib.SetUnitSystem(psychrolib.SI)


def saturation(celsius: np.ndarray) -> np.ndarray:
    """PsychroLib's saturation pressure, Pa."""
    return np.array([psychrolib.GetSatVapPres(float(t)) for t in celsius])


def largest_percent(found: np.ndarray, expected: np.ndarray) -> float:
    return float(np.max(np.abs(100.0 * (found / expected - 1.0))))


def on_scale(key: str, scale: str) -> Curve:
    """A shelf curve, read as standing on a scale whatever its record says."""
    return dataclasses.replace(own_curve(key), scale=SCALES[scale])


@pytest.mark.parametrize(
    ("key", "celsius"), [("water-hyland-wexler-1983", LIQUID), ("water-ice-hyland-wexler-1983", ICE)]
)
def test_same_equation_gives_the_same_pressure(key, celsius):
    """Both programs hold the same equation: they agree to 1e-13, which no wrong digit survives.

    One in the last printed digit of any coefficient moves the pressure by 5e-10 or more at one end of the range.
    """
    found = own_curve(key).values(celsius + 273.15)
    np.testing.assert_allclose(found, saturation(celsius), rtol=1e-13, atol=0.0)


def test_ice_and_liquid_meet_at_the_triple_point():
    """PsychroLib changes from ice to liquid at 0.01 degC, where the two equations part by 6e-9 only."""
    at, above = saturation(np.array([TRIPLE, np.nextafter(TRIPLE, 1.0)]))
    assert at == pytest.approx(own_curve("water-ice-hyland-wexler-1983").value(273.16), rel=1e-13)
    assert above == pytest.approx(own_curve("water-hyland-wexler-1983").value(273.16), rel=1e-13)
    assert above / at - 1.0 == pytest.approx(5.79e-9, rel=0.01)
    # the handbook's own switch, at 0 degC, would leave a step of 0.01 %
    liquid, ice = (own_curve(f"water{kind}-hyland-wexler-1983").value(273.15) for kind in ("", "-ice"))
    assert f"{100.0 * (liquid / ice - 1.0):.4f}" == "0.0097"


# the largest difference in percent, as measured, and the bound that is left for the last digit of a table
@pytest.mark.parametrize(
    ("key", "celsius", "measured"),
    [("water-if97", LIQUID, 0.0258), ("water-sr1-86", LIQUID, 0.0223), ("water-ice-r14-08", ICE, 0.0326)],
)
def test_difference_from_iapws(key, celsius, measured):
    """ASHRAE and IAPWS part by what the two formulations part by, to its third digit; see the module."""
    difference = largest_percent(saturation(celsius), own_curve(key).values(celsius + 273.15))
    assert abs(difference - measured) <= 0.0001


def test_iapws_formulations_differ_among_themselves_by_as_much():
    """SR1-86 and IF97 part by 0.018 % between 0 and 200 degC: the bound above cannot be much tighter."""
    kelvin = LIQUID + 273.15
    spread = largest_percent(own_curve("water-if97").values(kelvin), own_curve("water-sr1-86").values(kelvin))
    assert abs(spread - 0.0179) <= 0.0001


def test_water_boils_at_the_its_90_temperature_in_the_1983_equation():
    """The 1983 equation has 101325 Pa at 373.124 K, as ITS-90 has (IAPWS), and 101.42 kPa at 373.15 K."""
    curve = own_curve("water-hyland-wexler-1983")
    assert curve.value(373.124) == pytest.approx(101325.0, rel=1e-5)
    assert curve.value(373.15) == pytest.approx(101418.7, rel=1e-6)
    # the same place in an equation on IPTS-68, A. Wexler (1976): 101325 Pa at 373.15 K, which defined that scale
    assert own_curve("water-wexler-1976").value(373.15) == pytest.approx(101325.0, rel=1e-6)


@pytest.mark.parametrize(
    ("key", "iapws", "celsius", "printed", "converted"),
    [
        ("water-hyland-wexler-1983", "water-sr1-86", LIQUID, 0.0223, 0.1039),
        ("water-hyland-wexler-1983", "water-if97", LIQUID, 0.0258, 0.1147),
        ("water-ice-hyland-wexler-1983", "water-ice-r14-08", ICE, 0.0326, 0.2619),
    ],
)
def test_reading_the_1983_equations_as_ipts_68_makes_them_worse(key, iapws, celsius, printed, converted):
    """Taken as ITS-90 numbers they agree with IAPWS three to eight times better than converted from IPTS-68."""
    kelvin = celsius + 273.15
    expected = own_curve(iapws).values(kelvin)
    assert abs(largest_percent(on_scale(key, "ITS-90").values(kelvin), expected) - printed) <= 0.0001
    assert abs(largest_percent(on_scale(key, "IPTS-68").values(kelvin), expected) - converted) <= 0.0001


@pytest.mark.parametrize(
    ("key", "scale", "celsius", "printed", "converted"),
    [
        ("water-wexler-1976", "IPTS-68", (0.01, 100.0), 0.0918, 0.0030),
        ("water-goff-gratch-1946", "ice-point-273.16", (0.01, 100.0), 0.1545, 0.1072),
        ("water-bridgeman-aldrich-304-333", "IPTS-48", (31.0, 60.0), 0.1041, 0.0217),
        ("water-bridgeman-aldrich-344-373", "IPTS-48", (71.0, 100.0), 0.1036, 0.0159),
    ],
)
def test_converting_the_scale_explains_the_difference_of_older_equations(key, scale, celsius, printed, converted):
    """Equations that do stand on an older scale come closer to SR1-86 once their temperature is converted."""
    kelvin = np.linspace(*celsius, 1001) + 273.15
    expected = own_curve("water-sr1-86").values(kelvin)
    assert abs(largest_percent(on_scale(key, "ITS-90").values(kelvin), expected) - printed) <= 0.0001
    assert abs(largest_percent(on_scale(key, scale).values(kelvin), expected) - converted) <= 0.0001
