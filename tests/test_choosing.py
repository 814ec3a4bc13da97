"""What the published shelf answers: limits, marks, confirmation and ranking on real records."""

from __future__ import annotations

import dataclasses
import math

import numpy as np
import pytest
from inventane import COMPOUND, invent_correlation

from registry.candidate import Candidate
from registry.confirmation import Value, count_correlation, count_fixed_point
from registry.coverage import build_coverage
from registry.curve import Curve
from registry.dossier import Dossier, Entry
from registry.errors import BadInput, Refused, UnknownKey
from registry.limits import best_fixed_point, find_limits
from registry.records import Correlation, FixedPoint, Preference, Source
from registry.verdicts import explain_choice, judge_candidates, refuse


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


def test_the_end_of_the_margin_is_no_metastable_liquid(published):
    """Nitrogen at 63.151 K less 0.05 K, which as doubles lies beyond it: it still answers, and says how far below."""
    cautions = published.lookup("nitrogen", 63.101).cautions
    assert "It lies 0.05 K below the triple temperature, 63.151 K." in cautions
    assert not any("metastable" in caution for caution in cautions)


def test_a_density_below_the_triple_temperature_is_sent_nowhere(published):
    """Ice has a sublimation pressure, but that is no density: nothing is advised in its place."""
    with pytest.raises(Refused) as caught:
        published.lookup("water", 240.0, property="saturated-liquid-density")
    refusal = caught.value.refusal
    assert refusal.reason == "below-triple"
    assert "--property sublimation-pressure" not in refusal.explanation
    assert refusal.explanation.endswith("`rangebook coverage water --property saturated-liquid-density` shows the map.")


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


def _changed(entry, standing="accepted", **fields):
    return Entry(dataclasses.replace(entry.record, **fields), 1, 1, standing)


RANKED = [  # evidence, uncertainty, obtained, width, year of winner and loser; the key would decide the other way
    (("measured", "", "seen", 300, 1990), ("compiled", "", "seen", 300, 1990),
     "Measured evidence ranks before compiled."),
    (("measured", "", "seen", 300, 1990), ("standard", "", "memory", 300, 1990),
     "Measured evidence ranks before compiled (standard from memory, unconfirmed)."),
    (("compiled", "1 %", "seen", 300, 1990), ("compiled", "", "seen", 300, 1990),
     "Equal evidence; as uncertainty inventane-4 states 1 %, inventane-0 none."),
    (("compiled", "", "seen", 300, 1990), ("compiled", "", "seen", 200, 1990),
     "Equal evidence and uncertainty; inventane-4 answers over 300 K, inventane-0 over 200 K."),
    (("compiled", "", "seen", 300, 1990), ("compiled", "", "seen", 300, 1980),
     "Equal so far; the newer source counts, inventane-4 of 1990, inventane-0 of 1980."),
]  # fmt: skip


@pytest.mark.parametrize(("winner", "loser", "because"), RANKED)
def test_each_rule_ranks_and_is_told(winner, loser, because):
    """Evidence, uncertainty, reach and year decide in this order, before the key, and the sentence says which did."""
    entries, sources = [], {}
    for number, (evidence, percent, obtained, width, year) in ((4, winner), (0, loser)):
        entry = invent_correlation(number, 200, width, evidence, percent, obtained, "accepted")
        entries.append(_changed(entry, source=f"s{number}"))
        sources[f"s{number}"] = Source(key=f"s{number}", type="book", year=str(year), citation="invented")
    coverage = build_coverage(Dossier(COMPOUND, tuple(entries), sources=sources), "vapor-pressure")
    chosen, passed = judge_candidates(coverage, 300.0)
    assert (chosen.correlation, passed.correlation, passed.because) == ("inventane-4", "inventane-0", because)
    assert explain_choice(coverage, 300.0).endswith(f"next comes inventane-0: {because}")


def test_an_uncertainty_holds_up_to_its_bound_and_no_further():
    """'1 % up to 300 K; 3 %' ranks before 2 % at 300 K and after it just above."""
    rows = (("1 % up to 300 K; 3 %", 0), ("2 %", 4))
    entries = tuple(invent_correlation(n, 200, 300, "compiled", text, "seen", "accepted") for text, n in rows)
    coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")
    found = [coverage.stretch_at(t).candidate.key for t in (250.0, 300.0, math.nextafter(300.0, 400.0), 400.0)]
    assert found == ["inventane-0", "inventane-0", "inventane-4", "inventane-4"]


