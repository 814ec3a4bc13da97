"""The history: appended to and never changed, digested and rooted as the standards say."""

from __future__ import annotations

import contextlib
import hashlib
import json
import re
import shutil
import sqlite3
import subprocess
import sys
from contextlib import closing
from pathlib import Path

import pytest
import rfc8785
from hypothesis import given, settings
from hypothesis import strategies as st
from sqlalchemy import insert

from registry.canonical import encode, is_canonical
from registry.errors import BadInput, LibraryBusy, NewerLibrary, NotALibrary, OlderLibrary
from registry.merkle import hash_leaf, new_nodes, root_from_nodes, root_of
from registry.opening import open_library, start_library
from registry.store import schema
from registry.store.engine import open_engine, wal_is_safe
from registry.store.history import Draft, append_change, fold_term
from registry.store.library_file import LibraryFile
from registry.store.tables import METADATA, SCHEMA

STRAY = Draft("source", "stray", {"citation": "invented"})
TABLES = sorted(table.name for table in METADATA.sorted_tables)

# Leaves and roots of the certificate-transparency Merkle test data (RFC 6962/9162 hashing), from memory; they
# close against the definition in RFC 9162, section 2.1.1, computed below.
LEAVES = [bytes.fromhex(t) for t in ("", "00", "10", "2021", "3031", "40414243", "5051525354555657")]
LEAVES.append(bytes.fromhex("606162636465666768696a6b6c6d6e6f"))
ROOTS = [
    "6e340b9cffb37a989ca544e6bb780a2c78901d3fb33738768511a30617afa01d",
    "fac54203e7cc696cf0dfcb42c92a1d9dbaf70ad9e621f4bd8d98662f00e3c125",
    "aeb6bcfe274b70a14fb067a5e5578264db0fa9b51af5e0ba159158f329e06e77",
    "d37ee418976dd95753c1c73862b9398fa2a2cf9b4ff0fdfe8b30cd95209614b7",
    "4e3bbb1f7b478dcfe71fb631631519a3bca12c9aefca1612bfce4c13a86264d4",
    "76e67dadbcdf1e10e1b74ddc608abd2f98dfb16fbce75277b5232a127f2087ef",
    "ddb89be403809e325750d3d263cd78929c2942b7942a34b77e122c9594a74c8c",
    "5dc9da79a70659a9ad559cb701ded9a2ab9d823aad2f4960cfe370eff4604328",
]


def _root_by_definition(data: list[bytes]) -> bytes:
    """MTH of RFC 9162, section 2.1.1, word for word."""
    if not data:
        return hashlib.sha256(b"").digest()
    if len(data) == 1:
        return hashlib.sha256(b"\x00" + data[0]).digest()
    k = 1
    while 2 * k < len(data):
        k *= 2
    return hashlib.sha256(b"\x01" + _root_by_definition(data[:k]) + _root_by_definition(data[k:])).digest()


@pytest.mark.parametrize("size", range(1, 9))
def test_merkle_roots_are_the_published_ones(size):
    """Roots over 1 to 8 leaves equal the published test vectors."""
    assert root_of([hash_leaf(d) for d in LEAVES[:size]]).hex() == ROOTS[size - 1]


@settings(max_examples=60)
@given(st.lists(st.binary(max_size=8), max_size=70))
def test_merkle_tree_grows_node_by_node(data):
    """Appending leaf by leaf through stored nodes gives the root of RFC 9162 at every size."""
    nodes: dict[tuple[int, int], bytes] = {}
    for size, leaf in enumerate(data):
        for level, place, value in new_nodes(size, hash_leaf(leaf), lambda level, place: nodes[level, place]):
            assert (level, place) not in nodes
            nodes[level, place] = value
    root = root_from_nodes(len(data), lambda level, place: nodes[level, place])
    assert root == _root_by_definition(data) == root_of([hash_leaf(d) for d in data])


texts = st.text(st.characters(exclude_categories=("Cs",)), max_size=30)


