"""Step 6: what to order, by when, and whose money.

The day stock runs out or falls below its level is the need-by day. Before it
comes the margin (the house's, or from the start of the make where that is
longer), before that the lead time and the days it takes to get leave, all in open
days. `course.py` runs the stock through the term, `packs.py` chooses
the packs, `late.py` says what to do when it is late, `split.py` what
to do when it would be thrown away.
"""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import replace

from stockroom.keeping.verdict import USABLE
from stockroom.planning.amounts import say
from stockroom.planning.buying.course import (
    Course,
    Waiting,
    arrives_on,
    order_by_day,
    soonest_arrival,
    together,
)
from stockroom.planning.buying.late import ways_round, ways_round_waiting
from stockroom.planning.buying.money import by_department, share_out
from stockroom.planning.buying.on_way import on_its_way
from stockroom.planning.buying.packs import (
    YEAR,
    Choice,
    Rate,
    choose,
    choose_packs,
    keeps_unopened,
    most_used,
    rates,
    years,
)
from stockroom.planning.buying.split import deliveries, used_by
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.decisions import Coming, Order
from stockroom.planning.facts import Facts, Line, Pack

_LONG = 2 * YEAR
"""Stock that lasts longer than this is said to: our choice."""


def orders(facts: Facts, runs: Iterable[Course], shelf: Shelf) -> list[Order]:
    """What to order, the soonest order-by first."""
    wanted = [course for course in runs if course.trigger]
    # only when there is something to buy: a rate takes every booking to work out
    used = rates(facts) if wanted else {}
    found = [_order(facts, course, shelf, used.get(course.line.key)) for course in wanted]
    found.sort(key=lambda order: (order.order_by, order.line))
    # numbered only once sorted, so that O01 is the first to send off
    return [replace(order, id=f"O{number:02d}") for number, order in enumerate(found, 1)]


def coming(facts: Facts, runs: Iterable[Course], shelf: Shelf) -> list[Coming]:
    """What is on its way, with the bookings each order serves, the soonest first.

    The ways round for a need stand with the last order it waits for, and only where nothing
    more must be ordered for it: they then stand with that order of the plan.
    """
    by_line = {course.line.key: course for course in runs}
    row = on_its_way(facts)
    last = {one.number: place for place, one in enumerate(row)}
    told: dict[str, list[Waiting]] = {}
    for course in by_line.values():
        still = {waiting.take.need.ref for waiting in course.waiting}
        for ref, late in course.late_for.items():
            if ref not in still:
                number = max((number for number, _ in late), key=last.__getitem__)
                told.setdefault(number, []).append(together(part for _, part in late))
    return [
        _served(facts, one, by_line[one.line], shelf, told) if one.line in by_line else one
        for one in row
    ]


def _served(
    facts: Facts, one: Coming, course: Course, shelf: Shelf, told: dict[str, list[Waiting]]
) -> Coming:
    ways = ways_round_waiting(facts, course.line, shelf, told.get(one.number, ()), one.counts)
    served = tuple(course.on_way.get(one.number, ()))
    return replace(one, bookings=served, instead=tuple(ways))


def _order(facts: Facts, course: Course, shelf: Shelf, rate: Rate | None) -> Order:
    trigger = course.trigger
    assert trigger is not None
    line, calendar = course.line, facts.calendar
    # one order for the whole term: what a second delivery would cost is not known
    wanted = sum(w.amount for w in course.waiting) + max(0, _level(line) - course.left_at_end)
    packs = _in_time(facts, line, course)
    soonest = soonest_arrival(facts, line)
    used = most_used(facts, wanted, rate, soonest, keeps_unopened(facts, line, soonest))
    choice = choose(packs, wanted, used)
    comes_after = choice.lead(facts.house.default_lead)
    lead = comes_after + line.ask_days
    # a later need may have to be started sooner than the first
    takes = (trigger, *(waiting.take for waiting in course.waiting))
    order_by = min(order_by_day(facts, take, lead) for take in takes)
    # as if ordered on the last day that will do: whoever orders sooner can only gain
    arrives = arrives_on(facts, line, max(facts.as_at, order_by), comes_after)
    late = calendar.between(order_by, facts.as_at)
    keeps = keeps_unopened(facts, line, arrives)
    queried = keeps is not None and 2 * used_by(facts, course, rate, keeps) < choice.size
    order = Order(
        id="",
        line=line.key,
        item=line.item,
        pack=choice.text,
        packs=choice.count,
        need_by=trigger.need.on,
        order_by=order_by,
        arrives=arrives,
        late=late,
        pence=choice.pence,
        shares=share_out(choice.pence, by_department(course.takes)),
        for_bookings=tuple(dict.fromkeys(take.need.booking.number for take in course.takes)),
        amount=choice.size,
        kind=line.kind,
        supplier=" + ".join(dict.fromkeys(p.supplier for p, _ in choice.packs if p.supplier)),
        mixture=tuple((pack.text, count, pack.pence) for pack, count in choice.packs),
        sold_as=tuple(pack for pack, _ in choice.packs),
        falls_below=course.falls_below,
        runs_out=course.runs_out,
        ask_first=line.ask_first,
        ask_days=line.ask_days,
        keeps_until=keeps,
        queried=queried,
        deliveries=deliveries(facts, course, wanted, packs, lead) if queried else (),
        instead=tuple(ways_round(facts, course, shelf, arrives)) if late else (),
    )
    words = [*_why(facts, course, shelf, lead), *_about(facts, course, order, choice, rate)]
    return replace(order, reasons=tuple(words))


