"""The uncertainty budget of an answer against Monte Carlo (JCGM 101, propagation of distributions)."""

from __future__ import annotations

import dataclasses
import math

import numpy as np
import pytest
from inventane import COMPOUND, invent_correlation
from shelf import CORRELATIONS, MASSES

from registry.answering import answer_many, answer_one
from registry.conditions import Conditions
from registry.coverage import build_coverage
from registry.curve import Curve
from registry.dossier import Dossier
from registry.errors import Refused
from registry.forms.catalogue import FORMS
from registry.numerals import last_digit_unit, to_float
from registry.readings import Reading, parse_reading
from registry.rounding import Rounding
from registry.uncertainty import parse_uncertainty

DRAWS = 1_000_000
NOISE = 5.0 / math.sqrt(2.0 * DRAWS)
"""Five standard deviations of the relative error of a standard deviation from so many normal draws."""

AT = np.array


def look_up(uncertainty: str, reading: Reading, number: int = 0):
    """The answer of one invented correlation that states this uncertainty."""
    entry = invent_correlation(number, 280, 120, "measured", uncertainty, "seen", "accepted")
    coverage = build_coverage(Dossier(COMPOUND, (entry,)), "vapor-pressure")
    return answer_one(coverage, reading.kelvin, reading)


CASES = (
    ("0.5 %", Reading(300.0, 0.05)),
    ("0.5 % (k=1)", Reading(300.0, 0.05)),
    ("0.5 % (k=3)", Reading(300.0, 0.05, 1.0)),
    ("30 Pa (k=2) up to 310 K; 1 %", Reading(300.0, 0.02, 2.0)),
    ("0.01 %", Reading(350.0, 0.1)),
    ("2 %", Reading(350.0)),
)


@pytest.mark.parametrize("number", range(4))
@pytest.mark.parametrize(("uncertainty", "reading"), CASES, ids=[f"{u}, {r.uncertainty} K" for u, r in CASES])
def test_stated_and_temperature_add_up_as_drawn(uncertainty, reading, number):
    """A million draws of the temperature and of the stated error scatter as the budget says."""
    answer = look_up(uncertainty, reading, number)
    budget = answer.budget
    piece = parse_uncertainty(uncertainty, "pressure")[0]
    draw = np.random.default_rng(20260104 + number)
    kelvin = draw.normal(reading.kelvin, reading.uncertainty / (reading.factor or 2.0), DRAWS)
    relative = piece.percent_of(answer.value) / 100.0 / (piece.factor or 2.0)
    values = Curve.of(answer.correlation, 58.0).values(kelvin) * (1.0 + draw.normal(0.0, relative, DRAWS))
    drawn = 2.0 * 100.0 * float(np.std(values)) / answer.value
    assert budget.expanded_percent == pytest.approx(drawn, rel=NOISE)
    assert budget.stated_percent == piece.percent_of(answer.value)


@pytest.mark.parametrize("key", ["ethanol-antoine-low", "water-antoine-1-100", "acetone-antoine-appendix-e"])
def test_rounding_is_what_drawn_digits_give(key):
    """A million sets of Antoine constants, each within half a unit of its last digit, scatter as the budget says."""
    record = CORRELATIONS[key]
    kelvin = sum(record.window_kelvin()) / 2.0
    draw = np.random.default_rng(7)
    halves = {name: float(last_digit_unit(text)) / 2.0 for name, text in record.coefficients.items()}
    c = {
        name: to_float(text) + draw.uniform(-halves[name], halves[name], DRAWS)
        for name, text in record.coefficients.items()
    }
    celsius = kelvin - 273.15
    assert (record.form, record.temperature_unit) == ("antoine-log10", "degC")
    drawn = 10.0 ** (c["A"] - c["B"] / (celsius + c["C"]))
    printed = 10.0 ** (
        to_float(record.coefficients["A"])
        - to_float(record.coefficients["B"]) / (celsius + to_float(record.coefficients["C"]))
    )
    rounding = Rounding.of(record, MASSES[record.compound])
    standard, bound = float(rounding.standards(AT([kelvin]))[0]), float(rounding.bounds(AT([kelvin]))[0])
    assert 100.0 * float(np.std(drawn / printed)) == pytest.approx(standard, rel=NOISE)
    worst = 100.0 * float(np.max(np.abs(drawn / printed - 1.0)))
    # a million draws of three coefficients come within a few percent of the corner, and never past it
    assert 0.9 * bound < worst < bound * (1.0 + bound / 100.0)


