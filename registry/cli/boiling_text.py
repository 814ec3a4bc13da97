"""Temperatures at pressures, as a person reads them and with --json."""

from __future__ import annotations

from collections.abc import Sequence
from typing import Any

from registry.answers import Answer
from registry.cli.answer_text import print_story, print_verdicts, word_coverage
from registry.cli.documents import describe_answer, value_in
from registry.cli.pressures import AskedPressure
from registry.cli.screen import CAUTION, emphasize, name_mark, name_past, print_table, say, wrap
from registry.coverage import Coverage
from registry.display import format_plain
from registry.inverse.refusals import InverseRefusal
from registry.properties import PROPERTIES
from registry.quantities import Unit

__all__ = ["describe_boiling", "describe_inverse_refusal", "print_boiling"]

Found = Sequence[tuple[AskedPressure, Answer | InverseRefusal]]


def print_boiling(coverage: Coverage, label: str, found: Found, to: Unit, why: bool) -> None:
    """A table of temperatures, then what stands behind them, once for each correlation."""
    answers = [(asked, result) for asked, result in found if isinstance(result, Answer)]
    if not answers:
        return
    name = coverage.dossier.compound.record.name
    say(emphasize(f"{name}: temperature at a {PROPERTIES[coverage.property].title}{name_past(label)}"))
    say()
    headers = ("asked", "is", "temperature", "stated", "per 1 %", "obtained", "answered by")
    rows = [_word_answer(asked, answer, to) for asked, answer in answers]
    print_table(headers, rows, right=(True, True, True, True, True, False))
    stories: dict[str, list[tuple[AskedPressure, Answer]]] = {}
    for asked, answer in answers:
        stories.setdefault(answer.correlation.key, []).append((asked, answer))
    for told in stories.values():
        say()
        print_story(told, why)
    if why:
        print_verdicts(answers)
    say()
    say(wrap(CAUTION, 0))


def _word_answer(asked: AskedPressure, answer: Answer, to: Unit) -> list[str]:
    value, unit = value_in(answer, None)
    stated, per = _stated_kelvin(answer), _kelvin_per_percent(answer)
    return [
        asked.text, f"{format_plain(value)} {unit.name}",
        f"{to.from_si(answer.temperature):.4f} {to.name}{name_mark(answer.mark)}",
        f"{stated:.3g} K{word_coverage(answer)}" if stated is not None else "none",
        f"{per:+.3g} K" if per is not None else "none",
        answer.correlation.obtained, answer.correlation.key,
    ]  # fmt: skip


def _kelvin_per_percent(answer: Answer) -> float | None:
    """How far one percent more pressure moves the temperature, K."""
    slope = answer.percent_per_kelvin
    return 1.0 / slope if slope else None


def _stated_kelvin(answer: Answer) -> float | None:
    """The stated uncertainty of the pressure carried to the temperature, K; None if not stated."""
    stated, per = answer.uncertainty_percent, _kelvin_per_percent(answer)
    return None if stated is None or per is None else abs(stated * per)


def describe_boiling(
    coverage: Coverage, label: str, found: Sequence[Answer | InverseRefusal], to: Unit
) -> dict[str, Any]:
    """What `boil` prints with --json."""
    return {
        "compound": coverage.dossier.compound.key,
        "property": coverage.property,
        "answers": [_describe_answer(result, to) for result in found if isinstance(result, Answer)],
        "refusals": [describe_inverse_refusal(result) for result in found if isinstance(result, InverseRefusal)],
        "position": coverage.dossier.position,
        "as_of": label or None,
    }


def _describe_answer(answer: Answer, to: Unit) -> dict[str, Any]:
    return {
        "pressure_Pa": answer.value,
        "temperature": to.from_si(answer.temperature),
        "temperature_unit": to.name,
        "stated_uncertainty_K": _stated_kelvin(answer),
        "kelvin_per_percent": _kelvin_per_percent(answer),
        **describe_answer(answer, None),
    }


def describe_inverse_refusal(refusal: InverseRefusal) -> dict[str, Any]:
    """One refusal of a pressure."""
    return {
        "pressure_Pa": refusal.value,
        "reason": refusal.reason,
        "explanation": refusal.explanation,
        "sides": [
            {"correlation": side.correlation, "temperature_K": side.temperature, "pressure_Pa": side.value}
            for side in refusal.sides
        ],
    }
