"""`history` and `diff`: what became of a record, and what differs between two positions."""

from __future__ import annotations

from typing import TYPE_CHECKING, Annotated, Any

import typer

from registry.cli.options import AsOfOption, EditionOption, JsonOption, KindOption, LibraryOption, look_at, open_chosen
from registry.cli.screen import emphasize, name_past, print_facts, print_json, say
from registry.moments import show_time

if TYPE_CHECKING:
    from registry.chronicle import Event, RecordChange


def history(
    key: Annotated[str, typer.Argument(metavar="KEY", help="Key of a record.")],
    kind: KindOption = "",
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Tell who did what to a record, when and why.

    Example: rangebook history ethanol-antoine-low
    """
    from registry.naming import word_kind

    with open_chosen(library) as opened:
        book, label = look_at(opened, edition, as_of)
        record = book.newest(key, kind).record
        events = book.history(key, record.kind)
    if as_json:
        described = [_describe_event(event) for event in events]
        print_json({"kind": record.kind, "key": record.key, "as_of": label or None, "events": described})
        return
    say(emphasize(f"{record.key}: {word_kind(record.kind)}{name_past(label)}"))
    for event in events:
        _print_event(event)


def _print_event(event: Event) -> None:
    from registry.cli.difference_text import field_facts

    revision = f", revision {event.revision}" if event.revision else ""
    say()
    when = f"change {event.change.number}  {show_time(event.change.recorded_at)}"
    say(f"  {when}  {event.change.author}: {event.what}{revision}")
    note = event.note if event.note != event.change.reason else ""
    facts = [("why", event.change.reason), ("note", note), ("from", event.origin)]
    print_facts([*facts, *field_facts(event.fields)], indent=4)


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
    """Compare two positions, first in numbers.

    Example: rangebook diff 2026-Q3 2026-Q4
    """
    from registry.cli.difference_text import print_numbers
    from registry.cli.documents import describe_number

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


def _print_records(records: tuple[RecordChange, ...]) -> None:
    from registry.cli.difference_text import field_facts
    from registry.naming import word_kind

    say()
    say(f"{len(records)} {'record differs' if len(records) == 1 else 'records differ'}:")
    for change in records:
        numbers = dict.fromkeys(number for number in (change.before, change.after) if number)
        revisions = " -> ".join(f"r{number}" for number in numbers)
        standing = f", {change.standing_after}" if change.standing_after not in ("", change.what) else ""
        say(f"  {emphasize(change.what)}  {word_kind(change.kind)} {change.key}  {revisions}{standing}")
        print_facts([*field_facts(change.fields), ("note", change.note)], indent=6)


def _describe_record(change: RecordChange) -> dict[str, Any]:
    from registry.cli.documents import describe_fields

    return {
        "kind": change.kind, "key": change.key, "what": change.what,
        "before": {"revision": change.before, "standing": change.standing_before or None} if change.before else None,
        "after": {"revision": change.after, "standing": change.standing_after or None} if change.after else None,
        "note": change.note or None, "fields": describe_fields(change.fields),
    }  # fmt: skip
