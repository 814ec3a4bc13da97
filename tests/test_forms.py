"""The arithmetic of every form in the catalogue, against 50 digits and published worked values.

Everything here enumerates the catalogue: a form that is added is tested, or
its absence from the references fails, before its author writes a test.
"""

from __future__ import annotations

import dataclasses
import math
import zlib
from collections.abc import Callable, Mapping
from fractions import Fraction

import mpmath
import numpy as np
import pytest
from mpmath import mp, mpf

from registry.curve import Curve
from registry.forms.catalogue import FORMS
from registry.properties import PROPERTIES
from registry.quantities import UNITS
from registry.records import Correlation
from tests.reference_forms import DIGITS, REFERENCES, double, exact, reference_of
from tests.shelf import CORRELATIONS, FACTS, MASSES, on_own_scale, own_curve, read_coefficients, read_rows

WORKED = read_rows(FACTS / "worked_points.csv")
OWN_CHECKS = read_rows(FACTS / "own_check_points.csv")

# the contract of the program: 1e-12 relative on any machine
CLOSE = mpf("1e-12")


@pytest.fixture(autouse=True)
def _fifty_digits():
    with mp.workdps(DIGITS):
        yield


def make_record(form: str, coefficients: Mapping[str, str], **given: str) -> Correlation:
    """A correlation that is not on the shelf; only its form, coefficients, units and window matter."""
    prop = FORMS[form].properties[0]
    phase = PROPERTIES[prop].phase
    fields = {
        "key": "worked", "compound": "worked", "property": prop, "phase": phase, "form": form,
        "window_unit": "K", "window_basis": "assumed", "temperature_scale": "not-stated",
        "evidence": "compiled", "source": "worked", "locator": "worked", "obtained": "seen",
    }  # fmt: skip
    return Correlation(coefficients=coefficients, **{**fields, **given})


def worked_record(row: dict[str, str]) -> Correlation:
    """The correlation of a worked point, over 20 % of the temperature or up to the critical point."""
    coefficients = read_coefficients(row["coefficients"])
    kelvin = float(UNITS[row["temperature_unit"]].to_si(Fraction(row["temperature"])))
    upper = coefficients.get("Tc", repr(1.2 * kelvin))
    return make_record(
        row["form"], coefficients, temperature_unit=row["temperature_unit"], value_unit=row["value_unit"],
        window_min=repr(0.8 * kelvin), window_max=upper,
    )  # fmt: skip


def error_of(found: float, true: mpf) -> mpf:
    """Relative error; of a value that is zero by construction, the value itself."""
    if abs(true) < mpf(10) ** (5 - DIGITS):
        return mpf(abs(found))
    return abs(mpf(float(found)) - true) / abs(true)


def assert_values_agree(curve: Curve, reference: Callable[[mpf], mpf], grid: np.ndarray) -> None:
    for kelvin, found in zip(grid, curve.values(grid), strict=True):
        error = error_of(found, reference(mpf(float(kelvin))))
        assert error <= CLOSE, f"value at {kelvin!r} K: relative error {mpmath.nstr(error, 3)}"


def assert_rates_agree(curve: Curve, reference: Callable[[mpf], mpf], grid: np.ndarray) -> None:
    for kelvin, found in zip(grid, curve.rates(grid), strict=True):
        # one-sided at the ends: a form may mean nothing beyond them
        side = {grid[0]: 1, grid[-1]: -1}.get(kelvin, 0)
        true = mpmath.diff(reference, mpf(float(kelvin)), direction=side)
        if abs(true) > 1e20:  # a power below 1 of the distance to the critical point
            assert found == math.copysign(math.inf, true), f"rate at {kelvin!r} K is {found}, not infinite"
        else:
            error = error_of(found, true)
            assert error <= CLOSE, f"rate at {kelvin!r} K: relative error {mpmath.nstr(error, 3)}"


def worked_id(row: dict[str, str]) -> str:
    return f"{row['form']}-{row['temperature']}-{row['temperature_unit']}"


SHELF = [pytest.param(key, id=key) for key in CORRELATIONS]
ROWS = [pytest.param(row, id=worked_id(row)) for row in WORKED]
SAMPLES: dict[str, tuple[Correlation, float]] = {}
for _record in CORRELATIONS.values():
    SAMPLES.setdefault(_record.form, (_record, MASSES[_record.compound]))
