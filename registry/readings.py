"""Temperatures as somebody reads or types them: with an uncertainty, on a scale.

Examples that are understood::

    298.15K    25 degC    77F
    298.15+/-0.05K    25 +/- 0.1 degC (k=2)    25±0.1C
    100 degC (IPTS-68)
"""

from __future__ import annotations

import re
from typing import NamedTuple

from registry.errors import BadQuantity
from registry.naming import join_names
from registry.numerals import parse_number
from registry.quantities import Unit, find_unit, parse_temperature
from registry.scales import SCALES, Scale
from registry.uncertainty import COVERAGE_FACTOR, parse_factor

__all__ = ["Reading", "parse_reading"]

# compiled at first use: few temperatures have brackets or an uncertainty
_BRACKETS = r"\s*\(([^()]*)\)$"
_SPREAD = r"\s*(?:\+/[-\u2212]|\+[-\u2212]|±)\s*"
_NUMBER = r"(?s)([0-9.]+(?:[eE][+-]?[0-9]+)?)\s*(.*)"
_LONGEST = 200
"""Letters of a temperature with all that may stand beside it; looking for brackets in a longer text takes long."""
_EXAMPLE = "such as 298.15+/-0.05K"


class Reading(NamedTuple):
    """A temperature that was read or typed.

    Attributes
    ----------
    kelvin : float
        On ITS-90, K.
    uncertainty : float
        K; 0 for an exact temperature.
    factor : float or None
        The coverage factor of the uncertainty; None if not stated.
    scale : str
        The temperature scale it was read on.
    shift : float
        The number on the scale less the ITS-90 temperature, K.
    """

    kelvin: float
    uncertainty: float = 0.0
    factor: float | None = None
    scale: str = "ITS-90"
    shift: float = 0.0

    @property
    def expanded_uncertainty(self) -> float:
        """The uncertainty at coverage factor 2, K; a factor that is not stated counts as 2."""
        return self.uncertainty * COVERAGE_FACTOR / (self.factor or COVERAGE_FACTOR)


def parse_reading(text: str) -> Reading:
    """A temperature with its unit, and with its uncertainty and scale if they are given.

    Parameters
    ----------
    text : str
        As in the module's examples. The uncertainty is in the same unit; its
        coverage factor and the scale stand in brackets.

    Returns
    -------
    Reading
        The temperature on ITS-90.

    Raises
    ------
    BadQuantity
        If it cannot be read, or no published conversion from the scale
        reaches it.

    Examples
    --------
    >>> parse_reading("298.15+/-0.05K").uncertainty
    0.05
    >>> round(parse_reading("100 degC (IPTS-68)").kelvin, 4)
    373.1244
    """
    if len(text) > _LONGEST or ("(" not in text and "±" not in text and "+" not in text):
        return Reading(parse_temperature(text))
    plain, factor, scale = _take_brackets(text)
    parts = re.split(_SPREAD, plain)
    if len(parts) == 1:
        number, spread = parse_temperature(_blame(plain, text)), 0.0
    elif len(parts) == 2:
        number, spread = _read_spread(parts[0], parts[1], text)
    else:
        raise BadQuantity(text, f"a temperature has one uncertainty, {_EXAMPLE}.")
    if factor is not None and not spread:
        raise BadQuantity(text, f"a coverage factor belongs to an uncertainty, {_EXAMPLE} (k=2).")
    if scale is None:
        return Reading(number, spread, factor)
    if scale.absolute and _find_last_unit(plain).shift:
        why = f"{scale.name} is about kelvin; degC and degF count from the ice point itself: leave the scale out."
        raise BadQuantity(text, why)
    kelvin = scale.to_its90(number)
    if not scale.reaches(kelvin):
        raise BadQuantity(text, f"no published conversion from {scale.name} to ITS-90 reaches this temperature.")
    return Reading(kelvin, spread, factor, scale.name, number - kelvin)


def _blame(plain: str, text: str) -> str:
    """The part to parse; the whole text where it is the same, so that an error shows what was typed."""
    return text if plain == text.strip() else plain


def _take_brackets(text: str) -> tuple[str, float | None, Scale | None]:
    """The text without what stands in brackets at its end; the coverage factor and the scale found there."""
    plain, factors, scales = text.strip(), list[float](), list[Scale]()
    while match := re.search(_BRACKETS, plain):
        plain, inside = plain[: match.start()], match[1].strip()
        if re.match(r"k\s*=", inside):
            factors.append(_read_factor(inside, text))
        else:
            scales.append(_find_scale(inside, text))
    if len(factors) > 1:
        raise BadQuantity(text, "an uncertainty has one coverage factor, such as (k=2).")
    if len(scales) > 1:
        raise BadQuantity(text, "a temperature is read on one scale, such as 100 degC (IPTS-68).")
    return plain, next(iter(factors), None), next(iter(scales), None)


def _find_last_unit(plain: str) -> Unit:
    """The unit at the end of a temperature that was understood."""
    return find_unit(re.split(r"[\d.]", plain)[-1].strip(), "temperature")


def _read_factor(inside: str, text: str) -> float:
    try:
        return parse_factor(inside.partition("=")[2].strip())
    except ValueError as error:
        raise BadQuantity(text, str(error)) from None


def _find_scale(inside: str, text: str) -> Scale:
    """The scale of a name, case, blanks and hyphens aside."""
    known = {_squeeze(name): scale for name, scale in SCALES.items() if name != "not-stated"}
    scale = known.get(_squeeze(inside))
    if scale is None:
        names = join_names([scale.name for scale in known.values()], "or")
        raise BadQuantity(text, f"what stands in brackets is a temperature scale ({names}) or a coverage factor (k=2).")
    return scale


def _squeeze(name: str) -> str:
    return re.sub(r"[\s_-]", "", name).casefold()


def _read_spread(left: str, right: str, text: str) -> tuple[float, float]:
    """The temperature and its uncertainty, K; the unit stands behind the second, or behind both."""
    match = re.fullmatch(_NUMBER, right)
    if match is None:
        raise BadQuantity(text, f"an uncertainty is a number above zero, {_EXAMPLE}.")
    if not match[2]:
        raise BadQuantity(text, f"the unit stands behind the uncertainty, {_EXAMPLE}.")
    try:
        spread, unit = parse_number(match[1]), find_unit(match[2], "temperature")
        number = parse_temperature(left if re.search(r"[^\d.]$", left) else f"{left} {unit.name}")
    except (ValueError, BadQuantity) as error:
        allowed = error.allowed if isinstance(error, BadQuantity) else f"{error}."
        raise BadQuantity(text, allowed) from None
    if spread <= 0:
        raise BadQuantity(text, f"an uncertainty is a number above zero, {_EXAMPLE}.")
    return number, float(spread * unit.factor)
