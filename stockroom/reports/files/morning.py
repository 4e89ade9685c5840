"""The morning note: what is due today, as plain text that any mailer can send."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from datetime import date

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Booking, Facts
from stockroom.planning.people import clock, must_be_here
from stockroom.reports.files.morning_shelf import (
    Due,
    at_the_shelf,
    leaned_on_late,
    not_written,
)
from stockroom.reports.paper.day_times import times_of
from stockroom.reports.paper.head import Head, head_of
from stockroom.reports.paper.week_also import checks_on
from stockroom.reports.paper.week_classes import Classes
from stockroom.reports.paper.week_makes import Makes
from stockroom.reports.paper.week_parts import Job
from stockroom.reports.sheet import PRACTICE, page, section, wrap
from stockroom.reports.words import (
    counted,
    day_heading,
    listed,
    money,
    named,
    raised,
    weekday_and_day,
)

WIDTH = 72
"""Columns of the note: what a mailer shows without breaking lines. Common practice, no source."""


@dataclass(frozen=True, slots=True)
class Part:
    """Things of one kind under their heading; not `counted` is what nothing waits for."""

    title: str
    rows: tuple[Due, ...]
    counted: bool = True


@dataclass(frozen=True, slots=True)
class Morning:
    """The note of one day: `count` things are due; `told` is what is worth a line above them."""

    head: Head
    on: date
    count: int
    told: tuple[str, ...]
    parts: tuple[Part, ...]


def morning_of(known: Facts, plan: Plan) -> Morning:
    """The note for the plan's own day, open or closed.

    A check is due on its best day, and before it where it is overdue and a class within a
    fortnight leans on it; what stands wrong at the shelf every day until it is mended (our
    choice); an order from its order-by day until it is placed, a delivery on the day it is
    expected and after; what only saves work is told and not counted.
    """
    rows = [part for part in _parts(known, plan) if part.rows]
    count = sum(len(part.rows) for part in rows if part.counted)
    told = () if known.calendar.is_open(plan.as_at) else ("Closed today.",)
    return Morning(head_of(plan, "Morning note"), plan.as_at, count, told, tuple(rows))


def _parts(known: Facts, plan: Plan) -> Iterator[Part]:
    on = plan.as_at
    makes, classes = Makes(known, plan), Classes(known, plan)
    finish = f"{on} finish "
    of_day = makes.of_day(on)
    _, destroy = classes.never_kept(on)
    yield _part("CLASSES", [_class(classes, booking) for booking in classes.on(on)], counted=False)
    yield _part("CANNOT BE HAD for today", _short(plan))
    yield _part("SOMEONE MUST BE HERE", _someone(classes, plan))
    yield _part("AT THE SHELF", at_the_shelf(known))
    yield _part("CHECK", _checks(plan, optional=False))
    yield _part("FINISH", [_due(job) for job in of_day if job.key.startswith(finish)])
    yield _part("START", [_due(job) for job in makes.started(on)])
    yield _part("MAKE", [_due(job) for job in of_day if not job.key.startswith(finish)])
    yield _part("FOR A LATER DAY", [_due(job) for job in classes.for_tomorrow(on)])
    yield _part("DESTROY", [_due(job) for job in destroy if job.sign])
    yield _part("ORDER", _orders(plan))
    yield _part("DELIVERIES", _coming(plan))
    yield _part("NOT WRITTEN DOWN", not_written(known))
    yield _part("WOULD SAVE WORK", _checks(plan, optional=True), counted=False)


def _part(title: str, rows: list[Due], *, counted: bool = True) -> Part:
    return Part(title, tuple(rows), counted)


def _due(job: Job) -> Due:
    # an hour first: it is what the day is arranged by
    what = f"{job.time}: {job.what}" if job.time else job.what
    return Due(what, job.more, job.cautions)


def _class(classes: Classes, booking: Booking) -> Due:
    head = classes.heading(booking)
    return Due(f"{head.time} {head.what}", (head.about,))


def _someone(classes: Classes, plan: Plan) -> list[Due]:
    rows = []
    kept = {each.booking for each in plan.watch}
    outs = times_of(classes.known, plan, plan.as_at).set_out
    # what is done already is not set out any more
    for booking in (each for each in classes.on(plan.as_at) if each.number in outs):
        out, never = outs[booking.number], booking.number in kept
        for first, last in must_be_here(classes.known, booking, set_out=out, never_kept=never):
            rows.append(Due(f"{clock(first)} to {clock(last)}: for {booking.number}"))
    return rows


def _short(plan: Plan) -> list[Due]:
    today = {need.ref for need in plan.needs if need.booking.on == plan.as_at}
    return [
        Due(f"{each.booking} {named(each.item, each.strength)}", (raised(each.reason),))
        for each in plan.short
        if each.ref in today
    ]


def _checks(plan: Plan, *, optional: bool) -> list[Due]:
    late = set() if optional else leaned_on_late(plan)
    row = tuple(check for check in plan.checks if check.optional is optional)
    row = tuple(c for c in row if c.best <= plan.as_at or c.subject in late)
    days = sorted({check.best for check in row})
    return [_due(job) for on in days for job in checks_on(replace(plan, checks=row), on)]


def _orders(plan: Plan) -> list[Due]:
    rows = []
    for order in plan.orders:
        if order.order_by <= plan.as_at:
            late = f"late by {counted(order.late, 'open day')}" if order.late else "today"
            served = f"for {listed(order.for_bookings)}" if order.for_bookings else ""
            ask = f"ask {order.ask_first} first" if order.ask_first else ""
            needed = f"needed {weekday_and_day(order.need_by)}"
            what = f"{named(order.item, '')}, {order.packs} × {order.pack}: {late}"
            more = (ask, money(order.pence), needed, served)
            rows.append(Due(what, tuple(each for each in more if each)))
    return rows


def _coming(plan: Plan) -> list[Due]:
    rows = []
    for each in plan.on_order:
        if each.expected <= plan.as_at:
            late = f"overdue by {counted(each.overdue, 'open day')}" if each.overdue else ""
            what = f"{named(each.item, '')}, {each.packs} × {each.pack}, order {each.number}"
            expected = f"expected {weekday_and_day(each.expected)}"
            ask = f"ask {each.supplier or 'the supplier'}" if each.overdue else ""
            rows.append(Due(what, tuple(one for one in (late or expected, ask) if one)))
    return rows


def count_line(note: Morning) -> str:
    """The first line: "3 things due today, Tue 26 Jan 2027", "Nothing due today, ..."."""
    due = f"{counted(note.count, 'thing')} due today" if note.count else "Nothing due today"
    return f"{due}, {day_heading(note.on)}"


def morning_text(note: Morning, width: int = WIDTH) -> str:
    """The note as text, its first line the count; never wider than 72 columns."""
    width = min(width, WIDTH)
    practice = (PRACTICE,) if note.head.practice else ()
    top = [count_line(note), *practice, note.head.house, *note.told]
    parts = [section(part.title, _lines(part, width)) for part in note.parts]
    return page(["\n".join(wrap(line, width) for line in top), *parts, _foot(note, width)])


def _lines(part: Part, width: int) -> list[str]:
    box = "[ ] " if part.counted else ""
    lines = []
    for due in part.rows:
        lines.append(wrap(f"{box}{due.what}", width, indent=2, hang=6))
        if due.more:
            lines.append(wrap("; ".join(due.more), width, indent=6, hang=6))
        lines += [wrap(f"! {each}", width, indent=6, hang=8) for each in due.cautions]
    return lines


def _foot(note: Morning, width: int) -> str:
    return wrap(note.head.caution, width, hang=0)
