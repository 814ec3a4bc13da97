"""Does a library file hold together? The one place that the tests of crashes and of concurrent writers ask."""

from __future__ import annotations

import hashlib
import json
import sqlite3
from collections.abc import Iterator
from contextlib import closing
from pathlib import Path

from registry.merkle import hash_leaf, root_from_nodes, root_of
from registry.opening import open_library
from registry.store.tables import SCHEMA


def find_faults(path: Path) -> list[str]:
    """What is wrong with a library of schema 2 or 1: nothing, in a whole one.

    Everything is recomputed from what is stored, with the standard library's JSON and SHA-256; and `verify` holds.
    """
    with closing(sqlite3.connect(f"file:{path}?mode=ro", uri=True)) as db:
        found = [*_check_pages(db), *_check_records(db), *_check_changes(db)]
        newest = db.execute("PRAGMA user_version").fetchone()[0] == SCHEMA
    return [*found, *(_verify(path) if newest else ())]


def _verify(path: Path) -> Iterator[str]:
    with open_library(path) as library:
        yield from (f"verify: {finding}" for finding in library.verify().findings)


def _check_pages(db: sqlite3.Connection) -> Iterator[str]:
    for (line,) in db.execute("PRAGMA integrity_check"):
        if line != "ok":
            yield f"SQLite: {line}"
    for row in db.execute("PRAGMA foreign_key_check"):
        yield f"dangling: {row}"


def _canonical(content: object) -> bytes:
    return json.dumps(content, sort_keys=True, separators=(",", ":"), ensure_ascii=False).encode()


def _check_records(db: sqlite3.Connection) -> Iterator[str]:
    seen: dict[tuple[str, str], int] = {}
    places: dict[int, int] = {}
    rows = db.execute("SELECT id, change, place, kind, key, revision, content, digest FROM record ORDER BY id")
    for count, (number, change, place, kind, key, revision, content, digest) in enumerate(rows, start=1):
        envelope = {"kind": kind, "key": key, "revision": revision, "content": json.loads(content)}
        if hashlib.sha256(_canonical(envelope)).hexdigest() != digest:
            yield f"digest of {kind} {key}@{revision}"
        if (number, place) != (count, places.get(change, 0)):
            yield f"place of {kind} {key}@{revision}"
        if revision != seen.get((kind, key), 0) + 1:
            yield f"number of {kind} {key}@{revision}"
        seen[kind, key], places[change] = revision, place + 1


def _check_changes(db: sqlite3.Connection) -> Iterator[str]:
    headers: list[bytes] = []
    names = ("number", "author", "reason", "recorded_at", "records", "records_root")
    for *columns, header in db.execute(f"SELECT {', '.join(names)}, header FROM change ORDER BY number"):
        found = dict(zip(names, columns, strict=True))
        number = found["number"]
        digests = db.execute("SELECT digest FROM record WHERE change = ? ORDER BY place", (number,)).fetchall()
        headers.append(header.encode())
        if number != len(headers) or len(digests) != found["records"]:
            yield f"change {number} is not whole"
        if root_of([hash_leaf(bytes.fromhex(digest)) for (digest,) in digests]).hex() != found["records_root"]:
            yield f"root of change {number}"
        if _canonical(found) != header.encode():
            yield f"header of change {number}"
    nodes = {(level, place): bytes.fromhex(value) for level, place, value in db.execute("SELECT * FROM node")}
    # a tree of n leaves has n leaves and as many complete inner nodes as n loses by counting its ones
    if len(nodes) != 2 * len(headers) - len(headers).bit_count() if headers else bool(nodes):
        yield f"{len(nodes)} nodes for {len(headers)} changes"
    elif headers and root_from_nodes(len(headers), lambda level, place: nodes[level, place]) != root_of(
        [hash_leaf(header) for header in headers]
    ):
        yield "the root over the changes"