def test_an_absolute_uncertainty_ranks_by_its_worst_percent():
    """50 Pa is most percent where the pressure is least: at the lower end of its own piece."""
    entry = invent_correlation(0, 200, 300, "compiled", "1 % up to 300 K; 50 Pa", "seen", "accepted")
    (candidate,) = build_coverage(Dossier(COMPOUND, (entry,)), "vapor-pressure").candidates
    assert candidate.ranked_uncertainty(300.0) == 1.0
    assert candidate.ranked_uncertainty(450.0) == pytest.approx(5000.0 / candidate.curve.value(300.0), rel=1e-12)
    value = candidate.curve.value(450.0)
    assert candidate.piece_at(450.0).percent_of(value) == pytest.approx(5000.0 / value, rel=1e-12)


RECORD = invent_correlation(0, 250, 150, "standard", "", "memory", "accepted").record
CURVE = Curve.of(RECORD, 58.12)


def _value(percent, kelvin=300.0, source="other", phase="", half_kelvin=0.0, half_value=0.0):
    value = CURVE.value(kelvin)
    return Value(source, phase, kelvin, value * (1.0 + percent / 100.0), half_kelvin, half_value * value)


CONFIRMING = {
    "two agree": ([_value(0.9), _value(-0.9)], "standard", 2, 2),
    "one is not enough": ([_value(0.0)], "compiled", 1, 1),
    "as many disagree": ([_value(0.0), _value(0.0), _value(2.0), _value(2.0)], "standard", 2, 4),
    "more disagree": ([_value(0.0), _value(0.0), _value(2.0), _value(2.0), _value(2.0)], "compiled", 2, 5),
    "its own source": ([_value(0.0, source="invented")] * 2, "compiled", 0, 0),
    "another phase": ([_value(0.0, phase="ice Ih")] * 2, "compiled", 0, 0),
    "its own phase": ([_value(0.0, phase="liquid")] * 2, "standard", 2, 2),
    "outside the window": ([_value(0.0, 249.9), _value(0.0, 400.1)], "compiled", 0, 0),
    "at the bounds": ([_value(0.0, 250.0), _value(0.0, 400.0)], "standard", 2, 2),
    "coarse digits of the value": ([_value(1.9, half_value=0.01)] * 2, "standard", 2, 2),
    "coarse digits of the temperature": ([_value(1.9, half_kelvin=0.5)] * 2, "standard", 2, 2),
}


@pytest.mark.parametrize("case", CONFIRMING)
def test_what_confirms_a_record_from_memory(case):
    """Two independent values inside the window within 1 % and the printed digits, and no more that disagree."""
    values, evidence, agreeing, compared = CONFIRMING[case]
    counted = count_correlation(RECORD, CURVE, values)
    assert (counted.evidence, counted.agreeing, counted.compared) == (evidence, agreeing, compared)


def test_a_sublimation_point_confirms_a_sublimation_curve(published):
    """Values at one atmosphere and at the triple point are gathered for the curve they belong to."""
    from registry.confirmation import gather_values

    dossier = published.dossier("carbon-dioxide")
    point = next(e for e in dossier.fixed_points if e.record.quantity == "normal-sublimation-temperature")
    seen = Entry(dataclasses.replace(point.record, obtained="seen"), 1, 1, "accepted")
    alone = Dossier(dossier.compound, fixed_points=(seen,))
    assert [v.value for v in gather_values(alone, "sublimation-pressure", None)] == [101325.0]
    assert gather_values(alone, "vapor-pressure", None) == ()
    draft = Dossier(dossier.compound, fixed_points=(Entry(seen.record, 1, 1, "draft"),))
    assert gather_values(draft, "sublimation-pressure", None) == ()


def _triple(key, value, evidence, obtained, qualifier="", source="a"):
    record = FixedPoint(
        key=key, compound="inventane", quantity="triple-point-temperature", value=value, unit="K", evidence=evidence,
        qualifier=qualifier, source=source, locator="invented", obtained=obtained,
    )  # fmt: skip
    return Entry(record, 1, 1, "accepted")


