"""Corresponding-states estimates against published worked values, and always marked."""

from __future__ import annotations

import math

import numpy as np
import pytest

from registry.errors import BadInput, Refused
from registry.estimates import METHODS, Estimate, Estimator, acentric_factor, find_method

LN10 = math.log(10.0)


def _pressure(method: str, tc: float, pc: float, omega: float, kelvin: float) -> float:
    return pc * math.exp(METHODS[method].log_reduced(np.array([kelvin / tc]), omega)[0])


def test_lee_kesler_benzene_as_printed():
    """Benzene, 562.12 K, 4898 kPa, 0.2120, at 353.15 K: f0, f1 and 99.69 kPa as a worked example prints them."""
    reduced = np.array([353.15 / 562.12])
    f0 = METHODS["lee-kesler"].log_reduced(reduced, 0.0)[0]
    f1 = METHODS["lee-kesler"].log_reduced(reduced, 1.0)[0] - f0
    assert f0 == pytest.approx(-3.167428, abs=1e-6)
    assert f1 == pytest.approx(-3.429560, abs=1e-6)
    assert _pressure("lee-kesler", 562.12, 4898.0, 0.2120, 353.15) == pytest.approx(99.69, abs=5e-3)


def test_ambrose_walton_closes_at_the_acentric_factor():
    """At Tr = 0.7, f0 and f1 are -ln 10 and f2 is 0, by the definition of the acentric factor (Pitzer 1955)."""
    values = [METHODS["ambrose-walton"].log_reduced(np.array([0.7]), omega)[0] for omega in (-1.0, 0.0, 1.0)]
    f0, f1, f2 = values[1], (values[2] - values[0]) / 2.0, (values[2] + values[0]) / 2.0 - values[1]
    assert (f0, f1, f2) == pytest.approx((-LN10, -LN10, 0.0), abs=3e-6)


@pytest.mark.parametrize("method", METHODS)
@pytest.mark.parametrize("omega", [0.0, 0.2, 0.5])
def test_a_method_gives_back_the_acentric_factor(method, omega):
    """p/pc at Tr = 0.7 leads back to omega = -log10(p/pc) - 1; Lee and Kesler's constants close to 1e-4."""
    ratio = math.exp(METHODS[method].log_reduced(np.array([0.7]), omega)[0])
    assert acentric_factor(ratio) == pytest.approx(omega, abs=1e-4)
    assert METHODS[method].log_reduced(np.array([1.0]), omega)[0] == pytest.approx(0.0, abs=1e-4)


def test_acentric_factor_as_printed():
    """p/pc = 0.023 gives 0.638272 (N. de Nevers, Physical and Chemical Equilibrium, Example 5.4)."""
    assert acentric_factor(0.023) == pytest.approx(0.638272, abs=5e-7)


# evaluated values from memory: D. Ambrose, J. Walton 1989 with the constants beside them
@pytest.mark.parametrize(
    ("tc", "pc", "omega", "kelvin", "kpa"),
    [(617.7, 2110.0, 0.490, 447.27, 101.332), (562.16, 4898.0, 0.210, 353.24, 101.950)],
)
def test_ambrose_walton_at_boiling_points(tc, pc, omega, kelvin, kpa):
    """n-decane and benzene at their normal boiling points come within 0.7 % of one atmosphere."""
    assert _pressure("ambrose-walton", tc, pc, omega, kelvin) == pytest.approx(kpa, abs=1e-3)
    assert kpa == pytest.approx(101.325, rel=7e-3)


NONPOLAR = (
    "argon", "benzene", "ethane", "ethylene", "methane", "n-butane", "n-decane", "n-heptane", "n-hexane", "n-pentane",
    "nitrogen", "oxygen", "propane", "toluene",
)  # fmt: skip
WORST = {"lee-kesler": 2.0, "ambrose-walton": 1.5}
"""Percent above Tr 0.65: Lee-Kesler within 2 % above the boiling point, as published; Ambrose-Walton about 1 %."""


@pytest.mark.parametrize("method", METHODS)
@pytest.mark.parametrize("compound", NONPOLAR)
def test_nonpolar_compounds_are_met_as_published(method, compound, published):
    """Above Tr 0.65 a method meets the recorded correlations of nonpolar compounds within its typical error."""
    coverage = published.coverage(compound)
    estimator = Estimator.of(find_method(method), coverage)
    kelvin = np.linspace(0.65, 0.98, 34) * estimator.critical_temperature
    values, _ = coverage.evaluate(kelvin)
    deviation = 100.0 * (estimator.values(kelvin) / values - 1.0)
    assert np.nanmax(np.abs(deviation)) <= WORST[method]


def test_the_slope_is_that_of_a_difference_quotient(published):
    """d ln p/dT by complex step against a central difference."""
    for method in METHODS:
        estimator = Estimator.of(find_method(method), published.coverage("ethanol"))
        low, high = np.log(estimator.values(np.array([399.99, 400.01])))
        assert estimator.log_rate(400.0) == pytest.approx((high - low) / 0.02, rel=1e-7)


