"""A correlation restated: what is asked, the exact numbers, their text, and how well the two agree."""

from __future__ import annotations

import dataclasses
import math
from collections.abc import Mapping
from dataclasses import dataclass
from fractions import Fraction

import numpy as np

from registry.curve import Curve
from registry.errors import BadInput, GaugePressure, quote
from registry.forms.catalogue import FORMS
from registry.forms.form import Array
from registry.numerals import parse_number, to_float
from registry.properties import PROPERTIES
from registry.quantities import UNITS, Unit, find_unit, unit_names
from registry.records import Correlation
from registry.restating.agreement import find_scale, find_steepness, measure_difference, take_curve
from registry.restating.catalogue import RULES
from registry.restating.change import Change, Impossible, Statement
from registry.restating.digits import print_exact, print_fully, print_rounded
from registry.scales import SCALES

__all__ = ["BASES", "Check", "Restatement", "restate"]

BASES = {"ln": "base e", "log10": "base 10"}
BUDGET = 5e-13
"""What all rounded coefficients together may do to the value, relative: half of what is promised."""
POINTS = 201
"""Temperatures over the window at which both are compared; they are smooth, and differ most at an end or a pole."""


@dataclass(frozen=True)
class Check:
    """One temperature at which both statements were evaluated.

    Attributes
    ----------
    temperature, recorded_temperature : str
        The temperature in the new and in the recorded unit, exact.
    value, recorded_value : float
        What the restated and the recorded correlation give, each in its unit.
    """

    temperature: str
    recorded_temperature: str
    value: float
    recorded_value: float


@dataclass(frozen=True)
class Restatement:
    """A correlation in other units or another log base.

    Attributes
    ----------
    recorded : Correlation
        As it is recorded.
    restated : Correlation
        The same with the new form, coefficients, units and window. It is no
        record: nobody printed these numbers.
    molar_mass : str
        The molar mass that the conversion took, g/mol; empty if it took none.
    remark : str
        Why the form is another one, or which units stay.
    check : Check
        A worked value.
    rounding : float
        The largest relative difference that the digits kept make, over the
        window, to first order.
    measured : float
        The largest relative difference between both as computed in double
        precision, which has its own rounding; where the last bit of T does
        more than that to the value, nothing is measured.
    revision : int
        The revision of the record, where it comes from a library.
    standing : str
        Its standing there.
    """

    recorded: Correlation
    restated: Correlation
    molar_mass: str
    remark: str
    check: Check
    rounding: float
    measured: float
    revision: int = 0
    standing: str = ""

    @property
    def key(self) -> str:
        """The key of the record."""
        return self.recorded.key


def restate(
    correlation: Correlation,
    *,
    value_unit: str | None = None,
    temperature_unit: str | None = None,
    log: str | None = None,
    molar_mass: float = math.nan,
) -> Restatement:
    """The same correlation in the units and the log base that another tool wants.

    Parameters
    ----------
    correlation : Correlation
        As recorded.
    value_unit, temperature_unit : str, optional
        The units; those recorded if none is given.
    log : str, optional
        ``ln`` or ``log10``; the form's own if none is given.
    molar_mass : float
        Molar mass of the compound, g/mol; used between a molar and a mass
        basis where the record states none of its own.

    Returns
    -------
    Restatement
        Algebraically the same, with digits enough that the value agrees to
        1e-12 over the window.

    Raises
    ------
    BadInput
        If a unit is none of the dimension, or the form cannot say it, with
        the reason.

    Notes
    -----
    The temperature scale stays the one of the record.

    Examples
    --------
    log10 p/mmHg against t/degC is ln p/kPa against T/K with A ln 10 - ln(mmHg per kPa), B ln 10 and C - 273.15:

    >>> from registry.records import Correlation
    >>> record = Correlation(
    ...     key="ethanol-example", compound="ethanol", property="vapor-pressure", phase="liquid",
    ...     form="antoine-log10", coefficients={"A": "8.20417", "B": "1642.89", "C": "230.300"},
    ...     temperature_unit="degC", value_unit="mmHg", window_min="-57", window_max="80", window_unit="degC",
    ...     window_basis="printed", temperature_scale="not-stated", evidence="compiled",
    ...     source="example", locator="Table 1", obtained="seen")
    >>> found = restate(record, value_unit="kPa", temperature_unit="K", log="ln")
    >>> dict(found.restated.ordered_coefficients())
    {'A': '16.8758144240893', 'B': '3782.89402342899', 'C': '-42.850'}
    >>> found.restated.window_min, found.restated.window_max
    ('216.15', '353.15')
    """
    if log is not None and log not in BASES:
        raise BadInput(f"log {quote(log)} given; {' or '.join(BASES)} is allowed.")
    if value_unit is temperature_unit is log is None:
        raise BadInput(
            f"Say what {correlation.key} is to be restated in: a unit of the value (--pressure, --value), "
            "of temperature (--temperature), or a log base (--log)."
        )
    units = (
        _choose_unit(value_unit, correlation.value_unit, PROPERTIES[correlation.property].dimension),
        _choose_unit(temperature_unit, correlation.temperature_unit, "temperature"),
    )
    mass = _find_mass(correlation, units[0], molar_mass)
    change = _build_change(correlation, units, log or "", mass)
    statement = _apply(correlation, change, units)
    _require_zero(correlation, change, units[1])
    return _word(correlation, statement, change, units, mass, temperature_unit is not None)


