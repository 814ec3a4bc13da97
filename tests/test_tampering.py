"""Whatever is changed behind the program's back is found, at the row that was changed."""

from __future__ import annotations

import dataclasses
import json
import random
import re
import shutil
import sqlite3
from collections import Counter
from collections.abc import Callable, Iterator
from contextlib import closing
from hashlib import sha256
from pathlib import Path
from typing import Any, NamedTuple

import pytest
from histories import tell_history

from registry.cli.app import main
from registry.errors import BadInput
from registry.findings import Finding, Verification
from registry.merkle import hash_leaf
from registry.opening import open_library, start_library
from registry.store.history import Draft
from registry.store.library_file import LibraryFile
from registry.verification import verify

TABLES = {
    "library": ("id",), "change": ("number",), "node": ("level", "place"), "record": ("id",),
    "link": ("kind", "key", "role", "to_kind", "to_key"), "term": ("text", "kind", "key"), "standing": ("id",),
}  # fmt: skip
CASES = 1000
NOW = "2030-01-01T00:00:00.000000Z"


@pytest.fixture(scope="module")
def libraries(tmp_path_factory) -> list[Path]:
    """A library with every kind of change, and one with a single one."""
    folder = tmp_path_factory.mktemp("untouched")
    tell_history(folder / "told.db").close()
    start_library(folder / "started.db", "none").close()
    return [folder / "told.db", folder / "started.db"]


def _verify(path: Path, against: str | None = None) -> Verification:
    return verify(LibraryFile(path), against)


class Loosened:
    """A library whose tables take any value, until it is put back as it was made."""

    def __init__(self, path: Path) -> None:
        self.path = path
        with closing(sqlite3.connect(path, isolation_level=None)) as db:
            self._made = db.execute("SELECT rowid, type, sql FROM sqlite_master").fetchall()
            self._triggers = [sql for _, kind, sql in self._made if kind == "trigger"]
            for (name,) in db.execute("SELECT name FROM sqlite_master WHERE type = 'trigger'").fetchall():
                db.execute(f"DROP TRIGGER {name}")
            self._tables = db.execute("SELECT name, sql FROM sqlite_master WHERE type = 'table'").fetchall()
            db.execute("PRAGMA writable_schema=ON")
            for name, sql in self._tables:
                loose = re.sub(r" STRICT| NOT NULL", "", sql)
                db.execute("UPDATE sqlite_master SET sql = ? WHERE type = 'table' AND name = ?", (loose, name))

    def change(self, place: Path, tamper: Callable[[sqlite3.Connection], Any], keep_triggers: bool) -> Any:
        """A copy with one thing changed and everything else as it was made."""
        shutil.copyfile(self.path, place)
        with closing(sqlite3.connect(place, isolation_level=None)) as db:
            db.execute("PRAGMA synchronous=OFF")
            db.execute("PRAGMA foreign_keys=OFF")
            db.execute("PRAGMA ignore_check_constraints=ON")
            db.execute("BEGIN")
            told = tamper(db)
            if keep_triggers:
                for sql in self._triggers:
                    db.execute(sql)
            db.execute("PRAGMA writable_schema=ON")
            for name, sql in self._tables:
                db.execute("UPDATE sqlite_master SET sql = ? WHERE type = 'table' AND name = ?", (sql, name))
            db.execute("COMMIT")
        return told


class Tampered(NamedTuple):
    """What was done: each row as it was and as it is, None where there is none."""

    how: str
    table: str
    rows: list[tuple[dict[str, Any] | None, dict[str, Any] | None]]


def _read(db: sqlite3.Connection, table: str, where: str = "1", *values: Any) -> list[dict[str, Any]]:
    cursor = db.execute(f"SELECT rowid AS row_, * FROM {table} WHERE {where} ORDER BY rowid", values)
    names = [column[0] for column in cursor.description]
    return [dict(zip(names, row, strict=True)) for row in cursor]


def _tamper(db: sqlite3.Connection, chance: random.Random) -> Tampered:
    """One thing changed in one table; drawn again until something is another."""
    db.text_factory = lambda raw: raw.decode("utf-8", "surrogateescape")
    while True:
        table = chance.choice(list(TABLES))
        how = chance.choice(["cell"] * 14 + ["delete", "delete", "swap", "append"])
        if not _read(db, table):
            continue
        db.execute("SAVEPOINT one")
        try:
            found = list(_ACTIONS[how](db, chance, table))
        except (sqlite3.IntegrityError, OverflowError):
            found = []
        if any(before != after for before, after in found):
            return Tampered(how, table, [pair for pair in found if pair[0] != pair[1]])
        db.execute("ROLLBACK TO one")


