"""Evaluating an array over many curves, each point once.

Points are worked in blocks that stay in the processor's cache. Curves that
share the kernel exp(a - b/(T + c)) are evaluated together, with the
coefficients gathered per point; the others by the points they own.
"""

from __future__ import annotations

import threading
from collections.abc import Sequence
from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry.curve import Curve
from registry.forms.form import Scratch
from registry.forms.reciprocal import RECIPROCAL

__all__ = ["BLOCK", "Evaluator"]

Array = NDArray[np.float64]
Intervals = NDArray[np.signedinteger[Any]]

BLOCK = 32768
"""Points a block: the working arrays then fit the second-level cache."""

SPAN = 4 * BLOCK
"""Points that are looked at together: in rising order each curve takes one run of them.

Their flags, a byte each, fit one working array of a block of floats.
"""

_FEW_EDGES = 24
"""Up to here, adding comparisons is quicker than a binary search."""

_FLAG, _INDEX, _GATHER = 8, 9, 10
"""Working arrays beyond those that kernels use."""


_threads = threading.local()


class Evaluator:
    """Curves with the intervals they own.

    Parameters
    ----------
    edges : sequence of float
        Inner ends of the intervals, rising, K.
    owners : sequence of int
        For each interval the index of its curve, -1 for none.
    curves : sequence of Curve
        The curves.
    positive : bool
        True if a value that is not above zero is none.
    """

    def __init__(
        self, edges: Sequence[float], owners: Sequence[int], curves: Sequence[Curve], *, positive: bool = False
    ) -> None:
        self._positive = positive
        self._edges = np.array(edges, dtype=float)
        self._owners = tuple(owners)
        self._curves = tuple(curves)
        stacked = {i for i, curve in enumerate(curves) if curve.stacks}
        self._stacked = stacked if len(stacked) > 1 else set()
        self._single = [i for i, owner in enumerate(owners) if owner >= 0 and owner not in self._stacked]
        self._columns = self._build_columns()
        self._bounded = [curve.stacks and self._is_bounded(curve) for curve in curves]

    def _is_bounded(self, curve: Curve) -> bool:
        """exp(a - b/(T + c)) is monotone: usable at both ends of its window, it is usable between."""
        with np.errstate(all="ignore"):
            ends = curve.values(np.array(curve.window))
        return bool((np.isfinite(ends) & (ends > 0.0)).all())

    def _build_columns(self) -> tuple[Array, ...]:
        """The coefficients of the shared kernel for each interval, NaN where it does not answer."""
        nothing = (np.nan, 0.0, 0.0)
        rows = [self._curves[o].parameters if o in self._stacked else nothing for o in self._owners]
        return tuple(np.array(column) for column in zip(*rows, strict=True))

    def evaluate(self, flat: Array) -> tuple[Array, Intervals]:
        """Values and intervals for temperatures in one dimension.

        Parameters
        ----------
        flat : array of float, one-dimensional and contiguous
            Temperatures, K.

        Returns
        -------
        values : array of float
            In SI units; NaN where no curve answers or it gives no finite number.
        intervals : array of int
            The interval of each temperature.
        """
        few = len(self._edges) <= _FEW_EDGES
        values = np.empty(flat.size)
        intervals: Intervals = np.empty(flat.size, dtype=np.int8 if few else np.int16)
        scratch = _thread_scratch()
        with np.errstate(all="ignore"):
            for start in range(0, flat.size, SPAN):
                part = slice(start, min(start + SPAN, flat.size))
                if _is_sorted(flat[part], scratch):
                    self._fill_runs(flat[part], intervals[part], values[part], scratch)
                else:
                    self._fill_blocks(flat[part], intervals[part], values[part], scratch)
        return values, intervals

    def _fill_runs(self, t: Array, intervals: Intervals, out: Array, scratch: Scratch) -> None:
        """Points in rising order: each curve takes one run of them."""
        bounds = [0, *np.searchsorted(t, self._edges, side="left").tolist(), t.size]
        for index, owner in enumerate(self._owners):
            run = slice(bounds[index], bounds[index + 1])
            if run.start == run.stop:
                continue
            intervals[run] = index
            if owner < 0:
                out[run] = np.nan
            else:
                self._fill_curve(owner, t[run], out[run], scratch)

    def _fill_blocks(self, t: Array, intervals: Intervals, out: Array, scratch: Scratch) -> None:
        for start in range(0, t.size, BLOCK):
            part = slice(start, min(start + BLOCK, t.size))
            self._locate(t[part], intervals[part], scratch)
            self._fill_mixed(t[part], intervals[part], out[part], scratch)

    def _fill_curve(self, owner: int, t: Array, out: Array, scratch: Scratch) -> None:
        for start in range(0, t.size, BLOCK):
            part = slice(start, min(start + BLOCK, t.size))
            self._curves[owner].fill(t[part], out[part], scratch)
        if not self._bounded[owner]:
            self._refuse_unusable(out)

    def _locate(self, t: Array, intervals: Intervals, scratch: Scratch) -> None:
        """The interval of each point: how many edges lie at or below it."""
        if intervals.dtype != np.int8:
            intervals[:] = np.searchsorted(self._edges, t, side="right")
            return
        flag = scratch.take(_FLAG, t).view(np.bool_)[: t.size]
        ones = flag.view(np.int8)
        intervals.fill(0)
        for edge in self._edges:
            np.greater_equal(t, edge, out=flag)
            np.add(intervals, ones, out=intervals)

    def _fill_mixed(self, t: Array, intervals: Intervals, out: Array, scratch: Scratch) -> None:
        if self._stacked:
            where = scratch.take(_INDEX, t).view(np.intp)
            np.copyto(where, intervals)
            gathered = tuple(
                # every index is in range; wrap is the quickest way to say so
                np.take(column, where, out=scratch.take(_GATHER + i, t), mode="wrap")
                for i, column in enumerate(self._columns)
            )
            RECIPROCAL.fill(t, gathered, out, scratch)
        else:
            out.fill(np.nan)
        for index in self._single:
            mine = np.flatnonzero(intervals == index)
            if mine.size:
                at = np.take(t, mine, out=scratch.take(_INDEX, mine), mode="wrap")
                found = scratch.take(_GATHER, mine)
                self._fill_curve(self._owners[index], at, found, scratch)
                out[mine] = found
        if not all(self._bounded[owner] for owner in self._stacked):
            self._refuse_unusable(out)

    def _refuse_unusable(self, values: Array) -> None:
        """A curve that gives no finite number, or none that can be, does not answer."""
        usable = np.isfinite(values)
        if self._positive:
            usable &= values > 0.0
        if not usable.all():
            values[~usable] = np.nan


def _thread_scratch() -> Scratch:
    """The working arrays of this thread, kept from call to call: fresh memory costs more than the arithmetic."""
    if not hasattr(_threads, "scratch"):
        _threads.scratch = Scratch(BLOCK)
    found: Scratch = _threads.scratch
    return found


def _is_sorted(t: Array, scratch: Scratch) -> bool:
    head = t[:64]
    if not (head[1:] >= head[:-1]).all():
        return False
    flag = scratch.take(_FLAG, t).view(np.bool_)[: t.size - 1]
    return bool(np.greater_equal(t[1:], t[:-1], out=flag).all())
