"""Many processes of the program for the price of one start: a process that has imported it forks each of them.

Run as a script it reads one request a line, ``{"words": [...], "seconds": s, "bytes": n}``, and answers with
``{"code", "out", "err"}``; a command that needs more time or memory ends with a code of its own.
"""

from __future__ import annotations

import contextlib
import json
import os
import resource
import subprocess
import sys
import tempfile
from collections.abc import Iterator


def _run(words: list[str], seconds: int, size: int, out: int, err: int) -> None:
    os.dup2(out, 1)
    os.dup2(err, 2)
    resource.setrlimit(resource.RLIMIT_CPU, (seconds, seconds))
    resource.setrlimit(resource.RLIMIT_AS, (size, size))
    from registry.cli.app import main

    code = 0
    try:
        main(words)
    except SystemExit as stop:
        code = stop.code or 0
    except BaseException as error:
        print(f"Traceback: {error!r}", file=sys.stderr)
        code = 1
    sys.stdout.flush()
    sys.stderr.flush()
    os._exit(code)


def _serve() -> None:
    import registry.cli.app
    import registry.opening
    import registry.verdicts  # noqa: F401

    for line in sys.stdin:
        asked = json.loads(line)
        with tempfile.TemporaryFile("w+") as out, tempfile.TemporaryFile("w+") as err:
            child = os.fork()
            if child == 0:
                _run(asked["words"], asked["seconds"], asked["bytes"], out.fileno(), err.fileno())
            _, status = os.waitpid(child, 0)
            texts = []
            for file in (out, err):
                file.seek(0)
                texts.append(file.read())
        code = os.waitstatus_to_exitcode(status)
        print(json.dumps({"code": code, "out": texts[0], "err": texts[1]}), flush=True)


class Forking:
    """Runs commands of the program, each in a process of its own."""

    def __init__(self, process: subprocess.Popen[str]) -> None:
        self._process = process

    def run(self, *words: str, seconds: int = 20, size: int = 2 * 2**30) -> tuple[int, str, str]:
        """Exit code (negative for a signal), output and messages."""
        self._process.stdin.write(json.dumps({"words": words, "seconds": seconds, "bytes": size}) + "\n")
        self._process.stdin.flush()
        answer = json.loads(self._process.stdout.readline())
        return answer["code"], answer["out"], answer["err"]


@contextlib.contextmanager
def start_forking() -> Iterator[Forking]:
    """A process that forks others, until the block ends."""
    with subprocess.Popen(
        [sys.executable, __file__], stdin=subprocess.PIPE, stdout=subprocess.PIPE, text=True,
        env={**os.environ, "PYTHONPATH": os.pathsep.join(path or os.getcwd() for path in sys.path)},
    ) as process:  # fmt: skip
        yield Forking(process)
        process.stdin.close()


if __name__ == "__main__":
    _serve()
