"""Restatement: the same curve in other units and to another base, against 50 digits and printed pairs.

Everything here enumerates the catalogue: each form either says a request or
is refused with a reason that the test knows from the equation.
"""

from __future__ import annotations

import dataclasses
from collections.abc import Callable, Mapping
from decimal import Decimal
from fractions import Fraction

import mpmath
import numpy as np
import pytest
from mpmath import mp, mpf

from registry.errors import BadInput
from registry.forms.catalogue import FORMS
from registry.numerals import is_number, last_digit_unit, parse_number
from registry.properties import PROPERTIES
from registry.quantities import UNITS, unit_names
from registry.records import Correlation
from registry.restating.agreement import take_curve
from registry.restating.catalogue import RULES
from registry.restating.restatement import Restatement, restate
from tests.reference_forms import DIGITS, REFERENCES, Printed, exact
from tests.shelf import CORRELATIONS, MASSES
from tests.test_forms import SAMPLES, make_record

# the promise of a restatement, over the whole window
CLOSE = mpf("1e-12")
ABSOLUTE = ("K", "degR")
TEMPERATURES = tuple(unit_names("temperature"))
ANTOINE = {"antoine-log10", "antoine-log10-minus", "antoine-ln", "antoine-ln-minus", "august-log10", "august-ln"}
ANY_ZERO = {*ANTOINE, "clausius-clapeyron", "magnus"}

# which logarithm of the value an equation is written with, read off its text: test_base_is_the_one_of_the_equation
BASE_10 = {
    "antoine-log10", "antoine-log10-minus", "august-log10", "kirchhoff-rankine-log10", "reciprocal-quadratic-log10",
    "chebyshev-log10", "goff-gratch", "wmo-goff",
}  # fmt: skip
NO_LOGARITHM = {
    "density-power", "density-power-reduced", "iapws-if97-saturation", "simon-glatzel", "simon-glatzel-sum",
    "simon-glatzel-power", "iapws-melting-ih", "iapws-melting-simon", "melting-polynomial", "clapeyron-melting",
    "kechin", "majer-svoboda", "watson", "rackett",
}  # fmt: skip
# to the other base: always, and those whose terms may find a place
OTHER_BASE = {*ANY_ZERO, "kirchhoff-rankine-ln", "kirchhoff-rankine-log10", "reciprocal-quadratic-log10",
              "murphy-koop-ice"}  # fmt: skip
SOMETIMES = {"riedel", "sonntag", "hyland-wexler", "wexler", "polynomial-reciprocal-ln", "polynomial-ln"}


@pytest.fixture(autouse=True)
def _fifty_digits():
    with mp.workdps(DIGITS):
        yield


# the mathematics of the printed texts, with nothing rounded to a double


def temperature_in(unit: str, kelvin: Fraction) -> mpf:
    return exact(kelvin / UNITS[unit].factor - UNITS[unit].shift)


def evaluate(record: Correlation, kelvin: Fraction, molar_mass: float) -> mpf:
    """The SI value that the equation gives with the texts of a record, 50 digits."""
    unit, temperature = UNITS[record.value_unit], UNITS[record.temperature_unit]
    c = {name: exact(Fraction(text)) for name, text in record.coefficients.items()}
    mass = c.get("M", exact(Fraction(repr(molar_mass)))) if unit.per_molar_mass else mpf(1)
    si = exact(unit.factor) * mass
    factor, shift = exact(temperature.factor), exact(temperature.shift)
    printed = Printed(lambda t: (t + shift) * factor, si)
    return REFERENCES[record.form](temperature_in(record.temperature_unit, kelvin), c, printed) * si


def points_of(record: Correlation, count: int = 9) -> list[Fraction]:
    """Temperatures over the printed window, K, exact, both ends included."""
    unit = UNITS[record.window_unit]
    low, high = unit.to_si(Fraction(record.window_min)), unit.to_si(Fraction(record.window_max))
    return [low + (high - low) * i / (count - 1) for i in range(count)]


def error_of(found: mpf, true: mpf) -> mpf:
    """Relative; of a value that is zero by construction, the value itself."""
    return abs(found) if abs(true) < mpf(10) ** -40 else abs(found - true) / abs(true)


