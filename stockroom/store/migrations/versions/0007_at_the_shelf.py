"""At the shelf: lots, tares, decants, estimates, walks, submissions, and backups that were made.

Revision: 0007, from 0006. Every new column has a value for the rows already there.
"""

from __future__ import annotations

from typing import Any

import sqlalchemy as sa
from alembic import op

from stockroom.store.migrations.guards import kept, put_up

revision = "0007"
down_revision = "0006"

Column = sa.Column[Any]


def upgrade() -> None:
    """Add the tables and what guards them, then the columns of bottles and entries."""
    _walks()
    _table("submission", _text("token", unique=True), *_stamp(), _text("answer"))
    _table(
        "backup_made",
        _text("place"),
        sa.Column("entries", sa.Integer(), nullable=False),
        _text("digest"),
        *_stamp(),
    )
    _columns()
    put_up(
        *kept("walk", "A walk along the shelves", "id = NEW.id OR name = NEW.name"),
        *kept("walk_end", "The end of a walk", "id = NEW.id OR walk_id = NEW.walk_id"),
        *kept("submission", "What was submitted", "id = NEW.id OR token = NEW.token"),
        *kept("backup_made", "The record of a backup"),
    )


def downgrade() -> None:
    """Refused: what was entered since would be lost."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")


def _walks() -> None:
    _table(
        "walk",
        _text("name", unique=True),
        _text("places"),
        sa.Column("started_on", sa.Date(), nullable=False),
        *_stamp(),
    )
    _table(
        "walk_end",
        sa.Column("walk_id", sa.Integer(), sa.ForeignKey("walk.id"), nullable=False, unique=True),
        sa.Column("ended_on", sa.Date(), nullable=False),
        *_stamp(),
        _text("note"),
    )


def _columns() -> None:
    op.add_column("bottle", _text("lot", server_default=""))
    op.add_column("bottle", sa.Column("assay", sa.Float(), nullable=True))
    op.add_column("bottle", sa.Column("tare", sa.BigInteger(), nullable=True))
    _add_link("bottle", "decanted_from", "bottle")
    about: Column = sa.Column("about", sa.Boolean(), nullable=False, server_default=sa.false())
    op.add_column("entry", about)
    _add_link("entry", "walk_id", "walk")


def _stamp() -> tuple[Column, ...]:
    day: Column = sa.Column("entered_on", sa.Date(), nullable=False)
    return day, _text("entered_at"), _text("by")


def _text(name: str, **options: Any) -> Column:
    return sa.Column(name, sa.String(), nullable=False, **options)


def _add_link(table: str, column: str, to: str) -> None:
    # written out: alembic would add the reference as a second step, which SQLite cannot take
    op.execute(f"ALTER TABLE {table} ADD COLUMN {column} INTEGER REFERENCES {to} (id)")


def _table(name: str, *columns: Any) -> None:
    op.create_table(name, sa.Column("id", sa.Integer(), primary_key=True), *columns)
