"""Many write into one library at once: nothing is lost, nothing is doubled, nobody is told that it is locked."""

from __future__ import annotations

import sqlite3
import threading
import time
from contextlib import closing
from pathlib import Path

import pytest
from integrity import find_faults
from test_crash import run_script

from registry.errors import RevisedMeanwhile
from registry.opening import open_library, start_library
from registry.records import Source
from registry.store.engine import open_engine

WRITERS, CHANGES = 8, 250


@pytest.fixture
def empty_path(tmp_path):
    path = tmp_path / "shared.db"
    start_library(path, "none").close()
    return path


def test_eight_processes_record_2000_changes(empty_path):
    """Eight processes record 250 changes each while a ninth reads: every number was given out once, every change is
    there with its writer and its record, and the history holds."""
    report = run_script("concurring.py", "record", empty_path, WRITERS, CHANGES)
    *writers, reader = report["found"]
    assert [found for found in report["found"] if "error" in found] == []
    numbers = [number for found in writers for number in found["numbers"]]
    assert sorted(numbers) == list(range(2, WRITERS * CHANGES + 2))
    with closing(sqlite3.connect(empty_path)) as db:
        rows = db.execute(
            "SELECT c.number, c.author, r.key, r.revision FROM change c JOIN record r ON r.change = c.number "
            "WHERE c.number > 1"
        ).fetchall()
    assert {number: (author, key, revision) for number, author, key, revision in rows} == {
        number: (f"writer {writer}", f"writer-{writer}-{place}", 1)
        for writer, found in enumerate(writers)
        for place, number in enumerate(found["numbers"])
    }
    assert len(rows) == WRITERS * CHANGES
    assert find_faults(empty_path) == []
    # whoever reads meanwhile sees the history grow and never shrink
    assert reader["positions"] == sorted(reader["positions"])
    assert len(set(reader["positions"])) > 20
    # nobody comes near the time after which a writer gives up
    assert max(max(found["seconds"]) for found in report["found"]) < 15.0


def test_of_two_revisions_of_one_record_exactly_one_wins(empty_path):
    """Twenty times two processes revise what both have read: one is recorded, the other is told what it says now."""
    report = run_script("concurring.py", "revise", empty_path, 20)
    assert len(report["found"]) == 20
    for turn, pair in enumerate(report["found"], start=1):
        winners = [found for found in pair if "error" not in found]
        losers = [found for found in pair if "error" in found]
        assert winners == [{"change": turn + 2, "revision": turn + 1}]
        assert [found["error"] for found in losers] == ["RevisedMeanwhile"]
        assert f"was read in revision {turn}, but revision {turn + 1} is the newest now" in losers[0]["message"]
    with open_library(empty_path) as library:
        assert library.position == 22
    assert find_faults(empty_path) == []


def test_the_command_that_comes_second_ends_with_4(empty_path):
    """Ten times two `rangebook revise` at the same moment: one ends with 0, the other with 4 and both sides."""
    report = run_script("concurring.py", "command", empty_path, 10)
    for turn, pair in enumerate(report["found"], start=1):
        first, second = sorted(pair, key=lambda found: found["code"])
        assert (first["code"], second["code"]) == (0, 4)
        assert f"was read in revision {turn}, but revision {turn + 1} is the newest now" in second["err"]
        assert "yours: An invented report" in second["err"]
    with open_library(empty_path) as library:
        assert library.position == 12


def test_threads_of_one_library_revise_one_after_the_other(empty_path):
    """Eight threads that revise through one open library: exactly one wins each time."""

    def source(text: str) -> Source:
        return Source(key="wanted", type="report", citation=f"An invented report, {text}", note="Invented.")

    outcomes: list[str] = []

    def revise(who: int) -> None:
        try:
            library.revise(source(f"by {who}"), author=f"thread {who}", reason="An invented erratum", expect=1)
            outcomes.append("won")
        except RevisedMeanwhile:
            outcomes.append("lost")

    with open_library(empty_path) as library:
        library.record(source("as it was"), author="a steward")
        threads = [threading.Thread(target=revise, args=(who,)) for who in range(8)]
        for thread in threads:
            thread.start()
        for thread in threads:
            thread.join()
        assert sorted(outcomes) == ["lost"] * 7 + ["won"]
        assert library.position == 3


def test_a_writer_that_waits_is_not_overtaken_for_ever(empty_path):
    """A writer asks again within 11 ms, however long it has waited; SQLite's own waiting comes to ask every 100 ms."""
    waits = sorted(_measure_wait(empty_path, 0.25 + 0.013 * turn) for turn in range(9))
    assert waits[4] < 0.03


def _measure_wait(path: Path, held: float) -> float:
    """How long after the lock was let go another writer has it, that has waited for so long."""
    free: list[float] = []
    with closing(sqlite3.connect(path, isolation_level=None, check_same_thread=False)) as other:
        other.execute("BEGIN IMMEDIATE")

        def release() -> None:
            other.execute("ROLLBACK")
            free.append(time.monotonic())

        timer = threading.Timer(held, release)
        timer.start()
        engine = open_engine(path, write=True)
        with engine.begin() as connection:
            taken = time.monotonic()
            assert connection.exec_driver_sql("PRAGMA busy_timeout").scalar() == 30_000
        engine.dispose()
        timer.join()
    return taken - free[0]