@pytest.mark.parametrize("form", FORMS)
def test_every_form_says_what_is_chosen(form):
    """What a form calls chosen, it takes."""
    takes = FORMS[form].coefficients
    assert set(takes.chosen) <= {*takes.required, *takes.optional, *takes.series}


def test_no_reference_point_and_no_exponent_is_rounded():
    """Critical constants and exponents of a saturation ancillary are exact as printed, its coefficients are not."""
    record = CORRELATIONS["water-sr1-86"]
    assert all(name.startswith("n") for name in Rounding.of(record, 18.0).names)
    assert Rounding.of(CORRELATIONS["helium-4-its-90-2.1768-5.0"], 4.0).names == ()


def test_a_coefficient_printed_as_zero_is_no_term():
    """Hyland and Wexler print no T^4 term for the liquid: recorded as 0, it is not a rounded number."""
    record = CORRELATIONS["water-hyland-wexler-1983"]
    assert record.coefficients["c4"] == "0"
    assert Rounding.of(record, 18.0).names == ("cm1", "c0", "c1", "c2", "c3", "cl")


def test_half_a_unit_moves_the_value_as_the_curve_says():
    """The effect of one coefficient equals the change of the value by half a unit of its last digit."""
    record = CORRELATIONS["acetone-perry-8"]
    rounding = Rounding.of(record, MASSES["acetone"])
    kelvin = AT([329.22])
    place = rounding.names.index("C3")
    moved = {**record.coefficients, "C3": str(to_float(record.coefficients["C3"]) + 5e-5)}
    other = Curve.of(dataclasses.replace(record, coefficients=moved), 58.0).values(kelvin)
    change = 100.0 * abs(other / Curve.of(record, 58.0).values(kelvin) - 1.0)
    assert rounding.effects(kelvin)[place] == pytest.approx(change, rel=1e-3)


def test_a_coverage_factor_counts_in_the_ranking():
    """1 % at k = 1 ranks behind 1.5 % at k = 2; where none is stated it counts as 2."""
    entries = (
        invent_correlation(0, 280, 120, "measured", "1 % (k=1)", "seen", "accepted"),
        invent_correlation(1, 280, 120, "measured", "1.5 % (k=2)", "seen", "accepted"),
    )
    coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")
    assert coverage.stretch_at(300.0).candidate.key == "inventane-1"
    assert [c.ranked_uncertainty(300.0) for c in coverage.candidates] == [2.0, 1.5]


def test_percents_of_many_points_are_those_of_each(scenario):
    """The stated uncertainty over an array equals the one of each answer, brought to coverage factor 2."""
    coverage = scenario.coverage("tallowane")
    for candidate in coverage.accepted:
        bounds = [piece.upper for piece, _ in candidate.pieces[:-1]]
        kelvin = np.array([*np.linspace(*candidate.reach, 101), *bounds, *np.nextafter(bounds, np.inf)])
        values = candidate.curve.values(kelvin)
        many = candidate.expanded_percents(kelvin, values)
        for t, value, percent in zip(kelvin, values, many, strict=True):
            piece = candidate.piece_at(float(t))
            one = piece.percent_of(value) if piece else None
            assert math.isnan(percent) if one is None else percent == pytest.approx(one * piece.expansion, rel=1e-15)


