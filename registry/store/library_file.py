"""An open library file: read transactions, write transactions, a change stamp."""

from __future__ import annotations

import os
import sqlite3
from collections.abc import Callable, Iterable, Iterator, Sequence
from contextlib import contextmanager
from pathlib import Path

from sqlalchemy import Connection, Engine
from sqlalchemy.exc import DatabaseError, OperationalError

from registry.errors import BadInput, LibraryBusy, NotALibrary, RangebookError, quote
from registry.merkle import root_from_nodes
from registry.store import positions, reading
from registry.store.engine import is_busy, open_engine
from registry.store.history import Change, Draft, append_change
from registry.store.reading import Decision, State
from registry.store.recognition import check_file
from registry.store.rows import DamagedRow, Row
from registry.store.schema import create_file

__all__ = ["LibraryFile", "View", "locate"]

_UNWRITABLE = ("readonly", "full", "I/O", "unable to open")
"""How SQLite says that a file, its folder or its disk takes nothing more."""

Append = Callable[[str, str, str, Sequence[Draft]], Change]


def locate(place: str | os.PathLike[str]) -> Path:
    """The file that a path or URL names.

    Examples
    --------
    >>> locate("sqlite:///team.db").name
    'team.db'
    """
    text = os.fspath(place)
    if text.startswith("sqlite:///"):
        return Path(text.removeprefix("sqlite:///"))
    if text.startswith("sqlite://"):
        raise BadInput(f"{quote(text)} is no place of a library: a sqlite URL has three slashes, sqlite:///team.db.")
    if "://" in text:
        raise BadInput(f"{text.split('://')[0]} libraries are not supported yet. Give a path or a sqlite:/// URL.")
    if not text:
        raise BadInput("The place of a library is empty. Give a path or a sqlite:/// URL.")
    if "\x00" in text:
        raise BadInput(f"{quote(text)} is no place of a library: it holds a NUL character.")
    return Path(text)


class View:
    """Reading within one transaction, at one position."""

    def __init__(self, connection: Connection, position: int) -> None:
        self._connection = connection
        self.position = position

    def at(self, position: int) -> View:
        """The library at an earlier position, in the same transaction."""
        return View(self._connection, min(position, self.position))

    def added(self, number: int, kind: str) -> list[Row]:
        """The records of one kind that a change has added, in order."""
        return reading.read_added(self._connection, number, kind)

    def kind(self, kind: str) -> list[Row]:
        """The newest revision of every record of a kind, by key."""
        return reading.read_kind(self._connection, kind, self.position)

    def current(self, kind: str, keys: Iterable[str]) -> list[Row]:
        """The newest revisions under some keys of a kind."""
        return reading.read_current(self._connection, kind, keys, self.position)

    def revisions(self, kind: str, key: str) -> list[Row]:
        """Every revision of one record, in order."""
        return reading.read_revisions(self._connection, kind, key, self.position)

    def decisions(self, kind: str, key: str) -> list[Decision]:
        """Every word on the revisions of one record, in order."""
        return reading.read_decisions(self._connection, kind, key, self.position)

    def states(self, kind: str, keys: Iterable[str] | None = None) -> list[State]:
        """Where the keys of a kind stand, all of them or some, by key."""
        return reading.read_states(self._connection, self.position, kind, keys)

    def linked(self, to_kind: str, to_keys: Iterable[str], kind: str = "") -> list[State]:
        """Where the keys stand that refer, or once referred, to some records."""
        return reading.read_linked(self._connection, self.position, to_kind, to_keys, kind)

    def waiting(self, kinds: Iterable[str]) -> list[tuple[Row, str]]:
        """Newest revisions of some kinds without a verdict, oldest first, each with the note on its arrival."""
        return reading.read_waiting(self._connection, kinds, self.position)

    def find_term(self, text: str) -> list[Row]:
        """The records that a person has ever found under a text."""
        return reading.find_term(self._connection, text, self.position)

    def terms(self) -> Sequence[str]:
        """Every text by which something has ever been found."""
        return reading.read_terms(self._connection, self.position)

    def changes(self) -> list[Change]:
        """The headers of all changes up to the position."""
        return positions.read_changes(self._connection, self.position)

    def change(self, number: int) -> Change:
        """The header of one change."""
        return positions.read_change(self._connection, number)

    def changed(self, since: int) -> list[tuple[str, str]]:
        """Kind and key of every record that changes after `since` have added."""
        return positions.read_changed(self._connection, since, self.position)

    def find_position(self, time: str) -> int:
        """The last change recorded before a time, 0 if there is none; never after the position."""
        return min(positions.find_position(self._connection, time), self.position)

    def identity(self) -> tuple[str, str]:
        """The random name of the library, and when it was started."""
        return positions.read_identity(self._connection)

    def root(self, size: int) -> bytes:
        """The Merkle root over the headers of the first `size` changes, from the stored nodes."""
        return root_from_nodes(size, lambda level, place: positions.read_node(self._connection, level, place))


