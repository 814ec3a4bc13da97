"""Connections to a library's SQLite file.

A reader's connection takes no statement that writes. A writer takes the write
lock at once (BEGIN IMMEDIATE), for a deferred lock that must be upgraded fails
whatever the timeout. The journal is a rollback journal with synchronous=EXTRA
unless SQLite is free of the WAL-reset bug (versions 3.7.0 to 3.51.2 but for the
fixed 3.44.6 and 3.50.7 lines), in which WAL can lose committed writes.
"""

from __future__ import annotations

import os
import sqlite3
import time
from pathlib import Path
from typing import Any
from urllib.parse import quote

from sqlalchemy import Engine, create_engine, event
from sqlalchemy.pool import StaticPool

from registry.errors import NotALibrary

__all__ = ["BUSY_SECONDS", "connect", "harden", "is_busy", "open_engine", "wal_is_safe"]

BUSY_SECONDS = 30
"""How long a writer waits for another one."""

_LONGEST_PAUSE = 0.01
"""Seconds, beyond the first thousandth, between two tries of a writer that waits; how many is drawn anew each time."""

_SYNCHRONOUS = {"wal": 2, "delete": 3}
"""By journal: FULL, and EXTRA, which also makes sure that the rollback journal is gone."""

_HARD = {"trusted_schema": 0, "cell_size_check": 1}
_LIMITS = {
    sqlite3.SQLITE_LIMIT_LENGTH: 2**27,  # bytes of a text or a row; the largest dataset known has a thousandth
    sqlite3.SQLITE_LIMIT_ATTACHED: 0,
    sqlite3.SQLITE_LIMIT_TRIGGER_DEPTH: 10,
    sqlite3.SQLITE_LIMIT_WORKER_THREADS: 0,
}


def wal_is_safe(version: tuple[int, int, int]) -> bool:
    """True for a SQLite version without the WAL-reset bug.

    Examples
    --------
    >>> wal_is_safe((3, 40, 1)), wal_is_safe((3, 50, 7)), wal_is_safe((3, 51, 3))
    (False, True, True)
    """
    return version >= (3, 51, 3) or (3, 50, 7) <= version < (3, 51, 0) or (3, 44, 6) <= version < (3, 45, 0)


def is_busy(error: BaseException) -> bool:
    """True if SQLite says that another process holds the file."""
    return any(word in str(error) for word in ("locked", "busy"))


def connect(path: Path, mode: str, timeout: float | None = None) -> sqlite3.Connection:
    """A connection of the driver on a file; `mode` is ``ro``, ``rw`` or ``rwc``; it waits as long as a writer does."""
    # not through a database URL, which would decode the path a second time
    uri = f"file:{quote(str(path))}?mode={mode}"
    wait = BUSY_SECONDS if timeout is None else timeout
    return sqlite3.connect(uri, uri=True, timeout=wait, check_same_thread=False)


def harden(connection: sqlite3.Connection) -> None:
    """Switch off what a file could bring along; the driver loads no extensions unless it is told to."""
    for limit, value in _LIMITS.items():
        connection.setlimit(limit, value)
    for name, wanted in _HARD.items():
        connection.execute(f"PRAGMA {name}={wanted}")


def open_engine(path: Path, *, write: bool = False, create: bool = False) -> Engine:
    """An engine with one connection on a library file.

    Parameters
    ----------
    path : Path
        The file.
    write : bool
        Open for writing; every transaction then takes the write lock.
    create : bool
        Make the file if it is missing.

    Returns
    -------
    sqlalchemy.Engine
        Its connections have the pragmas that a library needs.
    """
    # not "ro": reading must be able to take back what a process left half-written that died
    mode = "rwc" if create else "rw"
    engine = create_engine("sqlite://", creator=lambda: connect(path, mode), poolclass=StaticPool)

    @event.listens_for(engine, "connect")
    def prepare(connection: Any, _: Any) -> None:
        connection.isolation_level = None
        _set_pragmas(connection, path, write or create)

    @event.listens_for(engine, "begin")
    def begin(connection: Any) -> None:
        if write or create:
            _take_turn(connection)
        else:
            connection.exec_driver_sql("BEGIN")

    return engine


def _take_turn(connection: Any) -> None:
    """Begin to write as soon as no other process does."""
    driver: sqlite3.Connection = connection.connection.driver_connection
    driver.execute("PRAGMA busy_timeout=0")
    try:
        _execute_patiently(driver, "BEGIN IMMEDIATE")
    except sqlite3.OperationalError:
        connection.exec_driver_sql("BEGIN IMMEDIATE")  # says the same, as an error of the engine
    finally:
        driver.execute(f"PRAGMA busy_timeout={int(BUSY_SECONDS * 1000)}")


def _execute_patiently(connection: sqlite3.Connection, statement: str) -> sqlite3.Cursor:
    """Execute a statement once others let go of the file, within the time that a writer waits.

    SQLite's own waiting asks more rarely the longer it lasts: those who come
    later overtake, and where many write some wait for ever. Here each asks as
    often as any other.
    """
    until = time.monotonic() + BUSY_SECONDS
    while True:
        try:
            return connection.execute(statement)
        except sqlite3.OperationalError as error:
            if error.sqlite_errorcode & 0xFF != sqlite3.SQLITE_BUSY or time.monotonic() >= until:
                raise
        time.sleep(0.001 + os.urandom(1)[0] / 256 * _LONGEST_PAUSE)


def _set_pragmas(connection: sqlite3.Connection, path: Path, write: bool) -> None:
    harden(connection)
    wanted = {"foreign_keys": 1, "recursive_triggers": 1, "query_only": int(not write), **_HARD}
    if write:
        mode = "wal" if wal_is_safe(sqlite3.sqlite_version_info[:3]) else "delete"
        connection.execute("PRAGMA busy_timeout=0")
        found = _execute_patiently(connection, f"PRAGMA journal_mode={mode}").fetchone()[0]
        if found != mode:
            raise NotALibrary(str(path), f"SQLite keeps journal mode {found}, not {mode}")
        wanted["synchronous"] = _SYNCHRONOUS[mode]
    for name, value in wanted.items():
        connection.execute(f"PRAGMA {name}={value}")
        found = connection.execute(f"PRAGMA {name}").fetchone()[0]
        if found != value:
            raise NotALibrary(str(path), f"SQLite does not take {name}={value}")
