"""What of a plan goes into a calendar: each piece of work with its day, its words, its mark."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from datetime import date, timedelta

from stockroom.planning.decisions import CheckToDo, Coming, Make, Order, Plan
from stockroom.planning.facts import Booking, Facts, Firmness
from stockroom.reports.paper.week_also import checks_on
from stockroom.reports.paper.week_classes import Classes
from stockroom.reports.paper.week_makes import Makes
from stockroom.reports.paper.week_parts import Job, tied
from stockroom.reports.words import counted, listed, money, named, weekday_and_day

BOOKING, DESTROY, ORDER, COMING = "booking", "destroy", "order", "delivery"
MAKE, START, FINISH, BEFORE = "make", "start", "finish", "day before"

DAY = 1440
"""Minutes in a day."""


@dataclass(frozen=True, slots=True)
class Work:
    """One piece of work: `kind` of `thing` for `bookings` is what it is, all else what is said.

    `at` is minutes after midnight of `on`, None for the whole day; `lasts` goes with it.
    """

    kind: str
    thing: str
    bookings: tuple[str, ...]
    on: date
    what: str
    more: tuple[str, ...] = ()
    at: int | None = None
    lasts: int = 0
    tentative: bool = False

    @property
    def what_it_is(self) -> tuple[str, str]:
        """What stays the same when it is moved."""
        return ("make" if self.kind in (MAKE, START) else self.kind), self.thing


def work_of(known: Facts, plan: Plan) -> list[Work]:
    """All there is to enter from the plan's day on, by day and hour, then by name.

    Makes, what is finished later, titrations and looks on their best day, what is fetched or
    soaked the day before, orders to place, deliveries expected; and, by the clock, the bookings
    and what must be destroyed after them: there the hour is what counts.
    """
    found = [
        *_makes(known, plan),
        *(_check(plan, check) for check in plan.checks),
        *_before(known, plan),
        *(_order(plan, order) for order in plan.orders),
        *(_coming(plan, each) for each in plan.on_order),
        *_bookings(known, plan),
        *_destroyed(known, plan),
    ]
    meant = [each for each in found if each.on >= plan.as_at]
    return sorted(meant, key=_order_of)


def _order_of(work: Work) -> tuple[date, int, str, str, tuple[str, ...]]:
    return work.on, -1 if work.at is None else work.at, work.kind, work.what, work.bookings


def _told(job: Job) -> tuple[str, ...]:
    return (*job.more, *(f"Caution: {each}" for each in job.cautions))


def _makes(known: Facts, plan: Plan) -> Iterator[Work]:
    jobs = Makes(known, plan)
    begun: dict[str, Job] = {}
    ended: dict[str, Job] = {}
    for on in {day for make in plan.makes for day in (make.on, make.finish_on) if day}:
        for job in (*jobs.started(on), *jobs.of_day(on)):
            (ended if job.key.startswith(f"{on} finish ") else begun)[job.ref] = job
    for make in plan.makes:
        kind = START if make.ready > make.on else MAKE
        work = _make(make, kind, make.on, begun[make.id])
        late = f"on {weekday_and_day(make.latest)} at the latest" if make.latest > make.on else ""
        by = f"begin by {begun[make.id].time}" if begun[make.id].time else ""
        yield replace(work, what=f"{kind} {work.what}", more=_some(by, *work.more, late))
        if make.id in ended and make.finish_on is not None:
            yield _make(make, FINISH, make.finish_on, ended[make.id])


def _make(make: Make, kind: str, on: date, job: Job) -> Work:
    # the number of a make changes from plan to plan, and so stands nowhere in it
    return Work(kind, make.line, make.bookings, on, job.what, _told(job))


def _some(*words: str) -> tuple[str, ...]:
    return tuple(word for word in words if word)


def _check(plan: Plan, check: CheckToDo) -> Work:
    (job,) = checks_on(replace(plan, checks=(check,)), check.best)
    made_here = any(make.id == check.subject for make in plan.makes)
    thing = check.item if made_here else check.subject
    what = f"{job.what} (only to save work)" if check.optional else job.what
    return Work(check.what, thing, check.bookings, check.best, what, _told(job))


def _before(known: Facts, plan: Plan) -> Iterator[Work]:
    classes = Classes(known, plan)
    days = {known.calendar.before(booking.on, 1) for booking in classes.meant}
    for on in sorted(days):
        for job in classes.for_tomorrow(on):
            # "2027-02-02 shop K12", "2027-01-13 handling K03 0"
            thing = job.key.split(" ", 1)[1]
            yield Work(BEFORE, thing, (thing.split()[1],), on, job.what, _told(job))


def _order(plan: Plan, order: Order) -> Work:
    late = f"late by {counted(order.late, 'open day')}" if order.late else ""
    by = f"order by {weekday_and_day(order.order_by)}"
    served = f"for {listed(order.for_bookings)}" if order.for_bookings else ""
    ask = f"ask {order.ask_first} first" if order.ask_first else ""
    supplier = f"from {order.supplier}" if order.supplier else ""
    # what should have been ordered is of no use on a day that is over
    on = max(order.order_by, plan.as_at)
    what = f"order {named(order.item, '')}, {order.packs} × {order.pack}"
    needed = f"needed {weekday_and_day(order.need_by)}"
    more = _some(by, late, ask, supplier, money(order.pence), needed, served)
    return Work(ORDER, order.line, order.for_bookings, on, what, more)


def _coming(plan: Plan, coming: Coming) -> Work:
    on = max(coming.expected, plan.as_at)
    what = f"delivery expected: {named(coming.item, '')}, {coming.packs} × {coming.pack}"
    late = f"overdue by {counted(coming.overdue, 'open day')}: ask" if coming.overdue else ""
    supplier = f"from {coming.supplier}" if coming.supplier else ""
    served = f"for {listed(coming.bookings)}" if coming.bookings else ""
    more = _some(f"order {coming.number}", late, supplier, served)
    return Work(COMING, coming.number, coming.bookings, on, what, more)


def _bookings(known: Facts, plan: Plan) -> Iterator[Work]:
    over = (Firmness.DROPPED, Firmness.DONE)
    classes = Classes(known, plan)
    for booking in known.bookings:
        if booking.firmness not in over and known.start <= booking.on <= known.end:
            head = classes.heading(booking)
            yield Work(
                BOOKING, booking.number, (booking.number,), booking.on,
                f"{booking.number} {head.what}", _some(head.about),
                at=booking.minute, lasts=booking.lasts_minutes,
                tentative=booking.firmness is Firmness.PENCILLED,
            )  # fmt: skip


def _destroyed(known: Facts, plan: Plan) -> Iterator[Work]:
    by_number: dict[str, Booking] = {booking.number: booking for booking in known.bookings}
    classes = Classes(known, plan)
    for watch in plan.watch:
        if watch.ticked_by:
            continue
        _, jobs = classes.never_kept(watch.on)
        (job,) = [each for each in jobs if each.key == f"{watch.on} destroy {watch.booking}"]
        booking = by_number[watch.booking]
        ends = min(booking.minute + booking.lasts_minutes, watch.destroy_by)
        on, at = watch.on + timedelta(days=ends // DAY), ends % DAY
        more = _some(tied(job.time), *_told(job))
        yield Work(
            DESTROY, watch.booking, (watch.booking,), on, job.what, more,
            at=at, lasts=watch.destroy_by - ends,
        )  # fmt: skip
