"""Kills a process with SIGKILL at a random moment while it records, many times, and looks at what it leaves.

As a script: ``python crashing.py FOLDER OPERATION ROUNDS SEED`` prints one JSON object: how many rounds, how many kills
came before, within and after an operation, how many left a journal of a half-written change, how many changes had been
reported, and every fault. The package is imported once; each process is forked and opens the library anew.
"""

from __future__ import annotations

import csv
import json
import os
import random
import shutil
import signal
import sys
import time
from collections import Counter
from collections.abc import Callable, Iterator
from contextlib import suppress
from itertools import count
from pathlib import Path
from typing import Any

from integrity import find_faults
from old_library import make_old_library

from registry.opening import open_library, start_library, upgrade_library
from registry.records import Source
from registry.shelves import find_shelf
from registry.store.recognition import read_version

SOURCES = 60
"""Sources in a package that is loaded: enough for the write to take as long as the reading."""

FRESH_EVERY = 15
"""Rounds after which an operation starts from a small library again."""


def make_template(folder: Path) -> Path:
    """A library with a source to revise."""
    path = folder / "template.db"
    with start_library(path, "scenario") as library:
        library.record(_source("revised", 0), author="a steward")
    return path


def make_package(folder: Path, number: int) -> Path:
    """A package of sources that are not in the library yet."""
    package = folder / f"package-{number}"
    if not package.exists():
        package.mkdir()
        descriptor = json.loads((find_shelf("scenario") / "datapackage.json").read_text(encoding="utf-8"))
        descriptor["resources"] = [part for part in descriptor["resources"] if part["path"] == "sources.csv"]
        (package / "datapackage.json").write_text(json.dumps(descriptor), encoding="utf-8")
        rows = [_source(f"loaded-{number}-{place}", place).content() for place in range(SOURCES)]
        names = [field["name"] for field in descriptor["resources"][0]["schema"]["fields"]]
        with (package / "sources.csv").open("w", encoding="utf-8", newline="") as file:
            writer = csv.DictWriter(file, names, restval="", lineterminator="\n")
            writer.writeheader()
            writer.writerows({"key": f"loaded-{number}-{place}", **row} for place, row in enumerate(rows))
    return package


def _source(key: str, number: int) -> Source:
    return Source(key=key, type="report", citation=f"An invented report, printing {number}", note="Invented.")


def load(path: Path, number: int) -> int:
    """One load; the number of its change."""
    with open_library(path) as library:
        return int(library.load(path.parent / f"package-{number}", author="a steward")["change"])


def revise(path: Path, number: int) -> int:
    """One revision, expecting the one that is there."""
    with open_library(path) as library:
        with library._file.reading() as view:
            (newest,) = view.current("source", ["revised"])
        record = _source("revised", number)
        done = library.revise(record, author="a steward", reason="An invented erratum", expect=newest.revision)
    return done.change.number


def freeze(path: Path, number: int) -> int:
    """One edition."""
    with open_library(path) as library:
        return library.freeze(f"edition-{number}", author="a steward", note="An invented edition").change.number


def upgrade(path: Path, number: int) -> int:
    """One upgrade; the position after it."""
    upgrade_library(path, "a steward")
    with open_library(path) as library:
        return library.position


OPERATIONS: dict[str, Callable[[Path, int], int]] = {
    "load": load,
    "revise": revise,
    "freeze": freeze,
    "upgrade": upgrade,
}


class Child:
    """A forked process that performs an operation again and again, and reports what was done."""

    def __init__(self, operation: str, path: Path, numbers: Iterator[int], times: int) -> None:
        self.reading, writing = os.pipe()
        self.process = os.fork()
        if self.process == 0:
            os.close(self.reading)
            _perform(operation, path, numbers, times, writing)
        os.close(writing)

    def kill(self, delay: float) -> tuple[list[dict[str, Any]], bool]:
        """What it reported, and whether it was in the middle of something, when it was killed after so many seconds."""
        time.sleep(delay)
        with suppress(ProcessLookupError):
            os.kill(self.process, signal.SIGKILL)
        return self.wait()

    def wait(self) -> tuple[list[dict[str, Any]], bool]:
        """The same, when it ends by itself."""
        with os.fdopen(self.reading) as pipe:
            lines = [json.loads(line) for line in pipe.read().splitlines()]
        os.waitpid(self.process, 0)
        done = [line for line in lines if "change" in line]
        if faults := [line for line in lines if "fault" in line]:
            raise AssertionError(faults[0]["fault"])
        return done, len(lines) > 2 * len(done)


