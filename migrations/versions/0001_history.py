"""The first schema: changes, records, links, terms and the Merkle nodes.

A migration is frozen: it says what the tables were, not what they are, so it
imports nothing of the program.
"""

from __future__ import annotations

import sqlalchemy as sa
from alembic import op

revision = "0001"
down_revision = None

_SAME_ROW = {
    "library": "id = NEW.id",
    "change": "number = NEW.number",
    "node": "level = NEW.level AND place = NEW.place",
    "record": "id = NEW.id OR (kind = NEW.kind AND key = NEW.key AND revision = NEW.revision)"
    " OR (change = NEW.change AND place = NEW.place)",
    "link": "record = NEW.record AND role = NEW.role AND kind = NEW.kind AND key = NEW.key",
    "term": "record = NEW.record AND text = NEW.text",
}


def upgrade() -> None:
    _create_history()
    _create_records()
    if op.get_bind().dialect.name == "sqlite":
        for table, same in _SAME_ROW.items():
            _forbid_changes(table, same)
        op.execute(
            "CREATE TRIGGER record_no_insertion BEFORE INSERT ON record "
            "WHEN NEW.change <> (SELECT max(number) FROM change) "
            "BEGIN SELECT RAISE(ABORT, 'history is only appended to: record'); END"
        )


def downgrade() -> None:
    raise NotImplementedError("History only goes forward: restore the backup instead.")


def _create_history() -> None:
    op.create_table(
        "library",
        sa.Column("id", sa.Integer, autoincrement=False, nullable=False),
        sa.Column("name", sa.Text, nullable=False),
        sa.Column("started_at", sa.Text, nullable=False),
        sa.PrimaryKeyConstraint("id", name="pk_library"),
        sa.CheckConstraint("id = 1", name="ck_library_one_row"),
        sqlite_strict=True,
    )
    op.create_table(
        "change",
        sa.Column("number", sa.Integer, autoincrement=False, nullable=False),
        sa.Column("author", sa.Text, nullable=False),
        sa.Column("reason", sa.Text, nullable=False),
        sa.Column("recorded_at", sa.Text, nullable=False),
        sa.Column("records", sa.Integer, nullable=False),
        sa.Column("records_root", sa.Text, nullable=False),
        sa.Column("header", sa.Text, nullable=False),
        sa.PrimaryKeyConstraint("number", name="pk_change"),
        sa.CheckConstraint("number >= 1", name="ck_change_number_from_one"),
        sa.CheckConstraint("author <> ''", name="ck_change_author_given"),
        sa.CheckConstraint("reason <> ''", name="ck_change_reason_given"),
        sa.CheckConstraint("length(records_root) = 64", name="ck_change_root_length"),
        sqlite_strict=True,
    )
    op.create_table(
        "node",
        sa.Column("level", sa.Integer, autoincrement=False, nullable=False),
        sa.Column("place", sa.Integer, autoincrement=False, nullable=False),
        sa.Column("hash", sa.Text, nullable=False),
        sa.PrimaryKeyConstraint("level", "place", name="pk_node"),
        sa.CheckConstraint("length(hash) = 64", name="ck_node_hash_length"),
        sqlite_strict=True,
    )


def _create_records() -> None:
    op.create_table(
        "record",
        sa.Column("id", sa.Integer, autoincrement=False, nullable=False),
        sa.Column("change", sa.Integer, nullable=False),
        sa.Column("place", sa.Integer, nullable=False),
        sa.Column("kind", sa.Text, nullable=False),
        sa.Column("key", sa.Text, nullable=False),
        sa.Column("revision", sa.Integer, nullable=False),
        sa.Column("content", sa.Text, nullable=False),
        sa.Column("digest", sa.Text, nullable=False),
        sa.PrimaryKeyConstraint("id", name="pk_record"),
        sa.UniqueConstraint("kind", "key", "revision", name="uq_record_kind_key_revision"),
        sa.UniqueConstraint("change", "place", name="uq_record_change_place"),
        sa.CheckConstraint("revision >= 1", name="ck_record_revision_from_one"),
        sa.CheckConstraint("length(digest) = 64", name="ck_record_digest_length"),
        sa.ForeignKeyConstraint(["change"], ["change.number"], name="fk_record_change_change"),
        sqlite_strict=True,
    )
    op.create_table(
        "link",
        sa.Column("record", sa.Integer, autoincrement=False, nullable=False),
        sa.Column("role", sa.Text, nullable=False),
        sa.Column("kind", sa.Text, nullable=False),
        sa.Column("key", sa.Text, nullable=False),
        sa.PrimaryKeyConstraint("record", "role", "kind", "key", name="pk_link"),
        sa.ForeignKeyConstraint(["record"], ["record.id"], name="fk_link_record_record"),
        sqlite_strict=True,
    )
    op.create_index("ix_link_kind_key_record", "link", ["kind", "key", "record"])
    op.create_table(
        "term",
        sa.Column("record", sa.Integer, autoincrement=False, nullable=False),
        sa.Column("text", sa.Text, nullable=False),
        sa.PrimaryKeyConstraint("record", "text", name="pk_term"),
        sa.ForeignKeyConstraint(["record"], ["record.id"], name="fk_term_record_record"),
        sqlite_strict=True,
    )
    op.create_index("ix_term_text_record", "term", ["text", "record"])


def _forbid_changes(table: str, same: str) -> None:
    """Rows may be added and nothing else; INSERT OR REPLACE is stopped as well."""
    stop = f"BEGIN SELECT RAISE(ABORT, 'history is only appended to: {table}'); END"
    op.execute(f"CREATE TRIGGER {table}_no_update BEFORE UPDATE ON {table} {stop}")
    op.execute(f"CREATE TRIGGER {table}_no_delete BEFORE DELETE ON {table} {stop}")
    op.execute(
        f"CREATE TRIGGER {table}_no_replace BEFORE INSERT ON {table} "
        f"WHEN EXISTS (SELECT 1 FROM {table} WHERE {same}) {stop}"
    )
