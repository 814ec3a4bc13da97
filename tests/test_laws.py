"""Laws that hold for every library: what Hypothesis draws, the program must keep."""

from __future__ import annotations

import math

import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from inventane import COMPOUND, invent_correlation

from registry import rules
from registry.coverage import build_coverage
from registry.dossier import Dossier, Entry
from registry.properties import PROPERTIES
from registry.records import FixedPoint, Preference
from registry.verdicts import judge_candidates, refuse

SHELF = ("published", "scenario")


def _fixed_point(quantity: str, value: str):
    record = FixedPoint(
        key=f"inventane-{quantity}", compound="inventane", quantity=quantity, value=value, unit="K",
        evidence="compiled", source="invented", locator="invented", obtained="seen",
    )  # fmt: skip
    return Entry(record, 1, 1, "accepted")


UNCERTAINTIES = ("", "0.1 %", "2 %", "0.5 % up to 300 K; 1 %", "50 Pa", "not stated up to 320 K; 1 kPa")

correlations = st.lists(
    st.tuples(
        st.integers(200, 500), st.integers(5, 300), st.sampled_from(("standard", "evaluated", "measured", "compiled")),
        st.sampled_from(UNCERTAINTIES), st.sampled_from(("seen", "memory")),
        st.sampled_from(("accepted", "accepted", "accepted", "draft", "withdrawn")),
    ),
    min_size=1, max_size=8,
).map(lambda rows: tuple(invent_correlation(i, *row) for i, row in enumerate(rows)))  # fmt: skip

limits = st.sampled_from(((), ("triple-point-temperature",), ("triple-point-temperature", "critical-temperature")))
LIMIT_VALUES = {"triple-point-temperature": "250", "critical-temperature": "620"}


@st.composite
def dossiers(draw) -> Dossier:
    entries = draw(correlations)
    points = tuple(_fixed_point(quantity, LIMIT_VALUES[quantity]) for quantity in draw(limits))
    # preferring an earlier number over a later one cannot make a circle
    pairs = draw(st.sets(st.tuples(st.integers(0, 7), st.integers(0, 7)), max_size=4))
    preferences = tuple(
        Entry(
            Preference(
                key=f"p-{a}-{b}", correlation=f"inventane-{a}", over=f"inventane-{b}", reason="invented",
            ), 1, 1, "accepted",
        )
        for a, b in pairs if a < b < len(entries)
    )  # fmt: skip
    return Dossier(COMPOUND, entries, points, (), preferences)


temperatures = st.floats(150.0, 900.0)


def _rank(candidate, kelvin):
    """The published order, written again: evidence, uncertainty, reach, year, key."""
    order = ("standard", "evaluated", "measured", "compiled", "estimated")
    stated = math.inf
    for piece, percent in candidate.pieces:
        if kelvin <= piece.upper:
            stated = percent
            break
    low, high = candidate.reach
    return order.index(candidate.counted.evidence), stated, -(high - low), -candidate.year, candidate.key


def _may_answer(candidate, dossier, kelvin, metastable):
    """Whether a candidate may answer, from the record alone."""
    record = candidate.record
    low, high = float(record.window_min), float(record.window_max)
    points = {e.record.quantity: e.record.value_si() for e in dossier.fixed_points}
    triple = points.get("triple-point-temperature")
    if triple and not (metastable and record.metastable_below):
        low = max(low, triple - 0.05)
    high = min(high, points.get("critical-temperature", math.inf))
    if record.form == "wagner-2.5-5":
        high = min(high, 620.0)
    if record.form == "antoine-ln":
        low = max(low, math.nextafter(40.0, math.inf))
    return candidate.entry.standing == "accepted" and low - 1e-9 <= kelvin <= high + 1e-9 and low <= high


@settings(max_examples=150)
@given(dossiers(), temperatures, st.booleans())
def test_chosen_covers_and_none_outranks_it(dossier, kelvin, metastable):
    """The chosen correlation covers the temperature, and no covering accepted one ranks before it."""
    coverage = build_coverage(dossier, "vapor-pressure", metastable=metastable)
    best = coverage.stretch_at(kelvin).candidate
    allowed = [c for c in coverage.candidates if _may_answer(c, dossier, kelvin, metastable)]
    if best is None:
        assert not allowed
        return
    assert best in allowed
    keys = {c.key for c in allowed}
    dropped = {over for key, over in dossier.preferred() if key in keys}
    assert best.key not in dropped
    left = [c for c in allowed if c.key not in dropped]
    assert best is min(left, key=lambda c: _rank(c, kelvin))


@settings(max_examples=100)
@given(dossiers(), st.booleans())
def test_stretches_tile_the_axis(dossier, metastable):
    """Stretches begin at 0 K, end at infinity, meet without overlap, and differ from their neighbours."""
    stretches = build_coverage(dossier, "vapor-pressure", metastable=metastable).stretches
    assert stretches[0].low == 0.0
    assert stretches[-1].high == math.inf
    for left, right in zip(stretches, stretches[1:], strict=False):
        assert left.low < left.high == right.low
        assert left.candidate is not right.candidate or left.phases != right.phases