def _settle(connection: Connection, position: int | None) -> int:
    newest = positions.read_position(connection)
    if position is not None and not 0 <= position <= newest:
        raise BadInput(f"The library has no position {position}; the newest is {newest}.")
    return newest if position is None else position


class LibraryFile:
    """One library file, open."""

    def __init__(self, path: Path, connection: Connection | None = None) -> None:
        self.path = path
        self._inside = connection
        self._reader: Engine | None = None
        self._raw: sqlite3.Cursor | None = None
        self._closed = False

    @classmethod
    def open(cls, path: Path) -> LibraryFile:
        """Open an existing library; refuse what is none."""
        check_file(path)
        return cls(path)

    @classmethod
    def create(cls, path: Path, name: str, now: str, fill: Callable[[LibraryFile], None]) -> None:
        """Make a library whose first content `fill` appends."""
        try:
            create_file(path, name, now, lambda connection: fill(cls(path, connection)))
        except (FileExistsError, RangebookError):
            raise
        except (OSError, OperationalError) as error:
            why = error.strerror if isinstance(error, OSError) else error.orig
            raise BadInput(f"No library can be made at {path}: {why}. Nothing was left behind.") from error

    def close(self) -> None:
        """Release the file."""
        self._closed = True
        if self._raw is not None:
            self._raw.close()
            self._raw = None
        if self._reader is not None:
            self._reader.dispose()
            self._reader = None

    def read_stamp(self) -> int:
        """A number that changes whenever another connection has changed the file."""
        if self._raw is None:
            self._raw = self._driver_cursor()
        try:
            return self._raw.execute("PRAGMA data_version").fetchone()[0]
        except sqlite3.OperationalError as error:
            raise LibraryBusy(str(self.path)) from error

    def _engine(self) -> Engine:
        if self._closed:
            raise BadInput(f"{self.path} is closed. Open the library again.")
        if self._reader is None:
            self._reader = open_engine(self.path)
        return self._reader

    def _driver_cursor(self) -> sqlite3.Cursor:
        # the driver's own connection: a statement costs a tenth of one through the engine
        with self._guard():
            driver = self._engine().raw_connection().driver_connection
            assert isinstance(driver, sqlite3.Connection)
            return driver.cursor()

    @contextmanager
    def _guard(self) -> Iterator[None]:
        """Database errors as what they mean to a user."""
        try:
            yield
        except DamagedRow as error:
            raise NotALibrary(str(self.path), str(error)) from error
        except DatabaseError as error:
            text = str(error.orig)
            if error.orig is not None and is_busy(error.orig):
                raise LibraryBusy(str(self.path)) from error
            if isinstance(error, OperationalError) and any(word in text for word in _UNWRITABLE):
                raise BadInput(f"{self.path} cannot be written: {text}. Nothing was changed.") from error
            raise NotALibrary(str(self.path), f"SQLite says {text}") from error

    @contextmanager
    def reading(self, position: int | None = None) -> Iterator[View]:
        """A read transaction at a position; at the newest one if none is given."""
        if self._inside is not None:
            yield View(self._inside, _settle(self._inside, position))
            return
        with self._guard(), self._engine().begin() as connection:
            yield View(connection, _settle(connection, position))

    @contextmanager
    def writing(self) -> Iterator[tuple[View, Append]]:
        """A write transaction: what it appends is there whole, or not at all."""
        if self._inside is not None:
            yield self._write_with(self._inside)
            return
        engine = open_engine(self.path, write=True)
        try:
            with self._guard(), engine.begin() as connection:
                yield self._write_with(connection)
        finally:
            engine.dispose()

    @staticmethod
    def _write_with(connection: Connection) -> tuple[View, Append]:
        def append(author: str, reason: str, now: str, drafts: Sequence[Draft]) -> Change:
            return append_change(connection, author, reason, now, drafts)

        return View(connection, positions.read_position(connection)), append
