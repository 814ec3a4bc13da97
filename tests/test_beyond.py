"""Beyond a window: only by name, only so far, marked, and never across a phase limit."""

from __future__ import annotations

import numpy as np
import pytest
from inventane import COMPOUND, invent_correlation

from registry.answering import answer_many, answer_one
from registry.conditions import Conditions
from registry.coverage import build_coverage
from registry.dossier import Dossier, Entry
from registry.errors import BadInput, Refused
from registry.extrapolation import Extrapolation
from registry.records import FixedPoint


def test_nothing_is_extrapolated_unasked(published):
    """Outside every window a lookup is refused; within reach of --beyond the nearest correlation answers, marked."""
    with pytest.raises(Refused):
        published.lookup("ethanol", 210.0)
    answer = published.lookup("ethanol", 210.0, beyond=6.15 + 1e-9)
    assert isinstance(answer, Extrapolation)
    assert (answer.mark, answer.correlation.key) == ("beyond", "ethanol-antoine-low")
    assert answer.distance == pytest.approx(6.15, abs=1e-9)
    # the printed equation itself: 8.20417 - 1642.89/(t + 230.300), mmHg, at -63.15 degC
    assert answer.to("mmHg") == pytest.approx(10.0 ** (8.20417 - 1642.89 / (-63.15 + 230.300)), rel=1e-12)
    assert answer.uncertainty_percent is None
    assert "extrapolated 6.15 K beyond the window" in answer.cautions[0]


def test_it_goes_no_further_than_asked(published):
    """One nanokelvin short of the distance it is refused, and the refusal says that it does not reach."""
    with pytest.raises(Refused) as caught:
        published.lookup("ethanol", 210.0, beyond=6.149)
    assert caught.value.refusal.reason == "outside-windows"
    assert caught.value.refusal.explanation.endswith("--beyond 6.149K does not reach it.")


@pytest.mark.parametrize(
    ("compound", "prop", "kelvin", "reason"),
    [
        ("ethanol", "vapor-pressure", 514.0, "above-critical"),
        ("water", "vapor-pressure", 272.0, "below-triple"),
        ("water", "sublimation-pressure", 274.0, "above-triple"),
        ("water", "saturated-liquid-density", 648.0, "above-critical"),
    ],
)
def test_no_phase_limit_is_crossed(compound, prop, kelvin, reason, published):
    """Above the critical and across the triple temperature nothing is extrapolated, however far it may go."""
    with pytest.raises(Refused) as caught:
        published.lookup(compound, kelvin, property=prop, beyond=100.0)
    assert caught.value.refusal.reason == reason
    assert caught.value.refusal.explanation.endswith("--beyond does not cross a phase limit.")


def test_in_a_gap_the_nearer_side_answers_and_tells_of_the_other(scenario):
    """Between two windows the nearer one answers; what the other gives there stands beside it, in percent."""
    low = scenario.lookup("brindovane", 320.0, beyond=60.0)
    assert (low.correlation.key, low.distance) == ("brindovane-antoine-low", pytest.approx(10.0))
    high = scenario.lookup("brindovane", 350.0, beyond=60.0)
    assert (high.correlation.key, high.distance) == ("brindovane-kirchhoff", pytest.approx(10.0))
    coverage = scenario.coverage("brindovane")
    other = next(c for c in coverage.accepted if c.key == "brindovane-kirchhoff")
    found = next(n for n in low.neighbours if n.correlation == "brindovane-kirchhoff")
    assert found.distance == pytest.approx(40.0)
    assert found.value == other.curve.value(320.0)
    assert found.percent == pytest.approx(100.0 * (found.value / low.value - 1.0), rel=1e-12)
    assert "brindovane-kirchhoff, 40 K beyond its window, gives" in low.cautions[1]
    # within reach of itself alone there is nothing to compare with
    assert scenario.lookup("brindovane", 320.0, beyond=15.0).neighbours == ()