def assert_same(found: Restatement, points: list[Fraction], true: list[mpf], molar_mass: float) -> None:
    """The restated texts make the same values, and so does the program's own arithmetic with them."""
    new = found.restated
    curve = take_curve(new, molar_mass)
    kelvin = np.array([float(point) for point in points])
    values, rates = curve.values(kelvin), curve.rates(kelvin)
    for point, value, rate, expected in zip(points, values, rates, true, strict=True):
        error = error_of(evaluate(new, point, molar_mass), expected)
        assert error <= CLOSE, f"{found.key} as {new.form} at {float(point)} K: {mpmath.nstr(error, 3)}"
        # a last bit of T that does more than 2e-13 to the value says nothing about the coefficients
        if expected and abs(float(point) * rate / float(expected)) * 2.0**-52 < 2e-13:
            assert error_of(mpf(float(value)), expected) <= CLOSE, f"{found.key}: doubles at {float(point)} K"


def ask(record: Correlation, mass: float, value: str, temperature: str, log: str | None) -> Restatement:
    return restate(record, value_unit=value, temperature_unit=temperature, log=log, molar_mass=mass)


def answer(record: Correlation, mass: float, *asked: str | None) -> tuple[Restatement | None, str]:
    """A restatement, or the words of its refusal."""
    try:
        return ask(record, mass, *asked), ""
    except BadInput as error:
        return None, str(error)


def reason(form: str, temperature: str, log: str | None) -> str:
    """How a refusal goes on: what was asked, and what about the form stands against it."""
    name = f"{FORMS[form].title} ({form})"
    if log and not base_of(form):
        return f"in {log}: {name} takes no logarithm of the value"
    if temperature not in ABSOLUTE:
        return f"in {temperature}: {name} counts from absolute zero"
    return f"in {log}: {name} is written to base"


def base_of(form: str) -> str:
    return "" if form in NO_LOGARITHM else "log10" if form in BASE_10 else "ln"


def other_base(form: str) -> str:
    return "ln" if form in BASE_10 else "log10"


def value_units(record: Correlation) -> list[str]:
    fixed = FORMS[record.form].value_unit
    return [fixed] if fixed else unit_names(PROPERTIES[record.property].dimension)


def other_unit(record: Correlation) -> str:
    """A unit of the value whose factor is another one, if the form allows any."""
    own = UNITS[record.value_unit]
    others = [u for u in value_units(record) if UNITS[u].factor != own.factor]
    return others[-1] if others else own.name


def is_line(record: Correlation) -> bool:
    """True if only a constant and a term in 1/T are there."""
    lines = {
        "polynomial-reciprocal-ln": {"A0", "A1"}, "reciprocal-quadratic-log10": {"A", "B"},
        "kirchhoff-rankine-ln": {"A", "B"}, "kirchhoff-rankine-log10": {"A", "B"},
    }  # fmt: skip
    used = {name for name, text in record.coefficients.items() if parse_number(text)}
    return record.form in lines and used <= lines[record.form]


def may_say(record: Correlation, temperature: str, log: str | None) -> bool | None:
    """True if a request can be said, None if that hangs on the coefficients."""
    if log and not base_of(record.form):
        return False
    if is_line(record):
        return True
    if temperature not in ABSOLUTE and record.form not in ANY_ZERO:
        return False
    if log and log != base_of(record.form):
        return True if record.form in OTHER_BASE else None if record.form in SOMETIMES else False
    return True


# the table


def test_every_form_has_a_rule():
    """The table of rules has a row for every form of the catalogue, and no other."""
    assert set(RULES) == set(FORMS)


@pytest.mark.parametrize("form", FORMS)
def test_base_is_the_one_of_the_equation(form):
    """What the rules take for the logarithm of the value is what the equation shows."""
    equation = FORMS[form].equation
    assert RULES[form].base == base_of(form)
    if base_of(form) == "log10":
        assert equation.startswith(("log10 p", "log10(p", "T log10 p"))
    elif base_of(form) == "ln" and form not in ("magnus", "helium-its90"):
        assert equation.startswith(("ln p", "ln(p", "ln(rho"))
    elif not base_of(form):
        assert not equation.startswith(("ln", "log10"))


