"""Units by exact definition, and numbers with units as people type them."""

from __future__ import annotations

import math
from fractions import Fraction

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from registry.display import format_number
from registry.errors import BadQuantity, GaugePressure
from registry.naming import join_names
from registry.quantities import (
    UNITS,
    convert,
    find_unit,
    gauge_unit,
    parse_pressure,
    parse_temperature,
    unit_names,
)

QUIET = settings(derandomize=True, max_examples=200, deadline=None, database=None)

# SI units in one unit, each from its own definition in numbers:
# SI Brochure, 9th ed. (2019), Table 8 and section 4; NIST SP 811 (2008), App. B;
# 9.80665 m/s2: 3rd CGPM (1901); 101325 Pa: 10th CGPM (1954), Res. 4; 0.45359237 kg and 0.3048 m: 1959 agreement;
# mmHg and inHg conventional, 13595.1 kg/m3: ISO 80000-4 and BS 350 (from memory)
DEFINITIONS = {
    "K": "1", "degC": "1", "degF": "5/9", "degR": "5/9",
    "Pa": "1", "hPa": "100", "kPa": "1000", "MPa": "1000000", "GPa": "1000000000", "bar": "100000", "mbar": "100",
    "atm": "101325", "mmHg": "133.322387415", "cmHg": "1333.22387415", "Torr": "20265/152", "inHg": "3386.388640341",
    "psi": "8896443230521/1290320000", "kgf/cm2": "98066.5",
    "J/mol": "1", "kJ/mol": "1000", "cal/mol": "4.184", "kcal/mol": "4184", "J/g": "1",
    "kg/m3": "1", "g/cm3": "1000", "lb/ft3": "28349523125/1769802912",
    "mol/dm3": "1", "mol/m3": "1/1000", "g/mol": "1", "1": "1",
}  # fmt: skip
SHIFTS = {"degC": "273.15", "degF": "459.67"}
MOLAR = {"J/g", "mol/dm3", "mol/m3"}


@pytest.mark.parametrize("name", UNITS)
def test_unit_is_its_exact_definition(name):
    """Each unit is worth exactly what its definition says: no rounded factor."""
    assert UNITS[name].name == name
    assert UNITS[name].factor == Fraction(DEFINITIONS[name])
    assert UNITS[name].shift == Fraction(SHIFTS.get(name, "0"))
    assert UNITS[name].per_molar_mass == (name in MOLAR)
    assert UNITS[name].definition


def test_no_definition_without_unit():
    """The definitions above and the table name the same units."""
    assert set(DEFINITIONS) == set(UNITS)


# decimals of the definitions above, as unit tables print them (psi is 6894.75729316836134 Pa); by hand from these
# lb/ft3 by NIST SP 811 is 1.601846 E+01 kg/m3
@pytest.mark.parametrize(
    ("value", "source", "target", "printed"),
    [
        (1.0, "psi", "Pa", "6894.757293168362"), (1.0, "Torr", "Pa", "133.32236842105263"),
        (1.0, "mmHg", "Pa", "133.322387415"), (1.0, "inHg", "Pa", "3386.388640341"),
        (1.0, "atm", "Torr", "760.0"), (1.0, "kgf/cm2", "Pa", "98066.5"), (1.0, "kgf/cm2", "bar", "0.980665"),
        (1.0, "atm", "bar", "1.01325"), (29.92, "inHg", "hPa", "1013.2074811900272"),
        (25.0, "degC", "K", "298.15"), (77.0, "degF", "K", "298.15"), (536.67, "degR", "K", "298.15"),
        (-40.0, "degC", "degF", "-40.0"), (0.0, "degC", "degF", "32.0"), (212.0, "degF", "degC", "100.0"),
        (1.0, "kcal/mol", "kJ/mol", "4.184"), (1.0, "lb/ft3", "kg/m3", "16.018463373960138"),
    ],
)  # fmt: skip
def test_conversion_is_rounded_once(value, source, target, printed):
    """A converted value is the double nearest to the exact one."""
    assert repr(convert(value, UNITS[source], UNITS[target])) == printed


def test_mmhg_is_not_the_torr():
    """The conventional millimetre of mercury exceeds the torr by 0.142 parts per million."""
    excess = UNITS["mmHg"].factor / UNITS["Torr"].factor - 1
    assert f"{float(excess) * 1e6:.3f}" == "0.142"


