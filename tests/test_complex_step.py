"""Derivatives by complex step: Im f(T + ih)/h is f'(T) without a difference being taken.

W. Squire, G. Trapp, SIAM Rev. 40, 110 (1998). The functions are the second
writing of each form (`reference_forms.py`), at 50 digits and h = 1e-30 K; the
forms that are solved by iteration are differentiated along their own
equation. What a user gets is `Curve.rates`.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping

import numpy as np
import pytest
from mpmath import mp, mpc, mpf
from test_forms import SAMPLES

from registry.curve import Curve
from registry.forms.catalogue import FORMS
from registry.records import Correlation
from registry.scales import SCALES
from tests.reference_forms import DIGITS, double, helium_temperature, kechin_temperature, reference_of
from tests.shelf import CORRELATIONS, MASSES, on_own_scale

STEP = mpf("1e-30")
CLOSE = 1e-12
Coefficients = Mapping[str, mpf]


@pytest.fixture(autouse=True)
def _fifty_digits():
    with mp.workdps(DIGITS):
        yield


def complex_step(f: Callable[[mpc], mpc], x: mpf) -> mpf:
    return mp.im(f(mpc(x, STEP))) / STEP


def _thodos_rate(t: mpf, p: mpf, c: Coefficients) -> mpf:
    """Of y = A - B/T + C ln T + D e^y/T^2, y = ln p: F = 0 makes dy/dT = -F_T/F_y."""

    def balance(y, t):
        return y - c["A"] + c["B"] / t - c["C"] * mp.log(t) - c["D"] / t**2 * mp.exp(y)

    y = mp.log(p)
    return -p * complex_step(lambda u: balance(y, u), t) / complex_step(lambda v: balance(v, t), y)


# forms that have no explicit pressure: dp/dT in the printed units at a point of theirs
IMPLICIT: dict[str, Callable[[mpf, mpf, Coefficients], mpf]] = {
    "frost-kalkwarf-thodos": _thodos_rate,
    "helium-its90": lambda t, p, c: 1 / complex_step(lambda q: helium_temperature(q, c), p),
    "kechin": lambda t, p, c: 1 / complex_step(lambda q: kechin_temperature(q, c), p),
}


def true_rate(record: Correlation, mass: float, kelvin: float, pressure: float) -> mpf:
    if record.form not in IMPLICIT:
        return complex_step(reference_of(record, mass), mpf(kelvin))
    assert record.temperature_unit == "K"
    c = {name: mpf(double(text)) for name, text in record.coefficients.items()}
    si = reference_of(record, mass)(mpf(kelvin)) / mpf(pressure)
    factor = {"Pa": 1, "kPa": 1000, "MPa": 10**6, "GPa": 10**9, "bar": 10**5, "mmHg": mpf("133.322387415")}
    unit = factor[record.value_unit]
    return IMPLICIT[record.form](mpf(kelvin), si * mpf(pressure) / unit, c) * unit


@pytest.mark.parametrize("form", FORMS)
def test_rates_of_every_form_agree_with_the_complex_step(form):
    """Each form's derivative, at nine points inside a published window, to 1e-12."""
    record, mass = SAMPLES[form]
    curve = on_own_scale(Curve.of(record, mass))
    grid = np.linspace(*curve.window, 11)[1:-1]
    for kelvin, pressure, rate in zip(grid.tolist(), curve.values(grid), curve.rates(grid), strict=True):
        true = true_rate(record, mass, kelvin, float(pressure))
        assert true != 0
        assert abs(mpf(float(rate)) / true - 1) <= CLOSE, f"{form} at {kelvin} K"


SHIFTED = [key for key, record in CORRELATIONS.items() if SCALES[record.temperature_scale].shifts]


@pytest.mark.parametrize("key", SHIFTED)
def test_rates_on_an_older_scale_are_per_kelvin_of_its_90(key):
    """The derivative of the whole curve, scale included, against a difference of eighth order.

    Its step of 0.05 K leaves the rounding of the values: 1e-10 relative.
    """
    curve = Curve.of(CORRELATIONS[key], MASSES[CORRELATIONS[key].compound])
    grid = np.linspace(*curve.window, 11)[1:-1]
    # conversions have kinks at 0 degC and, read from tables, at other tens of degrees: step beside them
    grid = grid + 0.5 * (np.abs((grid - 273.15 + 5.0) % 10.0 - 5.0) < 0.3)
    weights = ((1, 4 / 5), (2, -1 / 5), (3, 4 / 105), (4, -1 / 280))
    h = 0.05
    found = sum(w * (curve.values(grid + i * h) - curve.values(grid - i * h)) for i, w in weights) / h
    np.testing.assert_allclose(curve.rates(grid), found, rtol=1e-9)


def test_every_curve_that_needs_it_is_here():
    """The shelf has correlations on older scales."""
    assert len(SHIFTED) >= 5
