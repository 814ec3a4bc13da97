"""Options that several commands share."""

from __future__ import annotations

import os
from typing import TYPE_CHECKING, Annotated

import typer

if TYPE_CHECKING:
    from registry.library import Library

LibraryOption = Annotated[
    str | None,
    typer.Option(
        "--library",
        metavar="PATH-or-URL",
        help="The library; else RANGEBOOK_LIBRARY, else the one in your data folder.",
        show_default=False,
    ),
]
JsonOption = Annotated[bool, typer.Option("--json", help="Print one JSON object and nothing else.")]
PropertyOption = Annotated[
    str, typer.Option("--property", "-p", metavar="PROPERTY", help="What is asked for, such as sublimation-pressure.")
]
PhaseOption = Annotated[
    str,
    typer.Option("--phase", metavar="PHASE", help="The phase, where several cover a temperature.", show_default=False),
]
MetastableOption = Annotated[
    bool, typer.Option("--metastable", help="Let metastable ranges answer that records state.")
]
AuthorOption = Annotated[
    str,
    typer.Option(
        "--as", metavar="NAME", help="Who is acting; else RANGEBOOK_AUTHOR, else your login.", show_default=False
    ),
]


def open_chosen(place: str | None) -> Library:
    """The library that the options name."""
    from registry.opening import open_library

    return open_library(place)


def name_author(given: str) -> str:
    """Who is acting."""
    name = given or os.environ.get("RANGEBOOK_AUTHOR", "")
    if name:
        return name
    import getpass

    try:
        return getpass.getuser()
    except (KeyError, OSError):
        return "unknown"
