"""Killed, without room or without permission: the library holds, what was reported is there, nothing is half there."""

from __future__ import annotations

import json
import os
import subprocess
import sys
from pathlib import Path

import pytest
from crashing import OPERATIONS
from hindering import leave_half_written

from registry.opening import open_library

TESTS = Path(__file__).parent
ROUNDS = 75
"""For each of four operations: 300 kills."""


def run_script(name: str, *arguments: object) -> dict:
    """What a script beside the tests reports."""
    command = [sys.executable, str(TESTS / name), *map(str, arguments)]
    path = {"PYTHONPATH": f"{TESTS.parent}:{TESTS}"}
    done = subprocess.run(command, capture_output=True, text=True, timeout=300, env={**_environment(), **path})
    assert done.returncode == 0, done.stderr
    return json.loads(done.stdout)


def _environment() -> dict[str, str]:

    return {name: value for name, value in os.environ.items() if not name.startswith("RANGEBOOK")}


@pytest.mark.parametrize("operation", OPERATIONS)
def test_a_kill_at_any_moment_leaves_a_whole_library(operation, tmp_path):
    """SIGKILL at 75 random moments of each operation: the library opens, everything follows from its records, every
    change that was reported is there and none is half there; an upgrade is done, or can be done again."""
    found = run_script("crashing.py", tmp_path, operation, ROUNDS, 20261201)
    assert found["faults"] == []
    assert found["rounds"] == ROUNDS
    # the kills do land where it hurts
    assert found["within"] >= ROUNDS // 4
    assert found["half-written"] >= ROUNDS // 15
    assert found["reported"] >= ROUNDS // 10


REFUSALS = {
    "load": "{folder}/library.db cannot be written: ",
    "revise": "{folder}/library.db cannot be written: ",
    "freeze": "{folder}/library.db cannot be written: ",
    "upgrade": "{folder}/library.db cannot be upgraded: ",
    "start": "No library can be made at {folder}/new/new.db: ",
}


def _check_refused(case: dict) -> None:
    """A message for a person (exit code 2), the library byte for byte as it was, nothing beside it."""
    assert case["error"] == "BadInput", case
    assert case["message"].startswith(REFUSALS[case["operation"]])
    assert case["message"].endswith((". Nothing was changed.", ". Nothing was left behind."))
    assert (case["identical"], case["left"]) == (True, [])


def test_without_room_nothing_is_changed():
    """With so many bytes to a file and no more, from too few to enough: a message and nothing changed, or all done."""
    cases = run_script("hindering.py", "disk")
    refused: dict[str, int] = dict.fromkeys(REFUSALS, 0)
    done = dict(refused)
    for case in cases:
        assert case["faults"] == [], case
        if "error" in case:
            _check_refused(case)
            refused[case["operation"]] += 1
        else:
            done[case["operation"]] += 1
            assert case["change"] == {"upgrade": 5, "start": 1}.get(case["operation"], 3)
            assert case["left"] == {
                "upgrade": ["library.db.schema-1.backup"], "start": ["new", "new/new.db"]
            }.get(case["operation"], [])  # fmt: skip
    assert min(refused.values()) >= 3
    assert min(done.values()) >= 1


def test_without_permission_nothing_is_changed_and_lookups_go_on():
    """A file, a folder, or both that must only be read: every verb says so, a lookup answers, nothing is changed."""
    cases = run_script("hindering.py", "permission")
    assert len(cases) == 17 + 1
    broken = cases.pop()
    assert broken["error"] == "NotALibrary"
    assert "a change was broken off and the file cannot be written to take it back" in broken["message"]
    assert broken["left"] == ["library.db-journal"]
    for case in cases:
        assert case["faults"] == [], case
        if case["operation"] == "look":
            assert (case["change"], case["identical"], case["left"]) == (2, True, [])
        else:
            _check_refused(case)


def test_what_a_dead_writer_left_is_taken_back_by_the_next_reader(own_path, tmp_path):
    """Opening a library next to the journal of a broken-off change gives the library as it was, and no journal."""
    whole = own_path.read_bytes()
    left = tmp_path / "left" / "own.db"
    left.parent.mkdir()
    leave_half_written(own_path, left)
    assert left.read_bytes() != whole
    with open_library(left) as library:
        assert library.lookup("water", 300.0).value > 0.0
    assert left.read_bytes() == whole
    assert [path.name for path in left.parent.iterdir()] == ["own.db"]


def test_a_library_that_is_open_takes_back_what_a_dead_writer_left(own_path):
    """A reader that was there before goes on, warm and cold."""
    whole = own_path.read_bytes()
    spare = own_path.with_name("spare.db")
    spare.write_bytes(whole)
    with open_library(own_path) as library:
        before = library.lookup("water", 300.0).value
        half = own_path.with_name("half.db")
        leave_half_written(spare, half)
        # into the same file, as a writer would have
        with own_path.open("r+b") as file:
            file.write(half.read_bytes())
        half.with_name("half.db-journal").rename(own_path.with_name("own.db-journal"))
        assert library.lookup("water", 300.0).value == before
        assert library.lookup("ammonia", 250.0).value > 0.0
    assert own_path.read_bytes() == whole
    assert not own_path.with_name("own.db-journal").exists()
