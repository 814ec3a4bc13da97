"""Temperature scales against published differences, the scales' own fixed points, and 50 digits.

The polynomials are written out here a second time from their publications;
their published check values prove the copy.
"""

from __future__ import annotations

import dataclasses
from collections.abc import Callable

import mpmath
import numpy as np
import pytest
from mpmath import mp, mpf

from registry.curve import Curve
from registry.errors import InvalidRecord
from registry.scales import SCALES
from tests.reference_forms import DIGITS, reference_of
from tests.shelf import CORRELATIONS, own_curve

IPTS_68, IPTS_48 = SCALES["IPTS-68"], SCALES["IPTS-48"]

# t90 - t68 in powers of t90/630: H. Preston-Thomas, Metrologia 27, 3 (1990), BIPM supplementary information (1997)
A = (
    "0", "-0.148759", "-0.267408", "1.080760", "1.269056", "-4.089591", "-1.871251", "7.438081", "-3.536296",
)  # fmt: skip
# t90 - t68 in powers of t90: R. L. Rusby, R. P. Hudson, M. Durieux, Metrologia 31, 149 (1994)
B = ("7.8687209e1", "-4.7135991e-1", "1.0954715e-3", "-1.2357884e-6", "6.7736583e-10", "-1.4458081e-13")
# T90 - T68 in powers of (T90 - 40)/40: ITS-90 supplementary information (from memory)
C = (
    "-0.005903", "0.008174", "-0.061924", "-0.193388", "1.490793", "1.252347", "-9.835868", "1.411912",
    "25.277595", "-19.183815", "-18.437089", "27.000895", "-8.716324",
)  # fmt: skip


@pytest.fixture(autouse=True)
def _fifty_digits():
    with mp.workdps(DIGITS):
        yield


def shift(scale: str, kelvin: float) -> float:
    """The number on a scale less the ITS-90 number."""
    return float(SCALES[scale].shift(np.array([kelvin], dtype=float))[0][0])


def rate(scale: str, kelvin: float) -> float:
    return float(SCALES[scale].shift(np.array([kelvin], dtype=float))[1][0])


def polynomial(texts: tuple[str, ...], x: mpf) -> mpf:
    return mpmath.fsum(mpf(float(text)) * x**i for i, text in enumerate(texts))


def t68(kelvin: mpf) -> mpf:
    """The IPTS-68 number, K, of an ITS-90 temperature."""
    celsius = kelvin - mpf(273.15)
    if kelvin < 83.8:
        return kelvin - polynomial(C, (kelvin - 40) / 40)
    if kelvin < 273.15 + 630.615:
        return kelvin - polynomial(A, celsius / 630)
    if kelvin < 273.15 + 1064.18:
        return kelvin - polynomial(B, celsius)
    return kelvin + (kelvin / mpf("1337.33")) ** 2 / 4


# t68 - t48 against t68/degC between 0 and -180 degC: IPTS-68 text, Metrologia 5, 35 (1969) (from memory);
# above 100 degC what the CRC Handbook columns t90 - t48 and t90 - t68 make
TABLE_48 = {
    -180: 12, -170: 7, -160: -5, -150: -13, -140: -13, -130: -6, -120: 3, -110: 13, -100: 22, -90: 29, -80: 33,
    -70: 34, -60: 32, -50: 29, -40: 24, -30: 18, -20: 12, -10: 6, 0: 0, 100: 0, 200: 43, 250: 61,
}  # fmt: skip


def t48(kelvin: mpf) -> mpf:
    """The IPTS-48 number, K, of an ITS-90 temperature: by way of IPTS-68."""
    celsius = t68(kelvin) - mpf(273.15)
    if 0 <= celsius <= 100:
        # N. P. Fofonoff, H. Bryden, J. Mar. Res. 33 Suppl., 69 (1975): t68 = t48 - 4.4e-6 t48 (100 - t48)
        return mpf(273.15) + mpmath.findroot(lambda x: x - mpf(4.4e-6) * x * (100 - x) - celsius, celsius)
    low = max(t for t in TABLE_48 if t <= celsius)
    high = min(t for t in TABLE_48 if t > celsius)
    part = (celsius - low) / (high - low)
    return mpf(273.15) + celsius - (TABLE_48[low] + part * (TABLE_48[high] - TABLE_48[low])) / 1000


# t90/degC, t90 - t68: worked from the published polynomials, four decimals
@pytest.mark.parametrize(
    ("celsius", "published"),
    [(-180, "0.0094"), (-100, "0.0137"), (50, "-0.0129"), (100, "-0.0256"), (200, "-0.0398"),
     (630.615, "-0.1250"), (660.323, "-0.0846"), (961.78, "-0.1500")],
)  # fmt: skip
def test_t68_meets_its_check_values(celsius, published):
    """t90 - t68 from -180 to 962 degC: every decimal of the check values (Metrologia 27, 3 and 31, 149)."""
    assert f"{-shift('IPTS-68', 273.15 + celsius):.4f}" == published


