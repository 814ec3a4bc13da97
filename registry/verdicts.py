"""Why each candidate answers or not at a temperature, and why none does."""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass

from registry import rules
from registry.candidate import Candidate
from registry.coverage import Coverage
from registry.naming import join_names
from registry.properties import PROPERTIES
from registry.ranking import deciding_rule, explain_order, rank_of
from registry.refusals import Nearest, Refusal

__all__ = ["Verdict", "advise_below", "describe_unaccepted", "explain_choice", "judge_candidates", "refuse", "show_map"]


@dataclass(frozen=True)
class Verdict:
    """What became of one candidate.

    Attributes
    ----------
    correlation : str
        Its key.
    revision : int
        Its revision.
    verdict : str
        ``chosen``, ``passed-over``, ``not-covering`` or ``not-accepted``.
    because : str
        The reason, in a sentence.
    """

    correlation: str
    revision: int
    verdict: str
    because: str


def _kelvin(value: float) -> str:
    return f"{value:.9g} K"


def _range(low: float, high: float) -> str:
    return f"{low:.9g} to {high:.9g} K"


def judge_candidates(coverage: Coverage, kelvin: float) -> tuple[Verdict, ...]:
    """The verdict on every candidate at a temperature, the chosen one first.

    Parameters
    ----------
    coverage : Coverage
        Who answers where.
    kelvin : float
        The temperature, K.

    Returns
    -------
    tuple of Verdict
        One for each correlation recorded for the property and phase.
    """
    best = coverage.stretch_at(kelvin).candidate
    covering = coverage.covering(kelvin)
    verdicts = [_judge(coverage, candidate, best, covering, kelvin) for candidate in coverage.candidates]
    order = ("chosen", "passed-over", "not-covering", "not-accepted")
    distance = {candidate.key: candidate.distance(kelvin) for candidate in coverage.candidates}
    return tuple(sorted(verdicts, key=lambda v: (order.index(v.verdict), distance[v.correlation], v.correlation)))


def _judge(
    coverage: Coverage, candidate: Candidate, best: Candidate | None, covering: Sequence[Candidate], kelvin: float
) -> Verdict:
    def give(verdict: str, because: str) -> Verdict:
        return Verdict(candidate.key, candidate.entry.revision, verdict, because)

    if not candidate.entry.accepted:
        note = f" {candidate.entry.standing_note}" if candidate.entry.standing_note else ""
        return give("not-accepted", f"It is {_standing(candidate)}.{note}")
    if not candidate.covers(kelvin):
        return give("not-covering", _why_not_covering(coverage, candidate, kelvin))
    if best is None:
        return give("passed-over", "It covers the temperature, but no phase was named.")
    if candidate is best:
        return give("chosen", explain_choice(coverage, kelvin))
    preference = _preference_over(coverage, candidate, covering)
    return give("passed-over", preference or explain_order(best, candidate, kelvin))


def _preference_over(coverage: Coverage, other: Candidate, covering: Sequence[Candidate]) -> str:
    """Which covering candidate a steward prefers over this one, and why; empty if none."""
    reasons = coverage.dossier.preference_reasons()
    above = [(c.key, reasons[c.key, other.key]) for c in covering if (c.key, other.key) in reasons]
    return f"A steward prefers {above[0][0]} over it: {above[0][1].rstrip('.')}." if above else ""


def _standing(candidate: Candidate) -> str:
    standing = candidate.entry.standing
    return "a draft" if standing == "draft" else standing


def explain_choice(coverage: Coverage, kelvin: float) -> str:
    """Why the answering correlation was chosen, in a sentence."""
    best = coverage.stretch_at(kelvin).candidate
    assert best is not None
    covering = coverage.covering(kelvin)
    others = [c for c in covering if c is not best]
    if not others:
        kind = "accepted correlation" if best.entry.standing == "accepted" else "correlation, drafts among them,"
        return f"It is the only {kind} that covers this temperature."
    dropped = [c for c in others if _preference_over(coverage, c, covering)]
    left = [c for c in others if c not in dropped]
    set_aside = join_names((c.key for c in dropped), "and") if dropped else ""
    aside = f" A steward's preference sets {set_aside} aside." if dropped else ""
    if not left:
        return aside.strip()
    # the rival that falls behind by the latest rule
    closest = min(left, key=lambda c: (-deciding_rule(best, c, kelvin), c.key))
    first = f"Of {len(others) + 1} that cover this temperature it ranks first; next comes {closest.key}: "
    return first + explain_order(best, closest, kelvin) + aside


