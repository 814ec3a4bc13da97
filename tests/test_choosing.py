"""What the published shelf answers: limits, marks, confirmation and ranking on real records."""

from __future__ import annotations

import math

import numpy as np
import pytest
from inventane import COMPOUND, invent_correlation

from registry.candidate import Candidate
from registry.confirmation import count_fixed_point
from registry.coverage import build_coverage
from registry.dossier import Dossier, Entry
from registry.errors import BadInput, Refused, UnknownKey
from registry.limits import best_fixed_point, find_limits
from registry.records import Correlation


def _candidate(library, compound: str, key: str, **request: object) -> Candidate:
    return next(c for c in library.coverage(compound, **request).candidates if c.key == key)


def test_water_at_the_ice_point_answers_and_says_so(published):
    """0 degC lies 0.01 K below the triple temperature (ITS-90): the liquid still answers, marked."""
    answer = published.lookup("water", 273.15)
    assert any("0.01 K below the triple temperature" in caution for caution in answer.cautions)
    # 611.213 Pa: the ITS-90 table after B. Hardy, Proc. 3rd Int. Symp. Humidity & Moisture, London (1998)
    assert answer.value == pytest.approx(611.213, abs=5e-4)


@pytest.mark.parametrize(("kelvin", "answers"), [(273.16, True), (273.1101, True), (273.1099, False), (263.15, False)])
def test_the_liquid_answers_no_further_than_its_margin(kelvin, answers, published):
    """Within 0.05 K below the triple temperature a liquid curve answers; further below it is refused."""
    if answers:
        assert published.lookup("water", kelvin).value > 0.0
        return
    with pytest.raises(Refused) as caught:
        published.lookup("water", kelvin)
    assert caught.value.refusal.reason == "below-triple"
    assert "--metastable" in caught.value.refusal.explanation
    assert "sublimation-pressure" in caught.value.refusal.explanation


def test_only_a_stated_metastable_range_answers_below(published):
    """With metastable=True the records that state a range answer, marked; the others still do not."""
    answer = published.lookup("water", 250.0, metastable=True)
    assert answer.correlation.metastable_below == "273.16 K"
    assert any("metastable" in caution for caution in answer.cautions)
    covering = {c.key for c in published.coverage("water", metastable=True).covering(250.0)}
    assert covering == {"water-hardy-1998", "water-magnus-wmo-2008", "water-murphy-koop-2005"}
    with pytest.raises(Refused):
        published.lookup("water", 120.0, metastable=True)


# ITS-90, Table 1 (H. Preston-Thomas, Metrologia 27, 3 (1990)): defining points rank before other values
DEFINING = {"water": 273.16, "argon": 83.8058, "oxygen": 54.3584, "mercury": 234.3156, "hydrogen-para": 13.8033}


@pytest.mark.parametrize("compound", DEFINING)
def test_a_defining_point_limits(compound, published):
    """Where ITS-90 defines a triple point, that value is the limit, whatever else is recorded."""
    limits = find_limits(published.dossier(compound), "vapor-pressure")
    assert limits.lower == DEFINING[compound]
    assert limits.lower_point.record.value_si() == DEFINING[compound]


def test_rounded_fixed_points_come_last(published):
    """No rounded value limits where another one is recorded; ammonia's critical temperature is 405.56 K, not 406 K."""
    for entry in published.compounds():
        dossier = published.dossier(entry.key)
        for quantity in ("critical-temperature", "triple-point-temperature"):
            best = best_fixed_point(dossier, quantity)
            if best is not None and best.record.qualifier == "rounded":
                others = {e.record.qualifier for e in dossier.accepted_points(quantity)}
                assert others == {"rounded"}
    assert find_limits(published.dossier("ammonia"), "vapor-pressure").upper == 405.56


