"""The table of plans that were kept, each under the number on its printed copy.

No `from __future__ import annotations`: see `tables.py`.
"""

from datetime import date

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
