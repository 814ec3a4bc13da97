"""The commands of a library's memory: what they record, print, and refuse."""

from __future__ import annotations

import json
import re
import sys
import tomllib
from pathlib import Path

import pytest

from registry.cli.app import main
from registry.opening import open_library, start_library

LOW = "brindovane-antoine-low"
NEW = (
    "--key", "brindovane-new", "--compound", "brindovane", "--property", "vapor-pressure", "--phase", "liquid",
    "--form", "antoine-log10", "--coefficients", "A=7.1; B=1500; C=-40", "--temperature-unit", "K",
    "--value-unit", "mmHg", "--window-min", "300", "--window-max", "400", "--window-unit", "K",
    "--window-basis", "printed", "--temperature-scale", "ITS-90", "--evidence", "standard",
    "--source", "invented-handbook-b", "--locator", "p. 1", "--obtained", "seen",
)  # fmt: skip


@pytest.fixture
def run(tmp_path, capsys, monkeypatch):
    """Run a command as ann on a library of her own with the invented scenario: exit code, stdout, stderr."""
    start_library(tmp_path / "own.db", "scenario", "ann").close()
    monkeypatch.setenv("RANGEBOOK_LIBRARY", str(tmp_path / "own.db"))
    monkeypatch.setenv("RANGEBOOK_AUTHOR", "ann")
    for name in ("EDITOR", "VISUAL"):
        monkeypatch.delenv(name, raising=False)

    def call(*words: str) -> tuple[int, str, str]:
        with pytest.raises(SystemExit) as stopped:
            main(list(words))
        captured = capsys.readouterr()
        return int(stopped.value.code or 0), captured.out, captured.err

    return call


def _json(run, *words: str) -> dict:
    code, out, err = run(*words, "--json")
    assert (code, err) == (0, "")
    return json.loads(out)


def test_a_correlation_is_recorded_from_options(run):
    """One option a field; the draft waits, and the answer says how to review it."""
    code, out, err = run("record", "correlation", *NEW, "--reason", "from the new handbook")
    assert (code, err) == (0, "")
    assert out == (
        "Change 2: the correlation brindovane-new recorded.\n"
        "It waits for review: rangebook review brindovane-new --accept --note ...\n"
    )
    assert run("lookup", "brindovane", "330K")[0] == 3
    code, out, _ = run("lookup", "brindovane", "330K", "--drafts")
    assert code == 0
    assert "mmHg" not in out
    assert "kPa (DRAFT)" in out
    assert "revision 1, draft" in out
    assert run("review", "brindovane-new", "--accept", "--note", "seen", "--as", "bob")[0] == 0
    assert run("lookup", "brindovane", "330K")[0] == 0


def test_what_is_missing_is_named_off_a_terminal(run):
    """Nothing is asked where nobody can answer."""
    code, out, err = run("record", "source", "--key", "a")
    assert (code, out) == (2, "")
    assert err.startswith("The source lacks --type and --citation.")
    code, _, err = run("record", "correlation", *NEW[:-2], "--obtained", "heard")
    assert code == 2
    assert "obtained: 'heard' given; one of seen, memory is allowed." in err


def test_a_record_sheet_is_written_edited_and_recorded(run, tmp_path):
    """A template names every field; a sheet exported from a revision expects that revision."""
    code, out, _ = run("record", "source", "--template")
    assert code == 0
    assert set(tomllib.loads(out)) >= {"kind", "key", "type", "citation", "year"}
    sheet = tmp_path / "new.toml"
    sheet.write_text('kind = "source"\nkey = "b"\ntype = "book"\nyear = 1999\ncitation = "invented"\n')
    assert run("record", "source", "--file", str(sheet))[0] == 0
    assert json.loads(run("show", "b", "--json")[1])["year"] == "1999"
    assert run("record", "source", "--file", str(sheet), "--key", "c")[2].startswith("Both --file and fields")
    assert run("record", "source", "--file", str(tmp_path / "none"))[0] == 2
    exported = tmp_path / "low.toml"
    assert run("revise", LOW, "--export", str(exported))[0] == 0
    assert run("revise", LOW, "--export", str(exported))[2].startswith(f"{exported} exists already")
    exported.write_text(exported.read_text().replace("22.14808", "22.15808"))
    assert run("revise", LOW, "--set", "locator=first", "--reason", "invented")[0] == 0
    code, out, err = run("revise", LOW, "--file", str(exported), "--reason", "invented")
    assert code == 4
    assert "was read in revision 1, but revision 2 is the newest now. Nothing was recorded." in err
    assert "    yours: A=22.15808" in err
    assert "    revision 2: A=22.14808" in err
    assert "    yours: invented table 1\n    revision 2: first" in err