for _row in WORKED:
    SAMPLES.setdefault(_row["form"], (worked_record(_row), 1.0))


def sample_curve(form: str) -> Curve:
    """A published curve of the form."""
    record, mass = SAMPLES[form]
    return on_own_scale(Curve.of(record, mass))


def grid_of(curve: Curve, count: int = 25) -> np.ndarray:
    return np.linspace(*curve.window, count)


@pytest.mark.parametrize("form", FORMS)
def test_form_has_reference_and_worked_value(form):
    """Each form is written out a second time, and a published value stands against it."""
    assert form in REFERENCES
    checked = {CORRELATIONS[row["key"]].form for row in OWN_CHECKS} | {row["form"] for row in WORKED}
    assert form in checked, f"{form} has no row in own_check_points.csv or worked_points.csv"


def test_no_reference_without_form():
    """A reference whose form is gone goes too."""
    assert set(REFERENCES) == set(FORMS)


@pytest.mark.parametrize("key", SHELF)
def test_shelf_values_agree_with_50_digits(key):
    """Each published correlation is right to 1e-12 over its window, both ends included."""
    record = CORRELATIONS[key]
    curve = own_curve(key)
    assert_values_agree(curve, reference_of(record, MASSES[record.compound]), grid_of(curve))


@pytest.mark.parametrize("key", SHELF)
def test_shelf_rates_agree_with_50_digits(key):
    """Each derivative is right to 1e-12, and infinite where the true one is."""
    record = CORRELATIONS[key]
    curve = own_curve(key)
    assert_rates_agree(curve, reference_of(record, MASSES[record.compound]), grid_of(curve))


@pytest.mark.parametrize("key", SHELF)
def test_window_is_the_printed_one(key):
    """No form cuts the printed window of a published correlation."""
    assert own_curve(key).window == CORRELATIONS[key].window_kelvin()


@pytest.mark.parametrize("row", ROWS)
def test_worked_value(row):
    """A published value is met to the last digit of the form's known deviation from it."""
    record = worked_record(row)
    kelvin = float(UNITS[row["temperature_unit"]].to_si(Fraction(row["temperature"])))
    mass = double(record.coefficients.get("M", "1"))
    unit = UNITS[row["unit"]]
    published = unit.to_si(Fraction(row["value"])) * (Fraction(mass) if unit.per_molar_mass else 1)
    curve = Curve.of(record, 1.0)
    deviation = 100.0 * (curve.value(kelvin) / float(published) - 1.0)
    assert abs(deviation - float(row["deviation_percent"])) <= 0.005


@pytest.mark.parametrize("row", ROWS)
def test_worked_forms_agree_with_50_digits(row):
    """Forms that the shelf does not hold are right to 1e-12 as well, value and derivative."""
    record = worked_record(row)
    curve = Curve.of(record, 1.0)
    assert_values_agree(curve, reference_of(record), grid_of(curve))
    assert_rates_agree(curve, reference_of(record), grid_of(curve))


@pytest.mark.parametrize("form", FORMS)
def test_scalar_and_array_agree_bit_for_bit(form):
    """A temperature gives the same bits alone, in any array, and in any memory layout."""
    curve = sample_curve(form)
    kelvin = np.random.default_rng(zlib.crc32(form.encode())).uniform(*curve.window, 20_000)
    whole = curve.values(kelvin)
    assert np.isfinite(whole).all()
    pieces = np.split(kelvin, np.cumsum(np.arange(1, 200)))
    assert len(pieces) == 200
    assert np.concatenate([curve.values(piece) for piece in pieces]).tobytes() == whole.tobytes()
    for index in range(0, 20_000, 19):
        assert curve.value(float(kelvin[index])) == whole[index]
    assert curve.values(kelvin[::-1]).tobytes() == whole[::-1].tobytes()
    assert curve.values(kelvin[1::3]).tobytes() == whole[1::3].tobytes()
    assert curve.values(kelvin.reshape(100, 200).T).tobytes() == whole.reshape(100, 200).T.tobytes()