@settings(max_examples=200)
@given(st.recursive(texts | st.integers(-(2**53) + 1, 2**53 - 1), lambda inner: st.lists(inner, max_size=4)
       | st.dictionaries(st.text("abcdefghijklmnopqrstuvwxyz_ABC019", max_size=6), inner, max_size=4)))  # fmt: skip
def test_canonical_json_is_rfc_8785(content):
    """Sorted compact JSON of text and integers equals RFC 8785, by an independent implementation."""
    assert encode(content) == rfc8785.dumps(content)


plain = st.dictionaries(st.text("abZ_0é", max_size=3), st.text("ab é,:", max_size=4) | st.just({"b": "c", "d": ""}))


@settings(max_examples=500)
@given(
    plain | st.dictionaries(st.text('ab\\"', max_size=3), texts | st.integers() | st.lists(plain, max_size=2) | plain),
    st.sampled_from(("canonical", "unsorted", "blanks", "ascii")),
    st.integers(0, 10**6),
    st.sampled_from(("", " ", ",", "0", '"a":"b",', "\\u0061")),
)
def test_canonical_text_is_told_from_any_other(content, how, at, more):
    """The quick check says what encoding again says: for other orders, blanks, escapes and insertions anywhere."""
    text = encode(content).decode()
    if how == "unsorted":
        text = json.dumps(dict(reversed(content.items())), separators=(",", ":"), ensure_ascii=False)
    elif how != "canonical":
        text = json.dumps(
            content, sort_keys=True, ensure_ascii=how == "ascii", separators=None if how == "blanks" else (",", ":")
        )
    at %= len(text) + 1
    for tried in (text, text[:at] + more + text[at:]):
        with contextlib.suppress(ValueError):
            parsed = json.loads(tried)
            assert is_canonical(tried, parsed) == (encode(parsed).decode() == tried)


def test_recorded_digests_and_roots_follow_from_the_records(published_path):
    """Every digest, change root, header and stored node can be recomputed from what is stored."""
    with closing(sqlite3.connect(published_path)) as db:
        rows = db.execute("SELECT change, kind, key, revision, content, digest FROM record ORDER BY change, place")
        by_change: dict[int, list[bytes]] = {}
        for change, kind, key, revision, content, digest in rows:
            envelope = {"kind": kind, "key": key, "revision": revision, "content": json.loads(content)}
            assert hashlib.sha256(rfc8785.dumps(envelope)).hexdigest() == digest
            assert rfc8785.dumps(json.loads(content)).decode() == content
            by_change.setdefault(change, []).append(bytes.fromhex(digest))
        headers = []
        for number, root, records, header in db.execute("SELECT number, records_root, records, header FROM change"):
            assert _root_by_definition(by_change[number]).hex() == root
            assert len(by_change[number]) == records
            assert json.loads(header)["records_root"] == root
            headers.append(header.encode())
        nodes = {(level, place): bytes.fromhex(h) for level, place, h in db.execute("SELECT * FROM node")}
        found = root_from_nodes(len(headers), lambda level, place: nodes[level, place])
        assert found == _root_by_definition(headers)


CHANGES_TO_HISTORY = (
    "UPDATE {t} SET rowid = rowid + 1000",
    "DELETE FROM {t}",
    "INSERT OR REPLACE INTO {t} SELECT * FROM {t}",
    "REPLACE INTO {t} SELECT * FROM {t}",
    "INSERT INTO {t} SELECT * FROM {t} WHERE true ON CONFLICT DO NOTHING",
)


@pytest.mark.parametrize("table", TABLES)
@pytest.mark.parametrize("statement", CHANGES_TO_HISTORY)
def test_the_database_itself_forbids_changes(table, statement, own_path):
    """UPDATE, DELETE and REPLACE on any table are stopped by triggers, with any client and default settings."""
    with closing(sqlite3.connect(own_path)) as db:
        if table == "library":
            db.execute("SELECT 1")
        before = db.execute(f"SELECT * FROM {table} ORDER BY 1, 2").fetchall()
        assert before
        with pytest.raises(sqlite3.IntegrityError, match="history is only appended to"):
            db.execute(statement.format(t=table))
        db.rollback()
        assert db.execute(f"SELECT * FROM {table} ORDER BY 1, 2").fetchall() == before


