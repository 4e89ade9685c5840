"""How one line's usable stock runs through the plan, step by step, with its orders and without.

Worked out once more in the plan's own way: needs are drawn on the days of their bookings, a
bottle that goes past takes what is left of it out, what is on its way counts from its day.
`planning/buying/course.py` keeps the sums of this, and `levels.py` the day below the level.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.planning.buying.course import Course, courses, lapse_days, left_on, soonest_arrival
from stockroom.planning.buying.on_way import OnWay, Receipt, receipts
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.decisions import Order
from stockroom.planning.facts import Facts, Form, Line
from stockroom.planning.making.batch import Taken, taken_alone
from stockroom.planning.settle import needs_of, settled
from stockroom.planning.wants import Want


@dataclass(frozen=True, slots=True)
class Step:
    """What is left from a day on, micro-units, and what happened then, in words.

    `left` counts what stands there and what has come that nobody is promised: what the plan's
    levels are told by. `with_orders` adds all that comes, ordered and still to be ordered,
    and takes off what is drawn of that.
    """

    on: date
    left: int
    with_orders: int
    what: str = ""


@dataclass(frozen=True, slots=True)
class Running:
    """The steps of one line, in the order they are taken; several may fall on one day.

    `falls_below` is the first day below its level and what is then left; `runs_out` the first
    day with nothing left, or with a need that nothing in hand meets. `bought` is False for a line
    made here. `first_asked` is the first day a booking asks for it, and its number.
    """

    line: Line
    steps: tuple[Step, ...]
    falls_below: tuple[date, int] | None = None
    runs_out: date | None = None
    bought: bool = True
    first_asked: tuple[date, str] | None = None


@dataclass(frozen=True, slots=True)
class _Take:
    """What one need takes: from bottles, and of what is bought; `start` the day it is wanted."""

    on: date
    start: date
    booking: str
    held: tuple[tuple[str, int], ...]
    to_buy: int


def running(facts: Facts, key: str, orders: tuple[Order, ...]) -> Running:
    """How a line runs down; `orders` are the plan's own, to be ordered.

    Raises: KeyError for a line that is not in the facts.
    """
    line = facts.lines[key]
    netted, made = settled(facts, needs_of(facts))
    runs = courses(facts, made, netted.missed, netted.shelf)
    course = next((run for run in runs if run.line.key == key), None)
    if course is not None:
        takes = [_bought(take) for take in course.takes]
    else:
        wants = [part for root in netted.wants for part in root.tree() if part.line == key]
        takes = [_made(want) for want in sorted(wants, key=lambda want: want.need.rank[1:])]
    mine = tuple(order for order in orders if order.line == key)
    return _Runner(facts, line, takes, netted.shelf, mine, course).run()


def _bought(take: Taken) -> _Take:
    return _Take(take.need.on, take.start, take.need.booking.number, take.held, take.to_buy)


def _made(want: Want) -> _Take:
    held = taken_alone(want, want.deadline[0]).held
    # what is made for a need is used for it, and never stands there as stock
    return _Take(want.need.on, want.deadline[0], want.need.booking.number, held, 0)


@dataclass(slots=True)
class _Lot:
    """What comes on a day and is good up to and including another; `left` goes down."""

    on: date
    until: date
    left: int


class _Runner:
    """One line run through the plan. Not reused."""

    def __init__(
        self,
        facts: Facts,
        line: Line,
        takes: list[_Take],
        shelf: Shelf,
        orders: tuple[Order, ...],
        course: Course | None,
    ) -> None:
        self.facts, self.line, self.shelf, self.takes = facts, line, shelf, takes
        self.coming, self.bought = OnWay(facts), course is not None
        self.receipts: list[Receipt] = receipts(facts).get(line.key, [])
        self.orders = sorted(orders, key=lambda order: (order.arrives, order.id))
        self.drawn: dict[str, int] = {}
        # what comes, each with its days and what nobody has drawn of it
        self.lots = [_Lot(one.on, one.until, one.amount) for one in self.receipts]
        self.lots += [_Lot(order.arrives, date.max, order.amount) for order in self.orders]
        self.lots.sort(key=lambda lot: (lot.until, lot.on))
        self.falls_below: tuple[date, int] | None = None
        self.runs_out: date | None = None
        self.steps: list[Step] = []

    def run(self) -> Running:
        lapses = lapse_days(self.facts, self.line, self.shelf)
        arrivals = self._arrivals()
        # a line made here is judged by its needs: see `levels.py`
        self._step(self.facts.as_at, "", counts=self.bought or not self.takes)
        for take in self.takes:
            self._until(take.on, lapses, arrivals)
            self._take(take)
        self._until(date.max, lapses, arrivals)
        asked = min(((take.on, take.booking) for take in self.takes), default=None)
        return Running(
            self.line, tuple(self.steps), self.falls_below, self.runs_out, self.bought, asked
        )

    def _arrivals(self) -> list[tuple[date, str]]:
        row = [(one.on, f"{one.number} comes") for one in self.receipts]
        row += [(order.arrives, f"{order.id} comes, if ordered") for order in self.orders]
        return sorted(row)

    def _until(self, on: date, lapses: list[date], arrivals: list[tuple[date, str]]) -> None:
        """The days up to and including one on which a bottle is past or something comes."""
        while (lapses and lapses[0] <= on) or (arrivals and arrivals[0][0] <= on):
            if lapses and (not arrivals or lapses[0] <= arrivals[0][0]):
                self._step(lapses.pop(0), "a bottle is past")
            else:
                day, what = arrivals.pop(0)
                # what came is no step down: the plan looks on the days of needs and lapses
                self._step(day, what, counts=False)

    def _take(self, take: _Take) -> None:
        for number, amount in take.held:
            self.drawn[number] = self.drawn.get(number, 0) + amount
        whole = self.line.form is not Form.SOLID
        got = self.coming.promise(self.line.key, take.to_buy, take.start, take.on, whole=whole)
        missing = take.to_buy - sum(amount for _, amount in got)
        if missing:
            self.runs_out = min(self.runs_out or take.on, take.on)
            if take.start < soonest_arrival(self.facts, self.line):
                self.coming.promise_late(self.line.key, missing)
        self._draw(take.to_buy, take.on)
        used = self.bought or bool(take.held)
        self._step(take.on, f"{take.booking} {'draws' if used else 'has it made'}")

    def _draw(self, amount: int, on: date) -> None:
        """From what has come, what goes past first; what comes too late is not drawn."""
        for lot in self.lots:
            if lot.on <= on <= lot.until:
                share = min(amount, lot.left)
                lot.left -= share
                amount -= share

    def _come(self, on: date) -> int:
        return sum(lot.left for lot in self.lots if lot.on <= on <= lot.until)

    def _step(self, on: date, what: str, *, counts: bool = True) -> None:
        stands = left_on(self.shelf, self.line, on, self.drawn)
        when = on if self.bought else date.max
        left = stands + self.coming.unpromised(self.line.key, when)
        level = self.line.level
        if counts and level is not None and left < level and self.falls_below is None:
            self.falls_below = (on, left)
        noticed = self.bought or self.falls_below is not None
        if counts and left <= 0 and noticed and self.runs_out is None:
            self.runs_out = on
        self.steps.append(Step(on, left, stands + self._come(on), what))
