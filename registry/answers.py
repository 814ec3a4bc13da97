"""What a lookup gives: an answer, a batch, or a refusal."""

from __future__ import annotations

import math
from fractions import Fraction
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry import rules
from registry.candidate import Candidate
from registry.coverage import Coverage, Seam
from registry.errors import BadInput
from registry.properties import PROPERTIES
from registry.quantities import UNITS, Unit, convert, find_unit, gauge_unit
from registry.records import Correlation
from registry.refusals import Nearest, Refusal
from registry.verdicts import Verdict, explain_choice, judge_candidates, refuse

__all__ = ["Answer", "Batch", "Nearest", "Refusal", "Verdict"]


class Answer:
    """A value with everything behind it; what is not asked for is not computed.

    Examples
    --------
    >>> import registry
    >>> with registry.open_library("shelf.db") as library:
    ...     answer = library.lookup("ethanol", 323.15)
    >>> round(answer.to("mmHg"), 1), answer.correlation.key, answer.correlation.obtained
    (221.2, 'ethanol-poling-5', 'memory')
    """

    __slots__ = ("_candidate", "_coverage", "_temperature", "_value")

    def __init__(self, temperature: float, value: float, candidate: Candidate, coverage: Coverage) -> None:
        self._temperature = temperature
        self._value = value
        self._candidate = candidate
        self._coverage = coverage

    @property
    def temperature(self) -> float:
        """The temperature as asked, K."""
        return self._temperature

    @property
    def value(self) -> float:
        """The value in the SI unit of the property."""
        return self._value

    def __repr__(self) -> str:
        return f"<Answer {self.value!r} {self.unit} at {self.temperature!r} K by {self._candidate.key}>"

    @property
    def compound(self) -> str:
        """The key of the compound."""
        return self._coverage.dossier.compound.key

    @property
    def unit(self) -> str:
        """The SI unit of `value`."""
        return PROPERTIES[self._coverage.property].unit

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
    def position(self) -> int:
        """The change up to which the library was read."""
        return self._coverage.dossier.position

    @property
    def grams_per_mole(self) -> float:
        """The molar mass of the compound, g/mol."""
        return self._coverage.dossier.compound.record.grams_per_mole()

    @property
    def window(self) -> tuple[float, float]:
        """The window of the correlation, K."""
        return self._candidate.record.window_kelvin()

    @property
    def uncertainty_percent(self) -> float | None:
        """The stated uncertainty there, percent of the value; None if not stated."""
        return self._candidate.stated_percent(self.temperature, self.value)

    @property
    def log_rate(self) -> float:
        """d ln value / dT there, 1/K."""
        return self._candidate.curve.log_rate(self.temperature)

    @property
    def percent_per_kelvin(self) -> float:
        """How steep the curve is there, percent of the value per kelvin."""
        return 100.0 * self.log_rate

    @property
    def factor_per_10_kelvin(self) -> float:
        """exp(10 K times d ln value / dT): the local factor for 10 K more."""
        exponent = 10.0 * self.log_rate
        return math.exp(exponent) if exponent < 700.0 else math.inf

    @property
    def citation(self) -> str:
        """The source as a line of text."""
        source = self._coverage.dossier.sources.get(self.correlation.source)
        return source.citation if source else self.correlation.source

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
        return tuple(find_cautions(self._coverage, self._candidate, self.temperature))

    def to(self, unit: str, atmosphere: float | None = None) -> float:
        """The value in another unit.

        Parameters
        ----------
        unit : str
            A unit of the property's dimension; a gauge unit needs `atmosphere`.
        atmosphere : float, optional
            The local atmospheric pressure, Pa.

        Returns
        -------
        float
            The value, rounded once.

        Raises
        ------
        BadQuantity
            If the unit is unknown, of another dimension, or gauge without an
            atmosphere.
        """
        prop = PROPERTIES[self._coverage.property]
        if not isinstance(unit, str):
            raise BadInput(f"{unit!r} is no unit; a text such as kPa is allowed.")
        target = find_target_unit(unit, prop.dimension, atmosphere)
        return convert(self.value, UNITS[prop.unit], target, self.grams_per_mole)

    # last, for the name hides the decorator
    @property
    def property(self) -> str:
        """What it is a value of."""
        return self._coverage.property


def find_target_unit(unit: str, dimension: str, atmosphere: float | None) -> Unit:
    """A unit for output; a gauge unit where the atmosphere is stated."""
    if atmosphere is not None and dimension == "pressure":
        return gauge_unit(unit, Fraction(atmosphere))
    return find_unit(unit, dimension)


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
        if kelvin >= limits.lower - rules.TRIPLE_MARGIN and not coverage.metastable:
            cautions.append(
                f"It lies {limits.lower - kelvin:.3g} K below the triple temperature, {limits.lower:.9g} K."
            )
        else:
            cautions.append(f"The liquid is metastable below {limits.lower:.9g} K.")
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


class Batch:
    """Values for an array of temperatures, with the choice behind each.

    Attributes
    ----------
    temperatures : array of float
        As asked, K.
    values : array of float, same shape
        In the SI unit of the property; NaN where refused.
    coverage : Coverage
        What the values come from.
    """

    def __init__(
        self, temperatures: NDArray[np.float64], values: NDArray[np.float64],
        places: NDArray[np.signedinteger[Any]], coverage: Coverage,
    ) -> None:  # fmt: skip
        values.flags.writeable = False
        self.temperatures = temperatures
        self.values = values
        self.coverage = coverage
        self._places = places

    def __repr__(self) -> str:
        answered = self.values.size - int(self.refused.sum())
        return f"<Batch of {self.values.size} for {self.coverage.dossier.compound.key}, {answered} answered>"

    @cached_property
    def chosen(self) -> NDArray[np.int16]:
        """Index into `correlations` for each temperature, -1 where refused."""
        chosen = np.empty(self.values.shape, dtype=np.int16)
        np.take(self.coverage.owners, self._places, out=chosen, mode="wrap")
        refused = self.refused
        if refused.any():
            chosen[refused] = -1
        return chosen

    @property
    def correlations(self) -> tuple[Correlation, ...]:
        """The correlations that answer somewhere, in the order of temperature."""
        return tuple(candidate.record for candidate in self.coverage.answering)

    @cached_property
    def refused(self) -> NDArray[np.bool_]:
        """True where nothing may answer."""
        return np.isnan(self.values)

    @property
    def seams(self) -> tuple[Seam, ...]:
        """Where the answering correlation changes, with the jump."""
        return self.coverage.seams

    @property
    def unit(self) -> str:
        """The SI unit of the values."""
        return PROPERTIES[self.coverage.property].unit

    def refusal(self, index: int | tuple[int, ...]) -> Refusal:
        """Why the temperature at an index was refused.

        Parameters
        ----------
        index : int or tuple of int
            Where in the array.

        Returns
        -------
        Refusal
            With reason, explanation and nearest windows.

        Raises
        ------
        BadInput
            If the temperature there was answered.
        """
        if not self.refused[index]:
            raise BadInput(f"The temperature at {index} was answered: {self.values[index]} {self.unit}.")
        return refuse(self.coverage, float(self.temperatures[index]))
