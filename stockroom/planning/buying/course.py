"""How the stock of each bought line runs through the term: what is left, on its way, and missing.

The needs are taken in order of their bookings' days and drawn on what is usable
that day; running sums follow the exact needs. What is on its way is counted from
the day it comes.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field
from datetime import date, timedelta

from stockroom.keeping.rules import Purpose
from stockroom.planning.buying.on_way import OnWay
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.facts import Facts, Form, Line
from stockroom.planning.making.batch import Taken, taken_alone
from stockroom.planning.making.make import Made
from stockroom.planning.wants import Want

_ONE_DAY = timedelta(days=1)


@dataclass(frozen=True, slots=True)
class Waiting:
    """A need that waits for something to be bought, and how much (micro-units)."""

    take: Taken
    amount: int


def together(parts: Iterable[Waiting]) -> Waiting:
    """All that one need waits for, by the day the first of it is wanted."""
    row = sorted(parts, key=lambda waiting: waiting.take.start)
    return Waiting(row[0].take, sum(waiting.amount for waiting in row))


@dataclass(slots=True)
class Course:
    """How a line's stock runs through the term (micro-units).

    `waiting` is what must still be ordered for, by day; `on_way` who is served by orders
    already placed, `too_late_for` whom those come too late for. `left_at_end` counts all that
    is on its way, after the last need, and `left_at_last` on the last day.
    """

    line: Line
    takes: list[Taken]
    waiting: list[Waiting] = field(default_factory=list)
    too_late_for: dict[str, list[Waiting]] = field(default_factory=dict)
    on_way: dict[str, list[str]] = field(default_factory=dict)
    crossing: Taken | None = None
    left_at_crossing: int = 0
    left_at_end: int = 0
    left_at_last: int = 0
    falls_below: date | None = None
    left_below: int = 0
    runs_out: date | None = None

    @property
    def late_for(self) -> dict[str, list[tuple[str, Waiting]]]:
        """By the need, the orders placed that come too late for it, each with its part."""
        row: dict[str, list[tuple[str, Waiting]]] = {}
        for number, late in self.too_late_for.items():
            for waiting in late:
                row.setdefault(waiting.take.need.ref, []).append((number, waiting))
        return row

    @property
    def trigger(self) -> Taken | None:
        """The first need that makes an order necessary."""
        found = [take for take in (self.crossing, *(w.take for w in self.waiting[:1])) if take]
        return min(found, key=_by_day, default=None)


def _by_day(take: Taken) -> tuple[object, ...]:
    # firm or pencilled does not matter here: stock is used up in the order of the days
    return take.need.rank[1:]


def courses(facts: Facts, made: Made, missed: Iterable[Want], shelf: Shelf) -> list[Course]:
    """Run every bought line that is drawn on through the term, by key."""
    takes: dict[str, list[Taken]] = {}
    for take in [*made.taken, *(taken_alone(want, want.deadline[0]) for want in missed)]:
        if take.amount and facts.lines[take.line].form is not Form.SUNDRY:
            takes.setdefault(take.line, []).append(take)
    coming = OnWay(facts)
    lines = [facts.lines[key] for key in sorted(takes)]
    return [_Running(facts, line, takes[line.key], shelf, coming).run() for line in lines]


class _Running:
    """One line run through the term. Not reused."""

    def __init__(
        self, facts: Facts, line: Line, takes: list[Taken], shelf: Shelf, coming: OnWay
    ) -> None:
        self.facts, self.line, self.shelf, self.coming = facts, line, shelf, coming
        self.course = Course(line, sorted(takes, key=_by_day))
        self.drawn: dict[str, int] = {}

    def run(self) -> Course:
        course, line = self.course, self.line
        soonest = soonest_arrival(self.facts, line)
        lapses = lapse_days(self.facts, line, self.shelf)
        self._left(self.facts.as_at)
        # bottle by bottle: one that goes past takes only what is left of it out of the sum
        for take in course.takes:
            while lapses and lapses[0] <= take.need.on:
                self._left(lapses.pop(0))
            for number, amount in take.held:
                self.drawn[number] = self.drawn.get(number, 0) + amount
            self._wait_for(take, soonest)
            left = self._left(take.need.on)
            course.left_at_end = left + self._later(take.need.on)
            below = line.level is not None and course.left_at_end < line.level
            if below and course.crossing is None:
                course.crossing, course.left_at_crossing = take, left
        course.left_at_last = course.left_at_end
        for day in lapses:
            course.left_at_last = self._left(day) + self._later(day)
        return course

    def _wait_for(self, take: Taken, soonest: date) -> None:
        """Note what a need waits for, on its way or still to be ordered."""
        key, course = self.line.key, self.course
        # a solution comes whole from one order: the same rule as in netting
        whole = self.line.form is not Form.SOLID
        got = self.coming.promise(key, take.to_buy, take.start, take.need.on, whole=whole)
        for receipt, _ in got:
            row = course.on_way.setdefault(receipt.number, [])
            if take.need.booking.number not in row:
                row.append(take.need.booking.number)
        missing = take.to_buy - sum(amount for _, amount in got)
        if missing:
            course.runs_out = min(course.runs_out or take.need.on, take.need.on)
        if missing and take.start < soonest:
            # too late for both: what is ordered already will do as well as a second order
            for receipt, amount in self.coming.promise_late(key, missing):
                late = course.too_late_for.setdefault(receipt.number, [])
                late.append(Waiting(take, amount))
                missing -= amount
        if missing:
            course.waiting.append(Waiting(take, missing))

    def _left(self, on: date) -> int:
        """What is usable on a day, and come by then; the first days too low are noted."""
        course, level = self.course, self.line.level
        left = left_on(self.shelf, self.line, on, self.drawn)
        left += self.coming.unpromised(self.line.key, on)
        if level is not None and left < level and course.falls_below is None:
            course.falls_below, course.left_below = on, left
        if left <= 0 and course.runs_out is None:
            course.runs_out = on
        return left

    def _later(self, on: date) -> int:
        """What comes after a day and nobody is promised."""
        key = self.line.key
        return self.coming.unpromised(key) - self.coming.unpromised(key, on)


def soonest_arrival(facts: Facts, line: Line) -> date:
    """The open day an order placed today would come, at the shortest lead time known."""
    leads = [pack.lead for pack in line.packs if pack.lead is not None]
    return arrives_on(facts, line, facts.as_at, min(leads, default=None))


def arrives_on(facts: Facts, line: Line, ordered: date, lead: int | None) -> date:
    """The open day something comes when leave is asked for, or it is ordered, on a day.

    `lead` is that of its pack in open days; None takes the house's.
    """
    days = facts.house.default_lead if lead is None else lead
    return facts.calendar.after(ordered, days + line.ask_days)


def in_hand_day(facts: Facts, take: Taken) -> date:
    """The open day something bought must be in hand: need day less the margin, or its make's."""
    # the margin is for a late van; a make that starts before it is the stricter of the two
    in_hand = facts.calendar.before(take.need.on, facts.house.margin_days)
    return min(in_hand, facts.calendar.on_or_before(take.start))


def order_by_day(facts: Facts, take: Taken, lead: int) -> date:
    """The last open day to order on: need day, less the margin, less the lead time."""
    return facts.calendar.before(in_hand_day(facts, take), lead)


def lapse_days(facts: Facts, line: Line, shelf: Shelf) -> list[date]:
    """The days up to the horizon on which a usable bottle of a line is past for the first time."""
    last = facts.horizon or facts.end
    days = set()
    for bottle in shelf.of_line(line.key):
        number = bottle.number
        until = shelf.usable_until(number, Purpose.ANY, shelf.opening(number))
        if bottle.left and until < last and shelf.may_be_used(number, facts.as_at):
            days.add(until + _ONE_DAY)
    return sorted(days)


def left_on(shelf: Shelf, line: Line, on: date, drawn: dict[str, int]) -> int:
    """What stands there, usable on a day, once so much is drawn from each bottle."""
    usable = [b for b in shelf.of_line(line.key) if shelf.may_be_used(b.number, on)]
    return sum(max(0, bottle.left - drawn.get(bottle.number, 0)) for bottle in usable)
