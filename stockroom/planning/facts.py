"""What the planner is told: frozen facts, read once, never changed.

Amounts are whole micro-units (µg, µL, micro-items) as in the store; strengths
are in the line's own unit, mol/dm³ for anything with a formula and g/dm³
otherwise; days are dates; times are minutes after midnight. `Facts` holds all
of it. Lines, methods, recipes and bottles refer to each other by key text. What is
settled for the house and what stands in it is in `house_facts.py`, what the entries say left
the bottles in `entry_facts.py`, and both are handed on here.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from datetime import date
from enum import StrEnum

from stockroom.keeping.caution import Caution, LowerLimits
from stockroom.keeping.record import Record
from stockroom.keeping.rules import Rule
from stockroom.measure.amounts import Kind
from stockroom.measure.workdays import Calendar

# the store may see this module and `decisions` only, so the house's values are handed on
from stockroom.planning.changing.happened import Happened as Happened
from stockroom.planning.changing.happened import HappenedKind as HappenedKind
from stockroom.planning.entry_facts import Drawn as Drawn
from stockroom.planning.entry_facts import WrittenOff as WrittenOff
from stockroom.planning.house_facts import EXACT as EXACT
from stockroom.planning.house_facts import TOLERANCE as TOLERANCE
from stockroom.planning.house_facts import Balance as Balance
from stockroom.planning.house_facts import Closeness as Closeness
from stockroom.planning.house_facts import Department as Department
from stockroom.planning.house_facts import Glass as Glass
from stockroom.planning.house_facts import House as House
from stockroom.planning.house_facts import Place as Place
from stockroom.planning.house_facts import Vessel as Vessel
from stockroom.planning.order_facts import FormerUse as FormerUse
from stockroom.planning.order_facts import Pack as Pack
from stockroom.planning.order_facts import Placed as Placed


class Per(StrEnum):
    """What an amount in a recipe is multiplied by."""

    GROUP = "group"
    CLASS = "class"
    ROOM = "room"
    PERFORMANCE = "performance"
    DEMONSTRATOR = "demonstrator"


class Firmness(StrEnum):
    """How sure a booking is."""

    PENCILLED = "pencilled"
    FIRM = "firm"
    DONE = "done"
    DROPPED = "dropped"


class Form(StrEnum):
    """What a stock line is, as it stands in its container."""

    SOLID = "solid"
    LIQUID = "liquid"
    SOLUTION = "solution"
    SUNDRY = "sundry"
    """Bought at a shop, never a chemical order: juice, yeast, washing-up liquid."""


@dataclass(frozen=True, slots=True)
class Line:
    """A kind of thing a bottle can hold.

    `key` is the name with the strength ("sodium thiosulfate 0.200 mol/dm3"),
    `item` the name alone. `strength` is nominal, in `unit`; None when it has
    none (a solid, a mixture, a saturated solution). `molar_mass` is of the
    formula really in the container, water of crystallisation included;
    `solute_molar_mass` of what dissolves. `assay` is a fraction. Levels and
    batches are micro-units of `kind`. `lead` is in open days, None if unknown.
    """

    key: str
    item: str
    substance: str
    form: Form
    kind: Kind
    strength: float | None = None
    unit: str = ""
    strength_text: str = ""
    molar_mass: float | None = None
    assay: float = 1.0
    density: float | None = None
    rules: tuple[Rule, ...] = ()
    never_kept: str = ""
    level: int | None = None
    largest_batch: int | None = None
    vented_cap: bool = False
    storage_group: str = ""
    keep_note: str = ""
    packs: tuple[Pack, ...] = ()
    ask_first: str = ""
    ask_days: int = 0
    """Whose leave an order needs, and the open days that takes."""
    caution: Caution | None = None
    """How to doubt what is still to be made of it, in a plan on the safe side."""

    @property
    def solute_per_gram(self) -> float | None:
        """Canonical solute in one gram of the solid: mmol/g with a formula, else mg/mg."""
        if self.form is not Form.SOLID:
            return None
        return self.assay * 1000.0 / self.molar_mass if self.molar_mass else self.assay * 1000.0


@dataclass(frozen=True, slots=True)
class Ingredient:
    """One thing a method takes: the lines that may give it, in order of preference.

    `per_dm3` is micro-units per dm³ of product. None means it is worked out
    from the strengths: this is the solute. A line in `only_if_held` is used
    while a sound bottle of it stands on the shelf and is never made or bought
    for this.
    """

    lines: tuple[str, ...]
    per_dm3: int | None = None
    only_if_held: frozenset[str] = frozenset()
    role: str = "solute"


@dataclass(frozen=True, slots=True)
class Method:
    """How a line is made. Minutes are hands-on; `stands_hours` runs through closed days.

    `finish_minutes` is a second piece of hands-on work after standing (filter
    and titrate). `titrated` says that finishing gives a found strength.
    `smallest_batch` in µL: never less than this is made.
    """

    line: str
    ingredients: tuple[Ingredient, ...]
    minutes: int = 15
    finish_minutes: int = 0
    stands_hours: float = 0.0
    titrated: bool = False
    smallest_batch: int = 0
    minutes_guessed: bool = False
    steps: str = ""
    cautions: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Requirement:
    """One line of a recipe: so much of a stock line, per what, how close, how fresh.

    `lowest` and `highest` bound the strength (equal, for a plain strength with
    a closeness; a stated range otherwise); None for a line without strength.
    `tolerance` (fraction) takes the place of the closeness's own. `fresh` is
    made the same morning. `freshest_days` is the oldest it may be. An exact
    line may differ from nominal by `may_differ` if the found strength is
    printed, and wants a strength found within `found_within_days`.
    """

    number: int
    line: str
    amount: int
    per: Per
    closeness: Closeness
    lowest: float | None = None
    highest: float | None = None
    strength_text: str = ""
    tolerance: float | None = None
    fresh: bool = False
    freshest_days: int | None = None
    spare: bool = True
    may_differ: float | None = None
    found_within_days: int | None = None
    closeness_guessed: bool = False
    note: str = ""


@dataclass(frozen=True, slots=True)
class Bar:
    """A substance a recipe must never meet, and why."""

    substance: str
    reason: str


@dataclass(frozen=True, slots=True)
class Swap:
    """An allowed swap: `instead` for `line`, mass × `factor`, with its note."""

    line: str
    instead: str
    factor: float | None
    note: str


@dataclass(frozen=True, slots=True)
class Recipe:
    """One version of a practical or demonstration."""

    code: str
    version: int
    title: str
    requirements: tuple[Requirement, ...]
    bars: tuple[Bar, ...] = ()
    swaps: tuple[Swap, ...] = ()
    never_kept: str = ""
    waste: str = ""
    handling: str = ""
    assessment: str = ""


@dataclass(frozen=True, slots=True)
class Booking:
    """A recipe version on a day. `spare` in thousandths; `minute` after midnight.

    `destroyed_by` holds the initials of whoever destroyed what it must not keep; "" till then.
    """

    number: str
    recipe: str
    version: int
    on: date
    minute: int
    groups: int
    spare: int
    department: str
    firmness: Firmness = Firmness.FIRM
    room: str = ""
    lasts_minutes: int = 100
    destroyed_by: str = ""


@dataclass(frozen=True, slots=True)
class Bottle:
    """One container: what it holds now (micro-units) and the record of its ageing.

    `lineage` names the bottles it was made from, the nearest first. `meant_for`
    the bookings it was made for: what they get was measured in. `remark` is
    what somebody wrote on it. `cap` is "tight" or "vented" where written. `known_by` says
    how a strength nobody found of it is known: "by dilution of S01, found 2026-12-04".
    `about` is True while `left` was judged by eye and not counted since. `lot` and `assay` (a
    fraction) are this bottle's own, where its label or certificate gives them. The first
    `inherited` of its checks were made of the bottle it was poured from.
    """

    number: str
    line: str
    left: int
    size: int
    record: Record
    place: str = ""
    remark: str = ""
    cap: str = ""
    made_here: bool = False
    lineage: tuple[str, ...] = ()
    meant_for: tuple[str, ...] = ()
    known_by: str = ""
    about: bool = False
    lot: str = ""
    assay: float | None = None
    inherited: int = 0


@dataclass(frozen=True, slots=True)
class Facts:
    """Everything the planner may know, as at one day.

    `start` and `end` bound what is asked about; the plan itself runs on to
    `horizon` (None: `end`), so that asking about a week does not change it.
    `lower_limits` is there when strengths are at their lower limits. `usual` is the days each
    line's makes had in the plan kept last: among equals those are kept to.
    """

    as_at: date
    start: date
    end: date
    calendar: Calendar
    house: House = field(default_factory=House)
    lines: dict[str, Line] = field(default_factory=dict)
    methods: dict[str, Method] = field(default_factory=dict)
    recipes: dict[tuple[str, int], Recipe] = field(default_factory=dict)
    bookings: tuple[Booking, ...] = ()
    bottles: tuple[Bottle, ...] = ()
    balances: tuple[Balance, ...] = ()
    glassware: tuple[Glass, ...] = ()
    vessels: tuple[Vessel, ...] = ()
    departments: tuple[Department, ...] = ()
    places: tuple[Place, ...] = ()
    drawn: tuple[Drawn, ...] = ()
    written_off: tuple[WrittenOff, ...] = ()
    horizon: date | None = None
    lower_limits: LowerLimits | None = None
    usual: Mapping[str, tuple[date, ...]] = field(default_factory=dict)
    placed: tuple[Placed, ...] = ()
    """Orders placed this term, and older ones still to come."""
    year_before: tuple[date, date] | None = None
    """The same days a year before: a term where one is written down."""
    former: tuple[FormerUse, ...] = ()
    former_bookings: tuple[Booking, ...] = ()
