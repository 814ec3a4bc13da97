"""The map from temperature to the correlation that answers there.

Computed once for a compound, property, phase and position into sorted
breakpoints: choosing is one search, and every point is evaluated once, by the
one curve that answers there.
"""

from __future__ import annotations

import bisect
import math
from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry import rules
from registry.candidate import Candidate, build_candidate
from registry.confirmation import gather_values
from registry.dossier import Dossier
from registry.evaluation import Evaluator
from registry.limits import Limits, best_fixed_point, find_limits
from registry.properties import PROPERTIES
from registry.ranking import choose_best

__all__ = ["Coverage", "Seam", "Stretch", "build_coverage"]


@dataclass(frozen=True)
class Stretch:
    """An interval of temperature with one answer, or none.

    Attributes
    ----------
    low, high : float
        Its ends, K.
    candidate : Candidate or None
        Who answers; None in a gap.
    phases : tuple of str
        The phases that cover it, where several do and none was named.
    """

    low: float
    high: float
    candidate: Candidate | None
    phases: tuple[str, ...] = ()


@dataclass(frozen=True)
class Seam:
    """A temperature at which the answering correlation changes.

    Attributes
    ----------
    temperature : float
        K.
    below, above : str
        Keys of the correlations that answer on either side.
    jump_percent : float
        By how much the value changes there, percent of the value below.
    """

    temperature: float
    below: str
    above: str
    jump_percent: float


class Coverage:
    """Who answers where, for one property of one compound.

    Attributes
    ----------
    dossier : Dossier
        What it was computed from.
    property, phase : str
        What it is for; the phase is empty if none was named.
    metastable : bool
        Whether stated metastable ranges answer.
    limits : Limits
        The phase limits applied.
    candidates : tuple of Candidate
        Every correlation for the property and phase, whatever its standing.
    stretches : tuple of Stretch
        The whole axis above 0 K, in order, without overlap.
    """

    def __init__(
        self, dossier: Dossier, prop: str, phase: str, metastable: bool, limits: Limits,
        candidates: tuple[Candidate, ...], stretches: tuple[Stretch, ...],
    ) -> None:  # fmt: skip
        self.dossier = dossier
        self.property = prop
        self.phase = phase
        self.metastable = metastable
        self.limits = limits
        self.candidates = candidates
        self.stretches = stretches
        self._edges = [stretch.low for stretch in stretches[1:]]
        self._least = 0.0 if PROPERTIES[prop].positive else -math.inf

    @property
    def accepted(self) -> tuple[Candidate, ...]:
        """The candidates that may answer."""
        return tuple(candidate for candidate in self.candidates if candidate.entry.accepted)

    @cached_property
    def answering(self) -> tuple[Candidate, ...]:
        """The candidates that answer somewhere, in the order of temperature."""
        seen: dict[str, Candidate] = {}
        for stretch in self.stretches:
            if stretch.candidate is not None:
                seen.setdefault(stretch.candidate.key, stretch.candidate)
        return tuple(seen.values())

    @cached_property
    def seams(self) -> tuple[Seam, ...]:
        """Where the answering correlation changes, with the jump."""
        return tuple(self._find_seams())

    def _find_seams(self) -> Iterator[Seam]:
        for left, right in zip(self.stretches, self.stretches[1:], strict=False):
            if left.candidate and right.candidate:
                # the bound itself: an edge lies the tolerance beside it
                at = round(left.high, 8)
                before, after = left.candidate.curve.value(at), right.candidate.curve.value(at)
                jump = 100.0 * (after / before - 1.0) if before else math.inf
                yield Seam(at, left.candidate.key, right.candidate.key, jump)

    def seam_at(self, kelvin: float) -> Seam | None:
        """The seam at a temperature, K; None away from all."""
        if not any(abs(edge - kelvin) <= 2.0 * rules.BOUND_TOLERANCE for edge in self._edges):
            return None
        return next((seam for seam in self.seams if abs(seam.temperature - kelvin) <= 1e-8), None)

    @property
    def gaps(self) -> tuple[Stretch, ...]:
        """Stretches without an answer that lie between two with one."""
        covered = [i for i, stretch in enumerate(self.stretches) if stretch.candidate]
        if not covered:
            return ()
        return tuple(s for s in self.stretches[covered[0] : covered[-1]] if s.candidate is None)

    def alone(self, candidate: Candidate) -> Coverage:
        """The same, with one candidate that answers wherever it may, whoever ranks before it."""
        return Coverage(
            self.dossier, self.property, self.phase, self.metastable, self.limits, self.candidates,
            _tile([candidate], frozenset()),
        )  # fmt: skip

    def value_at(self, kelvin: float) -> tuple[float, Candidate | None]:
        """The value in SI at one temperature, K, and who gives it; NaN and None where nothing answers."""
        candidate = self.stretch_at(kelvin).candidate
        if candidate is not None:
            value = candidate.curve.value(kelvin)
            if self._least < value < math.inf:
                return value, candidate
        return math.nan, None

    def stretch_at(self, kelvin: float) -> Stretch:
        """The stretch that holds a temperature, K."""
        return self.stretches[bisect.bisect_right(self._edges, kelvin)]

    def between(self, low: float, high: float) -> tuple[Stretch, ...]:
        """The stretches that hold some temperature from `low` to `high`, K."""
        first, last = (bisect.bisect_right(self._edges, kelvin) for kelvin in (low, high))
        return self.stretches[first : last + 1]

    def covering(self, kelvin: float) -> tuple[Candidate, ...]:
        """The accepted candidates that cover a temperature, K."""
        return tuple(candidate for candidate in self.accepted if candidate.covers(kelvin))

    @cached_property
    def owners(self) -> NDArray[np.int16]:
        """For each stretch, the index of its candidate in `answering`; -1 for none."""
        places = {candidate.key: i for i, candidate in enumerate(self.answering)}
        return np.array([places[s.candidate.key] if s.candidate else -1 for s in self.stretches], dtype=np.int16)

    @cached_property
    def _evaluator(self) -> Evaluator:
        curves = [candidate.curve for candidate in self.answering]
        return Evaluator(self._edges, self.owners.tolist(), curves, positive=PROPERTIES[self.property].positive)

    def evaluate(self, kelvin: NDArray[np.float64]) -> tuple[NDArray[np.float64], NDArray[np.signedinteger[Any]]]:
        """Values and stretches for an array of temperatures.

        Parameters
        ----------
        kelvin : array of float, any shape
            Temperatures, K.

        Returns
        -------
        values : array of float, same shape
            In SI units, NaN where nothing answers.
        places : array of int, same shape
            Index into `stretches`.
        """
        flat = np.ascontiguousarray(kelvin, dtype=float).reshape(-1)
        values, places = self._evaluator.evaluate(flat)
        return values.reshape(np.shape(kelvin)), places.reshape(np.shape(kelvin))

    def mark_owners(self, owners: NDArray[np.signedinteger[Any]]) -> NDArray[np.str_]:
        """``draft`` where one answers, else an empty text.

        Parameters
        ----------
        owners : array of int, any shape
            Index into `answering`; -1 for none.

        Returns
        -------
        array of str, same shape
            With room for nine letters, the longest mark.
        """
        marks: NDArray[np.str_] = np.array([*(c.entry.mark for c in self.answering), ""], dtype="<U9")[owners]
        return marks

    def expanded_percents(
        self, kelvin: NDArray[np.float64], values: NDArray[np.float64], owners: NDArray[np.signedinteger[Any]]
    ) -> NDArray[np.float64]:
        """The stated uncertainties at coverage factor 2, percent of the values.

        Parameters
        ----------
        kelvin, values : array of float, one-dimensional
            Temperatures, K, and the values there in SI units.
        owners : array of int, same shape
            Index into `answering`; -1 for none.

        Returns
        -------
        array of float, same shape
            NaN where none is stated, and where nobody answers.
        """
        percents = np.full(kelvin.shape, np.nan)
        for number, candidate in enumerate(self.answering):
            mine = np.flatnonzero(owners == number)
            if mine.size:
                percents[mine] = candidate.expanded_percents(kelvin[mine], values[mine])
        return percents


