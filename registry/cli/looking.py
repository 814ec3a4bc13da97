"""`lookup`: the value at a temperature, or why there is none."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any

import typer

from registry.cli.options import (
    AsOfOption,
    DraftsOption,
    EditionOption,
    JsonOption,
    LibraryOption,
    MetastableOption,
    PhaseOption,
    PropertyOption,
    look_at,
    open_chosen,
)
from registry.cli.screen import complain, print_json
from registry.errors import BadQuantity, GaugePressure, Refused

if TYPE_CHECKING:
    from registry.answers import Answer, Refusal
    from registry.cli.temperatures import Asked
    from registry.coverage import Coverage

REFUSED = 3
"""Exit code when a temperature was refused."""


def lookup(
    compound: Annotated[str, typer.Argument(help="Key, name, CAS number or formula.")],
    temperatures: Annotated[
        list[str], typer.Argument(metavar="TEMPERATURE...", help="298.15K, 25C, 77F, 536.67R; - reads stdin.")
    ],
    prop: PropertyOption = "vapor-pressure",
    phase: PhaseOption = "",
    unit: Annotated[str, typer.Option("--unit", "-u", help="Unit of the value.", show_default=False)] = "",
    atmosphere: Annotated[
        str, typer.Option("--atmosphere", help="Local atmosphere, for gauge units.", show_default=False)
    ] = "",
    metastable: MetastableOption = False,
    drafts: DraftsOption = False,
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    why: Annotated[bool, typer.Option("--why", help="Every candidate with its verdict.")] = False,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Look up a value at one or more temperatures.

    The correlation that covers each temperature best answers; where none may, the refusal says why (exit code 3).

    Example: rangebook lookup water 25C 100C --unit mmHg
    """
    from registry.answers import Answer
    from registry.cli.answer_text import print_answers
    from registry.cli.temperatures import read_temperatures

    asked = read_temperatures(temperatures)
    with open_chosen(library) as book:
        to = _choose_unit(unit, atmosphere, prop)
        past, label = look_at(book, edition, as_of)
        coverage = past.coverage(compound, property=prop, phase=phase or None, metastable=metastable, drafts=drafts)
        # all at the one position that this coverage was read at
        found = [(one, _answer(coverage, one)) for one in asked]
        refusals = [result for _, result in found if not isinstance(result, Answer)]
        if as_json:
            print_json(_describe(coverage, label, found, to))
        else:
            print_answers(coverage, label, found, to, why)
            for refusal in refusals:
                complain(f"Refused ({refusal.reason}): {refusal.explanation}")
    if refusals:
        raise typer.Exit(REFUSED)


def _answer(coverage: Coverage, asked: Asked) -> Answer | Refusal:
    from registry.reader import answer_one

    try:
        return answer_one(coverage, asked.kelvin)
    except Refused as error:
        return error.refusal


def _choose_unit(unit: str, atmosphere: str, prop: str) -> Any:
    """The unit asked for, or None for the one that suits each value."""
    from registry.answers import find_target_unit
    from registry.properties import PROPERTIES

    if prop not in PROPERTIES:
        return None  # the library says what there is
    local = float(_read_atmosphere(atmosphere)) if atmosphere else None
    return find_target_unit(unit, PROPERTIES[prop].dimension, local) if unit else None


def _read_atmosphere(text: str) -> Any:
    from registry.quantities import parse_pressure

    text = text.replace("\u2212", "-")
    try:
        return parse_pressure(text)
    except GaugePressure:
        raise BadQuantity(text, "the local atmosphere is an absolute pressure, such as 101.325kPa.") from None


def _describe(coverage: Coverage, label: str, found: list[tuple[Asked, Answer | Refusal]], to: Any) -> dict[str, Any]:
    from registry.answers import Answer
    from registry.cli.documents import describe_answer, describe_refusal

    return {
        "compound": coverage.dossier.compound.key,
        "property": coverage.property,
        "answers": [describe_answer(result, to) for _, result in found if isinstance(result, Answer)],
        "refusals": [describe_refusal(result) for _, result in found if not isinstance(result, Answer)],
        "position": coverage.dossier.position,
        "as_of": label or None,
    }
