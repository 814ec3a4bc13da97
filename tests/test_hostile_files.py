"""Files that look like a library and are none, or hold what could harm: a message and exit code 5, the file as it was.

Each file is opened by a process of its own, which is given 20 seconds and 2 GB.
"""

from __future__ import annotations

import os
import random
import re
import shutil
import socket
import sqlite3
from contextlib import closing, suppress
from pathlib import Path

import pytest
from forking import start_forking
from integrity import find_faults

from registry.errors import LibraryUnreadable, NotALibrary, Refused, UnknownKey
from registry.opening import open_library, start_library
from registry.store import marks
from registry.store.engine import open_engine
from registry.store.recognition import connect_plainly
from registry.store.shapes import SHAPES
from registry.store.tables import APPLICATION_ID, SCHEMA

SECONDS, MEMORY = 20, 2 * 2**30
ENDLESS = "WITH RECURSIVE n(i) AS (SELECT 1 UNION ALL SELECT i + 1 FROM n) SELECT"
COLUMNS = "i AS id, i AS change, i AS place, 'a' AS kind, 'b' AS key, i AS revision, '{}' AS content, '' AS digest"
HEADERS = (
    "i AS number, 'a' AS author, 'b' AS reason, 'c' AS recorded_at, i AS records, '' AS records_root, '' AS header"
)


def _rewrite(old: str, new: str, name: str) -> tuple[str, ...]:
    """Other SQL for an object of the schema, past SQLite's own checks."""
    quoted = new.replace("'", "''")
    return (
        "PRAGMA writable_schema=ON",
        f"UPDATE sqlite_master SET sql = replace(sql, '{old}', '{quoted}') WHERE name = '{name}'",
        "PRAGMA writable_schema=RESET",
    )


