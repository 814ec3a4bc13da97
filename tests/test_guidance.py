"""What a command says when it has done something that may surprise, or cannot do what was asked."""

from __future__ import annotations

import json
import re
import sys
import tomllib
from pathlib import Path

import pytest

from registry.cli import recording
from registry.cli.app import main
from registry.opening import start_library

LOW = "brindovane-antoine-low"
ERRATUM = ("--cause", "erratum", "--reason", "invented erratum")


@pytest.fixture
def run(tmp_path, capsys, monkeypatch):
    """Run a command as ann on a library of her own with the invented scenario: exit code, stdout, stderr."""
    start_library(tmp_path / "own.db", "scenario", "ann").close()
    monkeypatch.setenv("RANGEBOOK_LIBRARY", str(tmp_path / "own.db"))
    monkeypatch.setenv("RANGEBOOK_AUTHOR", "ann")
    monkeypatch.delenv("VISUAL", raising=False)

    def call(*words: str) -> tuple[int, str, str]:
        with pytest.raises(SystemExit) as stopped:
            main(list(words))
        captured = capsys.readouterr()
        return int(stopped.value.code or 0), captured.out, captured.err

    return call


def _verdict(run, *words: str) -> str:
    code, out, _ = run("review", LOW, *words, "--note", "compared", "--as", "bob")
    assert code == 0
    return out.partition(": ")[2].splitlines()[0]


def test_a_verdict_on_a_withdrawal_is_not_taken_for_one_on_the_record(run):
    """Accepted, the record is out; declined, it stays; accepted once more, it is back, and that is said."""
    subject = f"the correlation {LOW}"
    run("withdraw", LOW, *ERRATUM)
    assert _verdict(run, "--decline") == f"{subject} stays as it was: its withdrawal was declined."
    run("withdraw", LOW, *ERRATUM)
    assert _verdict(run, "--accept") == f"{subject} withdrawn."
    assert _verdict(run, "--accept", "--again") == f"{subject} accepted again; it was withdrawn (invented erratum)."
    run("revise", LOW, "--set", "note=first", "--reason", "invented")
    assert _verdict(run, "--decline") == f"{subject}, revision 2, declined."
    told = f"{subject}, revision 2, accepted again; it was declined (compared)."
    assert _verdict(run, "--accept", "--again") == told
    run("revise", LOW, "--set", "note=second", "--reason", "invented")
    assert _verdict(run, "--accept") == f"{subject}, revision 3, accepted."


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (("review", "brindovane", "--accept", "--note", "x"), "The compound brindovane is not reviewed: it counts as"),
        (("review", LOW[:-1], "--accept", "--note", "x"), f"There is no record {LOW[:-1]!r}. Nearest: {LOW}"),
        (("withdraw", "brindovane", *ERRATUM), "The compound brindovane is not withdrawn: it is corrected by"),
        (("list", "--edition", "first"), "There is no edition 'first'. `rangebook editions` shows what there is."),
        (("withdraw", LOW, *ERRATUM, "--kind", "curve"), "--kind 'curve' given; compound, name, source"),
        (("revise", LOW, "--set", "A=22", "--expect", "7"), f"The correlation {LOW} has no revision 7; its newest is"),
        (
            ("review", "brindovane-cox-draft", "--accept", "--note", "x", "--expect", "3"),
            "has no revision 3; its newest",
        ),
        (
            ("record", "name", "--compound", "water", "--name", "ice"),
            "no compound with this key. `rangebook record compound`",
        ),
        (("revise", "tallowane-riedel-first", "--set", "reason=x", "--reason", "y"), "say it anew: `rangebook prefer`"),
    ],
)
def test_what_cannot_be_done_is_told_as_it_is(words, told, run):
    """A record of another kind is not called unknown, and the next step is named."""
    code, _, err = run(*words)
    assert code == 2
    assert told in err


def test_a_revision_that_somebody_overtook_is_told_in_json(run):
    """Both sides, field by field, for a program that merges them."""
    run("revise", LOW, "--set", "note=first", "--reason", "invented")
    code, out, _ = run("revise", LOW, "--set", "note=other", "--expect", "1", "--reason", "invented", "--json")
    error = json.loads(out)["error"]
    assert (code, error["kind"], error["of_kind"], error["key"]) == (4, "RevisedMeanwhile", "correlation", LOW)
    assert (error["expected"], error["found"]) == (1, 2)
    assert (error["mine"]["note"], error["theirs"]["note"]) == ("other", "first")


def test_a_template_is_one_object_in_json(run):
    """--json holds for --template too."""
    code, out, err = run("record", "dataset", "--template", "--json")
    document = json.loads(out)
    assert (code, err, document["kind"]) == (0, "", "dataset")
    assert tomllib.loads(document["sheet"])["kind"] == "dataset"


def test_what_was_edited_is_kept_when_it_cannot_be_recorded(run, tmp_path, monkeypatch):
    """A good sheet with a source that is not there, or without a reason, goes into a file that --file takes."""
    script = tmp_path / "editor.py"
    script.write_text(
        "import pathlib, sys\n"
        "path = pathlib.Path(sys.argv[2]); old, new = sys.argv[1].split('>')\n"
        "path.write_text(path.read_text().replace(old, new))\n"
    )
    monkeypatch.setenv("EDITOR", f"{sys.executable} {script} invented-measurements-e>handbook-none")
    code, _, err = run("revise", LOW, "--reason", "invented")
    assert code == 2
    assert "source: 'handbook-none' given; there is no source with this key." in err
    kept = Path(re.search(rf"kept at (\S+)\. Correct it, then: rangebook revise {LOW} --file \1\n", err)[1])
    monkeypatch.setenv("EDITOR", f"{sys.executable} {script} 22.14808>22.15808")
    code, _, err = run("revise", LOW)
    assert (code, "A revision says why" in err) == (2, True)
    kept.unlink()
    kept = Path(re.search(r"kept at (\S+)\. ", err)[1])
    code, out, _ = run("revise", LOW, "--file", str(kept), "--reason", "invented")
    assert (code, "revision 2, revised" in out) == (0, True)
    kept.unlink()


def test_what_was_answered_is_kept_when_it_cannot_be_recorded(run, monkeypatch):
    """Twenty answers are not lost for a compound that is not there."""
    answers = iter(["water", "oxidane"])
    monkeypatch.setattr(recording, "can_ask", lambda: True)
    monkeypatch.setattr(recording, "ask_on_terminal", lambda prompt: next(answers))
    code, _, err = run("record", "name")
    assert code == 2
    kept = Path(re.search(r"kept at (\S+)\. Correct it, then: rangebook record name --file \1\n", err)[1])
    kept.write_text(kept.read_text().replace('"water"', '"brindovane"'))
    assert run("record", "name", "--file", str(kept))[0] == 0
    kept.unlink()


@pytest.mark.parametrize("columns", [60, 80, 110])
def test_a_table_keeps_to_the_screen(columns, run, monkeypatch):
    """Where the last column has no room beside the others it stands beneath them, headed the same way."""
    monkeypatch.setenv("COLUMNS", str(columns))
    out = run("revise", LOW, "--set", "A=22.15808", "--dry-run")[1]
    head, row = (line for line in out.splitlines() if line.startswith("  compound") or line.startswith("  brindovane"))
    beside = columns == 110
    assert head.endswith("from -> to") is beside
    assert f"{LOW} r1 ->" in row or not beside
    assert f"\n      {LOW} r1 -> {LOW} r2\n" in out or beside
    if columns >= 80:
        assert max(len(line) for line in out.splitlines()) <= columns
