"""Is a file a library that this program may open?

The standard library's sqlite3 looks at it, read-only and with everything
switched off that a file can bring along, before anything else does: what is
no library, damaged, hostile, older or newer is told apart without loading the
migration code. A table, index, trigger or view that is not the program's own
is refused; one that is missing is for `verify` to tell.
"""

from __future__ import annotations

import hashlib
import os
import sqlite3
import stat
from collections.abc import Callable, Iterable, Iterator
from contextlib import closing
from pathlib import Path
from typing import TypeVar

from registry.errors import LibraryBusy, NewerLibrary, NoLibrary, NotALibrary, OlderLibrary, quote
from registry.store import marks
from registry.store.engine import connect, harden, is_busy
from registry.store.shapes import SHAPES
from registry.store.tables import APPLICATION_ID, SCHEMA

__all__ = ["check_file", "check_shape", "connect_plainly", "digest_object", "normalise_statement", "read_version"]

T = TypeVar("T")

_SQL_LIMIT = 100_000
"""Bytes of one statement of a schema; the program's own have less than 2,000."""

_STATISTICS = (
    ("table", "sqlite_stat1", "CREATE TABLE sqlite_stat1(tbl,idx,stat)"),
    ("table", "sqlite_stat4", "CREATE TABLE sqlite_stat4(tbl,idx,neq,nlt,ndlt,sample)"),
)
"""What ANALYZE leaves."""


def check_file(path: Path) -> None:
    """Refuse a file that this program cannot read as a library.

    The first time a file is seen its pages are checked as well.

    Raises
    ------
    LibraryUnreadable
        Of the kind that fits.
    LibraryBusy
        If another process is writing for too long.
    """
    found = _stat(path)
    mark = marks.find_mark(path, found)
    seen = marks.has_mark(mark)
    version = _ask(path, lambda connection: _look(connection, path, thorough=not seen))
    if version > SCHEMA:
        raise NewerLibrary(str(path), version, SCHEMA)
    if version < SCHEMA:
        raise OlderLibrary(str(path), version, SCHEMA)
    if not seen:
        marks.leave_mark(mark)


def read_version(path: Path) -> int:
    """The schema number of a library file, whatever it is.

    Raises
    ------
    NoLibrary
        If nothing is there.
    NotALibrary
        If it is no SQLite file, damaged, or another program's database.
    """
    _stat(path)
    return _ask(path, lambda connection: _read_numbers(connection, path))


def check_shape(path: Path, version: int) -> None:
    """Refuse a library of a schema that holds what no program made, or damaged pages.

    Raises
    ------
    NotALibrary
        Names what is there.
    """
    if version not in SHAPES:
        raise NotALibrary(str(path), f"it has schema {version}, which no rangebook made")
    _ask(path, lambda connection: _check_whole(connection, path, version, thorough=True))


def connect_plainly(path: Path) -> sqlite3.Connection:
    """A read-only connection without any extra, for looking and for backups."""
    connection = connect(path, "ro")
    harden(connection)
    connection.setlimit(sqlite3.SQLITE_LIMIT_SQL_LENGTH, _SQL_LIMIT)
    return connection


def digest_object(kind: str, name: str, table: str, sql: str) -> str:
    """A short digest of one object of a schema.

    Examples
    --------
    >>> digest_object("table", "t", "t", 'CREATE TABLE t (\\n\\t"a" TEXT\\n)') == digest_object(
    ...     "table", "t", "t", "CREATE TABLE t(a TEXT)"
    ... )
    True
    """
    text = normalise_statement(sql)
    return hashlib.sha256("\0".join((kind, name, table, text)).encode()).hexdigest()[:16]


def normalise_statement(sql: str) -> str:
    """A statement of a schema without what SQLAlchemy, Alembic and SQLite each write in their own way.

    Examples
    --------
    >>> normalise_statement('CREATE TABLE t (\\n\\t"a" TEXT\\n)')
    'CREATE TABLE t(a TEXT)'
    """
    text = " ".join(sql.replace('"', "").split())
    for sign in "(),":
        text = text.replace(f" {sign}", sign).replace(f"{sign} ", sign)
    return text


