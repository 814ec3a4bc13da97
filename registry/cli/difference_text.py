"""Differences in numbers and field by field, as text."""

from __future__ import annotations

from registry.chronicle import FieldChange
from registry.cli.screen import emphasize, print_facts, print_table, say
from registry.comparison import SAME, NumberChange
from registry.deviation import Deviation
from registry.difference import Preview
from registry.display import format_plain
from registry.naming import word_kind
from registry.records import Record

__all__ = ["field_facts", "print_numbers", "print_preview"]


def field_facts(fields: tuple[FieldChange, ...]) -> list[tuple[str, str]]:
    """What differs field by field, as labels and texts."""
    return [(f.name.replace("_", " "), f"{f.before or '(empty)'} -> {f.after or '(empty)'}") for f in fields]


def print_numbers(numbers: tuple[NumberChange, ...]) -> None:
    """Where answers differ, as a table."""
    say()
    if not numbers:
        say("In numbers: every answer is the same.")
        return
    say("In numbers:")
    rows = [
        (
            n.compound, n.property + (f", {n.phase}" if n.phase not in ("liquid", "solid") else ""),
            f"{format_plain(n.low)} to {format_plain(n.high)} K", n.kind,
            _percent(n.largest_percent) if n.kind == "changes" else "",
            f"{n.at:.6g} K" if n.at is not None else "",
            f"{n.mean_percent:.3g} %" if n.mean_percent is not None else "",
            f"{_name(n.before) or 'nothing'} -> {_name(n.after) or 'nothing'}",
        )
        for n in numbers
    ]  # fmt: skip
    headers = ("compound", "property", "range", "answer", "largest", "at", "mean", "from -> to")
    print_table(headers, rows, right=(False, False, False, False, True, True, True))


def _percent(value: float | None) -> str:
    return "no bound" if value is None else f"{value:+.3g} %"


def _name(pairs: tuple[tuple[str, int], ...]) -> str:
    return ", ".join(f"{key} r{revision}" for key, revision in pairs)


def print_preview(record: Record, preview: Preview) -> None:
    """What changes in the record, in its values, and in the answers of the library once it is accepted."""
    if not preview.fields:
        return
    before = preview.before.revision
    say(emphasize(f"{record.key}: {word_kind(record.kind)}, revision {before} -> {before + 1}"))
    print_facts(field_facts(preview.fields))
    if preview.own is not None:
        say(_word_own(preview.own))
    if record.kind in ("correlation", "fixed-point", "dataset", "compound"):
        say("What the library answers, once this is in force:")
        print_numbers(preview.numbers)


def _word_own(own: Deviation) -> str:
    """How far a correlation's own values move, over the window that both revisions share."""
    if own.largest_percent is None:
        return "Its values change without a bound in percent: they pass through zero."
    if abs(own.largest_percent) <= SAME:
        return "Its values stay the same where both windows hold."
    mean = "" if own.mean_percent is None else f", {own.mean_percent:.3g} % in the mean"
    return f"Its values change by up to {own.largest_percent:+.4g} % (at {own.at:.6g} K){mean}."
