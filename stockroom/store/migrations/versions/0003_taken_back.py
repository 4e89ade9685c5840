"""Readings that were brought into the wrong place: taken out of use, and kept.

Revision: 0003, from 0002. A reading may be removed only where it stands here already.
"""

from __future__ import annotations

from typing import Any

import sqlalchemy as sa
from alembic import op

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
    op.execute("DROP TRIGGER IF EXISTS reading_no_delete")
    for trigger in TRIGGERS:
        op.execute(trigger)


def downgrade() -> None:
    """Refused: what was taken back would come into use again."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")


def _link(name: str, to: str) -> sa.Column[Any]:
    return sa.Column(name, sa.Integer(), sa.ForeignKey(f"{to}.id"), nullable=False)


# KEPT marks texts of ours among the driver's own errors; the rest is shown to the user
def _never(name: str, when: str, past: str) -> str:
    return (
        f"CREATE TRIGGER reading_taken_back_no_{name} BEFORE {when} ON reading_taken_back"
        f" BEGIN SELECT RAISE(ABORT, 'KEPT What was taken back is never {past}.'); END"
    )


TRIGGERS = (
    "CREATE TRIGGER reading_no_delete BEFORE DELETE ON reading"
    " WHEN NOT EXISTS (SELECT 1 FROM reading_taken_back AS kept WHERE kept.place_id = OLD.place_id"
    " AND kept.at = OLD.at AND kept.centi = OLD.centi)"
    " BEGIN SELECT RAISE(ABORT, 'KEPT What a logger read is never removed.'); END",
    _never("update", "UPDATE", "altered"),
    _never("delete", "DELETE", "removed"),
)
