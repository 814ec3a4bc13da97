"""What a formula says: molar mass and Hill order, by the atomic weights of the rules."""

from __future__ import annotations

from typing import Any

from registry.atomic_weights import ATOMIC_WEIGHTS

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
        Molar mass, g/mol, from the atomic weights of the rules; those of
        isotopes from the package `molmass`, which reads the formula.

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
        parts = list(_parse(formula).composition().values())
    except molmass.FormulaError as error:
        raise ValueError(f"{str(error).splitlines()[0]}; element symbols and counts are allowed.") from None
    return float(sum(p.count * ATOMIC_WEIGHTS[p.symbol] if p.symbol in ATOMIC_WEIGHTS else p.mass for p in parts))


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
