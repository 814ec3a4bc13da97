"""Branches: the parts of a curve on which its value only rises or only falls, and their inverse."""

from __future__ import annotations

import math
from functools import cached_property
from typing import NamedTuple

import numpy as np
from numpy.typing import NDArray

from registry.candidate import Candidate
from registry.curve import Curve
from registry.forms.form import Scratch
from registry.inverse.roots import find_roots

__all__ = ["Branch"]

Array = NDArray[np.float64]

_SAMPLES = 257
"""Temperatures from which the first guesses are read."""

_FEWEST, _MOST = 64, 4096
"""Cells of a table; doubled until one step from it is exact."""

_ENOUGH = 0.98
"""The share of cells from which one step must be exact."""

_EXACT = 1e-15
"""Error of a temperature after the last step, relative."""

_SHORT = 1e-9
"""Longest last step, relative to the temperature, whatever its cell allows: the rest goes with its square."""

_PROBE = 0.5 - 0.5 / math.sqrt(3.0)
"""Where in a cell the slope of a cubic through its ends is worst."""


class Table(NamedTuple):
    """The inverse of a branch as cubics over cells of equal width in the value or its logarithm.

    Attributes
    ----------
    start, scale : float
        ``(x - start) * scale`` is the cell and the place in it.
    cubics : tuple of array
        Four coefficients for each cell, K.
    nodes : array
        Temperatures at the ends of the cells, K.
    steps : array
        For each cell the longest last step, relative to the temperature.
    """

    start: float
    scale: float
    cubics: tuple[Array, Array, Array, Array]
    nodes: Array
    steps: Array


