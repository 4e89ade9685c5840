"""Plans that were printed, by number.

Revision: 0005, from 0004. Kept plans are appended, never altered.
"""

from __future__ import annotations

from typing import Any

import sqlalchemy as sa
from alembic import op

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
    for trigger in TRIGGERS:
        op.execute(trigger)


def downgrade() -> None:
    """Refused: what was entered since would be lost."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")


def _text(name: str, **options: Any) -> sa.Column[Any]:
    return sa.Column(name, sa.String(), nullable=False, **options)


# KEPT marks texts of ours among the driver's own errors; the rest is shown to the user
def _never(name: str, when: str, past: str, only: str = "") -> str:
    return (
        f"CREATE TRIGGER printed_plan_no_{name} BEFORE {when} ON printed_plan{only}"
        f" BEGIN SELECT RAISE(ABORT, 'KEPT A plan that was kept is never {past}.'); END"
    )


TRIGGERS = (
    _never("update", "UPDATE", "altered"),
    _never("delete", "DELETE", "removed"),
    # INSERT OR REPLACE would remove the old row without waking the DELETE trigger
    _never(
        "overwrite",
        "INSERT",
        "written over",
        " WHEN EXISTS (SELECT 1 FROM printed_plan WHERE id = NEW.id OR number = NEW.number)",
    ),
)