def test_fixed_points_rank_by_the_evidence_they_count_as():
    """An unconfirmed standard value from memory ranks after an evaluated one; a newer source and the key come last."""
    memory, evaluated = _triple("a", "250", "standard", "memory"), _triple("b", "255", "evaluated", "seen", source="b")
    dossier = Dossier(COMPOUND, fixed_points=(memory, evaluated))
    assert count_fixed_point(memory, dossier).evidence == "compiled"
    assert best_fixed_point(dossier, "triple-point-temperature") is evaluated
    for other, counts in (
        (_triple("c", "250.1", "compiled", "seen", source="c"), "standard"),
        (_triple("c", "250.1", "compiled", "seen", source="a"), "compiled"),
        (_triple("c", "250.1", "compiled", "memory", source="c"), "compiled"),
        (_triple("c", "250.1", "compiled", "seen", "rounded", source="c"), "compiled"),
        (_triple("c", "250.3", "compiled", "seen", source="c"), "compiled"),
    ):
        assert count_fixed_point(memory, Dossier(COMPOUND, fixed_points=(memory, other))).evidence == counts
    years = {k: Source(key=k, type="book", year=y, citation="invented") for k, y in (("a", "1980"), ("b", "1990"))}
    old, new = _triple("a", "250", "compiled", "seen"), _triple("b", "255", "compiled", "seen", source="b")
    assert best_fixed_point(Dossier(COMPOUND, fixed_points=(old, new), sources=years), old.record.quantity) is new


def _with_a(number, a, low=200, width=300):
    entry = invent_correlation(number, low, width, "compiled", "", "seen", "accepted")
    return _changed(entry, coefficients={**entry.record.coefficients, "A": a})


@pytest.mark.parametrize("a", ["1600", "-1600"])
def test_a_curve_without_a_usable_value_does_not_answer(a):
    """Infinity and zero are no pressures: refused alone, NaN in sorted and mixed arrays, alone or among others."""
    good = invent_correlation(4, 501, 99, "compiled", "", "seen", "accepted")
    for entries in ((_with_a(0, a),), (_with_a(0, a), good)):
        coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")
        value, candidate = coverage.value_at(400.0)
        assert math.isnan(value)
        assert candidate is None
        assert refuse(coverage, 400.0).reason == "no-value"
        for order in ([300.0, 400.0, 550.0], [550.0, 300.0, 400.0]):
            values, _ = coverage.evaluate(np.array(order))
            for t, found in zip(order, values.tolist(), strict=True):
                assert math.isnan(found) if t < 500.0 or len(entries) == 1 else found == coverage.value_at(t)[0]


@pytest.mark.parametrize("windows", [3, 40, 130])
def test_edges_and_order_do_not_matter(windows):
    """At every edge, and in an array that is unsorted only behind its first hundred points, array equals scalar."""
    entries = tuple(
        invent_correlation(4 * i, 200 + 3 * i, 3, "compiled", "", "seen", "accepted") for i in range(windows)
    )
    coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")
    edges = [s.low for s in coverage.stretches[1:]]
    around = sorted(t for e in edges for t in (math.nextafter(e, 0.0), e, math.nextafter(e, math.inf)))
    for order in (around, around[::-1], [*[150.0] * 100, *around[::-1]], [*edges[::-1], *around]):
        values, places = coverage.evaluate(np.array(order))
        for t, value, place in zip(order, values.tolist(), places.tolist(), strict=True):
            assert coverage.stretches[place] is coverage.stretch_at(t)
            best = coverage.stretch_at(t).candidate
            assert math.isnan(value) if best is None else value == best.curve.value(t)


def test_threads_do_not_share_working_arrays():
    """Four threads that evaluate at once get what one gets."""
    from concurrent.futures import ThreadPoolExecutor

    entries = tuple(invent_correlation(i, 200 + 40 * i, 60, "compiled", "", "seen", "accepted") for i in range(5))
    coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")
    arrays = [np.random.default_rng(seed).uniform(200.0, 420.0, 200_000) for seed in range(8)]
    alone = [coverage.evaluate(array)[0] for array in arrays]
    with ThreadPoolExecutor(4) as pool:
        together = list(pool.map(lambda array: coverage.evaluate(array)[0], arrays))
    for one, other in zip(alone, together, strict=True):
        assert np.array_equal(one, other, equal_nan=True)


