"""An upgrade keeps what was recorded, and says so in the history."""

from __future__ import annotations

import json
import shutil
import sqlite3
from contextlib import closing
from pathlib import Path

import pytest
from integrity import find_faults
from old_library import make_old_library, read_old_answers

from registry.errors import BadInput, LibraryBusy, NotALibrary, OlderLibrary, Refused
from registry.opening import open_library, start_library, upgrade_library
from registry.plan import draft_of
from registry.records import KINDS
from registry.store.engine import open_engine
from registry.store.history import append_change
from registry.store.recognition import digest_object, read_version
from registry.store.schema import create_schema
from registry.store.shapes import SHAPES
from registry.store.tables import SCHEMA

KEPT = ("change", "library", "node", "record")
"""Tables of schema 1 whose rows an upgrade leaves as they are; the others are derived from them."""


@pytest.fixture(scope="session")
def old_template(tmp_path_factory) -> Path:
    return make_old_library(tmp_path_factory.mktemp("old") / "old.db")


@pytest.fixture
def old_path(old_template, tmp_path) -> Path:
    """A library of schema 1 that a test may write to."""
    return Path(shutil.copy(old_template, tmp_path / "old.db"))


def _rows(path: Path) -> dict[str, list[tuple]]:
    with closing(sqlite3.connect(path)) as db:
        return {table: db.execute(f"SELECT * FROM {table} ORDER BY 1, 2").fetchall() for table in KEPT}


def _digests(path: Path) -> dict[str, str]:
    with closing(sqlite3.connect(path)) as db:
        rows = db.execute("SELECT type, name, tbl_name, sql FROM sqlite_master WHERE sql IS NOT NULL").fetchall()
    return {row[1]: digest_object(*row) for row in rows}


def test_an_upgrade_keeps_every_record_digest_header_and_node(old_path):
    """Every row is there unchanged; the only new ones are the change that says which library it is."""
    before, bytes_before = _rows(old_path), old_path.read_bytes()
    assert find_faults(old_path) == []
    backup = upgrade_library(old_path, "a steward")
    assert read_version(old_path) == SCHEMA
    after = _rows(old_path)
    assert after["library"] == before["library"]
    for table in ("change", "record"):
        assert after[table][:-1] == before[table]
    assert set(before["node"]) < set(after["node"])
    assert find_faults(old_path) == []
    assert _rows(backup) == before
    assert read_version(backup) == 1
    assert len(bytes_before) == backup.stat().st_size
    assert sorted(path.name for path in old_path.parent.iterdir()) == ["old.db", "old.db.schema-1.backup"]


def test_an_upgrade_is_recorded_once(old_path):
    """The last change says who upgraded it, and holds the library's own name; upgrading again changes nothing."""
    upgrade_library(old_path, "a steward")
    with open_library(old_path) as library:
        change = library.changes()[-1]
        assert (change.author, change.reason, change.records) == ("a steward", "Upgraded to schema 2.", 1)
        with library._file.reading() as view:
            (row,) = view.kind("library")
            assert (row.content["name"], row.content["started_at"]) == view.identity()
            assert (row.content["kept_by"], row.change) == ("team", view.position)
    before = old_path.read_bytes()
    assert upgrade_library(old_path, "a steward") is None
    assert old_path.read_bytes() == before


def test_an_upgrade_without_its_record_is_completed(old_path):
    """A library of the newest schema that does not say yet which one it is says so after the next upgrade."""
    from registry.store.schema import upgrade_file

    upgrade_file(old_path)
    with open_library(old_path) as library:
        assert library.position == 4
    assert upgrade_library(old_path, "a steward") is None
    with open_library(old_path) as library:
        assert library.changes()[-1].reason == "Upgraded to schema 2."
    assert find_faults(old_path) == []


def test_an_upgraded_library_answers_as_before(old_path):
    """Values bit for bit, choices and refusals, at the first and at the last change, as the older program gave them."""
    upgrade_library(old_path)
    rows = read_old_answers()
    assert {row["position"] for row in rows} == {"1", "4"}
    assert len({row["answered_by"] for row in rows if row["value"]}) == 10
    with open_library(old_path) as library:
        for row in rows:
            view = library.at(int(row["position"]))
            asked = (row["compound"], float(row["kelvin"]))
            try:
                answer = view.lookup(*asked, property=row["property"])
                found = (answer.correlation.key, repr(answer.value))
            except Refused as error:
                found = (error.refusal.reason, "")
            assert found == (row["answered_by"], row["value"]), row


def test_every_record_stands_where_it_stood(old_path):
    """Withdrawn, declined, waiting and preferred records are so after the upgrade, and the queue has what waits."""
    upgrade_library(old_path)
    with open_library(old_path) as library:
        with library._file.reading() as view:
            words = {
                state.newest.key: (state.newest.revision, state.latest.standing if state.latest else "")
                for state in view.states("correlation")
            }
            preferred = [state.latest.standing for state in view.states("preference")]
            waiting = {row.key for row, _ in view.waiting(["correlation"])}
    assert words["brindovane-antoine-mid"] == (1, "withdrawn")
    assert words["dunmarane-august-slip"] == (1, "declined")
    assert words["brindovane-antoine-low"][0] == 3
    assert preferred == ["accepted"]
    assert {"brindovane-antoine-low", "brindovane-cox-draft"} <= waiting


