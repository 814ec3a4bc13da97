"""What a difference between two positions means in numbers: every range, its largest and its mean change."""

from __future__ import annotations

import math
from dataclasses import replace

import mpmath
import numpy as np
import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from inventane import COMPOUND
from test_laws import UNCERTAINTIES, dossiers

from registry.comparison import compare_coverages, compare_curves, compare_dossiers
from registry.coverage import build_coverage
from registry.curve import Curve
from registry.dossier import Dossier, Entry
from registry.errors import BadInput
from registry.properties import PROPERTIES
from registry.records import Correlation, FixedPoint
from registry.sampling import find_steps

POINTS = 200_001


def _invent(key="a", *, revision=1, form="antoine-log10", window=("300", "400"), **fields):
    """An invented, accepted correlation: Antoine, base 10, unless told otherwise."""
    given = {
        "coefficients": {"A": "6.9", "B": "1200", "C": "-50"}, "property": "vapor-pressure", "phase": "liquid",
        "value_unit": "kPa", "evidence": "measured", "uncertainty": "",
    } | fields  # fmt: skip
    record = Correlation(
        key=key, compound="inventane", form=form, temperature_unit="K", window_min=window[0], window_max=window[1],
        window_unit="K", window_basis="printed", temperature_scale="not-stated", source="invented",
        locator="invented", obtained="seen", **given,
    )  # fmt: skip
    return Entry(record, revision, 1, "accepted")


def _point(quantity, value):
    record = FixedPoint(
        key=f"p-{quantity}", compound="inventane", quantity=quantity, value=value, unit="K", evidence="compiled",
        source="invented", locator="invented", obtained="seen",
    )  # fmt: skip
    return Entry(record, 1, 1, "accepted")


def _cover(*entries, points=(), prop="vapor-pressure", phase="", compound=COMPOUND):
    return build_coverage(Dossier(compound, entries, points), prop, phase)


def _summary(changes):
    return [(c.kind, c.low, c.high, c.before, c.after) for c in changes]


def _side(coverage, kelvin):
    """Value, and index of the answering candidate, at each temperature; NaN and -1 where nothing answers."""
    if coverage is None:
        return np.full(kelvin.shape, np.nan), np.full(kelvin.shape, -1)
    values, places = coverage.evaluate(kelvin)
    return values, np.where(np.isnan(values), -1, coverage.owners[places])


def _names(coverage, owners):
    found = [coverage.answering[i] for i in np.unique(owners[owners >= 0])] if coverage else []
    return {(candidate.key, candidate.entry.revision) for candidate in found}


def _percent(old, new):
    """In the longer arithmetic where the machine has one."""
    return (100.0 * (new.astype(np.longdouble) / old.astype(np.longdouble) - 1.0)).astype(float)


def _check_by_brute_force(before, after, low, high):
    """Compare with every one of many temperatures; gives the changes and how many points differ."""
    changes = compare_coverages(before, after)
    kelvin = np.linspace(low, high, POINTS)
    (old, old_owner), (new, new_owner) = _side(before, kelvin), _side(after, kelvin)
    differs = ~((old == new) | (np.isnan(old) & np.isnan(new)))
    # at an edge itself a range below 1e-6 K may differ, and is left out
    edges = np.array([s.low for c in (before, after) if c is not None for s in c.stretches])
    near = np.abs(kelvin[:, None] - edges).min(axis=1) < 1e-6 if edges.size else np.zeros(POINTS, bool)
    told = np.zeros(POINTS, bool)
    for change in changes:
        within = (kelvin > change.low) & (kelvin < change.high) & ~near
        told |= (kelvin >= change.low) & (kelvin <= change.high)
        assert (np.isfinite(old[within]) == (change.kind != "appears")).all()
        assert (np.isfinite(new[within]) == (change.kind != "disappears")).all()
        assert _names(before, old_owner[within]) <= set(change.before)
        assert _names(after, new_owner[within]) <= set(change.after)
        if change.kind == "changes":
            assert len(change.before) == len(change.after) == 1
            _check_numbers(change, before, after, _percent(old[within], new[within]))
        else:
            assert (change.largest_percent, change.at, change.mean_percent) == (None, None, None)
    assert not (differs & ~told & ~near).any()
    assert [c.low for c in changes] == sorted(c.low for c in changes)
    assert all(first.high <= second.low for first, second in zip(changes, changes[1:], strict=False))
    return changes, np.count_nonzero(differs)