@pytest.mark.parametrize("form", FORMS)
def test_rates_of_scalar_and_array_agree_bit_for_bit(form):
    """The derivative has the same bits alone and in any array."""
    curve = sample_curve(form)
    kelvin = np.random.default_rng(zlib.crc32(form.encode())).uniform(*curve.window, 2_000)
    whole = curve.rates(kelvin)
    assert np.isfinite(whole).all()
    assert all(curve.rates(kelvin[i : i + 1])[0] == whole[i] for i in range(0, 2_000, 19))
    assert curve.rates(kelvin[::-2]).tobytes() == whole[::-2].tobytes()


@pytest.mark.parametrize("form", FORMS)
def test_shape_is_kept(form):
    """The result has the shape of the temperatures, down to none at all."""
    curve = sample_curve(form)
    middle = 0.5 * (curve.window[0] + curve.window[1])
    for shape in ((), (0,), (1,), (2, 3), (0, 4)):
        assert curve.values(np.full(shape, middle)).shape == shape
        assert curve.rates(np.full(shape, middle)).shape == shape


@pytest.mark.parametrize("form", FORMS)
def test_input_is_left_alone(form):
    """Evaluating writes nothing into the caller's array, even a read-only one."""
    curve = sample_curve(form)
    kelvin = grid_of(curve)
    kelvin.flags.writeable = False
    before = kelvin.tobytes()
    curve.values(kelvin)
    curve.rates(kelvin)
    assert kelvin.tobytes() == before


MELTING = [pytest.param(key, id=key) for key, record in CORRELATIONS.items() if record.property == "melting-pressure"]


@pytest.mark.parametrize("key", MELTING)
def test_melting_value_close_to_its_reference_point(key):
    """Within 1e-6 K of the reference temperature the pressure still has its twelve digits."""
    record = CORRELATIONS[key]
    curve, reference = own_curve(key), reference_of(record)
    start = double(record.coefficients.get("T0", record.coefficients.get("Tt", record.window_min)))
    sides = (1, -1) if record.form != "kechin" else (1,)
    steps = [side * 10.0**power for power in range(-13, -5) for side in sides]
    grid = np.array([start, *(start + step for step in steps)])
    assert_values_agree(curve, reference, grid)


def test_clapeyron_value_close_to_its_reference_point():
    """The melting line of constant enthalpy and volume keeps its digits near its reference point too."""
    for row in WORKED:
        if row["form"] == "clapeyron-melting":
            record = worked_record(row)
            start = double(record.coefficients["T0"])
            grid = np.array([start + side * 10.0**power for power in range(-13, -5) for side in (1, -1)])
            assert_values_agree(Curve.of(record, 1.0), reference_of(record), grid)


def native(kelvin: mpf, unit: str) -> mpf:
    """A kelvin temperature in a printed unit, exact."""
    return kelvin / exact(UNITS[unit].factor) - exact(UNITS[unit].shift)


def restate_antoine(c: dict[str, mpf], old: str, new: str, sign: int) -> dict[str, mpf]:
    """Antoine constants in another temperature unit: the pole moves, B stretches."""
    stretch = exact(UNITS[old].factor / UNITS[new].factor)
    pole = (-sign * c["C"] + exact(UNITS[old].shift)) * exact(UNITS[old].factor)
    return {"A": c["A"], "B": c["B"] * stretch, "C": -sign * native(pole, new)}


def restate_magnus(c: dict[str, mpf], old: str, new: str) -> dict[str, mpf]:
    """Magnus' constants with another zero of temperature."""
    antoine = restate_antoine({"A": mp.log(c["p0"]) + c["a"], "B": c["a"] * c["b"], "C": c["b"]}, old, new, 1)
    a = antoine["B"] / antoine["C"]
    return {"p0": mp.exp(antoine["A"] - a), "a": a, "b": antoine["C"]}


def restate_clausius(c: dict[str, mpf], old: str, new: str) -> dict[str, mpf]:
    kelvin = (c["T0"] + exact(UNITS[old].shift)) * exact(UNITS[old].factor)
    return {"T0": native(kelvin, new), "p0": c["p0"], "H": c["H"]}


def restate_riedel(c: dict[str, mpf], old: str, new: str) -> dict[str, mpf]:
    r = exact(UNITS[old].factor / UNITS[new].factor)
    return {
        "C1": c["C1"] - c["C3"] * mp.log(r), "C2": c["C2"] * r, "C3": c["C3"],
        "C4": c["C4"] / r ** c["C5"], "C5": c["C5"],
    }  # fmt: skip


