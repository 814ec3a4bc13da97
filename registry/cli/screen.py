"""Printing for people and for programs.

Results go to stdout, messages to stderr; colour only on a terminal that has
not asked for none.
"""

from __future__ import annotations

import contextlib
import json
import math
import os
import shutil
import sys
import textwrap
from collections.abc import Iterable, Iterator, Mapping, Sequence
from typing import Any

__all__ = [
    "CAUTION",
    "OF_ABSOLUTE",
    "complain",
    "emphasize",
    "format_facts",
    "name_mark",
    "name_past",
    "print_facts",
    "print_json",
    "print_table",
    "say",
    "width",
    "wrap",
]

CAUTION = (
    "Check the source and measured data before decisions on relief, storage, transport or exposure; "
    "local codes and licensed practice come first."
)

OF_ABSOLUTE = "Percentages and factors are of the absolute pressure, not of the gauge pressure."
"""What stands by values in a gauge unit."""

LEAST = 24
"""Columns that broken text takes at least."""


def _is_terminal() -> bool:
    return sys.stdout is not None and sys.stdout.isatty()


def width() -> int:
    """Columns to use: the terminal's, between 60 and 110; 100 off a terminal."""
    if not _is_terminal() and "COLUMNS" not in os.environ:
        return 100
    return max(60, min(110, shutil.get_terminal_size((100, 24)).columns))


def emphasize(text: str, code: str = "1") -> str:
    """Text in bold or a colour, where that is wanted."""
    plain = os.environ.get("NO_COLOR") or os.environ.get("TERM") == "dumb" or not _is_terminal()
    return text if plain else f"\x1b[{code}m{text}\x1b[0m"


def say(text: str = "", end: str = "\n") -> None:
    """A line of a result, or several lines with their own end."""
    try:
        print(text, end=end, flush=True)
    except UnicodeEncodeError:  # a terminal that knows only ASCII
        print(text.encode("ascii", "replace").decode(), end=end)
    except BrokenPipeError:
        # the reader has gone: nothing more to say, and nothing to flush at exit
        os.dup2(os.open(os.devnull, os.O_WRONLY), sys.stdout.fileno())
        raise SystemExit(0) from None


def name_past(label: str) -> str:
    """What a heading says of the position that is looked at; nothing for the newest."""
    return f", as of {label}" if label else ""


def name_mark(mark: str) -> str:
    """What stands beside a value that no accepted window gives; nothing where one does."""
    return f" ({mark.upper()})" if mark else ""


def complain(text: str) -> None:
    """A message, on stderr."""
    stream = sys.stderr
    if stream is None:
        return
    encoding = stream.encoding or "utf-8"
    with contextlib.suppress(OSError):  # whoever read the messages has gone
        print(text.encode(encoding, "backslashreplace").decode(encoding), file=stream)


def print_json(content: Any) -> None:
    """One JSON object; numbers that JSON cannot hold become null."""
    say(json.dumps(_finite(content), ensure_ascii=False, indent=2, allow_nan=False))


def _finite(content: Any) -> Any:
    if isinstance(content, float):
        return content if math.isfinite(content) else None
    if isinstance(content, Mapping):
        return {key: _finite(value) for key, value in content.items()}
    if isinstance(content, (list, tuple)):
        return [_finite(value) for value in content]
    return content


def wrap(text: str, indent: int, total: int | None = None) -> str:
    """Text broken to the screen, every line after the first indented."""
    room = max(LEAST, (total or width()) - indent)
    lines = textwrap.wrap(text, room, break_long_words=False, break_on_hyphens=False) or [""]
    return ("\n" + " " * indent).join(lines)


def print_facts(facts: Iterable[tuple[str, str]], indent: int = 2) -> None:
    """Labels and texts in two columns; empty texts are left out."""
    for line in format_facts(facts, indent):
        say(line)


def format_facts(facts: Iterable[tuple[str, str]], indent: int = 2) -> Iterator[str]:
    """The lines of `print_facts`."""
    rows = [(label, text) for label, text in facts if text]
    margin = indent + max((len(label) for label, _ in rows), default=0) + 2
    for label, text in rows:
        yield f"{' ' * indent}{label.ljust(margin - indent)}{wrap(text, margin)}"


def print_table(
    headers: Sequence[str], rows: Sequence[Sequence[str]], right: Sequence[bool] = (), indent: int = 2
) -> None:
    """A table with columns as wide as they need; the last ones wrap, or stand beneath where there is no room."""
    sides = [*right, *([False] * len(headers))][: len(headers)]
    widths = [max(len(str(row[i])) for row in (headers, *rows)) for i in range(len(headers))]
    margin = indent + sum(widths[:-1]) + 2 * (len(headers) - 1)
    beneath = 0
    if len(headers) > 1 and not sides[-1] and margin + min(LEAST, widths[-1]) > width():
        beneath = _count_beneath(widths, sides, indent)
    for number, row in enumerate((headers, *rows)):
        cells = [
            cell.rjust(size) if side else cell.ljust(size) for cell, size, side in zip(row, widths, sides, strict=True)
        ]
        if beneath:
            line = (" " * indent + "  ".join(cells[:-beneath])).rstrip()
            below = " " * (indent + 4) + "".join(f"{cell}  " for cell in cells[-beneath:-1])
            line += f"\n{below}{wrap(row[-1], len(below))}".rstrip()
        else:
            *cells, last = cells
            last = wrap(row[-1], margin) if margin + len(row[-1]) > width() and not sides[-1] else last
            line = (" " * indent + "  ".join([*cells, last])).rstrip()
        say(emphasize(line, "2") if number == 0 else line)


def _count_beneath(widths: Sequence[int], sides: Sequence[bool], indent: int) -> int:
    """How many of the last columns stand beneath: the last, and columns of text before it until the rest has room."""
    count = 1
    while count < len(widths) - 1 and not sides[-count - 1]:
        if indent + sum(widths[:-count]) + 2 * (len(widths) - count - 1) <= width():
            break
        count += 1
    return count