@pytest.mark.parametrize("log", [None, "ln", "log10"])
@pytest.mark.parametrize("temperature", TEMPERATURES)
@pytest.mark.parametrize("form", FORMS)
def test_each_form_says_a_request_or_is_refused_with_the_reason(form, temperature, log):
    """Which requests a form can say follows from its equation; a refusal names what was asked and shows why."""
    record, mass = SAMPLES[form]
    allowed = may_say(record, temperature, log)
    found, told = answer(record, mass, other_unit(record), temperature, log)
    if found is None:
        assert not allowed
        assert told.startswith(f"{record.key} cannot be restated {reason(form, temperature, log)}")
        return
    assert allowed is not False
    assert found.restated.temperature_unit == found.restated.window_unit == temperature
    assert log is None or base_of(found.restated.form) == log
    points = points_of(record)
    assert_same(found, points, [evaluate(record, point, mass) for point in points], mass)
    assert found.rounding <= 1e-12
    assert found.measured <= 1e-12


@pytest.mark.parametrize("form", [form for form in FORMS if FORMS[form].value_unit])
def test_a_fixed_unit_of_the_value_is_kept(form):
    """The three forms whose equation fixes the unit of the value are refused in any other."""
    record, mass = SAMPLES[form]
    unit = FORMS[form].value_unit
    for other in unit_names(PROPERTIES[record.property].dimension):
        if other != unit:
            told = rf"in {other}: .* gives {unit} and no other unit\.$"
            with pytest.raises(BadInput, match=told):
                restate(record, value_unit=other, molar_mass=mass)


# the shelf, in everything it can be asked


@pytest.mark.parametrize("key", CORRELATIONS)
def test_every_shelf_correlation_in_every_unit_and_base(key):
    """Every unit of the value, of temperature and every base that the form can say: within 1e-12 of the original."""
    record = CORRELATIONS[key]
    mass = MASSES[record.compound]
    points = points_of(record)
    true = [evaluate(record, point, mass) for point in points]
    said = 0
    for temperature in TEMPERATURES:
        for log in (None, other_base(record.form)):
            for value in value_units(record):
                allowed = may_say(record, temperature, log)
                found, _ = answer(record, mass, value, temperature, log)
                if found is None:
                    assert not allowed
                    continue
                assert allowed is not False
                assert_same(found, points, true, mass)
                assert found.measured <= 1e-12
                said += 1
    assert said >= len(value_units(record)) * (2 if record.form not in ANY_ZERO else 8)


@pytest.mark.parametrize("form", FORMS)
def test_there_and_back(form):
    """In other units and back: the same form and the same curve; what is a factor of whole numbers comes back whole."""
    record, mass = SAMPLES[form]
    there = ask(record, mass, other_unit(record), "degR", None).restated
    back = ask(there, mass, record.value_unit, record.temperature_unit, None)
    if form == "magnus":  # its p0 means nothing at 0 degR, and is not found again
        assert back.restated.form == there.form == "antoine-ln"
    else:
        assert back.restated.form == record.form
        assert set(back.restated.coefficients) == set(record.coefficients)
    points = points_of(record)
    for point in points:
        expected = evaluate(record, point, mass)
        assert error_of(evaluate(back.restated, point, mass), expected) <= 2 * CLOSE
    only_temperature = ask(record, mass, record.value_unit, "degR", None).restated
    home = ask(only_temperature, mass, record.value_unit, record.temperature_unit, None).restated
    for name, text in record.coefficients.items() if form != "magnus" else ():
        if Fraction(only_temperature.coefficients[name]) == Fraction(text) * Fraction(9, 5):
            assert Fraction(home.coefficients[name]) == Fraction(text)
    assert [Fraction(home.window_min), Fraction(home.window_max)] == window_in(record, record.temperature_unit)


def window_in(record: Correlation, unit: str) -> list[Fraction]:
    old, new = UNITS[record.window_unit], UNITS[unit]
    return [old.to_si(Fraction(bound)) / new.factor - new.shift for bound in (record.window_min, record.window_max)]


