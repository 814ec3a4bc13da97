"""One correlation over a whole span of temperature, or which come closest."""

from __future__ import annotations

from collections.abc import Iterator, Sequence

from registry.candidate import Candidate
from registry.coverage import Coverage
from registry.errors import Refused
from registry.naming import join_names
from registry.ranking import choose_throughout, worst_rank
from registry.refusals import Refusal
from registry.verdicts import refuse

__all__ = ["demand_one"]

CLOSEST = 3
"""Correlations that a refusal names."""


def demand_one(coverage: Coverage, low: float, high: float) -> tuple[Coverage, str]:
    """The coverage in which one correlation answers over a whole span.

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
    phases = sorted({phase for stretch in coverage.between(low, high) for phase in stretch.phases})
    if phases:
        raise Refused(_refuse_phases(coverage, low, high, phases))
    covering = [c for c in coverage.accepted if c.covers(low) and c.covers(high)]
    if not covering:
        raise Refused(_refuse_span(coverage, low, high))
    best = choose_throughout(covering, low, high, coverage.dossier.preferred())
    return coverage.alone(best), _note_choice(coverage, best, low, high)


def _note_choice(coverage: Coverage, best: Candidate, low: float, high: float) -> str:
    passed = dict.fromkeys(s.candidate.key for s in coverage.between(low, high) if s.candidate)
    passed.pop(best.key, None)
    first = f"One correlation was asked for: {best.key} answers throughout"
    if not passed:
        return f"{first}."
    verb = "ranks" if len(passed) == 1 else "rank"
    return f"{first}; over part of the span {join_names(passed, 'and')} {verb} before it."


def _refuse_phases(coverage: Coverage, low: float, high: float, phases: Sequence[str]) -> Refusal:
    text = (
        f"From {_range(low, high)} several phases of {coverage.dossier.compound.key} have a {coverage.property}, "
        f"and one correlation is of one phase. Name one with --phase: {join_names(phases)}."
    )
    return Refusal(low, "several-phases", text)


def _refuse_span(coverage: Coverage, low: float, high: float) -> Refusal:
    name, prop = coverage.dossier.compound.key, coverage.property
    shares = sorted(_share(coverage, low, high), key=lambda pair: (-pair[0], worst_rank(pair[1], low, high)))
    closest = "; ".join(
        f"{candidate.key} answers over {100.0 * share:.3g} % of it ({_range(*candidate.reach)})"
        for share, candidate in shares[:CLOSEST]
    )
    parts = [
        f"No accepted correlation answers for {prop} of {name} over all of {_range(low, high)}.",
        f"Closest: {closest}. Ask for a span inside one of these, or for a table with seams." if closest
        else f"None answers over any part of it. `rangebook coverage {name} --property {prop}` shows the map.",
        _name_drafts(coverage, low, high),
    ]  # fmt: skip
    return Refusal(low, "no-single-correlation", " ".join(part for part in parts if part))


def _share(coverage: Coverage, low: float, high: float) -> Iterator[tuple[float, Candidate]]:
    """The accepted candidates that answer over some part of a span, each with how much of it."""
    for candidate in coverage.accepted:
        overlap = min(high, candidate.reach[1]) - max(low, candidate.reach[0])
        if overlap > 0.0:
            yield overlap / (high - low), candidate


def _name_drafts(coverage: Coverage, low: float, high: float) -> str:
    drafts = [
        c.key for c in coverage.candidates
        if not c.entry.accepted and c.entry.standing == "draft" and c.covers(low) and c.covers(high)
    ]  # fmt: skip
    return f"A draft does, {join_names(drafts)}: --drafts lets it answer." if drafts else ""


def _range(low: float, high: float) -> str:
    return f"{low:.9g} to {high:.9g} K"
