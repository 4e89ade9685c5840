"""The keys of what is bought and paid for, as OpenAPI tells them: see `contract.py`."""

from __future__ import annotations

from datetime import date

from pydantic import Field

from stockroom.web.api.contract import Keys, Measured


class Mixed(Keys):
    """So many packs of one size, each at that price in pounds."""

    pack: str
    packs: int
    each: float


class Delivery(Measured):
    """One of several deliveries an order is better divided into."""

    pack: str
    packs: int
    cost: float
    order_by: date
    need_by: date


class Instead(Keys):
    """A way round an order that comes too late."""

    what: str
    on: date
    booking: str | None
    text: str


class OrderToPlace(Measured):
    """One order: `cost` and `shares` in pounds, `late_by_open_days` how late it is already."""

    id: str
    item: str
    pack: str
    packs: int
    need_by: date
    order_by: date
    arrives: date
    late_by_open_days: int
    cost: float
    shares: dict[str, float]
    for_: list[str] = Field(alias="for")
    reasons: list[str]
    supplier: str | None
    mixture: list[Mixed]
    falls_below: date | None
    runs_out: date | None
    ask_first: str | None
    ask_open_days: int
    keeps_until: date | None
    queried: bool
    deliveries: list[Delivery]
    instead: list[Instead]


class Coming(Measured):
    """Something on its way: `amount` is still to come of the `ordered`."""

    id: str
    item: str
    line: str
    pack: str
    packs: int
    ordered: float
    placed_on: date
    expected: date
    counted_from: date
    overdue_open_days: int
    supplier: str | None
    by: str
    for_: list[str] = Field(alias="for")
    instead: list[Instead]


class Budget(Keys):
    """A department's money in pounds; `had` is null where nobody set it."""

    dept: str
    name: str
    spent: float
    promised: float
    had: float | None
    left: float | None


class Level(Keys):
    """A line that falls below its level on a day; numbers in `unit`."""

    item: str
    line: str
    on: date
    left: float
    level: float
    runs_out: date | None
    unit: str
