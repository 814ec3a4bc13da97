"""One revision as stored, held against its digest whenever it is read."""

from __future__ import annotations

import json
from collections.abc import Collection, Iterable, Iterator
from typing import Any, NamedTuple

from sqlalchemy import Connection, bindparam, select

from registry.canonical import digest
from registry.store.history import envelope
from registry.store.tables import record

__all__ = ["COLUMNS", "DamagedRow", "Row", "fetch_rows", "restore_row", "split_keys"]

CHUNK = 500
"""Keys or numbers that one statement takes."""

COLUMNS = (
    record.c.id, record.c.kind, record.c.key, record.c.revision, record.c.change, record.c.content, record.c.digest,
)  # fmt: skip
"""What `restore_row` takes, after the number of the record."""

# built once: building it costs three times its execution
_BY_ID = select(*COLUMNS).where(record.c.id.in_(bindparam("ids", expanding=True)))


class DamagedRow(Exception):
    """A row whose content is not what was recorded."""


class Row(NamedTuple):
    """One revision as stored."""

    kind: str
    key: str
    revision: int
    change: int
    content: dict[str, Any]


def restore_row(kind: str, key: str, revision: int, number: int, content: str, expected: str) -> Row:
    """A row as recorded: what was changed behind the program's back is noticed here."""
    if digest(envelope(kind, key, revision, content)) != expected:
        raise DamagedRow(f"the {kind} {key!r}, revision {revision}, is not what was recorded")
    return Row(kind, key, revision, number, json.loads(content))


def split_keys(items: Iterable[Any]) -> Iterator[list[Any]]:
    """Keys or numbers, each once and in order, so many as one statement takes."""
    wanted = sorted(set(items))
    for start in range(0, len(wanted), CHUNK):
        yield wanted[start : start + CHUNK]


def fetch_rows(connection: Connection, ids: Collection[int]) -> dict[int, Row]:
    """Revisions by their numbers, all of which must be there."""
    found: dict[int, Row] = {}
    for chunk in split_keys(ids):
        for number, *columns in connection.execute(_BY_ID, {"ids": chunk}):
            found[number] = restore_row(*columns)
    if len(found) < len(set(ids)):
        raise DamagedRow("what is derived from the records points at a record that is not there")
    return found