def _why_not_covering(coverage: Coverage, candidate: Candidate, kelvin: float) -> str:
    low, high = candidate.curve.window
    if low - rules.BOUND_TOLERANCE <= kelvin <= high + rules.BOUND_TOLERANCE:
        return f"Its window {_range(low, high)} holds the temperature, but {_why_limited(coverage, kelvin)}."
    printed = candidate.record.window_kelvin()
    if printed[0] <= kelvin <= printed[1]:
        return f"Its window {_range(*printed)} holds the temperature, but its form has no value there."
    away = max(low - kelvin, kelvin - high)
    return f"Its window {_range(low, high)} ends {away:.6g} K {'above' if kelvin < low else 'below'} it."


def _why_limited(coverage: Coverage, kelvin: float) -> str:
    limits = coverage.limits
    if kelvin > limits.upper and limits.upper_point is not None:
        name = limits.upper_point.record.quantity.replace("-", " ")
        return f"the {name} is {_kelvin(limits.upper)}"
    return f"the triple point temperature is {_kelvin(limits.lower)}, below which the liquid is metastable"


def _refuse_property(coverage: Coverage, kelvin: float, known: Sequence[str]) -> Refusal:
    """The refusal where nothing is recorded for a property at all."""
    name = coverage.dossier.compound.key
    phase = f" of {coverage.phase}" if coverage.phase else ""
    have = f"It has {join_names(known, 'and')}. `rangebook show {name}` lists them." if known else "It has none at all."
    text = f"{name} has no correlation for {coverage.property}{phase}. {have}"
    return Refusal(kelvin, "no-correlation", text)


def refuse(coverage: Coverage, kelvin: float) -> Refusal:
    """Why nothing answers at a temperature where nothing does.

    Parameters
    ----------
    coverage : Coverage
        Who answers where; it has no answer at `kelvin`.
    kelvin : float
        The temperature, K.

    Returns
    -------
    Refusal
        With the reason, the nearest windows and what can be done.
    """
    dossier = coverage.dossier
    if not 0.0 < kelvin < math.inf:
        text = f"{kelvin} K is no temperature; a finite number of kelvin above 0 is allowed."
        return Refusal(kelvin, "not-a-temperature", text)
    if not coverage.candidates:
        known = sorted({entry.record.property for entry in dossier.correlations if entry.accepted})
        return _refuse_property(coverage, kelvin, known)
    nearest = _find_nearest(coverage, kelvin)
    reason, sentence, advice = _find_reason(coverage, kelvin)
    if reason in ("several-phases", "no-value"):
        nearest = ()
    near = "; ".join(f"{n.correlation} ({_range(*n.window)}) is {n.distance:.6g} K away" for n in nearest)
    parts = [sentence, f"Nearest: {near}." if near else "", advice]
    return Refusal(kelvin, reason, " ".join(part for part in parts if part), nearest)


def _find_nearest(coverage: Coverage, kelvin: float) -> tuple[Nearest, ...]:
    """The nearest answering window on either side."""
    usable = [c for c in coverage.accepted if not (c.empty or c.covers(kelvin))]
    below = [c for c in usable if c.reach[1] < kelvin]
    above = [c for c in usable if kelvin < c.reach[0]]
    # of several that end at the same bound, the one that answers there
    found = [min(side, key=lambda c: (c.distance(kelvin), rank_of(c, kelvin))) for side in (below, above) if side]
    found.sort(key=lambda c: c.distance(kelvin))
    return tuple(Nearest(c.key, c.reach, c.distance(kelvin)) for c in found)