def test_a_revision_shows_what_it_does_to_the_numbers(run):
    """Fields, the correlation's own values, and what the library would answer; --dry-run records nothing."""
    code, out, err = run("revise", LOW, "--set", "A=22.15808", "--dry-run")
    assert (code, err) == (0, "")
    # ln p = A - B/(T + C): 0.01 more in A is a factor of exp(0.01), 1.00502 %
    assert "A  22.14808 -> 22.15808" in out
    assert "Its values change by up to +1.005 % (at 250 K), 1.01 % in the mean." in out
    assert re.search(r"brindovane +vapor-pressure +250 to 310 K +changes +\+1.01 % +250 K +1.01 %", out)
    assert out.endswith("Nothing was recorded (--dry-run).\n")
    document = _json(run, "revise", LOW, "--set", "A=22.15808", "-n")
    assert document["largest_percent"] == pytest.approx(1.0050167, rel=1e-6)
    assert document["fields"] == [{"field": "A", "before": "22.14808", "after": "22.15808"}]
    assert [n["kind"] for n in document["numbers"]] == ["changes"]
    code, _, err = run("revise", LOW, "--set", "A=22.15808")
    assert (code, err) == (2, "A revision says why: give --reason. Nothing was recorded.\n")


@pytest.mark.parametrize(
    ("given", "told"),
    [
        ("nothing=1", "A correlation has no field 'nothing'."),
        ("windowmax=1", "Nearest: window-max"),
        ("Z=1", "A correlation has no field 'Z'."),
        ("A", "changes no field"),
        ("key=x", "a key stays. `rangebook record` records something new"),
        ("window_max=", "window_max: it is empty"),
        ("A=8,2", "coefficient A: '8,2' is not a printed number"),
        ("coefficients=A", "coefficients such as A=8.07131"),
        ("compound=tallowane", "the key is recorded for brindovane"),
    ],
)
def test_a_field_that_cannot_be_set_is_told(given, told, run):
    """Exit code 2, what is wrong, and nothing recorded."""
    code, _, err = run("revise", LOW, "--set", given, "--reason", "invented")
    assert code == 2
    assert told in err
    assert json.loads(run("show", LOW, "--json")[1])["revision"] == 1


def test_a_record_is_edited_in_an_editor(run, tmp_path, monkeypatch):
    """$EDITOR changes the sheet; left as it is or emptied, nothing is recorded; a bad one is kept."""
    script = tmp_path / "editor.py"
    script.write_text(
        "import pathlib, sys\n"
        "path = pathlib.Path(sys.argv[2]); text = path.read_text()\n"
        "old, new = sys.argv[1].split('>')\n"
        "path.write_text(text.replace(old, new) if old else '')\n"
    )
    monkeypatch.setenv("EDITOR", f"{sys.executable} {script} 22.14808>22.15808")
    code, out, _ = run("revise", LOW, "--reason", "invented")
    assert code == 0
    assert "Change 2: the correlation brindovane-antoine-low, revision 2, revised." in out
    for edit in ("nothing>nothing", ">"):
        monkeypatch.setenv("EDITOR", f"{sys.executable} {script} {edit}")
        code, out, err = run("revise", LOW, "--reason", "invented")
        assert (code, out, err) == (0, "", "Nothing was recorded: the sheet was left empty or as it was.\n")
    monkeypatch.setenv("EDITOR", f"{sys.executable} {script} 22.15808>22,1")
    code, _, err = run("revise", LOW, "--reason", "invented")
    assert code == 2
    kept = re.search(r"What you wrote is kept at (\S+)\. Correct it, then: rangebook revise \S+ --file \1\n", err)[1]
    assert "22,1" in Path(kept).read_text(encoding="utf-8")
    monkeypatch.setenv("EDITOR", "/no/such/editor")
    assert "cannot be run" in run("revise", LOW, "--reason", "invented")[2]
    monkeypatch.delenv("EDITOR")
    assert run("revise", LOW, "--reason", "invented")[2].startswith("There is no terminal and no $EDITOR.")