def test_an_estimate_answers_only_what_nothing_covers(published):
    """Where a window covers, its correlation answers; elsewhere the estimate, marked, with its constants."""
    covered = published.lookup("acetylene", 195.0, estimate="lee-kesler")
    assert (covered.mark, covered.correlation.key) == ("", "acetylene-antoine-appendix-e")
    estimate = published.lookup("acetylene", 250.0, estimate="lee-kesler")
    assert isinstance(estimate, Estimate)
    assert estimate.mark == "estimate"
    assert [point.record.quantity for point in estimate.points] == [
        "critical-temperature", "critical-pressure", "acentric-factor",
    ]  # fmt: skip
    assert any("It is an estimate" in caution and "Typical error" in caution for caution in estimate.cautions)
    with pytest.raises(Refused):
        published.lookup("acetylene", 250.0)


def test_arrays_agree_with_scalars(published):
    """A batch holds the same bits as its scalars, and marks each value."""
    kelvin = np.linspace(185.0, 315.0, 131)
    batch = published.lookup("acetylene", kelvin, estimate="ambrose-walton", beyond=2.0)
    for i, t in enumerate(kelvin.tolist()):
        if batch.refused[i]:
            with pytest.raises(Refused) as caught:
                published.lookup("acetylene", t, estimate="ambrose-walton", beyond=2.0)
            assert batch.refusal(i) == caught.value.refusal
        else:
            one = published.lookup("acetylene", t, estimate="ambrose-walton", beyond=2.0)
            assert (batch.values[i], batch.marks[i]) == (one.value, one.mark)
    assert set(batch.marks.tolist()) == {"", "beyond", "estimate"}
    assert set(batch.chosen[batch.marks == "estimate"].tolist()) == {-1}


@pytest.mark.parametrize("kelvin", [191.0, 308.4])
def test_no_estimate_beyond_a_phase_limit(kelvin, published):
    """Below the triple and above the critical temperature there is no liquid to estimate for."""
    with pytest.raises(Refused) as caught:
        published.lookup("acetylene", kelvin, estimate="lee-kesler")
    assert caught.value.refusal.reason in ("below-triple", "above-critical")


def test_the_triple_temperature_itself_is_estimated_for(published):
    """There the liquid begins; one double below there is none."""
    coverage = published.coverage("acetylene")
    lowest = coverage.limits.lower
    values = Estimator.of(find_method("lee-kesler"), coverage).values(np.array([math.nextafter(lowest, 0.0), lowest]))
    assert np.isnan(values).tolist() == [True, False]


def test_missing_constants_are_named(published):
    """A compound without critical constants cannot be estimated, and the refusal says what is missing."""
    with pytest.raises(Refused, match="and acentric factor of neon, which no accepted fixed point says"):
        published.lookup("neon", 30.0, estimate="lee-kesler")
    with pytest.raises(BadInput, match="There is no estimation method 'riedel'"):
        published.lookup("water", 300.0, estimate="riedel")


def test_what_is_covered_is_answered_also_where_a_constant_is_missing(scenario):
    """Brindovane (invented) has no acentric factor: in its gap that is said, beside it its correlations answer."""
    batch = scenario.lookup("brindovane", [300.0, 335.0, 340.0], estimate="lee-kesler", beyond=27.0)
    plain = scenario.lookup("brindovane", [300.0, 335.0, 340.0], beyond=27.0)
    assert batch.marks.tolist() == plain.marks.tolist() == ["", "beyond", "beyond"]
    batch = scenario.lookup("brindovane", [300.0, 335.0], estimate="lee-kesler")
    assert batch.refused.tolist() == [False, True]
    lack = " --estimate lee-kesler needs the acentric factor of brindovane, which no accepted fixed point says."
    plain = scenario.lookup("brindovane", [335.0]).refusal(0)
    assert batch.refusal(1).reason == plain.reason == "not-accepted"
    assert batch.refusal(1).explanation == plain.explanation + lack


def test_far_below_the_critical_temperature_the_typical_error_says_nothing(published):
    """Helium-4 has no triple point to stop at; below half the critical temperature (5.1953 K) the estimate says so."""
    far = published.lookup("helium-4", 0.5, estimate="lee-kesler")
    assert far.mark == "estimate"
    assert "It lies at 0.0962 of the critical temperature: below 0.5 the typical error says nothing." in far.cautions
    near = published.lookup("acetylene", 250.0, estimate="lee-kesler")
    assert not any("says nothing" in caution for caution in near.cautions)


def test_across_a_phase_limit_no_constant_is_missed(scenario):
    """Corvexane (invented) has no acentric factor: where there is no liquid the refusal says that, and only that."""
    for kelvin, reason in ((100.0, "below-triple"), (400.0, "above-critical")):
        with pytest.raises(Refused) as caught:
            scenario.lookup("corvexane", kelvin, estimate="lee-kesler")
        assert caught.value.refusal.reason == reason
        batch = scenario.lookup("corvexane", [kelvin, 300.0], estimate="lee-kesler")
        assert batch.refused.tolist() == [True, False]
        assert batch.refusal(0) == caught.value.refusal
    # not a number of kelvin: told as such
    with pytest.raises(BadInput, match="is no temperature"):
        scenario.lookup("corvexane", float("inf"), estimate="lee-kesler")