def _change_cell(db: sqlite3.Connection, chance: random.Random, table: str) -> Iterator[Any]:
    rows = _read(db, table)
    before = chance.choice(rows)
    column = chance.choice([name for name in before if name != "row_"])
    value = _draw_value(chance, before[column], [row[column] for row in rows])
    number = before["row_"]
    db.execute(f"UPDATE {table} SET {column} = ? WHERE rowid = ?", (value, number))
    after = _read(db, table, "rowid = ?", number)
    # the number of a row may be what was changed
    yield before, after[0] if after else _read(db, table, f"{column} = ?", value)[0]


def _draw_value(chance: random.Random, value: Any, others: list[Any]) -> Any:
    text = "" if value is None else str(value)
    at = chance.randrange(len(text)) if text else 0
    flipped = text[:at] + chr(ord(text[at]) ^ 1 << chance.randrange(5)) + text[at + 1 :] if text else "x"
    number = value if isinstance(value, int) else 0
    return chance.choice([
        "another text", flipped, None, "", chance.randrange(-3, 2**40), chance.choice(others), text.upper(),
        number + chance.choice((-1, 1, 7)), 0.5, text.encode(), text.encode()[:at] + b"\xff", text + " ", text[:at],
    ])  # fmt: skip


def _delete(db: sqlite3.Connection, chance: random.Random, table: str) -> Iterator[Any]:
    before = chance.choice(_read(db, table))
    db.execute(f"DELETE FROM {table} WHERE rowid = ?", (before["row_"],))
    yield before, None


def _swap(db: sqlite3.Connection, chance: random.Random, table: str) -> Iterator[Any]:
    """Two rows change places: each gets what the other says beside its key."""
    rows = _read(db, table)
    if len(rows) < 2:
        return
    pair = chance.sample(rows, 2)
    for row in pair:
        db.execute(f"DELETE FROM {table} WHERE rowid = ?", (row["row_"],))
    for row, other in (pair, pair[::-1]):
        _insert(db, table, swapped := {**other, **{name: row[name] for name in (*TABLES[table], "row_")}})
        yield row, swapped


def _append(db: sqlite3.Connection, chance: random.Random, table: str) -> Iterator[Any]:
    """A copy of a row under the next key."""
    rows = _read(db, table)
    row = dict(chance.choice(rows))
    row["row_"] = max(row["row_"] for row in rows) + 1
    if table in ("library", "change", "record", "standing"):
        row[TABLES[table][0]] = row["row_"]
    if table == "record":
        row["place"] = 1 + max(r["place"] for r in rows if r["change"] == row["change"])
        row["revision"] = 1 + max(r["revision"] for r in rows if (r["kind"], r["key"]) == (row["kind"], row["key"]))
    if table == "node":
        row["place"] = 1 + max(r["place"] for r in rows if r["level"] == row["level"])
    if table in ("link", "term"):
        row["key"] = chance.choice([r["key"] for r in rows])
    _insert(db, table, row)
    yield None, row


def _insert(db: sqlite3.Connection, table: str, row: dict[str, Any]) -> None:
    names = ", ".join(row).replace("row_", "rowid")
    db.execute(f"INSERT INTO {table} ({names}) VALUES ({', '.join('?' * len(row))})", tuple(row.values()))


_ACTIONS = {"cell": _change_cell, "delete": _delete, "swap": _swap, "append": _append}


def _points_at(finding: Finding, table: str, row: dict[str, Any]) -> bool:
    """Whether a finding is about a row, as it was or as it is."""
    if finding.table != table:
        return False
    if table == "library":
        return True
    if table == "change":
        return finding.change == row["number"]
    if table == "node":
        return finding.key == f"{_text(row['level'])}/{_text(row['place'])}"
    named = (finding.kind, finding.key) == (_text(row["kind"]), _text(row["key"]))
    if table == "record":
        placed = (finding.change, finding.place) == (row["change"], row["place"])
        return placed or (named and finding.revision == row["revision"])
    return named


