"""Two libraries from one start: what is new travels as drafts, and what both sides revised is for people to settle."""

from __future__ import annotations

import dataclasses
import json
import shutil
import subprocess
import sys
from pathlib import Path

import pytest

from registry.cli.app import main
from registry.entries import read_origin
from registry.errors import BadInput, Conflict, InvalidPackage, Refused
from registry.exchange.layout import FILES
from registry.opening import open_library, start_library
from registry.shelves import find_shelf

KEY, OTHER = "tallowane-antoine-low", "brindovane-kirchhoff"
TEMPERATURES = {"tallowane": (300.0, 330.0, 350.0), "brindovane": (300.0, 370.0, 400.0)}


@pytest.fixture
def sites(scenario_path, tmp_path):
    """Two team libraries that began as one file, the first with an edition of that start."""
    paths = [Path(shutil.copy(scenario_path, tmp_path / f"{name}.db")) for name in ("a", "b")]
    with open_library(paths[0]) as a, open_library(paths[1]) as b:
        a.freeze("start", author="ann", note="the shared start")
        yield a, b


def _note(library, text: str, key: str = KEY, *, author="ann", reviewer="ada"):
    """A revision that says one thing more, accepted by somebody else unless nobody is named."""
    newest = next((w.record for w in library.queue() if w.record.key == key), library.entry(key).record)
    library.revise(dataclasses.replace(newest, note=text), author=author, reason=text)
    if reviewer:
        library.review(key, accept=True, author=reviewer, note="compared with the page")


def _answers(library) -> list:
    return [_answer(library, compound, t) for compound, of_compound in TEMPERATURES.items() for t in of_compound]


def _answer(library, compound: str, kelvin: float) -> tuple[str, float, str]:
    try:
        answer = library.lookup(compound, kelvin)
    except Refused:
        return "refused", 0.0, ""
    return answer.correlation.key, answer.value, answer.correlation.note


def _read(package: Path) -> dict:
    return json.loads((package / "datapackage.json").read_text(encoding="utf-8"))["rangebook"]


def _keys(package: Path) -> set[str]:
    lines = [p.read_text(encoding="utf-8").splitlines()[1:] for p in package.glob("*.csv") if p.name != "points.csv"]
    return {line.split(",")[0] for of_file in lines for line in of_file}


def test_a_draft_over_what_counted_then_travels_as_one(sites, tmp_path):
    """A revision that nobody has reviewed yet is new too; one over a revision accepted since stays behind it."""
    a, b = sites
    _note(a, "a draft", reviewer="")
    _note(a, "accepted since", OTHER)
    _note(a, "a draft over it", OTHER, reviewer="")
    rows = a.dump(tmp_path / "package", since="start")
    assert (rows["correlations.csv"], rows["waiting"]) == (2, 1)
    assert b.load(tmp_path / "package", author="bob")["revised"] == 2
    assert {w.record.key: w.record.note for w in b.queue() if w.what == "revision"} == {
        KEY: "a draft", OTHER: "accepted since",
    }  # fmt: skip
    b.review(KEY, accept=True, author="bea", note="compared with the page")
    assert b.entry(KEY).record.note == "a draft"
    assert a.entry(KEY).waiting == 2


