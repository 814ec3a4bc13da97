"""Reading a library's past: positions, editions, what waits for review."""

from __future__ import annotations

import os
from pathlib import Path

from registry.editions import Position, find_position
from registry.entries import restore
from registry.reader import Reader
from registry.records import Edition
from registry.store.history import Change
from registry.waiting import Waiting, list_waiting

__all__ = ["Archive"]


class Archive(Reader):
    """Reading a library as `Reader` does, and its past.

    Parameters
    ----------
    file : LibraryFile
        The open database.
    position : int, optional
        The change up to which everything is read; the newest one if none is
        given.
    lock : RLock, optional
        Of the archive that this one is a view of, and that owns the file.
    """

    def at(self, place: Position) -> Archive:
        """The library as it was: a view that only reads.

        Parameters
        ----------
        place : str, int or date
            The name of an edition; the number of a change; or a date (also
            as text), which means the last change at or before its end, UTC.

        Returns
        -------
        Archive
            With the same lookup methods. What it answers does not change,
            whatever is recorded later. It reads through this library, and
            ends with it.

        Raises
        ------
        UnknownKey
            If there is no edition of that name.
        BadInput
            If there is no such change, nothing was recorded by then, or the
            edition stands on rules that this program does not have.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     library.at(1).lookup("water", 298.15).correlation.key
        'water-if97'
        """
        return Archive(self._file, self.find_position(place), self._lock)

    def find_position(self, place: Position) -> int:
        """The number of the change that an edition, a number or a date means."""
        with self._lock, self._reading() as view:
            return find_position(view, place)

    def editions(self) -> list[tuple[Edition, Change]]:
        """Every edition, oldest first, each with the change that froze it."""
        with self._lock, self._reading() as view:
            rows = sorted(view.kind("edition"), key=lambda row: row.change)
            return [(restore(row), view.change(row.change)) for row in rows]

    def queue(self) -> list[Waiting]:
        """What waits for review, oldest first."""
        with self._lock, self._reading() as view:
            return list_waiting(view)

    def dump(self, path: str | os.PathLike[str], since: Position | None = None) -> dict[str, int]:
        """Write everything that counts as a package, or what is new since a position.

        Of a record with several revisions the one in force is written: a draft
        that waits over an accepted revision stays behind.

        Parameters
        ----------
        path : path
            A folder that does not exist yet, or a name ending in .zip.
        since : str, int or date, optional
            An edition, a change or a date: only what was recorded, revised,
            reviewed or withdrawn after it is written. Such a package says
            where it comes from, and loads where everything older is.

        Returns
        -------
        dict of str to int
            The number of rows of each file, and under ``waiting`` the drafts
            that stayed behind, if any.

        Raises
        ------
        BadInput
            If something is at the path already, or there is no such position.
        """
        from registry.departure import select_all, select_since
        from registry.exchange.dumping import dump_items

        with self._lock, self._reading() as view:
            entries, provenance = (select_all(view), None) if since is None else select_since(view, since)
        waiting = sum(entry.waiting > 0 for entry in entries)
        items = ((e.record, (e.standing, e.standing_note)) for e in entries)
        rows = dump_items(Path(path), items, provenance)
        return {**rows, "waiting": waiting} if waiting else rows
