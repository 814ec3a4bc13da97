"""`start`, `load`, `dump` and `upgrade`: a library as a whole."""

from __future__ import annotations

from typing import Annotated

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
from registry.cli.screen import name_past, print_json, say
from registry.errors import BadInput


def start(
    shelf: Annotated[
        str, typer.Option("--shelf", metavar="published|scenario|none", help="What it begins with.")
    ] = "published",
    solo: Annotated[
        bool | None,
        typer.Option(
            "--solo/--team",
            help="One person keeps it and reviews their own, or a team does; also for a library that is there.",
            show_default=False,
        ),
    ] = None,
    author: AuthorOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Start a new library, with a shelf or empty.

    Example: rangebook start --shelf none --library team.db
    """
    from registry.opening import default_place, start_library

    place = default_place() if library is None else library
    try:
        with start_library(place, shelf, name_author(author), solo=bool(solo)) as book:
            compounds, position = len(book.compounds()), book.position
            kept_by = "one person" if solo else "a team"
    except FileExistsError:
        if solo is not None:
            _keep(place, solo, author, as_json)
            return
        raise BadInput(f"Something is at {place} already; it was left as it is. Give another --library.") from None
    if as_json:
        print_json(
            {"library": str(place), "shelf": shelf, "compounds": compounds, "position": position, "kept_by": kept_by}
        )
        return
    say(f"Started {place} with {compounds} {'compound' if compounds == 1 else 'compounds'}, position {position}.")
    if solo:
        say("It is kept by one person, who may review their own.")


def _keep(place: str, solo: bool, author: str | None, as_json: bool) -> None:
    """Say of a library that is there who keeps it."""
    with open_chosen(place) as book:
        done = book.keep(solo=solo, author=name_author(author))
    kept_by = "one person" if solo else "a team"
    if as_json:
        print_json({"library": str(place), "kept_by": kept_by, "change": done.change.number if done else None})
    elif done is None:
        say(f"{place} is kept by {kept_by} already.")
    else:
        say(f"Change {done.change.number}: {place} is kept by {kept_by}.")


_TOLD = ("added", "revised", "reviewed", "proposed", "kept", "unchanged")
_SELDOM = ("proposed", "kept")
"""Counts that are told only where there are any."""
SHOWN = 20
"""Changed records that are printed; --json has all."""


def load(
    package: Annotated[str, typer.Argument(metavar="PACKAGE", help="A folder or .zip with datapackage.json.")],
    dry_run: Annotated[bool, typer.Option("--dry-run", "-n", help="Check everything, record nothing.")] = False,
    accept: Annotated[
        bool, typer.Option("--accept", help="Review the whole load at once; needs --note. Else it arrives as drafts.")
    ] = False,
    note: Annotated[
        str, typer.Option("--note", metavar="TEXT", help="Why it is loaded; what was looked at.", show_default=False)
    ] = "",
    ours: Annotated[
        list[str] | None,
        typer.Option("--ours", metavar="KEY", help="Revised on both sides: keep what is here (all for the rest)."),
    ] = None,
    theirs: Annotated[
        list[str] | None,
        typer.Option("--theirs", metavar="KEY", help="Revised on both sides: take theirs (all for the rest)."),
    ] = None,
    author: AuthorOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Load a package in one change: all of it or nothing.

    Example: rangebook load handbook-2026.zip --dry-run
    """
    _refuse_empty(package)
    with open_chosen(library) as book:
        counts = book.load(
            package, author=name_author(author), reason=note, accept=accept, ours=ours or (), theirs=theirs or (),
            dry_run=dry_run,
        )  # fmt: skip
    if as_json:
        print_json({"package": str(package), "dry_run": dry_run, **counts})
        return
    told = ", ".join(f"{counts[word]} {word}" for word in _TOLD if counts[word] or word not in _SELDOM)
    for line in counts["changed"][:SHOWN]:
        say(f"  {line}")
    if len(counts["changed"]) > SHOWN:
        say(f"  ... and {len(counts['changed']) - SHOWN} more; --json lists all")
    if dry_run:
        say(f"{package} can be loaded: {told}. Nothing was recorded (--dry-run).")
    elif counts["change"]:
        say(f"Loaded {package} as change {counts['change']}: {told}.")
        if not accept:
            say("What can change an answer waits for review: `rangebook queue` lists it.")
    else:
        say(f"Everything in {package} is there already ({told}); nothing was recorded.")


def dump(
    package: Annotated[str, typer.Argument(metavar="PACKAGE", help="A new folder, or a new name ending in .zip.")],
    since: Annotated[
        str | None,
        typer.Option("--since", metavar="EDITION|CHANGE|DATE", help="Only what is new since then.", show_default=False),
    ] = None,
    edition: EditionOption = None,
    as_of: AsOfOption = None,
    library: LibraryOption = None,
    as_json: JsonOption = False,
) -> None:
    """Write the library, or what is new in it, as a package.

    Example: rangebook dump new.zip --since 2026-Q4
    """
    _refuse_empty(package)
    with open_chosen(library) as book:
        past, label = look_at(book, edition, as_of)
        rows = past.dump(package, since)
    waiting = rows.pop("waiting", 0)
    if as_json:
        print_json({"package": str(package), "as_of": label or None, "rows": rows, "waiting": waiting})
        return
    say(f"Wrote {package}{name_past(label)}: " + ", ".join(f"{name} {count}" for name, count in rows.items()) + ".")
    if waiting:
        say(
            f"Drafts that wait over an accepted revision and stayed behind: {waiting}. "
            "Once they are reviewed (`rangebook queue`), a new dump takes them along."
        )


def _refuse_empty(package: str) -> None:
    if not package:
        raise BadInput("The name of the package is empty. Give a folder or a .zip with datapackage.json.")


def upgrade(author: AuthorOption = None, library: LibraryOption = None, as_json: JsonOption = False) -> None:
    """Bring an older library up to date, after a backup.

    Example: rangebook upgrade --library team.db
    """
    from registry.opening import default_place, upgrade_library

    place = default_place() if library is None else library
    backup = upgrade_library(place, name_author(author))
    if as_json:
        print_json({"library": str(place), "upgraded": backup is not None, "backup": str(backup) if backup else None})
    elif backup is None:
        say(f"{place} is up to date.")
    else:
        say(f"Upgraded {place}; the library as it was is kept at {backup}.")
