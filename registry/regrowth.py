"""The tree over the changes, grown anew and held against the stored nodes."""

from __future__ import annotations

from collections.abc import Callable, Iterable
from typing import Any

from registry.findings import Finding, integer, show, text_of
from registry.merkle import hash_leaf, new_nodes, root_from_nodes
from registry.store.auditing import Audit, ByChange

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
        self._newest: dict[int, bytes] = {}
        self._stored: dict[int, ByChange] = {}

    def _node_at(self, level: int, _: int) -> bytes:
        return self._newest[level]

    def root(self) -> bytes:
        """The root over the leaves so far."""
        return root_from_nodes(self.size, self._node_at)

    def noted(self) -> str:
        """The root as an auditor notes it, ``size:root``."""
        return f"{self.size}:{self.root().hex()}"

    def add(self, leaf: bytes) -> None:
        """One more leaf; each node that it completes is compared with the stored one."""
        for level, place, value in new_nodes(self.size, leaf, self._node_at):
            self._newest[level] = value
            if level not in self._stored:
                self._stored[level] = ByChange(self._audit.nodes(level))
            found = self._stored[level].take(place)
            expected = value.hex()
            if found != [(place, expected)]:
                self._compare(level, place, expected, found)
        self.size += 1

    def _compare(self, level: int, place: int, expected: str, found: list[tuple[Any, ...]]) -> None:
        if not found:
            self._say(level, place, "it is missing")
        for _, value in found:
            if value != expected:
                self._say(level, place, f"its hash is {show(value, 20)}, and the changes give {expected[:12]}...")
        if len(found) > 1:
            self._say(level, place, f"it stands there {len(found)} times")

    def finish(self) -> None:
        """Stored nodes that the tree does not have."""
        for level in self._audit.levels():
            stored = self._stored.get(level) or ByChange(self._audit.nodes(level))
            for place, _ in stored.finish():
                self._say(level, place, f"the tree over {self.size} changes has no such node")

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
