"""Coverage as bars on a temperature axis."""

from __future__ import annotations

import math
import sys

from registry.candidate import Candidate
from registry.cli.screen import emphasize, name_past, print_table, say, width
from registry.coverage import Coverage, Stretch
from registry.display import format_plain
from registry.properties import PROPERTIES

__all__ = ["print_coverage"]

_THIN = 1e-6
"""Kelvin below which a stretch is only the tolerance of two bounds that meet."""

_COLOURS = ("36", "33", "35", "32", "34", "31")


def print_coverage(coverage: Coverage, label: str = "") -> None:
    """Bars, gaps, seams and phase limits of one property of a compound."""
    name = coverage.dossier.compound.record.name
    say(emphasize(f"{name}: {PROPERTIES[coverage.property].title}, who answers where{name_past(label)}"))
    say()
    if not coverage.candidates:
        say(f"  No correlation is recorded for {coverage.property}.")
        return
    _print_bars(coverage)
    _print_seams(coverage)
    _print_gaps(coverage)
    _print_limits(coverage)


def _print_bars(coverage: Coverage) -> None:
    shown = sorted(coverage.candidates, key=lambda c: (not _answers(coverage, c), c.curve.window[0], c.key))
    windows = [c.record.window_kelvin() for c in shown]
    low, high = min(w[0] for w in windows), max(w[1] for w in windows)
    label = max(len(c.key) for c in shown)
    room = max(20, width() - label - 16)
    marks = _marks()
    for number, candidate in enumerate(shown):
        bar = "".join(_mark(coverage, candidate, low, high, room, cell, marks) for cell in range(room))
        colour = _COLOURS[number % len(_COLOURS)] if _answers(coverage, candidate) else "2"
        counted = candidate.counted.evidence if candidate.entry.standing == "accepted" else candidate.entry.standing
        say(f"  {candidate.key.ljust(label)}  {emphasize(bar, colour)}  {counted}")
    _print_axis(low, high, room, label, marks)
    several = f"   {marks[4]} several phases" if any(s.phases for s in coverage.stretches) else ""
    say(f"  {marks[0]} answers   {marks[1]} covers, but another ranks before it   {marks[2]} may not answer{several}")


def _marks() -> tuple[str, ...]:
    encoding = (sys.stdout.encoding or "ascii").lower()
    return ("━", "─", "·", "┬", "?") if encoding.startswith("utf") else ("#", "-", ".", "+", "?")


def _answers(coverage: Coverage, candidate: Candidate) -> bool:
    return any(stretch.candidate is candidate for stretch in coverage.stretches)


def _mark(
    coverage: Coverage, candidate: Candidate, low: float, high: float, room: int, cell: int, marks: tuple[str, ...]
) -> str:
    """What a cell of a bar shows: the strongest thing that happens within it."""
    left, right = (low + (high - low) * edge / room for edge in (cell, cell + 1))
    if not (candidate.curve.window[0] < right and candidate.curve.window[1] > left):
        return " "
    answering = (s for s in coverage.stretches if s.candidate is candidate)
    if any(min(s.high, right) - max(s.low, left) > 0.25 * (right - left) for s in answering):
        return marks[0]
    middle = 0.5 * (max(left, candidate.curve.window[0]) + min(right, candidate.curve.window[1]))
    if not (candidate.entry.accepted and candidate.covers(middle)):
        return marks[2]
    return marks[4] if coverage.stretch_at(middle).phases else marks[1]


def _print_axis(low: float, high: float, room: int, label: int, marks: tuple[str, ...]) -> None:
    ticks = _round_ticks(low, high, max(3, room // 12))
    places = {round((tick - low) / (high - low) * (room - 1)): tick for tick in ticks}
    line = "".join(marks[3] if cell in places else marks[1] for cell in range(room))
    numbers = [" "] * (room + 8)
    for place, tick in places.items():
        text = format_plain(tick)
        start = max(0, place - len(text) // 2)
        if all(c == " " for c in numbers[max(0, start - 1) : start + len(text) + 1]):
            numbers[start : start + len(text)] = text
    say(f"  {' ' * label}  {line}")
    say(f"  {' ' * label}  {''.join(numbers).rstrip()} K".replace("  K", " K"))


def _round_ticks(low: float, high: float, count: int) -> list[float]:
    """Round numbers inside a range, about `count` of them."""
    raw = (high - low) / count
    power = 10.0 ** math.floor(math.log10(raw))
    step = next(power * m for m in (1.0, 2.0, 2.5, 5.0, 10.0) if power * m >= raw)
    first = math.ceil(low / step)
    return [i * step for i in range(first, math.floor(high / step) + 1)]


def _print_seams(coverage: Coverage) -> None:
    say()
    if not coverage.seams:
        say("  No seams: one correlation answers at a time, and none takes over from another.")
        return
    rows = [
        (
            f"{format_plain(round(seam.temperature, 6))} K",
            f"{seam.jump_percent:+.3g} %",
            f"{seam.below} -> {seam.above}",
        )
        for seam in coverage.seams
    ]
    print_table(("seam at", "jump", "from -> to"), rows, right=(True, True))


def _print_gaps(coverage: Coverage) -> None:
    for stretch in coverage.stretches:
        if stretch.phases and stretch.high - stretch.low > _THIN:
            say(f"  phases  {_range(stretch)}: {' and '.join(stretch.phases)}; name one with --phase")
    for gap in coverage.gaps:
        if not gap.phases and gap.high - gap.low > _THIN:
            say(f"  gap  {_range(gap)}: nothing may answer")


def _range(stretch: Stretch) -> str:
    return f"{format_plain(round(stretch.low, 6))} to {format_plain(round(stretch.high, 6))} K"


def _print_limits(coverage: Coverage) -> None:
    limits = coverage.limits
    for point, value in ((limits.lower_point, limits.lower), (limits.upper_point, limits.upper)):
        if point is not None:
            quantity = point.record.quantity.replace("-", " ")
            say(f"  limit  {quantity} {format_plain(value)} K ({point.record.source}, {point.record.obtained})")
    for quantity in limits.unchecked:
        say(f"  limit  no {quantity.replace('-', ' ')} is recorded: the phase cannot be checked there")
