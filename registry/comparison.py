"""What a difference between two positions of a library means in numbers.

Where two coverages of one property differ, an answer appears, disappears or
changes: ranges of temperature, each with the correlations on either side.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Iterator
from dataclasses import dataclass

from registry.candidate import Candidate
from registry.coverage import Coverage, build_coverage
from registry.curve import Curve
from registry.deviation import Deviation, Piece, agree, find_pieces, join_deviations, measure_deviation
from registry.dossier import Dossier
from registry.errors import BadInput
from registry.properties import PROPERTIES

__all__ = ["SAME", "NumberChange", "compare_coverages", "compare_curves", "compare_dossiers"]

Named = tuple[tuple[str, int], ...]

SAME = 1e-10
"""Percent up to which two values are the same: a record in other units may differ in the last bits."""

SLIVER = 1e-6
"""Kelvin below which a range comes from the tolerance of two bounds that meet."""


@dataclass(frozen=True)
class NumberChange:
    """A range of temperature in which the answer differs between two positions.

    Attributes
    ----------
    compound, property, phase : str
        What is answered; the phase is empty if none was named.
    low, high : float
        The range, K, to eight decimals.
    kind : str
        ``appears``, ``disappears`` or ``changes``.
    before, after : tuple of (str, int)
        Key and revision of the correlations that answer at either position,
        in the order of temperature: exactly one where the answer changes,
        none where nothing answers.
    largest_percent : float or None
        The signed change of the value, 100 (after/before - 1), where it is
        largest either way. None unless the answer changes, and where no
        number bounds it: the value before is or passes through zero.
    at : float or None
        Where that is, K, a temperature at which both answer; the lowest one
        if it is so at several. None unless the answer changes.
    mean_percent : float or None
        The mean over the range of the change without its sign, so that a rise
        does not cancel a fall. None like `largest_percent`, but a value
        before that is zero at one end only may leave it bounded.
    """

    compound: str
    property: str
    phase: str
    low: float
    high: float
    kind: str
    before: Named
    after: Named
    largest_percent: float | None = None
    at: float | None = None
    mean_percent: float | None = None


def compare_dossiers(before: Dossier | None, after: Dossier | None) -> tuple[NumberChange, ...]:
    """Where the answers for one compound differ between two positions.

    Parameters
    ----------
    before, after : Dossier or None
        All that is recorded about the compound; None where it is not.

    Returns
    -------
    tuple of NumberChange
        By property, in the order of `PROPERTIES`, then by phase, then by
        temperature. Values within 1e-12 relative are the same.
    """
    given = [dossier for dossier in (before, after) if dossier is not None]
    records = [entry.record for dossier in given for entry in dossier.correlations]
    found: list[NumberChange] = []
    for prop in PROPERTIES:
        for phase in sorted({record.phase for record in records if record.property == prop}):
            sides = [None if dossier is None else build_coverage(dossier, prop, phase) for dossier in (before, after)]
            found += compare_coverages(*sides)
    return tuple(change for change in found if change.largest_percent is None or abs(change.largest_percent) > SAME)


def compare_coverages(before: Coverage | None, after: Coverage | None) -> tuple[NumberChange, ...]:
    """Where the answers for one property of a compound differ between two positions.

    Parameters
    ----------
    before, after : Coverage or None
        Of the same compound, property and phase; None answers nowhere.

    Returns
    -------
    tuple of NumberChange
        In the order of temperature. Neighbouring ranges in which the answer
        appears, or disappears, are joined whichever correlation answers;
        those in which it changes only for the same two revisions. A range
        below 1e-6 K, which the tolerance of a bound makes, is left out unless
        there is no other.

    Raises
    ------
    BadInput
        If the coverages are of different compounds, properties or phases.
    """
    subjects = {(c.dossier.compound.key, c.property, c.phase) for c in (before, after) if c is not None}
    if len(subjects) > 1:
        given = " and ".join(" ".join(subject).strip() for subject in sorted(subjects))
        raise BadInput(f"Coverages of {given} cannot be compared; give two of one compound, property and phase.")
    ranges = list(_find_ranges(before, after))
    wide = [found for found in ranges if found.high - found.low >= SLIVER]
    return tuple(found.report(*subject) for subject in subjects for found in _join_neighbours(wide or ranges))


def compare_curves(before: Curve, after: Curve, *, positive: bool = False) -> Deviation | None:
    """By how many percent a curve deviates from another over the overlap of their windows.

    Parameters
    ----------
    before, after : Curve
        Of one property.
    positive : bool
        True if a value that is not above zero is none.

    Returns
    -------
    Deviation or None
        The largest percent, where, K, and the mean percent; None if the
        windows do not overlap or nothing in the overlap has a value.

    Examples
    --------
    >>> from dataclasses import replace
    >>> from registry.records import Correlation
    >>> record = Correlation(
    ...     key="ethanol-example", compound="ethanol", property="vapor-pressure", phase="liquid",
    ...     form="antoine-ln", coefficients={"A": "16.8958", "B": "3795.17", "C": "230.918"},
    ...     temperature_unit="degC", value_unit="kPa", window_min="3", window_max="96", window_unit="degC",
    ...     window_basis="printed", temperature_scale="not-stated", evidence="compiled",
    ...     source="smith-van-ness-b2", locator="Table B.2", obtained="seen")
    >>> slipped = replace(record, coefficients={"A": "16.8958", "B": "3759.17", "C": "230.918"})
    >>> found = compare_curves(Curve.of(record, 46.068), Curve.of(slipped, 46.068))
    >>> print(f"{found.largest_percent:+.2f} % at {found.at:.2f} K, {found.mean_percent:.2f} % in the mean")
    +16.64 % at 276.15 K, 13.84 % in the mean
    """
    low, high = max(before.window[0], after.window[0]), min(before.window[1], after.window[1])
    if low > high:
        return None
    pieces = find_pieces(before, after, low, high, 0.0 if positive else -math.inf)
    parts = [
        (piece.high - piece.low, measure_deviation(before, after, piece.low, piece.high))
        for piece in pieces
        if piece.before and piece.after
    ]
    return join_deviations(parts) if parts else None


@dataclass(frozen=True)
class _Range:
    """A range that differs, before it is reported; `parts` are the widths and deviations it is joined from."""

    low: float
    high: float
    kind: str
    before: Named
    after: Named
    parts: tuple[tuple[float, Deviation], ...] = ()

    def report(self, compound: str, prop: str, phase: str) -> NumberChange:
        # the bound itself: an edge lies the tolerance beside it; plus zero, so that no zero is negative
        low, high = round(self.low, 8) + 0.0, round(self.high, 8) + 0.0
        deviation = join_deviations(self.parts) if self.parts else (None, None, None)
        return NumberChange(compound, prop, phase, low, high, self.kind, self.before, self.after, *deviation)

    def continues(self, other: _Range) -> bool:
        """True if another range goes on where this one ends, with the same thing to say."""
        same = self.kind == other.kind and (not self.parts or (self.before, self.after) == (other.before, other.after))
        return same and other.low - self.high < SLIVER

    def join(self, other: _Range) -> _Range:
        return _Range(
            self.low, other.high, self.kind, _join_names(self.before, other.before),
            _join_names(self.after, other.after), self.parts + other.parts,
        )  # fmt: skip


def _join_names(first: Named, second: Named) -> Named:
    return first + second[first[-1:] == second[:1] :]


def _join_neighbours(ranges: Iterable[_Range]) -> list[_Range]:
    joined: list[_Range] = []
    for found in ranges:
        if joined and joined[-1].continues(found):
            joined[-1] = joined[-1].join(found)
        else:
            joined.append(found)
    return joined


def _find_ranges(before: Coverage | None, after: Coverage | None) -> Iterator[_Range]:
    """The ranges that differ, segment by segment: in each, either side has one candidate or none."""
    coverages = [coverage for coverage in (before, after) if coverage is not None]
    edges = sorted({edge for coverage in coverages for s in coverage.stretches for edge in (s.low, s.high)})
    least = 0.0 if coverages and PROPERTIES[coverages[0].property].positive else -math.inf
    for low, high in zip(edges, edges[1:], strict=False):
        left, right = (None if c is None else c.stretch_at(low).candidate for c in (before, after))
        if left is None and right is None:
            continue
        if left is not None and right is not None and agree(left.curve, right.curve):
            continue
        ends = _close_segment(low, high, [candidate for candidate in (left, right) if candidate is not None])
        first, second = (None if candidate is None else candidate.curve for candidate in (left, right))
        for piece in find_pieces(first, second, *ends, least):
            yield from _judge_piece(piece, left, right)


def _close_segment(low: float, high: float, candidates: list[Candidate]) -> tuple[float, float]:
    """The closed range of a segment, [low, high) with bounds widened by their tolerance: the bounds as recorded."""
    last = math.nextafter(high, -math.inf)
    bounds = max(low, *(c.reach[0] for c in candidates)), min(last, *(c.reach[1] for c in candidates))
    # a form's own critical temperature is a bound one double above it
    first, end = (near if low <= (near := round(bound, 8)) <= last else bound for bound in bounds)
    # two reaches may meet in nothing but their tolerances
    return first, max(first, end)


def _judge_piece(piece: Piece, left: Candidate | None, right: Candidate | None) -> Iterator[_Range]:
    before, after = _name(left if piece.before else None), _name(right if piece.after else None)
    if not before or not after:
        yield _Range(piece.low, piece.high, "appears" if after else "disappears", before, after)
    elif left is not None and right is not None:
        deviation = measure_deviation(left.curve, right.curve, piece.low, piece.high)
        if deviation.largest_percent != 0.0:
            part = (piece.high - piece.low, deviation)
            yield _Range(piece.low, piece.high, "changes", before, after, (part,))


def _name(candidate: Candidate | None) -> Named:
    return () if candidate is None else ((candidate.key, candidate.entry.revision),)