def _text(value: Any) -> str:
    return "" if value is None else str(value).encode("utf-8", "backslashreplace").decode()


def _is_pointed_at(found: Verification, tampered: Tampered) -> bool:
    return all(
        any(_points_at(finding, tampered.table, row) for finding in found.findings for row in pair if row is not None)
        for pair in tampered.rows
    )


def test_the_untouched_library_holds(libraries):
    """Before anything is changed nothing is found, with every kind of change in the history."""
    found = _verify(libraries[0])
    assert (found.holds, found.findings, found.notes) == (True, (), ())
    assert (found.changes, found.editions) == (12, 3)
    assert _verify(libraries[1]).holds


def test_every_change_behind_the_back_is_found_where_it_was_made(libraries, tmp_path):
    """1,000 random cells changed, rows deleted, swapped or appended: each is reported at its row, none is an error."""
    chance = random.Random(20261201)
    loose = [Loosened(Path(shutil.copy(path, tmp_path / path.name))) for path in libraries]
    place = tmp_path / "tampered.db"
    missed: list[Any] = []
    done: Counter[tuple[str, str]] = Counter()
    for _ in range(CASES):
        library = loose[chance.random() < 0.1]
        tampered = library.change(place, lambda db: _tamper(db, chance), keep_triggers=chance.random() < 0.9)
        found = _verify(place)
        if found.holds or not _is_pointed_at(found, tampered):
            missed.append((tampered, found.findings))
        done[tampered.how, tampered.table] += 1
    assert missed == []
    assert {how for how, _ in done} == set(_ACTIONS)
    assert {table for _, table in done} == set(TABLES)


ODD = [
    Draft("nonsense", "a", {"b": "c"}),
    Draft("edition", "e", ["no object"]),
    Draft("edition", "e", {"name": "e", "position": "7", "root": 5}),
    Draft("edition", "e", {"name": "e", "position": "12", "root": "12:" + "0" * 64}),
    Draft("library", "library", "text"),
    Draft("correlation", "k", {"compound": ["water"]}),
    Draft("correlation", "k", {"compound": 5, "source": {"a": "b"}}),
    Draft("correlation", "k", {"compound": "no-such-compound"}),
    Draft("compound", "k", {"name": 5, "formula": "H2O"}),
    Draft("review", "r", {"of_kind": ["a"], "of_key": "b", "of_revision": "1"}),
    Draft("review", "r", {"of_kind": "source", "of_key": "b", "of_revision": "9" * 40, "standing": "accepted"}),
    Draft("review", "r", {"of_kind": "library", "of_key": "library", "of_revision": "1", "standing": ["accepted"]}),
    Draft("review", "r", {"of_kind": "library", "of_key": "library", "of_revision": "x"}),
    Draft("withdrawal", "w", {"of_kind": "source", "of_key": "no-such-source", "of_revision": "1"}),
    Draft("withdrawal", "w", {}),
]


@pytest.mark.parametrize("draft", ODD, ids=lambda draft: f"{draft.kind}-{draft.content}"[:50])
def test_what_no_record_can_say_is_a_finding(draft, libraries, tmp_path):
    """Content that no version of the program records, with every digest and root right, is found and raises nothing."""
    path = Path(shutil.copy(libraries[0], tmp_path / "odd.db"))
    with open_library(path) as library, library._file.writing() as (_, append):
        append("somebody", "odd", NOW, [draft])
    found = _verify(path)
    assert not found.holds
    assert {(f.table, f.change, f.kind, f.key) for f in found.findings if f.table == "record"} == {
        ("record", 13, draft.kind, draft.key)
    }  # fmt: skip
    assert all(len(finding.what) < 250 for finding in found.findings)


def test_an_edition_with_another_root_is_a_finding(libraries, tmp_path):
    """An edition says the root and the position that the history had before it."""
    path = Path(shutil.copy(libraries[0], tmp_path / "edition.db"))
    wrong = Draft("edition", "e", {"name": "e", "position": "7", "root": "12:" + "0" * 64})
    with open_library(path) as library, library._file.writing() as (_, append):
        append("somebody", "frozen by hand", NOW, [wrong])
    told = [finding.what for finding in _verify(path).findings]
    assert len(told) == 4
    assert told[0] == "it names position '7', and was frozen at 12"
    assert told[1].startswith("its root is '12:000")
    assert told[2] == "its history does not begin with that of the edition 'after'"
    assert told[3] == "the library's history does not begin with its own"


