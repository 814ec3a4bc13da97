"""`slope`: how steep an equilibrium line is, and the enthalpy that goes with it."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any

import typer

from registry.cli.options import (
    REFUSED,
    AsOfOption,
    CompoundArgument,
    DraftsOption,
    EditionOption,
    JsonOption,
    LibraryOption,
    MetastableOption,
    PhaseOption,
    PressureOption,
    look_at,
    open_chosen,
)
from registry.cli.screen import complain, print_json
from registry.errors import BadQuantity, GaugePressure, Refused

if TYPE_CHECKING:
    from registry.cli.temperatures import Asked
    from registry.coverage import Coverage
    from registry.equilibrium.boundary import PhaseBoundary
    from registry.equilibrium.saturation import Saturation
    from registry.quantities import Unit
    from registry.refusals import Refusal


def slope(
    compound: CompoundArgument,
    temperatures: Annotated[
        list[str],
        typer.Argument(metavar="TEMPERATURE...", help="298.15K, 25C, 77F, '100 degC (IPTS-68)'; - reads stdin."),
    ],
    prop: PressureOption = "vapor-pressure",
    phase: PhaseOption = "",
    unit: Annotated[
        str, typer.Option("--unit", "-u", metavar="UNIT", help="Unit of the pressure.", show_default=False)
    ] = "",
    energy_unit: Annotated[str, typer.Option("--energy-unit", metavar="UNIT", help="Unit of the enthalpy.")] = "kJ/mol",
    metastable: MetastableOption = False,
    drafts: DraftsOption = False,
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Tell dp/dT along a saturation or melting line, and the enthalpy that Clapeyron's equation makes of it.

    The enthalpy is told with the real vapour and, beside it, with an ideal one; below the table stands what was used.
    Where no correlation may answer, the refusal says why (exit code 3).

    Example: rangebook slope water 100C
    """
    from registry.cli.slope_text import print_saturations
    from registry.cli.temperatures import read_temperatures
    from registry.equilibrium.boundary import PhaseBoundary
    from registry.equilibrium.saturation import Saturation
    from registry.quantities import find_unit
    from registry.refusals import Refusal

    asked = read_temperatures(temperatures)
    to, energy = _choose_pressure(unit), find_unit(energy_unit, "molar-energy")
    with open_chosen(library) as book:
        past, label = look_at(book, edition, as_of)
        coverage = past.coverage(compound, property=prop, phase=phase or None, metastable=metastable, drafts=drafts)
        boundary = PhaseBoundary(coverage)
        # all at the one position that this coverage was read at
        found = [(one, _find(boundary, one)) for one in asked]
        refusals = [result for _, result in found if isinstance(result, Refusal)]
        if as_json:
            print_json(_describe(coverage, label, found, to, energy))
        else:
            told = [(one, result) for one, result in found if isinstance(result, Saturation)]
            print_saturations(boundary, label, told, to, energy)
            for refusal in refusals:
                complain(refusal.headline)
    if refusals:
        raise typer.Exit(REFUSED)


def _choose_pressure(unit: str) -> Unit | None:
    """The unit asked for; None for one that suits the pressures."""
    from registry.quantities import find_unit

    try:
        return find_unit(unit, "pressure") if unit else None
    except GaugePressure:
        raise BadQuantity(unit, "it is a gauge unit, and a slope stands beside absolute pressures only.") from None


def _find(boundary: PhaseBoundary, asked: Asked) -> Saturation | Refusal:
    from registry.equilibrium.saturation import find_saturation

    try:
        return find_saturation(boundary, asked.kelvin, asked.reading)
    except Refused as error:
        return error.refusal


def _describe(
    coverage: Coverage, label: str, found: list[tuple[Asked, Saturation | Refusal]], to: Unit | None, energy: Unit
) -> dict[str, Any]:
    from registry.cli.documents import describe_refusal
    from registry.cli.slope_text import describe_saturation
    from registry.refusals import Refusal

    return {
        "compound": coverage.dossier.compound.key,
        "property": coverage.property,
        "slopes": [describe_saturation(s, to, energy) for _, s in found if not isinstance(s, Refusal)],
        "refusals": [describe_refusal(r) for _, r in found if isinstance(r, Refusal)],
        "position": coverage.dossier.position,
        "as_of": label or None,
    }
