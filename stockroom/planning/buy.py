"""Step 6: what to order, by when, and whose money.

For each bought line the needs of the term are taken in order of their bookings'
days and drawn on what is usable that day; running sums follow the exact needs.
The day stock runs out or falls below its level is the need-by day. Before it
comes the margin (the house's, or from the start of the make where that is
longer), before that the lead time, both in open days.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, replace
from datetime import date

from stockroom.keeping.verdict import USABLE
from stockroom.planning.amounts import say
from stockroom.planning.batch import Taken, taken_alone
from stockroom.planning.decisions import Level, Order
from stockroom.planning.facts import Facts, Form, Line, Pack
from stockroom.planning.make import Made
from stockroom.planning.shelf import Shelf
from stockroom.planning.wants import Want

_NO_PACK = Pack(0, "no pack entered", 0)


@dataclass(slots=True)
class Course:
    """How a line's stock runs through the term (micro-units)."""

    line: Line
    takes: list[Taken]
    crossing: Taken | None = None
    left_at_crossing: int = 0
    left_at_end: int = 0

    @property
    def to_buy(self) -> list[Taken]:
        """The needs that wait for something to be bought, by day."""
        return [take for take in self.takes if take.to_buy]

    @property
    def trigger(self) -> Taken | None:
        """The first need that makes an order necessary."""
        found = [take for take in (self.crossing, *self.to_buy[:1]) if take]
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
    return [_course(facts.lines[key], takes[key], shelf) for key in sorted(takes)]


def _course(line: Line, takes: list[Taken], shelf: Shelf) -> Course:
    course = Course(line, sorted(takes, key=_by_day))
    drawn: dict[str, int] = {}
    # bottle by bottle: one that goes past takes only what is left of it out of the sum
    for take in course.takes:
        for number, amount in take.held:
            drawn[number] = drawn.get(number, 0) + amount
        left = left_on(shelf, line, take.need.on, drawn)
        if line.level is not None and left < line.level and course.crossing is None:
            course.crossing, course.left_at_crossing = take, left
        course.left_at_end = left
    return course


def left_on(shelf: Shelf, line: Line, on: date, drawn: dict[str, int]) -> int:
    """What stands there, usable on a day, once so much is drawn from each bottle."""
    usable = [b for b in shelf.of_line(line.key) if shelf.may_be_used(b.number, on)]
    return sum(max(0, bottle.left - drawn.get(bottle.number, 0)) for bottle in usable)


def orders(facts: Facts, runs: Iterable[Course], shelf: Shelf) -> list[Order]:
    """What to order, the soonest order-by first."""
    found = [_order(facts, course, shelf) for course in runs if course.trigger]
    found.sort(key=lambda order: (order.order_by, order.line))
    # numbered only once sorted, so that O01 is the first to send off
    return [_numbered(order, f"O{number:02d}") for number, order in enumerate(found, 1)]


def _order(facts: Facts, course: Course, shelf: Shelf) -> Order:
    trigger = course.trigger
    assert trigger is not None
    line, calendar = course.line, facts.calendar
    level = line.level or 0
    # one order for the whole term: what a second delivery would cost is not known
    wanted = sum(t.to_buy for t in course.to_buy) + max(0, level - course.left_at_end)
    pack, count = choose_packs(_in_time(facts, line, course), wanted)
    lead = facts.house.default_lead if pack.lead is None else pack.lead
    # a later need may have to be started sooner than the first
    order_by = min(order_by_day(facts, take, lead) for take in (trigger, *course.to_buy))
    pence = pack.pence * count
    return Order(
        id="",
        line=line.key,
        item=line.item,
        pack=pack.text,
        packs=count,
        need_by=trigger.need.on,
        order_by=order_by,
        # as if ordered on the last day that will do: whoever orders sooner can only gain
        arrives=calendar.after(max(facts.as_at, order_by), lead),
        late=calendar.between(order_by, facts.as_at),
        pence=pence,
        shares=share_out(pence, _by_department(course.takes)),
        for_bookings=tuple(dict.fromkeys(take.need.booking.number for take in course.takes)),
        reasons=tuple(_reasons(facts, course, shelf, lead, order_by)),
    )


def _in_time(facts: Facts, line: Line, course: Course) -> tuple[Pack, ...]:
    """The packs that come before the first need that can still wait for one; all, if none can."""
    usual, after = facts.house.default_lead, facts.calendar.after
    leads = {p: after(facts.as_at, usual if p.lead is None else p.lead) for p in line.packs}
    soonest = min(leads.values(), default=facts.as_at)
    starts = [take.start for take in course.to_buy if take.start >= soonest]
    if not starts:
        return line.packs
    return tuple(pack for pack, arrives in leads.items() if arrives <= min(starts))


