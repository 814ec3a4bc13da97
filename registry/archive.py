"""Reading a library's past: positions, editions, what waits for review."""

from __future__ import annotations

from collections.abc import Callable
from typing import TYPE_CHECKING

from registry.editions import Position, find_position
from registry.entries import restore
from registry.reader import Reader
from registry.records import Edition
from registry.store.history import Change
from registry.waiting import Waiting, list_waiting

if TYPE_CHECKING:
    from registry.findings import Verification

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

    def verify(self, against: str = "", progress: Callable[[int, int], None] | None = None) -> Verification:
        """Recompute everything that is recorded, and hold it against what is stored.

        Parameters
        ----------
        against : str
            A root noted earlier, ``size:root``, whose history this library
            must extend. Only that finds a history that was rewritten whole.
        progress : callable, optional
            ``progress(done, all)`` is told how many records were gone through.

        Returns
        -------
        Verification
            Whether the library holds, its root, and each record that is not
            as it was recorded. The whole library is verified, also through a
            view of its past.

        Raises
        ------
        BadInput
            If `against` is no root.
        LibraryBusy
            If another process holds the file for too long.
        NotALibrary
            If the file cannot be read at all.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     found = library.verify()
        ...     library.verify(against=found.root).holds
        True
        """
        from registry.verification import verify

        return verify(self._file, against, progress)
