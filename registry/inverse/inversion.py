"""The inverse of a coverage: the temperature at which the answering correlation has a value.

The branches of all stretches are found once. A value is placed among the ends
of their ranges by one search, and solved by the branch that alone has it;
where several have it, by each of them.
"""

from __future__ import annotations

import math
from collections.abc import Iterator
from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry import rules
from registry.candidate import Candidate
from registry.coverage import Coverage, Stretch
from registry.evaluation import BLOCK
from registry.forms.form import Scratch
from registry.inverse.branches import Branch
from registry.inverse.turns import cut_branches
from registry.properties import PROPERTIES

__all__ = ["END_TOLERANCE", "NONE", "SAME_TEMPERATURE", "SEVERAL", "Inversion"]

Array = NDArray[np.float64]
Places = NDArray[np.signedinteger[Any]]

NONE, SEVERAL = -1, -2
"""Instead of a stretch: no temperature has the value, or more than one."""

END_TOLERANCE = 1e-12
"""Relative difference within which a value equals that at the end of a branch."""

SAME_TEMPERATURE = 2.0 * rules.BOUND_TOLERANCE
"""Kelvin within which two temperatures are one: neighbouring stretches meet so far from the bound between them."""

_FEW_ENDS = 24
"""Up to here, adding comparisons is quicker than a binary search."""


