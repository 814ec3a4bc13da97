"""Each published correlation at one temperature, against an independent value and the deviation known beforehand.

`facts/own_check_points.csv` was worked out outside the program when the shelf
was collected: a point from a source beside each row and how far the
correlation lies from it. It guards the copying, the form and the units
at once: a wrong digit, base or unit moves the deviation.
"""

from __future__ import annotations

import math
from fractions import Fraction

import pytest
from mpmath import mp, mpf

from registry.quantities import UNITS
from tests.reference_forms import DIGITS, double, kechin_temperature
from tests.shelf import CORRELATIONS, FACTS, own_curve, read_rows

ROWS = read_rows(FACTS / "own_check_points.csv")
# the file has four decimals: half of the last one, and a rounding
POINTS = 0.00006


def known(row: dict[str, str]) -> float:
    return float(row["deviation_percent"])


def percent(found: float, true: float) -> float:
    return 100.0 * (found / true - 1.0)


def test_every_shelf_correlation_has_its_point():
    """No correlation of the shelf is without its check point, and no point without its correlation."""
    keys = [row["key"] for row in ROWS]
    assert len(keys) == len(set(keys)) == 135
    assert set(keys) == set(CORRELATIONS)


@pytest.mark.parametrize("row", [pytest.param(r, id=r["key"]) for r in ROWS if CORRELATIONS[r["key"]].form != "kechin"])
def test_deviation_from_check_point(row):
    """The deviation from the check point is the one worked out beforehand, to its four decimals."""
    expected = float(UNITS[row["unit"]].to_si(Fraction(row["value"])))
    found = own_curve(row["key"]).value(float(row["temperature_K"]))
    assert abs(percent(found, expected) - known(row)) <= POINTS


KECHIN = [pytest.param(r, id=r["key"]) for r in ROWS if CORRELATIONS[r["key"]].form == "kechin"]


@pytest.mark.parametrize("row", KECHIN)
def test_kechin_temperature_at_the_printed_pressure(row):
    """Kechin's equation gives T at p: the printed equation lies as far from the check point as was worked out."""
    record = CORRELATIONS[row["key"]]
    with mp.workdps(DIGITS):
        c = {name: mpf(double(text)) for name, text in record.coefficients.items()}
        pressure = UNITS[row["unit"]].to_si(Fraction(row["value"])) / UNITS[record.value_unit].factor
        found = float(kechin_temperature(mpf(pressure.numerator) / pressure.denominator, c))
    assert abs(percent(found, float(row["temperature_K"])) - known(row)) <= POINTS


@pytest.mark.parametrize("row", KECHIN)
def test_kechin_inverse_returns_the_printed_pressure(row):
    """The program's inverse leads from that temperature back to the pressure.

    The check point lies 4 uK below the maximum of the curve, where one
    rounding of the temperature moves the pressure by 4e-12 of itself.
    """
    record = CORRELATIONS[row["key"]]
    pressure = float(UNITS[row["unit"]].to_si(Fraction(row["value"])))
    gigapascal = pressure / float(UNITS[record.value_unit].factor)
    with mp.workdps(DIGITS):
        c = {name: mpf(double(text)) for name, text in record.coefficients.items()}
        kelvin = float(kechin_temperature(mpf(gigapascal), c))
    assert math.isclose(own_curve(row["key"]).value(kelvin), pressure, rel_tol=1e-11)
