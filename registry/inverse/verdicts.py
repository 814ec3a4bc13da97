"""Why no one temperature has a pressure: outside, in a gap, at a seam, or because several have it."""

from __future__ import annotations

import math

from registry.coverage import Coverage
from registry.display import format_plain, suit_unit
from registry.inverse.branches import Branch
from registry.inverse.inversion import END_TOLERANCE, SAME_TEMPERATURE, Inversion
from registry.inverse.refusals import InverseRefusal, Side
from registry.naming import join_names
from registry.properties import PROPERTIES
from registry.quantities import UNITS
from registry.verdicts import advise_below, describe_unaccepted, refuse, show_map

__all__ = ["is_pressure", "refuse_pressure"]


def refuse_pressure(inversion: Inversion, value: float) -> InverseRefusal:
    """Why no one temperature has a pressure for which there is none.

    Parameters
    ----------
    inversion : Inversion
        Who answers where; it has no one answer for `value`.
    value : float
        The pressure, Pa.

    Returns
    -------
    InverseRefusal
        With the reason, both sides and what can be done.
    """
    coverage = inversion.coverage
    if not is_pressure(coverage, value):
        above = "" if PROPERTIES[coverage.property].signed else " above 0"
        return _make(
            value, "not-a-pressure", f"{value} Pa is no pressure; a finite number of pascal{above} is allowed."
        )
    if not coverage.candidates:
        # the same at every temperature
        return _make(value, "no-correlation", refuse(coverage, 1.0).explanation)
    several = inversion.find_all(value)
    if several:
        return _refuse_several(inversion, value, several)
    return _refuse_unaccepted(inversion, value) or _refuse_none(inversion, value)


def is_pressure(coverage: Coverage, value: float) -> bool:
    """True for a finite number of pascal above zero; of a property that may lie below zero, for any finite one."""
    return math.isfinite(value) and (value > 0.0 or PROPERTIES[coverage.property].signed)


def _make(value: float, reason: str, *parts: str, sides: tuple[Side, ...] = ()) -> InverseRefusal:
    explanation = " ".join(part for part in parts if part)
    ordered = tuple(sorted(sides, key=lambda side: side.temperature))
    return InverseRefusal(math.nan, reason, explanation, value=value, sides=ordered)


def _pascal(value: float) -> str:
    unit = suit_unit(value, UNITS["Pa"])
    return f"{format_plain(unit.from_si(value))} {unit.name}"


def _kelvin(value: float) -> str:
    return f"{format_plain(value)} K"


def _tell(side: Side) -> str:
    return f"{side.correlation} ({_pascal(side.value)} at {_kelvin(side.temperature)})"


def _find_side(branch: Branch, *, greatest: bool) -> Side:
    """The end of a branch where its value is greatest, or least: the bound itself, not the tolerance beside it."""
    high = (branch.ends[1] >= branch.ends[0]) == greatest
    at = _find_bound(branch, branch.high if high else branch.low)
    return Side(branch.candidate.key, at, branch.candidate.curve.value(at))


def _find_bound(branch: Branch, end: float) -> float:
    """The bound beside which an end of a branch lies; the end itself where the temperature scale jumps there."""
    at = round(end, 8)
    joints = [bound for low, high, _ in branch.candidate.curve.scale.branches for bound in (low, high)]
    jumps = any(abs(end - joint) <= SAME_TEMPERATURE for joint in joints)
    return at if branch.candidate.covers(at) and not jumps else end


def _refuse_several(inversion: Inversion, value: float, found: tuple[tuple[float, Branch], ...]) -> InverseRefusal:
    coverage = inversion.coverage
    name, given = coverage.dossier.compound.key, _pascal(value)
    sides = tuple(Side(branch.candidate.key, kelvin, value) for kelvin, branch in found)
    phases = sorted({branch.candidate.record.phase for _, branch in found})
    if len(phases) > 1 or not all(inversion.answers(branch) for _, branch in found):
        listed = join_names(
            (f"{b.candidate.record.phase} at {_kelvin(t)} ({b.candidate.key})" for t, b in found), "and"
        )
        text = f"No phase of {name} was named, and {given} is its {coverage.property} for {listed}."
        return _make(value, "several-phases", text, f"Name one with --phase: {join_names(phases)}.", sides=sides)
    jump = _name_jump(found[0][1], found[-1][1]) if len(found) == 2 else ""
    if jump:
        text = (
            f"{given} falls into {jump}: {sides[0].correlation} has it below, at {_kelvin(sides[0].temperature)}, and "
            f"{sides[1].correlation} above, at {_kelvin(sides[1].temperature)}."
        )
        return _make(value, "seam", text, "Choose by the side you are on.", sides=sides)
    listed = join_names((f"{_kelvin(side.temperature)} ({side.correlation})" for side in sides), "and")
    text = f"{name} has {given} at several temperatures: {listed}."
    keys = sorted({side.correlation for side in sides})
    advice = f"Its curve turns: `rangebook show {keys[0]}` tells its coefficients and its window."
    return _make(value, "several-temperatures", text, advice if len(keys) == 1 else show_map(coverage), sides=sides)