DERIVED = ("link", "term", "standing")


def _derived(path: Path) -> dict[str, list[tuple]]:
    with closing(sqlite3.connect(path)) as db:
        return {table: sorted(db.execute(f"SELECT * FROM {table}")) for table in DERIVED}


def _record_again(path: Path, target: Path) -> None:
    """The same history appended by the program of today, record by record."""
    engine = open_engine(target, create=True)
    with closing(sqlite3.connect(path)) as db, engine.begin() as connection:
        create_schema(connection)
        known: dict[tuple[str, str, int], dict] = {}
        for number, author, reason, time in db.execute("SELECT number, author, reason, recorded_at FROM change"):
            drafts = []
            rows = db.execute("SELECT kind, key, revision, content FROM record WHERE change = ? ORDER BY id", (number,))
            for kind, key, revision, text in rows:
                content = known[kind, key, revision] = json.loads(text)
                record = KINDS[kind].restore(key, content)
                about = kind == "review" and known[record.of_kind, record.of_key, int(record.of_revision)]
                drafts.append(draft_of(record, record.effects(about) if about else ()))
            append_change(connection, author, reason, time, drafts)
    engine.dispose()


def test_what_is_derived_is_what_the_program_of_today_derives(old_path, tmp_path):
    """Links, terms and standings of an upgraded library are row for row those of the same records recorded anew."""
    upgrade_library(old_path)
    _record_again(old_path, tmp_path / "again.db")
    found, expected = _derived(old_path), _derived(tmp_path / "again.db")
    assert {table: len(rows) > 5 for table, rows in found.items()} == dict.fromkeys(DERIVED, True)
    assert found == expected
    assert _rows(old_path)["node"] == _rows(tmp_path / "again.db")["node"]


def test_schemas_are_what_the_program_makes(old_path, tmp_path):
    """The digests by which a file is recognised are those of a new, of an old and of an upgraded library."""
    start_library(tmp_path / "new.db", "none").close()
    assert _digests(old_path) == SHAPES[1]
    upgrade_library(old_path)
    assert _digests(old_path) == _digests(tmp_path / "new.db") == SHAPES[SCHEMA]


def test_the_command_upgrades_and_signs(old_path, capsys):
    """`rangebook upgrade --as NAME` says what it did, where the backup is, and then that there is nothing to do."""
    for words in (("lookup", "brindovane", "300K"), ("list",)):
        with pytest.raises(SystemExit) as stop:
            main_with(*words, "--library", str(old_path))
        assert stop.value.code == 5
        assert "`rangebook upgrade` brings it up to date" in capsys.readouterr().err
    for upgraded in (True, False):
        with pytest.raises(SystemExit) as stop:
            main_with("upgrade", "--as", "a steward", "--json", "--library", str(old_path))
        assert not stop.value.code
        told = json.loads(capsys.readouterr().out)
        assert told["upgraded"] is upgraded
    with open_library(old_path) as library:
        assert library.changes()[-1].author == "a steward"


def main_with(*arguments: str) -> None:
    from registry.cli.app import main as run

    run(list(arguments))


def _execute(path: Path, *statements: str) -> None:
    with closing(sqlite3.connect(path, isolation_level=None)) as db:
        for statement in statements:
            db.execute(statement)


@pytest.mark.parametrize(
    ("statement", "why"),
    [
        ("CREATE VIEW seen AS SELECT 1", "it holds the view 'seen', not rangebook's own"),
        ("CREATE TRIGGER t AFTER INSERT ON link BEGIN DELETE FROM node; END", "it holds the trigger 't'"),
        ("PRAGMA user_version=0", "it has schema 0, which no rangebook made"),
        ("PRAGMA user_version=-3", "it has schema -3, which no rangebook made"),
        ("UPDATE alembic_version SET version_num='0002'", "it says that it has schema 1, and '0002'"),
        ("DELETE FROM alembic_version", "it says that it has schema 1, and ''"),
        ("INSERT INTO alembic_version VALUES ('x')", "it says that it has schema 1, and '0001, x'"),
    ],
)
def test_what_no_program_left_is_not_upgraded(statement, why, old_path):
    """A library of an older schema that holds something else is left byte for byte as it is."""
    _execute(old_path, statement)
    before = old_path.read_bytes()
    with pytest.raises(NotALibrary) as caught:
        upgrade_library(old_path)
    assert why in str(caught.value)
    assert old_path.read_bytes() == before
    assert [path.name for path in old_path.parent.iterdir()] == ["old.db"]


def test_an_upgrade_waits_for_its_turn_and_says_so(old_path, monkeypatch):
    """An upgrade that finds another writer is busy (exit code 4), and leaves no backup."""
    import registry.store.engine

    monkeypatch.setattr(registry.store.engine, "BUSY_SECONDS", 0.05)
    with closing(sqlite3.connect(old_path, isolation_level=None)) as other:
        other.execute("BEGIN IMMEDIATE")
        with pytest.raises(LibraryBusy):
            upgrade_library(old_path)
        other.execute("ROLLBACK")
    assert [path.name for path in old_path.parent.iterdir()] == ["old.db"]


def test_an_upgrade_is_signed(old_path):
    """A blank author is refused before anything is touched."""
    with pytest.raises(BadInput, match="is no author of a change"):
        upgrade_library(old_path, " ")
    with pytest.raises(OlderLibrary):
        open_library(old_path)