def test_arrays_agree_with_scalars(scenario):
    """A batch extrapolates the same points to the same bits, marks them, and says which correlation it was."""
    kelvin = np.random.default_rng(1).uniform(200.0, 640.0, 500)
    batch = scenario.lookup("brindovane", kelvin, beyond=12.5)
    for i, t in enumerate(kelvin.tolist()):
        if batch.refused[i]:
            with pytest.raises(Refused) as caught:
                scenario.lookup("brindovane", t, beyond=12.5)
            assert batch.refusal(i) == caught.value.refusal
            continue
        one = scenario.lookup("brindovane", t, beyond=12.5)
        assert (batch.values[i], batch.marks[i]) == (one.value, one.mark)
        assert batch.correlations[batch.chosen[i]].key == one.correlation.key
    assert {"", "beyond"} == set(batch.marks[~batch.refused].tolist())
    assert (batch.marks[batch.refused] == "").all()


def test_where_a_window_covers_nothing_changes(published):
    """Asking for --beyond changes no answer that a window gives, nor its mark."""
    kelvin = np.linspace(217.0, 513.0, 400)
    plain, beyond = published.lookup("ethanol", kelvin), published.lookup("ethanol", kelvin, beyond=50.0)
    assert (plain.values == beyond.values).all()
    assert set(beyond.marks.tolist()) == {""}


def test_several_phases_need_a_name(published):
    """A melting curve is extrapolated only for a named phase."""
    with pytest.raises(Refused) as caught:
        published.lookup("water", 250.0, property="melting-pressure", beyond=10.0)
    assert caught.value.refusal.explanation.endswith("--beyond needs the phase: name it with --phase.")
    answer = published.lookup("water", 250.0, property="melting-pressure", phase="ice Ih", beyond=2.0)
    assert (answer.mark, answer.correlation.phase) == ("beyond", "ice Ih")


def test_where_its_form_has_no_value_nothing_is_extrapolated():
    """Below the pole of an Antoine equation (invented, at 40 K) there is no pressure, and the refusal says so."""
    entry = invent_correlation(0, 280, 120, "measured", "", "seen", "accepted")
    coverage = build_coverage(Dossier(COMPOUND, (entry,)), "vapor-pressure")
    conditions = Conditions(beyond=300.0)
    assert answer_one(coverage, 100.0, None, conditions).mark == "beyond"
    # at 10 K the printed equation gives 1e47 kPa, at 41 K nothing that a double holds
    for kelvin in (10.0, 39.0, 41.0):
        with pytest.raises(Refused) as caught:
            answer_one(coverage, kelvin, None, conditions)
        assert caught.value.refusal.explanation.endswith("Extrapolated there, its form gives no usable value.")
    assert np.isnan(answer_many(coverage, np.array([10.0, 39.0, 41.0]), conditions).values).all()


def test_half_way_between_two_windows_the_lower_one_answers():
    """Invented: at 320 K both windows end 10 K away."""
    entries = (
        invent_correlation(0, 280, 30, "measured", "", "seen", "accepted"),
        invent_correlation(1, 330, 70, "measured", "", "seen", "accepted"),
    )
    coverage = build_coverage(Dossier(COMPOUND, entries), "vapor-pressure")
    found = answer_one(coverage, 320.0, None, Conditions(beyond=10.0))
    assert (found.correlation.key, [n.distance for n in found.neighbours]) == ("inventane-0", [10.0])


def test_an_extrapolation_ends_where_a_window_would():
    """Invented: as inside a window it goes 0.05 K below the triple temperature, 200 K, and no further."""
    entry = invent_correlation(0, 280, 120, "measured", "", "seen", "accepted")
    point = FixedPoint(
        key="inventane-triple", compound="inventane", quantity="triple-point-temperature", value="200", unit="K",
        evidence="measured", source="invented", locator="invented", obtained="seen",
    )  # fmt: skip
    dossier = Dossier(COMPOUND, (entry,), (Entry(point, 1, 1, "accepted"),))
    coverage, conditions = build_coverage(dossier, "vapor-pressure"), Conditions(beyond=100.0)
    assert answer_one(coverage, 199.96, None, conditions).mark == "beyond"
    with pytest.raises(Refused) as caught:
        answer_one(coverage, 199.94, None, conditions)
    assert caught.value.refusal.reason == "below-triple"


