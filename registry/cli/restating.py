"""`restate`: a correlation in the units and the log base that another tool wants."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any

import typer

from registry.cli.options import AsOfOption, EditionOption, JsonOption, LibraryOption, look_at, open_chosen
from registry.cli.screen import emphasize, name_past, print_facts, print_json, say
from registry.errors import BadInput
from registry.numerals import to_float

if TYPE_CHECKING:
    from registry.records import Correlation
    from registry.restating.restatement import Restatement


def restate(
    key: Annotated[str, typer.Argument(metavar="KEY", help="Key of a correlation.")],
    pressure: Annotated[
        str | None,
        typer.Option("--pressure", metavar="UNIT", help="Unit of the pressure, such as kPa.", show_default=False),
    ] = None,
    value: Annotated[
        str | None,
        typer.Option(
            "--value", metavar="UNIT", help="The same for what is no pressure: kg/m3, kJ/mol.", show_default=False
        ),
    ] = None,
    temperature: Annotated[
        str | None,
        typer.Option(
            "--temperature", metavar="UNIT", help="Unit of the temperature: K, degC, degF or degR.", show_default=False
        ),
    ] = None,
    log: Annotated[
        str | None,
        typer.Option("--log", metavar="BASE", help="Base of the logarithm: ln or log10.", show_default=False),
    ] = None,
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Write a correlation in the units and log base that another tool wants.

    It is the same equation, with digits enough for 1e-12 of its values. What its form cannot express is refused with
    the reason (exit code 2). Nothing is recorded.

    Example: rangebook restate water-antoine-1-100 --pressure kPa --temperature K --log ln
    """
    if pressure is not None and value is not None:
        raise BadInput("Both --pressure and --value were given. Give one of them.")
    with open_chosen(library) as opened:
        book, label = look_at(opened, edition, as_of)
        unit = pressure if value is None else value
        found = book.restate(key, value_unit=unit, temperature_unit=temperature, log=log)
        citation = book.source_citation(found.recorded.source)
        position = book.position
    if as_json:
        print_json({**_describe(found, citation), "position": position, "as_of": label or None})
    else:
        _print_restatement(found, citation, label)


def _print_restatement(found: Restatement, citation: str, label: str) -> None:
    from registry.forms.catalogue import FORMS
    from registry.grounds import word_locator

    record, new = found.recorded, found.restated
    form = FORMS[new.form]
    say(f"{emphasize(found.key)} restated: {record.property} of {record.compound}, {record.phase}{name_past(label)}")
    print_facts(
        [
            ("equation", form.equation),
            ("form", f"{form.name} ({form.title})"),
            ("units", f"T in {new.temperature_unit}, value in {new.value_unit}"),
        ]
    )
    say()
    _print_coefficients(found)
    say()
    print_facts(
        [
            ("remark", found.remark),
            ("molar mass", f"{found.molar_mass} g/mol lies between the units" if found.molar_mass else ""),
            (
                "window",
                f"{_word_exact(new.window_min)} to {_word_exact(new.window_max)} {new.window_unit} "
                f"({new.window_basis})",
            ),
            ("scale", f"{record.temperature_scale}, as recorded; a temperature scale is never converted"),
            ("check", _word_check(found)),
            ("agreement", _word_agreement(found)),
            ("source", f"{citation}; {word_locator(record.locator)}"),
            (
                "restated",
                f"from {found.key}, revision {found.revision}, {found.standing}, which has {record.form}, "
                f"T in {record.temperature_unit}, value in {record.value_unit}; nothing was recorded",
            ),
            *(("caution", caution) for caution in _find_cautions(found)),
        ]
    )


def _find_cautions(found: Restatement) -> list[str]:
    """What to know before the numbers go into another tool."""
    cautions = []
    if found.standing != "accepted":
        cautions.append(f"The correlation is {found.standing}, not accepted.")
    if found.recorded.obtained == "memory":
        cautions.append("The coefficients are from memory.")
    return cautions


def _print_coefficients(found: Restatement) -> None:
    pairs = found.restated.ordered_coefficients()
    width = max(len(name) for name, _ in pairs)
    for name, text in pairs:
        say(f"    {name.ljust(width)} = {'' if text.startswith('-') else ' '}{text}")


def _word_exact(text: str) -> str:
    """A number as it is, a fraction also as a decimal."""
    return f"{text} ({to_float(text):.9g})" if "/" in text else text


def _word_check(found: Restatement) -> str:
    check = found.check
    new = _word_value(found.restated, check.temperature, check.value)
    return f"{new}; as recorded, {_word_value(found.recorded, check.recorded_temperature, check.recorded_value)}"


def _word_value(record: Correlation, temperature: str, value: float) -> str:
    return f"at {_word_exact(temperature)} {record.temperature_unit}: {value:.11g} {record.value_unit}"


def _word_agreement(found: Restatement) -> str:
    digits = f"the digits kept change the value by {found.rounding:.1e} of itself at most"
    if not found.rounding:
        digits = "every coefficient is exact"
    if not found.measured:
        return f"{digits}; both in double precision agree to the last bit, over the window"
    return f"{digits}; both in double precision differ by {found.measured:.1e} at most, over the window"


def _describe(found: Restatement, citation: str) -> dict[str, Any]:
    from registry.forms.catalogue import FORMS

    record, new, check = found.recorded, found.restated, found.check
    return {
        "correlation": found.key,
        "revision": found.revision,
        "standing": found.standing,
        "compound": record.compound,
        "property": record.property,
        "phase": record.phase,
        "form": new.form,
        "equation": FORMS[new.form].equation,
        "coefficients": dict(new.ordered_coefficients()),
        "temperature_unit": new.temperature_unit,
        "value_unit": new.value_unit,
        "window_min": new.window_min,
        "window_max": new.window_max,
        "window_unit": new.window_unit,
        "temperature_scale": record.temperature_scale,
        "remark": found.remark or None,
        "molar_mass_g_per_mol": found.molar_mass or None,
        "check": {
            "temperature": check.temperature,
            "value": check.value,
            "recorded_temperature": check.recorded_temperature,
            "recorded_value": check.recorded_value,
        },
        "largest_difference_by_digits": found.rounding,
        "largest_difference_in_doubles": found.measured,
        "recorded": {
            "form": record.form,
            "coefficients": dict(record.ordered_coefficients()),
            "temperature_unit": record.temperature_unit,
            "value_unit": record.value_unit,
        },
        "obtained": record.obtained,
        "source": {"key": record.source, "citation": citation, "locator": record.locator},
        "cautions": _find_cautions(found),
    }
