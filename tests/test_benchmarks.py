"""The benchmarks run and verify their values; nothing here is timed."""

from __future__ import annotations

import json
import subprocess
import sys
from pathlib import Path

import pytest

SCRIPT = Path(__file__).with_name("benchmarks") / "run.py"
ENTRIES = {
    "three forms, random order": 1.0,
    "three forms, touching chosen too": None,
    "five Antoine windows, random order": 1.4,
    "five Antoine windows, sorted order": 1.0,
    "temperatures at pressures, five Antoine windows": 12.0,
    "temperatures at pressures, three forms": 12.0,
    "temperatures at pressures, water": 12.0,
    "rangebook lookup water 25C": 1.3,
    "one temperature, water": 4.0,
    "one temperature, n-decane": 4.0,
    "one temperature, ethanol": 4.0,
    "lookup, long history over many compounds, just opened": 1.3,
    "lookup, long history over many compounds, half-way back": 1.3,
    "lookup, long history over many compounds, warm": 1.3,
    "lookup, long history of one compound, just opened": 1.3,
    "lookup, long history of one compound, half-way back": 1.3,
    "lookup, long history of one compound, warm": 1.3,
    "verify a history, 5 records a change": 3.0,
    "verify a history, 1 record a change": 3.0,
    "a long table as csv": 3.0,
    "memory of a long table over a short one": 1.5,
    "three forms, random order, memory kept": None,
    "three forms, touching chosen too, memory kept": None,
    "five Antoine windows, random order, memory kept": None,
    "five Antoine windows, sorted order, memory kept": None,
}
"""Every measurement with its bar, at most so many times the plain way; None where it only informs."""


@pytest.fixture(scope="module")
def run(tmp_path_factory):
    """One quick run: what it wrote and printed."""
    path = tmp_path_factory.mktemp("benchmarks") / "results.json"
    command = [sys.executable, "-W", "error", str(SCRIPT), "--quick", "--output", str(path)]
    done = subprocess.run(command, capture_output=True, text=True, encoding="utf-8", check=False, timeout=300)
    assert done.returncode == 0, done.stderr
    return json.loads(path.read_text(encoding="utf-8")), done.stdout


def test_every_measurement_is_there_with_its_bar(run):
    """The file holds each measurement once, with the bar it is held against and a ratio above zero."""
    found, _ = run
    assert {entry["name"]: entry["bar"] for entry in found["entries"]} == ENTRIES
    assert len(found["entries"]) == len(ENTRIES)
    assert all(0.0 < entry["ratio_lowest"] <= entry["ratio_highest"] for entry in found["entries"])


def test_holds_says_whether_a_ratio_is_within_its_bar(run):
    """`holds` is yes exactly where the ratio is at most the bar; without a bar it is empty."""
    for entry in run[0]["entries"]:
        expected = None if entry["bar"] is None else entry["ratio"] <= entry["bar"]
        assert entry["holds"] is expected, entry["name"]


def test_every_value_with_a_bar_was_verified(run):
    """No measurement with a bar goes without a check of its values, and all hold."""
    found, _ = run
    verified = {entry["name"]: entry["verified"]["holds"] for entry in found["entries"] if entry["bar"] is not None}
    assert verified == {name: True for name, bar in ENTRIES.items() if bar is not None}
    assert found["verified"] is True


def test_array_values_equal_the_plain_expressions(run):
    """Every temperature is answered, by the window it lies in, within 1e-12 of the plain expression."""
    checked = [
        entry["verified"] for entry in run[0]["entries"] if "largest_relative_difference" in entry.get("verified", {})
    ]
    assert len(checked) == 6
    for verified in checked:
        assert verified["points"] > 0
        assert verified["refused"] == verified["answered_by_another"] == 0
        assert verified["largest_relative_difference"] <= 1e-12


def test_a_warm_lookup_sees_another_process(run):
    """What another process loads, and then revises, is in the next lookup of a library that is open."""
    entry = next(entry for entry in run[0]["entries"] if entry["name"] == "one temperature, water")
    before, first, again, revised, revised_again = entry["verified"]["another_process"]["values"]
    assert before is None
    assert first == again != revised == revised_again


def test_the_table_shows_every_measurement(run):
    """One line for each measurement under a heading."""
    found, printed = run
    heading, *lines = printed.splitlines()
    assert heading.split() == ["name", "ratio", "spread", "bar", "holds"]
    assert [line[:64].strip() for line in lines] == [entry["name"] for entry in found["entries"]]


def test_the_machine_is_described(run):
    """The numbers can be read beside what they depend on."""
    assert {"python", "numpy", "sqlite", "sqlalchemy", "processors"} <= set(run[0]["machine"])
