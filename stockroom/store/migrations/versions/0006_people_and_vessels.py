"""Vessels away, and the minutes of a day.

Revision: 0006, from 0005.
"""

from __future__ import annotations

revision = "0006"
down_revision = "0005"


def upgrade() -> None:
    """Nothing yet."""


def downgrade() -> None:
    """Refused: what was entered since would be lost."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")
