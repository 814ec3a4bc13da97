"""The properties a correlation can be for, as rows of one table."""

from __future__ import annotations

from dataclasses import dataclass

from registry.errors import BadInput, quote
from registry.naming import join_names

__all__ = ["PROPERTIES", "Property", "find_property"]


@dataclass(frozen=True)
class Property:
    """What is correlated with temperature.

    Attributes
    ----------
    name : str
        The word used in records and commands.
    title : str
        The name in a sentence.
    dimension : str
        Dimension of its units (see `registry.quantities`).
    unit : str
        The SI unit, in which values are returned.
    phase : str
        ``liquid``, or ``solid`` for any solid phase (solid, ice Ih ...).
    lower, upper : str
        The fixed point that bounds the curve's phase, whatever the printed
        window says; empty where there is none.
    positive : bool
        True if a value is above zero by nature: a form that gives another one
        there does not answer.
    signed : bool
        True if a value may lie below zero.
    """

    name: str
    title: str
    dimension: str
    unit: str
    phase: str
    lower: str = ""
    upper: str = ""
    positive: bool = False
    signed: bool = False


_ROWS = (
    Property(
        "vapor-pressure", "vapour pressure", "pressure", "Pa", "liquid",
        "triple-point-temperature", "critical-temperature", positive=True,
    ),
    Property(
        "sublimation-pressure", "sublimation pressure", "pressure", "Pa", "solid",
        "", "triple-point-temperature", positive=True,
    ),
    Property("melting-pressure", "melting pressure", "pressure", "Pa", "solid", signed=True),
    Property(
        "enthalpy-of-vaporization", "enthalpy of vaporization", "molar-energy", "J/mol", "liquid",
        "triple-point-temperature", "critical-temperature",
    ),
    Property(
        "saturated-liquid-density", "saturated liquid density", "density", "kg/m3", "liquid",
        "triple-point-temperature", "critical-temperature", positive=True,
    ),
)  # fmt: skip

PROPERTIES: dict[str, Property] = {row.name: row for row in _ROWS}


def find_property(text: str) -> Property:
    """The property of that name or title, case and hyphens aside.

    Examples
    --------
    >>> find_property("Vapour pressure").name
    'vapor-pressure'
    """
    plain = text.casefold().replace("-", " ").replace("vapour", "vapor")
    for row in _ROWS:
        if plain in (row.name.replace("-", " "), row.title.replace("vapour", "vapor")):
            return row
    raise BadInput(f"There is no property {quote(text)}; the properties are {join_names(PROPERTIES, 'and')}.")