def test_conversion_between_molar_and_mass_basis():
    """J/g and J/mol are the molar mass apart: water, 2257 J/g x 18.015268 g/mol."""
    assert convert(2257.0, UNITS["J/g"], UNITS["kJ/mol"], 18.015268) == 40.660459876
    assert convert(40.660459876, UNITS["kJ/mol"], UNITS["J/g"], 18.015268) == 2257.0
    # nitrogen, 28.01348 g/mol: mol/dm3 to kg/m3
    assert convert(28.775, UNITS["mol/dm3"], UNITS["kg/m3"], 28.01348) == 806.087887
    assert convert(1.0, UNITS["mol/dm3"], UNITS["mol/m3"]) == 1000.0


def test_molar_mass_is_asked_for_where_it_is_needed():
    """Between a molar and a mass basis nothing is assumed."""
    with pytest.raises(BadQuantity, match="'J/g' cannot be read: it needs the molar mass when the value is in kJ/mol"):
        convert(1.0, UNITS["kJ/mol"], UNITS["J/g"])


def test_units_of_different_dimension_do_not_convert():
    """A pressure is no temperature; the message lists what would do."""
    with pytest.raises(BadQuantity, match="a pressure unit is one of Pa, hPa, kPa"):
        convert(1.0, UNITS["Pa"], UNITS["K"])


PAIRS = [
    (a.name, b.name)
    for a in UNITS.values()
    for b in UNITS.values()
    if a.dimension == b.dimension and a.per_molar_mass == b.per_molar_mass
]


@QUIET
@given(st.sampled_from(PAIRS), st.floats(min_value=1e-6, max_value=1e9))
def test_there_and_back_again(pair, value):
    """A value in another unit and back is the same within one rounding of each, absolute zero counted from."""
    source, target = UNITS[pair[0]], UNITS[pair[1]]
    back = convert(convert(value, source, target), target, source)
    scale = max(value, float(source.shift), float(target.shift * target.factor / source.factor))
    assert abs(back - value) <= 2.0 * math.ulp(scale)


@QUIET
@given(st.sampled_from(sorted(UNITS)), st.fractions(min_value=-1000, max_value=10**6, max_denominator=10**6))
def test_si_and_back_is_exact(name, value):
    """In fractions nothing is lost: the SI value and back is the double nearest to the value."""
    unit = UNITS[name]
    assert unit.to_si(value) / unit.factor - unit.shift == value
    exact_double = Fraction(float(unit.to_si(value)))
    assert unit.from_si(float(exact_double)) == float(exact_double / unit.factor - unit.shift)


@pytest.mark.parametrize(
    ("text", "kelvin"),
    [
        ("298.15K", 298.15), ("298.15 K", 298.15), ("25degC", 298.15), ("25 °C", 298.15), ("25°C", 298.15),
        ("25C", 298.15), ("25 celsius", 298.15), ("77F", 298.15), ("77 °F", 298.15), ("536.67R", 298.15),
        ("536.67 degR", 298.15), ("-40C", 233.15), ("\u221240C", 233.15), ("\u221240 °F", 233.15), ("+25C", 298.15),
        (" 25C\n", 298.15), ("25\u00a0°C", 298.15), ("25\u202f°C", 298.15), (".5K", 0.5), ("5.K", 5.0),
        ("0C", 273.15), ("-459.66F", 0.01 * 5 / 9),
    ],
)  # fmt: skip
def test_temperature_as_people_type_it(text, kelvin):
    """Units stand with or without a blank, with a degree sign, behind a minus sign of typography."""
    assert parse_temperature(text) == kelvin


@pytest.mark.parametrize(("text", "kelvin"), [("2.9815e2K", 298.15), ("2.9815E+2 K", 298.15), ("29815e-2 K", 298.15)])
def test_temperature_with_an_exponent(text, kelvin):
    """An exponent belongs to the number, not to the unit."""
    assert parse_temperature(text) == kelvin


@pytest.mark.parametrize("text", ["1e5Pa", "1.0E5 Pa", "0.1e1 bar", "1000e-3bar"])
def test_pressure_with_an_exponent(text):
    """An exponent belongs to the number, not to the unit."""
    assert parse_pressure(text) == 100000


@pytest.mark.parametrize("text", ["25", "298.15", "-40", "1e3", "25 "])
def test_bare_temperature_is_refused_with_the_list_of_units(text):
    """A bare number is no temperature; the message says which units there are."""
    with pytest.raises(BadQuantity, match=r"K, degC, degF, degR") as caught:
        parse_temperature(text)
    assert caught.value.allowed


