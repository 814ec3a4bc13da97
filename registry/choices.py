"""Which correlation stands behind each of many results."""

from __future__ import annotations

from functools import cached_property
from typing import Any

import numpy as np
from numpy.typing import NDArray

from registry.coverage import Coverage, Seam
from registry.records import Correlation

__all__ = ["Choices"]


class Choices:
    """Results for an array of requests, with the choice behind each.

    Parameters
    ----------
    coverage : Coverage
        What they come from.
    results : array of float
        NaN where refused; frozen.
    places : array of int, same shape
        Index into the stretches of the coverage; anything where refused.
    """

    def __init__(
        self, coverage: Coverage, results: NDArray[np.float64], places: NDArray[np.signedinteger[Any]]
    ) -> None:
        results.flags.writeable = False
        self.coverage = coverage
        self._results = results
        self._places = places

    def __repr__(self) -> str:
        answered = self._results.size - int(self.refused.sum())
        name = self.coverage.dossier.compound.key
        return f"<{type(self).__name__} of {self._results.size} for {name}, {answered} answered>"

    @cached_property
    def chosen(self) -> NDArray[np.int16]:
        """Index into `correlations` for each request, -1 where no correlation answers."""
        chosen = np.empty(self._results.shape, dtype=np.int16)
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
        return np.isnan(self._results)

    @property
    def seams(self) -> tuple[Seam, ...]:
        """Where the answering correlation changes, with the jump."""
        return self.coverage.seams