@pytest.mark.parametrize(("kelvin", "published"), [(14, "-0.0058"), (20, "-0.0091"), (54.358, "-0.0029")])
def test_t68_meets_its_check_values_below_the_argon_point(kelvin, published):
    """T90 - T68 from 13.8 to 83.8 K: every decimal of the check values (ITS-90 supplementary information)."""
    assert f"{-shift('IPTS-68', kelvin):.4f}" == published


def test_t68_meets_its_check_values_at_the_upper_ends():
    """The last values before a join: 0.0077 K at 83.8 K, -0.2499 K at 1064.18 degC (same sources)."""
    assert f"{-shift('IPTS-68', np.nextafter(83.8, 0.0)):.4f}" == "0.0077"
    assert f"{-shift('IPTS-68', np.nextafter(273.15 + 1064.18, 0.0)):.4f}" == "-0.2499"


# t90/degC: t90 - t68 as the CRC Handbook tables it, three decimals
@pytest.mark.parametrize(
    ("celsius", "tabled"), [(-180, 0.008), (-100, 0.013), (50, -0.013), (100, -0.026), (200, -0.040)]
)
def test_t68_agrees_with_the_handbook_table(celsius, tabled):
    """The CRC Handbook's table of t90 - t68 is met within the 1.5 mK that the polynomial is stated to."""
    assert abs(-shift("IPTS-68", 273.15 + celsius) - tabled) <= 0.0015


# t90/degC: t90 - t48 as the CRC Handbook tables it, three decimals
@pytest.mark.parametrize(
    ("celsius", "tabled"), [(-100, 0.035), (0, 0.0), (50, -0.023), (100, -0.026), (200, 0.003), (249.99, 0.021)]
)
def test_t48_agrees_with_the_handbook_table(celsius, tabled):
    """The CRC Handbook's table of t90 - t48 is met within its last digit."""
    assert abs(-shift("IPTS-48", 273.15 + celsius) - tabled) <= 0.001


# ITS-90 and IPTS-68(75) assign these numbers to the same physical states: texts of the two scales
# (Metrologia 27, 3 (1990), Table 1, seen; Metrologia 12, 7 (1976), Table 1, from memory)
@pytest.mark.parametrize(
    ("point", "its90", "ipts68"),
    [
        ("triple point of equilibrium hydrogen", 13.8033, 13.81),
        ("triple point of oxygen", 54.3584, 54.361),
        ("triple point of argon", 83.8058, 83.798),
        ("freezing point of tin", 273.15 + 231.928, 273.15 + 231.9681),
        ("freezing point of zinc", 273.15 + 419.527, 273.15 + 419.58),
        ("freezing point of silver", 273.15 + 961.78, 273.15 + 961.93),
        ("freezing point of gold", 273.15 + 1064.18, 273.15 + 1064.43),
    ],
)
def test_fixed_points_of_ipts_68_keep_their_assigned_numbers(point, its90, ipts68):
    """What IPTS-68 defines comes out as it defines it, within 0.6 mK: the sign of no branch can be wrong."""
    assert abs(its90 + shift("IPTS-68", its90) - ipts68) <= 0.0006, point


def test_water_boils_at_100_degc_of_ipts_68():
    """The ITS-90 boiling point, 373.124 K (IAPWS), is 100 degC on IPTS-68, which defined it so."""
    assert abs(373.124 + shift("IPTS-68", 373.124) - 373.15) <= 0.0005
    # by IAPWS SR1-86(1992) the pressure is 0.101325 MPa at 373.1243 K
    assert f"{373.1243 + shift('IPTS-68', 373.1243):.3f}" == "373.150"


def test_older_scales_agree_where_both_were_fixed():
    """0 and 100 degC are the same on IPTS-48 and IPTS-68: both scales were defined there."""
    for celsius in (0.0, 100.0):
        kelvin = _bisect(lambda t, celsius=celsius: t + shift("IPTS-68", t) - 273.15 - celsius)
        assert abs(shift("IPTS-48", kelvin) - shift("IPTS-68", kelvin)) <= 1e-12
    # -0.011 K between them at 50 degC: Fofonoff and Bryden (1975)
    assert f"{shift('IPTS-68', 323.15) - shift('IPTS-48', 323.15):.3f}" == "-0.011"