def _find_reason(coverage: Coverage, kelvin: float) -> tuple[str, str, str]:
    """Reason, sentence and advice: the most specific one that holds."""
    at = _kelvin(kelvin)
    name, prop = coverage.dossier.compound.key, coverage.property
    stretch = coverage.stretch_at(kelvin)
    if stretch.phases:
        phases = join_names(stretch.phases)
        return "several-phases", f"At {at} several phases of {name} have a {prop}.", f"Name one with --phase: {phases}."
    if stretch.candidate is not None:
        return (
            "no-value",
            (f"{stretch.candidate.key} covers {at} but gives no usable number there."),
            "Look at its coefficients: `rangebook show` tells them.",
        )
    unaccepted = [c for c in coverage.candidates if not c.entry.accepted and c.covers(kelvin)]
    if unaccepted:
        listed = "; ".join(describe_unaccepted(c) for c in unaccepted)
        advice = "It answers again once a reviewed record covers it."
        return "not-accepted", f"At {at} only correlations that are not accepted cover {name}: {listed}.", advice
    return _find_phase_reason(coverage, kelvin) or _find_window_reason(coverage, kelvin)


def describe_unaccepted(candidate: Candidate) -> str:
    """A correlation that is not accepted, with what was noted about that."""
    note = candidate.entry.standing_note.rstrip(".")
    return f"{candidate.key} is {_standing(candidate)}" + (f" ({note})" if note else "")


def _find_phase_reason(coverage: Coverage, kelvin: float) -> tuple[str, str, str] | None:
    limits, prop = coverage.limits, PROPERTIES[coverage.property]
    name = coverage.dossier.compound.key
    if kelvin > limits.upper and limits.upper_point is not None:
        point = limits.upper_point
        source = f"{limits.upper:.9g} K ({point.record.source})"
        if prop.upper == "critical-temperature":
            text = f"{_kelvin(kelvin)} lies above the critical temperature of {name}, {source}: there is no liquid."
            return "above-critical", text, show_map(coverage)
        text = f"{_kelvin(kelvin)} lies above the triple temperature of {name}, {source}: the solid has melted."
        return "above-triple", text, "Ask for the vapour pressure: --property vapor-pressure."
    if kelvin < limits.lower:
        return _below_triple(coverage, kelvin)
    return None


def _below_triple(coverage: Coverage, kelvin: float) -> tuple[str, str, str]:
    limits, name = coverage.limits, coverage.dossier.compound.key
    point = limits.lower_point
    source = f"{limits.lower:.9g} K" + (f" ({point.record.source})" if point else "")
    text = f"{_kelvin(kelvin)} lies below the triple temperature of {name}, {source}: the stable phase is solid."
    metastable = [
        c.key for c in coverage.accepted
        if c.record.metastable_below and c.curve.window[0] <= kelvin <= c.curve.window[1]
    ]  # fmt: skip
    return "below-triple", text, advise_below(coverage, metastable)


def advise_below(coverage: Coverage, metastable: Sequence[str]) -> str:
    """What to ask for below the triple temperature, in sentences; the map where there is nothing.

    Parameters
    ----------
    coverage : Coverage
        What was asked.
    metastable : sequence of str
        The keys of the correlations that cover the metastable liquid there.

    Returns
    -------
    str
        At least one sentence.
    """
    advice = []
    # a vapour pressure goes on as a sublimation pressure; a density or an enthalpy of vaporization as nothing
    solid = coverage.dossier.for_property("sublimation-pressure") if coverage.property == "vapor-pressure" else ()
    if any(entry.accepted for entry in solid):
        advice.append("Ask for --property sublimation-pressure.")
    if metastable and not coverage.metastable:
        advice.append(f"The metastable liquid is covered by {join_names(metastable)}: ask with --metastable.")
    return " ".join(advice) or show_map(coverage)


def show_map(coverage: Coverage) -> str:
    """The command that shows who answers where, in a sentence."""
    return f"`rangebook coverage {coverage.dossier.compound.key} --property {coverage.property}` shows the map."


def _find_window_reason(coverage: Coverage, kelvin: float) -> tuple[str, str, str]:
    name, prop = coverage.dossier.compound.key, coverage.property
    advice = show_map(coverage)
    if any(gap.low <= kelvin < gap.high for gap in coverage.gaps):
        text = f"{_kelvin(kelvin)} falls into a gap between two windows for {prop} of {name}."
        return "gap", text, advice
    phase = f", {coverage.phase}" if coverage.phase else ""
    text = f"{_kelvin(kelvin)} lies outside every window for {prop} of {name}{phase}."
    return "outside-windows", text, advice