def _check_numbers(change, before, after, sampled):
    # attained where it says, and nowhere passed
    there = [np.array([coverage.value_at(change.at)[0]]) for coverage in (before, after)]
    assert _percent(*there)[0] == pytest.approx(change.largest_percent, rel=1e-12, abs=1e-12)
    assert change.low - 2e-9 <= change.at <= change.high + 2e-9
    assert np.abs(sampled).max(initial=0.0) <= abs(change.largest_percent) * (1.0 + 1e-9) + 2e-11
    # the mean, by the middle of many equal parts of the range
    parts = np.linspace(change.low, change.high, POINTS)
    middle = (parts[1:] + parts[:-1]) / 2.0
    (old, _), (new, _) = _side(before, middle), _side(after, middle)
    assert change.mean_percent == pytest.approx(np.abs(_percent(old, new)).mean(), rel=1e-4, abs=1e-11)


@st.composite
def successors(draw, dossier: Dossier) -> Dossier:
    """The same library later: records revised, dropped, ranked anew; fixed points moved."""
    later = []
    for entry in dossier.correlations:
        record, what = entry.record, draw(st.sampled_from(("keep", "keep", "drop", "coefficient", "window", "rank")))
        if what == "coefficient":
            name = draw(st.sampled_from([n for n in record.coefficients if n not in ("C5", "T0", "Tc")]))
            factor = draw(st.sampled_from((0.9, 0.999, 0.9999999, 1.000001, 1.01)))
            record = replace(
                record, coefficients={**record.coefficients, name: repr(float(record.coefficients[name]) * factor)}
            )
        elif what == "window":
            low = draw(st.integers(200, 500))
            record = replace(record, window_min=str(low), window_max=str(low + draw(st.integers(5, 300))))
        elif what == "rank":
            evidence = draw(st.sampled_from(("standard", "measured", "compiled")))
            record = replace(record, evidence=evidence, uncertainty=draw(st.sampled_from(UNCERTAINTIES)))
        if what != "drop":
            later.append(replace(entry, record=record, revision=entry.revision + (what != "keep")))
    points = tuple(
        replace(e, record=replace(e.record, value=draw(st.sampled_from((e.record.value, "271.3", "598.7")))))
        for e in dossier.fixed_points
    )
    return replace(dossier, correlations=tuple(later), fixed_points=points)


@given(st.data())
@settings(max_examples=60)
def test_every_temperature_lies_in_the_right_range(data):
    """Against 200,001 temperatures: the right kind, the right records, nothing larger, the same mean."""
    before = data.draw(dossiers())
    after = data.draw(successors(before))
    sides = [build_coverage(dossier, "vapor-pressure") for dossier in (before, after)]
    _check_by_brute_force(*sides, 150.0, 850.0)
    _check_by_brute_force(*reversed(sides), 150.0, 850.0)


@given(dossiers())
@settings(max_examples=40)
def test_nothing_differs_from_itself(dossier):
    """Equal coverages have no change; against nothing, every answer appears or disappears."""
    coverage = build_coverage(dossier, "vapor-pressure")
    again = build_coverage(replace(dossier, position=7), "vapor-pressure")
    assert compare_coverages(coverage, again) == ()
    appears, _ = _check_by_brute_force(None, coverage, 150.0, 850.0)
    disappears, _ = _check_by_brute_force(coverage, None, 150.0, 850.0)
    assert {change.kind for change in appears} <= {"appears"}
    mirrored = [replace(c, kind="appears", before=(), after=c.before) for c in disappears]
    assert mirrored == list(appears)


