"""The tables of a library, schema 2.

One mechanism holds every kind of record: a key with revisions 1..n, each
belonging to exactly one change. Content is canonical JSON; whatever else is
stored is derived from it, to find records by.

===========  ===================================================================
library      one row: which library this is
change       the header of each change, with the Merkle root over its records
node         complete nodes of the Merkle tree over change headers
record       every revision of every record
link         since which change a key refers to another one
term         since which change a person finds a key under a text
standing     what reviews and withdrawals made of a revision, in their order
===========  ===================================================================

Links, terms and standings are found by key and change, not by revision: what
a lookup reads does not grow with the history.
"""

from __future__ import annotations

from collections.abc import Iterator

from sqlalchemy import CheckConstraint, Column, ForeignKey, Index, Integer, MetaData, Table, Text, UniqueConstraint

__all__ = ["APPLICATION_ID", "METADATA", "SCHEMA", "change", "library", "link", "node", "record", "standing", "term"]

SCHEMA = 2
"""Version of the schema, kept in SQLite's user_version."""

APPLICATION_ID = 0x52474B31
"""Kept in SQLite's application_id; "RGK1" in ASCII."""

METADATA = MetaData(
    naming_convention={
        "ix": "ix_%(table_name)s_%(column_0_N_name)s",
        "uq": "uq_%(table_name)s_%(column_0_N_name)s",
        "ck": "ck_%(table_name)s_%(constraint_name)s",
        "fk": "fk_%(table_name)s_%(column_0_N_name)s_%(referred_table_name)s",
        "pk": "pk_%(table_name)s",
    }
)

library = Table(
    "library", METADATA,
    Column("id", Integer, primary_key=True, autoincrement=False),
    Column("name", Text, nullable=False),
    Column("started_at", Text, nullable=False),
    CheckConstraint("id = 1", name="one_row"),
    sqlite_strict=True,
)  # fmt: skip

change = Table(
    "change", METADATA,
    Column("number", Integer, primary_key=True, autoincrement=False),
    Column("author", Text, nullable=False),
    Column("reason", Text, nullable=False),
    Column("recorded_at", Text, nullable=False),
    Column("records", Integer, nullable=False),
    Column("records_root", Text, nullable=False),
    Column("header", Text, nullable=False),
    CheckConstraint("number >= 1", name="number_from_one"),
    CheckConstraint("author <> ''", name="author_given"),
    CheckConstraint("reason <> ''", name="reason_given"),
    CheckConstraint("length(records_root) = 64", name="root_length"),
    Index(None, "recorded_at"),
    sqlite_strict=True,
)  # fmt: skip

node = Table(
    "node", METADATA,
    Column("level", Integer, primary_key=True, autoincrement=False),
    Column("place", Integer, primary_key=True, autoincrement=False),
    Column("hash", Text, nullable=False),
    CheckConstraint("length(hash) = 64", name="hash_length"),
    sqlite_strict=True,
)  # fmt: skip

record = Table(
    "record", METADATA,
    Column("id", Integer, primary_key=True, autoincrement=False),
    Column("change", Integer, ForeignKey("change.number"), nullable=False),
    Column("place", Integer, nullable=False),
    Column("kind", Text, nullable=False),
    Column("key", Text, nullable=False),
    Column("revision", Integer, nullable=False),
    Column("content", Text, nullable=False),
    Column("digest", Text, nullable=False),
    UniqueConstraint("kind", "key", "revision"),
    UniqueConstraint("change", "place"),
    CheckConstraint("revision >= 1", name="revision_from_one"),
    CheckConstraint("length(digest) = 64", name="digest_length"),
    Index(None, "kind", "key", "change", "revision"),
    sqlite_strict=True,
)  # fmt: skip

link = Table(
    "link", METADATA,
    Column("kind", Text, primary_key=True),
    Column("key", Text, primary_key=True),
    Column("role", Text, primary_key=True),
    Column("to_kind", Text, primary_key=True),
    Column("to_key", Text, primary_key=True),
    Column("change", Integer, ForeignKey("change.number"), nullable=False),
    Index(None, "to_kind", "to_key", "kind", "key"),
    sqlite_strict=True,
)  # fmt: skip

term = Table(
    "term", METADATA,
    Column("text", Text, primary_key=True),
    Column("kind", Text, primary_key=True),
    Column("key", Text, primary_key=True),
    Column("change", Integer, ForeignKey("change.number"), nullable=False),
    sqlite_strict=True,
)  # fmt: skip

standing = Table(
    "standing", METADATA,
    Column("id", Integer, primary_key=True, autoincrement=False),
    Column("kind", Text, nullable=False),
    Column("key", Text, nullable=False),
    Column("revision", Integer, nullable=False),
    Column("standing", Text, nullable=False),
    Column("record", Integer, ForeignKey("record.id"), nullable=False),
    Column("cause", Integer, ForeignKey("record.id"), nullable=False),
    Column("change", Integer, ForeignKey("change.number"), nullable=False),
    Index(None, "kind", "key", "change", "id"),
    sqlite_strict=True,
)  # fmt: skip

_KEYS = {
    "library": ("id",), "change": ("number",), "node": ("level", "place"), "record": ("id",),
    "link": ("kind", "key", "role", "to_kind", "to_key"), "term": ("text", "kind", "key"), "standing": ("id",),
}  # fmt: skip


def trigger_statements() -> Iterator[str]:
    """The triggers that let rows only ever be added, as SQLite statements.

    INSERT OR REPLACE deletes without firing a delete trigger unless
    recursive triggers are on, so an insert over an existing key is stopped
    as well.
    """
    for table in ("record", "link", "term", "standing"):
        # a row belongs to the change that is being appended, never to an earlier one
        yield (
            f"CREATE TRIGGER {table}_no_insertion BEFORE INSERT ON {table} "
            "WHEN NEW.change <> (SELECT max(number) FROM change) "
            f"BEGIN SELECT RAISE(ABORT, 'history is only appended to: {table}'); END"
        )
    for table, keys in _KEYS.items():
        same = " AND ".join(f"{key} = NEW.{key}" for key in keys)
        if table == "record":
            same += " OR (kind = NEW.kind AND key = NEW.key AND revision = NEW.revision)"
            same += " OR (change = NEW.change AND place = NEW.place)"
        for event in ("UPDATE", "DELETE"):
            yield (
                f"CREATE TRIGGER {table}_no_{event.lower()} BEFORE {event} ON {table} "
                f"BEGIN SELECT RAISE(ABORT, 'history is only appended to: {table}'); END"
            )
        yield (
            f"CREATE TRIGGER {table}_no_replace BEFORE INSERT ON {table} "
            f"WHEN EXISTS (SELECT 1 FROM {table} WHERE {same}) "
            f"BEGIN SELECT RAISE(ABORT, 'history is only appended to: {table}'); END"
        )
