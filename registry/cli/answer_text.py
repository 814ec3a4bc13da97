"""Answers as a person reads them."""

from __future__ import annotations

from registry.answers import Answer, Refusal
from registry.cli.documents import value_in
from registry.cli.screen import CAUTION, emphasize, name_past, print_facts, print_table, say, wrap
from registry.cli.temperatures import Asked
from registry.coverage import Coverage
from registry.display import format_number, format_plain
from registry.forms.catalogue import FORMS
from registry.properties import PROPERTIES
from registry.quantities import Unit

__all__ = ["print_answers"]

_BASIS = {"printed": "as printed", "assumed": "assumed, not printed", "memory": "from memory"}
_OBTAINED = {"seen": "seen in the source", "memory": "from memory"}


def print_answers(
    coverage: Coverage, label: str, found: list[tuple[Asked, Answer | Refusal]], to: Unit | None, why: bool
) -> None:
    """A table of values, then what stands behind them, once for each correlation."""
    answers = [(asked, result) for asked, result in found if isinstance(result, Answer)]
    if not answers:
        return
    name = coverage.dossier.compound.record.name
    say(emphasize(f"{name}: {PROPERTIES[coverage.property].title}{name_past(label)}"))
    say()
    _print_values(answers, to)
    stories: dict[str, list[tuple[Asked, Answer]]] = {}
    for asked, answer in answers:
        stories.setdefault(answer.correlation.key, []).append((asked, answer))
    for told in stories.values():
        say()
        _print_story(told)
    if why:
        _print_verdicts(answers)
    say()
    say(wrap(CAUTION, 0))


def _print_values(answers: list[tuple[Asked, Answer]], to: Unit | None) -> None:
    rows = []
    for asked, answer in answers:
        value, unit = value_in(answer, to)
        stated = answer.uncertainty_percent
        rows.append([
            asked.text, f"{format_plain(answer.temperature)} K", format_number(value), unit.name + _mark(answer),
            f"{stated:.3g} %" if stated is not None else "none",
            f"{answer.percent_per_kelvin:+.3g} %", f"x {answer.factor_per_10_kelvin:.4g}",
            answer.correlation.obtained, answer.correlation.key,
        ])  # fmt: skip
    headers = ["asked", "is", "value", "", "stated", "per K", "per 10 K", "obtained", "answered by"]
    print_table(headers, rows, right=(True, True, True, False, True, True, True))


def _mark(answer: Answer) -> str:
    """Beside the unit of a value that a draft gives."""
    return "" if answer.standing == "accepted" else f" ({answer.standing.upper()})"


def _print_story(told: list[tuple[Asked, Answer]]) -> None:
    """One correlation, with why it was chosen at the first of its temperatures."""
    first, answer = told[0]
    record = answer.correlation
    low, high = answer.window
    reasons = dict.fromkeys(each.chosen_because for _, each in told)
    chosen = answer.chosen_because + (f" (At {first.text}; --why tells the others.)" if len(reasons) > 1 else "")
    cautions = dict.fromkeys(caution for _, each in told for caution in each.cautions)
    locator = record.locator if record.locator != "not recorded" else "the place in it is not recorded"
    say(f"  {emphasize(record.key)}, revision {answer.revision}, {answer.standing}")
    print_facts(
        (
            ("form", FORMS[record.form].title),
            ("window", f"{format_plain(low)} to {format_plain(high)} K, {_BASIS[record.window_basis]}"),
            ("evidence", _word_evidence(answer)),
            ("source", f"{answer.citation}; {locator}"),
            ("chosen", chosen),
            *(("caution", caution) for caution in cautions),
        ),
        indent=4,
    )


def _word_evidence(answer: Answer) -> str:
    """What it ranks by, and what the record says where that differs."""
    record = answer.correlation
    if answer.counts_as == record.evidence:
        return f"{record.evidence}, {_OBTAINED[record.obtained]}"
    return f"{answer.counts_as} (recorded as {record.evidence}, but from memory and unconfirmed)"


def _print_verdicts(answers: list[tuple[Asked, Answer]]) -> None:
    for asked, answer in answers:
        say()
        say(f"  {emphasize('Candidates')} at {asked.text}")
        rows = [(v.verdict, f"{v.correlation} r{v.revision}", v.because) for v in answer.candidates]
        print_table(("verdict", "correlation", "because"), rows, indent=4)