def test_nothing_against_nothing():
    """Two positions that both lack the compound have no change."""
    assert compare_coverages(None, None) == ()
    assert compare_dossiers(None, None) == ()


@pytest.mark.parametrize("step", ["0.01", "-0.000001", "0.3010299957"])
def test_a_changed_antoine_a_changes_all_by_one_factor(step):
    """With A + d instead of A, base 10, the value changes by 100 (10^d - 1) percent everywhere."""
    revised = {"A": str(mpmath.mpf("6.9") + mpmath.mpf(step))[:20], "B": "1200", "C": "-50"}
    (change,) = compare_coverages(_cover(_invent()), _cover(_invent(revision=2, coefficients=revised)))
    expected = 100.0 * float(mpmath.expm1(mpmath.log(10) * mpmath.mpf(step)))
    # the value itself carries some 1e-15 of rounding: 1e-13 percent
    assert change.largest_percent == pytest.approx(expected, rel=1e-9, abs=1e-12)
    assert change.mean_percent == pytest.approx(abs(expected), rel=1e-9, abs=1e-12)
    assert (change.compound, change.property, change.phase) == ("inventane", "vapor-pressure", "")
    assert _summary([change]) == [("changes", 300.0, 400.0, (("a", 1),), (("a", 2),))]
    if step == "0.01":  # everywhere the same but for rounding: the lowest temperature stands for all
        assert change.at == 300.0


def test_a_change_through_zero():
    """ln p changed by 0.02 - 7/(T - 50) crosses zero at 400 K: the mean is of sizes, the largest keeps its sign."""
    first = {"A": "14", "B": "2800", "C": "-50"}
    second = {"A": "14.02", "B": "2807", "C": "-50"}
    before = _cover(_invent(form="antoine-ln", coefficients=first, window=("300", "450")))
    after = _cover(_invent(form="antoine-ln", coefficients=second, window=("300", "450"), revision=2))
    (change,) = compare_coverages(before, after)

    def size(t):
        return abs(100 * mpmath.expm1(mpmath.mpf("0.02") - 7 / (t - 50)))

    assert (change.at, change.largest_percent) == (300.0, pytest.approx(-float(size(300)), rel=1e-11))
    assert change.mean_percent == pytest.approx(float(mpmath.quad(size, [300, 400, 450]) / 150), rel=1e-8)


@pytest.mark.parametrize("center", [307.3, 350.0, 399.99])
def test_a_peak_between_the_points_of_the_grid(center):
    """ln p changed by 0.01 - 0.0003 (T - center)^2 has its upper peak at the center: 100 (e^0.01 - 1) percent."""
    curvature, top = mpmath.mpf("0.000001"), mpmath.mpf("0.01")
    middle = mpmath.mpf(center)
    base = ("10", "0.01", "0")
    change = (top - curvature * middle**2, 2 * curvature * middle, -curvature)
    records = [
        _invent(
            form="polynomial-ln", value_unit="Pa", revision=revision,
            coefficients={f"a{i}": mpmath.nstr(mpmath.mpf(b) + revision * c - c, 25) for i, (b, c) in
                          enumerate(zip(base, change, strict=True))},
        ) for revision in (1, 2)
    ]  # fmt: skip
    (found,) = compare_coverages(*map(_cover, records))
    assert found.at == pytest.approx(center, abs=1e-3)
    assert found.largest_percent == pytest.approx(100.0 * math.expm1(0.01), rel=1e-9)


def test_a_changed_window_moves_its_bounds():
    """A window moved up: the answer disappears below, appears above, and is the same between; bounds as printed."""
    before = _cover(_invent(window=("300", "400")))
    after = _cover(_invent(window=("310.25", "415.1"), revision=2))
    assert _summary(compare_coverages(before, after)) == [
        ("disappears", 300.0, 310.25, (("a", 1),), ()),
        ("appears", 400.0, 415.1, (), (("a", 2),)),
    ]
    _check_by_brute_force(before, after, 290.0, 420.0)