def test_what_is_new_arrives_as_drafts_and_then_answers_alike(sites, tmp_path):
    """A corrects and freezes; B loads what is new: nothing answers until B reviews it, then both answer alike."""
    a, b = sites
    before = _answers(b)
    corrected = dataclasses.replace(
        a.entry(KEY).record, coefficients={**a.entry(KEY).record.coefficients, "A": "14.6"}, note="an erratum"
    )
    a.revise(corrected, author="ann", reason="an invented erratum")
    a.review(KEY, accept=True, author="ada", note="compared with the page")
    new = dataclasses.replace(a.entry(OTHER).record, key="brindovane-new", evidence="standard", note="new here")
    a.record(new, author="ann")
    a.review("brindovane-new", accept=True, author="ada", note="compared with the page")
    a.freeze("second", author="ann", note="with the erratum")
    rows = a.dump(tmp_path / "package", since="start")
    assert {name: count for name, count in rows.items() if count} == {"correlations.csv": 2}
    counts = b.load(tmp_path / "package", author="bob")
    assert (counts["added"], counts["revised"], counts["unchanged"]) == (1, 1, 0)
    assert _answers(b) == before
    assert {w.record.key for w in b.queue()} >= {KEY, "brindovane-new"}
    with b._reading() as view:
        origin = read_origin(view, counts["change"])
        assert read_origin(view, 1) is None
    with a._reading() as view:
        assert origin.library == view.identity()[0]
        assert origin.root == f"{view.position}:{view.root(view.position).hex()}"
    assert origin.since == a.editions()[0][0].root
    for key in (KEY, "brindovane-new"):
        with pytest.raises(BadInput, match="somebody else must review it"):
            b.review(key, accept=True, author="bob", note="mine")
        b.review(key, accept=True, author="bea", note="compared with the page")
    assert _answers(b) == _answers(a) != before
    assert b.load(tmp_path / "package", author="bob")["change"] == 0


def test_only_what_was_touched_since_is_written(sites, tmp_path):
    """A review alone takes its record along; nothing since gives empty files; a full dump says no origin."""
    a, _ = sites
    assert not _keys_of(a, tmp_path / "empty", since=a.position)
    draft = next(w.record for w in a.queue() if w.record.kind == "correlation")
    a.review(draft.key, accept=False, author="ada", note="no such page")
    assert _keys_of(a, tmp_path / "reviewed", since="start") == {draft.key}
    _note(a, "a draft that waits", reviewer="")
    rows = a.dump(tmp_path / "waiting", since=a.position - 1)
    assert (rows["correlations.csv"], "waiting" in rows) == (1, False)
    said = _read(tmp_path / "waiting")
    assert said["since"]["position"] == a.position - 1
    assert said["position"] == a.position
    a.dump(tmp_path / "full")
    assert "rangebook" not in json.loads((tmp_path / "full" / "datapackage.json").read_text(encoding="utf-8"))
    with pytest.raises(BadInput, match="There is no change"):
        a.dump(tmp_path / "never", since=99)


def _keys_of(library, package: Path, since) -> set[str]:
    library.dump(package, since=since)
    return _keys(package)


def test_a_past_position_dumps_as_it_was(sites, tmp_path):
    """What a past position writes does not change with what is recorded later, whole or since."""
    a, _ = sites
    _note(a, "one")
    position = a.position
    a.dump(tmp_path / "whole")
    a.dump(tmp_path / "new", since="start")
    _note(a, "two")
    past = a.at(position)
    past.dump(tmp_path / "whole-later")
    past.dump(tmp_path / "new-later", since="start")
    for name in ("whole", "new"):
        for path in (tmp_path / name).iterdir():
            assert path.read_bytes() == (tmp_path / f"{name}-later" / path.name).read_bytes()


def _clash(a, b, package: Path):
    """Both sides revise one record, and A another one too."""
    _note(a, "as A reads it")
    _note(a, "only A", OTHER)
    _note(b, "as B reads it", author="bob", reviewer="bea")
    a.dump(package, since="start")


def test_a_conflict_loads_nothing_and_shows_both_sides(sites, tmp_path):
    """A record that both sides revised: nothing is loaded, dry or not, and the message shows both, who and when."""
    a, b = sites
    _clash(a, b, tmp_path / "package")
    position = b.position
    for dry_run in (True, False):
        with pytest.raises(Conflict) as caught:
            b.load(tmp_path / "package", author="bob", dry_run=dry_run)
        (clash,) = caught.value.conflicts
        assert (clash.kind, clash.key, clash.revision, clash.author) == ("correlation", KEY, 2, "bob")
        assert (clash.mine["note"], clash.theirs["note"]) == ("as B reads it", "as A reads it")
        shown = str(caught.value).splitlines()
        assert "    yours: as B reads it" in shown
        assert "    the package: as A reads it" in shown
        assert "--ours KEY" in shown[0]
        assert "nothing was loaded" in shown[0]
    assert b.position == position


