"""Numbers and units as a person reads them."""

from __future__ import annotations

import math

from registry.quantities import UNITS, Unit

__all__ = ["format_number", "format_percent", "format_plain", "suit_unit"]


def format_number(value: float, digits: int = 6) -> str:
    """A number to `digits` significant digits, plainly where that is readable.

    Examples
    --------
    >>> format_number(3.169929)
    '3.16993'
    >>> format_number(0.0000123456789)
    '1.23457e-05'
    """
    return f"{value:#.{digits}g}".rstrip(".") if value else "0"


def format_plain(value: float) -> str:
    """A temperature or bound with the digits it has, at most nine.

    Examples
    --------
    >>> format_plain(273.16000000000003), format_plain(500.0)
    ('273.16', '500')
    """
    return f"{value:.9g}"


def format_percent(value: float, sign: str = "") -> str:
    """A percentage to three digits; in a word where it is no number, as of a value that is zero.

    Examples
    --------
    >>> format_percent(5.9612, "+"), format_percent(0.0256), format_percent(float("-inf"))
    ('+5.96 %', '0.0256 %', 'infinite')
    """
    if math.isnan(value):
        return "none"
    return "infinite" if math.isinf(value) else f"{value:{sign}.3g} %"


def suit_unit(value: float, si: Unit) -> Unit:
    """The unit in which a value in SI is shown if none is asked for.

    Pressures in kPa, below 100 Pa in Pa, above 10 MPa in MPa; molar energies
    in kJ/mol; anything else in SI.

    Examples
    --------
    >>> suit_unit(3169.9, UNITS["Pa"]).name, suit_unit(2e7, UNITS["Pa"]).name
    ('kPa', 'MPa')
    """
    if si.dimension == "pressure":
        return UNITS["Pa" if abs(value) < 100.0 else "MPa" if abs(value) > 1e7 else "kPa"]
    return UNITS["kJ/mol"] if si.dimension == "molar-energy" else si
