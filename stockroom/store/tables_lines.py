"""The tables of what may stand on a shelf: substances, stock lines, how they keep and are made.

No `from __future__ import annotations`: see `tables.py`.
"""

from datetime import date

from sqlalchemy import BigInteger, UniqueConstraint
from sqlmodel import Field

from stockroom.store.tables_house import Numbered


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
    # whose leave an order needs, and the open days it takes to get
    ask_first: str = ""
    ask_days: int = 0
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
