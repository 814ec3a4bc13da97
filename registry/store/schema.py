"""Making and upgrading library files."""

from __future__ import annotations

import errno
import os
import sqlite3
from collections.abc import Callable
from contextlib import closing, suppress
from pathlib import Path
from typing import TYPE_CHECKING

from sqlalchemy import Connection, insert, text
from sqlalchemy.exc import DatabaseError

from registry.errors import BadInput, LibraryBusy, NewerLibrary, NotALibrary, RangebookError, quote
from registry.store.engine import is_busy, open_engine
from registry.store.marks import mark_file
from registry.store.recognition import check_shape, connect_plainly, read_version
from registry.store.tables import APPLICATION_ID, METADATA, SCHEMA, library, trigger_statements

if TYPE_CHECKING:
    from alembic.config import Config

__all__ = ["create_file", "find_migrations", "upgrade_file"]

_MIGRATION_TABLE = (
    "CREATE TABLE alembic_version (version_num VARCHAR(32) NOT NULL, "
    "CONSTRAINT alembic_version_pkc PRIMARY KEY (version_num))"
)
"""As Alembic makes it, so that a new library equals an upgraded one."""


def create_file(path: Path, name: str, now: str, fill: Callable[[Connection], object]) -> None:
    """Make a library with its first content; it appears whole or not at all.

    Parameters
    ----------
    path : Path
        Where; nothing may be there.
    name : str
        A random name that tells this library from others.
    now : str
        UTC time, ISO 8601.
    fill : callable
        Appends the first content, within the same transaction.

    Raises
    ------
    FileExistsError
        If something is there already, or has appeared meanwhile.
    """
    if path.exists():
        raise FileExistsError(str(path))
    if path.parent.exists() and not path.parent.is_dir():
        raise NotADirectoryError(errno.ENOTDIR, "Not a directory", str(path.parent))
    made = [folder for folder in (path.parent, *path.parent.parents) if not folder.exists()]
    path.parent.mkdir(parents=True, exist_ok=True)
    fresh = path.with_name(f".{path.name}.{name[:8]}.new")
    try:
        engine = open_engine(fresh, create=True)
        try:
            with engine.begin() as connection:
                create_schema(connection)
                connection.execute(insert(library), {"id": 1, "name": name, "started_at": now})
                fill(connection)
        finally:
            engine.dispose()
        _publish(fresh, path)
        mark_file(path)
    finally:
        fresh.unlink(missing_ok=True)
        if not path.exists():
            for folder in made:
                with suppress(OSError):  # somebody else has put something there
                    folder.rmdir()


def _publish(fresh: Path, path: Path) -> None:
    """Give a finished file its name, never over another one."""
    try:
        os.link(fresh, path)
    except FileExistsError:
        raise
    except OSError:  # a file system without hard links
        if path.exists():
            raise FileExistsError(str(path)) from None
        fresh.rename(path)


def create_schema(connection: Connection) -> None:
    """All tables and triggers of the newest schema, stamped as migrated."""
    METADATA.create_all(connection)
    for statement in trigger_statements():
        connection.execute(text(statement))
    connection.execute(text(_MIGRATION_TABLE))
    connection.execute(text("INSERT INTO alembic_version VALUES (:head)"), {"head": f"{SCHEMA:04d}"})
    stamp_version(connection, SCHEMA)


def stamp_version(connection: Connection, version: int) -> None:
    """Write the numbers by which a library file is recognised."""
    connection.exec_driver_sql(f"PRAGMA application_id={APPLICATION_ID}")
    connection.exec_driver_sql(f"PRAGMA user_version={version}")


def find_migrations() -> Path:
    """The folder of migration scripts: in an installed package, else beside it."""
    package = Path(__file__).resolve().parent.parent
    shipped = package / "_shipped" / "migrations"
    return shipped if shipped.is_dir() else package.parent / "migrations"


