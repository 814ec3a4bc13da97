"""Rows as they stand, for verification: nothing is trusted, nothing is raised for what they hold.

The driver's own cursors are read, table by table in the order of the changes,
so that a library is gone through once and never held in memory.
"""

from __future__ import annotations

import sqlite3
from collections.abc import Callable, Iterable, Iterator, Sequence
from concurrent.futures import ThreadPoolExecutor
from contextlib import ExitStack, closing, contextmanager
from functools import lru_cache, partial
from pathlib import Path
from typing import Any

from sqlalchemy import create_engine

from registry.errors import LibraryBusy, NotALibrary
from registry.store.engine import connect, is_busy, wal_is_safe
from registry.store.matching import Row
from registry.store.recognition import normalise_statement
from registry.store.schema import create_schema
from registry.store.tables import SCHEMA

__all__ = [
    "EXPECTED_VERSION",
    "Audit",
    "Damage",
    "Undecodable",
    "expected_schema",
    "is_damage",
    "open_audit",
]


class Undecodable(Exception):
    """Text that is no UTF-8."""


Checked = tuple[list[str], list[Row]]
"""What SQLite says against the file, and (table, row, table referred to, number) of references that lead nowhere."""

Damage = sqlite3.DatabaseError
"""What reading a damaged file raises."""

_STREAMS = {
    "change": "SELECT number, author, reason, recorded_at, records, records_root, header FROM change ORDER BY number",
    "record": "SELECT change, place, id, kind, key, revision, content, digest FROM record ORDER BY change, place, id",
    "link": "SELECT change, kind, key, role, to_kind, to_key FROM link ORDER BY change, rowid",
    "term": "SELECT change, text, kind, key FROM term ORDER BY change, rowid",
    "standing": "SELECT change, id, kind, key, revision, standing, record, cause FROM standing ORDER BY change, id",
}
_NODES = "SELECT place, hash FROM node WHERE level IS ? ORDER BY place"
_LEVELS = "SELECT DISTINCT level FROM node ORDER BY level"
# what SQLite makes for itself has no statement, or a name of its own
_SCHEMA = "SELECT type, name, sql FROM sqlite_master WHERE sql IS NOT NULL AND name NOT LIKE 'sqlite\\_%' ESCAPE '\\'"
_RECORD = "SELECT id, content FROM record WHERE kind = ? AND key = ? AND revision = ?"


class Audit:
    """One read transaction on a library file.

    Parameters
    ----------
    connection : sqlite3.Connection
        Open, with a transaction begun.
    check : callable
        Starts SQLite's own checks, which go on beside the reading.
    """

    def __init__(self, connection: sqlite3.Connection, check: Callable[[], Callable[[], Checked]]) -> None:
        self._connection = connection
        self.start_checks = check

    def _rows(self, statement: str, *values: Any) -> sqlite3.Cursor:
        return self._connection.execute(statement, values)

    def stream(self, table: str) -> sqlite3.Cursor:
        """The rows of a table, in the order of the changes; the change comes first."""
        return self._rows(_STREAMS[table])

    def count(self, table: str) -> int:
        """How many rows a table has."""
        return int(self._rows(f"SELECT count(*) FROM {table}").fetchone()[0])

    def nodes(self, level: int) -> sqlite3.Cursor:
        """Place and hash of the stored nodes of one level, by place."""
        return self._rows(_NODES, level)

    def node(self, level: int, place: int) -> Any:
        """One stored hash, None if there is none."""
        found = self._rows("SELECT hash FROM node WHERE level = ? AND place = ?", level, place).fetchone()
        return found[0] if found else None

    def levels(self) -> list[Any]:
        """Every level of which a node is stored."""
        return [level for (level,) in self._rows(_LEVELS)]

    def library(self) -> list[Row]:
        """The rows that say which library this is: one."""
        return self._rows("SELECT id, name, started_at FROM library ORDER BY id").fetchall()

    def find_record(self, kind: str, key: str, revision: int) -> Row | None:
        """The number and the content of one revision."""
        found: Row | None = self._rows(_RECORD, kind, key, revision).fetchone()
        return found

    def version(self) -> list[Any]:
        """The schema that the migrations stamped."""
        return [value for (value,) in self._rows("SELECT version_num FROM alembic_version")]

    def schema(self) -> dict[str, str]:
        """Every table, index, trigger and view, as its statement."""
        return _gather_statements(self._rows(_SCHEMA))

    def journal_remark(self) -> str:
        """What is to be said of the file's journal: that it may lose what was written."""
        mode = self._rows("PRAGMA journal_mode").fetchone()[0]
        if mode == "wal" and not wal_is_safe(sqlite3.sqlite_version_info[:3]):
            return (
                f"The file is in WAL mode, and SQLite {sqlite3.sqlite_version} has the WAL-reset bug: it may lose "
                "committed changes. The next change recorded with this rangebook sets the rollback journal."
            )
        return ""


