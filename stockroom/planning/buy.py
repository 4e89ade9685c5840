"""Step 6: what to order, by when, and whose money.

For each bought line the needs of the term are taken in order of their bookings'
days and drawn on what is usable that day; running sums follow the exact needs.
The day stock runs out or falls below its level is the need-by day. Before it
comes the margin (the house's, or from the start of the make where that is
longer), before that the lead time, both in open days.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass, field, replace
from datetime import date

from stockroom.keeping.rules import Purpose
from stockroom.keeping.verdict import USABLE
from stockroom.planning.amounts import say
from stockroom.planning.batch import Taken
from stockroom.planning.decisions import Level, Order
from stockroom.planning.facts import Bottle, Facts, Form, Line, Pack
from stockroom.planning.make import Made
from stockroom.planning.shelf import Shelf
from stockroom.planning.wants import Want

_NO_PACK = Pack(0, "no pack entered", 0)


@dataclass(slots=True)
class Course:
    """How a line's stock runs through the term (micro-units)."""

    line: Line
    takes: list[Taken]
    missing: int = 0
    first_missing: Taken | None = None
    crossing: Taken | None = None
    left_at_crossing: int = 0
    left_at_end: int = 0
    short_for: dict[str, int] = field(default_factory=dict)

    @property
    def trigger(self) -> Taken | None:
        """The first need that makes an order necessary."""
        found = [take for take in (self.crossing, self.first_missing) if take]
        return min(found, key=lambda take: take.need.rank[1:], default=None)


def courses(facts: Facts, made: Made, missed: Iterable[Want], shelf: Shelf) -> list[Course]:
    """Run every bought line that is drawn on through the term, by key."""
    takes: dict[str, list[Taken]] = {}
    late = [
        Taken(want.line, want.need, want.to_buy, want.deadline[0])
        for want in missed
        if facts.lines[want.line].form is not Form.SUNDRY
    ]
    for take in [*made.taken, *late]:
        if take.amount and facts.lines[take.line].form is not Form.SUNDRY:
            takes.setdefault(take.line, []).append(take)
    return [_course(facts.lines[key], takes[key], shelf) for key in sorted(takes)]


def _course(line: Line, takes: list[Taken], shelf: Shelf) -> Course:
    takes = sorted(takes, key=lambda take: take.need.rank[1:])
    course = Course(line, takes)
    pools = {bottle.number: bottle.left for bottle in shelf.of_line(line.key)}
    for take in takes:
        # drawn on the day of its make, which may be a bottle's last good one
        missing = _draw_down(pools, _usable(shelf, line, take.start), take.amount)
        left = sum(pools[bottle.number] for bottle in _usable(shelf, line, take.need.on))
        if missing:
            course.missing += missing
            course.first_missing = course.first_missing or take
            booking = take.need.booking.number
            course.short_for[booking] = course.short_for.get(booking, 0) + missing
        below = line.level is not None and left < line.level
        if below and course.crossing is None:
            course.crossing, course.left_at_crossing = take, left
        course.left_at_end = left
    return course


def _usable(shelf: Shelf, line: Line, on: date) -> list[Bottle]:
    bottles = shelf.in_order(shelf.of_line(line.key), on, Purpose.ANY)
    return [bottle for bottle in bottles if shelf.may_be_used(bottle.number, on)]


def _draw_down(pools: dict[str, int], usable: list[Bottle], amount: int) -> int:
    """Take from usable bottles in order; what could not be had comes back."""
    for bottle in usable:
        share = min(amount, pools[bottle.number])
        pools[bottle.number] -= share
        amount -= share
    return amount


def orders(facts: Facts, runs: Iterable[Course], shelf: Shelf) -> list[Order]:
    """What to order, the soonest order-by first."""
    found = [_order(facts, course, shelf) for course in runs if course.trigger]
    found.sort(key=lambda order: (order.order_by, order.line))
    return [_numbered(order, f"O{number:02d}") for number, order in enumerate(found, 1)]


def _order(facts: Facts, course: Course, shelf: Shelf) -> Order:
    trigger = course.trigger
    assert trigger is not None
    line, calendar = course.line, facts.calendar
    level = line.level or 0
    wanted = course.missing + max(0, level - course.left_at_end)
    pack, count = choose_packs(line.packs, wanted)
    lead = facts.house.default_lead if pack.lead is None else pack.lead
    order_by = order_by_day(facts, trigger, lead)
    pence = pack.pence * count
    return Order(
        id="",
        line=line.key,
        item=line.item,
        pack=pack.text,
        packs=count,
        need_by=trigger.need.on,
        order_by=order_by,
        arrives=calendar.after(max(facts.as_at, order_by), lead),
        late=calendar.between(order_by, facts.as_at),
        pence=pence,
        shares=share_out(pence, _by_department(course.takes)),
        for_bookings=tuple(dict.fromkeys(take.need.booking.number for take in course.takes)),
        reasons=tuple(_reasons(facts, course, shelf, lead, order_by)),
    )


def order_by_day(facts: Facts, take: Taken, lead: int) -> date:
    """The last open day to order on: need day, less the margin, less the lead time."""
    calendar = facts.calendar
    margin = max(facts.house.margin_days, calendar.between(take.start, take.need.on))
    return calendar.before(calendar.before(take.need.on, margin), lead)


def choose_packs(packs: tuple[Pack, ...], wanted: int) -> tuple[Pack, int]:
    """The pack and how many of it cover `wanted` (micro-units) for least money.

    Ties go to the fewest packs, then the smallest. No pack known: a pack of
    size 0 that says so, one of it.
    """
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
    for number, amount in course.short_for.items():
        take = next(t for t in course.takes if t.need.booking.number == number)
        last = order_by_day(facts, take, lead)
        words.append(f"{say(amount, line.kind)} short for {number}: order by {last} at the latest")
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


def made_levels(facts: Facts, shelf: Shelf) -> list[Level]:
    """The day each line kept to a level falls below it by what is promised from its bottles."""
    found = []
    for line in facts.lines.values():
        if line.level is None or line.key not in facts.methods:
            continue
        bottles = shelf.of_line(line.key)
        promises = [p for bottle in bottles for p in shelf.promises[bottle.number]]
        for day in sorted({promise.on for promise in promises}):
            usable = {b.number: b.left for b in _usable(shelf, line, day)}
            drawn = sum(p.amount for p in promises if p.on <= day and p.bottle in usable)
            left = sum(usable.values()) - drawn
            if left < line.level:
                found.append(Level(line.key, line.item, day, left, line.level, line.kind))
                break
    return sorted(found, key=lambda level: (level.on, level.line))