def upgrade_file(
    path: Path, migrations: Path | None = None, finish: Callable[[Connection], object] | None = None
) -> Path | None:
    """Bring an older library up to date, after a backup.

    Parameters
    ----------
    path : Path
        The library file.
    migrations : Path, optional
        Folder of migration scripts; the program's own by default.
    finish : callable, optional
        Appends what an upgrade adds to the history, within the same
        transaction.

    Returns
    -------
    Path or None
        The backup, or None if the library was up to date already.

    Raises
    ------
    LibraryUnreadable
        If it is no library, damaged, or of a newer program.
    LibraryBusy
        If another process is writing for too long.
    BadInput
        If the file or the folder cannot be written.

    Notes
    -----
    The backup goes through SQLite's backup API, which waits for writers. The
    migration runs in one transaction: it fails whole.
    """
    from alembic.config import Config
    from alembic.script import ScriptDirectory

    version = read_version(path)
    config = Config()
    config.set_main_option("script_location", str(migrations or find_migrations()).replace("%", "%%"))
    newest = int(ScriptDirectory.from_config(config).get_current_head() or 0)
    if version > newest:
        raise NewerLibrary(str(path), version, newest)
    if version == newest:
        return None
    check_shape(path, version)
    backups: list[Path] = []
    try:
        _migrate(path, (version, newest), config, finish, backups)
    except BaseException as error:
        for backup in backups:
            backup.unlink()
        if isinstance(error, DatabaseError | sqlite3.Error | OSError) and not isinstance(error, RangebookError):
            raise _explain(path, error) from error
        raise
    return backups[0]


def _migrate(
    path: Path, versions: tuple[int, int], config: Config, finish: Callable[[Connection], object] | None,
    backups: list[Path],
) -> None:  # fmt: skip
    from alembic import command

    engine = open_engine(path, write=True)
    try:
        with engine.connect() as connection:
            # outside a transaction, where SQLite heeds it: tables may be rebuilt
            connection.connection.execute("PRAGMA foreign_keys=OFF")
            # the write lock is taken first: nobody records between the backup and the migration
            with connection.begin():
                _check_revision(connection, path, versions[0])
                backups.append(_back_up(path, versions[0]))
                config.attributes["connection"] = connection
                command.upgrade(config, "head")
                stamp_version(connection, versions[1])
                if finish is not None:
                    finish(connection)
                broken = connection.exec_driver_sql("PRAGMA foreign_key_check").fetchall()
                if broken:
                    raise NotALibrary(str(path), f"the upgrade left {len(broken)} dangling references")
    finally:
        engine.dispose()


def _check_revision(connection: Connection, path: Path, version: int) -> None:
    """The migration code goes by a table of its own."""
    found = [str(row[0]) for row in connection.execute(text("SELECT version_num FROM alembic_version"))]
    if found != [f"{version:04d}"]:
        raise NotALibrary(str(path), f"it says that it has schema {version}, and {quote(', '.join(found))}")


def _explain(path: Path, error: BaseException) -> RangebookError:
    """A failed upgrade as what it means to a user; it was rolled back."""
    inner = error.orig if isinstance(error, DatabaseError) else error
    why = error.strerror if isinstance(error, OSError) else str(inner)
    if isinstance(inner, sqlite3.Error) and is_busy(inner):
        return LibraryBusy(str(path))
    if isinstance(inner, sqlite3.OperationalError | OSError):
        return BadInput(f"{path} cannot be upgraded: {why}. Nothing was changed.")
    return NotALibrary(str(path), f"it cannot be upgraded: SQLite says {why}")


def _back_up(path: Path, version: int) -> Path:
    """A copy beside the library; it gets its name when it is whole."""
    fresh = path.with_name(f".{path.name}.{os.urandom(4).hex()}.new")
    try:
        with closing(connect_plainly(path)) as source, closing(sqlite3.connect(fresh)) as sink:
            source.backup(sink)
        number = 1
        while True:
            target = path.with_name(f"{path.name}.schema-{version}.backup{f'-{number}' if number > 1 else ''}")
            try:
                _publish(fresh, target)
                return target
            except FileExistsError:
                number += 1
    finally:
        fresh.unlink(missing_ok=True)
