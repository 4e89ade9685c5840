"""Readings that were brought into the wrong place: taken out of use, and kept.

Revision: 0003, from 0002. A reading may be removed only where it stands here already.
"""

from __future__ import annotations

from typing import Any

import sqlalchemy as sa
from alembic import op

from stockroom.store.migrations.guards import Guard, put_up, take_down

revision = "0003"
down_revision = "0002"


def upgrade() -> None:
    """Add the table, and let go of readings that are in it."""
    op.create_table(
        "reading_taken_back",
        sa.Column("id", sa.Integer(), primary_key=True),
        _link("place_id", "place"),
        sa.Column("at", sa.String(), nullable=False),
        sa.Column("centi", sa.Integer(), nullable=False),
        _link("change_id", "row_change"),
    )
    # a check for each of a year of readings would go through all of them
    op.create_index("reading_taken_back_at", "reading_taken_back", ["place_id", "at"])
    # a store made while 0002 was being written may not have it
    take_down("reading_no_delete")
    put_up(*GUARDS)


def downgrade() -> None:
    """Refused: what was taken back would come into use again."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")


def _link(name: str, to: str) -> sa.Column[Any]:
    return sa.Column(name, sa.Integer(), sa.ForeignKey(f"{to}.id"), nullable=False)


# KEPT marks texts of ours among the driver's own errors; the rest is shown to the user
def _never(action: str, past: str) -> Guard:
    return Guard(
        f"reading_taken_back_no_{action.lower()}",
        "reading_taken_back",
        action,
        f"KEPT What was taken back is never {past}.",
    )


GUARDS = (
    Guard(
        "reading_no_delete",
        "reading",
        "DELETE",
        "KEPT What a logger read is never removed.",
        "NOT EXISTS (SELECT 1 FROM reading_taken_back AS kept WHERE kept.place_id = OLD.place_id"
        " AND kept.at = OLD.at AND kept.centi = OLD.centi)",
    ),
    _never("UPDATE", "altered"),
    _never("DELETE", "removed"),
)
