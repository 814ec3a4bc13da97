"""What a lookup asks for by name besides the answer of a window."""

from __future__ import annotations

import math
from numbers import Real
from typing import TYPE_CHECKING, NamedTuple

from registry.errors import BadInput, quote

# a lookup that asks for no estimate needs no method
if TYPE_CHECKING:
    from registry.estimates import Method

__all__ = ["PLAIN", "Conditions", "make_conditions"]


class Conditions(NamedTuple):
    """What a lookup asks for by name besides the answer of a window.

    Attributes
    ----------
    within : float or None
        The uncertainty, percent at coverage factor 2, that an answer must
        state and not exceed.
    beyond : float
        How far beyond the nearest accepted window it may extrapolate, K.
    estimate : Method or None
        The method by which to estimate where nothing else answers.
    """

    within: float | None = None
    beyond: float = 0.0
    estimate: Method | None = None


PLAIN = Conditions()
"""Only what a window covers, whatever its uncertainty."""


def make_conditions(within: float | None, beyond: float, estimate: str) -> Conditions:
    """Conditions that mean something.

    Parameters
    ----------
    within : float or None
        Percent.
    beyond : float
        K.
    estimate : str
        The name of a method, or empty.

    Returns
    -------
    Conditions
        `PLAIN` if nothing is asked for.

    Raises
    ------
    BadInput
        If a number is none, or none that can be meant, or there is no such method.

    Examples
    --------
    >>> make_conditions(None, 5.0, "").beyond
    5.0
    """
    if within is None and not beyond and not estimate:
        return PLAIN
    _require_number("within", within or 0.0, "percent")
    _require_number("beyond", beyond or 0.0, "kelvin")
    if within is not None and not 0.0 < within < math.inf:
        raise BadInput(f"Nothing answers within {within:g} %; a percentage above 0 is allowed.")
    if not 0.0 <= beyond < math.inf:
        raise BadInput(f"Nothing lies {beyond:g} K beyond a window; a number of kelvin above 0 is allowed.")
    from registry.estimates import find_method

    return Conditions(within, beyond or 0.0, find_method(estimate) if estimate else None)


def _require_number(name: str, given: object, unit: str) -> None:
    if not isinstance(given, Real):
        raise BadInput(f"{name} {quote(given)} is no number; a number of {unit} is allowed.")