def test_replacing_by_another_unique_key_is_stopped_too(own_path):
    """INSERT OR REPLACE under a new id, but the same key and revision or the same place, is stopped."""
    with closing(sqlite3.connect(own_path)) as db:
        for columns in ("99999, 1, 77777, kind, key, revision", "99999, change, place, 'x', 'y', 1"):
            with pytest.raises(sqlite3.IntegrityError, match="history is only appended to"):
                db.execute(f"INSERT OR REPLACE INTO record SELECT {columns}, content, digest FROM record WHERE id = 5")


def _schema_of(path: Path) -> list[tuple[str, str, str]]:
    with closing(sqlite3.connect(path)) as db:
        rows = db.execute("SELECT type, name, sql FROM sqlite_master WHERE sql IS NOT NULL ORDER BY type, name")
        return [
            (kind, name, re.sub(r"\s*([(),])\s*", r"\1", " ".join(sql.replace('"', "").split())))
            for kind, name, sql in rows
        ]


def test_migrating_from_nothing_equals_creating(tmp_path):
    """Tables, checks, indexes and triggers are the same whether a library is made or migrated to the newest schema."""
    made, migrated = tmp_path / "made.db", tmp_path / "migrated.db"
    start_library(made, "none").close()
    migrated.touch()
    engine = open_engine(migrated, write=True)
    with engine.begin() as connection:
        _run_migrations(connection, schema.find_migrations())
        schema.stamp_version(connection, SCHEMA)
    engine.dispose()
    assert _schema_of(migrated) == _schema_of(made)
    assert all("STRICT" in sql for kind, name, sql in _schema_of(made) if kind == "table" and name in TABLES)
    with open_library(migrated) as library:
        assert library.position == 0


def _run_migrations(connection, folder: Path) -> None:
    from alembic import command
    from alembic.config import Config

    config = Config()
    config.set_main_option("script_location", str(folder))
    config.attributes["connection"] = connection
    command.upgrade(config, "head")


NEXT_MIGRATION = '''
"""A migration as a later version may bring it."""
from alembic import op
import sqlalchemy as sa
revision = "0003"
down_revision = "0002"
def upgrade():
    op.create_table("later", sa.Column("id", sa.Integer, primary_key=True), sqlite_strict=True)
    op.add_column("change", sa.Column("later", sa.Text))
    {extra}
def downgrade():
    raise NotImplementedError
'''


def _next_migrations(tmp_path: Path, extra: str = "") -> Path:
    folder = Path(shutil.copytree(schema.find_migrations(), tmp_path / "migrations"))
    (folder / "versions" / "0003_later.py").write_text(NEXT_MIGRATION.format(extra=extra))
    return folder


def _all_rows(path: Path) -> dict[str, list[tuple]]:
    with closing(sqlite3.connect(path)) as db:
        return {t: db.execute(f"SELECT * FROM {t} ORDER BY 1, 2").fetchall() for t in TABLES}


def test_upgrade_keeps_every_row_and_leaves_a_backup(own_path, tmp_path):
    """An upgrade with rows in the library changes none, keeps the triggers, and leaves a backup that opens."""
    before = _all_rows(own_path)
    backup = schema.upgrade_file(own_path, _next_migrations(tmp_path))
    assert schema.read_version(own_path) == SCHEMA + 1
    after = _all_rows(own_path)
    assert {t: [row[: len(before[t][0])] for row in rows] for t, rows in after.items()} == before
    assert _all_rows(backup) == before
    with open_library(backup) as library:
        assert library.lookup("water", 300.0).value > 0.0
    with closing(sqlite3.connect(own_path)) as db, pytest.raises(sqlite3.IntegrityError):
        db.execute("DELETE FROM record")


def test_an_upgrade_that_fails_half_way_changes_nothing(own_path, tmp_path):
    """A migration that raises after its first table leaves the library as it was."""
    folder = _next_migrations(tmp_path, 'raise RuntimeError("invented failure")')
    before, shape = _all_rows(own_path), _schema_of(own_path)
    with pytest.raises(RuntimeError, match="invented failure"):
        schema.upgrade_file(own_path, folder)
    assert (_all_rows(own_path), _schema_of(own_path)) == (before, shape)
    assert schema.read_version(own_path) == SCHEMA