@settings(max_examples=60)
@given(dossiers(), st.lists(temperatures, min_size=1, max_size=200), st.randoms(use_true_random=False))
def test_array_and_scalar_agree_bit_for_bit(dossier, kelvin, random):
    """An array, in any order, gives what each of its elements gives alone."""
    coverage = build_coverage(dossier, "vapor-pressure")
    edges = [edge for s in coverage.stretches for edge in (s.low, s.high) if 0.0 < edge < math.inf]
    points = [*kelvin, *edges]
    for order in (sorted(points), random.sample(points, len(points))):
        values, places = coverage.evaluate(np.array(order))
        for t, value, place in zip(order, values.tolist(), places.tolist(), strict=True):
            stretch = coverage.stretch_at(t)
            assert coverage.stretches[place] is stretch
            alone = stretch.candidate.curve.value(t) if stretch.candidate else math.nan
            assert value == alone or (math.isnan(value) and not math.isfinite(alone))


@settings(max_examples=60)
@given(dossiers())
def test_bounds_within_phase_limits_answer(dossier):
    """At both ends of its reach, and a rounding beyond, an accepted correlation covers."""
    coverage = build_coverage(dossier, "vapor-pressure")
    for candidate in coverage.accepted:
        if candidate.reach[0] <= candidate.reach[1]:
            for bound in candidate.reach:
                for t in (bound, math.nextafter(bound, 0.0), math.nextafter(bound, math.inf)):
                    assert candidate in coverage.covering(t)
                    assert coverage.stretch_at(t).candidate is not None


@settings(max_examples=80)
@given(dossiers(), temperatures)
def test_verdicts_and_refusals_fit_the_answer(dossier, kelvin):
    """One verdict a candidate, one chosen if there is an answer; a refusal has a known reason and real windows."""
    coverage = build_coverage(dossier, "vapor-pressure")
    verdicts = judge_candidates(coverage, kelvin)
    assert sorted(v.correlation for v in verdicts) == sorted(c.key for c in coverage.candidates)
    chosen = [v for v in verdicts if v.verdict == "chosen"]
    assert all(v.because.endswith(".") for v in verdicts if v.verdict != "not-accepted")
    if coverage.stretch_at(kelvin).candidate is not None:
        assert [v.correlation for v in chosen] == [coverage.stretch_at(kelvin).candidate.key]
        return
    assert not chosen
    refusal = refuse(coverage, kelvin)
    assert refusal.reason in {
        "outside-windows", "gap", "above-critical", "below-triple", "not-accepted", "no-correlation",
    }  # fmt: skip
    for near in refusal.nearest:
        low, high = near.window
        assert near.distance == max(low - kelvin, kelvin - high) > 0.0


@pytest.mark.parametrize("shelf", SHELF)
def test_laws_hold_on_the_shelves(shelf, request):
    """Over both shelves, every property: array equals scalar, and every accepted reach answers at its ends."""
    library = request.getfixturevalue(shelf)
    rng = np.random.default_rng(7)
    for entry in library.compounds():
        for prop in PROPERTIES:
            coverage = library.coverage(entry.key, property=prop)
            accepted = [c for c in coverage.accepted if c.reach[0] <= c.reach[1]]
            if not accepted:
                continue
            low = min(c.reach[0] for c in accepted)
            high = max(c.reach[1] for c in accepted)
            bounds = [t for c in accepted for t in c.reach]
            kelvin = np.concatenate([rng.uniform(0.9 * low, 1.05 * high, 300), bounds])
            values, places = coverage.evaluate(kelvin)
            for t, value, place in zip(kelvin.tolist(), values.tolist(), places.tolist(), strict=True):
                best = coverage.stretches[place].candidate
                assert best is coverage.stretch_at(t).candidate
                assert (best is None) == math.isnan(value)
                assert best is None or value == best.curve.value(t)
            for t in bounds:
                stretch = coverage.stretch_at(t)
                assert stretch.candidate is not None or stretch.phases


def test_a_printed_bound_in_celsius_includes_its_kelvin(published):
    """A bound printed as 100 degC includes 373.15 K however a program rounded it; the tolerance is 1e-9 K."""
    coverage = published.coverage("water")
    candidate = next(c for c in coverage.candidates if c.key == "water-antoine-1-100")
    rounded = (373.15, 100 + 273.15, (212.0 + 459.67) / 1.8, (212.0 - 32.0) * 5.0 / 9.0 + 273.15)
    for kelvin in rounded:
        assert candidate.covers(kelvin)
    assert candidate.covers(373.15 + 0.99 * rules.BOUND_TOLERANCE)
    assert not candidate.covers(373.15 + 1.01e-9 + 1e-12)
    assert rules.BOUND_TOLERANCE == 1e-9