@pytest.mark.parametrize("unit", TEMPERATURES)
def test_a_window_is_exact_in_any_unit(unit):
    """Bounds are the same temperatures, as decimals or as fractions of whole numbers."""
    for record in CORRELATIONS.values():
        if unit in ABSOLUTE or record.form in ANY_ZERO:
            new = restate(record, temperature_unit=unit, molar_mass=MASSES[record.compound]).restated
            assert [Fraction(new.window_min), Fraction(new.window_max)] == window_in(record, unit)
            assert new.window_kelvin() == record.window_kelvin()


# digits


def test_an_exact_conversion_keeps_the_printed_digits():
    """A power of ten moves the point; what does not change keeps its text; a shift keeps its last place."""
    record = CORRELATIONS["water-ice-r14-08"]
    found = restate(record, value_unit="kPa").restated.coefficients
    assert record.coefficients["pt"] == "611.657"
    assert found["pt"] == "0.611657"
    assert {name: text for name, text in found.items() if name != "pt"} == {
        name: text for name, text in record.coefficients.items() if name != "pt"
    }
    methane = CORRELATIONS["methane-reid-4"]
    assert methane.coefficients["pc"] == "46.0"
    assert restate(methane, value_unit="MPa").restated.coefficients["pc"] == "4.60"
    assert restate(methane, value_unit="Pa").restated.coefficients["pc"] == "4.60E+6"
    ethanol = CORRELATIONS["ethanol-antoine-low"]
    assert restate(ethanol, temperature_unit="K").restated.coefficients == {
        "A": "8.20417", "B": "1642.89", "C": "-42.850"
    }  # fmt: skip
    ammonia = CORRELATIONS["ammonia-antoine-lange"]
    assert restate(ammonia, value_unit="bar").restated.coefficients == {"A": "4.67956", "B": "1002.711", "C": "25.215"}


@pytest.mark.parametrize("key", CORRELATIONS)
def test_coefficients_are_numbers_with_no_fewer_digits_than_printed(key):
    """Each text is a number that a record may hold, with as many digits as the printed one, or up to its last place."""
    record = CORRELATIONS[key]
    mass = MASSES[record.compound]
    found = restate(record, value_unit=value_units(record)[-1], temperature_unit="degR", molar_mass=mass).restated
    assert all(is_number(text) for text in found.coefficients.values())
    for name, text in record.coefficients.items():
        if name in found.coefficients and "/" not in text + found.coefficients[name]:
            new = found.coefficients[name]
            assert digits_of(new) >= digits_of(text) or last_digit_unit(new) <= last_digit_unit(text)


def digits_of(text: str) -> int:
    return len(text.lower().partition("e")[0].replace(".", "").lstrip("+-0")) or 1


def test_no_more_digits_than_needed():
    """With one digit less in A and B some Antoine sets of the shelf would miss 1e-12, with two less most."""
    records = [record for record in CORRELATIONS.values() if record.form in ANTOINE]
    one, two = (sum(misses_without(record, count) for record in records) for count in (1, 2))
    assert one > 0
    assert two > len(records) / 2, f"{two} of {len(records)}"


def misses_without(record: Correlation, count: int) -> bool:
    """True if the set to the other base, in psi, misses 1e-12 with so many digits less in A and B."""
    new = restate(record, value_unit="psi", log=other_base(record.form)).restated
    shorter = {name: shorten(text, count) if name in "AB" else text for name, text in new.coefficients.items()}
    worse = dataclasses.replace(new, coefficients=shorter)
    worst = max(error_of(evaluate(worse, p, 1.0), evaluate(record, p, 1.0)) for p in points_of(record))
    return bool(worst > CLOSE)


def shorten(text: str, count: int) -> str:
    """A number without its last digits, rounded."""
    places = len(text.partition(".")[2]) - count
    return str(Decimal(text).quantize(Decimal(10) ** -places))


def test_digits_are_kept_however_small_the_number():
    """The digits that a coefficient needs do not hang on its size (an invented one, far from any that is printed)."""
    record = CORRELATIONS["benzene-enthalpy-majer-svoboda-1985"]
    tiny = dataclasses.replace(record, coefficients={**record.coefficients, "A": "1.234e-200"})
    found = restate(tiny, value_unit="cal/mol").restated
    assert abs(Fraction(found.coefficients["A"]) / (Fraction("1.234e-200") / Fraction("0.004184")) - 1) < 1e-12


