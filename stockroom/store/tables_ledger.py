"""The tables of what stands on the shelves and what happened to it.

No `from __future__ import annotations`: see `tables.py`.
"""

from datetime import date

from sqlalchemy import (
    BigInteger,
    Column,
    ForeignKey,
    Index,
    Integer,
    UniqueConstraint,
    text,
)
from sqlmodel import Field, SQLModel

from stockroom.store.tables_house import Numbered


class RowChange(Numbered, table=True):
    """What was corrected in a table of the house, by whom and why; appended, never altered."""

    __tablename__ = "row_change"

    # names and not numbers, so that one table records for all of them
    table_name: str
    row_key: str
    column_name: str
    before: str = ""
    after: str = ""
    why: str
    by: str
    entered_on: date
    entered_at: str


class Bottle(Numbered, table=True):
    """One container with a number that is never used again; what is left is in `entry`."""

    number: str = Field(unique=True)
    line_id: int = Field(foreign_key="line.id")
    size: int = Field(sa_type=BigInteger)
    received_on: date | None = None
    made_on: date | None = None
    # as printed, beside every reading it can have: nothing is settled by storing it
    printed_text: str = ""
    printed_readings: str = ""
    cap: str = ""
    remark: str = ""
    made_here: bool = False
    source: str = ""
    lot: str = ""
    # as a fraction, where this bottle's own certificate gives one
    assay: float | None = None
    # the empty bottle with its cap, in micrograms
    tare: int | None = Field(default=None, sa_type=BigInteger)
    # what was poured from one bottle into a smaller one keeps that one's dates and strength
    decanted_from: int | None = Field(default=None, foreign_key="bottle.id")


class Parent(Numbered, table=True):
    """The bottle a made bottle was made from."""

    __table_args__ = (UniqueConstraint("bottle_id", "parent_id"),)

    bottle_id: int = Field(foreign_key="bottle.id")
    parent_id: int = Field(foreign_key="bottle.id")


_HAS_PLACE = text("place_id IS NOT NULL")


class Entry(Numbered, table=True):
    """One line of the ledger; triggers refuse to alter or remove it."""

    __table_args__ = (
        Index(
            "ix_entry_place_id", "place_id", sqlite_where=_HAS_PLACE, postgresql_where=_HAS_PLACE
        ),
    )

    bottle_id: int = Field(foreign_key="bottle.id", index=True)
    kind: str
    happened_on: date
    entered_on: date
    # the moment as text: a local clock reading, never used in a sum
    entered_at: str
    by: str
    change: int = Field(default=0, sa_type=BigInteger)
    strength: float | None = None
    strength_text: str = ""
    # standard uncertainty of `strength`, in the same unit
    uncertainty: float | None = None
    peroxide_mg_kg: float | None = None
    passed: bool | None = None
    place_id: int | None = Field(default=None, foreign_key="place.id")
    reason: str = ""
    note: str = ""
    booking: str = ""
    puts_right: int | None = Field(
        default=None, sa_column=Column(Integer, ForeignKey("entry.id"), unique=True)
    )
    # an estimate by eye; what it left is about right until the bottle is counted
    about: bool = False
    walk_id: int | None = Field(default=None, foreign_key="walk.id")


class KeptBalance(SQLModel, table=True):
    """What a bottle holds, kept up by a trigger with every entry: a copy of the sum."""

    __tablename__ = "kept_balance"

    bottle_id: int = Field(primary_key=True, foreign_key="bottle.id")
    held: int = Field(sa_type=BigInteger)
