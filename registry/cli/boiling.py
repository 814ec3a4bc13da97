"""`boil`: the temperature at a pressure, or why there is none."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated

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
    PressureOption,
    WhyOption,
    look_at,
    open_chosen,
)
from registry.cli.screen import complain, print_json
from registry.errors import Refused

if TYPE_CHECKING:
    from registry.answers import Answer
    from registry.inverse.inversion import Inversion
    from registry.inverse.refusals import InverseRefusal


def boil(
    compound: CompoundArgument,
    pressures: Annotated[
        list[str], typer.Argument(metavar="PRESSURE...", help="101.325kPa, 1atm, 760mmHg, 14.7psi; - reads stdin.")
    ],
    prop: PressureOption = "vapor-pressure",
    phase: PhaseOption = "",
    unit: Annotated[
        str, typer.Option("--unit", "-u", metavar="UNIT", help="Unit of the temperature: K, degC, degF, degR.")
    ] = "K",
    atmosphere: AtmosphereOption = "",
    metastable: MetastableOption = False,
    drafts: DraftsOption = False,
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    why: WhyOption = False,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Find the temperature at one or more pressures.

    Where a liquid boils, or with --property a solid sublimes or melts, by the correlation that covers the answer. A
    pressure that no temperature has, or several have, is refused with both sides (exit code 3).

    Example: rangebook boil water 1atm 10bar --unit degC
    """
    from registry.cli.boiling_text import describe_boiling, print_boiling
    from registry.cli.pressures import read_atmosphere, read_pressures
    from registry.inverse.inversion import Inversion
    from registry.inverse.refusals import InverseRefusal
    from registry.inverse.temperatures import require_pressure
    from registry.properties import PROPERTIES
    from registry.quantities import find_unit

    asked = read_pressures(pressures, read_atmosphere(atmosphere) if atmosphere else None)
    to = find_unit(unit, "temperature")
    with open_chosen(library) as book:
        past, label = look_at(book, edition, as_of)
        coverage = past.coverage(compound, property=prop, phase=phase or None, metastable=metastable, drafts=drafts)
        require_pressure(PROPERTIES[coverage.property])
        inversion = Inversion(coverage)
        # all at the one position that this coverage was read at
        found = [(one, _solve(inversion, one.pascal)) for one in asked]
        refusals = [result for _, result in found if isinstance(result, InverseRefusal)]
        if as_json:
            print_json(describe_boiling(coverage, label, [result for _, result in found], to))
        else:
            print_boiling(coverage, label, found, to, why)
            for refusal in refusals:
                complain(refusal.headline)
    if refusals:
        raise typer.Exit(REFUSED)


def _solve(inversion: Inversion, pascal: float) -> Answer | InverseRefusal:
    from registry.inverse.refusals import InverseRefusal
    from registry.inverse.temperatures import solve_one

    try:
        return solve_one(inversion, pascal)
    except Refused as error:
        refusal = error.refusal
    assert isinstance(refusal, InverseRefusal)
    return refusal
