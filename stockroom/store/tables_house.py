"""The tables of the house itself: days, places, who pays, what there is to measure with.

No `from __future__ import annotations`: see `tables.py`.
"""

from datetime import date

from sqlalchemy import BigInteger, Index, UniqueConstraint
from sqlmodel import Field, SQLModel


class Numbered(SQLModel):
    """What every table but the settings has: a row number."""

    id: int | None = Field(default=None, primary_key=True)


class House(SQLModel, table=True):
    """What is settled once for the whole house, one setting a row."""

    # key and value, so that a new setting needs no migration
    setting: str = Field(primary_key=True)
    value: str
    source: str = ""


class Term(Numbered, table=True):
    """A term by name, with its first and last day."""

    term: str = Field(unique=True)
    starts_on: date
    ends_on: date
    source: str = ""


class Closure(Numbered, table=True):
    """Days the house is shut, besides weekends."""

    starts_on: date
    ends_on: date
    reason: str = ""
    source: str = ""


class Place(Numbered, table=True):
    """Where bottles stand."""

    place: str = Field(unique=True)
    name: str = ""
    # NULL where nobody hung a thermometer: rules then use their own base temperature
    temperature_c: float | None = None
    meant_for: str = ""
    source: str = ""


class Department(Numbered, table=True):
    """Who pays."""

    department: str = Field(unique=True)
    name: str = ""
    # NULL: no limit is kept for this department, which is not the same as nothing left
    left_pence: int | None = None
    source: str = ""


class Balance(Numbered, table=True):
    """A balance and its step in µg."""

    balance: str = Field(unique=True)
    step: int = Field(sa_type=BigInteger)
    source: str = ""


class BalanceAway(Numbered, table=True):
    """Days a balance is away."""

    __tablename__ = "balance_away"

    balance_id: int = Field(foreign_key="balance.id")
    starts_on: date
    ends_on: date


class Vessel(Numbered, table=True):
    """A flask or carboy to make up in, and what it holds in µL."""

    vessel: str = Field(unique=True)
    size: int = Field(sa_type=BigInteger)
    source: str = ""


class VesselAway(Numbered, table=True):
    """Days a vessel is away."""

    __tablename__ = "vessel_away"

    vessel_id: int = Field(foreign_key="vessel.id")
    starts_on: date
    ends_on: date


class Glassware(Numbered, table=True):
    """A kind of measuring glass and its size and finest mark in µL; `glass_class` A, B or ""."""

    glass: str = Field(unique=True)
    kind: str
    size: int = Field(sa_type=BigInteger)
    glass_class: str = ""
    # NULL for glass with a single mark
    step: int | None = Field(default=None, sa_type=BigInteger)
    source: str = ""


class GlasswareAway(Numbered, table=True):
    """Days a piece of glassware is away."""

    __tablename__ = "glassware_away"

    glassware_id: int = Field(foreign_key="glassware.id")
    starts_on: date
    ends_on: date


class Reading(Numbered, table=True):
    """One temperature a logger wrote, in hundredths of °C; `at` is local, to the minute."""

    # a second file over the same days adds nothing twice
    __table_args__ = (UniqueConstraint("place_id", "at"),)

    place_id: int = Field(foreign_key="place.id")
    at: str
    centi: int


class ReadingTakenBack(Numbered, table=True):
    """A reading that was brought into the wrong place, with the change that took it back."""

    __tablename__ = "reading_taken_back"
    __table_args__ = (Index("reading_taken_back_at", "place_id", "at"),)

    place_id: int = Field(foreign_key="place.id")
    at: str
    centi: int
    change_id: int = Field(foreign_key="row_change.id")
