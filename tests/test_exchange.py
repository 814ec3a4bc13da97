"""Packages: faithful both ways, the same bytes, and accepted by a validator of the standard."""

from __future__ import annotations

import csv
import io
import json
import shutil
import subprocess
import sys
import zipfile
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from registry.errors import CellProblem, InvalidPackage
from registry.exchange.dumping import build_files
from registry.exchange.layout import FILES, descriptor
from registry.exchange.package import read_package
from registry.exchange.rows import parse_rows
from registry.opening import open_library, start_library
from registry.records import KINDS, Correlation, Source
from registry.shelves import find_shelf

SHELVES = ("published", "scenario")
REVIEWED = {"accept": True, "reason": "compared with the package"}
"""A load that gives the standings of the package at once."""

# the columns of correlations.csv that every package has, in order
CORRELATION_COLUMNS = """
key compound property phase form coefficients temperature_unit value_unit window_min window_max window_unit window_basis
temperature_scale evidence uncertainty source locator obtained standing note
"""


def _files_of(package: Path) -> dict[str, bytes]:
    return {path.name: path.read_bytes() for path in package.iterdir()}


@pytest.mark.parametrize("shelf", SHELVES)
def test_dump_and_load_are_faithful(shelf, tmp_path, request):
    """dump, load into an empty library, dump again: the same content and the same bytes."""
    library = request.getfixturevalue(shelf)
    library.dump(tmp_path / "first")
    with start_library(tmp_path / "copy.db", "none") as copy:
        counts = copy.load(tmp_path / "first", author="somebody", **REVIEWED)
        assert counts["unchanged"] == counts["revised"] == 0
        copy.dump(tmp_path / "second")
        assert _files_of(tmp_path / "first") == _files_of(tmp_path / "second")
        for compound in library.compounds():
            ours, theirs = library.dossier(compound.key), copy.dossier(compound.key)
            for part in ("correlations", "fixed_points", "datasets", "preferences"):
                assert [(e.record, e.standing, e.standing_note) for e in getattr(ours, part)] == [
                    (e.record, e.standing, e.standing_note) for e in getattr(theirs, part)
                ]
            assert ours.sources == theirs.sources


@pytest.mark.parametrize("shelf", SHELVES)
def test_a_shelf_is_its_own_dump(shelf, tmp_path, request):
    """The packages that come with the program are what dump writes, byte for byte."""
    request.getfixturevalue(shelf).dump(tmp_path / "dump")
    assert _files_of(tmp_path / "dump") == _files_of(find_shelf(shelf))


@pytest.mark.parametrize("shelf", SHELVES)
def test_a_folder_and_a_zip_hold_the_same(shelf, tmp_path, request):
    """A zip holds the files of the folder, has the same bytes each time, and loads."""
    library = request.getfixturevalue(shelf)
    library.dump(tmp_path / "folder")
    library.dump(tmp_path / "one.zip")
    library.dump(tmp_path / "two.zip")
    assert (tmp_path / "one.zip").read_bytes() == (tmp_path / "two.zip").read_bytes()
    with zipfile.ZipFile(tmp_path / "one.zip") as archive:
        assert {name: archive.read(name) for name in archive.namelist()} == _files_of(tmp_path / "folder")
    with start_library(tmp_path / "copy.db", "none") as copy:
        assert copy.load(tmp_path / "one.zip", author="somebody")["change"] == 2


@pytest.mark.parametrize("shelf", SHELVES)
def test_loading_again_adds_nothing(shelf, tmp_path):
    """Loading what is there already, unchanged, records no change."""
    with start_library(tmp_path / "library.db", shelf) as library:
        position = library.position
        counts = library.load(find_shelf(shelf), author="somebody")
        assert (counts["added"], counts["revised"], counts["reviewed"], counts["change"]) == (0, 0, 0, 0)
        assert counts["unchanged"] > 50
        assert library.position == position


def test_a_dry_run_records_nothing(own_path, tmp_path):
    """--dry-run counts what would change and leaves every byte."""
    with open_library(own_path) as library:
        library.dump(tmp_path / "package")
        _edit(tmp_path / "package" / "sources.csv", "span-wagner-1996", "note", "a note")
        before = own_path.read_bytes()
        counts = library.load(tmp_path / "package", author="somebody", dry_run=True)
        assert (counts["revised"], counts["change"]) == (1, 0)
        assert own_path.read_bytes() == before


def _edit(table: Path, key: str, column: str, text: str) -> None:
    rows = list(csv.DictReader(io.StringIO(table.read_text(encoding="utf-8"))))
    for row in rows:
        if row["key"] == key:
            row[column] = text
    with table.open("w", encoding="utf-8", newline="") as stream:
        writer = csv.DictWriter(stream, list(rows[0]), lineterminator="\n")
        writer.writeheader()
        writer.writerows(rows)


