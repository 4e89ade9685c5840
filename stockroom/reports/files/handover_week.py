"""The first days of whoever comes after: what to do on each day, and what to type."""

from __future__ import annotations

import shlex
from datetime import date, timedelta

from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.planning.decisions import CheckToDo, Make, Order, Plan, Watch
from stockroom.planning.facts import Booking, Facts, Firmness
from stockroom.planning.timing import hours
from stockroom.reports.files.handover_danger import dangerous
from stockroom.reports.files.handover_parts import WHO, Beside, Job, Part, Point
from stockroom.reports.paper.buying_sheet import shared_by
from stockroom.reports.paper.week_classes import Classes
from stockroom.reports.words import amount, counted, day_heading, listed, named, raised, source

_TYPED_WIDTH = 89
"""The longest command that stands whole on a line of 100."""

_DONE = {
    "look": ("Look at", "stockroom look {} --good"),
    "titrate": ("Titrate", 'stockroom found {} "STRENGTH"'),
    "test": ("Test", 'stockroom tested {} --peroxide "NUMBER mg/kg"'),
}


def first_week(known: Facts, plan: Plan, monday: date, beside: Beside) -> Part:
    """The week from a Monday, from the plan's own day on, and the week after; XX is the reader."""
    # the one after too: who starts on a Thursday has most to start for the Monday
    first, sunday = max(monday, plan.as_at), monday + timedelta(days=13)
    days = [first + timedelta(days=n) for n in range((sunday - first).days + 1)]
    points = [
        dangerous(plan),
        _before(plan, monday, beside),
        *(_day(known, plan, on, first) for on in days),
    ]
    intro = (
        "In this order, day by day; type the command when the thing is done. Put your own initials "
        "for XX, the place you put it for PLACE (see rooms and places), what you found for "
        "STRENGTH. Each command tells the plan, and what comes after may change: look at the week "
        "again each morning."
    )
    if not beside.terms:
        intro = f"No term is entered: stockroom add terms, then bookings. {intro}"
    told = tuple(each for each in points if each is not None)
    return Part("Your first week, and the next", intro, told)


def _before(plan: Plan, monday: date, beside: Beside) -> Point:
    begin, its = "stockroom demo", "make the practice store anew"
    if not plan.house.practice:
        begin, its = f"stockroom --store {shlex.quote(beside.store)} plan", "open its store"
        its += "; set STOCKROOM_STORE to that path, or give --store each time"
    return Point(
        "Before anything else",
        jobs=(
            Job(
                "Install it, in a copy of its repository and an environment of its own with "
                f"Python 3.11 or newer, and {its}.",
                ("pip install .", begin),
            ),
            Job("Read what is never to be kept, and what is open: parts 2 and 3."),
            Job(
                "Copy the store, and see that it holds together.",
                (f"stockroom backup {WHO}", "stockroom verify"),
            ),
            Job(
                "See the week whole, and what is not sound today.",
                (f"stockroom week {monday}", "stockroom past"),
            ),
        ),
    )


def _day(known: Facts, plan: Plan, on: date, first: date) -> Point | None:
    # what was due before the first day is for the first day
    orders = [o for o in plan.orders if o.order_by == on or (on == first and o.order_by < on)]
    checks = [c for c in plan.checks if c.best == on or (on == first and c.best < on)]
    makes = [make for make in plan.makes if make.on == on]
    finished = [make for make in plan.makes if make.finish_on == on and make.on != on]
    held = [b for b in known.bookings if b.on == on and b.firmness is not Firmness.DROPPED]
    held.sort(key=lambda b: (b.minute, b.number))
    classes = Classes(known, plan)
    watched = [watch for watch in plan.watch if watch.on == on and not watch.ticked_by]
    jobs = [
        *(_order(known, order) for order in orders),
        *(_check(check) for check in checks),
        *(_make(known, make) for make in makes),
        *(Job(f"Finish {make.id} {named(make.item, make.strength)}.") for make in finished),
        *(
            Job(raised(f"Ahead, {', '.join(job.more)}: {job.what.rstrip('.')}."))
            for job in classes.for_tomorrow(on)
        ),
        *(_set_out(known, plan, booking) for booking in held),
        *(Job(destroyed(watch)) for watch in watched),
    ]
    return Point(day_heading(on), jobs=tuple(jobs)) if jobs else None


def destroyed(watch: Watch) -> str:
    """When a mixture that is never kept may be mixed, and must be gone, and how."""
    return (
        f"{watch.booking} {watch.title}: mix not before {_clock(watch.not_before)}, destroy what "
        f"is left by {_clock(watch.destroy_by)}: {' '.join((*watch.dangers, watch.how))}"
    )


