"""`history` and `diff`: what became of a record, and what differs between two positions."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any

import typer

from registry.cli.options import AsOfOption, EditionOption, JsonOption, KindOption, LibraryOption, look_at, open_chosen

if TYPE_CHECKING:
    from registry.chronicle import Event, FieldChange, RecordChange
    from registry.comparison import NumberChange


def history(
    key: Annotated[str, typer.Argument(help="Key of a record.")],
    kind: KindOption = "",
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Tell everything that happened to a record: who, when, why, and what changed field by field.

    Example: rangebook history ethanol-antoine-low
    """
    from registry.cli.screen import emphasize, name_past, print_json, say

    with open_chosen(library) as opened:
        book, label = look_at(opened, edition, as_of)
        record = book.newest(key, kind).record
        events = book.history(key, record.kind)
    if as_json:
        described = [_describe_event(event) for event in events]
        print_json({"kind": record.kind, "key": record.key, "as_of": label or None, "events": described})
        return
    say(emphasize(f"{record.key}: {record.kind}{name_past(label)}"))
    for event in events:
        _print_event(event)


def _print_event(event: Event) -> None:
    from registry.cli.screen import print_facts, say

    revision = f", revision {event.revision}" if event.revision else ""
    say()
    when = f"change {event.change.number}  {event.change.recorded_at[:19]}Z"
    say(f"  {when}  {event.change.author}: {event.what}{revision}")
    note = event.note if event.note != event.change.reason else ""
    facts = [("why", event.change.reason), ("note", note), ("from", event.origin)]
    print_facts([*facts, *field_facts(event.fields)], indent=4)


def field_facts(fields: tuple[FieldChange, ...]) -> list[tuple[str, str]]:
    """What differs field by field, as labels and texts."""
    return [(f.name.replace("_", " "), f"{f.before or '(empty)'} -> {f.after or '(empty)'}") for f in fields]


def _describe_event(event: Event) -> dict[str, Any]:
    from registry.cli.documents import describe_change, describe_fields

    return {
        **describe_change(event.change), "what": event.what, "revision": event.revision or None,
        "note": event.note or None, "origin": event.origin or None, "fields": describe_fields(event.fields),
    }  # fmt: skip


def diff(
    before: Annotated[str, typer.Argument(metavar="A", help="An edition, a change or a date.")],
    after: Annotated[
        str | None, typer.Argument(metavar="[B]", help="Another one; the newest if none is given.")
    ] = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Compare two positions: first what it means in numbers, then record by record.

    Example: rangebook diff 2026-Q3 2026-Q4
    """
    from registry.cli.screen import emphasize, print_json, say

    with open_chosen(library) as book:
        found = book.diff(before, after)
    if as_json:
        print_json(
            {
                "before": found.before, "after": found.after,
                "numbers": [describe_number(change) for change in found.numbers],
                "records": [_describe_record(change) for change in found.records],
            }
        )  # fmt: skip
        return
    say(emphasize(f"From change {found.before} to change {found.after}"))
    if not found.numbers and not found.records:
        say("Nothing differs.")
        return
    print_numbers(found.numbers)
    _print_records(found.records)


def print_numbers(numbers: tuple[NumberChange, ...]) -> None:
    """Where answers differ, as a table."""
    from registry.cli.screen import print_table, say
    from registry.display import format_plain

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


def describe_number(change: NumberChange) -> dict[str, Any]:
    """A range in which answers differ."""
    return {
        "compound": change.compound, "property": change.property, "phase": change.phase, "from_K": change.low,
        "to_K": change.high, "kind": change.kind, "largest_percent": change.largest_percent, "at_K": change.at,
        "mean_percent": change.mean_percent,
        "before": [{"correlation": key, "revision": revision} for key, revision in change.before],
        "after": [{"correlation": key, "revision": revision} for key, revision in change.after],
    }  # fmt: skip


def _print_records(records: tuple[RecordChange, ...]) -> None:
    from registry.cli.screen import emphasize, print_facts, say

    say()
    say(f"{len(records)} {'record differs' if len(records) == 1 else 'records differ'}:")
    for change in records:
        revisions = f"r{change.before} -> r{change.after}" if change.before else f"r{change.after}"
        standing = change.standing_after and f", {change.standing_after}"
        say(f"  {emphasize(change.what)}  {change.kind} {change.key}  {revisions}{standing}")
        print_facts([*field_facts(change.fields), ("note", change.note)], indent=6)


def _describe_record(change: RecordChange) -> dict[str, Any]:
    from registry.cli.documents import describe_fields

    return {
        "kind": change.kind, "key": change.key, "what": change.what,
        "before": {"revision": change.before, "standing": change.standing_before or None} if change.before else None,
        "after": {"revision": change.after, "standing": change.standing_after or None} if change.after else None,
        "note": change.note or None, "fields": describe_fields(change.fields),
    }  # fmt: skip
