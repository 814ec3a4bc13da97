"""Reading a library at a position: the newest revision of each key up to it."""

from __future__ import annotations

import json
from collections.abc import Iterable, Sequence
from typing import Any, NamedTuple

from sqlalchemy import Connection, Select, and_, bindparam, func, select

from registry.canonical import digest
from registry.store.history import Change, envelope, fold_term
from registry.store.tables import change, link, record, term

__all__ = [
    "Row",
    "find_term",
    "read_changes",
    "read_current",
    "read_kind",
    "read_linked",
    "read_position",
    "read_revisions",
    "read_terms",
]  # fmt: skip


class DamagedRow(Exception):
    """A row whose content is not what was recorded."""


class Row(NamedTuple):
    """One revision as stored."""

    kind: str
    key: str
    revision: int
    change: int
    content: dict[str, Any]


_newer = record.alias("newer")
_COLUMNS = (
    record.c.kind,
    record.c.key,
    record.c.revision,
    record.c.change,
    record.c.content,
    record.c.digest,
)
_POSITION: Any = bindparam("position")
_NEWEST = and_(
    record.c.change <= _POSITION,
    ~select(_newer.c.id)
    .where(
        _newer.c.kind == record.c.kind,
        _newer.c.key == record.c.key,
        _newer.c.revision == record.c.revision + 1,
        _newer.c.change <= _POSITION,
    )
    .exists(),
)

# statements are built once: building them costs three times their execution
_POSITION_NOW = select(func.coalesce(func.max(change.c.number), 0))
_CHANGES = select(change).where(change.c.number <= _POSITION).order_by(change.c.number)
_BY_KIND = select(*_COLUMNS).where(record.c.kind == bindparam("kind"), _NEWEST).order_by(record.c.key)
_REVISIONS = (
    select(*_COLUMNS)
    .where(record.c.kind == bindparam("kind"), record.c.change <= _POSITION)
    .order_by(record.c.key, record.c.revision)
)
_BY_KEYS = (
    select(*_COLUMNS)
    .where(record.c.kind == bindparam("kind"), record.c.key.in_(bindparam("keys", expanding=True)), _NEWEST)
    .order_by(record.c.key)
)
_BY_LINK = (
    select(*_COLUMNS)
    .join(link, link.c.record == record.c.id)
    .where(link.c.kind == bindparam("target_kind"), link.c.key == bindparam("target_key"), record.c.change <= _POSITION)
    .order_by(record.c.kind, record.c.key, record.c.revision)
    .distinct()
)
_BY_TERM = (
    select(*_COLUMNS)
    .join(term, term.c.record == record.c.id)
    .where(term.c.text == bindparam("text"), _NEWEST)
    .order_by(record.c.kind, record.c.key)
)
_TERMS = select(term.c.text).join(record, term.c.record == record.c.id).where(_NEWEST).distinct()


def _rows(connection: Connection, statement: Select[Any], **values: Any) -> list[Row]:
    found = connection.execute(statement, values)
    return [_restore(*row) for row in found]


def _restore(kind: str, key: str, revision: int, number: int, content: str, expected: str) -> Row:
    """A row as recorded: what was changed behind the program's back is noticed here."""
    if digest(envelope(kind, key, revision, content)) != expected:
        raise DamagedRow(f"the {kind} {key!r}, revision {revision}, is not what was recorded")
    return Row(kind, key, revision, number, json.loads(content))


def read_position(connection: Connection) -> int:
    """The number of the last change, 0 in an empty library."""
    return int(connection.execute(_POSITION_NOW).scalar_one())


def read_changes(connection: Connection, position: int) -> list[Change]:
    """The headers of all changes up to a position, in order."""
    names = Change.__dataclass_fields__
    found = connection.execute(_CHANGES, {"position": position})
    return [Change(**{name: row._mapping[name] for name in names}) for row in found]


def read_kind(connection: Connection, kind: str, position: int) -> list[Row]:
    """Every record of a kind, by key."""
    return _rows(connection, _BY_KIND, kind=kind, position=position)


def read_revisions(connection: Connection, kind: str, position: int) -> list[Row]:
    """Every revision of every record of a kind, by key."""
    return _rows(connection, _REVISIONS, kind=kind, position=position)


def read_current(connection: Connection, kind: str, keys: Iterable[str], position: int) -> list[Row]:
    """The records of a kind under some keys; keys that are not there are passed over."""
    wanted = sorted(set(keys))
    rows: list[Row] = []
    for start in range(0, len(wanted), 500):
        rows += _rows(connection, _BY_KEYS, kind=kind, keys=wanted[start : start + 500], position=position)
    return rows


def read_linked(connection: Connection, kind: str, key: str, position: int) -> list[Row]:
    """Every revision of the records that refer to one record."""
    return _rows(connection, _BY_LINK, target_kind=kind, target_key=key, position=position)


def find_term(connection: Connection, text: str, position: int) -> list[Row]:
    """The records that a person finds under a text, case aside."""
    return _rows(connection, _BY_TERM, text=fold_term(text), position=position)


def read_terms(connection: Connection, position: int) -> Sequence[str]:
    """Every text by which something is found."""
    return connection.execute(_TERMS, {"position": position}).scalars().all()
