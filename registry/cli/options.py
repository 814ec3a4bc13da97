"""Options that several commands share."""

from __future__ import annotations

import os
from typing import TYPE_CHECKING, Annotated

import typer

from registry.errors import BadInput, quote

if TYPE_CHECKING:
    from registry.archive import Archive
    from registry.library import Library

REFUSED = 3
"""Exit code when something asked for was refused."""

LibraryOption = Annotated[
    str | None,
    typer.Option(
        "--library",
        metavar="PATH-or-URL",
        help="The library; else RANGEBOOK_LIBRARY, else the one in your data folder.",
        show_default=False,
    ),
]
CompoundArgument = Annotated[str, typer.Argument(metavar="COMPOUND", help="Key, name, synonym, CAS number or formula.")]
JsonOption = Annotated[bool, typer.Option("--json", help="Print one JSON object and nothing else.")]
PropertyOption = Annotated[
    str,
    typer.Option(
        "--property",
        "-p",
        metavar="PROPERTY",
        help="vapor-pressure, sublimation-pressure, melting-pressure, enthalpy-of-vaporization or "
        "saturated-liquid-density.",
    ),
]
PressureOption = Annotated[
    str,
    typer.Option(
        "--property", "-p", metavar="PROPERTY", help="vapor-pressure, sublimation-pressure or melting-pressure."
    ),
]
AtmosphereOption = Annotated[
    str,
    typer.Option(
        "--atmosphere",
        metavar="PRESSURE",
        help="The local atmosphere, for gauge units: 101.325kPa.",
        show_default=False,
    ),
]
WhyOption = Annotated[
    bool, typer.Option("--why", help="Every candidate with its verdict; rounding and scale of the one that answers.")
]
PhaseOption = Annotated[
    str,
    typer.Option("--phase", metavar="PHASE", help="The phase, where several cover a temperature.", show_default=False),
]
MetastableOption = Annotated[
    bool, typer.Option("--metastable", help="Let a correlation answer where its record states a metastable range.")
]
DraftsOption = Annotated[
    bool, typer.Option("--drafts", help="Let drafts of correlations answer; every such value is marked.")
]
EditionOption = Annotated[
    str | None,
    typer.Option("--edition", metavar="NAME", help="As the library was in this edition.", show_default=False),
]
AsOfOption = Annotated[
    str | None,
    typer.Option(
        "--as-of",
        metavar="DATE|CHANGE",
        help="As the library was: at the end of a day (UTC), at a time such as 2026-12-01T12:00Z, or at a change.",
        show_default=False,
    ),
]
ReasonOption = Annotated[str, typer.Option("--reason", metavar="TEXT", help="Why.", show_default=False)]
AcceptOption = Annotated[
    bool, typer.Option("--accept", help="Accept it in the same change; in a library that one person keeps.")
]


def _check_kind(kind: str) -> str:
    from registry.naming import join_names
    from registry.records import KINDS

    if kind and kind not in KINDS:
        raise BadInput(f"--kind {quote(kind)} given; {join_names(KINDS)} is allowed.")
    return kind


KindOption = Annotated[
    str,
    typer.Option(
        "--kind", metavar="KIND", help="The kind of record, where several have the key.", show_default=False,
        callback=_check_kind,
    ),
]  # fmt: skip
AuthorOption = Annotated[
    str | None,
    typer.Option(
        "--as", metavar="NAME", help="Who is acting; else RANGEBOOK_AUTHOR, else your login.", show_default=False
    ),
]


def open_chosen(place: str | None) -> Library:
    """The library that the options name."""
    from registry.opening import open_library

    return open_library(place)


def look_at(book: Library, edition: str | None, as_of: str | None) -> tuple[Archive, str]:
    """The library as the options want it, and how its position is called; no text for the newest."""
    # an empty text is a variable that was not set, not a wish for the newest
    if edition is not None and as_of is not None:
        raise BadInput("Both --edition and --as-of were given. Give one of them.")
    if edition is not None:
        found = book.edition(edition)
        return book.at(int(found.position)), f"edition {found.name}, change {found.position}"
    if as_of is not None:
        position = book.find_position(as_of)
        return book.at(position), f"change {position}" if as_of == str(position) else f"{as_of}, change {position}"
    return book, ""


def name_author(given: str | None) -> str:
    """Who is acting."""
    if given is not None:
        return given
    if name := os.environ.get("RANGEBOOK_AUTHOR", ""):
        return name
    import getpass

    try:
        return getpass.getuser()
    except (KeyError, OSError):
        return "unknown"