@pytest.mark.parametrize(
    ("compound", "kelvin", "missing"),
    [
        ("helium-4", 4.0, ["triple point temperature"]),
        ("lithium", 900.0, ["triple point temperature", "critical temperature"]),
        ("beryllium", 1700.0, ["triple point temperature", "critical temperature"]),
    ],
)
def test_what_could_not_be_checked_is_said(compound, kelvin, missing, published):
    """Where no fixed point is recorded, the answer says that the phase could not be checked."""
    cautions = published.lookup(compound, kelvin).cautions
    for quantity in missing:
        assert any(f"No {quantity} is recorded" in caution for caution in cautions)


def test_independent_values_confirm_a_record_from_memory(published):
    """The IAPWS equation from memory counts as standard: 25 table values seen in a handbook agree with it."""
    counted = _candidate(published, "water", "water-sr1-86").counted
    assert (counted.evidence, counted.agreeing, counted.compared) == ("standard", 25, 25)


def test_without_independent_values_memory_counts_as_compiled(published):
    """Nothing on the shelf confirms the methane equation from memory: it counts as compiled, and says so."""
    candidate = _candidate(published, "methane", "methane-setzmann-wagner-1991")
    assert candidate.record.evidence == "evaluated"
    assert candidate.counted.evidence == "compiled"
    answer = published.lookup("methane", 120.0)
    assert any("count as compiled, not evaluated" in caution for caution in answer.cautions)


def test_what_was_seen_needs_no_confirmation(published):
    """A record seen in its source counts by its own evidence."""
    candidate = _candidate(published, "water", "water-murphy-koop-2005")
    assert candidate.counted.evidence == candidate.record.evidence == "evaluated"


def test_a_wrong_record_from_memory_is_not_confirmed(published):
    """A misremembered coefficient keeps the IAPWS equation at compiled: most of the same values now disagree."""
    dossier = published.dossier("water")
    entry = next(e for e in dossier.correlations if e.key == "water-sr1-86")
    wrong = Correlation(**{**entry.record.__dict__, "coefficients": {**entry.record.coefficients, "n1": "-7.95951783"}})
    others = tuple(e for e in dossier.correlations if e is not entry)
    changed = Dossier(
        dossier.compound, (*others, Entry(wrong, 1, 1, "accepted")), dossier.fixed_points, dossier.datasets,
        dossier.preferences, dossier.sources,
    )  # fmt: skip
    counted = next(c for c in build_coverage(changed, "vapor-pressure").candidates if c.key == wrong.key).counted
    assert counted.evidence == "compiled"
    assert counted.agreeing < 13


def test_a_fixed_point_from_memory_is_confirmed_within_a_tenth_of_a_percent(published):
    """Two pages give ammonia's triple temperature within 0.1 % of the one from memory."""
    ammonia = published.dossier("ammonia")
    best = best_fixed_point(ammonia, "triple-point-temperature")
    assert (best.record.value, best.record.obtained) == ("195.49", "memory")
    assert count_fixed_point(best, ammonia).evidence == "evaluated"


def test_a_scale_shifts_the_argument_and_not_the_window(published):
    """Wexler's equation stands on IPTS-68, where 99.974 degC (ITS-90) is 100 degC: 101.325 kPa.

    A. Wexler, J. Res. Natl. Bur. Stand. 80A, 775 (1976) gives 101.325 kPa at 100 degC (IPTS-68); 99.974 degC is the
    steam point on ITS-90 (IAPWS).
    """
    candidate = _candidate(published, "water", "water-wexler-1976")
    assert candidate.curve.value(373.1244) == pytest.approx(101325.0, rel=1e-5)
    assert candidate.curve.value(373.15) == pytest.approx(101325.0 * 1.00092, rel=3e-5)
    assert candidate.curve.window == (273.15, 373.15)
    assert candidate.covers(373.15)


def test_several_phases_must_be_named(published):
    """At 254 K ice Ih and ice III both melt; naming one answers (IAPWS R14-08: 268.685 MPa for ice III)."""
    with pytest.raises(Refused) as caught:
        published.lookup("water", 254.0, property="melting-pressure")
    assert caught.value.refusal.reason == "several-phases"
    assert "ice III or ice Ih" in caught.value.refusal.explanation
    answer = published.lookup("water", 254.0, property="melting-pressure", phase="ice III")
    assert answer.value == pytest.approx(268.685e6, abs=500.0)
    with pytest.raises(BadInput, match="it has ice III, ice Ih, ice V, ice VI and ice VII"):
        published.lookup("water", 254.0, property="melting-pressure", phase="ice IX")