@contextmanager
def open_audit(path: Path, *, any_text: bool = False) -> Iterator[Audit]:
    """Read a library file as it stands, in one transaction.

    Parameters
    ----------
    path : Path
        The file, which must be there.
    any_text : bool
        Let text be no UTF-8; slower.

    Raises
    ------
    Undecodable
        If there is such text, and it is not let be.
    LibraryBusy
        If another process holds the file for too long.
    NotALibrary
        If SQLite cannot read it.
    """
    try:
        with ExitStack() as stack:
            connection = stack.enter_context(_connect(path))
            if any_text:
                connection.text_factory = _decode
            beside = _begin_beside(stack, path)
            if beside is None:
                yield Audit(connection, lambda: partial(_check, connection))
                return
            pool = stack.enter_context(ThreadPoolExecutor(1))
            stack.callback(beside.interrupt)  # where reading has failed, nobody waits for the checks
            yield Audit(connection, lambda: pool.submit(_check, beside).result)
    except sqlite3.DatabaseError as error:
        if is_busy(error):
            raise LibraryBusy(str(path)) from error
        if "Could not decode" in str(error):
            raise Undecodable(str(error)) from error
        raise NotALibrary(str(path), f"SQLite says {error}") from error


def is_damage(error: sqlite3.DatabaseError) -> bool:
    """True if the file is to blame: it is not held by another process, and text has been let be."""
    return not is_busy(error) and "Could not decode" not in str(error)


@contextmanager
def _connect(path: Path, timeout: float | None = None) -> Iterator[sqlite3.Connection]:
    with closing(connect(path, "ro", timeout)) as connection:
        connection.isolation_level = None
        connection.execute("PRAGMA trusted_schema=OFF")
        connection.execute("PRAGMA cell_size_check=ON")
        connection.execute("BEGIN")
        connection.execute("SELECT count(*) FROM sqlite_master").fetchone()
        yield connection


def _begin_beside(stack: ExitStack, path: Path) -> sqlite3.Connection | None:
    """A second reader of the same state; None if a writer has come between, who waits for the first."""
    try:
        connection = stack.enter_context(_connect(path, 0.0))
    except sqlite3.OperationalError:
        return None
    connection.text_factory = _decode
    return connection


def _decode(raw: bytes) -> str:
    return raw.decode("utf-8", "surrogateescape")


def _check(connection: sqlite3.Connection) -> Checked:
    """SQLite's own integrity and foreign-key checks."""
    damages: list[str] = []
    dangling: list[Row] = []
    try:
        damages += [str(line) for (line,) in connection.execute("PRAGMA integrity_check") if line != "ok"]
        dangling += connection.execute("PRAGMA foreign_key_check")
    except sqlite3.DatabaseError as error:
        damages.append(str(error))
    return damages, dangling


def _gather_statements(rows: Iterable[Sequence[Any]]) -> dict[str, str]:
    return {f"{kind} {name}": normalise_statement(str(sql)) for kind, name, sql in rows}


@lru_cache(maxsize=1)
def expected_schema() -> dict[str, str]:
    """Every table, index and trigger of a library, as its statement."""
    engine = create_engine("sqlite://")
    with engine.begin() as connection:
        create_schema(connection)
        made = _gather_statements(connection.exec_driver_sql(_SCHEMA))
    engine.dispose()
    return made


EXPECTED_VERSION = f"{SCHEMA:04d}"
"""What the migrations stamp."""
