"""From a coverage and a request to an answer, a batch or a refusal."""

from __future__ import annotations

import contextlib
import dataclasses
import math
from typing import TYPE_CHECKING, Any

import numpy as np
from numpy.typing import NDArray

from registry.answers import Answer
from registry.conditions import PLAIN, Conditions
from registry.coverage import Coverage
from registry.errors import BadInput, Refused
from registry.refusals import Refusal
from registry.values import Value
from registry.verdicts import refuse

if TYPE_CHECKING:
    from registry.batches import Batch
    from registry.estimates import Method
    from registry.readings import Reading

__all__ = ["answer_many", "answer_one"]

Array = NDArray[np.float64]
Places = NDArray[np.signedinteger[Any]]


def answer_one(
    coverage: Coverage, kelvin: float, reading: Reading | None = None, conditions: Conditions = PLAIN
) -> Value:
    """The answer at one temperature.

    Parameters
    ----------
    coverage : Coverage
        Who answers where.
    kelvin : float
        The temperature on ITS-90, K.
    reading : Reading, optional
        The temperature as it was read, where it has an uncertainty or a scale.
    conditions : Conditions
        What was asked for by name.

    Returns
    -------
    Value
        An answer, or an extrapolation or an estimate where they were asked
        for.

    Raises
    ------
    Refused
        Where there is none; carries the refusal.
    BadInput
        If it is no temperature, or an estimate of another property.
    """
    _require_sense(coverage, conditions)
    value, candidate = coverage.value_at(kelvin)
    if candidate is None:
        found = None if conditions is PLAIN else _answer_otherwise(coverage, kelvin, reading, conditions)
        if found is None:
            raise Refused(_refuse_one(coverage, kelvin, conditions))
    else:
        found = Answer(kelvin, value, candidate, coverage, reading)
    if conditions.within is not None:
        _demand_within(coverage, found, conditions.within)
    return found


def _require_sense(coverage: Coverage, conditions: Conditions) -> None:
    """An estimate of another property is refused also where a window covers: the same words mean the same."""
    if conditions.estimate:
        from registry.estimates import require_vapour_pressure

        require_vapour_pressure(conditions.estimate, coverage.property)


def _answer_otherwise(
    coverage: Coverage, kelvin: float, reading: Reading | None, conditions: Conditions
) -> Value | None:
    """What answers beyond the windows, if it was asked for."""
    from registry.estimates import Estimator, MissingConstant
    from registry.extrapolation import Extrapolator

    found: Value | None = None
    if conditions.beyond:
        found = Extrapolator(coverage, conditions.beyond).answer(kelvin, reading)
    if found is None and conditions.estimate and _may_estimate(coverage, kelvin):
        with contextlib.suppress(MissingConstant):  # the refusal names it
            found = Estimator.of(conditions.estimate, coverage).answer(kelvin, reading)
    return found


def _may_estimate(coverage: Coverage, kelvin: float) -> bool:
    """False across a phase limit: there is nothing to estimate, and no constant is missed."""
    limits = coverage.limits
    inside = limits.lower <= kelvin <= limits.upper and 0.0 < kelvin < math.inf
    return inside and coverage.stretch_at(kelvin).candidate is None


def _refuse_one(coverage: Coverage, kelvin: float, conditions: Conditions) -> Refusal:
    """The refusal at one temperature, which must be a temperature."""
    refusal = refuse(coverage, kelvin)
    if refusal.reason == "not-a-temperature":
        raise BadInput(refusal.explanation)
    if conditions.beyond:
        from registry.extrapolation import explain_stop

        refusal = explain_stop(refusal, coverage, conditions.beyond)
    if conditions.estimate and _may_estimate(coverage, kelvin):
        from registry.estimates import Estimator, MissingConstant

        try:
            Estimator.of(conditions.estimate, coverage)
        except MissingConstant as error:
            refusal = dataclasses.replace(refusal, explanation=f"{refusal.explanation} {error}")
    return refusal


def _demand_within(coverage: Coverage, found: Value, within: float) -> None:
    from registry.tolerance import refuse_uncertain

    refusal = refuse_uncertain(coverage, found, within)
    if refusal is not None:
        raise Refused(refusal)


def answer_many(coverage: Coverage, kelvin: NDArray[np.float64], conditions: Conditions = PLAIN) -> Batch:
    """The answers at many temperatures.

    Parameters
    ----------
    coverage : Coverage
        Who answers where.
    kelvin : array of float, any shape
        Temperatures on ITS-90, K.
    conditions : Conditions
        What was asked for by name.

    Returns
    -------
    Batch
        Values that are NaN where refused, with a mark each.
    """
    from registry.batches import ACCEPTED, Batch

    values, places = coverage.evaluate(kelvin)
    if conditions is PLAIN:
        return Batch(kelvin, values, places, coverage)
    _require_sense(coverage, conditions)
    flat, found = np.ascontiguousarray(kelvin).reshape(-1), values.reshape(-1)
    owners = coverage.owners[places.reshape(-1)]
    uncovered = owners < 0
    marks = np.full(found.shape, ACCEPTED, dtype=np.int8)
    if conditions.beyond:
        _fill_beyond(coverage, conditions.beyond, flat, found, owners, marks)
    if conditions.estimate:
        _fill_estimates(coverage, conditions.estimate, flat, uncovered, found, marks)
    if conditions.within is not None:
        found[~_is_within(coverage, conditions.within, flat, found, owners, marks)] = np.nan

    def explain(one: float) -> Refusal:
        try:
            answer_one(coverage, one, None, conditions)
        except Refused as error:
            return error.refusal
        except BadInput:
            pass  # what is no temperature is a refusal among many
        return refuse(coverage, one)

    shape = values.shape
    return Batch(kelvin, values, places, coverage, owners.reshape(shape), marks.reshape(shape), explain)


def _fill_beyond(
    coverage: Coverage, beyond: float, flat: Array, found: Array, owners: Places, marks: NDArray[np.int8]
) -> None:
    from registry.batches import BEYOND
    from registry.extrapolation import Extrapolator

    values, nearest = Extrapolator(coverage, beyond).extend(flat)
    here = nearest >= 0
    found[here], owners[here], marks[here] = values[here], nearest[here], BEYOND


def _fill_estimates(
    coverage: Coverage, method: Method, flat: Array, uncovered: NDArray[np.bool_], found: Array, marks: NDArray[np.int8]
) -> None:
    from registry.batches import ESTIMATE
    from registry.estimates import Estimator, MissingConstant

    inside = (flat >= coverage.limits.lower) & (flat <= coverage.limits.upper) & (flat > 0.0) & np.isfinite(flat)
    here = np.flatnonzero(uncovered & np.isnan(found) & inside)
    if here.size:
        try:
            values = Estimator.of(method, coverage).values(flat[here])
        except MissingConstant:  # each refusal names it
            return
        usable = here[np.isfinite(values)]
        found[usable], marks[usable] = values[np.isfinite(values)], ESTIMATE


def _is_within(
    coverage: Coverage, within: float, flat: Array, found: Array, owners: Places, marks: NDArray[np.int8]
) -> NDArray[np.bool_]:
    """Where a source states an uncertainty that is small enough."""
    from registry.batches import ACCEPTED

    return coverage.expanded_percents(flat, found, np.where(marks == ACCEPTED, owners, -1)) <= within
