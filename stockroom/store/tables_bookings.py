"""The tables of what is asked for: recipes, their lines, and bookings.

No `from __future__ import annotations`: see `tables.py`.
"""

from datetime import date

from sqlalchemy import BigInteger, UniqueConstraint
from sqlmodel import Field

from stockroom.store.tables_house import Numbered


class Recipe(Numbered, table=True):
    """One version of a practical or demonstration."""

    __table_args__ = (UniqueConstraint("recipe", "version"),)

    recipe: str
    version: int = 1
    title: str
    never_kept: str = ""
    waste: str = ""
    handling: str = ""
    assessment: str = ""
    source: str = ""


class Requirement(Numbered, table=True):
    """One line of a recipe."""

    __table_args__ = (UniqueConstraint("recipe_id", "number"),)

    recipe_id: int = Field(foreign_key="recipe.id")
    number: int
    line_id: int = Field(foreign_key="line.id")
    # equal for a plain strength; apart for a range such as 90-100 vol
    lowest: float | None = None
    highest: float | None = None
    strength_text: str = ""
    amount: int = Field(sa_type=BigInteger)
    per: str
    closeness: str
    closeness_guessed: bool = False
    tolerance: float | None = None
    fresh: bool = False
    freshest_days: int | None = None
    spare: bool = True
    may_differ: float | None = None
    found_within_days: int | None = None
    note: str = ""
    source: str = ""


class Bar(Numbered, table=True):
    """A substance a recipe must never meet, and why."""

    recipe_id: int = Field(foreign_key="recipe.id")
    substance_id: int = Field(foreign_key="substance.id")
    reason: str
    source: str = ""


class Swap(Numbered, table=True):
    """An allowed swap in a recipe: mass × `factor`."""

    recipe_id: int = Field(foreign_key="recipe.id")
    line_id: int = Field(foreign_key="line.id")
    instead_id: int = Field(foreign_key="line.id")
    factor: float | None = None
    note: str = ""
    source: str = ""


class Booking(Numbered, table=True):
    """A recipe version on a day. `spare` in thousandths."""

    number: str = Field(unique=True)
    recipe_id: int = Field(foreign_key="recipe.id")
    # not called "on", which SQL would take for its own
    on_day: date
    minute: int
    groups: int
    spare: int
    department_id: int = Field(foreign_key="department.id")
    firmness: str = "firm"
    room: str = ""
    source: str = ""


class BookingChange(Numbered, table=True):
    """What was changed of a booking, by whom; appended, never altered."""

    __tablename__ = "booking_change"

    booking_id: int = Field(foreign_key="booking.id")
    entered_on: date
    entered_at: str
    by: str
    what: str
    before: str = ""
    after: str = ""
