"""Answers as a person reads them."""

from __future__ import annotations

import math
from collections.abc import Sequence
from typing import TYPE_CHECKING, Protocol

from registry.answers import Answer
from registry.cli.documents import value_in
from registry.cli.screen import (
    CAUTION,
    OF_ABSOLUTE,
    emphasize,
    name_mark,
    name_past,
    print_facts,
    print_table,
    say,
    wrap,
)
from registry.cli.temperatures import Asked
from registry.coverage import Coverage
from registry.display import format_number, format_percent, format_plain
from registry.grounds import list_grounds
from registry.naming import join_names
from registry.properties import PROPERTIES
from registry.quantities import Unit
from registry.refusals import Refusal
from registry.values import Value

if TYPE_CHECKING:
    from registry.scale_effects import ScaleEffect

__all__ = ["print_answers", "print_story", "print_verdicts", "word_coverage"]


class Typed(Protocol):
    """What was asked, as it was typed."""

    @property
    def text(self) -> str:
        """As typed."""


def print_answers(
    coverage: Coverage, label: str, found: list[tuple[Asked, Value | Refusal]], to: Unit | None, why: bool
) -> None:
    """A table of values, then what stands behind them, once for each correlation."""
    values = [(asked, result) for asked, result in found if not isinstance(result, Refusal)]
    if not values:
        return
    answers = [(asked, value) for asked, value in values if isinstance(value, Answer)]
    estimates = [(asked, value) for asked, value in values if not isinstance(value, Answer)]
    name = coverage.dossier.compound.record.name
    say(emphasize(f"{name}: {PROPERTIES[coverage.property].title}{name_past(label)}"))
    say()
    _print_values(values, to)
    stories: dict[str, list[tuple[Asked, Answer]]] = {}
    for asked, answer in answers:
        # a value beyond the window has its own story
        stories.setdefault(f"{answer.correlation.key} {answer.mark}", []).append((asked, answer))
    for told in stories.values():
        say()
        print_story(told, why)
    if estimates:
        from registry.cli.estimate_text import print_estimates

        say()
        print_estimates(estimates)
    if why:
        print_verdicts(answers)
    if to is not None and to.is_gauge:
        say()
        say(wrap(OF_ABSOLUTE, 0))
    say()
    say(wrap(CAUTION, 0))


def _print_values(values: list[tuple[Asked, Value]], to: Unit | None) -> None:
    spread = any(value.reading.uncertainty for _, value in values)
    rows = []
    for asked, found in values:
        value, unit = value_in(found, to)
        rows.append([
            asked.text, f"{format_plain(found.temperature)} K", format_number(value), unit.name + name_mark(found.mark),
            *_word_uncertainty(found, spread), format_percent(found.percent_per_kelvin, "+"),
            *([] if spread else [_word_factor(found)]),
            found.correlation.obtained if isinstance(found, Answer) else "none", found.origin,
        ])  # fmt: skip
    parts = ["stated", "by T", "in all", "per K"] if spread else ["stated", "per K", "per 10 K"]
    headers = ["asked", "is", "value", "", *parts, "obtained", "answered by"]
    print_table(headers, rows, right=(True, True, True, False, *(True for _ in headers[4:-2])))


def _word_uncertainty(found: Value, spread: bool) -> list[str]:
    """What is stated; with `spread` also what the temperature adds, and both together."""
    if not isinstance(found, Answer):
        return ["none", format_percent(found.temperature_percent), "none"] if spread else ["none"]
    stated = found.uncertainty_percent
    words = [f"{stated:.3g} %{word_coverage(found)}" if stated is not None else "none"]
    if spread:
        total = found.expanded_percent
        words += [format_percent(found.temperature_percent), "none" if total is None else format_percent(total)]
    return words


def word_coverage(answer: Answer) -> str:
    """The coverage factor of the stated uncertainty; nothing where none is stated."""
    piece = answer.piece
    return f" (k={piece.factor:g})" if piece and piece.factor else ""


def _word_factor(found: Value) -> str:
    factor = found.factor_per_10_kelvin
    return f"x {factor:.4g}" if math.isfinite(factor) and math.isfinite(found.log_rate) else "none"


def print_story(told: Sequence[tuple[Typed, Answer]], why: bool) -> None:
    """One correlation, with why it was chosen for the first of what was asked."""
    first, answer = told[0]
    record = answer.correlation
    reasons = dict.fromkeys(each.chosen_because for _, each in told)
    chosen = answer.chosen_because + (f" (At {first.text}; --why tells the others.)" if len(reasons) > 1 else "")
    cautions = dict.fromkeys(caution for _, each in told for caution in each.cautions)
    say(f"  {emphasize(record.key)}, revision {answer.revision}, {answer.standing}")
    print_facts(
        (
            *list_grounds(record, answer.counts_as, answer.citation),
            ("chosen", chosen),
            *(_word_ground(answer) if why else ()),
            *(("caution", caution) for caution in cautions),
        ),
        indent=4,
    )


def _word_ground(answer: Answer) -> list[tuple[str, str]]:
    """What the printed digits leave open, and what the temperature scale does."""
    budget = answer.budget
    digits = f"{budget.rounding_percent:.2g} % (k=2), {budget.rounding_bound_percent:.2g} % at most"
    if not budget.rounding_bound_percent:
        digits = "nothing: every coefficient is exact"
    elif not math.isfinite(budget.rounding_bound_percent):
        digits = "what no percent can say here"
    return [
        ("digits", f"The rounding of the printed coefficients leaves open {digits}."),
        ("scale", _word_scale(answer)),
    ]


def _word_scale(answer: Answer) -> str:
    effects, name = answer.scale_effects, answer.correlation.temperature_scale
    if not effects:
        return f"{name}." if name == "ITS-90" else f"{name}; no published conversion reaches this temperature."
    if effects[0].supposed:
        listed = join_names([f"{_word_change(e)} were it {e.scale}" for e in effects], "or")
        return f"Not stated; the value would change {listed}."
    effect = effects[0]
    return (
        f"{name}, whose number there is {effect.shift:+.2g} K from ITS-90: that changes the value "
        f"{_word_change(effect)}, and is taken into account."
    )


def _word_change(effect: ScaleEffect) -> str:
    if effect.percent is None:
        return f"by what {effect.shift:+.2g} K make (no percent: one of both values is zero or missing)"
    return f"by {effect.percent:+.2g} %"


def print_verdicts(answers: Sequence[tuple[Typed, Answer]]) -> None:
    """Every candidate with its verdict, for each answer."""
    for asked, answer in answers:
        say()
        say(f"  {emphasize('Candidates')} at {asked.text}")
        rows = [(v.verdict, f"{v.correlation} r{v.revision}", v.because) for v in answer.candidates]
        print_table(("verdict", "correlation", "because"), rows, indent=4)