def test_an_up_to_date_library_is_not_touched(own_path):
    """Upgrading what is up to date makes no backup and changes no byte."""
    before = own_path.read_bytes()
    assert schema.upgrade_file(own_path) is None
    assert own_path.read_bytes() == before
    assert sorted(p.name for p in own_path.parent.iterdir()) == ["own.db"]


@pytest.mark.parametrize(("version", "error"), [(SCHEMA + 1, NewerLibrary), (SCHEMA - 1, OlderLibrary)])
def test_other_schemas_are_told_apart(version, error, own_path):
    """A newer library is refused, and an older one is upgraded only when asked."""
    with closing(sqlite3.connect(own_path)) as db:
        db.execute(f"PRAGMA user_version={version}")
    with pytest.raises(error) as caught:
        open_library(own_path)
    assert caught.value.found == version
    assert caught.value.known == SCHEMA


def test_a_file_that_is_no_library_is_not_changed(tmp_path):
    """Another program's database, a text file and an empty file are refused and left as they are."""
    other, text, empty = tmp_path / "other.db", tmp_path / "text.db", tmp_path / "empty.db"
    with closing(sqlite3.connect(other)) as db:
        db.execute("CREATE TABLE change (number INTEGER)")
        db.commit()
    text.write_text("not a database")
    empty.touch()
    for path in (other, text, empty):
        before = path.read_bytes()
        with pytest.raises(NotALibrary):
            open_library(path)
        assert path.read_bytes() == before


# sqlite.org, "The WAL-reset bug": fixed in 3.51.3, with backports 3.50.7 and 3.44.6
WAL_VERSIONS = {
    (3, 40, 1): False, (3, 44, 5): False, (3, 44, 6): True, (3, 45, 0): False, (3, 50, 6): False, (3, 50, 7): True,
    (3, 51, 2): False, (3, 51, 3): True, (3, 52, 0): True,
}  # fmt: skip


PRAGMAS = {"foreign_keys": 1, "recursive_triggers": 1, "trusted_schema": 0, "cell_size_check": 1}


def test_write_ahead_logging_only_where_sqlite_is_free_of_its_bug(own_path):
    """WAL is used only by versions without the WAL-reset bug; else the rollback journal with EXTRA flushes."""
    assert {version: wal_is_safe(version) for version in WAL_VERSIONS} == WAL_VERSIONS
    engine = open_engine(own_path, write=True)
    with engine.connect() as connection:
        pragma = {
            name: connection.exec_driver_sql(f"PRAGMA {name}").scalar()
            for name in (*PRAGMAS, "journal_mode", "synchronous")
        }
    engine.dispose()
    safe = wal_is_safe(sqlite3.sqlite_version_info[:3])
    assert (pragma.pop("journal_mode"), pragma.pop("synchronous")) == (("wal", 2) if safe else ("delete", 3))
    assert pragma == PRAGMAS


def test_a_reader_cannot_write(own_path):
    """The connection that reads is read-only."""
    from sqlalchemy.exc import OperationalError

    engine = open_engine(own_path)
    with engine.connect() as connection, pytest.raises(OperationalError, match="readonly"):
        connection.exec_driver_sql("CREATE TABLE stray (id INTEGER)")
    engine.dispose()


def test_a_change_is_whole_or_absent(own_path):
    """When an append fails after its records, nothing of the change stays."""
    before = _all_rows(own_path)
    with open_library(own_path) as library:
        file: LibraryFile = library._file
        with pytest.raises(RuntimeError), file.writing() as (_, append):
            append("somebody", "a change that fails", "2030-01-01T00:00:00.000000Z", [STRAY])
            raise RuntimeError("invented failure")
    assert _all_rows(own_path) == before


