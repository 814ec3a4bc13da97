"""What a package says of the library that it was taken from, and since when.

A package of what is new since a position carries it as the property
``rangebook`` of its descriptor; a package of a whole library has none.
"""

from __future__ import annotations

import json
import re
from collections.abc import Iterator, Mapping, Sequence
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

from registry import cells
from registry.canonical import digest, encode
from registry.cells import choice, complain
from registry.errors import CellProblem, InvalidPackage, quote
from registry.exchange.layout import PACKED
from registry.exchange.package import DESCRIPTOR, read_descriptor
from registry.records import CAUSES, Record

__all__ = ["PROPERTY", "Provenance", "digest_content", "read_provenance"]

PROPERTY = "rangebook"
"""The name of the property in a descriptor."""

_DIGEST = re.compile(r"[0-9a-f]{64}")
_CAUSE = choice(*CAUSES)

Digests = Mapping[str, Mapping[str, Sequence[str]]]


def digest_content(content: Mapping[str, Any]) -> str:
    """SHA-256 of a record's canonical content, whatever its revision."""
    return digest(encode(content))


@dataclass(frozen=True)
class Provenance:
    """Where the rows of a package come from.

    Attributes
    ----------
    library : str
        The random name of the library.
    root : str
        Its position and root, ``size:root``.
    since : str
        The earlier position as it was asked for: an edition, a change, a date.
    since_root : str
        The earlier position and its root.
    bases : mapping
        By kind and key, the digest of what counted at the earlier position;
        nothing for a key that was not there.
    earlier : mapping
        By kind and key, the digests of every revision before the one written,
        oldest first.
    withdrawn : mapping
        By key, the withdrawn sources that rows rest on: cause and reason.
    """

    library: str
    root: str
    since: str
    since_root: str
    bases: Mapping[str, Mapping[str, str]] = field(default_factory=dict)
    earlier: Digests = field(default_factory=dict)
    withdrawn: Mapping[str, tuple[str, str]] = field(default_factory=dict)

    def base(self, record: Record) -> str:
        """The digest of what counted under a record's key; empty if nothing did."""
        return self.bases.get(record.kind, {}).get(record.key, "")

    def before(self, record: Record) -> Sequence[str]:
        """The digests of the revisions before the one written, oldest first."""
        return self.earlier.get(record.kind, {}).get(record.key, ())

    def describe(self) -> dict[str, Any]:
        """The property of the descriptor."""
        return {
            "library": self.library,
            "position": _size(self.root),
            "root": self.root,
            "since": {"name": self.since, "position": _size(self.since_root), "root": self.since_root},
            "bases": {kind: dict(of_kind) for kind, of_kind in self.bases.items()},
            "earlier": {kind: {k: list(v) for k, v in of_kind.items()} for kind, of_kind in self.earlier.items()},
            "withdrawn": {key: {"cause": cause, "reason": why} for key, (cause, why) in self.withdrawn.items()},
        }


def _size(root: str) -> int:
    return int(root.partition(":")[0])


def read_provenance(path: Path) -> Provenance | None:
    """What a package says of its origin; None for a package of a whole library.

    Parameters
    ----------
    path : Path
        A folder or .zip.

    Raises
    ------
    InvalidPackage
        If the property is there and cannot be read.
    """
    described = read_descriptor(path)
    if PROPERTY not in described:
        return None
    given = described[PROPERTY]
    problems = list(_property_problems(given))
    if problems:
        found = [CellProblem(DESCRIPTOR, 0, PROPERTY, "", why) for why in problems]
        raise InvalidPackage(str(path), found)
    since = given["since"]
    return Provenance(
        given["library"], given["root"], since["name"], since["root"], given["bases"], given["earlier"],
        {key: (said["cause"], said["reason"]) for key, said in given["withdrawn"].items()},
    )  # fmt: skip


def _property_problems(given: Any) -> Iterator[str]:
    if not isinstance(given, dict):
        yield f"it must be an object, not {quote(json.dumps(given))}."
        return
    since = given.get("since")
    yield from _text_problems(given, "", library=cells.TEXT, root=cells.ROOT)
    yield from _text_problems(since, "since.", name=cells.TEXT, root=cells.ROOT)
    for place, holder in (("", given), ("since.", since)):
        root = holder.get("root") if isinstance(holder, dict) else None
        if holder and isinstance(root, str) and root.partition(":")[0] != str(holder.get("position")):
            yield f"{place}position must be that of the root."
    for name, holds in (("bases", _is_digest), ("earlier", _are_digests)):
        if not _holds_kinds(given.get(name), holds):
            yield f"{name} must name SHA-256 digests by kind and key; make the package again with `rangebook dump`."
    withdrawn = given.get("withdrawn")
    if not isinstance(withdrawn, dict):
        yield "withdrawn must name withdrawn sources."
        return
    for key, said in withdrawn.items():
        yield from _text_problems(said, f"withdrawn.{key[:80]}.", cause=_CAUSE, reason=cells.LONG)


def _text_problems(holder: Any, place: str, **wanted: cells.Cell) -> Iterator[str]:
    for name, cell in wanted.items():
        text = holder.get(name) if isinstance(holder, dict) else None
        why = complain(cell, text, required=True) if isinstance(text, str) else f"it must be text; {cell.allowed}"
        if why:
            yield f"{place}{name}: {why}"


def _holds_kinds(given: Any, holds: Any) -> bool:
    return isinstance(given, dict) and all(
        kind in PACKED and isinstance(of_kind, dict) and all(holds(value) for value in of_kind.values())
        for kind, of_kind in given.items()
    )


def _is_digest(value: Any) -> bool:
    return isinstance(value, str) and _DIGEST.fullmatch(value) is not None


def _are_digests(value: Any) -> bool:
    return isinstance(value, list) and all(_is_digest(each) for each in value)