def _bisect(rising: Callable[[float], float], low: float = 200.0, high: float = 500.0) -> float:
    for _ in range(100):
        middle = 0.5 * (low + high)
        low, high = (middle, high) if rising(middle) < 0.0 else (low, middle)
    return high


def test_zero_degc_is_zero_on_every_international_scale():
    """The ice point did not move: 273.15 K on ITS-90, IPTS-68 and IPTS-48."""
    assert shift("IPTS-68", 273.15) == shift("IPTS-48", 273.15) == 0.0


def test_old_ice_point_adds_a_hundredth_of_a_kelvin():
    """Kelvin counted from 273.16 exceed today's by 0.01, everywhere, with no effect on the rate."""
    for kelvin in (1.0, 273.15, 373.15, 5000.0):
        assert shift("ice-point-273.16", kelvin) == 0.01
        assert rate("ice-point-273.16", kelvin) == 0.0


@pytest.mark.parametrize("unit", ["K", "degC", "degF", "degR"])
def test_old_ice_point_belongs_to_units_that_count_from_absolute_zero(unit):
    """A correlation on it is in K or degR; on another scale any unit of temperature will do."""
    record = CORRELATIONS["water-antoine-1-100"]
    dataclasses.replace(record, temperature_unit=unit, temperature_scale="IPTS-68")
    if unit in ("K", "degR"):
        dataclasses.replace(record, temperature_unit=unit, temperature_scale="ice-point-273.16")
        return
    with pytest.raises(InvalidRecord, match=r"ice-point-273.16 is about kelvin: K or degR\.") as caught:
        dataclasses.replace(record, temperature_unit=unit, temperature_scale="ice-point-273.16")
    assert [(problem.field, problem.given) for problem in caught.value.problems] == [("temperature_unit", unit)]


@pytest.mark.parametrize("name", ["ITS-90", "not-stated"])
def test_scales_that_shift_nothing(name):
    """ITS-90 is the scale of all temperatures inside; a scale not stated is taken as it is."""
    assert not SCALES[name].shifts
    assert SCALES[name].reaches(1e-3)
    values, rates = SCALES[name].shift(np.array([1.0, 300.0, 5000.0]))
    assert not values.any()
    assert not rates.any()


# the jump, K, in the number of the scale at each join, with the ITS-90 temperature, K
JOINS = [
    ("IPTS-68", 83.8, -0.00062), ("IPTS-68", 273.15 + 630.615, -0.00071), ("IPTS-68", 273.15 + 1064.18, 0.00012),
    ("IPTS-48", 273.15, 0.0), ("IPTS-48", 373.15, 0.0),
]  # fmt: skip


@pytest.mark.parametrize(("scale", "kelvin", "jump"), JOINS)
def test_jump_at_a_join_is_the_published_equations_own(scale, kelvin, jump):
    """Neighbouring equations do not quite meet; the jump is known to 0.01 mK and stays below 1 mK."""
    found = shift(scale, kelvin) - shift(scale, np.nextafter(kelvin, 0.0))
    assert abs(found - jump) <= 0.000005
    assert abs(found) < 0.001


def test_every_join_is_in_the_list():
    """A branch that is added to a scale brings its join here; no two branches overlap or leave a hole."""
    joins = []
    for scale in SCALES.values():
        for (_, upper, _), (lower, _, _) in zip(scale.branches, scale.branches[1:], strict=False):
            assert upper == lower
            joins.append((scale.name, upper))
    assert joins == [(scale, kelvin) for scale, kelvin, _ in JOINS]


# the last ITS-90 temperature, K, inside the published conversions and one outside; the difference then left out, K
ENDS = [
    ("IPTS-68", 13.8, 13.799, "0.0071"), ("IPTS-68", 3999.999, 4000.0, "2.2366"),
    ("IPTS-48", 93.15, 93.149, "-0.0214"), ("IPTS-48", 523.149, 523.15, "-0.0207"),
]  # fmt: skip


@pytest.mark.parametrize(("scale", "inside", "outside", "left_out"), ENDS)
def test_beyond_the_published_conversions_nothing_is_shifted_and_reaches_says_so(scale, inside, outside, left_out):
    """No conversion reaches further: the number is taken as it is, and `reaches` tells."""
    assert SCALES[scale].reaches(inside)
    assert not SCALES[scale].reaches(outside)
    assert f"{shift(scale, inside):.4f}" == left_out
    assert shift(scale, outside) == rate(scale, outside) == 0.0


GRID = [
    *np.linspace(13.9, 83.7, 15), *np.linspace(84.0, 903.7, 40), *np.linspace(903.8, 1337.3, 15),
    *np.linspace(1337.4, 3999.0, 10),
]  # fmt: skip
GRID_48 = [float(t) for t in np.linspace(93.3, 523.1, 87)]


