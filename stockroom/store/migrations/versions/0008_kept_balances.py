"""What each bottle holds is kept beside the ledger, and every new entry keeps it up.

Revision: 0008, from 0007. The kept figure is a copy of the sum and never the truth:
`stockroom verify` proves one by the other.
"""

from __future__ import annotations

import sqlalchemy as sa
from alembic import op

from stockroom.store.migrations.guards import Guard, Keeper, kept, put_up, take_down

revision = "0008"
down_revision = "0007"


def upgrade() -> None:
    """Add the table, fill it from the ledger, and let the guard of a draw read it."""
    op.create_table(
        "kept_balance",
        sa.Column(
            "bottle_id",
            sa.Integer(),
            sa.ForeignKey("bottle.id"),
            primary_key=True,
            autoincrement=False,
        ),
        sa.Column("held", sa.BigInteger(), nullable=False),
    )
    op.execute(
        "INSERT INTO kept_balance (bottle_id, held)"
        " SELECT bottle_id, SUM(change) FROM entry GROUP BY bottle_id"
    )
    # few entries name a place, and who looks for what stands there must not read all the others
    named = sa.text("place_id IS NOT NULL")
    op.create_index(
        "ix_entry_place_id", "entry", ["place_id"], sqlite_where=named, postgresql_where=named
    )
    take_down("entry_not_below_nothing")
    put_up(NOT_BELOW_NOTHING, KEEPS_BALANCE)
    # a store first written while 0002 was still being added to went without some of these
    for guard in BY_THE_BOOK:
        take_down(guard.name)
    put_up(*BY_THE_BOOK)


def downgrade() -> None:
    """Refused, as every layout is: a copy was made before it."""
    raise NotImplementedError("This layout is never taken back; restore the copy made before it.")


NOT_BELOW_NOTHING = Guard(
    "entry_not_below_nothing",
    "entry",
    "INSERT",
    "NOTENOUGH The bottle holds less than that.",
    "NEW.change < 0 AND NEW.change + COALESCE((SELECT held FROM kept_balance"
    " WHERE bottle_id = NEW.bottle_id), 0) < 0",
    # a server lets two write at once: the second waits in the keeper, and what is read here
    # holds what the first left, and this change with it
    "NEW.change < 0 AND (SELECT held FROM kept_balance WHERE bottle_id = NEW.bottle_id) < 0",
)

BY_THE_BOOK = tuple(
    guard
    for guard in (
        *kept("hazard_text", "What a sheet said"),
        *kept(
            "reading",
            "What a logger read",
            "id = NEW.id OR (place_id = NEW.place_id AND at = NEW.at)",
        ),
    )
    # 0003 has its own words for removing a reading
    if guard.name != "reading_no_delete"
)

KEEPS_BALANCE = Keeper(
    "entry_keeps_balance",
    "entry",
    "INSERT",
    "INSERT INTO kept_balance (bottle_id, held) VALUES (NEW.bottle_id, NEW.change)"
    " ON CONFLICT (bottle_id) DO UPDATE SET held = kept_balance.held + excluded.held",
)
