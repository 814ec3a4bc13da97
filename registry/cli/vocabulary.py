"""`forms`: the equation forms that a correlation may have."""

from __future__ import annotations

from typing import Annotated, Any

import typer

from registry.cli.options import JsonOption
from registry.cli.screen import emphasize, print_facts, print_json, print_table, say
from registry.errors import UnknownKey


def forms(
    name: Annotated[str, typer.Argument(metavar="[NAME]", help="A form, or part of a name.")] = "",
    as_json: JsonOption = False,
) -> None:
    """List the equation forms, or tell one of them whole.

    Example: rangebook forms riedel
    """
    from registry.forms.catalogue import FORMS
    from registry.naming import nearest_names

    found = [form for form in FORMS.values() if name.casefold() in form.name]
    if not found:
        raise UnknownKey("form", name, nearest=nearest_names(name, FORMS) or list(FORMS)[:3])
    if as_json:
        print_json({"forms": [_describe(form) for form in found]})
        return
    whole = [form for form in found if form.name == name.casefold()]
    for form in whole:
        say(f"{emphasize(form.name)}: {form.title}")
        print_facts(
            (
                ("equation", form.equation),
                ("coefficients", str(form.coefficients)),
                ("for", ", ".join(form.properties)),
                ("temperature", "K or degR" if form.absolute else "any unit"),
                ("value", form.value_unit or "any unit of the property"),
                ("published", form.reference),
            )
        )
    if not whole:
        say("[ ] marks what may be left out; T, p and the coefficients are in the units that the record states.")
        say()
        print_table(("form", "equation"), [(form.name, form.equation) for form in found])


def _describe(form: Any) -> dict[str, Any]:
    return {
        "name": form.name,
        "title": form.title,
        "equation": form.equation,
        "required": list(form.coefficients.required),
        "optional": list(form.coefficients.optional),
        "numbered": list(form.coefficients.series),
        "properties": list(form.properties),
        "absolute_temperature": form.absolute,
        "value_unit": form.value_unit or None,
        "reference": form.reference,
    }
