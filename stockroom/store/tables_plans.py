"""The tables of plans that were kept and of sheets that were printed, each under its number.

No `from __future__ import annotations`: see `tables.py`.
"""

from datetime import date

from sqlalchemy import Index
from sqlmodel import Field

from stockroom.store.tables_house import Numbered


class PrintedPlan(Numbered, table=True):
    """One plan as it was kept; triggers refuse to alter or remove it."""

    __tablename__ = "printed_plan"

    number: str = Field(unique=True)
    as_at: date
    # the moment as text: a local clock reading, never used in a sum
    kept_at: str
    by: str
    cautious: bool = False
    # of the decisions: two plans that decide alike are told by it without being read
    digest: str
    # line to the days of its makes, apart from the rest: every plan made later reads this
    usual: str
    # the last row number of each table, so that "since" is told by number and not by the clock
    marks: str
    decisions: str


class PrintedCopy(Numbered, table=True):
    """One sheet as it was printed: what it was about, and what each of its lines said.

    `sheet` is the kind ("week"), `about` what it was of ("2027-01-25"). Triggers refuse to
    alter or remove it: the paper is out of the house's hands.
    """

    __tablename__ = "printed_copy"
    __table_args__ = (Index("ix_printed_copy_sheet", "sheet", "about"),)

    number: str = Field(unique=True)
    sheet: str
    about: str
    as_at: date
    # the moment as text: a local clock reading, never used in a sum
    printed_at: str
    by: str
    # the key of each line to what it said, as JSON
    lines: str
