"""Plans that were printed, by number.

Revision: 0005, from 0004. Kept plans are appended, never altered.
"""

from __future__ import annotations

from typing import Any

import sqlalchemy as sa
from alembic import op

from stockroom.store.migrations.guards import kept, put_up

revision = "0005"
down_revision = "0004"


def upgrade() -> None:
    """Add the table and what guards it."""
    op.create_table(
        "printed_plan",
        sa.Column("id", sa.Integer(), primary_key=True),
        _text("number", unique=True),
        sa.Column("as_at", sa.Date(), nullable=False),
        _text("kept_at"),
        _text("by"),
        sa.Column("cautious", sa.Boolean(), nullable=False),
        *[_text(name) for name in ("digest", "usual", "marks", "decisions")],
    )
    put_up(
        *kept("printed_plan", "A plan that was kept", "id = NEW.id OR number = NEW.number"),
    )


def downgrade() -> None:
    """Refused: what was entered since would be lost."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")


def _text(name: str, **options: Any) -> sa.Column[Any]:
    return sa.Column(name, sa.String(), nullable=False, **options)
