"""Making, recognising and upgrading library files.

A file is looked at with the standard library's sqlite3 before anything else:
what is no library, damaged, older or newer is told apart without loading the
migration code.
"""

from __future__ import annotations

import errno
import os
import sqlite3
from collections.abc import Callable
from contextlib import closing
from pathlib import Path
from urllib.parse import quote

from sqlalchemy import Connection, insert, text
from sqlalchemy.exc import OperationalError

from registry.errors import LibraryBusy, NewerLibrary, NoLibrary, NotALibrary, OlderLibrary
from registry.store.engine import BUSY_SECONDS, open_engine
from registry.store.tables import APPLICATION_ID, METADATA, SCHEMA, library, trigger_statements

__all__ = ["check_file", "create_file", "find_migrations", "upgrade_file"]

_MIGRATION_TABLE = (
    "CREATE TABLE alembic_version (version_num VARCHAR(32) NOT NULL, "
    "CONSTRAINT alembic_version_pkc PRIMARY KEY (version_num))"
)
"""As Alembic makes it, so that a new library equals an upgraded one."""


def read_version(path: Path) -> int:
    """The schema number of a library file, whatever it is.

    Raises
    ------
    NoLibrary
        If nothing is there.
    NotALibrary
        If it is no SQLite file, damaged, or another program's database.
    """
    place = str(path)
    if not path.exists():
        raise NoLibrary(place)
    if path.is_dir():
        raise NotALibrary(place, "it is a folder")
    # never open()ed: closing it would drop the locks that this process holds on the file
    if path.stat().st_size == 0:
        raise NotALibrary(place, "it is empty")
    try:
        with closing(_connect_plainly(path)) as connection:
            application = connection.execute("PRAGMA application_id").fetchone()[0]
            version = connection.execute("PRAGMA user_version").fetchone()[0]
            tables = connection.execute("SELECT count(*) FROM sqlite_master WHERE name = 'change'").fetchone()[0]
    except sqlite3.OperationalError as error:
        if "locked" in str(error) or "busy" in str(error):
            raise LibraryBusy(place) from error
        raise NotALibrary(place, f"SQLite says {error}") from error
    except (sqlite3.DatabaseError, UnicodeDecodeError) as error:
        plain = "it is no SQLite file" if "is not a database" in str(error) else f"SQLite says {error}"
        raise NotALibrary(place, plain) from error
    if application != APPLICATION_ID or not tables:
        raise NotALibrary(place, "it is another program's database")
    return int(version)


def _connect_plainly(path: Path) -> sqlite3.Connection:
    uri = f"file:{quote(str(path))}?mode=ro"
    connection = sqlite3.connect(uri, uri=True, timeout=BUSY_SECONDS)
    connection.execute("PRAGMA trusted_schema=OFF")
    connection.execute("PRAGMA cell_size_check=ON")
    return connection


def check_file(path: Path) -> None:
    """Refuse a file that this program cannot read as a library.

    Raises
    ------
    LibraryUnreadable
        Of the kind that fits.
    """
    version = read_version(path)
    if version > SCHEMA:
        raise NewerLibrary(str(path), version, SCHEMA)
    if version < SCHEMA:
        raise OlderLibrary(str(path), version, SCHEMA)


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
    finally:
        fresh.unlink(missing_ok=True)


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


def upgrade_file(path: Path, migrations: Path | None = None) -> Path | None:
    """Bring an older library up to date, after a backup.

    Parameters
    ----------
    path : Path
        The library file.
    migrations : Path, optional
        Folder of migration scripts; the program's own by default.

    Returns
    -------
    Path or None
        The backup, or None if the library was up to date already.

    Notes
    -----
    The backup goes through SQLite's backup API, which waits for writers. The
    migration runs in one transaction: it fails whole.
    """
    from alembic import command
    from alembic.config import Config
    from alembic.script import ScriptDirectory

    version = read_version(path)
    folder = migrations or find_migrations()
    config = Config()
    config.set_main_option("script_location", str(folder).replace("%", "%%"))
    head = ScriptDirectory.from_config(config).get_current_head()
    newest = int(head or 0)
    if version > newest:
        raise NewerLibrary(str(path), version, newest)
    if version == newest:
        return None
    backup: Path | None = None
    engine = open_engine(path, write=True)
    try:
        with engine.connect() as connection:
            # outside a transaction, where SQLite heeds it: tables may be rebuilt
            connection.connection.execute("PRAGMA foreign_keys=OFF")
            # the write lock is taken first: nobody records between the backup and the migration
            with connection.begin():
                backup = _back_up(path, version)
                config.attributes["connection"] = connection
                command.upgrade(config, "head")
                broken = connection.exec_driver_sql("PRAGMA foreign_key_check").fetchall()
                if broken:
                    raise NotALibrary(str(path), f"the upgrade left {len(broken)} dangling references")
                stamp_version(connection, newest)
    except OperationalError as error:
        if "locked" in str(error.orig):
            raise LibraryBusy(str(path)) from error
        raise
    except BaseException:
        if backup is not None:
            backup.unlink()
        raise
    finally:
        engine.dispose()
    return backup


def _back_up(path: Path, version: int) -> Path:
    target = path.with_name(f"{path.name}.schema-{version}.backup")
    number = 1
    while target.exists():
        number += 1
        target = path.with_name(f"{path.name}.schema-{version}.backup-{number}")
    with closing(_connect_plainly(path)) as source, closing(sqlite3.connect(target)) as sink:
        source.backup(sink)
    return target