def _level(line: Line) -> int:
    return line.level or 0


def _in_time(facts: Facts, line: Line, course: Course) -> tuple[Pack, ...]:
    """The packs that come before the first need that can still wait for one; all, if none can."""
    leads = {pack: arrives_on(facts, line, facts.as_at, pack.lead) for pack in line.packs}
    soonest = min(leads.values(), default=facts.as_at)
    starts = [w.take.start for w in course.waiting if w.take.start >= soonest]
    if not starts:
        return line.packs
    return tuple(pack for pack, arrives in leads.items() if arrives <= min(starts))


def _why(facts: Facts, course: Course, shelf: Shelf, lead: int) -> Iterator[str]:
    """What makes the order necessary: the level, each need short, and what cannot be used."""
    line = course.line
    if course.crossing and line.level is not None:
        booking = course.crossing.need.booking
        yield (
            f"below {say(line.level, line.kind)} on {booking.on} "
            f"({booking.number}; {say(course.left_at_crossing, line.kind)} then left)"
        )
    for waiting in course.waiting:
        last, number = order_by_day(facts, waiting.take, lead), waiting.take.need.booking.number
        amount = say(waiting.amount, line.kind)
        yield f"{amount} short for {number}: order by {last} at the latest"
    # for a drop more a whole pack may be bought: it is said which drop
    asked = [course.crossing, *(waiting.take for waiting in course.waiting)]
    yield from dict.fromkeys(
        f"{take.need.booking.number}: {words}" for take in asked if take for words in take.close
    )
    for bottle in shelf.of_line(line.key):
        judged = shelf.verdict_planned(bottle.number, facts.as_at)
        if judged.condition not in USABLE:
            yield f"{bottle.number} {judged.condition} ({judged.decided_by})"


def _about(
    facts: Facts, course: Course, order: Order, choice: Choice, rate: Rate | None
) -> Iterator[str]:
    """What else to know of it: lateness, leave, what is on its way, and how long it lasts."""
    line, calendar = course.line, facts.calendar
    if order.late:
        comes = arrives_on(facts, line, facts.as_at, choice.lead(facts.house.default_lead))
        yield f"late by {order.late} open days; ordered today it comes {comes}"
    if line.ask_first or line.ask_days:
        days = "1 open day" if line.ask_days == 1 else f"{line.ask_days} open days"
        without = calendar.after(order.order_by, line.ask_days)
        words = f"ask first: {line.ask_first or 'leave is needed'}"
        yield f"{words}; that takes {days}, so order by {order.order_by} and not {without}"
    if not line.packs:
        lead = facts.house.default_lead
        yield f"no pack or lead time entered: {lead} open days assumed"
        return
    if order.queried:
        yield (
            f"not half of {order.packs} × {order.pack} would be used by {order.keeps_until}, "
            f"as long as it keeps unopened: {_less(line, order)}"
        )
    if len(choice.packs) > 1:
        pack, count = choose_packs(line.packs, choice.size)
        saves = pack.pence * count - choice.pence
        yield f"two sizes, £{saves / 100:.2f} less than {count} × {pack.text}"
    yield from _lasting(line, choice, rate)


def _less(line: Line, order: Order) -> str:
    if order.deliveries:
        return f"split it into {len(order.deliveries)} deliveries?"
    smaller = any(pack.size < order.amount for pack in line.packs)
    return "is less enough?" if smaller else "no smaller pack is entered"


def _lasting(line: Line, choice: Choice, rate: Rate | None) -> Iterator[str]:
    """How long it lasts, where that is long, and how long a larger pack would."""
    lasts = rate.lasts(choice.size) if rate else None
    if choice.dearer and lasts:
        yield (
            f"£{choice.dearer / 100:.2f} more than would just do, and a fifth cheaper by what "
            f"is used: {_called(choice)} lasts {years(lasts)} at this rate"
        )
    elif lasts and lasts > _LONG:
        yield f"{_called(choice)} lasts {years(lasts)} at this rate"
    largest = max(line.packs, key=lambda pack: pack.size)
    long = rate.lasts(largest.size) if rate else None
    if long and long > _LONG and largest.size > choice.size:
        price = f"£{largest.pence / 100:.2f}"
        yield f"and not {largest.text} for {price}: it lasts {years(long)} at this rate"


def _called(choice: Choice) -> str:
    return choice.text if choice.count == 1 else f"{choice.count} × {choice.text}"