def _stat(path: Path) -> os.stat_result:
    # never open()ed: closing it would drop the locks that this process holds on the file
    place = str(path)
    try:
        found = os.stat(path)
    except (FileNotFoundError, NotADirectoryError):
        raise NoLibrary(place) from None
    except OSError as error:
        raise NotALibrary(place, f"{error.strerror}") from error
    if stat.S_ISDIR(found.st_mode):
        raise NotALibrary(place, "it is a folder")
    if not stat.S_ISREG(found.st_mode):
        raise NotALibrary(place, "it is no file but a pipe, socket or device")
    if found.st_size == 0:
        raise NotALibrary(place, "it is empty")
    return found


def _ask(path: Path, question: Callable[[sqlite3.Connection], T]) -> T:
    """Ask a file, once more if an interrupted change had to be rolled back first."""
    try:
        return _ask_once(path, question)
    except NotALibrary as error:
        if getattr(error.__cause__, "sqlite_errorcode", 0) != sqlite3.SQLITE_READONLY_ROLLBACK:
            raise
    _roll_back(path)
    return _ask_once(path, question)


def _ask_once(path: Path, question: Callable[[sqlite3.Connection], T]) -> T:
    place = str(path)
    try:
        with closing(connect_plainly(path)) as connection:
            return question(connection)
    except (sqlite3.Error, UnicodeDecodeError) as error:
        text = str(error)
        if isinstance(error, sqlite3.OperationalError) and is_busy(error):
            raise LibraryBusy(place) from error
        plain = "it is no SQLite file" if "is not a database" in text else f"SQLite says {quote_plainly(text)}"
        raise NotALibrary(place, plain) from error


def quote_plainly(text: str, limit: int = 200) -> str:
    """What SQLite says, which may hold names of a hostile file, made printable and short."""
    shown = text if text.isprintable() else repr(text)[1:-1]
    return shown if len(shown) <= limit else f"{shown[:limit]}..."


def _roll_back(path: Path) -> None:
    """Let SQLite take back the change of a process that died while it wrote.

    Reading does that by itself, on a connection that may write.
    """
    try:
        with closing(connect(path, "rw")) as connection:
            harden(connection)
            connection.execute("SELECT count(*) FROM sqlite_master").fetchone()
    except sqlite3.Error as error:
        why = f"a change was broken off and the file cannot be written to take it back: SQLite says {error}"
        raise NotALibrary(str(path), why) from error


def _look(connection: sqlite3.Connection, path: Path, *, thorough: bool) -> int:
    version = _read_numbers(connection, path)
    if version == SCHEMA:
        _check_whole(connection, path, version, thorough=thorough)
    return version


def _read_numbers(connection: sqlite3.Connection, path: Path) -> int:
    application = connection.execute("PRAGMA application_id").fetchone()[0]
    version = connection.execute("PRAGMA user_version").fetchone()[0]
    tables = connection.execute("SELECT count(*) FROM sqlite_master WHERE name = 'change'").fetchone()[0]
    if application != APPLICATION_ID or not tables:
        raise NotALibrary(str(path), "it is another program's database")
    return int(version)


def _check_whole(connection: sqlite3.Connection, path: Path, version: int, *, thorough: bool) -> None:
    # first: the page check evaluates expressions of the schema
    rows = connection.execute("SELECT type, name, tbl_name, sql FROM sqlite_master")
    if strange := next(_find_strangers(rows, SHAPES.get(version, {})), ""):
        raise NotALibrary(str(path), strange)
    if thorough and (damage := _find_damage(connection)):
        raise NotALibrary(str(path), f"SQLite says {quote_plainly(damage)}")


def _find_strangers(rows: Iterable[tuple[object, ...]], shape: dict[str, str]) -> Iterator[str]:
    """What a schema holds that is not the program's own, a sentence each."""
    known = set(shape.values())
    for kind, name, table, sql in rows:
        if sql is None and kind == "index" and table in shape and str(name).startswith("sqlite_autoindex_"):
            continue
        if (kind, name, sql) in _STATISTICS:
            continue
        if digest_object(str(kind), str(name), str(table), str(sql)) not in known:
            named = f"the {quote_plainly(str(kind), 20)} {quote(name)}"
            yield f"{named} is not as rangebook makes it" if name in shape else f"it holds {named}, not rangebook's own"


def _find_damage(connection: sqlite3.Connection) -> str:
    found = connection.execute("PRAGMA quick_check(1)").fetchone()[0]
    return "" if found == "ok" else str(found).removeprefix("*** in database main ***\n")
