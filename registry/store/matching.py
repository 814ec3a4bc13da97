"""Rows that must be stored against those that are."""

from __future__ import annotations

import math
import sqlite3
from collections import Counter
from collections.abc import Callable
from typing import Any

__all__ = ["RUN", "Matching", "Row", "is_after"]

Row = tuple[Any, ...]

RUN = 500
"""Rows that are read at once."""


class Matching:
    """Rows that must be stored, in the order of their first column, against those that are.

    Both are compared in long runs; only where a run differs they are told
    apart one by one.

    Parameters
    ----------
    stored : sqlite3.Cursor
        The stored rows, in that order.
    missing, extra : callable
        Take a row that is not stored, and one that should not be.

    Attributes
    ----------
    expected : list of tuple
        To be appended to.
    """

    def __init__(self, stored: sqlite3.Cursor, missing: Callable[[Row], None], extra: Callable[[Row], None]) -> None:
        self._stored = stored
        self._missing = missing
        self._extra = extra
        self._found: list[Row] = []
        self.expected: list[Row] = []

    def settle(self, last: int) -> None:
        """Compare everything whose first column is at most `last`; all of that must be expected by now."""
        found, expected = self._found, self.expected
        if len(found) < len(expected):
            found += self._stored.fetchmany(len(expected) - len(found))
        if found == expected:
            found.clear()
        else:
            self._tell_apart(last)
        expected.clear()

    def _tell_apart(self, last: int) -> None:
        found = self._found
        while (more := self._stored.fetchmany(RUN)) and not is_after(more[-1][0], last):
            found += more
        found += more
        due, expected = Counter(row for row in found if not is_after(row[0], last)), Counter(self.expected)
        for row in expected - due:
            self._missing(row)
        for row in due - expected:
            self._extra(row)
        self._found = [row for row in found if is_after(row[0], last)]

    def finish(self) -> None:
        """Report what is left."""
        for row in (*self._found, *self._stored):
            self._extra(row)


def is_after(value: Any, last: float, *, equal: bool = False) -> bool:
    """Whether SQLite sorts a value after a number: NULL comes first, text and blobs last."""
    if isinstance(value, (int, float)):
        return value >= last if equal else value > last
    return value is not None and last < math.inf