def _name_jump(lower: Branch, upper: Branch) -> str:
    """The jump between two branches that meet; empty if they do not, or meet where a curve turns."""
    before, after = lower.ends[1], upper.ends[0]
    if not _meet(lower, upper) or abs(after - before) <= END_TOLERANCE * abs(before):
        return ""
    at = _kelvin(round(upper.low, 8))
    if lower.candidate is upper.candidate:
        return f"the jump of its temperature scale ({lower.candidate.record.temperature_scale}) at {at}"
    return f"the jump of the seam at {at}"


def _meet(lower: Branch, upper: Branch) -> bool:
    """True if one branch ends where the other begins."""
    return abs(upper.low - lower.high) <= SAME_TEMPERATURE


def _refuse_unaccepted(inversion: Inversion, value: float) -> InverseRefusal | None:
    """The refusal where only correlations have a value that may not answer."""
    found = {b.candidate.key: b.candidate for b in inversion.unaccepted if b.least <= value <= b.greatest}
    if not found:
        return None
    name = inversion.coverage.dossier.compound.key
    listed = "; ".join(describe_unaccepted(candidate) for candidate in found.values())
    text = f"Only correlations that are not accepted have {_pascal(value)} for {name}: {listed}."
    return _make(value, "not-accepted", text, "It answers again once a reviewed record covers it.")


def _refuse_none(inversion: Inversion, value: float) -> InverseRefusal:
    """The refusal where no curve has a value: outside, in a gap, or in the jump of a seam."""
    coverage, given = inversion.coverage, _pascal(value)
    prop = f"{coverage.property} of {coverage.dossier.compound.key}"
    below = max((b for b in inversion.branches if b.greatest < value), key=lambda b: b.greatest, default=None)
    above = min((b for b in inversion.branches if b.least > value), key=lambda b: b.least, default=None)
    if below is None and above is None:
        return _make(
            value, "no-correlation", f"No accepted correlation for {prop} covers anything.", show_map(coverage)
        )
    if below is None or above is None:
        return _refuse_outside(inversion, value, below, above)
    sides = (_find_side(below, greatest=True), _find_side(above, greatest=False))
    told = f"{_tell(sides[0])} and {_tell(sides[1])}"
    jump = _name_jump(below, above) or _name_jump(above, below)
    if jump:
        text = f"{given} falls into {jump}, between {told}: no temperature has it."
        return _make(value, "seam", text, show_map(coverage), sides=sides)
    text = f"{given} falls into a gap for {prop}, between {told}."
    return _make(value, "gap", text, show_map(coverage), sides=sides)


def _refuse_outside(inversion: Inversion, value: float, below: Branch | None, above: Branch | None) -> InverseRefusal:
    coverage, name = inversion.coverage, inversion.coverage.dossier.compound.key
    branch = below or above
    assert branch is not None
    side = _find_side(branch, greatest=below is not None)
    where, most = ("above", "highest") if below is not None else ("below", "lowest")
    text = (
        f"{_pascal(value)} lies {where} every {coverage.property} of {name}: the {most} is {_pascal(side.value)} at "
        f"{_kelvin(side.temperature)}{_name_limit(coverage, side.temperature)}."
    )
    near = f"Nearest: {side.correlation}, {_tell_range(branch)}."
    return _make(value, f"{where}-all", text, near, _advise(coverage, side, value), sides=(side,))


def _tell_range(branch: Branch) -> str:
    low, high = (_find_bound(branch, end) for end in (branch.low, branch.high))
    ends = [f"{_pascal(branch.candidate.curve.value(t))}" for t in (low, high)]
    return f"{ends[0]} to {ends[1]} over {format_plain(low)} to {_kelvin(high)}"


def _name_limit(coverage: Coverage, kelvin: float) -> str:
    limits = coverage.limits
    if limits.upper_point is not None and abs(kelvin - limits.upper) <= SAME_TEMPERATURE:
        return f", the {limits.upper_point.record.quantity.replace('-', ' ')}"
    return ""


def _advise(coverage: Coverage, side: Side, value: float) -> str:
    """Another property, or the metastable liquid, where that has the value; else the map."""
    if coverage.property == "sublimation-pressure" and value > side.value and _name_limit(coverage, side.temperature):
        return "Ask for the vapour pressure: --property vapor-pressure."
    if coverage.property != "vapor-pressure" or value >= side.value or side.temperature > coverage.limits.lower:
        return show_map(coverage)
    metastable = [
        c.key for c in coverage.accepted
        if c.record.metastable_below and c.curve.value(c.curve.window[0]) <= value
    ]  # fmt: skip
    return advise_below(coverage, metastable)
