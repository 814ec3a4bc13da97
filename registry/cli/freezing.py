"""`freeze` and `editions`: positions by name."""

from __future__ import annotations

from typing import Annotated, Any

import typer

from registry.cli.options import (
    AsOfOption,
    AuthorOption,
    EditionOption,
    JsonOption,
    LibraryOption,
    look_at,
    name_author,
    open_chosen,
)
from registry.cli.screen import emphasize, print_facts, print_json, say
from registry.errors import BadInput
from registry.moments import show_time


def freeze(
    name: Annotated[
        str, typer.Argument(metavar="NAME", help="Letters, digits, '-', '_' and '.'; no number and no date.")
    ],
    note: Annotated[str, typer.Option("--note", metavar="TEXT", help="What it is for.", show_default=False)] = "",
    author: AuthorOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Name the position of the library: an edition.

    It answers the same for ever. Note its root outside the library: `rangebook verify --against ROOT` then shows that
    the past was not rewritten.

    Example: rangebook freeze 2026-Q4 --note "basis of project 1207"
    """
    if not note.strip():
        raise BadInput("An edition says what it is for: give --note.")
    with open_chosen(library) as book:
        done = book.freeze(name, author=name_author(author), note=note)
    if as_json:
        print_json(_describe(done.record, done.change))
        return
    edition: Any = done.record
    where = f"change {edition.position}, rules {edition.rules}"
    say(f"Edition {edition.name} is frozen at {where}. Note its root elsewhere:")
    say(f"  {edition.root}")


def editions(
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """List the editions with their roots, oldest first.

    Example: rangebook editions
    """
    with open_chosen(library) as opened:
        book, label = look_at(opened, edition, as_of)
        found = book.editions()
        place, position = book.place, book.position
    if as_json:
        rows = [_describe(record, change) for record, change in found]
        print_json({"library": place, "position": position, "as_of": label or None, "editions": rows})
        return
    if not found:
        say('There is no edition yet. `rangebook freeze NAME --note "..."` makes one.')
    for number, (record, change) in enumerate(found):
        if number:
            say()
        say(emphasize(record.name))
        print_facts(
            (
                ("position", f"change {record.position}, rules {record.rules}"),
                ("frozen", f"{show_time(change.recorded_at)} by {change.author}, change {change.number}"),
                ("note", record.note),
                ("root", record.root),
            )
        )


def _describe(record: Any, change: Any) -> dict[str, Any]:
    return {
        "name": record.name, "position": int(record.position), "root": record.root, "rules": int(record.rules),
        "note": record.note, "author": change.author, "recorded_at": change.recorded_at, "change": change.number,
    }  # fmt: skip