def test_recorded_times_never_decrease(own_path):
    """A change recorded by a clock that runs behind takes the time of the one before it."""
    with open_library(own_path) as library:
        last = library.changes()[-1].recorded_at
        with library._file.writing() as (_, append):
            change = append(
                "somebody", "an early clock", "1999-01-01T00:00:00.000000Z", [Draft("source", "s", {"a": "b"})]
            )
        assert change.recorded_at == last


def test_a_position_reads_the_newest_revision_up_to_it(own_path):
    """Revisions are numbered 1, 2, ... under a key, and each position sees the newest up to it."""
    with open_library(own_path) as library:
        for text in ("first", "second"):
            with library._file.writing() as (_, append):
                append("somebody", text, "2030-01-01T00:00:00.000000Z", [Draft("source", "twice", {"citation": text})])
        with library._file.reading() as view:
            row = view.current("source", ["twice"])[0]
            assert (row.revision, row.content["citation"], row.change) == (2, "second", 3)
            view.position = 2
            row = view.current("source", ["twice"])[0]
            assert (row.revision, row.content["citation"]) == (1, "first")
            view.position = 1
            assert view.current("source", ["twice"]) == []


def test_a_lookup_sees_another_process_change(own_path, tmp_path):
    """A library that is open answers by what another process has recorded since."""
    package = tmp_path / "package"
    script = (
        "import sys; from registry.opening import open_library\n"
        "with open_library(sys.argv[1]) as library:\n"
        "    library.load(sys.argv[2], author='another process', reason='invented', accept=True)\n"
    )
    with open_library(own_path) as library:
        before = library.lookup("water", 300.0)
        assert before.correlation.key == "water-if97"
        library.dump(package)
        table = package / "correlations.csv"
        rows = table.read_text(encoding="utf-8").splitlines(keepends=True)
        mine = next(i for i, row in enumerate(rows) if row.startswith("water-if97,"))
        rows[mine] = rows[mine].replace(",accepted,", ",withdrawn,").replace("\n", "an invented erratum\n")
        table.write_text("".join(rows), encoding="utf-8")
        subprocess.run([sys.executable, "-c", script, str(own_path), str(package)], check=True, timeout=60)
        after = library.lookup("water", 300.0)
        assert after.correlation.key == "water-sr1-86"
        assert after.position == before.position + 1


def test_starting_never_writes_over_something(tmp_path):
    """A file that is there stays, byte for byte, and no scratch file is left."""
    path = tmp_path / "there.db"
    path.write_bytes(b"something of somebody")
    with pytest.raises(FileExistsError):
        start_library(path, "none")
    assert path.read_bytes() == b"something of somebody"
    assert [p.name for p in tmp_path.iterdir()] == ["there.db"]


def test_a_start_that_fails_leaves_nothing(tmp_path, monkeypatch):
    """When the shelf cannot be loaded, neither a library nor a scratch file stays."""

    def fail(*_: object, **__: object) -> object:
        raise BadInput("invented failure")

    monkeypatch.setattr("registry.arrival.plan_load", fail)
    with pytest.raises(BadInput, match="invented failure"):
        start_library(tmp_path / "new.db", "published")
    assert list(tmp_path.iterdir()) == []


def test_a_large_import_is_one_leaf(tmp_path):
    """A change with 20,000 records is one leaf: the tree over changes grows with their number alone."""
    path = tmp_path / "large.db"
    start_library(path, "none").close()
    engine = open_engine(path, write=True)
    drafts = [Draft("source", f"s{i}", {"citation": f"invented {i}"}) for i in range(20_000)]
    with engine.begin() as connection:
        append_change(connection, "somebody", "a large import", "2030-01-01T00:00:00.000000Z", drafts)
    with engine.begin() as connection:
        append_change(connection, "somebody", "a small one", "2030-01-01T00:00:00.000000Z", drafts[:1])
    engine.dispose()
    with closing(sqlite3.connect(path)) as db:
        assert db.execute("SELECT count(*) FROM node").fetchone()[0] == 4
        assert db.execute("SELECT max(revision) FROM record").fetchone()[0] == 2


