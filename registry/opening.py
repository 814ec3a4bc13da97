"""Opening, starting and upgrading libraries by their place."""

from __future__ import annotations

import os
from pathlib import Path

from registry.errors import BadInput
from registry.holdings import Holdings
from registry.library import Library
from registry.moments import now_utc
from registry.plan import draft_of
from registry.records import Keeping
from registry.signature import check_signature
from registry.store.library_file import LibraryFile, locate
from registry.store.tables import SCHEMA

__all__ = ["default_place", "open_library", "start_library", "upgrade_library"]

_REASONS = {
    "published": "The published shelf, accepted as it stands.",
    "scenario": "The invented scenario.",
    "none": "A new library.",
}


def default_place() -> str:
    """Where the library is if none is named: RANGEBOOK_LIBRARY, else the user's data folder."""
    named = os.environ.get("RANGEBOOK_LIBRARY")
    if named:
        return named
    import platformdirs

    return str(Path(platformdirs.user_data_dir("rangebook", appauthor=False)) / "library.db")


def open_library(place: str | os.PathLike[str] | None = None) -> Library:
    """Open a library for reading and recording.

    Parameters
    ----------
    place : path or URL, optional
        A SQLite file or a ``sqlite:///`` URL. By default the one named by the
        environment variable RANGEBOOK_LIBRARY, else the one in the user's
        data folder, which is made with the published shelf on first use.

    Returns
    -------
    Library
        A context manager; closing it releases the file.

    Raises
    ------
    LibraryUnreadable
        If there is none, it is damaged, or made by another version.

    Examples
    --------
    >>> with open_library("shelf.db") as library:
    ...     answer = library.lookup("water", 298.15)
    >>> round(answer.value, 1), answer.unit, answer.correlation.key
    (3169.7, 'Pa', 'water-if97')
    """
    if place is None:
        place = default_place()
        if not os.environ.get("RANGEBOOK_LIBRARY") and not locate(place).exists():
            try:
                return start_library(place)
            except FileExistsError:  # another process was first
                pass
    return Library(LibraryFile.open(locate(place)))


def start_library(
    place: str | os.PathLike[str], shelf: str = "published", author: str = "rangebook", *, solo: bool = False
) -> Library:
    """Make a new library, with a shelf or empty.

    Parameters
    ----------
    place : path or URL
        Where; nothing may be there.
    shelf : {'published', 'scenario', 'none'}
        The published shelf (accepted as it stands), the invented
        demonstration scenario, or nothing.
    author : str
        Who starts it.
    solo : bool
        True if one person keeps it, who may then review what they recorded.

    Returns
    -------
    Library
        The new library, open.

    Raises
    ------
    BadInput
        If the shelf is unknown, or the folder cannot be written.
    FileExistsError
        If something is there already.
    """
    from registry.arrival import plan_load
    from registry.shelves import find_shelf

    if shelf not in _REASONS:
        raise BadInput(f"There is no shelf {shelf!r}; the shelves are {', '.join(_REASONS)}.")
    who, why = check_signature(author, _REASONS[shelf])
    path = locate(place)
    name = os.urandom(16).hex()

    started_at = now_utc()
    keeping = Keeping(name=name, started_at=started_at, kept_by="one-person" if solo else "team")

    def fill(file: LibraryFile) -> None:
        with file.writing() as (view, append):
            loaded = plan_load(view, find_shelf(shelf), accept=True).drafts if shelf != "none" else ()
            append(who, why, started_at, [draft_of(keeping), *loaded])

    LibraryFile.create(path, name, started_at, fill)
    return Library(LibraryFile.open(path))


def upgrade_library(place: str | os.PathLike[str], author: str = "rangebook") -> Path | None:
    """Bring a library of an older program up to date, after a backup.

    What was recorded stays as it is. A library that does not say yet who keeps
    it is signed as kept by a team, in a change of its own.

    Parameters
    ----------
    place : path or URL
        The library.
    author : str
        Who upgrades it.

    Returns
    -------
    Path or None
        The backup; None if the library was up to date.

    Raises
    ------
    LibraryUnreadable, LibraryBusy
        If it cannot be read, or is being written for too long.
    BadInput
        If it cannot be written; nothing was changed.
    """
    from registry.store.schema import upgrade_file

    who, why = check_signature(author, f"Upgraded to schema {SCHEMA}.")
    path = locate(place)
    backup = upgrade_file(path, finish=lambda connection: _sign(LibraryFile(path, connection), who, why))
    if backup is None:
        file = LibraryFile.open(path)
        try:
            _sign(file, who, why)
        finally:
            file.close()
    return backup


def _sign(file: LibraryFile, author: str, reason: str) -> None:
    """Record which library this is, if it does not say so yet."""
    from registry.judgement import plan_keeping

    with file.reading() as view:
        if view.states(Keeping.kind, [Keeping.kind]):
            return
    with file.writing() as (view, append):
        held = Holdings(view)
        # somebody may have said it since the look
        planned = plan_keeping(held, "team") if held.state(Keeping.kind, Keeping.kind) is None else None
        if planned is not None:
            append(author, reason, now_utc(), planned.drafts)
