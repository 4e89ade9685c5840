"""Sheets that were printed, each copy by its number.

Revision: 0009, from 0008. What a copy said is kept line by line, so that the next one can
mark what has changed; copies are appended, never altered.
"""

from __future__ import annotations

from typing import Any

import sqlalchemy as sa
from alembic import op

from stockroom.store.migrations.guards import kept, put_up

revision = "0009"
down_revision = "0008"


def upgrade() -> None:
    """Add the table and what guards it."""
    op.create_table(
        "printed_copy",
        sa.Column("id", sa.Integer(), primary_key=True),
        _text("number", unique=True),
        *[_text(name) for name in ("sheet", "about")],
        sa.Column("as_at", sa.Date(), nullable=False),
        *[_text(name) for name in ("printed_at", "by", "lines")],
    )
    # each printing asks for the copy of the same sheet before it, and few are of the same
    op.create_index("ix_printed_copy_sheet", "printed_copy", ["sheet", "about"])
    put_up(
        *kept("printed_copy", "A printed copy", "id = NEW.id OR number = NEW.number"),
    )


def downgrade() -> None:
    """Refused: the numbers on paper would mean nothing any more."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")


def _text(name: str, **options: Any) -> sa.Column[Any]:
    return sa.Column(name, sa.String(), nullable=False, **options)