# what is done to a library, and what the message says of it
SCHEMAS = {
    "record is an endless view": (
        ("DROP TABLE record", f"CREATE VIEW record AS {ENDLESS} {COLUMNS} FROM n"), "the view 'record' is not as"),
    "change is an endless view": (
        ("DROP TABLE change", f"CREATE VIEW change AS {ENDLESS} {HEADERS} FROM n"), "the view 'change' is not as"),
    "a view beside the tables": (("CREATE VIEW extra AS SELECT * FROM record",), "the view 'extra'"),
    "a trigger that deletes": (
        ("CREATE TRIGGER quiet AFTER INSERT ON record BEGIN DELETE FROM term; END",), "the trigger 'quiet'"),
    "a trigger that records": (
        ("CREATE TRIGGER loud AFTER INSERT ON change BEGIN INSERT INTO node VALUES (9, 9, NEW.reason); END",),
        "the trigger 'loud'"),
    "a trigger of ours that does nothing": (
        ("DROP TRIGGER record_no_update",
         "CREATE TRIGGER record_no_update BEFORE UPDATE ON record BEGIN SELECT 1; END"),
        "the trigger 'record_no_update' is not as rangebook makes it"),
    "a trigger of ours on another table": (
        ("DROP TRIGGER record_no_update",
         "CREATE TRIGGER record_no_update BEFORE UPDATE ON node BEGIN "
         "SELECT RAISE(ABORT, 'history is only appended to: record'); END"),
        "the trigger 'record_no_update' is not as rangebook makes it"),
    "a table beside the tables": (("CREATE TABLE extra (a TEXT)",), "the table 'extra'"),
    "a table with a name that colours the screen": (
        ('CREATE TABLE "\x1b[31mred\x07" (a TEXT)',), r"the table '\x1b[31mred\x07'"),
    "a table with a name of 5000 letters": ((f"CREATE TABLE {'x' * 5000} (a TEXT)",), "... (5000 characters)"),
    "a virtual table": (("CREATE VIRTUAL TABLE term2 USING fts5(text)",), "the table 'term2'"),
    "a generated column": (
        ("ALTER TABLE record ADD COLUMN slow TEXT AS (hex(zeroblob(1000000000))) VIRTUAL",),
        "the table 'record' is not as rangebook makes it"),
    "a generated column in place of one": (
        _rewrite("content TEXT NOT NULL", "content TEXT AS (hex(zeroblob(1000000000))) VIRTUAL", "record"),
        "the table 'record' is not as rangebook makes it"),
    "a check that is slow": (
        _rewrite("CHECK (revision >= 1)", "CHECK (length(hex(zeroblob(500000000))) > revision)", "record"),
        "the table 'record' is not as rangebook makes it"),
    "a column more": (
        ("ALTER TABLE node ADD COLUMN extra TEXT DEFAULT 'x'",), "the table 'node' is not as rangebook makes it"),
    "an index on an expression": (
        ("CREATE INDEX odd ON record (length(content))",), "the index 'odd'"),
    "a partial index under a name of ours": (
        ("DROP INDEX ix_record_kind_key_change_revision",
         "CREATE INDEX ix_record_kind_key_change_revision ON record (kind, key, change, revision) WHERE id < 9"),
        "the index 'ix_record_kind_key_change_revision' is not as rangebook makes it"),
    "tables without STRICT": (_rewrite("STRICT", "", "record"), "the table 'record' is not as rangebook makes it"),
    "a view that calls itself statistics": (
        ("PRAGMA writable_schema=ON",
         "INSERT INTO sqlite_master VALUES ('view', 'sqlite_stat1', 'sqlite_stat1', 0, "
         "'CREATE VIEW sqlite_stat1 AS SELECT 1')"),
        "'sqlite_stat1'"),
    "a schema that is no SQL": (_rewrite("CREATE TABLE", "CREATE RUBBISH", "term"), "SQLite says"),
    "a schema of two million letters": (
        _rewrite("STRICT", f"STRICT/*{'x' * 2_000_000}*/", "term"), "SQLite says"),
    "another program's number": (("PRAGMA application_id=7",), "it is another program's database"),
    "text in a cell for integers": (
        (*_rewrite("place INTEGER", "place TEXT", "record"), *_rewrite("STRICT", "", "record"), "@reopen",
         "DROP TRIGGER record_no_update", "UPDATE record SET place = 'one' WHERE id = 7",
         *_rewrite("place TEXT", "place INTEGER", "record"),
         "PRAGMA writable_schema=ON",
         "UPDATE sqlite_master SET sql = rtrim(sql) || ' STRICT' WHERE name = 'record'"),
        "SQLite says non-INTEGER value in record.place"),
    "NULL where a value must be": (
        (*_rewrite("content TEXT NOT NULL", "content TEXT", "record"), "@reopen", "DROP TRIGGER record_no_update",
         "UPDATE record SET content = NULL WHERE id = 7", *_rewrite("content TEXT", "content TEXT NOT NULL", "record")),
        "SQLite says NULL value in record.content"),
}  # fmt: skip


def _spoil(path: Path, *statements: str) -> None:
    db = sqlite3.connect(path, isolation_level=None)
    for statement in statements:
        if statement == "@reopen":
            db.close()
            db = sqlite3.connect(path, isolation_level=None)
        else:
            db.execute(statement)
    db.close()


@pytest.fixture(scope="module")
def ask():
    """Exit code, output and messages of a process that looks something up, within bounds of time and memory."""
    with start_forking() as forking:
        yield lambda path: forking.run("lookup", "water", "25C", "--library", str(path), seconds=SECONDS, size=MEMORY)


def _check_refused(ask, path: Path, why: str) -> None:
    before = path.read_bytes()
    names = sorted(entry.name for entry in path.parent.iterdir())
    code, out, err = ask(path)
    assert (code, out) == (5, "")
    assert err.startswith(f"{path} cannot be read as a library: ")
    assert err.endswith(" Nothing was changed.\n")
    assert why in err
    assert err[:-1].isprintable()
    assert len(err) < 600
    assert path.read_bytes() == before
    assert sorted(entry.name for entry in path.parent.iterdir()) == names


