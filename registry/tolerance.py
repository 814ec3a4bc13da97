"""Refusing a value whose uncertainty is larger than asked for, or not stated."""

from __future__ import annotations

import math

import numpy as np

from registry.answers import Answer
from registry.candidate import Candidate
from registry.coverage import Coverage
from registry.display import format_percent
from registry.naming import join_names
from registry.refusals import Refusal
from registry.values import Value

__all__ = ["refuse_uncertain"]


def refuse_uncertain(coverage: Coverage, found: Value, within: float) -> Refusal | None:
    """Why a value is refused where its uncertainty must be stated and not exceed a percentage.

    Parameters
    ----------
    coverage : Coverage
        Who answers where.
    found : Value
        The value.
    within : float
        The percentage, at coverage factor 2, with the part of the temperature
        asked.

    Returns
    -------
    Refusal or None
        None if it is within.
    """
    if found.mark in ("beyond", "estimate") or not isinstance(found, Answer):
        what = "an estimate" if found.mark == "estimate" else "extrapolated"
        text = (
            f"The value at {found.temperature:.9g} K is {what}: no source states its uncertainty, and {_asked(within)}."
        )
        return Refusal(found.temperature, "uncertainty-not-stated", text)
    # not by the budget, which looks at every digit too
    total, key = found.expanded_percent, found.correlation.key
    if total is None:
        text = f"{key} answers at {found.temperature:.9g} K, but states no uncertainty there, and {_asked(within)}."
        return _refuse(coverage, found, within, "uncertainty-not-stated", text)
    if total > within:
        how = _word(found.temperature_percent, total)
        text = f"{key} answers at {found.temperature:.9g} K with {how}, and {_asked(within)}."
        return _refuse(coverage, found, within, "too-uncertain", text)
    return None


def _asked(within: float) -> str:
    return f"--within {within:g}% was asked for"


def _word(temperature: float, total: float) -> str:
    if not temperature:
        return f"a stated uncertainty of {total:.3g} % (k=2)"
    parts = format_percent(total), format_percent(temperature)
    return f"an uncertainty of {parts[0]} (k=2), {parts[1]} of it from the temperature"


def _refuse(coverage: Coverage, found: Answer, within: float, reason: str, text: str) -> Refusal:
    temperature = found.temperature_percent
    if temperature > within:
        return Refusal(found.temperature, reason, f"{text} The temperature alone makes more: state it more closely.")
    others = [c for c in coverage.covering(found.temperature) if c.key != found.correlation.key]
    totals = [(c.key, math.hypot(_percent(c, found.temperature), temperature)) for c in others]
    closer = [f"{key} ({total:.3g} %)" for key, total in totals if total <= within]
    advice = (
        f"{join_names(closer, 'and')} would be, but {'ranks' if len(closer) == 1 else 'rank'} behind: --why tells."
        if closer else "No other correlation that covers it states one small enough."
    )  # fmt: skip
    return Refusal(found.temperature, reason, f"{text} {advice}")


def _percent(candidate: Candidate, kelvin: float) -> float:
    """The stated uncertainty of a candidate there, percent at coverage factor 2; NaN if none."""
    at = np.array([kelvin])
    return float(candidate.expanded_percents(at, candidate.curve.values(at))[0])
