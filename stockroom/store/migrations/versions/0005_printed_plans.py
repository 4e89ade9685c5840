"""Plans that were printed, by number.

Revision: 0005, from 0004.
"""

from __future__ import annotations

revision = "0005"
down_revision = "0004"


def upgrade() -> None:
    """Nothing yet."""


def downgrade() -> None:
    """Refused: what was entered since would be lost."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")