RESTATE = {
    "antoine-log10": lambda c, old, new: restate_antoine(c, old, new, 1),
    "antoine-log10-minus": lambda c, old, new: restate_antoine(c, old, new, -1),
    "antoine-ln": lambda c, old, new: restate_antoine(c, old, new, 1),
    "antoine-ln-minus": lambda c, old, new: restate_antoine(c, old, new, -1),
    "magnus": restate_magnus,
    "clausius-clapeyron": restate_clausius,
    "riedel": restate_riedel,
}
RESTATED = [
    (form, unit)
    for form in RESTATE
    for unit in ("K", "degC", "degF", "degR")
    if not (FORMS[form].absolute and unit in ("degC", "degF"))
]


def restated_record(form: str, unit: str) -> Correlation:
    """The sample of a form, its constants rewritten for another temperature unit."""
    record, _ = SAMPLES[form]
    old = {name: mpf(double(text)) for name, text in record.coefficients.items()}
    new = RESTATE[form](old, record.temperature_unit, unit)
    texts = {name: mpmath.nstr(value, 25, strip_zeros=False) for name, value in new.items()}
    return dataclasses.replace(record, coefficients=texts, temperature_unit=unit)


@pytest.mark.parametrize(("form", "unit"), RESTATED)
def test_other_temperature_units_agree_with_50_digits(form, unit):
    """Value and derivative are per kelvin whatever unit of temperature the source prints."""
    record = restated_record(form, unit)
    curve = on_own_scale(Curve.of(record, 1.0))
    reference = reference_of(record)
    assert_values_agree(curve, reference, grid_of(curve))
    assert_rates_agree(curve, reference, grid_of(curve))


@pytest.mark.parametrize(("form", "unit"), RESTATED)
def test_same_curve_in_another_unit_gives_the_same_pressures(form, unit):
    """A published set rewritten in another temperature unit answers as the original does."""
    original = sample_curve(form)
    restated = on_own_scale(Curve.of(restated_record(form, unit), 1.0))
    grid = grid_of(original)
    np.testing.assert_allclose(restated.values(grid), original.values(grid), rtol=1e-12, atol=0.0)
    np.testing.assert_allclose(restated.rates(grid), original.rates(grid), rtol=1e-12, atol=0.0)


@pytest.mark.parametrize("form", [form for form in FORMS if FORMS[form].absolute])
def test_absolute_forms_in_rankine_agree_with_50_digits(form):
    """The printed numbers read in degR: the arithmetic of the form does not change, its temperature does."""
    record, mass = SAMPLES[form]
    low, high = map(repr, record.window_kelvin())
    record = dataclasses.replace(record, temperature_unit="degR", window_unit="degR", window_min=low, window_max=high)
    curve = on_own_scale(Curve.of(record, mass))
    # inside the ends: 1.8 T may round to a bit beyond the critical temperature
    grid = grid_of(curve)[1:-1]
    reference = reference_of(record, mass)
    assert_values_agree(curve, reference, grid)
    for kelvin, found in zip(grid, curve.rates(grid), strict=True):
        assert error_of(found, mpmath.diff(reference, mpf(float(kelvin)))) <= CLOSE


@pytest.mark.parametrize("power", ["-2", "0", "0.5", "1", "1.5", "3", "6", "7", "18"])
def test_riedel_with_any_power(power):
    """Riedel's last term takes any power, not only the few that multiplication serves.

    Acetone of Perry's Table 2-8 with its last term redistributed; the
    arithmetic counts here, not the pressures.
    """
    record = CORRELATIONS["acetone-perry-8"]
    c = {name: mpf(double(text)) for name, text in record.coefficients.items()}
    last = mpmath.nstr(c["C4"] * mpf(500) ** (c["C5"] - mpf(power)), 17, min_fixed=0, max_fixed=0)
    record = dataclasses.replace(record, coefficients={**record.coefficients, "C4": last, "C5": power})
    curve = Curve.of(record, 1.0)
    grid = grid_of(curve)
    assert_values_agree(curve, reference_of(record), grid)
    assert_rates_agree(curve, reference_of(record), grid)
    assert [curve.value(float(kelvin)) for kelvin in grid] == list(curve.values(grid))


SERIES = [form for form in FORMS if FORMS[form].coefficients.series == ("n", "t")]