def test_a_time_before_the_one_before_is_a_finding(libraries, tmp_path):
    """A last change set back in time, with its header and its leaf right, is named."""
    path = Path(shutil.copy(libraries[0], tmp_path / "early.db"))
    with open_library(path) as library, library._file.writing() as (_, append):
        change = append("somebody", "late", NOW, [Draft("source", "s", {"citation": "invented"})])
    assert _verify(path).holds
    header = dataclasses.replace(change, recorded_at="1999-01-01T00:00:00.000000Z").header()
    with closing(sqlite3.connect(path)) as db:
        db.execute("DROP TRIGGER change_no_update")
        db.execute("DROP TRIGGER node_no_update")
        early = ("1999-01-01T00:00:00.000000Z", header.decode())
        db.execute("UPDATE change SET recorded_at = ?, header = ? WHERE number = 13", early)
        db.execute("UPDATE node SET hash = ? WHERE level = 0 AND place = 12", (hash_leaf(header).hex(),))
        db.commit()
    (finding,) = (finding for finding in _verify(path).findings if finding.table != "schema")
    assert (finding.table, finding.change) == ("change", 13)
    assert "before the change before it" in finding.what


def test_a_history_rewritten_whole_is_found_by_a_noted_root_only(libraries, tmp_path):
    """A library told anew with one early record altered holds by itself, and does not extend the noted roots."""
    with open_library(libraries[0]) as library:
        noted = library.verify().root
        editions = [edition.root for edition, _ in library.editions()]
        assert all(library.verify(against=root).holds for root in (noted, *editions))
    with tell_history(tmp_path / "other.db", first_note="Another first note.") as other:
        assert other.verify().holds
        for root in (noted, *editions):
            found = other.verify(against=root)
            assert not found.holds
            (finding,) = found.findings
            assert finding.table == "history"
            assert f"does not extend the history with root {root[:14]}" in finding.what


def test_a_longer_history_extends_a_noted_root_and_a_shorter_one_does_not(libraries, tmp_path):
    """Recording goes on: the root noted before still proves it. A library cut back to an earlier state is found."""
    path = Path(shutil.copy(libraries[0], tmp_path / "longer.db"))
    with open_library(path) as library:
        before = library.verify().root
        library.freeze("later", author="steward", note="One change more.")
        after = library.verify(against=before)
        assert (after.holds, after.changes) == (True, 13)
    with open_library(libraries[0]) as library:
        (finding,) = library.verify(against=after.root).findings
        assert finding.what.endswith("it has 12 changes")


@pytest.mark.parametrize("against", ["12", "12:abc", "x:" + "0" * 64, "-1:" + "0" * 64, "1:" + "g" * 64, " ", ""])
def test_what_is_no_root_is_refused(against, libraries):
    """A malformed root is bad input, not a finding."""
    with open_library(libraries[0]) as library, pytest.raises(BadInput, match="no root of a history"):
        library.verify(against=against)


STATEMENTS = {
    "DROP TRIGGER record_no_update": "trigger record_no_update",
    "DROP INDEX ix_change_recorded_at": "index ix_change_recorded_at",
    "DROP TABLE term": "table term",
    "DROP TABLE alembic_version": "table alembic_version",
    "CREATE TABLE more (a)": "table more",
    "CREATE VIEW some AS SELECT 1": "view some",
    "CREATE TRIGGER t AFTER INSERT ON change BEGIN SELECT 1; END": "trigger t",
}


@pytest.mark.parametrize("statement", STATEMENTS)
def test_an_altered_schema_is_found(statement, libraries, tmp_path):
    """A trigger, index or table that is missing or does not belong is named."""
    path = Path(shutil.copy(libraries[0], tmp_path / "altered.db"))
    with closing(sqlite3.connect(path)) as db:
        db.execute(statement)
        db.commit()
    found = _verify(path)
    assert STATEMENTS[statement] in {finding.key for finding in found.findings if finding.table == "schema"}


