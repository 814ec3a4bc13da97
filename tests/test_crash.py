"""Killed, without room or without permission: the library holds, what was reported is there, nothing is half there."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path

import pytest
from crashing import OPERATIONS

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
    import os

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
    assert len(cases) == 17
    for case in cases:
        assert case["faults"] == [], case
        if case["operation"] == "look":
            assert (case["change"], case["identical"], case["left"]) == (2, True, [])
        else:
            _check_refused(case)