def test_nothing_is_slipped_into_an_earlier_change(own_path):
    """A record inserted under a change that is not the newest is stopped by the database."""
    with closing(sqlite3.connect(own_path)) as db:
        header = "2, 'somebody', 'a later change', '2030-01-01T00:00:00.000000Z', 0, '" + "0" * 64 + "', '{}'"
        db.execute(f"INSERT INTO change VALUES ({header})")
        with pytest.raises(sqlite3.IntegrityError, match="history is only appended to"):
            db.execute(
                "INSERT INTO record SELECT 99999, 1, 99999, kind, 'new', 1, content, digest FROM record WHERE id = 5"
            )


def test_a_record_changed_behind_the_back_does_not_answer(own_path):
    """With the triggers dropped a coefficient can be changed; the digest no longer fits, and the lookup says so."""
    with closing(sqlite3.connect(own_path)) as db:
        db.execute("DROP TRIGGER record_no_update")
        db.execute(
            "UPDATE record SET content = replace(content, '1642.89', '1652.89') WHERE key = 'ethanol-antoine-low'"
        )
        db.commit()
    with open_library(own_path) as library:
        with pytest.raises(NotALibrary, match="'ethanol-antoine-low', revision 1, is not what was recorded"):
            library.lookup("ethanol", 268.15)
        assert library.lookup("water", 300.0).value > 0.0


THREADS = """
import sys, threading
from registry.opening import open_library
names = ["water", "ammonia", "ethanol", "benzene", "methane", "nitrogen", "argon", "propane"]
at = {"water": 300.0, "ammonia": 250.0, "ethanol": 300.0, "benzene": 300.0, "methane": 110.0, "nitrogen": 80.0,
      "argon": 90.0, "propane": 250.0}
faults = []
with open_library(sys.argv[1]) as library:
    alone = {name: library.lookup(name, at[name]).value for name in names}
    def work(name):
        try:
            for _ in range(300):
                assert library.lookup(name, at[name]).value == alone[name]
                library.coverage(name).seams
                library.lookup(name, [at[name], at[name] + 1.0])
        except BaseException as error:
            faults.append(repr(error))
    threads = [threading.Thread(target=work, args=(name,)) for name in names]
    [t.start() for t in threads]
    [t.join() for t in threads]
print(faults)
"""


def test_one_library_serves_many_threads(published_path):
    """Eight threads that look up different compounds in one open library get what each gets alone."""
    done = subprocess.run(
        [sys.executable, "-c", THREADS, str(published_path)], capture_output=True, text=True, timeout=120
    )
    assert (done.returncode, done.stdout.strip(), done.stderr) == (0, "[]", "")


def test_a_closed_library_says_so(own_path):
    """After closing, neither a warm nor a cold lookup answers."""
    library = open_library(own_path)
    library.lookup("water", 300.0)
    library.close()
    for name in ("water", "ammonia"):
        with pytest.raises(BadInput, match="is closed"):
            library.lookup(name, 300.0)


def test_foreign_keys_are_on(own_path):
    """A standing that names a record that is not there is refused by the database."""
    from sqlalchemy.exc import IntegrityError

    engine = open_engine(own_path, write=True)
    with pytest.raises(IntegrityError, match="FOREIGN KEY"), engine.begin() as connection:
        row = {"id": 10**9, "kind": "source", "key": "x", "revision": 1, "standing": "accepted", "change": 1}
        connection.execute(insert(METADATA.tables["standing"]), {**row, "record": 10**9, "cause": 10**9})
    engine.dispose()


NOW = "2030-01-01T00:00:00.000000Z"


def test_every_read_takes_a_position(own_path):
    """Revisions, references and terms that a later change brought are not there at an earlier position."""
    with open_library(own_path) as library:
        for citation in ("first", "second"):
            draft = Draft(
                "source", "later", {"citation": citation}, [("source", "source", "aim")], [f"Term  {citation}"]
            )
            with library._file.writing() as (_, append):
                append("somebody", citation, NOW, [draft])
        with library._file.reading() as view:
            for position, citations in ((1, []), (2, ["first"]), (3, ["first", "second"])):
                view.position = position
                assert [r.content["citation"] for r in view.revisions("source", "later")] == citations
                assert [s.newest.content["citation"] for s in view.linked("source", ["aim"])] == citations[-1:]
                assert [r.content["citation"] for r in view.kind("source") if r.key == "later"] == citations[-1:]
                # a text finds what was ever called so; whether it still is, the records say
                assert [bool(view.find_term(f"tErM {c}")) for c in ("first", "second")] == [
                    "first" in citations, "second" in citations,
                ]  # fmt: skip
                assert {"term first", "term second"} & set(view.terms()) == {f"term {c}" for c in citations}