@pytest.mark.parametrize("named", [KEY, "all"])
def test_ours_keeps_what_is_here(named, sites, tmp_path):
    """--ours leaves the record as it is here; the rest of the package arrives."""
    a, b = sites
    _clash(a, b, tmp_path / "package")
    counts = b.load(tmp_path / "package", author="bob", ours=[named])
    assert (counts["kept"], counts["revised"]) == (1, 1)
    assert b.entry(KEY).record.note == "as B reads it"
    assert not b.entry(KEY).waiting
    assert b.entry(OTHER).waiting == 2


@pytest.mark.parametrize("named", [KEY, "all"])
def test_theirs_arrives_as_a_draft(named, sites, tmp_path):
    """--theirs appends what the package says over what is here, as a draft; then there is nothing left to load."""
    a, b = sites
    _clash(a, b, tmp_path / "package")
    counts = b.load(tmp_path / "package", author="bob", theirs=[named])
    assert (counts["kept"], counts["revised"]) == (0, 2)
    assert (b.entry(KEY).record.note, b.entry(KEY).waiting) == ("as B reads it", 3)
    assert b.load(tmp_path / "package", author="bob")["change"] == 0
    b.review(KEY, accept=True, author="bea", note="A is right")
    b.review(OTHER, accept=True, author="bea", note="A is right")
    assert _answers(b) == _answers(a)


def test_a_key_that_is_no_conflict_is_refused(sites, tmp_path):
    """A slip in the name of a conflict must not load anything, nor a key named for both sides."""
    a, b = sites
    _clash(a, b, tmp_path / "package")
    for named, why in (
        ({"ours": [OTHER]}, "is no conflict of this package; the conflicts are: tallowane-antoine-low"),
        ({"ours": [KEY], "theirs": [KEY]}, "named for both sides"),
        ({"ours": ["all"], "theirs": ["all"]}, "named for both sides"),
    ):
        with pytest.raises(BadInput, match=why):
            b.load(tmp_path / "package", author="bob", **named)
    b.dump(tmp_path / "whole")
    with pytest.raises(BadInput, match="the conflicts are: none"):
        b.load(tmp_path / "whole", author="bob", theirs=[KEY])


# what A recorded before and after the position it dumps since, what B recorded from the same start, and what comes of
# it; "-" is a review alone, "?" goes before a draft that waits
TABLE = (
    ("", "1", "", "revised"),
    ("", "1", "1", "unchanged"),
    ("", "1", "2", "conflict"),
    ("", "1", "?2", "conflict"),
    ("", "1", "1 ?2", "unchanged"),
    ("", "1", "1 2", "unchanged"),
    ("", "1", "2 1", "unchanged"),
    ("", "1", "2 0", "revised"),
    ("", "-", "2", "unchanged"),
    ("", "1 0", "2", "unchanged"),
    ("", "1 2", "1", "revised"),
    ("", "1 2", "2 1", "revised"),
    ("", "1 2", "1 3", "conflict"),
    ("1", "2", "", "revised"),
    ("1", "2", "1", "revised"),
    ("1", "2", "2", "unchanged"),
    ("1", "2", "2 3", "unchanged"),
    ("1", "2", "3", "conflict"),
    ("1", "2", "1 0", "conflict"),
    ("1", "0", "1", "revised"),
    ("1", "0", "?1", "unchanged"),
    ("1", "0", "1 2", "conflict"),
)


@pytest.fixture(scope="session")
def alone_path(scenario_path, tmp_path_factory) -> Path:
    """The scenario with one known note, kept by one person."""
    path = Path(shutil.copy(scenario_path, tmp_path_factory.mktemp("alone") / "alone.db"))
    with open_library(path) as library:
        library.keep(solo=True, author="ann")
        _note(library, "content 0", author="ann", reviewer="ann")
    return path