def test_a_review_needs_a_verdict_a_note_and_another_person(run):
    """Each missing thing is told; a declined draft leaves the queue."""
    run("record", "correlation", *NEW)
    assert run("review", "brindovane-new", "--note", "x")[2].startswith("No verdict was given.")
    assert run("review", "brindovane-new", "--accept")[2].startswith("A review says what was looked at")
    assert "somebody else must review it" in run("review", "brindovane-new", "--accept", "--note", "x")[2]
    code, out, _ = run("review", "brindovane-new", "--decline", "--note", "misread", "--as", "bob")
    assert (code, out) == (0, "Change 3: the correlation brindovane-new declined.\n")
    assert "brindovane-new" not in run("queue")[1]


def test_the_queue_tells_who_waits_since_when_and_why(run, monkeypatch):
    """As a table and as JSON, with the screening state when there is one; at an earlier change too."""
    run("withdraw", "brindovane-kirchhoff", "--cause", "erratum", "--reason", "misprint")
    waiting = _json(run, "queue")["waiting"]
    assert waiting[-1].pop("recorded_at").endswith("Z")
    assert waiting[-1] == {
        "kind": "withdrawal", "key": "withdrawal:correlation:brindovane-kirchhoff", "revision": 1,
        "what": "withdrawal", "change": 2, "author": "ann", "reason": "misprint", "note": None, "screening": None,
    }  # fmt: skip
    assert len(_json(run, "queue", "--as-of", "1")["waiting"]) == len(waiting) - 1
    monkeypatch.setenv("COLUMNS", "100")
    out = run("queue")[1]
    assert re.search(r"withdrawal +brindovane-kirchhoff r1 +misprint\n", out)


def test_withdrawing_a_source_lists_what_rests_on_it(run):
    """Before it is reviewed and when it goes."""
    code, out, _ = run("withdraw", "invented-evaluation-c", "--cause", "retraction", "--reason", "retracted")
    assert code == 0
    assert "records rest on it and go with it once it is reviewed:" in out
    assert "correlation  brindovane-kirchhoff" in out
    document = _json(run, "review", "invented-evaluation-c", "--accept", "--note", "x", "--as", "bob")
    assert {"kind": "correlation", "key": "brindovane-kirchhoff"} in document["resting"]
    assert run("withdraw", LOW)[2] == "Every decision says why: give --reason.\n"


def test_editions_answer_as_they_did(run):
    """Every reading command takes an edition, a change or a date."""
    code, out, _ = run("freeze", "2026-Q4", "--note", "basis of invented project 7")
    assert code == 0
    assert re.fullmatch(r"Edition 2026-Q4 is frozen at change 1, rules 1\. .*\n  1:[0-9a-f]{64}\n", out)
    assert run("freeze", "2026-Q5")[2].startswith("An edition says what it is for")
    run("withdraw", "brindovane-kirchhoff", "--reason", "misprint")
    run("review", "brindovane-kirchhoff", "--accept", "--note", "x", "--as", "bob")
    assert run("lookup", "brindovane", "400K")[0] == 3
    for words in (("--edition", "2026-q4"), ("--as-of", "1"), ("--as-of", "2026-Q4"), ("--as-of", "3")):
        document = _json(run, "lookup", "brindovane", "400K", *words)
        assert document["answers"][0]["correlation"] == "brindovane-kirchhoff"
        assert document["position"] == (3 if words[1] == "3" else 1)
    assert _json(run, "lookup", "brindovane", "400K", "--edition", "2026-Q4")["as_of"] == "edition 2026-Q4, change 1"
    assert "as of edition 2026-Q4, change 1" in run("coverage", "brindovane", "--edition", "2026-Q4")[1]
    assert json.loads(run("show", "brindovane-kirchhoff", "--as-of", "1", "--json")[1])["standing"] == "accepted"
    assert "as of change 1" in run("list", "--as-of", "1")[1]
    editions = _json(run, "editions")["editions"]
    assert [(e["name"], e["position"], e["rules"], e["note"]) for e in editions] == [
        ("2026-Q4", 1, 1, "basis of invented project 7")
    ]
    assert _json(run, "editions", "--as-of", "1")["editions"] == []
    assert run("lookup", "brindovane", "400K", "--edition", "a", "--as-of", "1")[2].startswith("Both --edition and")
    assert run("lookup", "brindovane", "400K", "--edition", "nothing")[0] == 2


