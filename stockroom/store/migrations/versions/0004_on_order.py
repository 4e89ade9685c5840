"""What is on order, and what must be asked for first.

Revision: 0004, from 0003.
"""

from __future__ import annotations

revision = "0004"
down_revision = "0003"


def upgrade() -> None:
    """Nothing yet."""


def downgrade() -> None:
    """Refused: what was entered since would be lost."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")