def _play(library, script: str) -> None:
    for word in script.split():
        if word == "-":
            library.withdraw(KEY, author="ann", reason="an invented slip", accept=True)
            library.review(KEY, accept=True, again=True, author="ann", note="it was none")
        else:
            _note(library, f"content {word.lstrip('?')}", reviewer="" if word.startswith("?") else "ann")


@pytest.mark.parametrize(("before", "after", "here", "expected"), TABLE)
def test_which_side_revised(before, after, here, expected, alone_path, tmp_path):
    """Revisions on two sides in every order: what follows is revised, what is there unchanged, the rest a conflict."""
    paths = [Path(shutil.copy(alone_path, tmp_path / f"{name}.db")) for name in ("a", "b")]
    with open_library(paths[0]) as a, open_library(paths[1]) as b:
        _play(a, before)
        position = a.position
        _play(a, after)
        a.dump(tmp_path / "package", since=position)
        _play(b, here)
        if expected == "conflict":
            with pytest.raises(Conflict):
                b.load(tmp_path / "package", author="ann", reason="looked at", accept=True)
            return
        counts = b.load(tmp_path / "package", author="ann", reason="looked at", accept=True)
        assert {word for word in ("added", "revised", "unchanged") if counts[word]} == {expected}
        assert counts[expected] == 1
        last = {"revised": after, "unchanged": here}[expected].split()[-1]
        newest = b.queue()[-1].record if last.startswith("?") else b.entry(KEY).record
        assert newest.note == f"content {last.lstrip('?')}"


@pytest.mark.parametrize(("here", "expected"), [("", "added"), ("same", "unchanged"), ("other", "conflict")])
def test_a_key_that_is_new_at_the_origin(here, expected, sites, tmp_path):
    """A new key is added; recorded alike on both sides it is there; recorded otherwise here it is a conflict."""
    a, b = sites
    record = dataclasses.replace(a.entry(KEY).record, key="tallowane-new", note="same")
    a.record(record, author="ann")
    a.dump(tmp_path / "package", since="start")
    assert _read(tmp_path / "package")["bases"] == {}
    if here:
        b.record(dataclasses.replace(record, note=here), author="bob")
    if expected == "conflict":
        with pytest.raises(Conflict):
            b.load(tmp_path / "package", author="bob")
    else:
        assert b.load(tmp_path / "package", author="bob")[expected] == 1


def test_there_and_back_adds_nothing(sites, tmp_path):
    """What B took over from A and sends back is nothing new to A, even where A has moved on."""
    a, b = sites
    since = b.position
    _note(a, "one")
    a.dump(tmp_path / "there", since="start")
    b.load(tmp_path / "there", author="bob")
    b.review(KEY, accept=True, author="bea", note="compared with the page")
    b.dump(tmp_path / "back", since=since)
    assert a.load(tmp_path / "back", author="ann")["change"] == 0
    _note(a, "two")
    counts = a.load(tmp_path / "back", author="ann")
    assert (counts["unchanged"], counts["change"]) == (1, 0)
    a.dump(tmp_path / "again", since="start")
    assert b.load(tmp_path / "again", author="bob")["revised"] == 1


def test_a_withdrawal_travels_as_a_proposal(sites, tmp_path):
    """What A withdrew goes on answering at B until somebody there accepts the withdrawal, which is proposed once."""
    a, b = sites
    a.withdraw(KEY, author="ann", reason="an invented erratum", cause="erratum")
    assert not _keys_of(a, tmp_path / "proposed", since="start")
    a.review(KEY, accept=True, author="ada", note="it is one")
    a.dump(tmp_path / "package", since="start")
    counts = b.load(tmp_path / "package", author="bob")
    assert (counts["proposed"], counts["added"], counts["revised"]) == (1, 0, 0)
    assert b.load(tmp_path / "package", author="bob")["change"] == 0
    assert b.entry(KEY).standing == "accepted"
    b.review(KEY, kind="withdrawal", accept=True, author="bea", note="it is one")
    assert (b.entry(KEY).standing, b.entry(KEY).standing_note) == ("withdrawn", "an invented erratum")
    assert b.load(tmp_path / "package", author="bob")["change"] == 0


