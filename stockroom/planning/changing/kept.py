"""A plan as it is kept: its decisions without their reasons, in a form that stays readable.

Two kept plans are compared in `changes.py`. Amounts are micro-units of the thing's kind.
What only grows older by itself (how late an order is) is left out: it is no change.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Answer, CheckToDo, Draw, Make, Order, Outcome, Plan
from stockroom.planning.facts import Booking, Facts, Firmness
from stockroom.planning.numbers import natural


@dataclass(frozen=True, slots=True)
class KeptSource:
    """So much from a bottle, or (`bottle` is "") of a line still to be made or bought."""

    bottle: str
    line: str
    amount: int
    kind: Kind


@dataclass(frozen=True, slots=True)
class KeptBooking:
    """A booking as it stood. `minute` after midnight, `spare` in thousandths."""

    number: str
    recipe: str
    version: int
    on: date
    minute: int
    groups: int
    spare: int
    firmness: Firmness

    @property
    def standing(self) -> bool:
        """True while the plan counts it."""
        return self.firmness in (Firmness.PENCILLED, Firmness.FIRM)


@dataclass(frozen=True, slots=True)
class KeptNeed:
    """One need and what became of it; `short` is what of it cannot be had."""

    ref: str
    booking: str
    on: date
    line: str
    item: str
    strength: str
    kind: Kind
    amount: int
    outcome: Outcome
    make: str
    sources: tuple[KeptSource, ...]
    short: int = 0


@dataclass(frozen=True, slots=True)
class KeptMake:
    """One batch. `minutes` is all its hands-on work."""

    id: str
    line: str
    item: str
    strength: str
    volume: int
    on: date
    ready: date
    finish_on: date | None
    minutes: int
    bookings: tuple[str, ...]
    sources: tuple[KeptSource, ...]


@dataclass(frozen=True, slots=True)
class KeptOrder:
    """What was to be bought. `pence` is all of it."""

    id: str
    line: str
    item: str
    pack: str
    packs: int
    need_by: date
    order_by: date
    pence: int
    bookings: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class KeptCheck:
    """A titration or a look. `line` is that of the make where `subject` is one, else ""."""

    subject: str
    line: str
    item: str
    what: str
    best: date
    by: date
    bookings: tuple[str, ...]
    optional: bool


@dataclass(frozen=True, slots=True)
class KeptPlan:
    """All decisions from `as_at` on, and the bookings as they then stood."""

    as_at: date
    start: date
    end: date
    cautious: bool
    bookings: tuple[KeptBooking, ...] = ()
    needs: tuple[KeptNeed, ...] = ()
    makes: tuple[KeptMake, ...] = ()
    orders: tuple[KeptOrder, ...] = ()
    checks: tuple[KeptCheck, ...] = ()

    @property
    def minutes(self) -> int:
        """Hands-on minutes of everything to be made."""
        return sum(make.minutes for make in self.makes)

    @property
    def pence(self) -> int:
        """What everything to be ordered costs."""
        return sum(order.pence for order in self.orders)


def kept_of(facts: Facts, plan: Plan) -> KeptPlan:
    """What there is to keep of a plan, with the bookings of the facts it was made from."""
    makes = {make.id: make for make in plan.makes}
    lacking = {short.ref: short.amount for short in plan.short}
    return KeptPlan(
        as_at=plan.as_at,
        start=plan.start,
        end=plan.end,
        cautious=plan.lower_limits is not None,
        bookings=tuple(sorted(map(_booking, facts.bookings), key=lambda b: natural(b.number))),
        needs=tuple(_need(answer, lacking.get(answer.ref, 0)) for answer in plan.needs),
        makes=tuple(_make(make) for make in plan.makes),
        orders=tuple(_order(order) for order in plan.orders),
        checks=tuple(_check(check, makes.get(check.subject)) for check in plan.checks),
    )


def usual_days(kept: KeptPlan) -> dict[str, tuple[date, ...]]:
    """For each line that is made, the days its makes have, in order."""
    days: dict[str, list[date]] = {}
    for make in kept.makes:
        days.setdefault(make.line, []).append(make.on)
    return {line: tuple(sorted(days[line])) for line in sorted(days)}


def _booking(booking: Booking) -> KeptBooking:
    return KeptBooking(
        booking.number,
        booking.recipe,
        booking.version,
        booking.on,
        booking.minute,
        booking.groups,
        booking.spare,
        booking.firmness,
    )


def _need(answer: Answer, short: int) -> KeptNeed:
    return KeptNeed(
        ref=answer.ref,
        booking=answer.booking.number,
        on=answer.booking.on,
        line=answer.line,
        item=answer.item,
        strength=answer.strength,
        kind=answer.kind,
        amount=answer.amount,
        outcome=answer.outcome,
        make=answer.make,
        sources=_sources(answer.draws),
        short=short,
    )


def _make(make: Make) -> KeptMake:
    return KeptMake(
        id=make.id,
        line=make.line,
        item=make.item,
        strength=make.strength,
        volume=make.volume,
        on=make.on,
        ready=make.ready,
        finish_on=make.finish_on,
        minutes=make.minutes,
        bookings=tuple(sorted(make.bookings, key=natural)),
        sources=_sources(make.sources),
    )


def _sources(draws: tuple[Draw, ...]) -> tuple[KeptSource, ...]:
    """Each bottle, or line without one, once: what was drawn already and what is to come are one.

    The number of the make a part comes from is left out: numbers change when others come or go.
    """
    total: dict[tuple[str, str, Kind], int] = {}
    for draw in draws:
        place = (draw.bottle, draw.line or draw.item, draw.kind)
        total[place] = total.get(place, 0) + draw.amount
    ordered = sorted(total, key=lambda place: (not place[0], natural(place[0]), place[1]))
    return tuple(KeptSource(place[0], place[1], total[place], place[2]) for place in ordered)


def _order(order: Order) -> KeptOrder:
    return KeptOrder(
        id=order.id,
        line=order.line,
        item=order.item,
        pack=order.pack,
        packs=order.packs,
        need_by=order.need_by,
        order_by=order.order_by,
        pence=order.pence,
        bookings=tuple(sorted(order.for_bookings, key=natural)),
    )


def _check(check: CheckToDo, make: Make | None) -> KeptCheck:
    return KeptCheck(
        subject=check.subject,
        line=make.line if make else "",
        item=check.item,
        what=check.what,
        best=check.best,
        by=check.by,
        bookings=tuple(sorted(check.bookings, key=natural)),
        optional=check.optional,
    )
