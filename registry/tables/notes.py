"""What there is to say of a table's rows besides their numbers."""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass
from functools import lru_cache

import numpy as np
from numpy.typing import NDArray

from registry import rules
from registry.coverage import Coverage, Seam, Stretch

__all__ = ["PLAIN", "Marker", "Note", "note_refused"]

Array = NDArray[np.float64]

_THIN = 1e-6
"""Kelvin below which a stretch is only the tolerance of two bounds that meet."""


@dataclass(frozen=True)
class Note:
    """What there is to say of a row besides its numbers.

    Attributes
    ----------
    marks : tuple of str
        Of ``refused``, ``draft``, ``metastable``, ``seam`` and
        ``across-gap``.
    reason : str
        Of a refused row; as in a refusal.
    seams : tuple of Seam
        The seams that lie between the row before and this one.
    gaps : tuple of Stretch
        The gaps that lie wholly between them.
    """

    marks: tuple[str, ...]
    reason: str = ""
    seams: tuple[Seam, ...] = ()
    gaps: tuple[Stretch, ...] = ()


PLAIN = Note(())


class Marker:
    """Finds what lies between a row and the one before, over all the blocks of a table.

    Parameters
    ----------
    coverage : Coverage
        Who answers where.
    """

    def __init__(self, coverage: Coverage) -> None:
        self._stretches = coverage.stretches
        self._seams = dict(zip(_find_changes(coverage.stretches), coverage.seams, strict=True))
        self._standing = [candidate.entry.mark for candidate in coverage.answering]
        self._stable_from = coverage.limits.lower - rules.BOUND_TOLERANCE if coverage.metastable else 0.0
        self._place = -1
        self._refused = False

    def mark(self, kelvin: Array, places: Sequence[int], owners: Sequence[int]) -> dict[int, Note]:
        """The notes of a block on the rows that have an answer."""
        notes: dict[int, Note] = {}
        metastable = kelvin < self._stable_from
        special = bool(metastable.any()) or any(self._standing)
        for number, (place, owner) in enumerate(zip(places, owners, strict=True)):
            if owner < 0:
                self._refused = True
                continue
            if place != self._place or special:
                note = self._note(place, owner, bool(metastable[number]))
                if note.marks:
                    notes[number] = note
            self._place, self._refused = place, False
        return notes

    def _note(self, place: int, owner: int, metastable: bool) -> Note:
        seams, gaps = self._cross(place) if self._place not in (-1, place) else ((), ())
        marks = (
            self._standing[owner],
            "metastable" if metastable else "",
            "seam" if seams else "",
            "across-gap" if gaps else "",
        )
        return Note(tuple(mark for mark in marks if mark), "", seams, gaps)

    def _cross(self, place: int) -> tuple[tuple[Seam, ...], tuple[Stretch, ...]]:
        """The seams on the way to a stretch, and the gaps that no row stands in, in the order of temperature."""
        # at rising pressures temperatures may fall
        low, high = sorted((self._place, place))
        seams = tuple(self._seams[i] for i in range(low, high) if i in self._seams)
        between = () if self._refused else self._stretches[low + 1 : high]
        return seams, tuple(s for s in between if s.candidate is None and s.high - s.low > _THIN)


def _find_changes(stretches: Sequence[Stretch]) -> Iterator[int]:
    """The numbers of the stretches at whose upper end one correlation takes over from another."""
    pairs = zip(stretches, stretches[1:], strict=False)
    return (i for i, (left, right) in enumerate(pairs) if left.candidate and right.candidate)


@lru_cache
def note_refused(reason: str) -> Note:
    """One note for all rows refused for the same reason."""
    return Note(("refused",), reason)
