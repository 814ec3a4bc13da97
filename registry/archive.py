"""Reading a library's past: positions, editions, histories, differences, what waits for review."""

from __future__ import annotations

import os
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING, Any

from registry.dossier import Entry
from registry.entries import rest_on, restore
from registry.records import Edition, Record, Source, Withdrawal
from registry.store.history import Change
from registry.tabulator import Tabulator

# a lookup needs none of these: they are imported where they are used
if TYPE_CHECKING:
    from registry.chronicle import Event
    from registry.difference import Difference, Preview
    from registry.editions import Position
    from registry.findings import Verification
    from registry.waiting import Waiting

__all__ = ["Archive"]


class Archive(Tabulator):
    """Reading a library as `Tabulator` does, and its past.

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
        """The number of the change that an edition, a number or a date means.

        Parameters
        ----------
        place : str, int or date
            As for `at`.

        Returns
        -------
        int
            A position.
        """
        from registry.editions import find_position

        with self._lock, self._reading() as view:
            return find_position(view, place)

    def edition(self, name: str) -> Edition:
        """The edition of a name, case aside.

        Parameters
        ----------
        name : str
            Its name.

        Returns
        -------
        Edition
            With its position, root and rules version.

        Raises
        ------
        UnknownKey
            If there is none.
        BadInput
            If it stands on rules that this program does not have.
        """
        from registry.editions import find_edition

        with self._lock, self._reading() as view:
            return find_edition(view, name)

    def editions(self) -> list[tuple[Edition, Change]]:
        """Every edition, oldest first, each with the change that froze it."""
        with self._lock, self._reading() as view:
            rows = sorted(view.kind("edition"), key=lambda row: row.change)
            return [(restore(row), view.change(row.change)) for row in rows]

    def queue(self) -> list[Waiting]:
        """What waits for review, oldest first."""
        from registry.waiting import list_waiting

        with self._lock, self._reading() as view:
            return list_waiting(view)

    def resting(self, record: Record) -> list[Entry[Any]]:
        """What rests on the source that a withdrawal is about.

        Parameters
        ----------
        record : Record
            A withdrawal, or a source.

        Returns
        -------
        list of Entry
            Correlations, fixed points and datasets; none for another record.
        """
        source = record.key if isinstance(record, Source) else ""
        if isinstance(record, Withdrawal) and record.of_kind == Source.kind:
            source = record.of_key
        with self._lock, self._reading() as view:
            return rest_on(view, [source]) if source else []

    def history(self, key: str, kind: str = "") -> list[Event]:
        """Everything that happened to a record, in order.

        Parameters
        ----------
        key : str
            Its key.
        kind : str
            Needed where several kinds of record have the key; by default the
            first that has it.

        Returns
        -------
        list of Event
            Who, when, why, and what changed field by field.

        Raises
        ------
        UnknownKey
            If there is no such record.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     [event.what for event in library.history("water-if97")]
        ['recorded', 'accepted']
        """
        from registry.chronicle import list_events

        record = self.newest(key, kind).record
        with self._lock, self._reading() as view:
            return list_events(view, record.kind, record.key)

    def diff(self, before: Position, after: Position | None = None) -> Difference:
        """What differs between two positions, in numbers and record by record.

        Parameters
        ----------
        before : str, int or date
            An edition, a change or a date.
        after : str, int or date, optional
            Another one, later or earlier; the position read at if none is
            given.

        Returns
        -------
        Difference
            The temperature ranges in which an answer appears, disappears or
            changes, and the records that differ.

        Raises
        ------
        UnknownKey, BadInput
            If there is no such position.

        Examples
        --------
        >>> import registry
        >>> with registry.open_library("shelf.db") as library:
        ...     library.diff(1, 1).numbers
        ()
        """
        from registry.difference import find_difference
        from registry.editions import find_position

        with self._lock, self._reading() as view:
            one = view.at(find_position(view, before))
            two = view if after is None else view.at(find_position(view, after))
            return find_difference(one, two)

    def preview(self, record: Record, expect: int | None = None) -> Preview:
        """What a revision would change, were it accepted; nothing is recorded.

        Parameters
        ----------
        record : Record
            As it would be, under a key that is recorded.
        expect : int, optional
            The revision it was made from.

        Returns
        -------
        Preview
            The fields, and what that does to the numbers.

        Raises
        ------
        UnknownKey
            If there is no such record.
        RevisedMeanwhile
            If the newest revision is not the expected one.
        """
        from registry.difference import find_preview
        from registry.holdings import check_expected

        newest = self.newest(record.key, record.kind)
        check_expected(newest, expect, record.content())
        return find_preview(newest, record, self.dossier)

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

    def verify(self, against: str | None = None, progress: Callable[[int, int], None] | None = None) -> Verification:
        """Recompute everything that is recorded, and hold it against what is stored.

        Parameters
        ----------
        against : str, optional
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