def _choose_unit(asked: str | None, recorded: str, dimension: str) -> Unit:
    if asked is None:
        return UNITS[recorded]
    try:
        return find_unit(asked, dimension)
    except GaugePressure:
        allowed = ", ".join(unit_names("pressure"))
        raise BadInput(
            f"{quote(asked)} is a gauge unit; a correlation gives absolute pressures. One of {allowed} is allowed."
        ) from None


def _find_mass(record: Correlation, unit: Unit, molar_mass: float) -> str:
    """The molar mass that lies between both units, as text; empty where none does."""
    if unit.per_molar_mass == UNITS[record.value_unit].per_molar_mass:
        return ""
    if "M" in record.coefficients:
        return record.coefficients["M"]
    if not molar_mass > 0.0:
        raise BadInput(f"{record.key} is in {record.value_unit}; in {unit.name} it needs the molar mass, g/mol.")
    return repr(molar_mass)


def _build_change(record: Correlation, units: tuple[Unit, Unit], log: str, mass: str) -> Change:
    old, old_t = UNITS[record.value_unit], UNITS[record.temperature_unit]
    new, new_t = units
    factor = old.factor / new.factor
    if mass:
        factor = factor * parse_number(mass) if old.per_molar_mass else factor / parse_number(mass)
    return Change(factor, old_t.factor, new_t.factor, old_t.shift, new_t.shift, log)


def _require_zero(record: Correlation, change: Change, unit: Unit) -> None:
    """A scale that only moves the zero of kelvin is no scale of degC: 0.01 K would be lost between them."""
    if change.moves_zero and SCALES[record.temperature_scale].absolute:
        raise BadInput(
            f"{record.key} cannot be restated in {unit.name}: it stands on {record.temperature_scale}, which is about "
            f"the zero of kelvin; a unit with the zero of {record.temperature_unit} is allowed."
        )


def _apply(record: Correlation, change: Change, units: tuple[Unit, Unit]) -> Statement:
    form, rule = FORMS[record.form], RULES[record.form]
    if form.value_unit and units[0].name != form.value_unit:
        raise _refuse(record, units[0].name, f"gives {form.value_unit} and no other unit.")
    if change.base and not rule.base:
        raise _refuse(record, change.base, f"takes no logarithm of the value ({form.equation}).")
    numbers = {name: parse_number(text) for name, text in record.coefficients.items()}
    try:
        return rule.apply(numbers, change)
    except Impossible as error:
        if error.cause == "zero":
            why = f"counts from absolute zero ({form.equation}); K or degR is allowed."
            raise _refuse(record, units[1].name, why) from None
        why = f"is written to {BASES[rule.base]}, and the catalogue has no form that holds its terms to the other."
        raise _refuse(record, change.base, why) from None
    except ArithmeticError:
        asked = f"{units[0].name} and {units[1].name}"
        raise _refuse(record, asked, "gives no number with its coefficients.") from None


