"""The tables of buying: orders placed, what came of them, and what an earlier term used.

No `from __future__ import annotations`: see `tables.py`.
"""

from datetime import date

from sqlalchemy import BigInteger, UniqueConstraint
from sqlmodel import Field

from stockroom.store.tables_house import Numbered


class Placed(Numbered, table=True):
    """An order placed with a supplier: so many packs of a line; triggers refuse to alter it."""

    # not called "order", which SQL would take for its own
    number: str = Field(unique=True)
    line_id: int = Field(foreign_key="line.id")
    size: int = Field(sa_type=BigInteger)
    pack: str
    packs: int
    # of all packs together
    pence: int
    supplier: str = ""
    ordered_on: date
    expected_on: date
    entered_on: date
    entered_at: str
    by: str
    note: str = ""


class PlacedShare(Numbered, table=True):
    """What a department pays of an order, in pence."""

    __tablename__ = "placed_share"
    __table_args__ = (UniqueConstraint("placed_id", "department_id"),)

    placed_id: int = Field(foreign_key="placed.id")
    department_id: int = Field(foreign_key="department.id")
    pence: int


class PlacedCame(Numbered, table=True):
    """A bottle that came of an order: its arrival, which may yet be put right."""

    __tablename__ = "placed_came"

    placed_id: int = Field(foreign_key="placed.id")
    # what came is summed from the ledger, so that a slip put right is outstanding again
    entry_id: int = Field(foreign_key="entry.id", unique=True)


class PlacedChange(Numbered, table=True):
    """An order cancelled, or expected on another day; appended, never altered."""

    __tablename__ = "placed_change"

    placed_id: int = Field(foreign_key="placed.id")
    what: str
    before: str = ""
    after: str = ""
    why: str = ""
    happened_on: date
    entered_on: date
    entered_at: str
    by: str


class FormerUse(Numbered, table=True):
    """What a term gone by used of a line, written down where no entries are left of it."""

    __tablename__ = "former_use"
    __table_args__ = (UniqueConstraint("line_id", "starts_on", "ends_on"),)

    line_id: int = Field(foreign_key="line.id")
    starts_on: date
    ends_on: date
    amount: int = Field(sa_type=BigInteger)
    # NULL: nobody wrote down how many groups it was for
    groups: int | None = None
    source: str = ""