def test_a_batch_is_an_array_with_its_choices(published):
    """values, chosen, correlations, refused and seams belong together, in any shape."""
    kelvin = np.array([[100.0, 280.0, 300.0], [500.0, 513.92, 600.0]])
    batch = published.lookup("ethanol", kelvin)
    assert batch.values.shape == batch.chosen.shape == batch.refused.shape == kelvin.shape
    assert batch.refused.tolist() == [[True, False, False], [False, False, True]]
    assert (batch.chosen == -1).tolist() == batch.refused.tolist()
    for t, value, index in zip(kelvin.flat, batch.values.flat, batch.chosen.flat, strict=True):
        if index >= 0:
            answer = published.lookup("ethanol", float(t))
            assert (answer.value, answer.correlation.key) == (value, batch.correlations[index].key)
    assert [seam.temperature for seam in batch.seams] == [293.0]
    assert batch.refusal((0, 0)).reason == "below-triple"
    assert batch.unit == "Pa"


def test_an_empty_batch_is_an_answer_too(published):
    """No temperature in, no value out."""
    batch = published.lookup("ethanol", [])
    assert batch.values.shape == (0,)
    assert batch.chosen.shape == (0,)


@pytest.mark.parametrize("kelvin", [math.nan, math.inf, -math.inf, 0.0, -1.0])
def test_what_is_no_temperature_is_bad_input(kelvin, published):
    """One temperature that is none is bad input; in an array it is refused with the rest answered."""
    with pytest.raises(BadInput, match="is no temperature"):
        published.lookup("water", kelvin)
    batch = published.lookup("water", [300.0, kelvin, 301.0])
    assert batch.refused.tolist() == [False, True, False]


def test_many_windows_answer_by_binary_search():
    """Forty adjoining windows, more than comparisons are added for: array equals scalar, in any order."""
    entries = tuple(invent_correlation(4 * i, 200 + 10 * i, 10, "compiled", "", "seen", "accepted") for i in range(40))
    coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")
    assert len(coverage.answering) == 40
    assert len(coverage.seams) == 39
    kelvin = np.random.default_rng(5).uniform(190.0, 610.0, 5000)
    values, places = coverage.evaluate(kelvin)
    for t, value, place in zip(kelvin.tolist(), values.tolist(), places.tolist(), strict=True):
        stretch = coverage.stretch_at(t)
        assert coverage.stretches[place] is stretch
        assert math.isnan(value) if stretch.candidate is None else value == stretch.candidate.curve.value(t)


def test_an_answer_converts_and_explains(published):
    """An answer gives its value in other units, where it comes from and what else was there."""
    answer = published.lookup("benzene", 298.15, property="enthalpy-of-vaporization")
    # 78.1118 g/mol is the molar mass recorded for benzene
    assert answer.to("J/g") == pytest.approx(answer.value / 78.1118, rel=1e-15)
    assert answer.to("kJ/mol") == pytest.approx(answer.value / 1000.0, rel=1e-15)
    assert "Majer" in answer.citation
    assert [v.verdict for v in answer.candidates] == ["chosen"]
    assert "benzene-enthalpy-majer-svoboda-1985" in repr(answer)
    with pytest.raises(BadInput, match="molar-energy"):
        answer.to("kPa")


def test_the_key_beats_a_name_and_case_aside(published):
    """'hydrogen' names two compounds, their CAS number too; a key in other case is found."""
    for text in ("hydrogen", "1333-74-0", "H2"):
        with pytest.raises(UnknownKey) as caught:
            published.find_compound(text)
        assert caught.value.several == ("hydrogen-normal", "hydrogen-para")
    assert published.find_compound("Hydrogen-Para") == "hydrogen-para"
    assert published.find_compound("C2H6O") == "ethanol"
    assert published.find_compound("  methyl   alcohol ") == "methanol"