@pytest.mark.parametrize(("statements", "why"), SCHEMAS.values(), ids=SCHEMAS)
def test_what_rangebook_did_not_make_is_refused(ask, statements, why, own_path):
    """A schema that is not the program's own, or rows that break it: exit code 5, the object named, nothing changed."""
    _spoil(own_path, *statements)
    _check_refused(ask, own_path, why)


def test_what_was_lost_from_the_schema_is_no_reason_to_refuse(ask, own_path):
    """Without a trigger or an index the library still answers; so it does with what ANALYZE leaves."""
    _spoil(own_path, "DROP TRIGGER record_no_update", "DROP INDEX ix_change_recorded_at", "ANALYZE")
    assert ask(own_path)[0] == 0


def _make_fifo(path: Path) -> None:
    os.mkfifo(path)


def _make_socket(path: Path) -> None:
    with closing(socket.socket(socket.AF_UNIX)) as server:
        server.bind(str(path))


def _make_loop(path: Path) -> None:
    other = path.with_name("other")
    path.symlink_to(other.name)
    other.symlink_to(path.name)


def _make_device(path: Path) -> None:
    path.symlink_to("/dev/zero")


PLACES = {
    "a folder": (Path.mkdir, "it is a folder"),
    "a pipe": (_make_fifo, "it is no file but a pipe, socket or device"),
    "a socket": (_make_socket, "it is no file but a pipe, socket or device"),
    "a device": (_make_device, "it is no file but a pipe, socket or device"),
    "a link to itself": (_make_loop, "Too many levels of symbolic links"),
    "an empty file": (Path.touch, "it is empty"),
    "a page of zeros": (lambda path: path.write_bytes(bytes(4096)), "it is no SQLite file"),
    "a header alone": (lambda path: path.write_bytes(b"SQLite format 3\0"), "it is no SQLite file"),
}


@pytest.mark.parametrize(("make", "why"), PLACES.values(), ids=PLACES)
def test_what_is_no_file_with_a_library_is_refused(ask, make, why, tmp_path, monkeypatch):
    """A folder, pipe, socket, device or loop at the place of the library is told at once and left as it is."""
    with monkeypatch.context() as patch:
        patch.chdir(tmp_path)  # the name of a socket is short
        make(Path("place.db"))
    code, out, err = ask(tmp_path / "place.db")
    assert (code, out, err) == (
        5, "", f"{tmp_path / 'place.db'} cannot be read as a library: {why}. Nothing was changed.\n"
    )  # fmt: skip


def _patch(path: Path, offset: int, data: bytes) -> None:
    with path.open("r+b") as file:
        file.seek(offset)
        file.write(data)


