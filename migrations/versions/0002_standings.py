"""Schema 2: links and terms by key, and the standing that each review gives.

Links and terms are derived from the records, to find them by; they are made
anew. What was recorded stays as it is. Frozen: imports nothing of the program.
"""

from __future__ import annotations

import sqlalchemy as sa
from alembic import op

revision = "0002"
down_revision = "0001"

_SAME_ROW = {
    "link": "kind = NEW.kind AND key = NEW.key AND role = NEW.role AND to_kind = NEW.to_kind AND to_key = NEW.to_key",
    "term": "text = NEW.text AND kind = NEW.kind AND key = NEW.key",
    "standing": "id = NEW.id",
}


def upgrade() -> None:
    op.create_index("ix_change_recorded_at", "change", ["recorded_at"])
    op.create_index("ix_record_kind_key_change_revision", "record", ["kind", "key", "change", "revision"])
    _gather_links()
    _gather_terms()
    _gather_standings()
    if op.get_bind().dialect.name == "sqlite":
        for table, same in _SAME_ROW.items():
            _forbid_changes(table, same)


def downgrade() -> None:
    raise NotImplementedError("History only goes forward: restore the backup instead.")


def _gather_links() -> None:
    # the references of reviews become standings
    op.execute(
        "CREATE TABLE old_link AS SELECT r.kind, r.key, l.role, l.kind AS to_kind, l.key AS to_key, "
        "min(r.change) AS change FROM link l JOIN record r ON r.id = l.record WHERE r.kind <> 'review' "
        "GROUP BY r.kind, r.key, l.role, l.kind, l.key"
    )
    op.drop_table("link")
    op.create_table(
        "link",
        sa.Column("kind", sa.Text, nullable=False),
        sa.Column("key", sa.Text, nullable=False),
        sa.Column("role", sa.Text, nullable=False),
        sa.Column("to_kind", sa.Text, nullable=False),
        sa.Column("to_key", sa.Text, nullable=False),
        sa.Column("change", sa.Integer, nullable=False),
        sa.PrimaryKeyConstraint("kind", "key", "role", "to_kind", "to_key", name="pk_link"),
        sa.ForeignKeyConstraint(["change"], ["change.number"], name="fk_link_change_change"),
        sqlite_strict=True,
    )
    op.create_index("ix_link_to_kind_to_key_kind_key", "link", ["to_kind", "to_key", "kind", "key"])
    op.execute("INSERT INTO link SELECT * FROM old_link ORDER BY kind, key, role, to_kind, to_key")
    op.drop_table("old_link")


def _gather_terms() -> None:
    op.execute(
        "CREATE TABLE old_term AS SELECT t.text, r.kind, r.key, min(r.change) AS change "
        "FROM term t JOIN record r ON r.id = t.record GROUP BY t.text, r.kind, r.key"
    )
    op.drop_table("term")
    op.create_table(
        "term",
        sa.Column("text", sa.Text, nullable=False),
        sa.Column("kind", sa.Text, nullable=False),
        sa.Column("key", sa.Text, nullable=False),
        sa.Column("change", sa.Integer, nullable=False),
        sa.PrimaryKeyConstraint("text", "kind", "key", name="pk_term"),
        sa.ForeignKeyConstraint(["change"], ["change.number"], name="fk_term_change_change"),
        sqlite_strict=True,
    )
    op.execute("INSERT INTO term SELECT * FROM old_term ORDER BY text, kind, key")
    op.drop_table("old_term")


def _gather_standings() -> None:
    op.create_table(
        "standing",
        sa.Column("id", sa.Integer, autoincrement=False, nullable=False),
        sa.Column("kind", sa.Text, nullable=False),
        sa.Column("key", sa.Text, nullable=False),
        sa.Column("revision", sa.Integer, nullable=False),
        sa.Column("standing", sa.Text, nullable=False),
        sa.Column("record", sa.Integer, nullable=False),
        sa.Column("cause", sa.Integer, nullable=False),
        sa.Column("change", sa.Integer, nullable=False),
        sa.PrimaryKeyConstraint("id", name="pk_standing"),
        sa.ForeignKeyConstraint(["record"], ["record.id"], name="fk_standing_record_record"),
        sa.ForeignKeyConstraint(["cause"], ["record.id"], name="fk_standing_cause_record"),
        sa.ForeignKeyConstraint(["change"], ["change.number"], name="fk_standing_change_change"),
        sqlite_strict=True,
    )
    op.create_index("ix_standing_kind_key_change_id", "standing", ["kind", "key", "change", "id"])
    op.execute(
        "INSERT INTO standing SELECT row_number() OVER (ORDER BY v.id), r.kind, r.key, r.revision, "
        "json_extract(v.content, '$.standing'), r.id, v.id, v.change "
        "FROM record v JOIN record r ON r.kind = json_extract(v.content, '$.of_kind') "
        "AND r.key = json_extract(v.content, '$.of_key') "
        "AND r.revision = CAST(json_extract(v.content, '$.of_revision') AS INTEGER) "
        "WHERE v.kind = 'review' ORDER BY v.id"
    )


def _forbid_changes(table: str, same: str) -> None:
    """Rows may be added, to the newest change, and nothing else; INSERT OR REPLACE is stopped as well."""
    stop = f"BEGIN SELECT RAISE(ABORT, 'history is only appended to: {table}'); END"
    op.execute(
        f"CREATE TRIGGER {table}_no_insertion BEFORE INSERT ON {table} "
        f"WHEN NEW.change <> (SELECT max(number) FROM change) {stop}"
    )
    op.execute(f"CREATE TRIGGER {table}_no_update BEFORE UPDATE ON {table} {stop}")
    op.execute(f"CREATE TRIGGER {table}_no_delete BEFORE DELETE ON {table} {stop}")
    op.execute(
        f"CREATE TRIGGER {table}_no_replace BEFORE INSERT ON {table} "
        f"WHEN EXISTS (SELECT 1 FROM {table} WHERE {same}) {stop}"
    )