# printed pairs


def assert_prints_as(found: Mapping[str, str], printed: Mapping[str, str], half_units: Mapping[str, float]) -> None:
    for name, text in printed.items():
        assert abs(float(Fraction(found[name]) - Fraction(text))) <= half_units[name], name


def test_naphthalene_as_sogin_printed_it():
    """H. H. Sogin, Trans. ASME 80, 61 (1958), prints A = 11.884, B = 6713 in lbf/ft2 and degR (from memory).

    The shelf has the set in Pa and kelvin, 13.564 and 3729.4; a psi is 144 lbf/ft2. Its B is given to 0.05 K, A to
    0.0005, so the printed ones are met to 0.09 + 0.5 degR and 0.001.
    """
    record = CORRELATIONS["naphthalene-sublimation-sogin-1958"]
    found = restate(record, value_unit="psi", temperature_unit="degR").restated
    assert found.form == "august-log10"
    a = float(found.coefficients["A"]) + float(mpmath.log10(144))
    assert abs(a - 11.884) <= 0.001
    assert abs(float(found.coefficients["B"]) - 6713.0) <= 0.59


def test_tetens_as_murray_printed_it():
    """O. Tetens (1930), 10^(7.5 t/(237.3 + t)), is exp(17.2693882 t/(t + 237.3)) in F. W. Murray, J. Appl. Meteorol. 6,
    203 (1967), who also prints 35.86 for b in kelvin, against an ice point of 273.16 K (from memory)."""
    murray = make_record(
        "magnus", {"p0": "6.1078", "a": "17.2693882", "b": "237.3"}, temperature_unit="degC", value_unit="hPa",
        window_min="273.15", window_max="310",
    )  # fmt: skip
    found = restate(murray, log="log10").restated
    assert found.form == "antoine-log10"
    # log10 p = log10 p0 + 7.5 - 7.5 x 237.3/(t + 237.3)
    assert abs(float(found.coefficients["B"]) - 7.5 * 237.3) <= 7.5 * 237.3 * 1e-8
    assert abs(float(found.coefficients["A"]) - float(mpmath.log10(mpf("6.1078"))) - 7.5) <= 1e-7
    assert found.coefficients["C"] == "237.3"
    kelvin = restate(murray, temperature_unit="K").restated
    assert kelvin.form == "antoine-ln"
    assert Fraction(kelvin.coefficients["C"]) == -(Fraction("35.86") - Fraction("0.01"))


MMHG_KPA = [
    ("benzene", "6.90565", "6.03055", "1211.033", "220.790"),
    ("toluene", "6.95464", "6.07954", "1344.800", "219.482"),
    ("acetone", "7.11714", "6.24204", "1210.595", "229.664"),
    ("water", "8.07131", "7.19621", "1730.63", "233.426"),
]


@pytest.mark.parametrize(("compound", "mmhg", "kpa", "b", "c"), MMHG_KPA, ids=[row[0] for row in MMHG_KPA])
def test_antoine_constants_printed_for_mmhg_and_for_kpa(compound, mmhg, kpa, b, c):
    """Handbooks print these sets both ways, B and C the same (T. Boublik, V. Fried, E. Hala, The Vapour Pressures of
    Pure Substances (1984), for kPa; from memory): A is met to its five decimals."""
    record = make_record(
        "antoine-log10", {"A": mmhg, "B": b, "C": c}, temperature_unit="degC", value_unit="mmHg",
        window_min="280", window_max="350",
    )  # fmt: skip
    found = restate(record, value_unit="kPa").restated.coefficients
    assert f"{float(found['A']):.5f}" == kpa
    assert (found["B"], found["C"]) == (b, c)


