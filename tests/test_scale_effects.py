"""What a temperature scale does to a value, and how far off one may be whose scale is not stated."""

from __future__ import annotations

import pytest
from shelf import CORRELATIONS, MASSES, on_own_scale

from registry.curve import Curve
from registry.scale_effects import find_scale_effects


def _effects(key: str, kelvin: float):
    record = CORRELATIONS[key]
    return find_scale_effects(Curve.of(record, MASSES[record.compound]), kelvin)


def test_wexler_at_the_boiling_point_of_water():
    """IPTS-68 stands 0.026 K from ITS-90 at 100 degC (H. Preston-Thomas 1990): 0.09 % of the pressure there.

    dp/dT of water there is 3.616 kPa/K (IAPWS), so 0.0256 K are 0.0926 kPa of 101.4 kPa.
    """
    (effect,) = _effects("water-wexler-1976", 373.15)
    assert (effect.scale, effect.supposed) == ("IPTS-68", False)
    assert effect.shift == pytest.approx(0.026, abs=5e-4)
    assert effect.percent == pytest.approx(100.0 * 0.0256 * 3.616 / 101.42, abs=1e-3)


def test_a_scale_that_is_not_stated_may_be_either():
    """Both older scales are told as suppositions."""
    effects = _effects("ethanol-antoine-low", 323.15)
    assert [(e.scale, e.supposed) for e in effects] == [("IPTS-68", True), ("IPTS-48", True)]
    # t90 - t68 = -0.013 and t90 - t48 = -0.023 at 50 degC (CRC Handbook table), 4.9 % a kelvin
    rate = 100.0 * Curve.of(CORRELATIONS["ethanol-antoine-low"], 46.0).log_rate(323.15)
    assert effects[0].percent == pytest.approx(0.013 * rate, abs=0.0005 * rate)
    assert effects[1].percent == pytest.approx(0.023 * rate, abs=0.001 * rate)


def test_its90_has_no_effect():
    """A correlation on ITS-90 has none; neither has a scale whose conversion does not reach."""
    assert _effects("water-hardy-1998", 300.0) == ()
    assert [e.scale for e in _effects("mercury-huber-2006", 700.0)] == []
    record = CORRELATIONS["ethanol-antoine-low"]
    assert [e.scale for e in find_scale_effects(Curve.of(record, 46.0), 5.0)] == []


@pytest.mark.parametrize("key", [key for key, record in CORRELATIONS.items() if record.temperature_scale[:4] == "IPTS"])
def test_the_shift_is_in_the_value(key):
    """The value of a curve on an older scale is that of its form at the shifted number."""
    record = CORRELATIONS[key]
    kelvin = sum(record.window_kelvin()) / 2.0
    curve = Curve.of(record, MASSES[record.compound])
    own, effects = on_own_scale(curve), _effects(key, kelvin)
    if not curve.scale.reaches(kelvin):
        assert effects == ()
        return
    (effect,) = effects
    assert curve.value(kelvin) == pytest.approx(own.value(kelvin) * (1.0 + effect.percent / 100.0), rel=1e-12)
    assert own.value(kelvin + effect.shift) == pytest.approx(curve.value(kelvin), rel=1e-12)


def test_where_the_value_is_zero_no_percent_tells_the_effect():
    """Kechin's melting line of hydrogen starts at zero pressure, 14.025 K (F. Datchi et al. 2000)."""
    (effect,) = _effects("hydrogen-normal-melting-datchi-2000", 14.025)
    assert (effect.scale, effect.percent) == ("IPTS-68", None)
    assert effect.shift == pytest.approx(0.0056, abs=1e-3)
