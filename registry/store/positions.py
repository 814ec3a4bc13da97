"""Positions of a library: its changes in order, their times, and the tree over them."""

from __future__ import annotations

from typing import Any

from sqlalchemy import Connection, bindparam, func, select

from registry.store.history import Change
from registry.store.tables import change, library, node, record

__all__ = [
    "find_position",
    "read_change",
    "read_changed",
    "read_changes",
    "read_identity",
    "read_node",
    "read_position",
]

_POSITION: Any = bindparam("position")
_POSITION_NOW = select(func.coalesce(func.max(change.c.number), 0))
_IDENTITY = select(library.c.name, library.c.started_at)
_CHANGES = select(change).where(change.c.number <= _POSITION).order_by(change.c.number)
_CHANGE = select(change).where(change.c.number == bindparam("number"))
_UP_TO = (
    select(change.c.number)
    .where(change.c.recorded_at < bindparam("time"))
    .order_by(change.c.recorded_at.desc(), change.c.number.desc())
    .limit(1)
)
_NODE = select(node.c.hash).where(node.c.level == bindparam("level"), node.c.place == bindparam("place"))
_CHANGED = (
    select(record.c.kind, record.c.key)
    .where(record.c.change > bindparam("since"), record.c.change <= _POSITION)
    .distinct()
    .order_by(record.c.kind, record.c.key)
)


def read_position(connection: Connection) -> int:
    """The number of the last change, 0 in an empty library."""
    return int(connection.execute(_POSITION_NOW).scalar_one())


def find_position(connection: Connection, time: str) -> int:
    """The number of the last change recorded before a time (UTC, ISO 8601); 0 if there is none."""
    return connection.execute(_UP_TO, {"time": time}).scalar() or 0


def read_identity(connection: Connection) -> tuple[str, str]:
    """The random name of the library, and when it was started."""
    name, started_at = connection.execute(_IDENTITY).one()
    return name, started_at


def _as_change(row: Any) -> Change:
    return Change(**{name: row._mapping[name] for name in Change.__dataclass_fields__})


def read_changes(connection: Connection, position: int) -> list[Change]:
    """The headers of all changes up to a position, in order."""
    return [_as_change(row) for row in connection.execute(_CHANGES, {"position": position})]


def read_change(connection: Connection, number: int) -> Change:
    """The header of one change."""
    return _as_change(connection.execute(_CHANGE, {"number": number}).one())


def read_changed(connection: Connection, since: int, position: int) -> list[tuple[str, str]]:
    """Kind and key of every record that changes after one position, up to another, have added."""
    return [(kind, key) for kind, key in connection.execute(_CHANGED, {"since": since, "position": position})]


def read_node(connection: Connection, level: int, place: int) -> bytes:
    """A complete node of the tree over the changes."""
    return bytes.fromhex(connection.execute(_NODE, {"level": level, "place": place}).scalar_one())