def test_many_keys_are_read_at_once(own_path):
    """More keys than one statement takes are all found."""
    with open_library(own_path) as library:
        drafts = [Draft("source", f"many-{i}", {"citation": "invented"}) for i in range(1201)]
        with library._file.writing() as (_, append):
            append("somebody", "many", NOW, drafts)
        with library._file.reading() as view:
            assert len(view.current("source", [*(d.key for d in drafts), "missing"])) == 1201


def test_two_revisions_in_one_change_count_on(own_path):
    """Several revisions of one key in one change follow each other."""
    with open_library(own_path) as library:
        with library._file.writing() as (_, append):
            append("somebody", "twice", NOW, [STRAY, STRAY])
        with library._file.reading() as view:
            assert [row.revision for row in view.revisions("source", "stray")] == [1, 2]


def test_texts_are_compared_by_full_case_folding():
    """Case folding, not lower case: a sharp s equals two; runs of blanks count as one."""
    assert fold_term(" Wei\u00dfer  PHOSPHOR ") == fold_term("WEISSER phosphor") == "weisser phosphor"


def test_a_finished_library_is_never_put_over_another(tmp_path):
    """If a library has appeared while another was being made, the one that is there stays."""
    fresh, there = tmp_path / "fresh", tmp_path / "there"
    fresh.write_bytes(b"fresh")
    there.write_bytes(b"there")
    with pytest.raises(FileExistsError):
        schema._publish(fresh, there)
    assert there.read_bytes() == b"there"


def test_a_damaged_row_is_told(own_path):
    """Content that is no object is a damaged library, not a fault of the program."""
    with closing(sqlite3.connect(own_path)) as db:
        db.execute("DROP TRIGGER record_no_update")
        db.execute("UPDATE record SET content = '[]' WHERE kind = 'compound' AND key = 'water'")
        db.commit()
    with open_library(own_path) as library, pytest.raises(NotALibrary, match="is not what was recorded"):
        library.lookup("water", 300.0)


@pytest.mark.parametrize("cell", ["standing = 'withdrawn'", "revision = 2", "key = 'water-goff-1957'", "cause = 5"])
def test_a_standing_changed_behind_the_back_is_told(cell, own_path):
    """The log of standings is derived: where it does not say what the reviews say, nothing is answered by it."""
    with closing(sqlite3.connect(own_path)) as db:
        db.execute("DROP TRIGGER standing_no_update")
        db.execute(f"UPDATE standing SET {cell} WHERE key = 'water-if97'")
        db.commit()
    with open_library(own_path) as library:
        with pytest.raises(NotALibrary, match="is not what was recorded"):
            library.entry("water-goff-1957" if "key" in cell else "water-if97")
        assert library.lookup("ammonia", 300.0).value > 0.0


def test_an_upgrade_that_leaves_dangling_references_is_taken_back(own_path, tmp_path):
    """Tables may be rebuilt with foreign keys off; what dangles afterwards stops the upgrade whole."""
    row = """op.execute("DROP TRIGGER term_no_insertion")
    op.execute("INSERT INTO term VALUES ('x', 'source', 'x', 999999999)")"""
    before = _all_rows(own_path)
    with pytest.raises(NotALibrary, match="1 dangling reference"):
        schema.upgrade_file(own_path, _next_migrations(tmp_path, row))
    assert _all_rows(own_path) == before


def test_backups_do_not_replace_each_other(own_path, tmp_path):
    """A second backup of one schema takes another name."""
    first = schema._back_up(own_path, 1)
    before = first.read_bytes()
    second = schema._back_up(own_path, 1)
    assert second != first
    assert first.read_bytes() == before
    assert second.exists()


