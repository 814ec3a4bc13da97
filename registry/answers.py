"""What a lookup gives for one temperature: an answer with everything behind it."""

from __future__ import annotations

from typing import TYPE_CHECKING

from registry import rules
from registry.candidate import Candidate
from registry.coverage import Coverage
from registry.properties import PROPERTIES
from registry.readings import Reading
from registry.records import Correlation
from registry.values import Value
from registry.verdicts import Verdict, explain_choice, judge_candidates

# a lookup of a value alone needs neither
if TYPE_CHECKING:
    from registry.budget import Budget
    from registry.scale_effects import ScaleEffect
    from registry.uncertainty import Piece

__all__ = ["Answer", "find_cautions"]


class Answer(Value):
    """A value with everything behind it; what is not asked for is not computed.

    Examples
    --------
    >>> import registry
    >>> with registry.open_library("shelf.db") as library:
    ...     answer = library.lookup("ethanol", 323.15)
    >>> round(answer.to("mmHg"), 1), answer.correlation.key, answer.correlation.obtained
    (221.2, 'ethanol-poling-5', 'memory')
    """

    __slots__ = ("_candidate",)

    def __init__(
        self, temperature: float, value: float, candidate: Candidate, coverage: Coverage,
        reading: Reading | None = None,
    ) -> None:  # fmt: skip
        super().__init__(temperature, value, coverage, reading)
        self._candidate = candidate

    def __repr__(self) -> str:
        return f"<{type(self).__name__} {self.value!r} {self.unit} at {self.temperature!r} K by {self._candidate.key}>"

    @property
    def mark(self) -> str:
        """``draft`` where a draft answers; empty for an accepted correlation."""
        return self._candidate.entry.mark

    @property
    def correlation(self) -> Correlation:
        """The record that answered."""
        return self._candidate.record

    @property
    def revision(self) -> int:
        """Its revision."""
        return self._candidate.entry.revision

    @property
    def counts_as(self) -> str:
        """The evidence it ranks by: its own, or compiled if it is from memory and unconfirmed."""
        return self._candidate.counted.evidence

    @property
    def standing(self) -> str:
        """Its standing."""
        return self._candidate.entry.standing

    @property
    def window(self) -> tuple[float, float]:
        """The window of the correlation, K."""
        return self._candidate.record.window_kelvin()

    @property
    def piece(self) -> Piece | None:
        """The piece of the stated uncertainty that holds there, or None."""
        return self._candidate.piece_at(self.temperature)

    @property
    def uncertainty_percent(self) -> float | None:
        """The stated uncertainty there, percent of the value, as stated; None if not stated."""
        piece = self.piece
        return piece.percent_of(self.value) if piece else None

    @property
    def expanded_percent(self) -> float | None:
        """The stated uncertainty and that of the temperature together, percent at coverage factor 2; None if none."""
        from registry.budget import combine_percents

        piece = self.piece
        stated, factor = (piece.percent_of(self.value), piece.factor) if piece else (None, None)
        return combine_percents(stated, factor, self.temperature_percent)

    @property
    def budget(self) -> Budget:
        """The parts of its uncertainty: what is stated, what the temperature adds, what the digits leave open.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     budget = library.lookup("water", registry.parse_reading("298.15+/-0.05K")).budget
        >>> budget.stated_percent, round(budget.temperature_percent, 3), round(budget.expanded_percent, 3)
        (0.025, 0.298, 0.299)
        """
        from registry.budget import make_budget

        return make_budget(self._candidate, self.piece, self.temperature, self.value, self.temperature_percent)

    @property
    def scale_effects(self) -> tuple[ScaleEffect, ...]:
        """What the temperature scale of the correlation does to the value, or might do where none is stated."""
        from registry.scale_effects import find_scale_effects

        return find_scale_effects(self._candidate.curve, self.temperature)

    @property
    def origin(self) -> str:
        """The key of the correlation."""
        return self._candidate.key

    @property
    def log_rate(self) -> float:
        """d ln value / dT there, 1/K."""
        return self._candidate.curve.log_rate(self.temperature)

    @property
    def citation(self) -> str:
        """The source as a line of text."""
        return self._coverage.dossier.cite(self.correlation.source)

    @property
    def chosen_because(self) -> str:
        """Why this correlation answered, in a sentence."""
        return explain_choice(self._coverage, self.temperature)

    @property
    def candidates(self) -> tuple[Verdict, ...]:
        """Every correlation for the property and phase, with its verdict."""
        return judge_candidates(self._coverage, self.temperature)

    @property
    def cautions(self) -> tuple[str, ...]:
        """What to know before relying on the value."""
        return (*find_cautions(self._coverage, self._candidate, self.temperature), *self.caution_spread())


def find_cautions(coverage: Coverage, candidate: Candidate, kelvin: float) -> list[str]:
    """What to know before relying on a value, in sentences."""
    record, limits = candidate.record, coverage.limits
    cautions = []
    if candidate.entry.standing != "accepted":
        cautions.append(f"The correlation is {candidate.entry.standing}, not accepted.")
    if record.obtained == "memory":
        cautions.append(_caution_memory(candidate))
    if record.window_basis != "printed":
        basis = "from memory" if record.window_basis == "memory" else "assumed, not printed"
        cautions.append(f"The window is {basis}.")
    if PROPERTIES[record.property].lower and kelvin < limits.lower - rules.BOUND_TOLERANCE:
        # the margin has the tolerance of a window's bound
        if kelvin >= limits.lower - rules.TRIPLE_MARGIN - rules.BOUND_TOLERANCE and not coverage.metastable:
            cautions.append(
                f"It lies {limits.lower - kelvin:.3g} K below the triple temperature, {limits.lower:.9g} K."
            )
        else:
            cautions.append(f"The liquid is metastable below {limits.lower:.9g} K.")
    if seam := coverage.seam_at(kelvin):
        sides = f"{seam.below} answers below it, {seam.above} above"
        cautions.append(f"A seam: {sides}; the value changes by {seam.jump_percent:+.3g} %.")
    for quantity in limits.unchecked:
        cautions.append(f"No {quantity.replace('-', ' ')} is recorded, so the phase could not be checked.")
    if not candidate.curve.scale.reaches(kelvin):
        cautions.append(f"No published conversion from ITS-90 to {record.temperature_scale} reaches this temperature.")
    return cautions


def _caution_memory(candidate: Candidate) -> str:
    counted, record = candidate.counted, candidate.record
    text = "The coefficients are from memory"
    if record.evidence == counted.evidence:
        return f"{text}; {counted.agreeing} independent values confirm them." if counted.compared else f"{text}."
    return f"{text} and not confirmed: they count as {counted.evidence}, not {record.evidence}."