def test_antoine_by_the_textbook_identity():
    """To base e, A and B are multiplied by ln 10; another unit adds its logarithm to A; C moves by 273.15."""
    record = CORRELATIONS["water-antoine-1-100"]
    found = restate(record, value_unit="kPa", temperature_unit="K", log="ln").restated.coefficients
    ln10 = mp.log(10)
    a = ln10 * mpf("8.07131") + mp.log(exact(UNITS["mmHg"].factor) / 1000)
    assert abs(mpf(found["A"]) - a) < mpf("1e-12")
    assert abs(mpf(found["B"]) / (ln10 * mpf("1730.63")) - 1) < mpf("1e-12")
    assert Fraction(found["C"]) == Fraction("233.426") - Fraction("273.15")


# what else is said


def test_the_check_is_a_value_of_both():
    """25 degC where the window holds it; both statements give it, each in its own unit."""
    found = restate(CORRELATIONS["water-sr1-86"], value_unit="mmHg", temperature_unit="degR")
    assert (found.check.temperature, found.check.recorded_temperature) == ("536.67", "298.15")
    factor = float(UNITS["MPa"].factor / UNITS["mmHg"].factor)
    assert found.check.value == pytest.approx(found.check.recorded_value * factor, rel=1e-12)
    # W. Wagner, A. Pruss 1993: 3.1698 kPa at 298.15 K
    assert found.check.recorded_value == pytest.approx(3.1698e-3, rel=1e-4)


@pytest.mark.parametrize("key", CORRELATIONS)
@pytest.mark.parametrize("unit", ["K", "degR"])
def test_the_check_lies_in_the_window(key, unit):
    """The worked value is at a round temperature that the window holds."""
    record = CORRELATIONS[key]
    found = restate(record, temperature_unit=unit, molar_mass=MASSES[record.compound])
    at = Fraction(found.check.temperature)
    assert Fraction(found.restated.window_min) <= at <= Fraction(found.restated.window_max)
    old = UNITS[record.temperature_unit]
    assert old.to_si(Fraction(found.check.recorded_temperature)) == UNITS[unit].to_si(at)


def test_the_scale_stays_and_nothing_is_converted_to_another():
    """A set on IPTS-68 is restated on IPTS-68: the numbers are those of its own equation at its own temperatures."""
    record = CORRELATIONS["water-hyland-wexler-1983"]
    assert record.temperature_scale == "IPTS-68"
    found = restate(record, value_unit="kPa", temperature_unit="degR")
    assert found.restated.temperature_scale == "IPTS-68"
    assert found.check.recorded_value == pytest.approx(float(evaluate(record, Fraction("298.15"), 1.0)), rel=1e-12)


def test_a_molar_mass_is_said_where_it_lies_between():
    """J/g and J/mol, mol/dm3 and kg/m3: the molar mass used is told, and nothing where it does not matter."""
    record = CORRELATIONS["benzene-enthalpy-majer-svoboda-1985"]
    mass = MASSES["benzene"]
    found = restate(record, value_unit="J/g", molar_mass=mass)
    assert found.molar_mass == repr(mass)
    assert float(found.restated.coefficients["A"]) == pytest.approx(47.41e3 / mass, rel=1e-12)
    assert restate(record, value_unit="J/mol", molar_mass=mass).molar_mass == ""
    with pytest.raises(BadInput, match=r"is in kJ/mol; in J/g it needs the molar mass, g/mol\.$"):
        restate(record, value_unit="J/g")


def test_another_form_is_said():
    """Where the form changes, the remark says why; where it stays, nothing is said."""
    august = CORRELATIONS["lithium-alcock-1984"]
    found = restate(august, temperature_unit="degC")
    assert (found.restated.form, found.restated.coefficients["C"]) == ("antoine-log10", "273.15")
    assert found.remark == "August's equation counts from absolute zero; from another zero it is Antoine's."
    assert restate(august, temperature_unit="degR").remark == ""
    ice = restate(CORRELATIONS["water-ice-murphy-koop-2005"], log="log10")
    assert ice.restated.form == "kirchhoff-rankine-log10"
    assert ice.remark == ("With log10 its terms are those of Kirchhoff-Rankine, base 10 (kirchhoff-rankine-log10).")
    magnus = CORRELATIONS["water-magnus-wmo-2008"]
    assert restate(magnus, temperature_unit="degF").restated.form == "magnus"
    assert restate(magnus, temperature_unit="K").restated.form == "antoine-ln"


