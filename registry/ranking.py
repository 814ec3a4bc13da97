"""Which of two covering correlations is better, and the sentence that says why.

Among the accepted correlations that cover a temperature for a phase:

1. every one over which a covering one is preferred by a steward is dropped;
2. the better evidence wins: standard, evaluated, measured, compiled,
   estimated; a record from memory counts as compiled at most until
   independent values confirm it;
3. then the smaller stated uncertainty at coverage factor 2, not stated last (the scatter of a fit
   is not an uncertainty);
4. then the wider reach, which makes fewer seams;
5. then the newer source;
6. then the key, in alphabetical order.
"""

from __future__ import annotations

import math
from collections.abc import Mapping, Sequence

from registry.candidate import Candidate
from registry.records import EVIDENCE

__all__ = ["choose_best", "choose_throughout", "deciding_rule", "explain_order", "rank_of", "worst_rank"]

Pairs = frozenset[tuple[str, str]]


def rank_of(candidate: Candidate, kelvin: float) -> tuple[int, float, float, int, str]:
    """What a candidate is sorted by at a temperature; the least ranks first."""
    return (
        EVIDENCE.index(candidate.counted.evidence),
        candidate.ranked_uncertainty(kelvin),
        -candidate.width,
        -candidate.year,
        candidate.key,
    )


def choose_best(covering: Sequence[Candidate], kelvin: float, preferred: Pairs) -> Candidate:
    """The candidate that answers at a temperature.

    Parameters
    ----------
    covering : sequence of Candidate
        The accepted candidates that cover the temperature; at least one.
    kelvin : float
        The temperature, K.
    preferred : frozenset of (str, str)
        Pairs (key, key it is preferred over), without a cycle.

    Returns
    -------
    Candidate
        The best one.
    """
    return min(_drop_over(covering, preferred), key=lambda candidate: rank_of(candidate, kelvin))


def _drop_over(covering: Sequence[Candidate], preferred: Pairs) -> list[Candidate]:
    """Those over which no other of them is preferred."""
    keys = {candidate.key for candidate in covering}
    dropped = {over for key, over in preferred if key in keys}
    return [candidate for candidate in covering if candidate.key not in dropped]


def worst_rank(candidate: Candidate, low: float, high: float) -> tuple[int, float, float, int, str]:
    """The rank of a candidate where it ranks last between two temperatures, K."""
    # a piece of a stated uncertainty holds up to its upper end
    ends = (piece.upper for piece, _ in candidate.pieces)
    return max(rank_of(candidate, kelvin) for kelvin in (low, high, *(end for end in ends if low < end < high)))


def choose_throughout(
    covering: Sequence[Candidate], spans: Mapping[str, tuple[float, float]], preferred: Pairs
) -> Candidate:
    """The candidate that ranks first over a whole span, each by its worst rank in it.

    Parameters
    ----------
    covering : sequence of Candidate
        The accepted candidates that cover the whole span; at least one.
    spans : mapping of str to (float, float)
        The ends of the span for each candidate, K, by its key.
    preferred : frozenset of (str, str)
        Pairs (key, key it is preferred over), without a cycle.

    Returns
    -------
    Candidate
        The best one.
    """
    return min(_drop_over(covering, preferred), key=lambda candidate: worst_rank(candidate, *spans[candidate.key]))


def deciding_rule(best: Candidate, other: Candidate, kelvin: float) -> int:
    """The place in `rank_of` of the first rule in which two candidates differ."""
    pairs = zip(rank_of(best, kelvin), rank_of(other, kelvin), strict=True)
    return next(i for i, (first, second) in enumerate(pairs) if first != second)


def explain_order(best: Candidate, other: Candidate, kelvin: float) -> str:
    """Why one candidate ranks before another, in a sentence.

    The first rule in which they differ decides.
    """
    first, second = rank_of(best, kelvin), rank_of(other, kelvin)
    rule = deciding_rule(best, other, kelvin)
    if rule == 0:
        return f"{_evidence(best).capitalize()} evidence ranks before {_evidence(other)}."
    if rule == 1:
        stated = f"{best.key} states {_percent(first[1])}, {other.key} {_percent(second[1])}"
        return f"Equal evidence; as uncertainty {stated}."
    if rule == 2:
        reach = f"{best.key} answers over {best.width:.6g} K, {other.key} over {other.width:.6g} K"
        return f"Equal evidence and uncertainty; {reach}."
    if rule == 3:
        years = f"{best.key} of {best.year}, {other.key} of {other.year or 'no stated year'}"
        return f"Equal so far; the newer source counts, {years}."
    return f"Equal in all else; the keys decide, {best.key} before {other.key}."


def _percent(value: float) -> str:
    return "none" if math.isinf(value) else f"{value:g} %"


def _evidence(candidate: Candidate) -> str:
    recorded, counted = candidate.record.evidence, candidate.counted.evidence
    return counted if recorded == counted else f"{counted} ({recorded} from memory, unconfirmed)"
