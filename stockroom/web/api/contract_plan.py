"""The keys of a plan and of its parts, as OpenAPI tells them: see `contract.py`."""

from __future__ import annotations

from datetime import date

from pydantic import Field

from stockroom.web.api.contract import ABSENT, Keys, Measured, Top
from stockroom.web.api.contract_buying import Budget, Coming, Level, OrderToPlace


class FromBottle(Measured):
    """So much out of a bottle."""

    bottle: str


class Source(Measured):
    """So much out of a bottle, or of something still to be made (`make`) or bought."""

    bottle: str = ABSENT
    item: str = ABSENT
    make: str = ABSENT


class Need(Measured):
    """One requirement of a booking. `outcome` is have, make, buy, short or refused."""

    ref: str
    booking: str
    recipe: str
    title: str
    dept: str
    on: date
    item: str
    strength: str
    closeness: str
    fresh: bool
    outcome: str
    from_: list[FromBottle] = Field(alias="from")
    make: str | None
    order: str | None
    reasons: list[str]


class MakeToDo(Keys):
    """One batch: `on` is the day work starts, `volume` in `unit`, `heel` what will be over."""

    id: str
    item: str
    strength: str
    volume: float
    unit: str
    needed: float
    earliest: date
    latest: date
    on: date
    finish_on: date | None
    ready: date
    good_until: date | None
    fresh: bool
    minutes: int
    vessels: int
    for_: list[str] = Field(alias="for")
    sources: list[Source]
    heel: float
    heel_kept: bool
    steps: str
    cautions: list[str]
    reasons: list[str]


class PastBottle(Keys):
    """A bottle that is past, weak, undated or unchecked, and the bookings it matters for."""

    bottle: str
    item: str
    condition: str
    good_until: date | None
    decided_by: str
    matters_for: list[str]


class YearBefore(Measured):
    """The same term a year before; `by` says how it is known."""

    groups: int | None
    by: str


class Use(Measured):
    """What the term uses of one thing; `spare` of it is for spills."""

    item: str
    strength: str
    form: str
    spare: float
    by_booking: dict[str, float]
    groups: int
    year_before: YearBefore = ABSENT


class Short(Measured):
    """What cannot be had in time, and why."""

    ref: str
    booking: str
    item: str
    strength: str
    reason: str


class Worth(Keys):
    """What a look saves: minutes of makes, pounds of orders by number and by department."""

    makes: list[str]
    minutes: int
    orders: dict[str, float]
    shares: dict[str, float]
    serves: list[str]
    estimated: bool


class Check(Keys):
    """A titration or a look; `best` is the day to do it."""

    bottle: str = ABSENT
    subject: str = ABSENT
    item: str
    what: str
    not_before: date
    by: date
    best: date
    minutes: int
    for_: list[str] = Field(alias="for")
    reason: str
    optional: bool
    worth: Worth = ABSENT


class Told(Keys):
    """A guess leaned on, or something to know, about a bottle or an item."""

    bottle: str = ABSENT
    item: str = ABSENT
    text: str


class Movable(Keys):
    """A make that may be done on an earlier day with room."""

    make: str
    to: date


class Load(Keys):
    """The hands-on minutes of a day; `limit` is null where the house sets none."""

    day: date
    minutes: int
    limit: int | None
    over: int
    makes: list[str]
    checks: list[str]
    movable: list[Movable]


class Watch(Keys):
    """A mixture that is never kept: when it is to be destroyed, and who has done it."""

    booking: str
    on: date
    title: str
    not_before: str
    destroy_by: str
    how: str
    dangers: list[str]
    ticked_by: str | None


class PlanAnswer(Top):
    """The whole plan. Lists keep the planner's order, which is by day, then number."""

    needs: list[Need]
    makes: list[MakeToDo]
    past: list[PastBottle]
    usage: list[Use]
    drawn: list[Use]
    written_off: list[Use]
    orders: list[OrderToPlace]
    short: list[Short]
    checks: list[Check]
    levels: list[Level]
    guesses: list[Told]
    notes: list[Told]
    loads: list[Load]
    watch: list[Watch]
    on_order: list[Coming]
    budgets: list[Budget]


class LabelHazards(Keys):
    """What the label of a make wants; `basis` says whether a supplier's sheet or we say so."""

    basis: str
    signal_word: str
    statements: list[str]
    supplemental: list[str]
    pictograms: list[str]
    precautions: list[str]
    classes: list[str]
    deciding: list[str]
    known: list[dict[str, str]]
    not_entered: list[str]
    notes: list[str]
    first: str


class MakeWithHazards(MakeToDo):
    """A batch, with the hazards its label will want."""

    hazards: LabelHazards


class FreshAnswer(Top):
    """What to make up."""

    makes: list[MakeWithHazards]


class PastAnswer(Top):
    """What is no longer good on the day `on`."""

    on: date
    past: list[PastBottle]


class UsageAnswer(Top):
    """What the term uses, what was drawn so far, and what was spilled, lent or is not accounted."""

    usage: list[Use]
    drawn: list[Use]
    written_off: list[Use]
    differences: list[str]


class BuyingAnswer(Top):
    """What to order, what is on its way, the money, and lines below their level."""

    orders: list[OrderToPlace]
    levels: list[Level]
    on_order: list[Coming]
    budgets: list[Budget]


class OnOrderAnswer(Top):
    """What was ordered and has not all come."""

    on_order: list[Coming]


class ReadyAnswer(Keys):
    """Whether a booking or a day is ready, and what there is still to do."""

    as_at: date
    practice: bool
    cautious: bool
    ready: bool
    title: str
    on: date
    to_do: list[str]
    needs: list[Need]
    makes: list[MakeToDo]
    checks: list[Check]
    strengths: list[str]
    cautions: list[str]


class WhyAnswer(Keys):
    """The reasons behind one line of the plan."""

    as_at: date
    practice: bool
    cautious: bool
    ref: str
    reasons: list[str]
