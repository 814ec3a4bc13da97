"""From a coverage and a request to an answer, a batch or a refusal."""

from __future__ import annotations

import dataclasses
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
Origins = NDArray[np.int8]


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
        found, missing = _answer_otherwise(coverage, kelvin, reading, conditions)
        if found is None:
            raise Refused(_refuse_one(coverage, kelvin, conditions, missing))
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
) -> tuple[Value | None, str]:
    """What answers beyond the windows, if it was asked for; else a sentence on the constant that an estimate misses."""
    found: Value | None = None
    if conditions.beyond:
        from registry.extrapolation import Extrapolator

        found = Extrapolator(coverage, conditions.beyond).answer(kelvin, reading)
    if found is None and conditions.estimate and _may_estimate(coverage, kelvin):
        from registry.estimates import Estimator, MissingConstant

        try:
            found = Estimator.of(conditions.estimate, coverage).answer(kelvin, reading)
        except MissingConstant as error:
            return None, str(error)
    return found, ""


def _may_estimate(coverage: Coverage, kelvin: float) -> bool:
    """False across a phase limit: there is nothing to estimate, and no constant is missed."""
    return bool(coverage.limits.hold(kelvin)) and coverage.stretch_at(kelvin).candidate is None


def _refuse_one(coverage: Coverage, kelvin: float, conditions: Conditions, missing: str) -> Refusal:
    """The refusal at one temperature, which must be a temperature."""
    refusal = refuse(coverage, kelvin)
    if refusal.reason == "not-a-temperature":
        raise BadInput(refusal.explanation)
    if conditions.beyond:
        from registry.extrapolation import Extrapolator

        refusal = Extrapolator(coverage, conditions.beyond).explain(refusal)
    return dataclasses.replace(refusal, explanation=f"{refusal.explanation} {missing}") if missing else refusal


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
    origins = np.full(found.shape, ACCEPTED, dtype=np.int8)
    if conditions.beyond:
        _fill_beyond(coverage, conditions.beyond, flat, found, owners, origins)
    if conditions.estimate:
        _fill_estimates(coverage, conditions.estimate, flat, uncovered, found, origins)
    if conditions.within is not None:
        found[~_is_within(coverage, conditions.within, flat, found, owners, origins)] = np.nan

    def explain(one: float) -> Refusal:
        try:
            answer_one(coverage, one, None, conditions)
        except Refused as error:
            return error.refusal
        except BadInput:
            pass  # what is no temperature is a refusal among many
        return refuse(coverage, one)

    shape = values.shape
    return Batch(kelvin, values, places, coverage, owners.reshape(shape), origins.reshape(shape), explain)


def _fill_beyond(
    coverage: Coverage, beyond: float, flat: Array, found: Array, owners: Places, origins: Origins
) -> None:
    from registry.batches import BEYOND
    from registry.extrapolation import Extrapolator

    values, nearest = Extrapolator(coverage, beyond).extend(flat)
    here = nearest >= 0
    found[here], owners[here], origins[here] = values[here], nearest[here], BEYOND


def _fill_estimates(
    coverage: Coverage,
    method: Method,
    flat: Array,
    uncovered: NDArray[np.bool_],
    found: Array,
    origins: Origins,
) -> None:
    from registry.batches import ESTIMATE
    from registry.estimates import Estimator, MissingConstant

    here = np.flatnonzero(uncovered & np.isnan(found) & coverage.limits.hold(flat))
    if here.size:
        try:
            values = Estimator.of(method, coverage).values(flat[here])
        except MissingConstant:  # each refusal names it
            return
        usable = here[np.isfinite(values)]
        found[usable], origins[usable] = values[np.isfinite(values)], ESTIMATE


def _is_within(
    coverage: Coverage, within: float, flat: Array, found: Array, owners: Places, origins: Origins
) -> NDArray[np.bool_]:
    """Where a source states an uncertainty that is small enough."""
    from registry.batches import ACCEPTED

    return coverage.expanded_percents(flat, found, np.where(origins == ACCEPTED, owners, -1)) <= within