# the numbers that float() would read, with a unit behind them
@pytest.mark.parametrize(
    "text",
    [
        "1_000.5K", "\u0663\u0660\u0660K", "\uff13\uff10\uff10K", "nanK", "nan K", "infK", "1e400K", "1e400 K",
        "1e99999K", "298,15K", "1,298.15K", "1/3K", "- 40C", "--40C", "25-C", "25+C", "1.2.3K", "..5K", "K", "", " ",
        "25 K K", "25 kPa", "25 k", "25c", "25\x00C", "25;C", "9" * 60 + "K", "9" * 10_000 + "K", "0x10K", "25 °",
    ],
)  # fmt: skip
def test_other_temperature_is_refused(text):
    """Nothing is guessed: no other digits, no decimal comma, no second unit, no unit in the wrong case."""
    with pytest.raises(BadQuantity) as caught:
        parse_temperature(text)
    assert len(str(caught.value)) < 400


@pytest.mark.parametrize("text", ["0K", "-1K", "-273.15C", "-273.16C", "-459.67F", "0R", "\u2212300C"])
def test_no_temperature_at_or_below_absolute_zero(text):
    """Absolute zero is no temperature, in any unit, exactly."""
    with pytest.raises(BadQuantity, match="a temperature lies above absolute zero, 0 K"):
        parse_temperature(text)


def test_temperature_is_the_double_nearest_to_the_exact_value():
    """t + 273.15 is added exactly and rounded once: 0.1 degC is 273.25 K, not 273.25 and a bit."""
    for tenths in range(-2731, 10_000):
        exact = Fraction(tenths, 10) + Fraction("273.15")
        assert parse_temperature(f"{tenths / 10:.1f}degC") == exact.numerator / exact.denominator


@QUIET
@given(st.floats(min_value=1e-3, max_value=1e6), st.sampled_from(unit_names("temperature")))
def test_any_double_with_a_unit_is_read(value, unit):
    """A plain decimal of a double with a unit reads to the exact conversion, rounded once."""
    text = f"{value:.12f}"
    assert parse_temperature(text + unit) == float(UNITS[unit].to_si(Fraction(text)))
    assert parse_temperature(f"{text} {unit}") == parse_temperature(text + unit)


@pytest.mark.parametrize(
    ("text", "pascal"),
    [
        ("101325Pa", 101325), ("1 atm", 101325), ("760 torr", 101325), ("1bara", 100000), ("1 bar", 100000),
        ("1 at", Fraction("98066.5")), ("1kg/cm2", Fraction("98066.5")), ("1 kgf/cm²", Fraction("98066.5")),
        ("760 mm Hg", 760 * Fraction("133.322387415")), ("1 inHg", Fraction("3386.388640341")),
        ("14.7 psia", Fraction("14.7") * Fraction(8896443230521, 1290320000)), ("1 mbar", 100),
    ],
)  # fmt: skip
def test_pressure_as_people_type_it(text, pascal):
    """A pressure with its unit is read exactly."""
    assert parse_pressure(text) == pascal


GAUGE = [
    "1barg", "1 bar g", "1 bar(g)", "1 bar (g)", "1 bar-g", "1 bar_g", "1 bar gauge", "1 bar(gauge)", "14.7psig",
    "14.7 psi(g)", "1 kPa_g", "1 kPag", "30 inHg gauge", "1 atg", "1kgf/cm2g", "1 kg/cm2 g", "1 mmHg g", "-0.5 barg",
]  # fmt: skip


@pytest.mark.parametrize("text", GAUGE)
def test_gauge_pressure_is_refused_with_the_way_out(text):
    """A gauge unit means nothing without the local atmosphere, and the message says how to state it."""
    with pytest.raises(GaugePressure, match="it is a gauge unit, and only absolute pressures are kept here") as caught:
        parse_pressure(text)
    assert "--atmosphere" in str(caught.value)


@pytest.mark.parametrize("name", unit_names("pressure"))
def test_every_pressure_unit_has_its_gauge_spelling_refused(name):
    """No pressure unit slips through with a g behind it."""
    for spelling in (f"{name}g", f"{name}(g)", f"{name} gauge"):
        with pytest.raises(GaugePressure):
            find_unit(spelling, "pressure")