def test_another_correlation_takes_over():
    """Better evidence lets b answer where a did; the curve of a still answers beyond, unchanged."""
    a = _invent("a", window=("300", "400"))
    b = _invent("b", window=("330", "360"), coefficients={"A": "6.91", "B": "1200", "C": "-50"}, evidence="compiled")
    before, after = _cover(a, b), _cover(a, replace(b, record=replace(b.record, evidence="standard"), revision=2))
    changes, _ = _check_by_brute_force(before, after, 290.0, 410.0)
    assert _summary(changes) == [("changes", 330.0, 360.0, (("a", 1),), (("b", 2),))]
    assert changes[0].largest_percent == pytest.approx(100.0 * (10.0**0.01 - 1.0), rel=1e-10)


def test_the_same_numbers_under_another_key_are_no_change():
    """A copy that takes over gives the same bits: nothing changes in numbers."""
    a, b = _invent("a"), _invent("b", evidence="standard")
    assert compare_coverages(_cover(a), _cover(a, b)) == ()


def test_only_the_same_two_revisions_are_joined():
    """Two correlations that meet at 350 K and are both revised make two ranges, parted at 350 K."""
    sides = [
        _cover(
            *(_invent(key, window=window, revision=n, coefficients={"A": f"6.9{n}", "B": "1200", "C": "-50"})
              for key, window in (("a", ("300", "350")), ("b", ("350", "400"))))
        ) for n in (1, 2)
    ]  # fmt: skip
    assert _summary(compare_coverages(*sides)) == [
        ("changes", 300.0, 350.0, (("a", 1),), (("a", 2),)),
        ("changes", 350.0, 400.0, (("b", 1),), (("b", 2),)),
    ]
    # where the answer goes altogether, it goes in one piece
    assert _summary(compare_coverages(sides[0], None)) == [("disappears", 300.0, 400.0, (("a", 1), ("b", 1)), ())]


def test_a_cut_by_the_other_side_does_not_part_a_change():
    """A third correlation elsewhere cuts the axis; the range of one pair stays whole, its numbers over all of it."""
    a = [_invent("a", revision=n, coefficients={"A": "6.9", "B": str(1200 + n), "C": "-50"}) for n in (1, 2)]
    piece = replace(a[1], record=replace(a[1].record, uncertainty="1 % up to 333 K; 2 %"))
    before, after = _cover(a[0]), _cover(piece, _invent("b", window=("390", "500"), evidence="estimated"))
    changes, _ = _check_by_brute_force(before, after, 290.0, 510.0)
    assert _summary(changes) == [
        ("changes", 300.0, 400.0, (("a", 1),), (("a", 2),)),
        ("appears", 400.0, 500.0, (), (("b", 1),)),
    ]
    size = lambda t: abs(100 * mpmath.expm1(-mpmath.log(10) / (t - 50)))  # noqa: E731
    assert changes[0].mean_percent == pytest.approx(float(mpmath.quad(size, [300, 400]) / 100), rel=1e-8)


def test_a_range_that_a_tolerance_makes_is_left_out_unless_it_is_all():
    """Which of two answers at the bound where they meet differs by 2e-9 K: told only if nothing else is."""
    a, b = _invent("a", window=("300", "350")), _invent("b", window=("350", "400"))
    b = replace(b, record=replace(b.record, coefficients={"A": "7", "B": "1200", "C": "-50"}))
    better = replace(b, record=replace(b.record, evidence="evaluated"), revision=2)
    (only,) = compare_coverages(_cover(a, b), _cover(a, better))
    assert _summary([only]) == [("changes", 350.0, 350.0, (("a", 1),), (("b", 2),))]
    expected = 100.0 * (10.0**0.1 - 1.0)
    assert (only.largest_percent, only.mean_percent) == (pytest.approx(expected), pytest.approx(expected))
    wider = replace(better, record=replace(better.record, window_max="410"))
    assert _summary(compare_coverages(_cover(a, b), _cover(a, wider))) == [("appears", 400.0, 410.0, (), (("b", 2),))]