def test_only_what_differs_becomes_a_revision(own_path, tmp_path):
    """An edited note is one revision; an edited standing is one review; the rest stays as it is."""
    with open_library(own_path) as library:
        library.dump(tmp_path / "package")
        table = tmp_path / "package" / "correlations.csv"
        _edit(table, "water-august", "note", "an edited note")
        _edit(table, "water-himmelblau", "standing", "withdrawn")
        _edit(table, "water-himmelblau", "standing_note", "an invented erratum")
        counts = library.load(tmp_path / "package", author="somebody", **REVIEWED)
        assert (counts["added"], counts["revised"], counts["reviewed"]) == (0, 1, 1)
        edited, withdrawn = library.entry("water-august"), library.entry("water-himmelblau")
        assert (edited.revision, edited.record.note, edited.standing) == (2, "an edited note", "accepted")
        assert (withdrawn.revision, withdrawn.standing) == (1, "withdrawn")
        assert library.entry("water-if97").revision == 1
        library.dump(tmp_path / "again")
        assert _files_of(tmp_path / "again") == _files_of(tmp_path / "package")


def test_a_withdrawal_in_a_package_is_proposed_once(own_path, tmp_path):
    """Loading the same package again, while its withdrawal waits for review, records nothing."""
    with open_library(own_path) as library:
        library.dump(tmp_path / "package")
        table = tmp_path / "package" / "correlations.csv"
        _edit(table, "water-himmelblau", "standing", "withdrawn")
        _edit(table, "water-himmelblau", "standing_note", "an invented erratum")
        first = library.load(tmp_path / "package", author="somebody")
        assert (first["proposed"], len(library.queue())) == (1, 1)
        again = library.load(tmp_path / "package", author="somebody")
        assert (again["proposed"], again["change"]) == (0, 0)
        assert [item.revision for item in library.queue()] == [1]


def test_a_withdrawal_is_not_taken_back_in_silence(own_path, tmp_path):
    """Loading an older package over a withdrawal is refused until somebody says why."""
    with open_library(own_path) as library:
        library.dump(tmp_path / "older")
        library.dump(tmp_path / "withdrawing")
        table = tmp_path / "withdrawing" / "correlations.csv"
        _edit(table, "water-himmelblau", "standing", "withdrawn")
        with pytest.raises(InvalidPackage, match="a record that is withdrawn says why"):
            library.load(tmp_path / "withdrawing", author="somebody", **REVIEWED)
        _edit(table, "water-himmelblau", "standing_note", "an invented erratum")
        counts = library.load(tmp_path / "withdrawing", author="somebody", **REVIEWED)
        assert counts["changed"] == ("correlation water-himmelblau: accepted -> withdrawn",)
        with pytest.raises(InvalidPackage, match="to accept it again say why"):
            library.load(tmp_path / "older", author="somebody", **REVIEWED)
        assert library.entry("water-himmelblau").standing == "withdrawn"
        _edit(tmp_path / "older" / "correlations.csv", "water-himmelblau", "standing_note", "the erratum was wrong")
        assert library.load(tmp_path / "older", author="somebody", **REVIEWED)["reviewed"] == 1
        assert library.entry("water-himmelblau").standing == "accepted"


def test_what_is_revised_is_told(own_path, tmp_path):
    """A spreadsheet that drops a trailing zero revises a record, and the load names record and field."""
    with open_library(own_path) as library:
        library.dump(tmp_path / "package")
        table = tmp_path / "package" / "correlations.csv"
        _edit(table, "ethanol-antoine-low", "coefficients", "A=8.20417; B=1642.89; C=230.3")
        counts = library.load(tmp_path / "package", author="somebody", dry_run=True)
        assert counts["changed"] == ("correlation ethanol-antoine-low: coefficients revised",)


def test_a_correlation_without_any_value_is_refused(own_path, tmp_path):
    """Coefficients that give no usable number anywhere in the window are refused at the door."""
    with open_library(own_path) as library:
        library.dump(tmp_path / "package")
        table = tmp_path / "package" / "correlations.csv"
        _edit(table, "ethanol-antoine-low", "coefficients", "A=8.20417; B=-164289000; C=230.300")
        with pytest.raises(InvalidPackage, match="no usable value anywhere in the window"):
            library.load(tmp_path / "package", author="somebody")