class Branch:
    """A curve between two temperatures where it only rises, only falls, or stays the same.

    Parameters
    ----------
    place : int
        Index of the stretch it belongs to.
    candidate : Candidate
        Who answers there.
    low, high : float
        Its ends, K; both belong to it.
    positive : bool
        True if the values are above zero, so that their logarithms are worked with.
    """

    def __init__(self, place: int, candidate: Candidate, low: float, high: float, *, positive: bool) -> None:
        self.place = place
        self.candidate = candidate
        self.low = low
        self.high = high
        self._positive = positive
        self.ends = (self._curve.value(low), self._curve.value(high))

    @property
    def _curve(self) -> Curve:
        return self.candidate.curve

    @property
    def least(self) -> float:
        """The least value, SI."""
        return min(self.ends)

    @property
    def greatest(self) -> float:
        """The greatest value, SI."""
        return max(self.ends)

    def solve(self, values: Array, scratch: Scratch) -> Array:
        """The temperatures at which the curve has these values.

        Parameters
        ----------
        values : array of float, one-dimensional and contiguous
            In SI units; one beyond an end counts as that end.
        scratch : Scratch
            Working arrays.

        Returns
        -------
        array of float
            Temperatures, K.
        """
        table = self._table
        wanted = np.minimum(np.maximum(values, self.least), self.greatest)
        place = ((np.log(wanted) if self._positive else wanted) - table.start) * table.scale
        cell = np.minimum(place.astype(np.intp), table.steps.size - 1)
        place -= cell
        kelvin, slope = _read_cubics(table, cell, place)
        found = np.empty_like(kelvin)
        self._curve.fill(kelvin, found, scratch)
        miss = wanted - found
        if self._positive:
            miss /= found
        step = miss * slope
        step *= table.scale
        kelvin += step
        np.abs(step, step)
        sure = step <= table.steps.take(cell, mode="clip") * kelvin
        if not sure.all():
            rest = np.flatnonzero(~sure)
            kelvin[rest] = self._search(wanted[rest], cell[rest], table)
        return np.minimum(np.maximum(kelvin, self.low), self.high)

    def _search(self, wanted: Array, cell: NDArray[np.intp], table: Table) -> Array:
        """The safeguarded way, between the nodes around a cell."""
        # one more on either side: a node is rounded too
        before, after = np.maximum(cell - 1, 0), np.minimum(cell + 2, table.nodes.size - 1)
        return self._find(wanted, table.nodes[before], table.nodes[after], table.nodes[cell])

    def _find(self, wanted: Array, low: Array, high: Array, start: Array) -> Array:
        below, above = (low, high) if self.ends[0] <= self.ends[1] else (high, low)
        return find_roots(self._curve, wanted, below, above, start, positive=self._positive)

    @cached_property
    def _table(self) -> Table:
        """Built when first asked for, as fine as one step needs."""
        with np.errstate(all="ignore"):
            if self.least == self.greatest:
                return _flat_table(self.low, self.least, positive=self._positive)
            sampled = np.linspace(self.low, self.high, _SAMPLES)
            known = self._scaled(self._curve.values(sampled))
            cells = _FEWEST
            while True:
                table, share = self._build_table(cells, sampled, known)
                if share >= _ENOUGH or cells >= _MOST:
                    return table
                cells *= 2

    def _scaled(self, values: Array) -> Array:
        return np.log(values) if self._positive else values

    def _build_table(self, cells: int, sampled: Array, known: Array) -> tuple[Table, float]:
        first, last = self._scaled(np.array([self.least, self.greatest])).tolist()
        width = (last - first) / cells
        nodes = self._solve_scaled(np.linspace(first, last, cells + 1), sampled, known)
        rising = self.ends[0] <= self.ends[1]
        nodes[0], nodes[-1] = (self.low, self.high) if rising else (self.high, self.low)
        slopes = self._inverse_slopes(nodes) * width
        rises = np.diff(nodes)
        # at a turn the inverse is vertical: any finite slope does, the search takes over there
        left = np.where(np.isfinite(slopes[:-1]), slopes[:-1], rises)
        right = np.where(np.isfinite(slopes[1:]), slopes[1:], rises)
        cubics = (nodes[:-1].copy(), left, 3.0 * rises - 2.0 * left - right, left + right - 2.0 * rises)
        table = Table(first, 1.0 / width, cubics, nodes, np.empty(cells))
        return self._judge_cells(table, first + (np.arange(cells) + _PROBE) * width, sampled, known)

    def _judge_cells(self, table: Table, probes: Array, sampled: Array, known: Array) -> tuple[Table, float]:
        """How long a last step may be from each cell, and the share of cells whose cubic is that close."""
        cell = np.arange(probes.size)
        kelvin, slope = _read_cubics(table, cell, np.full(probes.size, _PROBE))
        exact = self._solve_scaled(probes, sampled, known)
        off = np.abs(slope * table.scale / self._inverse_slopes(exact) - 1.0)
        allowed = np.fmin(_SHORT, _EXACT / (8.0 * off))
        allowed[~np.isfinite(off)] = 0.0
        share = np.count_nonzero(4.0 * np.abs(kelvin - exact) <= allowed * exact) / probes.size
        return table._replace(steps=allowed), share

    def _solve_scaled(self, scaled: Array, sampled: Array, known: Array) -> Array:
        rising = self.ends[0] <= self.ends[1]
        order = slice(None) if rising else slice(None, None, -1)
        start = np.interp(scaled, known[order], sampled[order])
        wanted = np.exp(scaled) if self._positive else scaled
        wanted = np.minimum(np.maximum(wanted, self.least), self.greatest)
        return self._find(wanted, np.full(scaled.size, self.low), np.full(scaled.size, self.high), start)

    def _inverse_slopes(self, kelvin: Array) -> Array:
        """dT/dx, x the value or its logarithm."""
        rates = self._curve.rates(kelvin)
        return self._curve.values(kelvin) / rates if self._positive else 1.0 / rates


def _read_cubics(table: Table, cell: NDArray[np.intp], place: Array) -> tuple[Array, Array]:
    """The temperature at a place in a cell, and its slope there in cells."""
    c0, c1, c2, c3 = (column.take(cell, mode="clip") for column in table.cubics)
    c3 *= place
    slope = 3.0 * c3
    c3 += c2
    slope += 2.0 * c2
    c3 *= place
    slope *= place
    c3 += c1
    slope += c1
    c3 *= place
    c3 += c0
    return c3, slope


def _flat_table(low: float, value: float, *, positive: bool) -> Table:
    """Of a curve with one value: its lower end stands for all."""
    zero = np.zeros(1)
    start = math.log(value) if positive else value
    return Table(
        start, 1.0, (np.array([low]), zero, zero.copy(), zero.copy()), np.array([low, low]), np.array([np.inf])
    )