def test_a_withdrawal_travels_with_a_revision(sites, tmp_path):
    """Revised and then withdrawn at A: accepting the withdrawal at B leaves no older revision answering."""
    a, b = sites
    _note(a, "one")
    a.withdraw(KEY, author="ann", reason="an invented erratum")
    a.review(KEY, accept=True, author="ada", note="it is one")
    a.dump(tmp_path / "package", since="start")
    counts = b.load(tmp_path / "package", author="bob")
    assert (counts["revised"], counts["proposed"]) == (1, 1)
    b.review(KEY, kind="withdrawal", accept=True, author="bea", note="it is one")
    assert (b.entry(KEY).standing, b.entry(KEY).record.note) == ("withdrawn", "one")
    assert KEY not in {w.record.key for w in b.queue()}


def test_a_withdrawal_of_what_was_revised_here_is_not_lost(sites, tmp_path):
    """A withdrew what B has revised since: B is asked whether its revision stands."""
    a, b = sites
    _note(b, "as B reads it", author="bob", reviewer="bea")
    a.withdraw(KEY, author="ann", reason="an invented erratum")
    a.review(KEY, accept=True, author="ada", note="it is one")
    a.dump(tmp_path / "package", since="start")
    assert b.load(tmp_path / "package", author="bob")["proposed"] == 1
    (proposal,) = [w.record for w in b.queue() if w.what == "withdrawal"]
    assert proposal.of_revision == "2"
    assert proposal.reason == "an earlier revision is withdrawn in the package: an invented erratum"


@pytest.mark.parametrize("accept", [False, True])
def test_a_withdrawn_source_travels_as_one(accept, sites, tmp_path):
    """A source withdrawn at A arrives as the withdrawal of the source, and takes B's own records on it along."""
    a, b = sites
    source = a.entry(KEY).record.source
    own = dataclasses.replace(b.entry(KEY).record, key="tallowane-own", note="only at B")
    b.record(own, author="bob")
    b.review("tallowane-own", accept=True, author="bea", note="compared with the page")
    a.withdraw(source, author="ann", reason="an invented retraction", cause="retraction")
    a.review(source, kind="withdrawal", accept=True, author="ada", note="it is retracted")
    a.dump(tmp_path / "package", since="start")
    resting = {
        e.key
        for kind in ("correlations", "fixed_points", "datasets")
        for c in a.compounds()
        for e in getattr(a.dossier(c.key), kind)
        if e.record.source == source
    }
    assert _keys(tmp_path / "package") >= resting | {source}
    assert _read(tmp_path / "package")["withdrawn"] == {
        source: {"cause": "retraction", "reason": "an invented retraction"}
    }
    counts = b.load(tmp_path / "package", author="bob", accept=accept, reason="the retraction" if accept else "")
    assert (counts["proposed"], counts["reviewed"]) == ((0, 1) if accept else (1, 0))
    if not accept:
        assert b.entry(KEY).standing == "accepted"
        b.review(source, kind="withdrawal", accept=True, author="bea", note="it is retracted")
    for key in (KEY, "tallowane-own"):
        assert b.entry(key).standing == "withdrawn"
        assert b.entry(key).standing_note == f"its source {source} is withdrawn: an invented retraction"
    assert b.entry(KEY).standing_note == a.entry(KEY).standing_note
    b.dump(tmp_path / "back", since=1)
    counts = a.load(tmp_path / "back", author="ann")
    assert (counts["added"], counts["revised"], counts["proposed"]) == (1, 0, 0)
    a.dump(tmp_path / "whole")
    assert a.load(tmp_path / "whole", author="ann")["change"] == 0


