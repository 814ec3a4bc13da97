"""Performs operations where the disk is full, or a file or folder must not be written, and reports what comes of it.

As a script it prints a JSON list, one object a case: the operation, what hinders it, the error with its message or the
change that was recorded, and what has become of the library.
"""

from __future__ import annotations

import json
import os
import resource
import shutil
import sqlite3
import sys
import tempfile
from collections.abc import Callable, Iterator
from contextlib import closing
from itertools import chain
from pathlib import Path
from typing import Any

from crashing import OPERATIONS, make_package, make_template
from integrity import find_faults
from old_library import make_old_library

from registry.opening import open_library, start_library
from registry.store import schema
from registry.store.recognition import read_version

NOBODY = 65534
ROOM = (-160_000, -100_000, -65_536, -20_000, 0, 1, 500, 2000, 4096, 8192, 16384, 32768, 65536, 131072, 4_000_000)
"""Bytes that a file may have beyond the size of the library; with less than none no page can be written or kept."""


def start(path: Path, number: int) -> int:
    """A new library beside the one that is there."""
    with start_library(path.with_name("new") / "new.db", "scenario") as library:
        return library.position


def look(path: Path, number: int) -> int:
    """A lookup; the position that it was answered at."""
    with open_library(path) as library:
        return library.lookup("brindovane", 300.0).position


DOING: dict[str, Callable[[Path, int], int]] = {**OPERATIONS, "start": start, "look": look}


def attempt(operation: str, path: Path, hinder: Callable[[], None]) -> dict[str, Any]:
    """Do something in a process of its own that is hindered first."""
    reading, writing = os.pipe()
    child = os.fork()
    if child == 0:
        try:
            hinder()
            told: dict[str, Any] = {"change": DOING[operation](path, 1)}
        except BaseException as error:
            told = {"error": type(error).__name__, "message": str(error).replace(str(path.parent), "{folder}")}
        os.write(writing, json.dumps(told).encode())
        os._exit(0)
    os.close(writing)
    os.waitpid(child, 0)
    with os.fdopen(reading) as pipe:
        return json.loads(pipe.read())


def _prepare(folder: Path, operation: str) -> Path:
    own = folder / "own"
    if own.exists():
        own.chmod(0o755)
        shutil.rmtree(own)
    own.mkdir()
    path = own / "library.db"
    if operation == "upgrade":
        make_old_library(path)
    else:
        shutil.copy(folder / "template.db", path)
    make_package(own, 1)
    return path


def _describe(path: Path, before: bytes, told: dict[str, Any]) -> dict[str, Any]:
    own = path.parent
    own.chmod(0o755)
    read_version(path)  # whoever reads next takes back what could not be taken back without room
    return {
        **told,
        "identical": path.read_bytes() == before,
        "faults": find_faults(path),
        "left": _list(path),
    }


def _list(path: Path) -> list[str]:
    """What lies beside the library, but for the package that is loaded."""
    names = (entry.relative_to(path.parent) for entry in path.parent.rglob("*"))
    return sorted(str(name) for name in names if name.parts[0] not in (path.name, "package-1"))


def fill_disk(folder: Path) -> Iterator[dict[str, Any]]:
    """Every operation with so much room and no more."""
    for operation in (*OPERATIONS, "start"):
        for room in ROOM:
            path = _prepare(folder, operation)
            before = path.read_bytes()
            limit = max(room if operation == "start" else len(before) + room, 0)
            told = attempt(operation, path, lambda n=limit: resource.setrlimit(resource.RLIMIT_FSIZE, (n, n)))
            yield {"operation": operation, "hindered": f"{room} bytes", **_describe(path, before, told)}


def _become_nobody() -> None:
    if os.geteuid() == 0:
        os.setgroups([])
        os.setgid(NOBODY)
        os.setuid(NOBODY)


def forbid_writing(folder: Path) -> Iterator[dict[str, Any]]:
    """Every operation on a file, in a folder, or both, that must only be read."""
    for operation in (*OPERATIONS, "start", "look"):
        for name, file_mode, folder_mode in (("file", 0o444, 0o777), ("folder", 0o666, 0o555), ("both", 0o444, 0o555)):
            if operation == "start" and name == "file":
                continue
            path = _prepare(folder, operation)
            before = path.read_bytes()
            path.chmod(file_mode)
            path.parent.chmod(folder_mode)
            told = attempt(operation, path, _become_nobody)
            yield {"operation": operation, "hindered": name, **_describe(path, before, told)}


def leave_half_written(path: Path, target: Path) -> None:
    """At `target` what a process leaves that dies while it writes pages: some are new, the journal has the old ones."""
    with closing(sqlite3.connect(path, isolation_level=None)) as db:
        db.execute("PRAGMA cache_size=1")  # pages are written before the commit
        db.execute("BEGIN IMMEDIATE")
        db.execute("CREATE TABLE half (a TEXT)")
        for _ in range(200):
            db.execute("INSERT INTO half VALUES (?)", ("x" * 1000,))
        target.write_bytes(path.read_bytes())
        target.with_name(f"{target.name}-journal").write_bytes(path.with_name(f"{path.name}-journal").read_bytes())
        db.execute("ROLLBACK")


def break_off(folder: Path) -> Iterator[dict[str, Any]]:
    """A lookup where a dead writer's change would have to be taken back, and must not."""
    path = _prepare(folder, "look")
    leave_half_written(folder / "template.db", path)
    path.parent.chmod(0o555)
    told = attempt("look", path, _become_nobody)
    path.parent.chmod(0o755)
    yield {"operation": "look", "hindered": "broken off", **told, "left": _list(path)}


def main() -> None:
    with tempfile.TemporaryDirectory() as name:
        folder = Path(name)
        folder.chmod(0o755)
        make_template(folder)
        # the program may lie where nobody else can read; its modules are imported by then, its migrations are read
        migrations = Path(shutil.copytree(schema.find_migrations(), folder / "migrations"))
        schema.find_migrations = lambda: migrations
        # imports whatever is needed while that can be read
        for operation, perform in DOING.items():
            perform(_prepare(folder, operation), 1)
        cases = fill_disk(folder) if sys.argv[1] == "disk" else chain(forbid_writing(folder), break_off(folder))
        print(json.dumps([*cases]))


if __name__ == "__main__":
    main()