def test_a_change_needs_an_author_and_a_reason_in_plain_text(own_path, tmp_path):
    """Neither load nor start records an empty author, a control character or a spreadsheet formula."""
    from registry.shelves import find_shelf

    for author in ("", " ", "a\tb", "=A1", "x" * 201):
        with open_library(own_path) as library, pytest.raises(BadInput, match="is no author of a change"):
            library.load(find_shelf("scenario"), author=author)
        with pytest.raises(BadInput, match="is no author of a change"):
            start_library(tmp_path / "new.db", "none", author)
    with open_library(own_path) as library:
        with pytest.raises(BadInput, match="is no reason of a change"):
            library.load(find_shelf("scenario"), author="somebody", reason="a\x00b")
        library.load(find_shelf("scenario"), author="somebody")
        assert library.changes()[-1].reason == "Loaded scenario"


@pytest.mark.parametrize("name", ["a#b.db", "a%20b.db", "a?b.db", "a b.db", "a&mode=rwc.db", "ä.db"])
def test_a_library_is_the_file_of_its_name(name, tmp_path):
    """Whatever characters a file name has, that file and no other is made, read and written."""
    start_library(tmp_path / name, "none").close()
    with open_library(tmp_path / name) as library:
        with library._file.writing() as (_, append):
            append("somebody", "something", NOW, [STRAY])
        assert library.position == 2
    assert [path.name for path in tmp_path.iterdir()] == [name]


def test_a_dossier_sees_what_was_recorded_since(own_path):
    """A dossier is read at the newest position, also after one was read before."""
    with open_library(own_path) as library:
        library.dossier("water")
        with library._file.writing() as (_, append):
            append("somebody", "something", NOW, [STRAY])
        assert library.dossier("water").position == library.position == 2


def test_opening_again_in_one_process_drops_no_lock(own_path):
    """While a change is being written, the library may be opened again here and still nobody else can write."""
    probe = (
        "import sqlite3, sys; sqlite3.connect(sys.argv[1], timeout=0, isolation_level=None).execute('BEGIN IMMEDIATE')"
    )
    with open_library(own_path) as library, library._file.writing() as (_, append):
        append("somebody", "something", NOW, [STRAY])
        open_library(own_path).close()
        done = subprocess.run([sys.executable, "-c", probe, str(own_path)], capture_output=True, text=True, timeout=60)
        assert "database is locked" in done.stderr


def test_a_locked_library_is_busy_for_readers_too(own_path, monkeypatch):
    """A lookup and a warm lookup that find the file locked say so (exit code 4)."""
    import registry.store.engine

    monkeypatch.setattr(registry.store.engine, "BUSY_SECONDS", 0.05)
    with open_library(own_path) as library, closing(sqlite3.connect(own_path, isolation_level=None)) as other:
        library.lookup("water", 300.0)
        other.execute("BEGIN EXCLUSIVE")
        with pytest.raises(LibraryBusy):
            library.lookup("water", 300.0)
        other.execute("ROLLBACK")
    assert [path.name for path in own_path.parent.iterdir()] == ["own.db"]


def test_a_large_change_counts_revisions_on(own_path):
    """Two hundred keys and more in one change continue the revisions that are there."""
    drafts = [Draft("source", f"s{i}", {"citation": "invented"}) for i in range(250)]
    with open_library(own_path) as library:
        for _ in range(2):
            with library._file.writing() as (_, append):
                append("somebody", "large", NOW, drafts)
        with library._file.reading() as view:
            assert {row.revision for row in view.current("source", [d.key for d in drafts])} == {2}


def test_a_writer_holds_the_lock_from_its_first_read(own_path):
    """What a load compares with cannot change before it appends: the lock is taken at BEGIN."""
    with open_library(own_path) as library, library._file.writing() as (view, _):
        view.current("source", ["stray"])
        with closing(sqlite3.connect(own_path, timeout=0, isolation_level=None)) as other:
            with pytest.raises(sqlite3.OperationalError, match="locked"):
                other.execute("BEGIN IMMEDIATE")