@pytest.mark.parametrize(("scale", "reference", "grid"), [("IPTS-68", t68, GRID), ("IPTS-48", t48, GRID_48)])
def test_number_on_the_scale_agrees_with_50_digits(scale, reference, grid):
    """The difference from ITS-90 is the published equations' own, to 3e-13 K, what its terms of 500 K lose."""
    for kelvin in map(float, grid):
        true = reference(mpf(kelvin)) - mpf(kelvin)
        assert abs(mpf(shift(scale, kelvin)) - true) <= mpf("3e-13"), kelvin


@pytest.mark.parametrize(("scale", "reference", "grid"), [("IPTS-68", t68, GRID), ("IPTS-48", t48, GRID_48)])
def test_rate_agrees_with_50_digits(scale, reference, grid):
    """The rate is the derivative of the difference, to 1e-14."""
    for kelvin in map(float, grid):
        true = mpmath.diff(reference, mpf(kelvin)) - 1
        assert abs(mpf(rate(scale, kelvin)) - true) <= mpf("1e-14"), kelvin


@pytest.mark.parametrize("scale", ["IPTS-68", "IPTS-48"])
def test_rate_agrees_with_a_difference_quotient(scale):
    """Two points 2 mK apart confirm the rate without any formula."""
    for kelvin in GRID if scale == "IPTS-68" else GRID_48:
        quotient = (shift(scale, kelvin + 0.001) - shift(scale, kelvin - 0.001)) / 0.002
        assert abs(quotient - rate(scale, kelvin)) <= 2e-9, kelvin


def test_shape_is_kept_and_the_array_is_left_alone():
    """Differences and rates have the shape of the temperatures, which stay as they were."""
    kelvin = np.linspace(5.0, 4500.0, 24).reshape(4, 6)
    kelvin.flags.writeable = False
    values, rates = IPTS_68.shift(kelvin)
    assert values.shape == rates.shape == (4, 6)
    assert [shift("IPTS-68", float(t)) for t in kelvin.flat] == list(values.flat)


@pytest.mark.parametrize(
    ("key", "reference"),
    [
        ("water-hyland-wexler-1983", t68), ("water-ice-hyland-wexler-1983", t68), ("water-wexler-1976", t68),
        ("water-bridgeman-aldrich-273-303", t48), ("water-bridgeman-aldrich-344-373", t48),
        ("water-goff-gratch-1946", lambda kelvin: kelvin + mpf(0.01)),
    ],
)  # fmt: skip
def test_curve_follows_its_scale(key, reference):
    """Value and derivative of a correlation on an older scale are right to 1e-12, per kelvin of ITS-90."""
    record = CORRELATIONS[key]
    curve = Curve.of(record, 1.0)
    own = reference_of(record)
    # inside the ends, clear of the kinks at 0 and 100 degC
    for kelvin in map(float, np.linspace(*curve.window, 12)[1:-1]):
        found = curve.value(kelvin), float(curve.rates(np.array([kelvin]))[0])
        true = own(reference(mpf(kelvin))), mpmath.diff(lambda t: own(reference(t)), mpf(kelvin))
        for ours, theirs in zip(found, true, strict=True):
            assert abs(mpf(ours) / theirs - 1) <= mpf("1e-12"), kelvin


def test_scale_is_worth_a_tenth_of_a_percent_of_the_vapour_pressure_of_water():
    """0.026 K at 100 degC are 0.093 % of p: A. Wexler's equation read on the wrong scale is off by that.

    A. Wexler, J. Res. Natl. Bur. Stand. 80A, 775 (1976), on IPTS-68, gives
    101.32499 kPa at 373.15 K of its own scale; dp/dT is 3.6164 kPa/K.
    """
    record = CORRELATIONS["water-wexler-1976"]
    own, converted = own_curve("water-wexler-1976").value(373.15), Curve.of(record, 1.0).value(373.15)
    assert f"{own / 1000.0:.5f}" == "101.32499"
    assert f"{100.0 * (converted / own - 1.0):.3f}" == "0.092"
    assert f"{(converted - own) / shift('IPTS-68', 373.15) / 1000.0:.2f}" == "3.62"


def test_scale_of_a_record_is_the_one_its_curve_uses():
    """The curve of each shelf correlation stands on the scale that its record names."""
    for record in CORRELATIONS.values():
        assert Curve.of(record, 1.0).scale is SCALES[record.temperature_scale]
    moved = dataclasses.replace(CORRELATIONS["water-wexler-1976"], temperature_scale="IPTS-48")
    assert Curve.of(moved, 1.0).scale is IPTS_48