@pytest.mark.parametrize("source_before", [False, True])
@pytest.mark.parametrize("as_draft_before", [False, True])
def test_a_revision_on_a_withdrawn_source_ends_the_one_before(as_draft_before, source_before, sites, tmp_path):
    """Where A answers no more, B does not go on with the revision that A has replaced."""
    a, b = sites
    source = dataclasses.replace(a.newest(a.entry(KEY).record.source).record, key="invented-reprint")
    a.record(source, author="ann")
    a.revise(dataclasses.replace(a.entry(KEY).record, source=source.key), author="ann", reason="from the reprint")
    a.review(KEY, accept=True, author="ada", note="compared with the page")
    a.withdraw(source.key, author="ann", reason="an invented retraction", cause="retraction")
    a.review(source.key, kind="withdrawal", accept=True, author="ada", note="it is retracted")
    a.dump(tmp_path / "package", since="start")
    if as_draft_before:
        b.load(tmp_path / "package", author="bob")
        assert b.entry(KEY).waiting == 2
    if as_draft_before and source_before:
        b.review(source.key, kind="withdrawal", accept=True, author="bea", note="it is retracted")
    b.load(tmp_path / "package", author="bob", accept=True, reason="the retraction")
    assert (b.entry(KEY).revision, b.entry(KEY).standing) == (2, "withdrawn")
    assert _answers(b) == _answers(a)


def test_accept_reviews_the_whole_load(sites, tmp_path):
    """With --accept the standings of the package count at once; it needs a note."""
    a, b = sites
    _note(a, "one")
    a.withdraw(OTHER, author="ann", reason="an invented erratum")
    a.review(OTHER, accept=True, author="ada", note="it is one")
    a.dump(tmp_path / "package", since="start")
    with pytest.raises(BadInput, match="needs a note"):
        b.load(tmp_path / "package", author="bob", accept=True)
    b.load(tmp_path / "package", author="bob", accept=True, reason="compared both editions")
    assert (b.entry(KEY).record.note, b.entry(KEY).standing) == ("one", "accepted")
    assert b.entry(OTHER).standing == "withdrawn"
    assert _answers(b) == _answers(a)


def test_what_the_other_side_lacks_is_named(sites, tmp_path):
    """A part of a library refers to what is older; where that is missing the load says what."""
    a, _ = sites
    _note(a, "one")
    a.dump(tmp_path / "package", since="start")
    with start_library(tmp_path / "empty.db", "none") as empty, pytest.raises(InvalidPackage) as caught:
        empty.load(tmp_path / "package", author="bob")
    assert {(p.column, p.given) for p in caught.value.problems} == {
        ("compound", "tallowane"), ("source", a.entry(KEY).record.source),
    }  # fmt: skip


@pytest.mark.parametrize(
    ("change", "said"),
    [
        ({"library": 7}, "library: it must be text"), ({"library": ""}, "library: it is empty"),
        ({"root": "7"}, "root: a root such as"), ({"position": 3}, "position must be that of the root"),
        ({"since": None}, "since.name: it must be text"), ({"bases": []}, "bases must name"),
        ({"bases": {"correlation": {KEY: "0"}}}, "bases must name"), ({"bases": {"review": {}}}, "bases must name"),
        ({"earlier": {"correlation": {KEY: ["0"]}}}, "earlier must name"),
        ({"withdrawn": []}, "withdrawn must name"), ({"withdrawn": {"s": "x"}}, "cause: it must be text"),
        ({"withdrawn": {"s": {"cause": "whim", "reason": "r"}}}, "cause: one of erratum"),
        ({"withdrawn": {"nowhere": {"cause": "other", "reason": "r"}}}, "neither in the package nor in the library"),
    ],
)  # fmt: skip
def test_an_origin_that_cannot_be_read_is_refused(change, said, sites, tmp_path):
    """Whatever is wrong in the property of the descriptor is named; nothing is loaded."""
    a, b = sites
    _note(a, "one")
    a.dump(tmp_path / "package", since="start")
    place = tmp_path / "package" / "datapackage.json"
    described = json.loads(place.read_text(encoding="utf-8"))
    described["rangebook"].update(change)
    place.write_text(json.dumps(described), encoding="utf-8")
    position = b.position
    with pytest.raises(InvalidPackage, match=said):
        b.load(tmp_path / "package", author="bob")
    assert b.position == position