def test_nothing_stated_gives_no_sum(published):
    """What the temperature adds is known; the sum is not, where the source states nothing."""
    budget = published.lookup("ethanol", Reading(300.0, 0.1)).budget
    # 5.71 % a kelvin: test_readme's tour shows the same slope
    assert budget.temperature_percent == pytest.approx(0.571, abs=5e-4)
    assert budget.stated_percent is budget.expanded_percent is None


def test_rounding_makes_no_more_than_it_can(published):
    """Twice the standard uncertainty of one evenly spread digit is 1.15 of the most it can be: told is the most."""
    for compound, prop, kelvin in (("water", "melting-pressure", 270.0), ("benzene", "vapor-pressure", 300.0)):
        budget = published.lookup(
            compound, kelvin, property=prop, phase="ice Ih" if compound == "water" else None
        ).budget
        assert 0.0 < budget.rounding_percent <= budget.rounding_bound_percent
    ice = next(
        c for c in published.coverage("water", property="melting-pressure").accepted if c.record.phase == "ice Ih"
    )
    # here one coefficient makes nearly all of it
    assert 2.0 * ice.rounding.standards(AT([270.0]))[0] > ice.rounding.bounds(AT([270.0]))[0]
    assert ice.rounding is ice.rounding


def test_a_wide_temperature_is_told_to_be_carried_coarsely(published):
    """5 K of water at 25 degC are 30 % by the slope, 34 % up by IAPWS tables (3.170 and 4.247 kPa); 0.1 K are fine."""
    wide = published.lookup("water", parse_reading("25+/-5C"))
    assert wide.temperature_percent == pytest.approx(29.8, abs=0.1)
    assert published.lookup("water", 303.15).value / wide.value == pytest.approx(4.247 / 3.170, abs=1e-3)
    assert any("makes 29.8 % by the slope alone" in caution for caution in wide.cautions)
    assert not any("slope alone" in c for c in published.lookup("water", parse_reading("25+/-0.1C")).cautions)
    # from 20 % on: 3.36 K at 5.96 % a kelvin
    for spread, coarse in (("3.3", False), ("3.4", True)):
        cautions = published.lookup("water", parse_reading(f"25+/-{spread}C")).cautions
        assert any("slope alone" in caution for caution in cautions) == coarse
    for asked in ({"beyond": 10.0}, {"estimate": "lee-kesler"}):
        found = published.lookup("ethanol", parse_reading("210+/-5K"), **asked)
        assert any("slope alone" in caution for caution in found.cautions)


def test_the_very_uncertainty_that_is_stated_is_within():
    """Scalar and array draw the line at the same bit, for an absolute uncertainty with a coverage factor."""
    entry = invent_correlation(0, 280, 120, "measured", "40 Pa (k=3)", "seen", "accepted")
    coverage = build_coverage(Dossier(COMPOUND, (entry,)), "vapor-pressure")
    for t in np.linspace(281.0, 399.0, 200).tolist():
        stated = answer_one(coverage, t).budget.expanded_percent
        assert answer_one(coverage, t, None, Conditions(stated)).value > 0.0
        assert not answer_many(coverage, AT([t]), Conditions(stated)).refused[0]
        assert answer_many(coverage, AT([t]), Conditions(np.nextafter(stated, 0.0))).refused[0]


def test_a_tolerance_looks_at_no_digits(scenario, monkeypatch):
    """What --within compares is the budget's sum, found without the curves of every digit, which cost a hundredfold."""
    answer = scenario.lookup("brindovane", parse_reading("300+/-0.1K (k=1)"))
    assert answer.expanded_percent == answer.budget.expanded_percent
    monkeypatch.setattr("registry.budget.make_budget", None)
    with pytest.raises(Refused):
        scenario.lookup("brindovane", parse_reading("301+/-0.1K (k=1)"), within=0.1)
    assert scenario.lookup("brindovane", 301.0, within=5.0).value > 0.0
