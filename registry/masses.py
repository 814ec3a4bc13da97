"""What a formula says: molar mass and Hill order, from a maintained table of atomic weights."""

from __future__ import annotations

from typing import Any

__all__ = ["formula_mass", "hill_formula"]


def formula_mass(formula: str) -> float:
    """The molar mass that a formula makes, g/mol.

    Parameters
    ----------
    formula : str
        Element symbols and counts; ``D`` is deuterium, an isotope is written
        ``[3He]``.

    Returns
    -------
    float
        Molar mass, g/mol, from standard atomic weights (package `molmass`).

    Raises
    ------
    ValueError
        If a symbol is no element.

    Examples
    --------
    >>> round(formula_mass("H2O"), 3)
    18.015
    """
    import molmass

    try:
        return float(_parse(formula).mass)
    except molmass.FormulaError as error:
        raise ValueError(f"{str(error).splitlines()[0]}; element symbols and counts are allowed.") from None


def hill_formula(formula: str) -> str:
    """The formula in Hill order, under which a person may look for a compound.

    Examples
    --------
    >>> hill_formula("C2H5OH")
    'C2H6O'
    """
    return str(_parse(formula).formula)


def _parse(formula: str) -> Any:
    """The formula as elements alone: no groups such as Me, no peptides."""
    import molmass

    return molmass.Formula(formula, parse_groups=False, parse_oligos=False)
