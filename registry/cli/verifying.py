"""`verify`: whether a library is what was recorded."""

from __future__ import annotations

import sys
from collections.abc import Callable
from typing import TYPE_CHECKING, Annotated, Any

import typer

from registry.cli.options import JsonOption, LibraryOption, open_chosen
from registry.cli.screen import emphasize, print_facts, print_json, say, wrap

if TYPE_CHECKING:
    from registry.findings import Verification

LIMIT = (
    "Somebody who rewrites the whole file consistently makes another library that holds: only a root noted elsewhere "
    "(--against) finds that."
)
SHOWN = 50
"""Findings that are printed; --json has all."""


def verify(
    against: Annotated[
        str | None,
        typer.Option(
            "--against", metavar="SIZE:ROOT", help="A root noted earlier, which this library must extend.",
            show_default=False,
        ),
    ] = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:  # fmt: skip
    """Recompute everything, and name what does not hold.

    Somebody who rewrites the whole file consistently makes another library that holds: only a root noted elsewhere
    (--against) finds that.

    Example: rangebook verify --against 12:5dc9da79a70659a9ad559cb701ded9a2ab9d823aad2f4960cfe370eff4604328
    """
    with open_chosen(library) as book:
        found = book.verify(against, _show_progress())
    if as_json:
        print_json(_describe(found, against))
    else:
        _print(found, against)
    if not found.holds:
        raise typer.Exit(1)


def _show_progress() -> Callable[[int, int], None] | None:
    """A line on the terminal that counts up and then goes; nothing elsewhere."""
    stream = sys.stderr
    if stream is None or not stream.isatty():
        return None

    def show(done: int, total: int) -> None:
        line = f"verified {done} of {total} records"
        stream.write("\r" + " " * len(line) + "\r" if done >= total else f"\r{line}")
        stream.flush()

    return show


def _describe(found: Verification, against: str | None) -> dict[str, Any]:
    import dataclasses

    described = dataclasses.asdict(found)
    return {**described, **({"against": against} if against else {})}


def _print(found: Verification, against: str | None) -> None:
    count = len(found.findings)
    head = "holds" if found.holds else f"does not hold: {count} {'finding' if count == 1 else 'findings'}"
    say(emphasize(head))
    print_facts([
        ("root", found.root),
        ("changes", str(found.changes)),
        ("records", str(found.records)),
        ("editions", str(found.editions)),
        ("extends", against if against and found.holds else ""),
    ])  # fmt: skip
    for finding in found.findings[:SHOWN]:
        say(f"  {wrap(str(finding), 4)}")
    if count > SHOWN:
        say(f"  ... and {count - SHOWN} more; --json lists all")
    for note in (*found.notes, LIMIT if found.holds and not against else ""):
        if note:
            say(wrap(note, 0))