def _set_out(known: Facts, plan: Plan, booking: Booking) -> Job:
    told = f"Set out {booking.number} at {_clock(booking.minute)}: {_title(known, booking)}."
    for one in plan.short:
        if one.booking == booking.number:
            told += f" SHORT: {amount(one.amount, one.kind)} of {named(one.item, one.strength)}: "
            told += raised(f"{one.reason}.")
    return Job(told, (f"stockroom day {booking.number}",))


def _title(known: Facts, booking: Booking) -> str:
    title = known.recipes[booking.recipe, booking.version].title
    room = f", room {booking.room}" if booking.room else ""
    return f"{title}, {counted(booking.groups, 'group')}{room}"


def _clock(minute: int) -> str:
    after = " the day after" if minute >= 1440 else ""
    return f"{minute // 60 % 24:02d}:{minute % 60:02d}{after}"


def _order(known: Facts, order: Order) -> Job:
    late = f", late by {counted(order.late, 'open day')}" if order.late > 0 else ""
    ask = f"; ask {order.ask_first} first" if order.ask_first else ""
    seller = f" of {order.supplier}" if order.supplier else ""
    # who orders writes it down, and the plan counts on it from its day
    packs = order.mixture or ((order.pack, order.packs, order.pence // order.packs),)
    # an assumed lead time is no day to expect anything on
    leads = [pack.lead for pack in order.sold_as or known.lines[order.line].packs]
    due = f", expected {order.arrives}" if leads and None not in leads else ""
    commands = [_typed(order, pack, count, each, expected=bool(due)) for pack, count, each in packs]
    paid = f"; paid by {shared_by(order)}" if order.shares else ""
    told = raised(
        f"Order {order.item}, {order.packs} × {order.pack}{seller}{late}{due}{ask}{paid}."
    )
    return Job(told, tuple(commands))


def _typed(order: Order, pack: str, count: int, each: int, *, expected: bool) -> str:
    price = f" --price {each // 100}.{each % 100:02d}" if each else ""
    due = f" --expected {order.arrives}" if expected else ""
    told = f'stockroom order "{order.line}" {count} "{pack}"{price}'
    # it cannot be broken; the day is reckoned by the same lead time where it is left out
    fits = len(f"{told}{due} {WHO}") <= _TYPED_WIDTH
    return f"{told}{due if fits else ''} {WHO}"


def _check(check: CheckToDo) -> Job:
    may = ", if you like" if check.optional else ""
    verb, command = _DONE.get(check.what, (f"{check.what}:", "stockroom look {} --good"))
    told = raised(f"{verb} {check.subject} {check.item}{may}, by {check.by}: {check.reason}.")
    if check.worth and check.worth.makes:
        told += f" If it is good, see the week again before you make {listed(check.worth.makes)}."
    return Job(told, (f"{command.format(check.subject)} {WHO}",))


def _make(known: Facts, make: Make) -> Job:
    volume = f"{make.volume / PER_UNIT[Kind.VOLUME]:.10g}"
    taken = listed(source(draw) for draw in make.sources)
    told = f"Make {make.id} {named(make.item, make.strength)}, {volume} cm³, from {taken}; "
    told += f"for {listed(make.bookings)}."
    stands = known.methods[make.line].stands_hours
    told += f" It stands {hours(stands)} before it is finished." if stands else ""
    cautions = "".join(f" {each.rstrip('.')}." for each in make.cautions)
    place = usual_place(known, make.line)
    keep = known.lines[make.line].keep_note
    cautions += f" Keep it {keep.rstrip('.')}." if keep and place == "PLACE" else ""
    command = f'stockroom make "{make.line}" "{volume} cm3" --place {place} {WHO}'
    return Job(f"{told}{cautions}", (command,))


def usual_place(known: Facts, line: str) -> str:
    """Where the last bottle of a line stands; else another strength of it; else PLACE.

    A shelf for what is set aside is nobody's usual place.
    """
    aside = {each.name for each in known.places if each.meant_for == "set aside"}
    stood = [each for each in known.bottles if each.place and each.place not in aside]
    same = known.lines[line]
    likes = [
        [each for each in stood if each.line == line],
        [
            each
            for each in stood
            if known.lines[each.line].substance == same.substance
            and known.lines[each.line].form is same.form
        ],
    ]
    return next((row[-1].place for row in likes if row), "PLACE")
