"""What an inverse gives where no one temperature has a value."""

from __future__ import annotations

import math
from dataclasses import dataclass

from registry.refusals import Refusal

__all__ = ["InverseRefusal", "Side"]


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