def test_a_trigger_that_does_nothing_is_found(libraries, tmp_path):
    """A trigger of the right name that forbids nothing is not as rangebook makes it."""
    path = Path(shutil.copy(libraries[0], tmp_path / "altered.db"))
    with closing(sqlite3.connect(path)) as db:
        db.execute("DROP TRIGGER record_no_update")
        db.execute("CREATE TRIGGER record_no_update BEFORE UPDATE ON record BEGIN SELECT 1; END")
        db.commit()
    (finding,) = _verify(path).findings
    assert (finding.table, finding.key) == ("schema", "trigger record_no_update")


def test_damaged_pages_are_findings(libraries, tmp_path):
    """Bytes overwritten anywhere behind the first page end in findings or in a file that cannot be read."""
    chance = random.Random(7)
    whole = libraries[0].read_bytes()
    path = tmp_path / "damaged.db"
    for _ in range(40):
        at = chance.randrange(4096, len(whole) - 64)
        path.write_bytes(whole[:at] + chance.randbytes(64) + whole[at + 64 :])
        found = _verify(path)
        unused = found.holds and _same_rows(path, libraries[0])
        assert not found.holds or unused


def _same_rows(path: Path, other: Path) -> bool:
    with closing(sqlite3.connect(path)) as one, closing(sqlite3.connect(other)) as two:
        return list(one.iterdump()) == list(two.iterdump())


def test_a_library_without_the_record_of_itself_is_noted(libraries, tmp_path):
    """An older library does not say which one it is: that is a note, and no finding."""
    path = tmp_path / "older.db"
    with open_library(libraries[0]) as library:
        with library._file.reading() as view:
            name, started_at = view.identity()
    LibraryFile.create(path, name, started_at, lambda file: None)
    found = _verify(path)
    # and one from which everything was taken is none that holds
    assert [str(finding) for finding in found.findings] == ["change: there is none, and every library begins with one"]
    assert (found.holds, found.changes, len(found.notes)) == (False, 0, 1)
    assert found.root == "0:" + sha256().hexdigest()


def test_progress_counts_up_to_all(libraries):
    """Progress is told from the first records to the last."""
    told: list[tuple[int, int]] = []
    with open_library(libraries[0]) as library:
        found = library.verify(progress=lambda done, total: told.append((done, total)))
    assert told == sorted(told)
    assert told[-1] == (found.records, found.records)
    assert len(told) > 5


def test_the_command_says_whether_it_holds(libraries, tmp_path, capsys):
    """`verify` ends with 0 and the root, or with 1 and each finding; JSON has what was promised."""
    path = Path(shutil.copy(libraries[0], tmp_path / "own.db"))
    code, out, err = _run(capsys, "verify", "--library", str(path))
    assert (code, err) == (0, "")
    assert out.startswith("holds\n")
    assert "only a root noted elsewhere" in " ".join(out.split())
    root = _verify(path).root
    assert root in out
    code, out, _ = _run(capsys, "verify", "--library", str(path), "--against", root, "--json")
    document = json.loads(out)
    assert code == 0
    assert set(document) == {"holds", "root", "changes", "records", "editions", "findings", "notes", "against"}
    assert (document["holds"], document["root"], document["findings"]) == (True, root, [])
    with closing(sqlite3.connect(path)) as db:
        db.execute("DROP TRIGGER record_no_update")
        db.execute("UPDATE record SET content = replace(content, 'The first', 'The worst')")
        db.commit()
    code, out, err = _run(capsys, "verify", "--library", str(path))
    assert (code, err) == (1, "")
    assert out.startswith("does not hold: 2 findings\n")
    named = "record: correlation tallowane-antoine-low revision 2, change 3, place 0: it is not what was recorded"
    assert named in " ".join(out.split())
    code, out, _ = _run(capsys, "verify", "--library", str(path), "--json")
    assert code == 1
    assert {finding["key"] for finding in json.loads(out)["findings"]} == {
        "trigger record_no_update", "tallowane-antoine-low",
    }  # fmt: skip
    code, _, err = _run(capsys, "verify", "--library", str(path), "--against", "12")
    assert code == 2
    assert "no root of a history" in err


def _run(capsys, *words: str) -> tuple[int, str, str]:
    with pytest.raises(SystemExit) as stopped:
        main(list(words))
    captured = capsys.readouterr()
    return int(stopped.value.code or 0), captured.out, captured.err
