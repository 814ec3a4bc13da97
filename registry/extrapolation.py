"""Beyond the windows: only when asked for by name, only so far, and marked."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass, replace

import numpy as np
from numpy.typing import NDArray

from registry import rules
from registry.answers import Answer
from registry.candidate import Candidate
from registry.coverage import Coverage, Stretch
from registry.properties import PROPERTIES
from registry.readings import Reading
from registry.refusals import Refusal
from registry.uncertainty import Piece

__all__ = ["Extrapolation", "Extrapolator", "Neighbour"]

Array = NDArray[np.float64]


@dataclass(frozen=True)
class Neighbour:
    """Another accepted correlation whose window ends near an extrapolated value.

    Attributes
    ----------
    correlation : str
        Its key.
    distance : float
        How far outside its window the temperature lies, K.
    value : float
        What it gives there, SI.
    percent : float
        That value less the extrapolated one, percent of the latter.
    """

    correlation: str
    distance: float
    value: float
    percent: float


_PHASE_LIMITS = ("above-critical", "above-triple", "below-triple")


class Extrapolator:
    """The nearest correlation of a coverage beyond its window.

    It never crosses a phase limit, and for a property with several phases it
    needs the phase to be named.

    Parameters
    ----------
    coverage : Coverage
        Who answers where.
    beyond : float
        How far it may go, K.
    """

    def __init__(self, coverage: Coverage, beyond: float) -> None:
        self.coverage = coverage
        self.beyond = beyond
        # a distance is a difference of doubles: 216.15 less 210 is a little more than 6.15
        self._most = beyond + rules.BOUND_TOLERANCE
        self._places = {candidate.key: i for i, candidate in enumerate(coverage.answering)}

    @property
    def single_phase(self) -> bool:
        """True if all that may answer belongs to one phase."""
        return len({candidate.record.phase for candidate in self.coverage.accepted}) <= 1

    def extend(self, kelvin: Array) -> tuple[Array, NDArray[np.int16]]:
        """Values beyond the windows.

        Parameters
        ----------
        kelvin : array of float, one-dimensional
            Temperatures, K.

        Returns
        -------
        values : array of float
            SI; NaN where a window covers the temperature, where none ends
            within reach, and beyond a phase limit.
        owners : array of int
            Index into the `answering` of the coverage; -1 where NaN.
        """
        values = np.full(kelvin.shape, np.nan)
        owners = np.full(kelvin.shape, -1, dtype=np.int16)
        if not self.single_phase:
            return values, owners
        limits = self.coverage.limits
        lower = limits.lower - rules.TRIPLE_MARGIN if limits.lower else 0.0
        allowed = (kelvin > lower) & (kelvin <= limits.upper)
        for stretch, below, above in self._open_stretches():
            here = np.flatnonzero(allowed & (kelvin >= stretch.low) & (kelvin < stretch.high))
            at = kelvin[here]
            past = at - below.reach[1] if below else np.full(at.shape, np.inf)
            before = above.reach[0] - at if above else np.full(at.shape, np.inf)
            nearer = past <= before
            for candidate, mine in ((below, nearer), (above, ~nearer)):
                if candidate:
                    self._fill(candidate, here[mine], kelvin, values, owners)
        return values, owners

    def _open_stretches(self) -> Iterator[tuple[Stretch, Candidate | None, Candidate | None]]:
        """Each stretch that nothing covers, with who answers below and above it."""
        stretches = self.coverage.stretches
        for i, stretch in enumerate(stretches):
            if stretch.candidate is None and not stretch.phases:
                below = stretches[i - 1].candidate if i else None
                above = stretches[i + 1].candidate if i + 1 < len(stretches) else None
                if below or above:
                    yield stretch, below, above

    def _fill(
        self, candidate: Candidate, here: NDArray[np.intp], kelvin: Array, values: Array, owners: NDArray[np.int16]
    ) -> None:
        at = kelvin[here]
        low, high = candidate.reach
        near = np.maximum(low - at, at - high) <= self._most
        here, at = here[near], at[near]
        found = self._evaluate(candidate, at)
        usable = np.isfinite(found)
        values[here[usable]] = found[usable]
        owners[here[usable]] = self._places[candidate.key]

    def _evaluate(self, candidate: Candidate, kelvin: Array) -> Array:
        """The values of a curve where its form means something and gives a usable number; else NaN."""
        curve = candidate.curve
        values = curve.values(kelvin)
        usable = (kelvin > curve.domain[0]) & (kelvin <= curve.domain[1]) & np.isfinite(values)
        if PROPERTIES[self.coverage.property].positive:
            usable &= values > 0.0
        return np.where(usable, values, np.nan)

    def answer(self, kelvin: float, reading: Reading | None = None) -> Extrapolation | None:
        """The value beyond the windows at one temperature, K; None if there is none."""
        values, owners = self.extend(np.array([kelvin]))
        if owners[0] < 0:
            return None
        return Extrapolation(float(values[0]), self.coverage.answering[owners[0]], self, kelvin, reading)

    def explain(self, refusal: Refusal) -> Refusal:
        """A refusal of this coverage with why going beyond its windows did not help, in a sentence more."""
        if refusal.reason in _PHASE_LIMITS:
            why = "--beyond does not cross a phase limit."
        elif refusal.reason in ("no-correlation", "several-phases", "no-value"):
            return refusal
        elif not self.single_phase:
            why = "--beyond needs the phase: name it with --phase."
        elif refusal.nearest and refusal.nearest[0].distance <= self._most:
            why = "Extrapolated there, its form gives no usable value."
        else:
            why = f"--beyond {self.beyond:.12g}K does not reach it."
        return replace(refusal, explanation=f"{refusal.explanation} {why}")

    def neighbours(self, candidate: Candidate, kelvin: float, value: float) -> Iterator[Neighbour]:
        """The other accepted correlations that end within reach of a temperature, nearest first."""
        others = [c for c in self.coverage.accepted if c is not candidate and not c.empty]
        for other in sorted(others, key=lambda c: (c.distance(kelvin), c.key)):
            found = float(self._evaluate(other, np.array([kelvin]))[0])
            if other.distance(kelvin) <= self._most and np.isfinite(found):
                percent = 100.0 * (found / value - 1.0) if value else math.inf
                yield Neighbour(other.key, other.distance(kelvin), found, percent)


class Extrapolation(Answer):
    """A value beyond the window of the correlation that gives it.

    Examples
    --------
    >>> import registry
    >>> with registry.open_library("shelf.db") as library:
    ...     answer = library.lookup("ethanol", 210.0, beyond=10.0)
    >>> answer.mark, answer.correlation.key, round(answer.distance, 2), answer.neighbours
    ('beyond', 'ethanol-antoine-low', 6.15, ())
    """

    __slots__ = ("_extrapolator",)

    def __init__(
        self, value: float, candidate: Candidate, extrapolator: Extrapolator, temperature: float,
        reading: Reading | None = None,
    ) -> None:  # fmt: skip
        super().__init__(temperature, value, candidate, extrapolator.coverage, reading)
        self._extrapolator = extrapolator

    @property
    def mark(self) -> str:
        """``beyond``."""
        return "beyond"

    @property
    def distance(self) -> float:
        """How far outside the window it lies, K."""
        return self._candidate.distance(self.temperature)

    @property
    def neighbours(self) -> tuple[Neighbour, ...]:
        """The other accepted correlations that end as near, and what they give there."""
        return tuple(self._extrapolator.neighbours(self._candidate, self.temperature, self.value))

    @property
    def piece(self) -> Piece | None:
        """None: what a source states holds in its window."""
        return None

    @property
    def chosen_because(self) -> str:
        """Why this correlation was extrapolated, in a sentence."""
        low, high = self._candidate.reach
        side = "above" if self.temperature < low else "below"
        nearest = f"the nearest, {low:.9g} to {high:.9g} K, ends {self.distance:.6g} K {side} it"
        return f"No window covers this temperature; {nearest}, and --beyond lets it answer."

    @property
    def cautions(self) -> tuple[str, ...]:
        """What to know before relying on the value."""
        first = f"It is extrapolated {self.distance:.6g} K beyond the window."
        return (first, self._word_neighbours(), *super().cautions)

    def _word_neighbours(self) -> str:
        neighbours = self.neighbours
        if not neighbours:
            return f"No other accepted correlation ends within {self._extrapolator.beyond:.6g} K to compare it with."
        listed = "; ".join(
            f"{n.correlation}, {n.distance:.6g} K beyond its window, gives {n.percent:+.3g} %" for n in neighbours
        )
        return f"Beside it {listed}."
