"""One correlation over a whole span of temperature or of value, or which come closest."""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator, Mapping, Sequence

import numpy as np

from registry.candidate import Candidate
from registry.coverage import Coverage
from registry.errors import Refused
from registry.inverse.inversion import Inversion
from registry.naming import join_names
from registry.properties import PROPERTIES
from registry.ranking import choose_throughout
from registry.refusals import Refusal
from registry.verdicts import refuse

__all__ = ["demand_one", "demand_one_at_values"]

CLOSEST = 3
"""Correlations that a refusal names."""

Shares = Iterable[tuple[float, Candidate, str]]
"""How much of a span each candidate has, and from where to where."""

Spans = Mapping[str, tuple[float, float]]


def demand_one(coverage: Coverage, low: float, high: float) -> tuple[Coverage, str]:
    """The coverage in which one correlation answers over a whole span of temperature.

    Of the accepted correlations that cover all of it, the one that ranks
    first answers everywhere, also where another that covers a part of it
    ranks before it.

    Parameters
    ----------
    coverage : Coverage
        Who answers where by the ranking at each temperature.
    low, high : float
        The ends of the span, K.

    Returns
    -------
    Coverage
        With that one correlation.
    str
        What to know of the choice, in a sentence.

    Raises
    ------
    Refused
        If none covers all of it; says which come closest.
    """
    if not coverage.candidates:
        raise Refused(refuse(coverage, low))
    over = f"{_range(low, high)} K"
    _demand_one_phase(coverage, [(low, high)], over)
    spans = {c.key: (low, high) for c in coverage.accepted if c.covers(low) and c.covers(high)}
    if not spans:
        drafts = [c.key for c in coverage.candidates if _is_draft(c) and c.covers(low) and c.covers(high)]
        raise Refused(_refuse_span(coverage, low, over, _share_temperatures(coverage, low, high), drafts))
    return _choose(coverage, spans)


def demand_one_at_values(coverage: Coverage, low: float, high: float) -> tuple[Coverage, str]:
    """The coverage in which one correlation has every value of a span.

    Parameters
    ----------
    coverage : Coverage
        Who answers where by the ranking at each temperature.
    low, high : float
        The ends of the span, in the SI unit of the property.

    Returns
    -------
    Coverage
        With that one correlation.
    str
        What to know of the choice, in a sentence.

    Raises
    ------
    Refused
        If none has all of them; says which come closest.
    """
    if not coverage.candidates:
        # the same at every temperature
        raise Refused(refuse(coverage, 1.0))
    over = f"{_range(low, high)} {PROPERTIES[coverage.property].unit}"
    found = ((c.key, _solve_ends(coverage, c, low, high)) for c in coverage.accepted)
    spans = {key: ends for key, ends in found if ends is not None}
    if not spans:
        solved = [c for c in coverage.candidates if _is_draft(c) and _solve_ends(coverage, c, low, high)]
        raise Refused(
            _refuse_span(coverage, math.nan, over, _share_values(coverage, low, high), [c.key for c in solved])
        )
    _demand_one_phase(coverage, spans.values(), over)
    return _choose(coverage, spans)


def _solve_ends(coverage: Coverage, candidate: Candidate, low: float, high: float) -> tuple[float, float] | None:
    """The temperatures, K, between which a candidate alone has the values of a span; None if it has not."""
    if candidate.empty:
        return None
    kelvin, _ = Inversion(coverage.alone(candidate)).solve(np.array([low, high]))
    return None if np.isnan(kelvin).any() else (float(kelvin.min()), float(kelvin.max()))


def _choose(coverage: Coverage, spans: Spans) -> tuple[Coverage, str]:
    covering = [c for c in coverage.accepted if c.key in spans]
    best = choose_throughout(covering, spans, coverage.dossier.preferred())
    passed = dict.fromkeys(s.candidate.key for s in coverage.between(*spans[best.key]) if s.candidate)
    passed.pop(best.key, None)
    note = f"One correlation was asked for: {best.key} answers throughout"
    if passed:
        verb = "ranks" if len(passed) == 1 else "rank"
        note += f"; over part of the span {join_names(passed, 'and')} {verb} before it"
    return coverage.alone(best), f"{note}."


def _demand_one_phase(coverage: Coverage, spans: Iterable[tuple[float, float]], over: str) -> None:
    phases = sorted({phase for span in spans for stretch in coverage.between(*span) for phase in stretch.phases})
    if phases:
        text = (
            f"From {over} several phases of {coverage.dossier.compound.key} have a {coverage.property}, "
            f"and one correlation is of one phase. Name one with --phase: {join_names(phases)}."
        )
        raise Refused(Refusal(math.nan, "several-phases", text))


def _refuse_span(coverage: Coverage, kelvin: float, over: str, shares: Shares, drafts: Sequence[str]) -> Refusal:
    name, prop = coverage.dossier.compound.key, coverage.property
    ranked = sorted(shares, key=lambda pair: (-pair[0], pair[1].key))
    closest = "; ".join(
        f"{candidate.key} answers over {100.0 * share:.3g} % of it ({reach})"
        for share, candidate, reach in ranked[:CLOSEST]
    )
    parts = [
        f"No accepted correlation answers for {prop} of {name} over all of {over}.",
        f"Closest: {closest}. Ask for a span inside one of these, or for a table with seams." if closest
        else f"None answers over any part of it. `rangebook coverage {name} --property {prop}` shows the map.",
        f"A draft does, {join_names(drafts)}: --drafts lets it answer." if drafts else "",
    ]  # fmt: skip
    return Refusal(kelvin, "no-single-correlation", " ".join(part for part in parts if part))


def _share_temperatures(coverage: Coverage, low: float, high: float) -> Iterator[tuple[float, Candidate, str]]:
    """The accepted candidates that answer over some part of a span, each with how much of it."""
    for candidate in coverage.accepted:
        share = _share(candidate.reach, low, high)
        if share > 0.0:
            yield share, candidate, f"{_range(*candidate.reach)} K"


def _share_values(coverage: Coverage, low: float, high: float) -> Iterator[tuple[float, Candidate, str]]:
    """The same by value; above zero by its logarithm, in which a decade at the bottom counts like one at the top."""
    positive, unit = PROPERTIES[coverage.property].positive, PROPERTIES[coverage.property].unit
    scale = math.log if positive else float
    for candidate in coverage.accepted:
        ends = sorted(candidate.curve.value(kelvin) for kelvin in candidate.reach)
        if not candidate.empty and math.isfinite(sum(ends)) and (ends[0] > 0.0 or not positive):
            share = _share((scale(ends[0]), scale(ends[1])), scale(low), scale(high))
            if share > 0.0:
                yield share, candidate, f"{ends[0]:.6g} to {ends[1]:.6g} {unit}"


def _share(reach: tuple[float, float], low: float, high: float) -> float:
    return (min(high, reach[1]) - max(low, reach[0])) / (high - low)


def _is_draft(candidate: Candidate) -> bool:
    return candidate.entry.standing == "draft" and not candidate.entry.accepted


def _range(low: float, high: float) -> str:
    return f"{low:.9g} to {high:.9g}"
