"""Vessels away on dates, as balances and glassware may be.

Revision: 0006, from 0005. The minutes of a day are a house setting, and settings want no column.
"""

from __future__ import annotations

import sqlalchemy as sa
from alembic import op

revision = "0006"
down_revision = "0005"


def upgrade() -> None:
    """Add the table of absences; every vessel entered so far is always there."""
    op.create_table(
        "vessel_away",
        sa.Column("id", sa.Integer(), primary_key=True),
        sa.Column("vessel_id", sa.Integer(), sa.ForeignKey("vessel.id"), nullable=False),
        sa.Column("starts_on", sa.Date(), nullable=False),
        sa.Column("ends_on", sa.Date(), nullable=False),
    )


def downgrade() -> None:
    """Refused: what was entered since would be lost."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")
