"""The first days of whoever comes after: what to do on each day, and what to type."""

from __future__ import annotations

from datetime import date, timedelta

from stockroom.measure.amounts import PER_UNIT, Kind
from stockroom.planning.decisions import CheckToDo, Make, Order, Plan, Watch
from stockroom.planning.facts import Booking, Facts, Firmness
from stockroom.reports.files.handover_parts import Job, Part, Point
from stockroom.reports.words import counted, day_heading, listed, named, raised, source

WHO = "--by XX"
"""What stands for the reader's own initials in a command."""

_DONE = {
    "look": ("Look at", "stockroom look {} --good"),
    "titrate": ("Titrate", 'stockroom found {} "STRENGTH"'),
    "test": ("Test", 'stockroom tested {} --peroxide "NUMBER mg/kg"'),
}


def first_week(known: Facts, plan: Plan, monday: date) -> Part:
    """The week from a Monday, from the plan's own day on, and the week after; XX is the reader."""
    # the one after too: who starts on a Thursday has most to start for the Monday
    first, sunday = max(monday, plan.as_at), monday + timedelta(days=13)
    days = [first + timedelta(days=n) for n in range((sunday - first).days + 1)]
    points = [_before(monday), *(_day(known, plan, on, first) for on in days)]
    intro = (
        "In this order, day by day; type the command when the thing is done. Put your own initials "
        "for XX, the place you put it for PLACE (see rooms and places), what you found for "
        "STRENGTH. Each command tells the plan, and what comes after may change: look at the week "
        "again each morning."
    )
    told = tuple(each for each in points if each is not None)
    return Part("Your first week, and the next", intro, told)


def _before(monday: date) -> Point:
    return Point(
        "Before anything else",
        jobs=(
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
    watched = [watch for watch in plan.watch if watch.on == on and not watch.ticked_by]
    jobs = [
        *(_order(order) for order in orders),
        *(_check(check) for check in checks),
        *(_make(known, make) for make in makes),
        *(Job(f"Finish {make.id} {named(make.item, make.strength)}.") for make in finished),
        *(_set_out(known, booking) for booking in held),
        *(Job(destroyed(watch)) for watch in watched),
    ]
    return Point(day_heading(on), jobs=tuple(jobs)) if jobs else None


def destroyed(watch: Watch) -> str:
    """When a mixture that is never kept may be mixed, and must be gone, and how."""
    return (
        f"{watch.booking} {watch.title}: mix not before {_clock(watch.not_before)}, destroy what "
        f"is left by {_clock(watch.destroy_by)}: {watch.how}"
    )


def _set_out(known: Facts, booking: Booking) -> Job:
    told = f"Set out {booking.number} at {_clock(booking.minute)}: {_title(known, booking)}."
    return Job(told, (f"stockroom day {booking.number}",))


def _title(known: Facts, booking: Booking) -> str:
    title = known.recipes[booking.recipe, booking.version].title
    room = f", room {booking.room}" if booking.room else ""
    return f"{title}, {counted(booking.groups, 'group')}{room}"


def _clock(minute: int) -> str:
    after = " the day after" if minute >= 1440 else ""
    return f"{minute // 60 % 24:02d}:{minute % 60:02d}{after}"


def _order(order: Order) -> Job:
    late = f", late by {counted(order.late, 'open day')}" if order.late > 0 else ""
    ask = f"; ask {order.ask_first} first" if order.ask_first else ""
    seller = f" of {order.supplier}" if order.supplier else ""
    # who orders writes it down, and the plan counts on it from its day
    packs = order.mixture or ((order.pack, order.packs, 0),)
    commands = [f'stockroom order "{order.line}" {n} "{pack}" {WHO}' for pack, n, _ in packs]
    told = raised(f"Order {order.item}, {order.packs} × {order.pack}{seller}{late}{ask}.")
    return Job(told, tuple(commands))


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
    cautions = "".join(f" {each.rstrip('.')}." for each in make.cautions)
    # where the last one stands; PLACE is for the reader to fill in
    stood = [each.place for each in known.bottles if each.line == make.line and each.place]
    place = stood[-1] if stood else "PLACE"
    command = f'stockroom make "{make.line}" "{volume} cm3" --place {place} {WHO}'
    return Job(f"{told}{cautions}", (command,))