def test_gauge_unit_counts_from_the_stated_atmosphere():
    """With the local atmosphere stated a gauge reading becomes absolute, exactly."""
    unit = gauge_unit("barg", Fraction(101325))
    assert unit.to_si(Fraction("2.5")) == 351325
    assert unit.from_si(351325.0) == 2.5
    assert unit.name == "bar(g)"
    assert gauge_unit("psi(g)", Fraction(101325)).to_si(Fraction(0)) == 101325
    assert gauge_unit("kPa", Fraction(101325)) is UNITS["kPa"]


@pytest.mark.parametrize(
    ("text", "meant"), [("mmhg", "mmHg"), ("MPA", "MPa"), ("BAR", "bar"), ("kpa", "kPa"), ("TORR", "Torr")]
)
def test_near_miss_names_the_unit_that_was_meant(text, meant):
    """A unit in the wrong case is refused, since mPa is not MPa, and the near one is named."""
    with pytest.raises(BadQuantity, match=f"Did you mean {meant}"):
        find_unit(text, "pressure")


@pytest.mark.parametrize("dimension", sorted({unit.dimension for unit in UNITS.values()}))
def test_every_spelling_finds_its_unit(dimension):
    """Names and other spellings are understood for their own dimension, and for no other."""
    for unit in UNITS.values():
        for spelling in (unit.name, *unit.aliases):
            if unit.dimension == dimension:
                assert find_unit(f" {spelling} ", dimension) is unit
            else:
                with pytest.raises(BadQuantity):
                    find_unit(spelling, dimension)


def test_no_spelling_is_used_twice():
    """One spelling, one unit; and none of them reads as the gauge spelling of another."""
    spellings = [spelling for unit in UNITS.values() for spelling in (unit.name, *unit.aliases)]
    assert len(spellings) == len(set(spellings))


def test_every_unit_prints_and_reads_back():
    """A temperature or pressure in any unit, printed with its name, is read back."""
    for name in unit_names("temperature"):
        assert parse_temperature(f"500 {name}") == float(UNITS[name].to_si(Fraction(500)))
    for name in unit_names("pressure"):
        assert parse_pressure(f"1.5 {name}") == UNITS[name].to_si(Fraction("1.5"))


@QUIET
@given(st.text(max_size=20) | st.from_regex(r"[0-9.eE+ -]{1,6}[KCFR°gabr]{0,4}", fullmatch=True))
def test_any_text_is_a_temperature_or_bad_quantity(text):
    """Whatever is typed, the outcome is a temperature above 0 K or one explained refusal."""
    try:
        kelvin = parse_temperature(text)
    except BadQuantity as error:
        refusal = error
    else:
        assert 0.0 < kelvin < math.inf
        return
    assert refusal.allowed
    assert len(str(refusal)) < 400


@pytest.mark.parametrize(
    ("value", "digits", "text"),
    [
        (3.169929, 6, "3.16993"), (101325.0, 6, "101325"), (100.0, 6, "100.000"), (0.0, 6, "0"), (-0.0, 6, "0"),
        (1e-5, 6, "1.00000e-05"), (0.000123456789, 6, "0.000123457"), (123456789.0, 6, "1.23457e+08"),
        (999999.5, 6, "1.00000e+06"), (-2.5, 3, "-2.50"), (100.0, 3, "100"), (0.1 + 0.2, 17, "0.30000000000000004"),
    ],
)  # fmt: skip
def test_number_is_written_to_its_digits(value, digits, text):
    """Significant digits are kept, trailing zeros among them, with no bare point at the end."""
    assert format_number(value, digits) == text


@QUIET
@given(st.floats(min_value=1e-290, max_value=1e290), st.integers(min_value=1, max_value=17))
def test_written_number_is_within_half_a_digit(value, digits):
    """What is written lies within half a unit of its last digit."""
    assert math.isclose(float(format_number(value, digits)), value, rel_tol=0.5000001 * 10.0 ** (1 - digits))


def test_names_in_a_sentence():
    """Names are listed as a sentence does."""
    assert [join_names(list(names)) for names in ("a", "ab", "abc")] == ["a", "a or b", "a, b or c"]


@pytest.mark.parametrize("text", ["0kPa", "-1 bar", "\u22121 Pa"])
def test_an_absolute_pressure_is_above_zero(text):
    """A pressure of zero or below is no absolute pressure."""
    with pytest.raises(BadQuantity, match="greater than zero"):
        parse_pressure(text)
