"""The keys of what stands on the shelves and how it keeps, for OpenAPI: see `contract.py`."""

from __future__ import annotations

from datetime import date

from pydantic import Field

from stockroom.web.api.contract import Keys, Practice


class ShelfBottle(Keys):
    """A bottle as it stands: `left` and `size` in `unit`, `about` where judged by eye."""

    bottle: str
    item: str
    place: str
    left: float
    size: float
    unit: str
    about: bool
    condition: str
    good_until: date | None
    decided_by: str
    warning: str
    doubt: str
    remark: str
    gone: bool


class Neighbour(Keys):
    """A bottle that must not stand where it does."""

    bottle: str
    text: str


class ShelfAnswer(Practice):
    """What stands where on the day `on`; a day to come is a forecast."""

    asked: str
    on: date
    forecast: bool
    known_on: date | None
    bottles: list[ShelfBottle]
    neighbours: list[Neighbour]


class Entry(Keys):
    """One entry of the ledger; `amount` is what it added or took, in `unit`."""

    entry: int
    happened: date
    entered: date
    by: str
    what: str
    amount: float
    left: float
    unit: str
    about: bool
    place: str
    booking: str
    said: str
    puts_right: int | None
    put_right_by: int | None


class DiaryAnswer(Practice):
    """Every entry of a bottle."""

    bottle: str
    item: str
    entries: list[Entry]


class LabelUnit(Keys):
    """What the label counts in, and how many of it one of `unit` is."""

    unit: str
    per_unit: float


class Stay(Keys):
    """Where it stood, and how warm."""

    place: str
    first: date = Field(alias="from")
    last: date = Field(alias="to")
    temperature_c: float | None
    logged_days: float
    mkt: float | None


class FallsBelow(Keys):
    """The day it falls below a strength, and the day that is wanted by."""

    what: str
    strength: float
    on: date | None
    wanted_on: date | None
    in_time: bool


class FadesAnswer(Practice):
    """How a bottle fades: nominal, found and expected kept apart, each in `unit`."""

    bottle: str
    item: str
    as_at: date
    unit: str
    label_unit: LabelUnit
    nominal: float | None
    found: float | None
    found_on: date | None
    uncertainty: float | None
    expected: float | None
    lowest: float | None
    highest: float | None
    basis: str
    law: str | None
    law_source: str
    counted_from: date | None
    stood: list[Stay]
    mkt: float | None
    t90_days: float | None
    half_life_days: float | None
    falls_below: list[FallsBelow]
    guesses: list[str]


class Content(Keys):
    """A substance of it, and how much."""

    substance: str
    percent_ww: float
    note: str


class WorkedOut(Keys):
    """What is worked out, also where a supplier's sheet takes its place."""

    statements: list[str]
    supplemental: list[str]
    signal_word: str
    pictograms: list[str]


class HazardsAnswer(Practice):
    """Statements, symbols and precautions at a strength, how each is known, and what decided."""

    what: str
    bottle: str | None
    line: str | None
    strength: str
    first: str
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
    sheet: dict[str, object] | None
    older_sheets: list[dict[str, object]]
    contents: list[Content]
    wording: dict[str, str]
    sources: dict[str, str]
    cautions: list[str]
    worked_out: WorkedOut


class Rule(Keys):
    """One rule in words; `whose` is "house rule" or "starter value"."""

    rule: str
    text: str
    whose: str
    source: str


class RuleChanged(Keys):
    """One change of a rule: what it was, what it is, who, when and why."""

    on: str
    by: str
    rule: str
    before: str
    after: str
    why: str


class RuleAnswer(Practice):
    """How a line keeps."""

    item: str
    rules: list[Rule]
    changes: list[RuleChanged]


class LearnAnswer(Practice):
    """How fast it fades by its own checks: rates per day in `unit`, lives in days."""

    as_at: date
    about: str
    item: str
    unit: str
    order: int
    rate_per_day: dict[str, float | None]
    percent_a_month: object
    at_c: float | None
    counted_from: str
    model: str
    slopes: dict[str, float] | None
    intercepts: dict[str, float] | None
    needed: dict[str, float | None]
    life_days: float | None
    decides: str
    life_days_own_scatter: float | None
    other_lives: list[dict[str, float | None]]
    lines: list[dict[str, object]]
    bottles: list[dict[str, object]]
    left_out: list[dict[str, str]]
    commands: list[str]
