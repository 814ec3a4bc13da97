"""The tree over the changes, grown anew and held against the stored nodes."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from itertools import count
from typing import Any

from registry.findings import Finding, integer, show, text_of
from registry.merkle import hash_leaf, hash_node, root_from_nodes
from registry.store.auditing import Audit
from registry.store.matching import RUN, Matching

__all__ = ["Regrowth"]


class Regrowth:
    """The tree of RFC 9162 over change headers, leaf by leaf.

    Parameters
    ----------
    audit : Audit
        The library, for its stored nodes.
    report : callable
        Takes what is found.

    Attributes
    ----------
    size : int
        Leaves so far.
    """

    def __init__(self, audit: Audit, report: Callable[[Finding], None]) -> None:
        self._audit = audit
        self._report = report
        self.size = 0
        # of each level the newest complete node: all that growing and the root take
        self._newest: list[bytes] = []
        self._levels: list[Matching] = []
        self._leaves: list[bytes] = []

    def _node_at(self, level: int, _: int) -> bytes:
        return self._newest[level]

    def root(self) -> bytes:
        """The root over the leaves so far."""
        self._grow()
        return root_from_nodes(self.size, self._node_at)

    def noted(self) -> str:
        """The root as an auditor notes it, ``size:root``."""
        return f"{self.size}:{self.root().hex()}"

    def add(self, leaf: bytes) -> None:
        """One more leaf; the nodes that it completes are compared with the stored ones, many at once."""
        self._leaves.append(leaf)
        self.size += 1
        if len(self._leaves) == RUN:
            self._grow()

    def _grow(self) -> None:
        """Level by level the nodes that the new leaves complete."""
        values, self._leaves = self._leaves, []
        level, place = 0, self.size - len(values)
        added: list[tuple[int, list[bytes]]] = []
        while values:
            added.append((place, values))
            if level == len(self._newest):
                self._newest.append(b"")
            # an odd place has its left sibling there already
            pairs = [self._newest[level], *values] if place & 1 else values
            self._newest[level] = values[-1]
            values = [hash_node(left, right) for left, right in zip(pairs[::2], pairs[1::2], strict=False)]
            level, place = level + 1, place >> 1
        # all are grown before any is compared: reading a damaged file may end here
        for level, (place, values) in enumerate(added):
            if level == len(self._levels):
                self._levels.append(self._match(level))
            self._levels[level].expected += zip(count(place), [value.hex() for value in values])
            self._levels[level].settle((self.size >> level) - 1)

    def _match(self, level: Any) -> Matching:
        return Matching(
            self._audit.nodes(level),
            lambda row: self._say(level, row[0], f"{show(row[1], 20)} is expected there and is not stored"),
            lambda row: self._say(level, row[0], f"{show(row[1], 20)} is stored there and does not follow"),
        )

    def finish(self) -> None:
        """Compare what is left, and what is stored beyond the tree."""
        self._grow()
        beyond = [self._match(level) for level in self._audit.levels() if level not in range(len(self._levels))]
        for stored in (*self._levels, *beyond):
            stored.finish()

    def recorded_leaf(self, number: int) -> bytes:
        """The stored leaf of a change whose row is missing, so that the rest of the tree can be judged."""
        try:
            return bytes.fromhex(self._audit.node(0, number - 1))
        except (TypeError, ValueError):
            return hash_leaf(b"")

    def choose_leaf(self, number: int, texts: Iterable[Any]) -> bytes:
        """Of what a change may have said, the leaf that was recorded; else that of the first."""
        leaves = [hash_leaf(text_of(text).encode("utf-8", "surrogatepass")) for text in texts]
        recorded = self.recorded_leaf(number)
        return recorded if recorded in leaves else leaves[0]

    def _say(self, level: Any, place: Any, what: str) -> None:
        at = integer(place)
        leaf = at + 1 if level == 0 and at is not None else None
        self._report(Finding("node", leaf, "", f"{text_of(level)}/{text_of(place)}", None, at, what))
