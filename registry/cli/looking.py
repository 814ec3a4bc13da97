"""`lookup`: the value at a temperature, or why there is none."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any

import typer

from registry.cli.options import (
    REFUSED,
    AsOfOption,
    AtmosphereOption,
    CompoundArgument,
    DraftsOption,
    EditionOption,
    JsonOption,
    LibraryOption,
    MetastableOption,
    PhaseOption,
    PropertyOption,
    WhyOption,
    look_at,
    open_chosen,
)
from registry.cli.screen import complain, print_json
from registry.errors import Refused

if TYPE_CHECKING:
    from registry.cli.temperatures import Asked
    from registry.conditions import Conditions
    from registry.coverage import Coverage
    from registry.refusals import Refusal
    from registry.values import Value


def lookup(
    compound: CompoundArgument,
    temperatures: Annotated[
        list[str],
        typer.Argument(
            metavar="TEMPERATURE...", help="298.15K, 25C, 77F, 25+/-0.1C, '100 degC (IPTS-68)'; - reads stdin."
        ),
    ],
    prop: PropertyOption = "vapor-pressure",
    phase: PhaseOption = "",
    unit: Annotated[
        str, typer.Option("--unit", "-u", metavar="UNIT", help="Unit of the value.", show_default=False)
    ] = "",
    atmosphere: AtmosphereOption = "",
    metastable: MetastableOption = False,
    drafts: DraftsOption = False,
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    within: Annotated[
        str | None,
        typer.Option(
            "--within",
            metavar="PERCENT",
            help="Refuse what is less certain than so much (2%), or states no uncertainty.",
            show_default=False,
        ),
    ] = None,
    beyond: Annotated[
        str | None,
        typer.Option(
            "--beyond",
            metavar="KELVIN",
            help="Where nothing covers, extrapolate at most so far (5K) beyond a window; marked.",
            show_default=False,
        ),
    ] = None,
    estimate: Annotated[
        str | None,
        typer.Option(
            "--estimate",
            metavar="METHOD",
            help="Where nothing answers, estimate by lee-kesler or ambrose-walton; marked.",
            show_default=False,
        ),
    ] = None,
    why: WhyOption = False,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Look up a value at one or more temperatures.

    The correlation that covers each temperature best answers; where none may, the refusal says why (exit code 3).

    Example: rangebook lookup water 25C 100C --unit mmHg
    """
    # here rather than from within other imports: the deeper in the stack, the slower it is (12 ms more, measured)
    import numpy  # noqa: F401

    from registry.cli.answer_text import print_answers
    from registry.cli.temperatures import read_temperatures
    from registry.refusals import Refusal

    asked = read_temperatures(temperatures)
    conditions = _read_conditions(within, beyond, estimate)
    with open_chosen(library) as book:
        to = _choose_unit(unit, atmosphere, prop)
        past, label = look_at(book, edition, as_of)
        coverage = past.coverage(compound, property=prop, phase=phase or None, metastable=metastable, drafts=drafts)
        # all at the one position that this coverage was read at
        found = [(one, _answer(coverage, one, conditions)) for one in asked]
        refusals = [result for _, result in found if isinstance(result, Refusal)]
        if as_json:
            print_json(_describe(coverage, label, found, to))
        else:
            print_answers(coverage, label, found, to, why)
            for refusal in refusals:
                complain(refusal.headline)
    if refusals:
        raise typer.Exit(REFUSED)


def _answer(coverage: Coverage, asked: Asked, conditions: Conditions) -> Value | Refusal:
    from registry.answering import answer_one

    try:
        return answer_one(coverage, asked.kelvin, asked.reading, conditions)
    except Refused as error:
        return error.refusal


def _read_conditions(within: str | None, beyond: str | None, estimate: str | None) -> Conditions:
    """What was asked for by name; nothing is imported for what was not."""
    from registry.conditions import PLAIN, make_conditions

    if within is beyond is estimate is None:
        return PLAIN
    from registry.cli.amounts import read_difference, read_percent
    from registry.estimates import find_method

    return make_conditions(
        read_percent("--within", within) if within is not None else None,
        read_difference("--beyond", beyond) if beyond is not None else 0.0,
        find_method(estimate).name if estimate is not None else "",
    )


def _choose_unit(unit: str, atmosphere: str, prop: str) -> Any:
    """The unit asked for, or None for the one that suits each value."""
    from registry.properties import PROPERTIES
    from registry.values import find_target_unit

    if prop not in PROPERTIES:
        return None  # the library says what there is
    local = None
    if atmosphere:
        from registry.cli.pressures import read_atmosphere

        local = float(read_atmosphere(atmosphere))
    return find_target_unit(unit, PROPERTIES[prop].dimension, local) if unit else None


def _describe(coverage: Coverage, label: str, found: list[tuple[Asked, Value | Refusal]], to: Any) -> dict[str, Any]:
    from registry.cli.documents import describe_refusal, describe_value
    from registry.refusals import Refusal

    return {
        "compound": coverage.dossier.compound.key,
        "property": coverage.property,
        "answers": [describe_value(result, to) for _, result in found if not isinstance(result, Refusal)],
        "refusals": [describe_refusal(result) for _, result in found if isinstance(result, Refusal)],
        "position": coverage.dossier.position,
        "as_of": label or None,
    }
