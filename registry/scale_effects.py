"""What the temperature scale of a correlation does to its value."""

from __future__ import annotations

import dataclasses
import math
from dataclasses import dataclass

import numpy as np

from registry.curve import Curve
from registry.scales import SCALES, Scale

__all__ = ["ScaleEffect", "find_scale_effects"]

_OLDER = ("IPTS-68", "IPTS-48")
"""Scales on which a correlation may stand that does not say so."""


@dataclass(frozen=True)
class ScaleEffect:
    """The difference that a temperature scale makes at a temperature.

    Attributes
    ----------
    scale : str
        The scale.
    supposed : bool
        True if the source states no scale, and this is what it would be if it
        were this one.
    shift : float
        The number on the scale less the ITS-90 temperature, K.
    percent : float or None
        What that does to the value, percent: taken into account where the
        scale is stated, how far the value might be off where it is not. None
        where no percent says it: the value is zero, or there is none on one
        of the two scales.
    """

    scale: str
    supposed: bool
    shift: float
    percent: float | None


def find_scale_effects(curve: Curve, kelvin: float) -> tuple[ScaleEffect, ...]:
    """What the scale does to the value of a curve at a temperature.

    Parameters
    ----------
    curve : Curve
        The curve of a correlation.
    kelvin : float
        Temperature on ITS-90, K.

    Returns
    -------
    tuple of ScaleEffect
        One where the correlation stands on an older scale; one for each scale
        it may stand on where it states none; none for ITS-90. A scale without
        a published conversion there is left out.
    """
    stated = curve.scale
    if stated.name != "not-stated":
        return _measure(curve, stated, kelvin, supposed=False)
    return tuple(effect for name in _OLDER for effect in _measure(curve, SCALES[name], kelvin, supposed=True))


def _measure(curve: Curve, scale: Scale, kelvin: float, *, supposed: bool) -> tuple[ScaleEffect, ...]:
    if not scale.shifts or not scale.reaches(kelvin):
        return ()
    on_it = dataclasses.replace(curve, scale=scale).value(kelvin)
    as_its90 = dataclasses.replace(curve, scale=SCALES["ITS-90"]).value(kelvin)
    shift = float(scale.shift(np.array([kelvin]))[0][0])
    percent = 100.0 * (on_it / as_its90 - 1.0) if as_its90 else math.nan
    return (ScaleEffect(scale.name, supposed, shift, percent if math.isfinite(percent) else None),)