def test_the_distance_that_a_refusal_tells_is_enough(published):
    """216.15 less 210 is a little more than 6.15 in doubles, and still `--beyond 6.15K` reaches it, as told."""
    with pytest.raises(Refused) as caught:
        published.lookup("ethanol", 210.0, beyond=5.0)
    assert "is 6.15 K away" in caught.value.refusal.explanation
    assert published.lookup("ethanol", 210.0, beyond=6.15).mark == "beyond"
    assert published.lookup("ethanol", [210.0], beyond=6.15).marks.tolist() == ["beyond"]
    with pytest.raises(Refused, match=r"--beyond 6\.14999K does not reach it"):
        published.lookup("ethanol", 210.0, beyond=6.14999)


def test_what_is_no_temperature_is_a_refusal_among_many(published):
    """A batch tells of a missing number in words, whatever was asked for by name."""
    for asked in ({}, {"beyond": 5.0}, {"within": 1.0, "estimate": "lee-kesler"}):
        batch = published.lookup("water", [float("nan"), 300.0], **asked)
        assert batch.refused.tolist() == [True, False]
        assert batch.refusal(0).reason == "not-a-temperature"


@pytest.mark.parametrize(
    ("asked", "why"),
    [
        ({"beyond": "5K"}, "beyond '5K' is no number; a number of kelvin is allowed."),
        ({"within": "2%"}, "within '2%' is no number; a number of percent is allowed."),
        ({"estimate": 3}, "There is no estimation method '3'"),
    ],
)
def test_what_is_asked_for_by_name_has_its_kind(asked, why, published):
    """A text for a number is refused in words, not by Python."""
    with pytest.raises(BadInput) as caught:
        published.lookup("ethanol", 300.0, **asked)
    assert str(caught.value).startswith(why)


@pytest.mark.parametrize("beyond", [-1.0, float("nan"), float("inf")])
def test_no_odd_distance(beyond, published):
    """A distance is a number of kelvin above zero."""
    with pytest.raises(BadInput, match="a number of kelvin above 0 is allowed"):
        published.lookup("water", 300.0, beyond=beyond)


@pytest.mark.parametrize("within", [0.0, -1.0, float("nan")])
def test_no_odd_percentage(within, published):
    """A tolerance is a percentage above zero."""
    with pytest.raises(BadInput, match="a percentage above 0 is allowed"):
        published.lookup("water", 300.0, within=within)


def test_within_refuses_what_is_larger_or_not_stated(scenario):
    """Over an array: refused where the stated uncertainty is larger than asked for, or where none is stated."""
    kelvin = np.linspace(250.0, 310.0, 121)
    batch = scenario.lookup("brindovane", kelvin, within=1.6)
    plain = scenario.lookup("brindovane", kelvin)
    for i, t in enumerate(kelvin.tolist()):
        # as the record states it: not stated up to 255 K; 4 Pa up to 290 K; 1.5 %
        stated = np.inf if t <= 255.0 else 400.0 / plain.values[i] if t <= 290.0 else 1.5
        assert batch.refused[i] == (stated > 1.6)
        if batch.refused[i]:
            reason = "uncertainty-not-stated" if t <= 255.0 else "too-uncertain"
            assert batch.refusal(i).reason == reason
    assert 0 < batch.refused.sum() < kelvin.size


def test_an_extrapolated_value_states_no_uncertainty(scenario):
    """What a source states holds in its window: beyond it, --within refuses."""
    with pytest.raises(Refused) as caught:
        scenario.lookup("brindovane", 315.0, beyond=10.0, within=50.0)
    assert caught.value.refusal.reason == "uncertainty-not-stated"
