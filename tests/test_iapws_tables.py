"""The verification tables of IAPWS, to every printed digit.

IAPWS prints values beside its equations so that a program can be checked:

- SR1-86(1992), Supplementary Release on Saturation Properties, Table 1 (from memory);
- R7-97(2012), Industrial Formulation 1997, Table 35 (p at T) and Table 36 (T at p) (from memory);
- R14-08(2011), Pressure along the Melting and Sublimation Curves, section on check values (from memory).

The numbers stand here a second time, apart from the shelf's `printed_values.csv`, which must hold them all.
"""

from __future__ import annotations

from collections.abc import Callable
from decimal import Decimal
from fractions import Fraction

import pytest
from mpmath import mp, mpf

from registry.curve import Curve
from registry.quantities import UNITS
from tests.reference_forms import DIGITS, reference_of
from tests.shelf import CORRELATIONS, PUBLISHED, own_curve, read_rows

# correlation, T/K, printed value, its unit
VALUES = [
    # SR1-86(1992), Table 1
    ("water-sr1-86", "273.16", "611.657", "Pa"),
    ("water-sr1-86", "373.1243", "0.101325", "MPa"),
    ("water-sr1-86", "647.096", "22.064", "MPa"),
    ("water-density-sr1-86", "273.16", "999.789", "kg/m3"),
    ("water-density-sr1-86", "373.1243", "958.365", "kg/m3"),
    ("water-density-sr1-86", "647.096", "322", "kg/m3"),
    # R7-97(2012), Table 35
    ("water-if97", "300", "0.353658941E-2", "MPa"),
    ("water-if97", "500", "0.263889776E1", "MPa"),
    ("water-if97", "600", "0.123443146E2", "MPa"),
    # R14-08(2011), check values
    ("water-ice-r14-08", "230", "8.94735", "Pa"),
    ("water-melting-ice-ih-r14-08", "260", "138.268", "MPa"),
    ("water-melting-ice-iii-r14-08", "254", "268.685", "MPa"),
    ("water-melting-ice-v-r14-08", "265", "479.640", "MPa"),
    ("water-melting-ice-vi-r14-08", "320", "1356.76", "MPa"),
    ("water-melting-ice-vii-r14-08", "550", "6308.71", "MPa"),
]

# R7-97(2012), Table 36: p/MPa, printed T/K
BACKWARD = [("0.1", "372.755919"), ("1", "453.035632"), ("10", "584.149488")]


def rounds_to(value: float | mpf, printed: str) -> bool:
    """True if a value, rounded to the printed digits, is the printed number."""
    shown = mp.nstr(mpf(value), 30, strip_zeros=False, min_fixed=-40, max_fixed=40)
    return Decimal(shown).quantize(Decimal(printed)) == Decimal(printed)


def names(row: tuple[str, ...]) -> str:
    return "-".join(row[:2])


@pytest.mark.parametrize(("key", "kelvin", "printed", "unit"), VALUES, ids=map(names, VALUES))
def test_printed_value(key, kelvin, printed, unit):
    """Each value that IAPWS prints for its equation comes out in every printed digit."""
    found = UNITS[unit].from_si(Curve.of(CORRELATIONS[key], 18.015268).value(float(kelvin)))
    assert rounds_to(found, printed), f"{found!r} for {printed}"


@pytest.mark.parametrize(("key", "kelvin", "printed", "unit"), VALUES, ids=map(names, VALUES))
def test_printed_value_in_50_digits(key, kelvin, printed, unit):
    """The independent reference meets the same tables: it is the published equation too."""
    with mp.workdps(DIGITS):
        found = reference_of(CORRELATIONS[key])(mpf(kelvin)) / mpf(UNITS[unit].factor.numerator)
        assert rounds_to(found, printed), f"{mp.nstr(found, 15)} for {printed}"


def solve_temperature(curve: Callable[[float], float], pascal: float) -> float:
    """The temperature at which a rising curve has this value, by halving."""
    low, high = 273.15, 647.096
    for _ in range(100):
        middle = 0.5 * (low + high)
        low, high = (middle, high) if curve(middle) < pascal else (low, middle)
    return high


@pytest.mark.parametrize(("megapascal", "printed"), BACKWARD)
def test_if97_backward_value(megapascal, printed):
    """IF97, Table 36: the temperature at which the curve has the printed pressure, in every printed digit."""
    curve = own_curve("water-if97")
    kelvin = solve_temperature(curve.value, float(megapascal) * 1e6)
    assert rounds_to(kelvin, printed), f"{kelvin!r} for {printed}"


def test_shelf_holds_every_value():
    """Every value above is a printed value of the shelf, and the shelf has no other of these releases."""
    keys = {key for key, *_ in VALUES}
    rows = [row for row in read_rows(PUBLISHED / "printed_values.csv") if row["correlation"] in keys]
    shelf = {(row["correlation"], row["temperature"], si_of(row["value"], row["value_unit"])) for row in rows}
    forward = {(key, kelvin, si_of(printed, unit)) for key, kelvin, printed, unit in VALUES}
    backward = {("water-if97", kelvin, si_of(megapascal, "MPa")) for megapascal, kelvin in BACKWARD}
    # at the critical temperature the density is the constant 322 kg/m3 of the equation itself
    assert forward | backward == shelf | {("water-density-sr1-86", "647.096", Fraction(322))}
    assert len(rows) == 17


def si_of(text: str, unit: str) -> Fraction:
    return UNITS[unit].to_si(Fraction(text))


# R14-08(2011): the triple points at which the melting curves of water meet, T/K and p/MPa (from memory)
TRIPLE_POINTS = [
    ("water-melting-ice-ih-r14-08", "water-melting-ice-iii-r14-08", 251.165, "208.566"),
    ("water-melting-ice-iii-r14-08", "water-melting-ice-v-r14-08", 256.164, "350.1"),
    ("water-melting-ice-v-r14-08", "water-melting-ice-vi-r14-08", 273.31, "632.4"),
    ("water-melting-ice-vi-r14-08", "water-melting-ice-vii-r14-08", 355.0, "2216"),
]


@pytest.mark.parametrize(("below", "above", "kelvin", "printed"), TRIPLE_POINTS)
def test_melting_curves_meet_at_the_printed_triple_points(below, above, kelvin, printed):
    """Neighbouring ices melt at one pressure where R14-08 says that their curves meet.

    The upper curve starts there, at the printed pressure; the lower one comes
    within 2.8e-6 of it: 208.5666 MPa for the printed 208.566 at the worst.
    """
    assert rounds_to(own_curve(above).value(kelvin) / 1e6, printed)
    assert own_curve(below).value(kelvin) == pytest.approx(own_curve(above).value(kelvin), rel=2.8e-6)


def test_ice_and_water_meet_at_the_triple_point():
    """Sublimation, melting and vapour pressure are 611.657 Pa at 273.16 K (SR1-86, R14-08)."""
    for key in ("water-sr1-86", "water-ice-r14-08", "water-melting-ice-ih-r14-08"):
        assert rounds_to(own_curve(key).value(273.16), "611.657")
    # IF97 is another fit: 611.657 Pa too, at T = 273.16 K (R7-97, eq. 30)
    assert rounds_to(own_curve("water-if97").value(273.16), "611.657")