SUMS: list[tuple[str, Callable[[], Correlation], str, str]] = [
    ("riedel without C4", lambda: powers("riedel", "C1=70; C2=-7000; C3=-7; C4=0; C5=6"), "log10",
     "kirchhoff-rankine-log10"),
    ("riedel with T", lambda: powers("riedel", "C1=70; C2=-7000; C3=-7; C4=1e-3; C5=1"), "log10",
     "kirchhoff-rankine-log10"),
    ("kirchhoff with T", lambda: powers("kirchhoff-rankine-log10", "A=20; B=-3000; C=-4; D=1e-3"), "ln", "riedel"),
    ("quadratic", lambda: powers("reciprocal-quadratic-log10", "A=9; B=-2000; C=1e-3; D=-1e-6"), "ln", "sonntag"),
    ("a square without T", lambda: powers("reciprocal-quadratic-log10", "A=9; B=-2000; C=0; D=-1e-6"), "ln", "riedel"),
    ("two terms", lambda: powers("polynomial-reciprocal-ln", "A0=20; A1=-5000"), "log10", "august-log10"),
    ("a series in 1/T, two terms used", lambda: powers("polynomial-reciprocal-ln", "A0=20; A1=-5000; A2=0"), "log10",
     "august-log10"),
]  # fmt: skip
"""Invented coefficients: only the terms count."""


def powers(form: str, text: str) -> Correlation:
    return make_record(
        form, dict(part.split("=") for part in text.split("; ")), temperature_unit="K", value_unit="Pa",
        window_min="300", window_max="400",
    )  # fmt: skip


@pytest.mark.parametrize(("what", "build", "log", "form"), SUMS, ids=[row[0] for row in SUMS])
def test_a_sum_goes_to_a_form_that_has_a_place_for_each_term(what, build, log, form):
    """To the other base the terms decide the form; the curve stays."""
    record = build()
    found = restate(record, value_unit="bar", temperature_unit="degR", log=log)
    assert found.restated.form == form
    points = points_of(record)
    assert_same(found, points, [evaluate(record, point, 1.0) for point in points], 1.0)


def test_from_fahrenheit_and_rankine_to_kelvin():
    """5/9 ends no decimal: reference temperatures and bounds become fractions, the rest keeps its digits."""
    record = make_record(
        "clausius-clapeyron", {"T0": "652.9", "p0": "10", "H": "40628.38318565791"}, temperature_unit="degR",
        value_unit="psi", window_min="300", window_max="500",
    )  # fmt: skip
    found = restate(record, value_unit="kPa", temperature_unit="K")
    assert found.restated.coefficients["T0"] == "6529/18"
    points = points_of(record)
    true = [evaluate(record, point, 1.0) for point in points]
    assert_same(found, points, true, 1.0)
    fahrenheit = dataclasses.replace(record, window_min="32", window_max="100", window_unit="degF")
    moved = restate(fahrenheit, temperature_unit="K").restated
    assert (moved.window_min, moved.window_max) == ("273.15", "55967/180")
    assert_same(restate(record, log="log10", temperature_unit="degF"), points, true, 1.0)


def test_a_scale_about_the_zero_of_kelvin_keeps_its_zero():
    """373.16 K on an ice point of 273.16 K are 100 degC: 273.15 less would be 0.01 K off, so degC is refused."""
    numbers = {"A": "10.2", "B": "1700", "C": "-40"}
    record = dataclasses.replace(
        CORRELATIONS["ethanol-antoine-low"], coefficients=numbers, temperature_unit="K", window_min="280",
        window_max="350", window_unit="K", temperature_scale="ice-point-273.16",
    )  # fmt: skip
    for unit in ("degC", "degF"):
        with pytest.raises(BadInput, match=f"in {unit}: it stands on ice-point-273.16, .* the zero of K is allowed"):
            restate(record, temperature_unit=unit)
    assert restate(record, temperature_unit="degR").restated.coefficients["C"] == "-72"
    assert restate(dataclasses.replace(record, temperature_scale="IPTS-68"), temperature_unit="degC").standing == ""