def test_an_empty_library_dumps_a_template(tmp_path):
    """An empty library dumps every file with its header, and the package loads."""
    with start_library(tmp_path / "library.db", "none") as library:
        library.dump(tmp_path / "package")
        headers = {
            p.name: p.read_text(encoding="utf-8").strip().split(",") for p in (tmp_path / "package").glob("*.csv")
        }
        assert headers == {name: [c.name for c in file.columns] for name, file in FILES.items()}
        assert library.load(tmp_path / "package", author="somebody")["change"] == 0


def test_a_draft_revision_leaves_the_accepted_one_in_force(own_path, tmp_path):
    """While a newer draft waits, the accepted revision goes on answering."""
    with open_library(own_path) as library:
        before = library.lookup("ethanol", 300.0)
        library.dump(tmp_path / "package")
        table = tmp_path / "package" / "correlations.csv"
        key = before.correlation.key
        _edit(table, key, "note", "a draft of a correction")
        library.load(tmp_path / "package", author="somebody")
        after = library.lookup("ethanol", 300.0)
        assert (after.correlation.key, after.revision, after.value) == (key, 1, before.value)
        assert (library.entry(key).revision, library.entry(key).waiting) == (1, 2)


@pytest.mark.parametrize("shelf", SHELVES)
def test_a_validator_of_the_standard_accepts_the_package(shelf, tmp_path, request):
    """frictionless, a validator of the Data Package standard, finds no error in folder or zip."""
    library = request.getfixturevalue(shelf)
    library.dump(tmp_path / "folder")
    library.dump(tmp_path / "package.zip")
    script = (
        "import sys, json\nfrom frictionless import Package\n"
        "report = Package(sys.argv[1]).validate()\n"
        "s = report.stats\n"
        "print(json.dumps([report.valid, s['errors'], s['tasks'], report.flatten(['message'])[:5]]))"
    )
    for place in ("folder/datapackage.json", "package.zip"):
        done = subprocess.run(
            [sys.executable, "-W", "ignore", "-c", script, place], cwd=tmp_path, capture_output=True, text=True,
            timeout=120, check=True,
        )  # fmt: skip
        valid, errors, tasks, messages = json.loads(done.stdout.splitlines()[-1])
        assert (valid, errors, messages) == (True, 0, [])
        assert tasks == len(list((tmp_path / "folder").glob("*.csv")))


def test_a_validator_of_the_standard_finds_a_bad_package(tmp_path, published):
    """The same validator does find a dangling reference and a word that is not allowed: the schemas say something."""
    published.dump(tmp_path / "folder")
    _edit(tmp_path / "folder" / "correlations.csv", "water-if97", "source", "nowhere")
    _edit(tmp_path / "folder" / "correlations.csv", "water-sr1-86", "evidence", "splendid")
    script = (
        "from frictionless import Package\n"
        "print(sorted({e[0] for e in Package('folder/datapackage.json').validate().flatten(['type'])}))"
    )
    done = subprocess.run(
        [sys.executable, "-W", "ignore", "-c", script], cwd=tmp_path, capture_output=True, text=True, timeout=120,
        check=True,
    )  # fmt: skip
    assert done.stdout.strip() == "['constraint-error', 'foreign-key']"


def test_the_columns_are_those_that_the_format_promises():
    """correlations.csv has the promised columns in their order; every kind of record has a file."""
    names = [column.name for column in FILES["correlations.csv"].columns]
    assert [name for name in names if name in CORRELATION_COLUMNS.split()] == CORRELATION_COLUMNS.split()
    assert set(FILES) == {
        "compounds.csv", "names.csv", "sources.csv", "correlations.csv", "fixed_points.csv", "printed_values.csv",
        "datasets.csv", "points.csv", "preferences.csv",
    }  # fmt: skip
    written = {getattr(file.record, "kind", "point") for file in FILES.values()}
    assert written == {*KINDS, "point"} - {"review", "withdrawal", "edition", "library", "origin"}


def test_columns_that_may_be_left_out_may_be_left_out(tmp_path):
    """A package without the optional columns, with a byte order mark and CRLF, loads the same."""
    package = Path(shutil.copytree(find_shelf("published"), tmp_path / "package"))
    optional = {name: {c.name for c in file.columns if c.optional} for name, file in FILES.items()}
    for table in package.glob("*.csv"):
        reader = csv.DictReader(io.StringIO(table.read_text(encoding="utf-8")))
        rows, names = list(reader), list(reader.fieldnames)
        kept = [name for name in names if name not in optional[table.name] or any(row[name] for row in rows)]
        stream = io.StringIO(newline="")
        writer = csv.DictWriter(stream, kept, lineterminator="\r\n", extrasaction="ignore")
        writer.writeheader()
        writer.writerows(rows)
        table.write_bytes(b"\xef\xbb\xbf" + stream.getvalue().encode())
    with start_library(tmp_path / "library.db", "published") as library:
        counts = library.load(package, author="somebody")
        assert counts["added"] == counts["revised"] == counts["reviewed"] == 0