def order_by_day(facts: Facts, take: Taken, lead: int) -> date:
    """The last open day to order on: need day, less the margin, less the lead time."""
    calendar = facts.calendar
    # the margin is for a late van; a make that starts before it is the stricter of the two
    in_hand = calendar.before(take.need.on, facts.house.margin_days)
    return calendar.before(min(in_hand, calendar.on_or_before(take.start)), lead)


def choose_packs(packs: tuple[Pack, ...], wanted: int) -> tuple[Pack, int]:
    """The pack and how many of it cover `wanted` (micro-units) for least money.

    Ties go to the fewest packs, then the smallest. No pack known: a pack of
    size 0 that says so, one of it.
    """
    # one size only: a mixture may save pennies, and leaves two sizes on the shelf to date
    choices = [(p.pence * n, n, p.size, p) for p in packs for n in [max(1, -(-wanted // p.size))]]
    if not choices:
        return _NO_PACK, 1
    _, count, _, pack = min(choices, key=lambda choice: choice[:3])
    return pack, count


def share_out(pence: int, parts: dict[str, int]) -> tuple[tuple[str, int], ...]:
    """Split pence by the parts, to the penny: the shares always add up to the whole.

    Odd pence go to the largest remainders, ties by name.
    """
    whole = sum(parts.values())
    if not whole:
        return ()
    shares = {name: pence * part // whole for name, part in parts.items()}
    odd = pence - sum(shares.values())
    by_remainder = sorted(parts, key=lambda name: (-(pence * parts[name] % whole), name))
    for name in by_remainder[:odd]:
        shares[name] += 1
    return tuple(sorted(shares.items()))


def _by_department(takes: list[Taken]) -> dict[str, int]:
    parts: dict[str, int] = {}
    for take in takes:
        # by what each draws, held or bought: who books first would else never pay
        code = take.need.booking.department
        parts[code] = parts.get(code, 0) + take.amount
    return parts


def _reasons(facts: Facts, course: Course, shelf: Shelf, lead: int, order_by: date) -> list[str]:
    line, words = course.line, []
    if course.crossing and line.level is not None:
        booking = course.crossing.need.booking
        words.append(
            f"below {say(line.level, line.kind)} on {booking.on} "
            f"({booking.number}; {say(course.left_at_crossing, line.kind)} then left)"
        )
    for take in course.to_buy:
        last, number = order_by_day(facts, take, lead), take.need.booking.number
        amount = say(take.to_buy, line.kind)
        words.append(f"{amount} short for {number}: order by {last} at the latest")
    unusable = [
        f"{b.number} {v.condition} ({v.decided_by})"
        for b in shelf.of_line(line.key)
        for v in [shelf.verdict_planned(b.number, facts.as_at)]
        if v.condition not in USABLE
    ]
    words += unusable
    if facts.as_at > order_by:
        days = facts.calendar.between(order_by, facts.as_at)
        comes = facts.calendar.after(facts.as_at, lead)
        words.append(f"late by {days} open days; ordered today it comes {comes}")
    if not line.packs:
        words.append(f"no pack or lead time entered: {lead} open days assumed")
    return words


def _numbered(order: Order, number: str) -> Order:
    return replace(order, id=number)


def levels(facts: Facts, wants: Iterable[Want], shelf: Shelf) -> list[Level]:
    """The day each line kept to a level falls below it, where no order already says so.

    A line made here falls on the day of a booking, by exact needs; a bought one
    that nobody draws on may stand below its level already.
    """
    wanted = [part for root in wants for part in root.tree()]
    found = []
    for line in facts.lines.values():
        takes = [want for want in wanted if want.line == line.key]
        # a bought line that is drawn on has its order to say so
        if takes:
            level = _made_level(line, takes, shelf) if line.key in facts.methods else None
        else:
            level = _already_below(facts, line, shelf)
        found += [level] if level else []
    return sorted(found, key=lambda level: (level.on, level.line))


def _made_level(line: Line, takes: list[Want], shelf: Shelf) -> Level | None:
    drawn: dict[str, int] = {}
    for want in sorted(takes, key=lambda want: want.need.rank[1:]):
        for promise in want.promises:
            drawn[promise.bottle] = drawn.get(promise.bottle, 0) + promise.amount
        left = left_on(shelf, line, want.need.on, drawn)
        if line.level is not None and left < line.level:
            return Level(line.key, line.item, want.need.on, left, line.level, line.kind)
    return None


def _already_below(facts: Facts, line: Line, shelf: Shelf) -> Level | None:
    left = left_on(shelf, line, facts.as_at, {})
    if line.level is None or left >= line.level:
        return None
    return Level(line.key, line.item, facts.as_at, left, line.level, line.kind)
