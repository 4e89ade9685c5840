"""What the planner answers about buying, beside the orders themselves.

Import these from `decisions.py`, which hands them on.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.measure.amounts import Kind


@dataclass(frozen=True, slots=True)
class Instead:
    """One way round an order that is late, and the day it must be done or settled by.

    `what` is order today, swap, borrow, run without or another day, in order of trouble;
    `booking` is blank where it concerns the stock alone.
    """

    what: str
    on: date
    text: str
    booking: str = ""


@dataclass(frozen=True, slots=True)
class Delivery:
    """One of several deliveries an order may be split into: what, ordered and wanted by when."""

    pack: str
    packs: int
    amount: int
    pence: int
    order_by: date
    need_by: date


@dataclass(frozen=True, slots=True)
class Coming:
    """What is still to come of an order that was placed, counted on from the day `counts`.

    `overdue` is how many open days ago it should have come; the day is then a guess.
    `bookings` are those served by it, `instead` the ways round for those it comes too late for.
    """

    number: str
    line: str
    item: str
    pack: str
    packs: int
    amount: int
    ordered: int
    kind: Kind
    placed_on: date
    expected: date
    counts: date
    overdue: int = 0
    supplier: str = ""
    by: str = ""
    bookings: tuple[str, ...] = ()
    instead: tuple[Instead, ...] = ()


@dataclass(frozen=True, slots=True)
class Budget:
    """A department's money, in pence: for orders placed, for orders planned, and what it had.

    `had` is None where no limit is kept.
    """

    department: str
    name: str
    spent: int
    promised: int
    had: int | None = None

    @property
    def left(self) -> int | None:
        """What is left when all is ordered; below 0 when it goes over."""
        return None if self.had is None else self.had - self.spent - self.promised
