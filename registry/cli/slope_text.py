"""Slopes and enthalpies as a person reads them, and as JSON."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from registry.cli.documents import describe_reading
from registry.cli.screen import CAUTION, emphasize, name_mark, name_past, print_facts, print_table, say, wrap
from registry.cli.temperatures import Asked
from registry.display import format_number, format_percent, format_plain, suit_unit
from registry.equilibrium.boundary import PhaseBoundary
from registry.equilibrium.clapeyron import WATSON_EXPONENT
from registry.equilibrium.saturation import Saturation
from registry.equilibrium.volumes import Choice
from registry.quantities import UNITS, Unit, convert

__all__ = ["describe_saturation", "print_saturations"]

_TITLES = {
    "vapor-pressure": "slope of the vapour pressure, enthalpy of vaporization",
    "sublimation-pressure": "slope of the sublimation pressure, enthalpy of sublimation",
    "melting-pressure": "slope of the melting pressure",
}
_SI_ENERGY = UNITS["J/mol"]
_SI_PRESSURE = UNITS["Pa"]

Told = Sequence[tuple[Asked, Saturation]]


def print_saturations(boundary: PhaseBoundary, label: str, told: Told, to: Unit | None, energy: Unit) -> None:
    """A table of slopes and enthalpies, then what was used for them, once for each set of methods."""
    if not told:
        return
    name = boundary.coverage.dossier.compound.record.name
    say(emphasize(f"{name}: {_TITLES[boundary.coverage.property]}{name_past(label)}"))
    say()
    # the one unit that suits the highest of them, so that a column can be compared
    unit = to or suit_unit(max((s.pressure for _, s in told), key=abs), _SI_PRESSURE)
    (_print_melting if boundary.melts else _print_vapour)(told, unit, energy)
    groups: dict[tuple[str, ...], list[tuple[Asked, Saturation]]] = {}
    for asked, one in told:
        groups.setdefault(_methods(one), []).append((asked, one))
    for group in groups.values():
        say()
        _print_grounds(group, energy)
    say()
    say(wrap(CAUTION, 0))


def _methods(one: Saturation) -> tuple[str, ...]:
    """What tells one story from another."""
    return one.answer.correlation.key, one.vapour.method, one.condensed.method


def _print_vapour(told: Told, unit: Unit, energy: Unit) -> None:
    rows = [
        [*_start(asked, one, unit), _energy(one, one.enthalpy, energy), _energy(one, one.ideal_enthalpy, energy),
         _round(one.compressibility_change, 4), _name_method(one)]
        for asked, one in told
    ]  # fmt: skip
    headers = [*_headers(unit), f"dH, {energy.name}", "ideal gas", "dZ", "dH by"]
    _print_narrow(headers, rows, "Clapeyron", 1)


def _print_melting(told: Told, unit: Unit, energy: Unit) -> None:
    rows = [
        [*_start(asked, one, unit), _round(one.enthalpy_per_volume / 1e6, 5), _energy(one, one.enthalpy, energy),
         _name_method(one)]
        for asked, one in told
    ]  # fmt: skip
    headers = [*_headers(unit), "dH/dV, J/cm3", f"dH, {energy.name}", "dH by"]
    _print_narrow(headers, rows, "none", 2)


def _print_narrow(headers: list[str], rows: list[list[str]], usual: str, spare: int) -> None:
    """A table; where the last column says the usual in every row, the spare last columns are left out."""
    if all(row[-1] == usual for row in rows):
        headers, rows = headers[:-spare], [row[:-spare] for row in rows]
    print_table(headers, rows, right=(True,) * (len(headers) - 1) + (headers[-1] != "dH by",))


def _headers(unit: Unit) -> list[str]:
    return ["asked", "is", f"p, {unit.name}", f"dp/dT, {unit.name}/K", "per K"]


def _start(asked: Asked, one: Saturation, unit: Unit) -> list[str]:
    pressure, slope = (convert(value, _SI_PRESSURE, unit) for value in (one.pressure, one.slope))
    return [
        asked.text, f"{format_plain(one.temperature)} K", format_number(pressure), format_number(slope),
        format_percent(one.percent_per_kelvin, "+"),
    ]  # fmt: skip


def _energy(one: Saturation, value: float | None, unit: Unit) -> str:
    return "not known" if value is None else _round(convert(value, _SI_ENERGY, unit, one.answer.grams_per_mole), 4)


def _round(value: float | None, digits: int) -> str:
    return "not known" if value is None else format_number(value, digits)


def _name_method(one: Saturation) -> str:
    """What gave the enthalpy, in a word; with the mark of a draft."""
    return (one.method.split(" from ")[0].split(":")[0] or "none") + name_mark(one.answer.mark)


def _print_grounds(group: Told, energy: Unit) -> None:
    """The correlation and the methods, with volumes at the first of the temperatures they served."""
    asked, one = group[0]
    where = f" at {asked.text}" if len(group) > 1 else ""
    record = one.answer.correlation
    methods = dict.fromkeys(_word_method(each) for _, each in group)
    cautions = dict.fromkeys(caution for _, each in group for caution in each.cautions)
    say(f"  {emphasize(record.key)}, revision {one.answer.revision}, {one.answer.standing}")
    print_facts(
        (
            *(("enthalpy", method) for method in methods),
            ("vapour", _word_vapour(one, where)),
            (_name_condensed(one), _word_choice(one.condensed) + _word_volume(one.condensed_volume, where)),
            ("constants", ", ".join(one.fixed_points)),
            ("compare", _word_correlated(one, energy, where)),
            *(("caution", caution) for caution in cautions),
        ),
        indent=4,
    )


def _word_method(one: Saturation) -> str:
    if one.boundary.melts:
        return one.method or "not stated in the record; dH/dV is T dp/dT"
    if one.carried_from is None:
        return "Clapeyron: dH = T dV dp/dT" if one.method else ""
    start = f"{one.carried_from:.1f} K"
    return (
        f"above {start}, up to where the truncated virial series holds: Watson's relation, exponent {WATSON_EXPONENT}"
    )


def _name_condensed(one: Saturation) -> str:
    return "solid" if one.answer.property == "sublimation-pressure" else "liquid"


def _word_vapour(one: Saturation, where: str) -> str:
    text = _word_choice(one.vapour)
    if one.carried_from is not None:
        return f"{text}, up to {one.carried_from:.1f} K" + _word_volume(one.vapour_volume, f"{where}, from dH")
    text += _word_volume(one.vapour_volume, where)
    return text if one.second_virial is None else f"{text}, B {1e6 * one.second_virial:.5g} cm3/mol"


def _word_choice(choice: Choice) -> str:
    return f"{choice.method} ({choice.because})" if choice.because else choice.method


def _word_volume(volume: float | None, where: str) -> str:
    if not volume:
        return ""
    cubic = 1e6 * volume
    return f"; {cubic:.0f} cm3/mol{where}" if 1e4 <= cubic < 1e7 else f"; {cubic:.5g} cm3/mol{where}"


def _word_correlated(one: Saturation, energy: Unit, where: str) -> str:
    other = one.correlated
    if other is None:
        return ""
    value, percent = _energy(one, other.value, energy), other.difference_percent
    side = "above" if percent > 0 else "below"
    mark = name_mark("" if other.standing == "accepted" else other.standing)
    return f"{other.key}{mark} gives {value} {energy.name}{where}; dH lies {abs(percent):.2g} % {side}"


def describe_saturation(one: Saturation, to: Unit | None, energy: Unit) -> dict[str, Any]:
    """One temperature with all that was used, for JSON."""
    unit = to or suit_unit(one.pressure, _SI_PRESSURE)
    mass, record, other = one.answer.grams_per_mole, one.answer.correlation, one.correlated

    def as_energy(value: float | None) -> float | None:
        return None if value is None else convert(value, _SI_ENERGY, energy, mass)

    return {
        "temperature_K": one.temperature,
        **describe_reading(one.answer.reading),
        "pressure": convert(one.pressure, _SI_PRESSURE, unit),
        "slope_per_K": convert(one.slope, _SI_PRESSURE, unit),
        "unit": unit.name,
        "pressure_Pa": one.pressure,
        "slope_Pa_per_K": one.slope,
        "percent_per_kelvin": one.percent_per_kelvin,
        "enthalpy": as_energy(one.enthalpy),
        "ideal_enthalpy": as_energy(one.ideal_enthalpy),
        "energy_unit": energy.name,
        "enthalpy_J_per_mol": one.enthalpy,
        "ideal_enthalpy_J_per_mol": one.ideal_enthalpy,
        "enthalpy_per_volume_J_per_m3": one.enthalpy_per_volume,
        "method": one.method or None,
        "carried_from_K": one.carried_from,
        "vapour": {
            "method": one.vapour.method or None,
            "because": one.vapour.because or None,
            "volume_m3_per_mol": one.vapour_volume,
            "second_virial_m3_per_mol": one.second_virial,
        },
        "condensed": {
            "method": one.condensed.method or None,
            "because": one.condensed.because or None,
            "volume_m3_per_mol": one.condensed_volume,
        },
        "compressibility_change": one.compressibility_change,
        "fixed_points": list(one.fixed_points),
        "correlated": None
        if other is None
        else {
            "correlation": other.key,
            "standing": other.standing,
            "enthalpy_J_per_mol": other.value,
            "difference_percent": other.difference_percent,
        },
        "correlation": record.key,
        "revision": one.answer.revision,
        "standing": one.answer.standing,
        "mark": one.answer.mark or None,
        "cautions": list(one.cautions),
    }