def _refuse(record: Correlation, asked: str, why: str) -> BadInput:
    return BadInput(f"{record.key} cannot be restated in {asked}: {FORMS[record.form].title} ({record.form}) {why}")


def _word(
    record: Correlation, statement: Statement, change: Change, units: tuple[Unit, Unit], mass: str, moved: bool
) -> Restatement:
    draft = dataclasses.replace(
        record, form=statement.form, value_unit=units[0].name, temperature_unit=units[1].name,
        coefficients={name: print_fully(value) for name, value in statement.coefficients.items()},
        **(_move_window(record, units[1]) if moved else {}),
    )  # fmt: skip
    molar_mass = to_float(mass) if mass else 1.0
    old = take_curve(record, molar_mass)
    kelvin = np.linspace(*old.window, POINTS)
    texts, rounding = _print_coefficients(draft, record, statement.coefficients, change, kelvin, molar_mass)
    restated = dataclasses.replace(draft, coefficients=texts)
    new = take_curve(restated, molar_mass)
    check = _check(record, restated, old, new, molar_mass)
    return Restatement(record, restated, mass, statement.remark, check, rounding, measure_difference(old, new, kelvin))


def _move_window(record: Correlation, target: Unit) -> dict[str, str]:
    unit = UNITS[record.window_unit]
    moved = {"window_unit": target.name}
    for name in ("window_min", "window_max"):
        text = getattr(record, name)
        exact = unit.to_si(parse_number(text)) / target.factor - target.shift
        source = text if unit.name == target.name else ""
        moved[name] = print_exact(exact, source, ratio=True) or print_rounded(exact, 1e-20)
    return moved


def _print_coefficients(
    draft: Correlation, record: Correlation, exact: Mapping[str, Fraction], change: Change, kelvin: Array, mass: float
) -> tuple[dict[str, str], float]:
    """The coefficients as text, and what their digits do to the value."""
    sources = {name: record.coefficients.get(name, "") for name in exact}
    texts = {
        name: print_exact(value, sources[name], ratio=_is_temperature(value, sources[name], change))
        for name, value in exact.items()
    }
    open_names = [name for name, text in texts.items() if not text]
    total = np.zeros_like(kelvin)
    for name in open_names:
        steepness = find_steepness(draft, name, kelvin, mass)
        worst = float(np.max(steepness))
        unit = 2.0 * BUDGET / len(open_names) / worst if worst else math.inf
        texts[name] = print_rounded(exact[name], unit, sources[name])
        total += steepness * abs(float(parse_number(texts[name]) - exact[name]))
    return texts, float(np.max(total))


def _is_temperature(exact: Fraction, source: str, change: Change) -> bool:
    """True for a reference temperature: a power of the distance to it forgives no rounding."""
    return bool(source) and exact == change.temperature(parse_number(source))


def _check(record: Correlation, restated: Correlation, old: Curve, new: Curve, molar_mass: float) -> Check:
    unit, recorded = UNITS[restated.temperature_unit], UNITS[record.temperature_unit]
    exact = _choose_temperature(old.window, unit)
    kelvin = unit.to_si(exact)
    before = print_exact(kelvin / recorded.factor - recorded.shift, ratio=True)
    values = [
        curve.value(float(kelvin)) / find_scale(each, molar_mass) for curve, each in ((new, restated), (old, record))
    ]
    return Check(print_exact(exact), before, *values)


def _choose_temperature(window: tuple[float, float], unit: Unit) -> Fraction:
    """25 degC if the window holds it, else a round temperature near its middle, in the new unit."""
    low, high = (unit.from_si(bound) for bound in window)
    usual = Fraction("298.15") / unit.factor - unit.shift
    if low <= usual <= high:
        return usual
    step = Fraction(10) ** math.floor(math.log10((high - low) / 2.0))
    return round(Fraction(low + high) / 2 / step) * step
