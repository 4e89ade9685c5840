"""The term day by day: classes, what is begun and made, orders, arrivals, checks, last days."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass
from datetime import date, timedelta

from stockroom.keeping.verdict import verdict
from stockroom.planning.decisions import Make, Plan, Short
from stockroom.planning.facts import Facts
from stockroom.reports.pages.parts import Row
from stockroom.reports.pages.term_choice import Chosen
from stockroom.reports.paper.day import closed_words
from stockroom.reports.paper.week_also import checks_on
from stockroom.reports.paper.week_classes import Classes
from stockroom.reports.paper.week_parts import made, volume
from stockroom.reports.words import (
    amount,
    counted,
    day_and_month,
    listed,
    named,
    raised,
    weekday_and_day,
)

CLASS, START, MAKE, FINISH, ORDER, COMES, CHECK, LAST = KINDS = (
    ("#", "class"),
    ("o→", "start"),
    ("o", "make"),
    ("→o", "finish"),
    ("£", "order by"),
    ("↓", "comes"),
    ("?", "check"),
    ("|", "last day"),
)
"""The sign and the word of each kind of line, in the order of a day."""


@dataclass(frozen=True, slots=True)
class Entry:
    """One line of a day: its kind as (sign, word)."""

    kind: tuple[str, str]
    row: Row


@dataclass(frozen=True, slots=True)
class TermDay:
    """One day, or several of which the same is said; `state` is "", today, over or closed."""

    on: date
    name: str
    state: str
    told: str
    entries: tuple[Entry, ...] = ()


@dataclass(frozen=True, slots=True)
class TermWeek:
    """One week from its Monday, with its number in the term."""

    number: int
    monday: date
    name: str
    short: int
    days: tuple[TermDay, ...]


class Days:
    """The lines of each day of the term that a choice leaves."""

    def __init__(
        self, known: Facts, plan: Plan, chosen: Chosen, closed: Mapping[date, str]
    ) -> None:
        self.known, self.plan, self.chosen, self.closed = known, plan, chosen, closed
        self.short: dict[str, list[Short]] = {}
        for each in plan.short:
            if chosen.item(each.item):
                self.short.setdefault(each.booking, []).append(each)
        self.entries: dict[date, list[Entry]] = {}
        for on, entry in self._all():
            self.entries.setdefault(on, []).append(entry)

    def weeks(self) -> tuple[TermWeek, ...]:
        """Whole weeks from the Monday the term begins in."""
        first = self.known.start - timedelta(days=self.known.start.weekday())
        count = (self.known.end - first).days // 7 + 1
        return tuple(self._week(n + 1, first + timedelta(weeks=n)) for n in range(count))

    def _week(self, number: int, monday: date) -> TermWeek:
        days = [self._day(monday + timedelta(days=each)) for each in range(7)]
        sunday = monday + timedelta(days=6)
        booked = [b for b in self.chosen.bookings.values() if monday <= b.on <= sunday]
        short = sum(len(self.short.get(b.number, ())) for b in booked)
        name = f"{day_and_month(monday)} to {day_and_month(sunday)}"
        return TermWeek(number, monday, name, short, tuple(_together(days)))

    def _day(self, on: date) -> TermDay:
        over = on < self.plan.as_at
        is_open = self.known.calendar.is_open(on)
        state = "over" if over else "" if is_open else "closed"
        state = "today" if on == self.plan.as_at else state
        told = "" if is_open else closed_words(self.closed.get(on, ""))
        if not is_open and on.weekday() > 4 and on not in self.closed:
            told = "Weekend."
        row = sorted(self.entries.get(on, ()), key=lambda each: KINDS.index(each.kind))
        return TermDay(on, weekday_and_day(on), state, told, tuple(row))

    # -- the lines ----------------------------------------------------------------------------

    def _all(self) -> Iterator[tuple[date, Entry]]:
        yield from self._classes()
        for make in self.plan.makes:
            if self.chosen.make(make):
                yield from self._make(make)
        yield from self._orders()
        yield from self._checks()
        yield from self._last_days()

    def _classes(self) -> Iterator[tuple[date, Entry]]:
        classes = Classes(self.known, self.plan)
        for booking in classes.meant:
            if self.chosen.booking(booking.number):
                head = classes.heading(booking)
                lacks = self.short.get(booking.number, ())
                rows = tuple(_lack(each) for each in lacks)
                row = Row(head.what, time=head.time, more=(head.about,), rows=rows)
                yield booking.on, Entry(CLASS, row)

    def _make(self, make: Make) -> Iterator[tuple[date, Entry]]:
        served = (f"for {listed(make.bookings)}",) if make.bookings else ()
        later = make.ready > make.on
        ready = (f"ready {weekday_and_day(make.ready)}",) if later else ()
        what = f"{made(make)}, {volume(make.volume)}"
        yield make.on, Entry(START if later else MAKE, Row(what, more=ready + served, ref=make.id))
        if make.finish_on and make.finish_on > make.on:
            begun = (f"started {weekday_and_day(make.on)}",)
            yield make.finish_on, Entry(FINISH, Row(what, more=begun + served, ref=make.id))
        if make.good_until:
            from_day = (f"the one made {weekday_and_day(make.on)}",)
            yield make.good_until, Entry(LAST, Row(made(make), more=from_day, ref=make.id))

    def _orders(self) -> Iterator[tuple[date, Entry]]:
        for order in self.plan.orders:
            if self._concerns(order.line, order.item, order.for_bookings):
                late = (f"late by {counted(order.late, 'open day')}",) if order.late else ()
                served = (f"for {listed(order.for_bookings)}",) if order.for_bookings else ()
                what = f"{named(order.item, '')}, {order.packs} × {order.pack}"
                row = Row(what, more=late + served, ref=order.id)
                yield max(order.order_by, self.known.start), Entry(ORDER, row)
        for coming in self.plan.on_order:
            if self._concerns(coming.line, coming.item, coming.bookings):
                late = (f"expected {weekday_and_day(coming.expected)}",) if coming.overdue else ()
                what = f"{named(coming.item, '')}, {coming.packs} × {coming.pack}"
                row = Row(what, more=(f"order {coming.number}", *late))
                yield coming.counts, Entry(COMES, row)

    def _checks(self) -> Iterator[tuple[date, Entry]]:
        item = {bottle.number: bottle.line for bottle in self.known.bottles}
        item |= {make.id: make.line for make in self.plan.makes}
        for on in sorted({check.best for check in self.plan.checks}):
            row = [check for check in self.plan.checks if check.best == on]
            row.sort(key=lambda check: check.optional)
            for check, job in zip(row, checks_on(self.plan, on), strict=True):
                line = self.known.lines[item[check.subject]]
                if self._concerns(line.key, line.item, check.bookings):
                    yield on, Entry(CHECK, Row(job.what, more=job.more, ref=job.ref))

    def _concerns(self, line: str, item: str, bookings: tuple[str, ...]) -> bool:
        if self.chosen.choice.item:
            return self.chosen.item(item)
        return self.chosen.serves(bookings)

    def _last_days(self) -> Iterator[tuple[date, Entry]]:
        """The last days of bottles the plan draws on: of the rest, the shelf tells."""
        drawn: dict[str, set[str]] = {}
        for need in self.plan.needs:
            for draw in need.draws:
                drawn.setdefault(draw.bottle, set()).add(need.booking.number)
        for make in self.plan.makes:
            for source in make.sources:
                drawn.setdefault(source.bottle, set()).update(make.bookings)
        for bottle in self.known.bottles:
            line = self.known.lines[bottle.line]
            served = drawn.get(bottle.number, ())
            if not served or not self.chosen.item(line.item) or not self.chosen.serves(served):
                continue
            until = verdict(bottle.record, line.rules, self.known.as_at).usable_until
            if until and self.known.as_at <= until <= self.known.end:
                yield until, Entry(LAST, Row(f"{bottle.number} {raised(line.key)}"))


def _lack(short: Short) -> Row:
    what = f"{amount(short.amount, short.kind)} {named(short.item, short.strength)}"
    why = (("why", f"/why?ref={short.ref}"),)
    return Row(what, more=(raised(short.reason),), mark="short", links=why)


def _together(days: list[TermDay]) -> Iterator[TermDay]:
    """Days in a row on which nothing happens and of which the same is said, as one."""
    row: list[TermDay] = []
    for day in [*days, None]:
        if row and (day is None or day.entries or _said(day) != _said(row[0])):
            yield _one(row)
            row = []
        if day is not None and day.entries:
            yield day
        elif day is not None:
            row.append(day)


def _said(day: TermDay) -> tuple[str, str]:
    return day.state, day.told


def _one(row: list[TermDay]) -> TermDay:
    name = row[0].name if len(row) == 1 else f"{row[0].name} to {row[-1].name}"
    return TermDay(row[0].on, name, row[0].state, row[0].told)
