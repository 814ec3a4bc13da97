"""What a lookup gives where nothing may answer."""

from __future__ import annotations

import math
from dataclasses import dataclass

__all__ = ["InverseRefusal", "Nearest", "Refusal", "Side"]


@dataclass(frozen=True)
class Nearest:
    """A window near a refused temperature.

    Attributes
    ----------
    correlation : str
        The key of the correlation.
    window : tuple of float
        Where it may answer, K.
    distance : float
        How far away that is, K.
    """

    correlation: str
    window: tuple[float, float]
    distance: float


@dataclass(frozen=True)
class Refusal:
    """Why no correlation may answer at a temperature.

    Attributes
    ----------
    temperature : float
        As asked, K.
    reason : str
        ``no-correlation``, ``several-phases``, ``outside-windows``, ``gap``,
        ``above-critical``, ``below-triple``, ``above-triple``,
        ``not-accepted``, ``no-value`` or ``not-a-temperature``; of a table
        by one correlation ``no-single-correlation``.
    explanation : str
        The reason, and what can be done.
    nearest : tuple of Nearest
        The nearest windows, nearest first.
    """

    temperature: float
    reason: str
    explanation: str
    nearest: tuple[Nearest, ...] = ()


@dataclass(frozen=True)
class Side:
    """A temperature beside a value that is not answered.

    Attributes
    ----------
    correlation : str
        The key of the correlation.
    temperature : float
        K.
    value : float
        The value it has there, SI.
    """

    correlation: str
    temperature: float
    value: float


@dataclass(frozen=True)
class InverseRefusal(Refusal):
    """Why no one temperature has a value.

    Attributes
    ----------
    temperature : float
        NaN: there is none.
    reason : str
        ``below-all``, ``above-all``, ``gap``, ``seam``,
        ``several-temperatures``, ``several-phases``, ``not-accepted``,
        ``no-correlation`` or ``not-a-pressure``.
    explanation : str
        The reason, and what can be done.
    value : float
        As asked, SI.
    sides : tuple of Side
        The temperatures that have the value where several have, else the
        nearest ends, in the order of temperature.
    """

    value: float = math.nan
    sides: tuple[Side, ...] = ()