prose = st.text(st.characters(exclude_categories=("Cc", "Cs", "Cn", "Zl", "Zp")), min_size=1, max_size=40)


@settings(max_examples=60)
@given(prose, st.sampled_from(("\n", "\x00", "\t")))
def test_any_text_travels_or_is_refused(text, control):
    """A text that a record accepts comes back from CSV unchanged; one with a control character is refused."""
    import unicodedata

    from registry.errors import InvalidRecord
    from registry.exchange.rows import parse_rows

    text = unicodedata.normalize("NFC", text)
    try:
        source = Source(key="s", type="book", citation=text)
    except InvalidRecord:
        assert text != text.strip() or text[0] in "=+-@" or "\ufeff" in text
        return
    data = build_files([(source, ("", ""))])["sources.csv"]
    problems: list = []
    rows = parse_rows(FILES["sources.csv"], data, problems)
    assert not problems
    assert rows[0].cells["citation"] == text
    with pytest.raises(InvalidRecord, match="control character"):
        Source(key="s", type="book", citation=f"a{control}b")


@settings(max_examples=150)
@given(data=st.data())
def test_a_damaged_package_is_refused_whole_or_loads(data, tmp_path_factory):
    """Whatever bytes are changed in a table, loading either works or names problems; no other error escapes."""
    root = tmp_path_factory.mktemp("damaged")
    package = Path(shutil.copytree(find_shelf("scenario"), root / "package"))
    table = package / data.draw(st.sampled_from(sorted(p.name for p in package.iterdir())))
    raw = bytearray(table.read_bytes())
    for _ in range(data.draw(st.integers(1, 3))):
        place = data.draw(st.integers(0, len(raw) - 1))
        raw[place : place + data.draw(st.integers(0, 3))] = data.draw(st.binary(max_size=3))
    table.write_bytes(bytes(raw))
    with start_library(root / "library.db", "none") as library:
        try:
            library.load(package, author="somebody")
        except InvalidPackage as error:
            named = {problem.file for problem in error.problems}
        else:
            named = set()
        assert named <= {*FILES, "datapackage.json"}
        assert library.position == (1 if named else 2)


def test_the_descriptor_describes_every_column():
    """Each column of each file stands in the descriptor with what it allows."""
    described = {r["path"]: r["schema"]["fields"] for r in descriptor(list(FILES))["resources"]}
    for name, file in FILES.items():
        assert [field["name"] for field in described[name]] == [column.name for column in file.columns]
        assert all(field["description"] for field in described[name])
    assert "coefficients" in Correlation.__dataclass_fields__


def _only(package: Path, *files: str) -> Path:
    """The package cut down to some files."""
    for path in package.glob("*.csv"):
        if path.name not in files:
            path.unlink()
    (package / "datapackage.json").write_text(json.dumps({"resources": [{"path": name} for name in files]}))
    return package


def test_an_edited_standing_note_is_a_review(own_path, tmp_path):
    """A note beside a standing is part of the review: editing it alone is recorded, once."""
    with open_library(own_path) as library:
        library.dump(tmp_path / "package")
        _edit(tmp_path / "package" / "correlations.csv", "water-august", "standing_note", "looked at again")
        assert library.load(tmp_path / "package", author="somebody", **REVIEWED)["reviewed"] == 1
        assert library.entry("water-august").standing_note == "looked at again"
        assert library.load(tmp_path / "package", author="somebody", **REVIEWED)["change"] == 0


def test_a_new_revision_is_reviewed_anew(own_path, tmp_path):
    """A revision inherits no standing: recorded as accepted it is accepted by its own review."""
    with open_library(own_path) as library:
        library.dump(tmp_path / "package")
        table = tmp_path / "package" / "correlations.csv"
        for number in (2, 3):
            _edit(table, "water-august", "note", f"edit {number}")
            library.load(tmp_path / "package", author="somebody", **REVIEWED)
            entry = library.entry("water-august")
            assert (entry.revision, entry.standing) == (number, "accepted")