def test_a_corrected_critical_temperature_cuts_the_range():
    """A critical temperature corrected from 390 K to 380.5 K takes the answers between away."""
    sides = [_cover(_invent(), points=(_point("critical-temperature", value),)) for value in ("390", "380.5")]
    assert _summary(compare_coverages(*sides)) == [("disappears", 380.5, 390.0, (("a", 1),), ())]
    _check_by_brute_force(*sides, 290.0, 410.0)


def test_bounds_in_fahrenheit_show_no_tolerance():
    """77 F and 212 F are 298.15 K and 373.15 K, whatever the tolerance beside a bound."""
    entry = _invent()
    record = replace(entry.record, window_unit="degF", window_min="77", window_max="212")
    (change,) = compare_coverages(None, _cover(replace(entry, record=record)))
    assert (change.low, change.high) == (298.15, 373.15)


def test_a_molar_mass_changes_a_density_per_mole():
    """The record is the same and the compound's molar mass is not: a density printed per mole follows it."""
    compounds = [
        replace(COMPOUND, record=replace(
            COMPOUND.record, molar_mass=mass, molar_mass_unit="g/mol", source="invented", locator="invented",
            obtained="seen",
        )) for mass in ("58.12", "58.14")
    ]  # fmt: skip
    density = _invent(
        form="density-power", property="saturated-liquid-density", value_unit="mol/dm3",
        coefficients={"Tc": "425", "c0": "4", "n1": "8", "t1": "0.35"},
    )  # fmt: skip
    before, after = (_cover(density, prop="saturated-liquid-density", compound=c) for c in compounds)
    (change,) = compare_coverages(before, after)
    assert change.largest_percent == pytest.approx(100.0 * (58.14 / 58.12 - 1.0), rel=1e-10)
    assert change.before == change.after == (("a", 1),)


def test_where_a_curve_gives_no_value_it_does_not_answer():
    """exp(20 - 2800/(T - 40)) kPa is zero in a double just above 40 K: there nothing answers on that side."""
    low = {"A": "20", "B": "2800", "C": "-40"}
    high = {"A": "20.5", "B": "2700", "C": "-40"}
    before = _cover(_invent(form="antoine-ln", coefficients=low, window=("41", "90")))
    after = _cover(_invent(form="antoine-ln", coefficients=high, window=("41", "90"), revision=2))
    changes, differing = _check_by_brute_force(before, after, 40.0, 50.0)
    assert [c.kind for c in changes] == ["appears", "changes"]
    appears, both = changes
    assert appears.high == both.low == pytest.approx(40.0 + 2800.0 / (745.13 + 26.9), abs=0.01)
    assert differing > 1000
    assert _summary(compare_coverages(None, before)) == [("appears", both.low, 90.0, (), (("a", 1),))]


def _enthalpy(critical, exponent="0.38", revision=1, window=("300", "425")):
    return _invent(
        form="watson", property="enthalpy-of-vaporization", value_unit="J/mol", window=window, revision=revision,
        coefficients={"H1": "22000", "T1": "300", "Tc": critical, "n": exponent},
    )  # fmt: skip


def test_a_value_that_was_zero_bounds_no_percent():
    """An enthalpy of vaporization is zero at its critical temperature: raised from there, no percent is largest."""
    before = _cover(_enthalpy("420"), prop="enthalpy-of-vaporization")
    after = _cover(_enthalpy("425", revision=2), prop="enthalpy-of-vaporization")
    changes = compare_coverages(before, after)
    assert _summary(changes) == [
        ("changes", 300.0, 420.0, (("a", 1),), (("a", 2),)),
        ("appears", 420.0, 425.0, (), (("a", 2),)),
    ]
    assert (changes[0].largest_percent, changes[0].at) == (None, 420.0)

    def size(below):
        # both give 22000 J/mol at 300 K
        return 100 * (((5 + below) / 125 / (below / 120)) ** mpmath.mpf("0.38") - 1)

    # the pole, to the power 0.38, has a mean; with x^4 kelvin below 420 K it is gone
    expected = mpmath.quad(lambda x: size(x**4) * 4 * x**3, [0, mpmath.root(120, 4)]) / 120
    assert changes[0].mean_percent == pytest.approx(float(expected), rel=1e-5)
    # the other way about the answer falls to zero: exactly -100 percent
    back = compare_coverages(after, before)
    assert (back[0].largest_percent, back[0].at) == (-100.0, 420.0)