class Inversion:
    """The temperatures at which a coverage has given values.

    Parameters
    ----------
    coverage : Coverage
        Who answers where.

    Attributes
    ----------
    coverage : Coverage
        As given.
    """

    def __init__(self, coverage: Coverage) -> None:
        self.coverage = coverage

    @cached_property
    def branches(self) -> tuple[Branch, ...]:
        """The monotone parts of all curves, in the order of temperature; also of those that wait for a phase."""
        positive = PROPERTIES[self.coverage.property].positive
        found: list[Branch] = []
        for place, stretch in enumerate(self.coverage.stretches):
            for part in self._open_phases(stretch) if stretch.phases else (stretch,):
                found += cut_branches(place, part, positive=positive)
        return tuple(found)

    @cached_property
    def unaccepted(self) -> tuple[Branch, ...]:
        """The monotone parts of the curves that may not answer, by candidate; they belong to no stretch."""
        positive = PROPERTIES[self.coverage.property].positive
        waiting = (c for c in self.coverage.candidates if not c.entry.accepted and not c.empty)
        return tuple(branch for c in waiting for branch in cut_branches(NONE, _span_candidate(c), positive=positive))

    def _open_phases(self, stretch: Stretch) -> Iterator[Stretch]:
        """Each candidate of a stretch in which no phase was named, as far as it reaches."""
        for candidate in self.coverage.accepted:
            part = _span_candidate(candidate)
            if (
                not candidate.empty
                and candidate.record.phase in stretch.phases
                and part.low < stretch.high
                and stretch.low < part.high
            ):
                yield Stretch(max(part.low, stretch.low), min(part.high, stretch.high), candidate, stretch.phases)

    def answers(self, branch: Branch) -> bool:
        """True if a branch may answer; False where a phase must be named first."""
        return self.coverage.stretches[branch.place].candidate is not None

    @cached_property
    def _ranges(self) -> tuple[tuple[float, float], ...]:
        """For each branch the least value that it has, and the least above all that it has."""
        return tuple(
            (
                branch.least - END_TOLERANCE * abs(branch.least),
                math.nextafter(branch.greatest + END_TOLERANCE * abs(branch.greatest), math.inf),
            )
            for branch in self.branches
        )

    @cached_property
    def _ends(self) -> Array:
        """Where the branches that have a value change, rising."""
        return np.array(sorted({end for ends in self._ranges for end in ends}), dtype=float)

    @cached_property
    def _owners(self) -> tuple[tuple[int, ...], ...]:
        """For each interval between ends the branches that have its values."""
        lows = [-math.inf, *self._ends.tolist()]
        return tuple(tuple(i for i, (first, stop) in enumerate(self._ranges) if first <= low < stop) for low in lows)

    @cached_property
    def _alone(self) -> NDArray[np.int16]:
        """For each interval the one branch that has its values; NONE or SEVERAL instead."""
        simple = [self.answers(branch) and branch.least < branch.greatest for branch in self.branches]
        rows = [
            NONE if not owners else owners[0] if len(owners) == 1 and simple[owners[0]] else SEVERAL
            for owners in self._owners
        ]
        return np.array(rows, dtype=np.int16)

    def solve(self, values: NDArray[np.float64]) -> tuple[Array, Places]:
        """The temperatures at which the answering correlation has given values.

        Parameters
        ----------
        values : array of float, any shape
            In SI units.

        Returns
        -------
        temperatures : array of float, same shape
            K, to 1e-12 relative; NaN where no temperature has the value, or
            several have.
        places : array of int, same shape
            Index into the stretches of the coverage; `NONE` or `SEVERAL`
            where there is no temperature.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     inversion = Inversion(library.coverage("water"))
        >>> inversion.solve(np.array([101325.0, 1e9]))[0].round(4)
        array([373.1243,      nan])
        """
        flat = np.ascontiguousarray(values, dtype=float).reshape(-1)
        kelvin, places = np.full(flat.size, np.nan), np.full(flat.size, NONE, dtype=np.int16)
        scratch = Scratch(min(BLOCK, flat.size))
        with np.errstate(all="ignore"):
            for start in range(0, flat.size, BLOCK):
                part = slice(start, start + BLOCK)
                self._solve_block(flat[part], kelvin[part], places[part], scratch)
        shape = np.shape(values)
        return kelvin.reshape(shape), places.reshape(shape)

    def find_all(self, value: float) -> tuple[tuple[float, Branch], ...]:
        """Every temperature, K, at which a curve has a value, with its branch, in the order of temperature.

        Also of curves that wait for a phase; of one that stays the same, both
        ends.
        """
        interval = int(np.searchsorted(self._ends, value, side="right")) if value == value else 0
        found: list[tuple[float, Branch]] = []
        with np.errstate(all="ignore"):
            for branch in (self.branches[i] for i in self._owners[interval]):
                flat = branch.least == branch.greatest
                ends = [branch.low, branch.high] if flat else branch.solve(np.array([value]), Scratch(1)).tolist()
                found += [(kelvin, branch) for kelvin in ends]
        kept: list[tuple[float, Branch]] = []
        for kelvin, branch in found:
            if not kept or kelvin - kept[-1][0] > SAME_TEMPERATURE:
                kept.append((kelvin, branch))
        return tuple(kept)

    def _solve_block(self, values: Array, kelvin: Array, places: Places, scratch: Scratch) -> None:
        intervals = self._locate(values)
        alone = self._alone.take(intervals)
        first = int(alone[0])
        if (alone == first).all() and first >= 0:
            kelvin[:] = self.branches[first].solve(values, scratch)
            places[:] = self.branches[first].place
            return
        seen = np.bincount(alone - SEVERAL, minlength=len(self.branches) - SEVERAL)
        for index in np.flatnonzero(seen[-SEVERAL:]).tolist():
            mine = np.flatnonzero(alone == index)
            kelvin[mine] = self.branches[index].solve(values.take(mine), scratch)
            places[mine] = self.branches[index].place
        if seen[0]:
            self._solve_shared(values, intervals, np.flatnonzero(alone == SEVERAL), kelvin, places, scratch)

    def _solve_shared(
        self, values: Array, intervals: Places, shared: NDArray[np.intp], kelvin: Array, places: Places,
        scratch: Scratch,
    ) -> None:  # fmt: skip
        """Values that several branches have: one answer only where their temperatures are one."""
        for interval in np.unique(intervals[shared]).tolist():
            mine = shared[intervals[shared] == interval]
            owners = [self.branches[i] for i in self._owners[interval]]
            solved = [branch.solve(values.take(mine), scratch) for branch in owners]
            solved += [np.full(mine.size, branch.high) for branch in owners if branch.least == branch.greatest]
            one = (np.ptp(solved, axis=0) <= SAME_TEMPERATURE) & all(map(self.answers, owners))
            kelvin[mine] = np.where(one, solved[0], np.nan)
            places[mine] = np.where(one, owners[0].place, SEVERAL)

    def _locate(self, values: Array) -> Places:
        """The interval of each value: how many ends lie at or below it; 0 for no number."""
        if self._ends.size > _FEW_ENDS:
            found = np.searchsorted(self._ends, values, side="right")
            found[np.isnan(values)] = 0
            return found
        intervals = np.zeros(values.size, dtype=np.intp)
        flag = np.empty(values.size, dtype=np.bool_)
        count = np.zeros(values.size, dtype=np.int8)
        for end in self._ends:
            np.greater_equal(values, end, out=flag)
            np.add(count, flag.view(np.int8), out=count)
        intervals[:] = count
        return intervals


def _span_candidate(candidate: Candidate) -> Stretch:
    """Where a candidate may answer, whoever else may: its reach with the tolerance at its bounds."""
    low, high = candidate.reach
    return Stretch(low - rules.BOUND_TOLERANCE, math.nextafter(high + rules.BOUND_TOLERANCE, math.inf), candidate)