@pytest.mark.parametrize("later", ["draft", "declined"])
def test_a_preference_stays_in_force_while_a_later_one_waits(later, tmp_path):
    """A draft or declined revision of a preference leaves the accepted one in force, for lookups as for dumps."""
    with start_library(tmp_path / "library.db", "scenario") as library:
        library.dump(tmp_path / "package")
        before = library.dossier("tallowane").preferred()
        table = tmp_path / "package" / "preferences.csv"
        key = next(csv.DictReader(io.StringIO(table.read_text(encoding="utf-8"))))["key"]
        _edit(table, key, "reason", "another reason")
        _edit(table, key, "standing", later)
        _edit(table, key, "standing_note", "invented")
        library.load(_only(tmp_path / "package", "preferences.csv"), author="somebody", **REVIEWED)
        with open_library(tmp_path / "library.db") as again:
            assert again.dossier("tallowane").preferred() == before != frozenset()


def test_a_preference_in_force_counts_against_a_circle(tmp_path):
    """A preference that a declined revision left in force cannot be reversed by another one."""
    with start_library(tmp_path / "library.db", "scenario") as library:
        library.dump(tmp_path / "package")
        package = _only(tmp_path / "package", "preferences.csv")
        rows = list(csv.DictReader(io.StringIO((package / "preferences.csv").read_text(encoding="utf-8"))))[:1]
        declined = {**rows[0], "reason": "another reason", "standing": "declined", "standing_note": "invented"}
        reverse = {**rows[0], "key": "reverse", "correlation": rows[0]["over"], "over": rows[0]["correlation"]}
        for row in (declined, reverse):
            with (package / "preferences.csv").open("w", encoding="utf-8", newline="") as stream:
                writer = csv.DictWriter(stream, list(row), lineterminator="\n")
                writer.writeheader()
                writer.writerow(row)
            if row is declined:
                library.load(package, author="somebody", **REVIEWED)
        with pytest.raises(InvalidPackage, match="round in a circle"):
            library.load(package, author="somebody")


def test_loading_a_dump_back_adds_nothing_though_a_draft_waits(own_path, tmp_path):
    """What is in force is there already: a dump loaded back leaves a waiting draft as it is."""
    with open_library(own_path) as library:
        library.dump(tmp_path / "package")
        _edit(tmp_path / "package" / "correlations.csv", "water-august", "note", "a draft")
        _edit(tmp_path / "package" / "correlations.csv", "water-august", "standing", "draft")
        library.load(tmp_path / "package", author="somebody")
        library.dump(tmp_path / "again")
        assert library.load(tmp_path / "again", author="somebody")["change"] == 0
        assert (library.entry("water-august").revision, library.entry("water-august").waiting) == (1, 2)


def test_one_bad_row_hides_no_dangling_reference(tmp_path):
    """A bad cell in sources.csv does not keep a source that is nowhere from being reported."""
    package = Path(shutil.copytree(find_shelf("scenario"), tmp_path / "package"))
    sources = csv.DictReader(io.StringIO((package / "sources.csv").read_text(encoding="utf-8")))
    _edit(package / "sources.csv", next(sources)["key"], "year", "19x1")
    _edit(package / "correlations.csv", "tallowane-riedel", "source", "nowhere")
    with start_library(tmp_path / "library.db", "none") as library, pytest.raises(InvalidPackage) as caught:
        library.load(package, author="somebody")
    assert [(p.file, p.given) for p in caught.value.problems] == [
        ("sources.csv", "19x1"), ("correlations.csv", "nowhere"),
    ]  # fmt: skip


def test_the_folder_one_stands_in_can_be_loaded(tmp_path, monkeypatch):
    """`rangebook load .` loads the package in the working folder."""
    with start_library(tmp_path / "library.db", "none") as library:
        monkeypatch.chdir(find_shelf("scenario"))
        assert library.load(".", author="somebody")["change"] == 2


def test_a_zip_with_an_entry_twice_is_refused(tmp_path):
    """Which of two entries counts is nobody's guess."""
    with zipfile.ZipFile(tmp_path / "p.zip", "w") as archive, pytest.warns(UserWarning, match="Duplicate"):
        for _ in range(2):
            archive.writestr("datapackage.json", json.dumps({"resources": [{"path": "names.csv"}]}))
    with pytest.raises(InvalidPackage, match="is there twice"):
        read_package(tmp_path / "p.zip")


def test_decomposed_letters_are_composed_and_stray_quotes_refused():
    """A file in Unicode normal form D reads as form C; a letter behind a closing quote is no CSV."""
    problems: list[CellProblem] = []
    (row,) = parse_rows(FILES["names.csv"], "compound,name\nx,Me\u0301thane\n".encode(), problems)
    assert (row.cells["name"], problems) == ("M\u00e9thane", [])
    assert parse_rows(FILES["names.csv"], b'compound,name\nx,"a"b\n', problems) == []
    assert [(p.line, p.allowed[:12]) for p in problems] == [(2, "it is no CSV")]