BYTES = {
    # sqlite.org, "Database File Format", 1.3: the header of 100 bytes
    "a page count of four thousand million": (lambda path: _patch(path, 28, b"\xff\xff\xff\xfe"), "SQLite says"),
    "a page size of one": (lambda path: _patch(path, 16, b"\x00\x03"), "it is no SQLite file"),
    "a newer file format": (lambda path: _patch(path, 18, b"\x09\x09"), "it is no SQLite file"),
    "text in UTF-16": (lambda path: _patch(path, 56, b"\x00\x00\x00\x02"), "SQLite says"),
    "a list of free pages that is none": (lambda path: _patch(path, 32, b"\x00\x00\x00\x05\x00\x00\x00\x07"), "says"),
    "half of it": (lambda path: os.truncate(path, path.stat().st_size // 8192 * 4096), "SQLite says"),
    "its first page": (lambda path: os.truncate(path, 4096), "SQLite says"),
    "a schema that runs in a circle": (lambda path: _patch(path, 100, b"\x05\x00\x00\x00\x01\x00\xff"), "SQLite says"),
    "no tables under our number": (lambda path: _make_bare(path), "it is another program's database"),
}


def _make_bare(path: Path) -> None:
    path.unlink()
    _spoil(path, f"PRAGMA application_id={APPLICATION_ID}", f"PRAGMA user_version={SCHEMA}")


@pytest.mark.parametrize(("spoil", "why"), BYTES.values(), ids=BYTES)
def test_bytes_that_are_no_library_are_refused(ask, spoil, why, own_path):
    """A damaged header, a cut file, pages in a circle: exit code 5 in bounded time and memory, nothing changed."""
    spoil(own_path)
    _check_refused(ask, own_path, why)


def test_flipped_bytes_end_in_a_message_or_in_the_same_answer(own_path):
    """A hundred times 20 random bytes flipped anywhere: refused, or every record that answers is as it was recorded."""
    whole = own_path.read_bytes()
    with open_library(own_path) as library:
        expected = library.lookup("water", 300.0)
    drawn = random.Random(19)
    refused = 0
    for _ in range(100):
        spoiled = bytearray(whole)
        for _ in range(20):
            spoiled[drawn.randrange(len(spoiled))] ^= 1 << drawn.randrange(8)
        own_path.write_bytes(spoiled)
        shutil.rmtree(marks.find_state_folder(), ignore_errors=True)
        try:
            with open_library(own_path) as library:
                answer = library.lookup("water", 300.0)
                assert answer.correlation.key != expected.correlation.key or answer.value == expected.value
                library.coverage("ethanol")
        except (LibraryUnreadable, Refused, UnknownKey):
            refused += 1
        assert own_path.read_bytes() == bytes(spoiled)
    assert refused > 20
    own_path.write_bytes(whole)


def test_an_enormous_cell_is_refused_before_it_is_read(ask, own_path):
    """A content of 300 MB, with pages in order, ends in a message, not in 300 MB of memory and a digest over them."""
    big = 300 * 2**20
    _spoil(
        own_path,
        "DROP TRIGGER record_no_update",
        f"UPDATE record SET content = CAST(zeroblob({big}) AS TEXT) WHERE kind = 'compound' AND key = 'water'",
    )
    names = sorted(entry.name for entry in own_path.parent.iterdir())
    code, out, err = ask(own_path)
    assert (code, out) == (5, "")
    assert "SQLite says string or blob too big" in err
    assert sorted(entry.name for entry in own_path.parent.iterdir()) == names
    own_path.unlink()


def test_a_library_in_write_ahead_mode_answers(ask, own_path):
    """A library that a newer SQLite has put into WAL mode is read; nothing stays beside it."""
    _spoil(own_path, "PRAGMA journal_mode=WAL")
    assert ask(own_path)[0] == 0
    assert [entry.name for entry in own_path.parent.iterdir()] == ["own.db"]
    assert find_faults(own_path) == []


def test_another_database_in_write_ahead_mode_is_refused(ask, tmp_path):
    """Another program's WAL database is refused, and stays as it is."""
    path = tmp_path / "other.db"
    _spoil(path, "PRAGMA journal_mode=WAL", "CREATE TABLE change (number INTEGER)")
    before = path.read_bytes()
    code, out, err = ask(path)
    assert (code, out) == (5, "")
    assert "it is another program's database" in err
    assert path.read_bytes() == before
    # what reading such a file takes; whoever owns it clears it away
    assert {entry.name for entry in tmp_path.iterdir()} <= {"other.db", "other.db-shm", "other.db-wal"}


def test_a_newer_library_is_refused_whatever_it_holds(ask, own_path):
    """What a newer program made is not looked into."""
    _spoil(own_path, f"PRAGMA user_version={SCHEMA + 1}", "CREATE TABLE newer (a TEXT)")
    code, out, err = ask(own_path)
    assert (code, out) == (5, "")
    assert err.endswith("Install a newer rangebook; nothing was changed.\n")


def test_no_connection_loads_an_extension(own_path):
    """Neither the first look nor a reader nor a writer lets SQL load a library."""
    for connection in (connect_plainly(own_path), _driver(own_path, write=False), _driver(own_path, write=True)):
        with closing(connection), pytest.raises(sqlite3.OperationalError, match="not authorized"):
            connection.execute("SELECT load_extension('/nowhere/at/all')")
        with suppress(sqlite3.ProgrammingError):
            connection.close()


def test_no_connection_trusts_a_schema(own_path):
    """trusted_schema is off, cell_size_check on, and nothing can be attached, on each kind of connection."""
    for connection in (connect_plainly(own_path), _driver(own_path, write=False), _driver(own_path, write=True)):
        with closing(connection):
            assert connection.execute("PRAGMA trusted_schema").fetchone() == (0,)
            assert connection.execute("PRAGMA cell_size_check").fetchone() == (1,)
            with pytest.raises(sqlite3.OperationalError, match="too many attached databases"):
                connection.execute("ATTACH ':memory:' AS other")


def _driver(path: Path, *, write: bool) -> sqlite3.Connection:
    return open_engine(path, write=write).raw_connection().driver_connection


def _damage_a_page(path: Path) -> None:
    """A page that a lookup of water does not read: one of the tree over the changes."""
    with closing(sqlite3.connect(path)) as db:
        (page,) = db.execute("SELECT rootpage FROM sqlite_master WHERE name = 'ix_change_recorded_at'").fetchone()
    _patch(path, (page - 1) * 4096 + 3, b"\x00\x77")


def test_the_pages_of_a_file_are_checked_when_it_is_first_seen(published_path, tmp_path):
    """A copy with a damaged page is refused; a library seen before is not checked again, another at its place is."""
    path = Path(shutil.copy(published_path, tmp_path / "copy.db"))
    open_library(path).close()
    mark = marks.find_mark(path, path.stat())
    assert mark.exists()
    _damage_a_page(path)
    open_library(path).close()
    moved = path.rename(tmp_path / "moved.db")
    with pytest.raises(NotALibrary, match="SQLite says"):
        open_library(moved)
    shutil.copy(moved, tmp_path / "other.db").rename(path)
    with pytest.raises(NotALibrary, match="SQLite says"):
        open_library(path)


def test_a_new_library_counts_as_seen(tmp_path):
    """What the program has just made is marked at once; what it refused is not."""
    path = tmp_path / "new.db"
    start_library(path, "none").close()
    assert marks.find_mark(path, path.stat()).exists()
    other = tmp_path / "other.db"
    _spoil(other, "CREATE TABLE change (number INTEGER)")
    with pytest.raises(NotALibrary):
        open_library(other)
    assert not marks.find_mark(other, other.stat()).exists()


@pytest.mark.parametrize("state", ["", "relative", "{folder}/file/below"])
def test_a_state_folder_that_cannot_be_written_changes_nothing(state, own_path, tmp_path, monkeypatch):
    """Without a place for marks a library opens all the same, and is checked every time."""
    (tmp_path / "file").touch()
    monkeypatch.chdir(tmp_path)
    monkeypatch.setenv("XDG_STATE_HOME", state.replace("{folder}", str(tmp_path)))
    monkeypatch.setenv("HOME", str(tmp_path / "file"))
    names = sorted(entry.name for entry in tmp_path.iterdir())
    for _ in range(2):
        open_library(own_path).close()
    assert sorted(entry.name for entry in tmp_path.iterdir()) == names
    _damage_a_page(own_path)
    with pytest.raises(NotALibrary, match="SQLite says"):
        open_library(own_path)


def test_the_state_folder_is_that_of_the_system(monkeypatch):
    """The same folder that platformdirs names, with and without the variable that moves it."""
    import platformdirs

    for value in (None, "/somewhere/else"):
        if value is not None:
            monkeypatch.setenv("XDG_STATE_HOME", value)
        assert str(marks.find_state_folder()) == platformdirs.user_state_dir("rangebook", appauthor=False)


def test_every_schema_has_a_shape():
    """Each schema that a program of this kind ever wrote can be told from what it did not write."""
    assert sorted(SHAPES) == list(range(1, SCHEMA + 1))
    assert all(re.fullmatch("[0-9a-f]{16}", digest) for shape in SHAPES.values() for digest in shape.values())