@pytest.mark.parametrize("form", SERIES)
def test_order_of_printed_terms_does_not_matter(form):
    """The terms of a sum may be printed in any order: pressures agree to 1e-13, densities too."""
    record, mass = SAMPLES[form]
    c = record.coefficients
    count = sum(name.startswith("n") for name in c)
    assert count > 1
    turned = {f"{stem}{count + 1 - i}": c[f"{stem}{i}"] for stem in "nt" for i in range(1, count + 1)}
    other = on_own_scale(Curve.of(dataclasses.replace(record, coefficients={**c, **turned}), mass))
    grid = grid_of(other)[:-1]
    np.testing.assert_allclose(other.values(grid), sample_curve(form).values(grid), rtol=1e-13, atol=0.0)
    np.testing.assert_allclose(other.rates(grid), sample_curve(form).rates(grid), rtol=1e-12, atol=0.0)


def test_fahrenheit_is_refused_where_the_form_counts_from_absolute_zero():
    """A form with ln T or 1/T alone cannot be recorded in degC or degF."""
    for form in FORMS:
        if FORMS[form].absolute:
            record, _ = SAMPLES[form]
            for unit in ("degC", "degF"):
                with pytest.raises(ValueError, match="the form counts from absolute zero: K or degR"):
                    dataclasses.replace(record, temperature_unit=unit)


def test_molar_mass_of_the_compound_serves_where_the_source_prints_none():
    """A molar density without M becomes kg/m3 with the compound's molar mass, to the same bits."""
    row = next(row for row in WORKED if row["form"] == "rackett")
    record = worked_record(row)
    without = dataclasses.replace(record, coefficients={k: v for k, v in record.coefficients.items() if k != "M"})
    grid = grid_of(Curve.of(record, 1.0))
    mass = double(record.coefficients["M"])
    assert Curve.of(without, mass).values(grid).tobytes() == Curve.of(record, 1.0).values(grid).tobytes()


@pytest.mark.parametrize("form", FORMS)
def test_window_that_is_too_wide_is_cut_to_where_the_form_answers(form):
    """Whatever window is printed, both ends of the curve's window have a value: never NaN inside coverage."""
    record, mass = SAMPLES[form]
    wide = dataclasses.replace(record, window_min="0.001", window_max="99999", window_unit="K")
    curve = on_own_scale(Curve.of(wide, mass))
    assert not np.isnan(curve.values(np.array(curve.window))).any()


def test_pole_of_antoine_bounds_its_window():
    """A window that runs through the pole T = -C is cut there: no value beyond it."""
    record = dataclasses.replace(CORRELATIONS["water-antoine-1-100"], window_min="-270")
    low, _ = own_curve("water-antoine-1-100").window
    cut, _ = Curve.of(record, 1.0).window
    # water, C = 233.426 degC: the pole lies at -233.426 degC = 39.724 K
    assert low == 274.15
    assert 39.724 - 1e-9 < cut < 39.724 + 1e-9
    assert Curve.of(record, 1.0).value(cut) >= 0.0


def test_kechin_curve_ends_at_its_maximum():
    """Beyond its maximum Kechin's curve has no melting temperature, and below T0 none either.

    F. Datchi, P. Loubeyre, R. LeToullec, Phys. Rev. B 61, 6535 (2000) state
    the maximum of the hydrogen melting curve as 1100 K at 128 GPa.
    """
    record = dataclasses.replace(CORRELATIONS["hydrogen-normal-melting-datchi-2000"], window_min="1", window_max="2000")
    curve = Curve.of(record, 1.0)
    low, high = curve.window
    assert low == 14.025
    assert high == pytest.approx(1100.0, rel=1e-3)
    assert curve.value(high * (1.0 - 1e-12)) == pytest.approx(128e9, rel=1e-3)
    assert math.isnan(curve.value(high + 1e-6))


def test_lower_root_of_frost_kalkwarf_thodos():
    """The lower of the two roots answers: the other one is no vapour pressure."""
    record = CORRELATIONS["ammonia-reid-4"]
    c = {name: double(text) for name, text in record.coefficients.items()}
    curve = own_curve("ammonia-reid-4")
    for kelvin in grid_of(curve):
        printed = curve.value(float(kelvin)) / float(UNITS[record.value_unit].factor)
        # left of the maximum of ln p - D p/T^2 lies the lower root
        assert printed < kelvin**2 / c["D"]