def test_a_difference_has_the_promised_shape(run):
    """Numbers first, as ranges with the largest and the mean percent and where; then the records."""
    run("freeze", "before", "--note", "invented")
    run("revise", LOW, "--set", "A=22.15808", "--reason", "misread digit")
    run("review", LOW, "--accept", "--note", "x", "--as", "bob")
    document = _json(run, "diff", "before")
    number = document["numbers"][0]
    assert list(number)[:1] == ["compound"]
    assert {k: number[k] for k in ("compound", "property", "from_K", "to_K", "kind")} == {
        "compound": "brindovane", "property": "vapor-pressure", "from_K": 250.0, "to_K": 310.0, "kind": "changes",
    }  # fmt: skip
    assert number["largest_percent"] == pytest.approx(1.0050167, rel=1e-6)
    assert number["mean_percent"] == pytest.approx(1.0050167, rel=1e-6)
    assert 250.0 <= number["at_K"] <= 310.0
    assert [(r["kind"], r["what"]) for r in document["records"]] == [("correlation", "revised"), ("edition", "added")]
    out = run("diff", "before")[1]
    assert out.index("In numbers:") < out.index("2 records differ:")
    assert "Nothing differs." in run("diff", "before", "1")[1]
    assert "no change 99" in run("diff", "99")[2]


def test_a_history_tells_who_when_why_and_what_changed(run):
    """Field by field, with the reviews."""
    run(
        "revise",
        LOW,
        "--set",
        "A=22.15808",
        "--set",
        "metastable_below=",
        "--set",
        "locator=p. 2",
        "--reason",
        "misread digit",
    )
    run("review", LOW, "--accept", "--note", "against the table", "--as", "bob")
    events = _json(run, "history", LOW)["events"]
    assert [(e["what"], e["revision"], e["author"], e["reason"]) for e in events[2:]] == [
        ("revised", 2, "ann", "misread digit"), ("accepted", 2, "bob", "against the table"),
    ]  # fmt: skip
    assert events[2]["fields"] == [
        {"field": "A", "before": "22.14808", "after": "22.15808"},
        {"field": "locator", "before": "invented table 1", "after": "p. 2"},
    ]
    out = run("history", LOW)[1]
    assert "bob: accepted, revision 2" in out
    assert "locator  invented table 1 -> p. 2" in out
    assert run("history", "nothing")[0] == 2


def test_a_library_is_said_to_be_kept_by_one_person(run, tmp_path):
    """When it is started, or later; said again, nothing is recorded."""
    code, out, _ = run("start", "--solo")
    assert (code, out.endswith("own.db is kept by one person.\n")) == (0, True)
    assert "already" in run("start", "--solo")[1]
    assert run("record", "correlation", *NEW, "--accept")[1] == (
        "Change 3: the correlation brindovane-new recorded and accepted.\n"
    )
    assert run("start")[0] == 2
    other = str(tmp_path / "other.db")
    assert run("start", "--solo", "--shelf", "none", "--library", other)[0] == 0
    with open_library(other) as library:
        assert library.newest("library").record.kept_by == "one-person"


def test_a_preference_is_recorded_and_reviewed(run):
    """Which goes before which, and why."""
    run("record", "correlation", *NEW, "--as", "bob")
    run("review", "brindovane-new", "--accept", "--note", "x")
    code, out, _ = run("prefer", "brindovane-kirchhoff", "--over", "brindovane-new", "--reason", "one equation")
    assert code == 0
    assert out.startswith("Change 4: brindovane-kirchhoff over brindovane-new to be preferred.\nIt waits for review:")
    key = "brindovane-kirchhoff-over-brindovane-new"
    assert run("review", key, "--accept", "--note", "x", "--as", "bob")[0] == 0
    assert "A steward's preference sets brindovane-new aside" in run("lookup", "brindovane", "380K")[1]


@pytest.mark.parametrize(
    "words",
    [
        ("verify", "--against", ""), ("list", "--as-of", ""), ("lookup", "brindovane", "350K", "--edition", ""),
        ("queue", "--as-of", "", "--edition", "start"), ("diff", "1", ""), ("freeze", "q", "--note", "n", "--as", ""),
    ],
    ids=" ".join,
)  # fmt: skip
def test_an_option_left_empty_is_not_one_left_out(words, run):
    """A variable that was not set does not turn a question about the past into one about today."""
    code, out, err = run(*words)
    assert (code, out) == (2, "")
    assert err
