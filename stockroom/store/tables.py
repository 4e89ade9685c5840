"""The tables of a store. `migrations/` builds exactly these; a test compares them.

Amounts are whole micro-units (µg, µL, micro-items), money whole pence, days ISO
dates, times minutes after midnight, strengths in the line's own unit with the
text as written beside them. Blank text is "", an unknown figure NULL. Amounts are
BIGINT, since a 32-bit column elsewhere than in SQLite ends at 2 kg.

No `from __future__ import annotations` here, alone in the project: SQLModel
reads the annotations of its classes while they are being made.
"""

from datetime import date

from sqlalchemy import BigInteger, Column, ForeignKey, Integer, UniqueConstraint
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


class Substance(Numbered, table=True):
    """What something is chemically; `formula` is of what dissolves, without its water."""

    substance: str = Field(unique=True)
    formula: str = ""
    molar_mass: float | None = None
    cas: str = ""
    storage_group: str = ""
    peroxide_former: str = ""
    # of the pure liquid, g/cm³ at 20 °C
    density: float | None = None
    note: str = ""
    source: str = ""


class OtherName(Numbered, table=True):
    """Another name a substance answers to."""

    __tablename__ = "other_name"
    __table_args__ = (UniqueConstraint("substance_id", "name"),)

    substance_id: int = Field(foreign_key="substance.id")
    name: str


class Hazard(Numbered, table=True):
    """One limit or class of a substance that the house holds in place of the shipped ones.

    A band counts from `from_percent` to below `below_percent`, by mass.
    """

    substance_id: int = Field(foreign_key="substance.id")
    hazard_class: str
    h_code: str
    from_percent: float | None = None
    below_percent: float | None = None
    basis: str
    route: str = ""
    ate: float | None = None
    m_factor: float | None = None
    percent_of: str = ""
    how: str = ""
    source: str = ""


class Line(Numbered, table=True):
    """A kind of thing a bottle can hold. `molar_mass` is of the formula really inside."""

    key: str = Field(unique=True)
    item: str
    # mixtures and sundries hold no one substance
    substance_id: int | None = Field(default=None, foreign_key="substance.id")
    form: str
    kind: str
    strength: float | None = None
    unit: str = ""
    strength_text: str = ""
    formula: str = ""
    molar_mass: float | None = None
    # a fraction; 1 where the label gives none, which is also the safest guess for weighing
    assay: float = 1.0
    density: float | None = None
    level: int | None = Field(default=None, sa_type=BigInteger)
    largest_batch: int | None = Field(default=None, sa_type=BigInteger)
    never_kept: str = ""
    vented_cap: bool = False
    keep_note: str = ""
    source: str = ""


class KeepingRule(Numbered, table=True):
    """One ageing rule of a line; `rate` is per day in the line's unit."""

    __tablename__ = "keeping_rule"

    line_id: int = Field(foreign_key="line.id")
    rule: str
    # count and unit apart, so that reading needs no parser
    lasts_count: int | None = None
    lasts_unit: str = ""
    counted_from: str = ""
    purpose: str = ""
    safety: bool = False
    decay_order: int | None = None
    rate: float | None = None
    at_c: float | None = None
    factor_per_10c: float | None = None
    ea_kj_mol: float | None = None
    named_law: str = ""
    above: float | None = None
    upto: float | None = None
    colder_than: float | None = None
    warmer_than: float | None = None
    source: str = ""
    # a rule the house set itself; the starter's that it replaced stays, out of use
    house: bool = False
    in_use: bool = True


class HazardText(Numbered, table=True):
    """What the supplier's sheet says of a line; the last one entered counts."""

    __tablename__ = "hazard_text"

    line_id: int = Field(foreign_key="line.id")
    signal_word: str = ""
    statements: str
    pictograms: str = ""
    sheet: str
    why: str = ""
    by: str
    entered_on: date
    entered_at: str


class Method(Numbered, table=True):
    """How a line is made; cautions are separated by semicolons."""

    line_id: int = Field(foreign_key="line.id", unique=True)
    minutes: int = 15
    # kept, because a plan must own up to what it guessed
    minutes_guessed: bool = False
    finish_minutes: int = 0
    stands_hours: float = 0.0
    titrated: bool = False
    smallest_batch: int = Field(default=0, sa_type=BigInteger)
    steps: str = ""
    cautions: str = ""
    source: str = ""


class Ingredient(Numbered, table=True):
    """One alternative for one thing a method takes; `per_dm3` in micro-units per dm³."""

    line_id: int = Field(foreign_key="line.id")
    ingredient_id: int = Field(foreign_key="line.id")
    alternative: int = 1
    role: str = "solute"
    per_dm3: int | None = Field(default=None, sa_type=BigInteger)
    only_if_held: bool = False
    source: str = ""


class Pack(Numbered, table=True):
    """A size a supplier sells."""

    line_id: int = Field(foreign_key="line.id")
    size: int = Field(sa_type=BigInteger)
    text: str
    pence: int
    # open days; NULL means the house's usual, and the order says so
    lead: int | None = None
    supplier: str = ""
    source: str = ""


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


class Parent(Numbered, table=True):
    """The bottle a made bottle was made from."""

    __table_args__ = (UniqueConstraint("bottle_id", "parent_id"),)

    bottle_id: int = Field(foreign_key="bottle.id")
    parent_id: int = Field(foreign_key="bottle.id")


class Entry(Numbered, table=True):
    """One line of the ledger; triggers refuse to alter or remove it."""

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