def test_the_nearest_windows_stand_nearest_first():
    """One window on either side, of those that can answer; the distance is to the reach."""
    rows = ((0, 200, 50, "accepted"), (4, 400, 50, "accepted"), (8, 260, 20, "draft"), (12, 150, 50, "accepted"))
    entries = tuple(invent_correlation(n, low, width, "compiled", "", "seen", s) for n, low, width, s in rows)
    coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")
    for kelvin, order in ((300.0, ("inventane-0", "inventane-4")), (350.0, ("inventane-4", "inventane-0"))):
        refusal = refuse(coverage, kelvin)
        assert tuple(n.correlation for n in refusal.nearest) == order
        assert [n.distance for n in refusal.nearest] == [50.0, 100.0]
        assert refusal.reason == "gap"


def test_a_temperature_without_dimension_is_one_temperature(published):
    """An integer, a NumPy number and an array without dimension get an answer, not a batch."""
    for kelvin in (300, np.float32(300.0), np.int64(300), np.array(300.0)):
        assert published.lookup("water", kelvin).value == published.lookup("water", 300.0).value


def test_a_preference_is_told_with_its_reason():
    """What a steward's preference sets aside says so with the reason, though it ranks first by itself."""
    entries = tuple(
        invent_correlation(n, 200, 300, e, "", "seen", "accepted") for n, e in ((0, "standard"), (4, "measured"))
    )
    preference = Preference(key="p", correlation="inventane-4", over="inventane-0", reason="Fits better.")
    for standing, chosen in (("accepted", "inventane-4"), ("draft", "inventane-0"), ("withdrawn", "inventane-0")):
        dossier = Dossier(COMPOUND, entries, preferences=(Entry(preference, 1, 1, standing),))
        first, second = judge_candidates(build_coverage(dossier, "vapor-pressure"), 300.0)
        assert first.correlation == chosen
    dossier = Dossier(COMPOUND, entries, preferences=(Entry(preference, 1, 1, "accepted"),))
    first, second = judge_candidates(build_coverage(dossier, "vapor-pressure"), 300.0)
    assert second.because == "A steward prefers inventane-4 over it: Fits better."
    assert "sets inventane-0 aside" in first.because


def test_what_ends_an_accepted_revision():
    """A withdrawal ends what was accepted; a newer draft and a declined revision leave it in force."""
    from registry.entries import enter_in_force
    from registry.store.reading import Decision, State
    from registry.store.rows import Row

    content = invent_correlation(0, 200, 300, "compiled", "", "seen", "accepted").record.content()
    one, two = (Row("correlation", "inventane-0", revision, revision, content) for revision in (1, 2))
    said = Row("review", "invented", 1, 3, {"note": "invented"})
    accepted, again = (Decision(revision, "accepted", 3, said) for revision in (1, 2))
    withdrawn, declined = Decision(1, "withdrawn", 3, said), Decision(2, "declined", 3, said)
    for state, expected in (
        (State(two, one, accepted, accepted), (1, "accepted", 2)),
        (State(two, one, accepted, declined), (1, "accepted", 0)),
        (State(two, two, again, again), (2, "accepted", 0)),
        (State(one, one, withdrawn, withdrawn), (1, "withdrawn", 0)),
        (State(two, one, withdrawn, withdrawn), (1, "withdrawn", 2)),
        (State(one, None, None, None), (1, "draft", 0)),
        (State(two, None, None, declined), (2, "declined", 0)),
    ):
        entry = enter_in_force(state)
        assert (entry.revision, entry.standing, entry.waiting) == expected


def test_only_accepted_datasets_confirm(published):
    """The points of a draft confirm nothing."""
    from registry.confirmation import gather_values

    water = published.dossier("water")
    drafts = tuple(dataclasses.replace(e, standing="draft") for e in water.datasets)
    assert gather_values(dataclasses.replace(water, fixed_points=()), "vapor-pressure", None)
    assert gather_values(dataclasses.replace(water, fixed_points=(), datasets=drafts), "vapor-pressure", None) == ()