def build_coverage(dossier: Dossier, prop: str, phase: str = "", *, metastable: bool = False) -> Coverage:
    """The coverage of one property of a compound.

    Parameters
    ----------
    dossier : Dossier
        All that is recorded about the compound at a position.
    prop : str
        A property.
    phase : str
        A phase; empty for whichever single phase covers a temperature.
    metastable : bool
        Let metastable ranges answer that a record states.

    Returns
    -------
    Coverage
        Its stretches tile the axis above 0 K.
    """
    limits = find_limits(dossier, prop)
    triple = best_fixed_point(dossier, "triple-point-temperature")
    values = gather_values(dossier, prop, triple.record.value_si() if triple else None)
    candidates = tuple(
        build_candidate(entry, dossier, limits, values, metastable=metastable)
        for entry in dossier.for_property(prop)
        if phase in ("", entry.record.phase)
    )
    accepted = [c for c in candidates if c.entry.accepted and not c.empty]
    stretches = _tile(accepted, dossier.preferred())
    return Coverage(dossier, prop, phase, metastable, limits, candidates, stretches)


def _tile(accepted: Sequence[Candidate], preferred: frozenset[tuple[str, str]]) -> tuple[Stretch, ...]:
    """The axis above 0 K cut where the answer can change; equal neighbours joined."""
    edges = sorted({0.0, math.inf, *(edge for candidate in accepted for edge in _edges(candidate))})
    tiles: list[Stretch] = []
    for low, high in zip(edges, edges[1:], strict=False):
        # a stretch is half open, [low, high): its lower end stands for all of it
        covering = [c for c in accepted if c.covers(low)]
        phases = tuple(sorted({c.record.phase for c in covering}))
        best = choose_best(covering, low, preferred) if len(phases) == 1 else None
        several = phases if len(phases) > 1 else ()
        if tiles and tiles[-1].candidate is best and tiles[-1].phases == several:
            tiles[-1] = Stretch(tiles[-1].low, high, best, several)
        else:
            tiles.append(Stretch(low, high, best, several))
    return tuple(tiles)


def _edges(candidate: Candidate) -> Iterator[float]:
    """Where a candidate begins to answer, ends, or changes its stated uncertainty."""
    yield candidate.reach[0] - rules.BOUND_TOLERANCE
    yield math.nextafter(candidate.reach[1] + rules.BOUND_TOLERANCE, math.inf)
    for piece, _ in candidate.pieces[:-1]:
        yield math.nextafter(piece.upper, math.inf)