def test_a_value_that_passes_through_zero_bounds_neither_largest_nor_mean():
    """A melting pressure that was negative up to 320 K: the percent has a pole there."""
    sides = [
        _cover(_invent(
            form="simon-glatzel", property="melting-pressure", phase="solid", value_unit="MPa", revision=n,
            coefficients={"T0": t0, "p0": "0", "a": "500", "c": "1.6"},
        ), prop="melting-pressure") for n, t0 in ((1, "320"), (2, "321"))
    ]  # fmt: skip
    (change,) = compare_coverages(*sides)
    assert (change.low, change.high) == (300.0, 400.0)
    assert (change.largest_percent, change.at, change.mean_percent) == (None, pytest.approx(320.0, abs=1e-9), None)


def test_several_phases_are_compared_one_by_one():
    """Melting pressures of two ices and a sublimation pressure: each phase has its own ranges."""

    def simon(key, phase, window, a="400"):
        return _invent(
            key, form="simon-glatzel", property="melting-pressure", phase=phase, value_unit="MPa", window=window,
            revision=2 if a != "400" else 1, coefficients={"T0": "290", "p0": "1", "a": a, "c": "2"},
        )  # fmt: skip

    ices = simon("m1", "ice I", ("300", "340")), simon("m2", "ice II", ("330", "380"))
    gone = _invent("s", property="sublimation-pressure", phase="solid", window=("200", "250"))
    before = Dossier(COMPOUND, (*ices, gone))
    after = Dossier(COMPOUND, (ices[0], simon("m2", "ice II", ("330", "380"), a="404")))
    changes = compare_dossiers(before, after)
    assert [(c.property, c.phase, c.kind, c.low, c.high) for c in changes] == [
        ("sublimation-pressure", "solid", "disappears", 200.0, 250.0),
        ("melting-pressure", "ice II", "changes", 330.0, 380.0),
    ]
    assert 0.9 < changes[1].mean_percent < 1.0
    # where no phase is named and both ices cover, nothing answers on either side
    unnamed = [build_coverage(d, "melting-pressure") for d in (before, after)]
    assert _summary(compare_coverages(*unnamed)) == [("changes", 340.0, 380.0, (("m2", 1),), (("m2", 2),))]


def test_a_correlation_is_named_once_in_a_range():
    """Where the other side passes from several phases to none, the answer that appears is one and whole."""

    def ice(key, phase, window):
        return _invent(
            key, form="simon-glatzel", property="melting-pressure", phase=phase, value_unit="MPa", window=window,
            coefficients={"T0": "290", "p0": "1", "a": "400", "c": "2"},
        )  # fmt: skip

    before = _cover(ice("m1", "ice I", ("330", "340")), ice("m2", "ice II", ("330", "340")), prop="melting-pressure")
    after = _cover(ice("m3", "ice III", ("330", "360")), prop="melting-pressure")
    assert _summary(compare_coverages(before, after)) == [("appears", 330.0, 360.0, (), (("m3", 1),))]


def test_other_coefficients_with_the_same_values_are_no_change():
    """A term without weight, Riedel's C4 = 0, may have any power: every value is the same."""
    sides = [
        _cover(_invent(
            form="riedel", revision=n, value_unit="Pa",
            coefficients={"C1": "60.5", "C2": "-5200", "C3": "-6.1", "C4": "0", "C5": str(n)},
        )) for n in (1, 2)
    ]  # fmt: skip
    assert sides[0].value_at(350.0)[0] > 0.0
    assert compare_coverages(*sides) == ()


