"""The README: what it shows is what the program prints, and it knows every command."""

from __future__ import annotations

import re
import shlex
import sys
from pathlib import Path

import pytest

from registry.cli.app import main
from registry.cli.commands import COMMANDS
from registry.opening import start_library

ROOT = Path(__file__).parents[1]
README = (ROOT / "README.md").read_text(encoding="utf-8")
BLOCKS = re.findall(r"```console\n(.*?)```", README, flags=re.DOTALL)
SESSIONS = [block for block in BLOCKS if block.startswith("$ rangebook")]
VARYING = re.compile(r"\d{4}-\d\d-\d\d(T[\d:.]+Z)?|(?<=:)[0-9a-f]{64}|(?<=library )[0-9a-f]{32}")
"""What no two runs share: dates and times, roots, names of libraries."""


def _mask(text: str) -> str:
    """A text without what varies, and without how that makes columns wider and lines break."""
    return " ".join(VARYING.sub("...", text).split())


def _split(block: str) -> list[tuple[str, str]]:
    """Commands and outputs of a session."""
    parts = re.split(r"^\$ ", block, flags=re.MULTILINE)[1:]
    return [(part.split("\n", 1)[0], part.split("\n", 1)[1].strip("\n")) for part in parts]


@pytest.fixture(scope="module")
def folder(tmp_path_factory):
    """A folder as the tour has it: the published shelf as the default library, the scenario beside it."""
    root = tmp_path_factory.mktemp("tour")
    start_library(root / "default.db", "published").close()
    return root


@pytest.fixture
def tour(folder, monkeypatch):
    """The surroundings of the tour."""
    monkeypatch.chdir(folder)
    monkeypatch.setenv("RANGEBOOK_LIBRARY", "default.db")
    monkeypatch.delenv("COLUMNS", raising=False)
    monkeypatch.setenv("RANGEBOOK_AUTHOR", "steward")
    return folder


def test_the_tour_shows_real_output(tour, capsys):
    """Each command of the tour, in its order, prints what the README shows, messages and exit codes included."""
    for line, expected in (step for block in SESSIONS for step in _split(block)):
        words = shlex.split(line)
        if "&&" in words or "|" in words or words[0] != "rangebook":
            pytest.fail(f"the tour keeps to plain commands: {line}")
        echo = words[-3:] if words[-3:-1] == [";", "echo"] else []
        with pytest.raises(SystemExit) as stopped:
            main(words[1 : len(words) - len(echo)])
        captured = capsys.readouterr()
        shown = captured.out + captured.err + (f"{int(stopped.value.code or 0)}\n" if echo else "")
        assert _mask(shown.strip("\n")) == _mask(expected), line


@pytest.mark.parametrize("command", COMMANDS)
def test_every_command_is_in_the_readme_and_has_help(command, capsys):
    """Each command is shown in the README; its help has a sentence and an example."""
    assert f"rangebook {command}" in README
    with pytest.raises(SystemExit):
        main([command, "--help"])
    text = capsys.readouterr().out
    assert f"rangebook {command}" in text
    assert "Example: rangebook" in text
    assert "--json" in text


def test_the_two_commands_are_one_line_each():
    """The README's first two commands install and answer, then test; the check runs them as they stand."""
    first, second = re.findall(r"```sh\n(.*?)\n```", README, flags=re.DOTALL)[:2]
    assert "\n" not in first + second
    assert first.endswith("rangebook lookup water 25C")
    assert "[test]" in second


def test_the_caution_is_in_the_readme():
    """Relief, storage, transport and exposure decisions, and who comes first, are named."""
    for words in ("relief", "storage", "transport", "exposure", "local codes", "licensed"):
        assert words in README.lower()


def test_the_python_example_runs(tour, capsys):
    """The Python block of the README runs and prints what its comments say."""
    block = re.search(r"```python\n(.*?)```", README, flags=re.DOTALL)[1]
    expected = re.findall(r"# -> (.*)", block)
    exec(compile(block, "README.md", "exec"), {})
    assert capsys.readouterr().out.splitlines() == expected
    assert len(expected) >= 4
    assert sys.version_info >= (3, 11)


def test_the_readme_counts_the_shelf(published):
    """The numbers of correlations, compounds, fixed points and values that the README names are the shelf's."""
    dossiers = [published.dossier(entry.key) for entry in published.compounds()]
    correlations = sum(len(dossier.correlations) for dossier in dossiers)
    with_some = sum(bool(dossier.correlations) for dossier in dossiers)
    fixed = sum(len(dossier.fixed_points) for dossier in dossiers)
    points = sum(len(entry.record.points) for dossier in dossiers for entry in dossier.datasets)
    assert f"{correlations} correlations for {with_some} compounds" in README
    assert f"{fixed} fixed points and {points} independent table values" in README
    assert len(dossiers) - with_some == 3