def test_a_validator_of_the_standard_accepts_a_part(sites, tmp_path):
    """frictionless finds no error in a package of what is new, in folder or zip."""
    a, _ = sites
    _note(a, "one")
    a.dump(tmp_path / "folder", since="start")
    a.dump(tmp_path / "package.zip", since="start")
    script = (
        "import sys, json\nfrom frictionless import Package\n"
        "report = Package(sys.argv[1]).validate()\n"
        "print(json.dumps([report.valid, report.stats['tasks'], report.flatten(['message'])[:5]]))"
    )
    for place in ("folder/datapackage.json", "package.zip"):
        done = subprocess.run(
            [sys.executable, "-W", "ignore", "-c", script, place], cwd=tmp_path, capture_output=True, text=True,
            timeout=120, check=True,
        )  # fmt: skip
        assert json.loads(done.stdout.splitlines()[-1]) == [True, len(FILES), []]


def _run(capsys, *words: str) -> tuple[int, str, str]:
    with pytest.raises(SystemExit) as stop:
        main([str(word) for word in words])
    out, err = capsys.readouterr()
    return stop.value.code or 0, out, err


def test_the_commands_move_between_sites(sites, tmp_path, capsys):
    """dump --since, load with a conflict (exit 4), and load that says which side counts."""
    a, b = sites
    _note(a, "as A reads it")
    _note(b, "as B reads it", author="bob", reviewer="bea")
    package = tmp_path / "new.zip"
    code, out, _ = _run(capsys, "dump", package, "--since", "start", "--library", a.place, "--json")
    assert (code, json.loads(out)["rows"]["correlations.csv"]) == (0, 1)
    for dry in ([], ["--dry-run"]):
        code, _, err = _run(capsys, "load", package, "--as", "bob", "--library", b.place, *dry)
        assert code == 4
        assert "yours: as B reads it" in err
        assert "the package: as A reads it" in err
    code, out, _ = _run(capsys, "load", package, "--as", "bob", "--library", b.place, "--json")
    (clash,) = json.loads(out)["error"]["conflicts"]
    assert (code, clash["key"], clash["mine"]["note"]) == (4, KEY, "as B reads it")
    code, _, err = _run(capsys, "load", package, "--library", b.place, "--ours", OTHER)
    assert code == 2
    assert "is no conflict" in err
    code, _, err = _run(capsys, "load", package, "--library", b.place, "--accept", "--theirs", KEY)
    assert code == 2
    assert "needs a note" in err
    code, out, _ = _run(capsys, "load", package, "--as", "bob", "--library", b.place, "--ours", KEY)
    assert (code, b.position) == (0, 3)
    assert "1 kept" in out
    code, out, _ = _run(capsys, "load", package, "--as", "bob", "--library", b.place, "--theirs", "all", "--json")
    counts = json.loads(out)
    assert (code, counts["revised"], counts["kept"], counts["change"]) == (0, 1, 0, 4)


def test_a_shelf_has_no_origin():
    """The packages that come with the program are whole libraries."""
    for shelf in ("published", "scenario"):
        assert '"rangebook":' not in (find_shelf(shelf) / "datapackage.json").read_text(encoding="utf-8")


def test_answers_are_compared_where_something_answers(scenario):
    """The temperatures of these tests have answers, of more than two correlations."""
    found = _answers(scenario)
    assert all(value > 0.0 for _, value, _ in found)
    assert len({key for key, _, _ in found}) > 2