def test_a_zero_on_both_sides_is_no_change():
    """A melting pressure of zero at 300 K in both, and 1 percent higher everywhere else."""
    sides = [
        _cover(_invent(
            form="simon-glatzel", property="melting-pressure", phase="solid", value_unit="MPa", revision=n,
            coefficients={"T0": "300", "p0": "0", "a": a, "c": "1.6"},
        ), prop="melting-pressure") for n, a in ((1, "500"), (2, "505"))
    ]  # fmt: skip
    (change,) = compare_coverages(*sides)
    assert (sides[0].value_at(300.0)[0], sides[1].value_at(300.0)[0]) == (0.0, 0.0)
    assert change.largest_percent == pytest.approx(1.0, rel=1e-12)
    assert change.mean_percent == pytest.approx(1.0, rel=1e-8)


def test_two_steps_between_two_points_are_both_found():
    """Curves that begin and end between neighbouring points of a grid cut it twice."""

    def code(t):
        return 2 * (t > 1.25) + (t > 1.75)

    grid = np.array([0.0, 1.0, 2.0, 3.0])
    up = [math.nextafter(t, 2.0) for t in (1.25, 1.75)]
    assert list(find_steps(code, grid, code(grid))) == [(1.25, up[0]), (1.75, up[1])]


def test_only_two_of_a_kind_are_compared():
    """Coverages of two properties are refused by name."""
    density = _cover(prop="saturated-liquid-density")
    with pytest.raises(BadInput, match="inventane saturated-liquid-density and inventane vapor-pressure cannot"):
        compare_coverages(_cover(_invent()), density)


def test_curves_are_compared_over_their_overlap():
    """A revision against what it revises: over both windows; None without a common temperature; 0 for no change."""

    def curve(window, a="6.9"):
        record = _invent(window=window, coefficients={"A": a, "B": "1200", "C": "-50"}).record
        return Curve.of(record, 58.0)

    step = 100.0 * (10.0**0.01 - 1.0)
    found = compare_curves(curve(("300", "400")), curve(("350", "450"), "6.91"), positive=True)
    assert found == (pytest.approx(step), 350.0, pytest.approx(step))
    assert found._fields == ("largest_percent", "at", "mean_percent")
    assert compare_curves(curve(("300", "400")), curve(("400", "450"), "6.91")) == (
        pytest.approx(step), 400.0, pytest.approx(step),
    )  # fmt: skip
    assert compare_curves(curve(("300", "400")), curve(("400.001", "450"))) is None
    assert compare_curves(curve(("300", "400")), curve(("300", "500"))) == (0.0, 300.0, 0.0)
    # 10^(6.9 - 1200/(T - 50)) kPa is zero in a double up to 53 K
    low, high = curve(("52", "60")), curve(("52", "60"), "8")
    assert compare_curves(low, high).largest_percent is None
    assert compare_curves(low, high, positive=True).largest_percent > 100.0
    assert compare_curves(curve(("52", "53")), curve(("52", "53")), positive=True) is None


@pytest.mark.parametrize("compound", ["water", "argon", "ammonia", "ethanol"])
def test_published_correlations_against_one_another(compound, published):
    """Without its best correlation, each property of a real compound: by brute force."""
    dossier = published.dossier(compound)
    for prop in PROPERTIES:
        for phase in {e.record.phase for e in dossier.for_property(prop)}:
            before = build_coverage(dossier, prop, phase)
            best = before.answering[0].key
            left = tuple(e for e in dossier.correlations if e.key != best)
            after = build_coverage(replace(dossier, correlations=left), prop, phase)
            changes, differing = _check_by_brute_force(before, after, 10.0, 1000.0)
            assert changes
            assert differing
            _check_by_brute_force(after, before, 10.0, 1000.0)