def _perform(operation: str, path: Path, numbers: Iterator[int], times: int, pipe: int) -> None:
    try:
        for _ in range(times):
            number = next(numbers)
            os.write(pipe, b'{"begins": %d}\n' % number)
            told = {"change": OPERATIONS[operation](path, number), "number": number}
            os.write(pipe, json.dumps(told).encode() + b"\n")
    except BaseException as error:
        os.write(pipe, json.dumps({"fault": f"{type(error).__name__}: {error}"}).encode() + b"\n")
    finally:
        os._exit(0)


def _begin(operation: str, folder: Path) -> tuple[Path, Iterator[int]]:
    """A library to begin with, alone in a folder but for what is loaded, and numbers for what is recorded in it."""
    own = folder / operation
    if not own.exists():
        own.mkdir()
        for number in range(1, 4 * FRESH_EVERY if operation == "load" else 1):
            make_package(own, number)
    for left in own.iterdir():
        if left.is_file():
            left.unlink()
    path = own / "library.db"
    if operation == "upgrade":
        make_old_library(path)
    else:
        shutil.copy(folder / "template.db", path)
    return path, count(1)


def crash(operation: str, folder: Path, rounds: int, drawn: random.Random) -> dict[str, Any]:
    """Kill a process in the middle of an operation, so many times."""
    reach = 0.05  # the longest delay, seconds; it settles where a third of the rounds get something done
    counts: Counter[str] = Counter()
    faults: list[str] = []
    for turn in range(rounds):
        if turn % FRESH_EVERY == 0 or operation == "upgrade":
            path, _ = _begin(operation, folder)
            reported: dict[int, int] = {}
            next_number = 1
        # more of them than the delay has room for
        child = Child(operation, path, count(next_number), 1 if operation == "upgrade" else 4)
        done, inside = child.kill(drawn.uniform(0.0, reach))
        reach *= 0.9 if done else 1.05
        reported |= {line["change"]: line["number"] for line in done}
        next_number += len(done) + inside
        counts["reported"] += len(done)
        counts["within" if inside else "after" if done else "before"] += 1
        counts["half-written"] += (path.parent / "library.db-journal").exists()
        try:
            faults += [f"round {turn}: {fault}" for fault in examine(operation, path, reported)]
        except Exception as error:
            faults.append(f"round {turn}: {type(error).__name__}: {error}")
    return {"rounds": rounds, "reach": reach, **counts, "faults": faults}


def examine(operation: str, path: Path, reported: dict[int, int]) -> Iterator[str]:
    """What is wrong with a library after a kill, given the changes that were reported as done."""
    if operation == "upgrade":
        yield from _examine_upgrade(path, reported)
        return
    with open_library(path) as library:
        changes = {change.number: change for change in library.changes()}
        with library._file.reading() as view:
            keys = {row.key for kind in ("source", "edition") for row in view.kind(kind)}
    yield from find_faults(path)
    for change, number in reported.items():
        there = {
            "load": lambda n=number: all(f"loaded-{n}-{place}" in keys for place in range(SOURCES)),
            "revise": lambda c=change: changes[c].reason == "An invented erratum",
            "freeze": lambda n=number: f"edition-{n}" in keys,
        }[operation]
        if change not in changes or not there():
            yield f"change {change} was reported and is not there"
    if len(changes) < max(reported, default=0):
        yield "the history is shorter than what was reported"
    for change in list(changes.values())[2:]:
        if change.records != (SOURCES if operation == "load" else 1):
            yield f"change {change.number} is half there"
    # a journal that holds nothing to take back stays until the next change
    if left := {entry.name for entry in path.parent.iterdir() if entry.is_file()} - {path.name, f"{path.name}-journal"}:
        yield f"left beside the library: {sorted(left)}"


def _examine_upgrade(path: Path, reported: dict[int, int]) -> Iterator[str]:
    version = read_version(path)
    if version not in (1, 2) or (reported and version != 2):
        yield f"schema {version} after {len(reported)} upgrades reported"
    yield from find_faults(path)
    for backup in path.parent.glob("*.backup*"):
        if read_version(backup) != 1 or find_faults(backup):
            yield f"{backup.name} is no backup"
    upgrade_library(path, "somebody else")
    yield from find_faults(path)
    with open_library(path) as library:
        if [change.records for change in library.changes()] != [68, 1, 4, 3, 1]:
            yield "the history is not that of an upgraded library"


def main() -> None:
    folder, operation, rounds, seed = Path(sys.argv[1]), sys.argv[2], int(sys.argv[3]), int(sys.argv[4])
    make_template(folder)
    upgrade(make_old_library(folder / "warm.db"), 1)  # imports what an upgrade needs, before anything is forked
    print(json.dumps(crash(operation, folder, rounds, random.Random(seed))))


if __name__ == "__main__":
    main()
