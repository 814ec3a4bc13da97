"""Many processes that write into one library at once, and report what became of it.

As a script, ``python concurring.py record LIBRARY PROCESSES CHANGES`` lets each process record so many sources, and
``python concurring.py revise LIBRARY TIMES`` lets two revise one source at the same moment, again and again; with
``command`` for ``revise`` they do so by the command line. It prints one JSON object. The package is imported once; each
process is forked and opens the library anew.
"""

from __future__ import annotations

import contextlib
import io
import json
import os
import sys
import time
from collections.abc import Callable
from pathlib import Path
from typing import Any

from registry.opening import open_library
from registry.records import Source


def _source(key: str, text: str) -> Source:
    return Source(key=key, type="report", citation=f"An invented report, {text}", note="Invented.")


def run_together(works: list[Callable[[], Any]], delay: float = 0.2) -> list[Any]:
    """What each work returns, or the error it raised; all begin at one moment, each in a process of its own."""
    begins = time.monotonic() + delay
    children: list[tuple[int, int]] = []
    for work in works:
        reading, writing = os.pipe()
        child = os.fork()
        if child == 0:
            _report(work, begins, writing)
        os.close(writing)
        children.append((child, reading))
    found: list[Any] = []
    for child, reading in children:
        with os.fdopen(reading) as pipe:
            found.append(json.loads(pipe.read()))
        os.waitpid(child, 0)
    return found


def _report(work: Callable[[], Any], begins: float, pipe: int) -> None:
    try:
        time.sleep(max(begins - time.monotonic(), 0.0))
        told = json.dumps(work())
    except BaseException as error:
        told = json.dumps({"error": type(error).__name__, "message": str(error)})
    data = told.encode()
    while data:
        data = data[os.write(pipe, data) :]
    os._exit(0)


def record_many(path: Path, writer: int, changes: int) -> dict[str, list[Any]]:
    """Record sources, a change each; their numbers, and how long each took."""
    numbers: list[int] = []
    seconds: list[float] = []
    with open_library(path) as library:
        for place in range(changes):
            start = time.perf_counter()
            record = _source(f"writer-{writer}-{place}", f"volume {writer}, printing {place}")
            done = library.record(record, author=f"writer {writer}", reason=f"Printing {place}")
            seconds.append(time.perf_counter() - start)
            numbers.append(done.change.number)
    return {"numbers": numbers, "seconds": seconds}


def read_until(path: Path, position: int) -> dict[str, list[Any]]:
    """Open the library and read, again and again, until it has come to a position; what was seen, and the waits."""
    positions: list[int] = []
    seconds: list[float] = []
    grown = time.monotonic()
    # not for ever, if the writers have failed
    while (not positions or positions[-1] < position) and time.monotonic() < grown + 40.0:
        start = time.perf_counter()
        with open_library(path) as library:
            positions.append(library.position)
            library.compounds()
        if len(positions) > 1 and positions[-1] > positions[-2]:
            grown = time.monotonic()
        seconds.append(time.perf_counter() - start)
        time.sleep(0.02)
    return {"positions": positions, "seconds": seconds}


def revise_once(path: Path, who: str, expect: int) -> dict[str, Any]:
    """Revise the one source, expecting a revision."""
    with open_library(path) as library:
        record = _source("wanted", f"as {who} found revision {expect}")
        done = library.revise(record, author=who, reason="An invented erratum", expect=expect)
    return {"change": done.change.number, "revision": done.revision}


def command_once(path: Path, who: str, expect: int) -> dict[str, Any]:
    """The same by the command; its exit code and messages."""
    from registry.cli.app import main as run

    words = ["revise", "wanted", "--set", f"citation=An invented report, as {who} found revision {expect}"]
    out, err, code = io.StringIO(), io.StringIO(), 0
    with contextlib.redirect_stdout(out), contextlib.redirect_stderr(err):
        try:
            run(
                [
                    *words,
                    "--expect",
                    str(expect),
                    "--reason",
                    "An invented erratum",
                    "--as",
                    who,
                    "--library",
                    str(path),
                ]
            )
        except SystemExit as stop:
            code = int(stop.code or 0)
    return {"code": code, "err": err.getvalue()}


def main() -> None:
    revise = {"revise": revise_once, "command": command_once}.get(sys.argv[1])
    path, numbers = Path(sys.argv[2]), [int(word) for word in sys.argv[3:]]
    start = time.perf_counter()
    found: list[Any] = []
    if revise is None:
        writers, changes = numbers
        works = [lambda w=w: record_many(path, w, changes) for w in range(writers)]
        found = run_together([*works, lambda: read_until(path, writers * changes + 1)])
    else:
        with open_library(path) as library:
            library.record(_source("wanted", "as it was"), author="a steward")
        for turn in range(1, numbers[0] + 1):
            both = [lambda w=w, t=turn: revise(path, w, t) for w in ("Ann", "Bert")]
            found.append(run_together(both, 0.02))
    print(json.dumps({"found": found, "took": time.perf_counter() - start}))


if __name__ == "__main__":
    main()
