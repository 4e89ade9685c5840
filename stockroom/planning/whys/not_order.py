"""Why an order is not of another pack, another supplier, another line, or sent another day."""

from __future__ import annotations

from datetime import date, timedelta

from stockroom.keeping.record import Record
from stockroom.keeping.rules import Purpose
from stockroom.keeping.verdict import USABLE, limits_of, verdict
from stockroom.measure.amounts import Amount
from stockroom.planning.amounts import say
from stockroom.planning.buying.course import arrives_on
from stockroom.planning.buying.packs import years
from stockroom.planning.decisions import Order
from stockroom.planning.facts import Bottle, Line, Pack
from stockroom.planning.whys.planned_shelf import PlannedShelf

# below two years the day still says more than the month: our choice
_TO_THE_DAY = timedelta(days=730)


def other_amount(planned: PlannedShelf, order: Order, other: Amount) -> list[str]:
    """What an order would cost in packs of another size, and how long they would last."""
    line = planned.facts.lines[order.line]
    if other.kind is not line.kind:
        return [f"{order.id} is for {line.key}, which is not sold by {other.kind}"]
    packs = [pack for pack in line.packs if pack.size == other.micro]
    rows = [row for pack in packs for row in other_pack(planned, order, pack)]
    none = f"no pack of {say(other.micro, other.kind)} of {line.key} is entered: {_sold(line)}"
    # what nobody sells by our tables may still stand in a list of prices on the desk
    return rows or [none, _lasts(planned, order, other.micro)]


def of_supplier(planned: PlannedShelf, order: Order, supplier: str) -> list[str]:
    """The same for the packs of another supplier."""
    line = planned.facts.lines[order.line]
    packs = [pack for pack in line.packs if pack.supplier.lower() == supplier.strip().lower()]
    return [row for pack in packs for row in other_pack(planned, order, pack)]


def other_pack(planned: PlannedShelf, order: Order, pack: Pack) -> list[str]:
    """One other pack: how many, what they cost beside the order, when they come, how long they
    last at this term's rate.
    """
    if pack == _chosen(planned, order):
        return [f"{order.id} is {order.packs} × {pack.text}{_of(pack)}: {_money(order.pence)}"]
    count = max(1, -(-_wanted(planned, order) // pack.size)) if pack.size else 1
    pence = pack.pence * count
    dearer = "dearer" if pence > order.pence else "cheaper"
    apart = f"{_money(abs(pence - order.pence))} {dearer} than"
    words = [
        f"{count} × {pack.text}{_of(pack)} of {order.line} is {_money(pence)}, "
        f"{apart if pence != order.pence else 'as much as'} "
        f"{order.packs} × {order.pack} ({_money(order.pence)})",
        _lasts(planned, order, pack.size * count),
        _late(planned, order, pack),
    ]
    return [word for word in words if word]


def _of(pack: Pack) -> str:
    return f" from {pack.supplier}" if pack.supplier else ""


def _money(pence: int) -> str:
    return f"£{pence / 100:.2f}"


def _sold(line: Line) -> str:
    row = [f"{pack.text} {_money(pack.pence)}{_of(pack)}" for pack in line.packs]
    return f"it is sold as {', '.join(row)}" if row else "no pack of it is entered"


def _chosen(planned: PlannedShelf, order: Order) -> Pack | None:
    """The pack an order is of; None for several sizes together, or where none is entered."""
    # by name alone, two suppliers' "100 g" would be taken for each other
    sold = [pack for pack in planned.facts.lines[order.line].packs if pack in order.sold_as]
    return sold[0] if len(order.sold_as) == 1 and sold else None


def _wanted(planned: PlannedShelf, order: Order) -> int:
    """What the order must cover, micro-units: what is short, and what lifts it to its level.

    Never more than the order brings, nor as little as one pack less of it would: the order
    was reckoned from the same need.
    """
    line, chosen = planned.facts.lines[order.line], _chosen(planned, order)
    good = [
        bottle.left
        for bottle in planned.facts.bottles
        if bottle.line == line.key
        and verdict(bottle.record, line.rules, order.need_by).condition in USABLE
    ]
    wanted = max(0, _term_use(planned, order) + (line.level or 0) - sum(good))
    brings = order.amount or (chosen.size * order.packs if chosen else 0)
    least = brings - chosen.size + 1 if chosen else 0
    return min(max(wanted, least), brings) if brings else wanted


def _term_use(planned: PlannedShelf, order: Order) -> int:
    """What the plan still takes of the line, from bottles and to be bought."""
    draws = [source for make in planned.plan.makes for source in make.sources]
    taken = sum(draw.amount for draw in draws if draw.line == order.line)
    return taken + sum(a.amount for a in planned.plan.needs if a.line == order.line)


def _lasts(planned: PlannedShelf, order: Order, amount: int) -> str:
    """How long an amount lasts at the rate the packs were chosen by, and when they lapse."""
    line, rate = planned.facts.lines[order.line], planned.rates.get(order.line)
    lasts = rate.lasts(amount) if rate else None
    if rate is None or not lasts:
        return ""
    taken = f"{say(rate.amount, line.kind)} in {rate.days} days"
    words = f"{say(amount, line.kind)} would last {_span(lasts)} at this term's rate ({taken})"
    until = _good_until(line, order.arrives)
    if until and until - order.arrives < lasts:
        words += f"; what is left on {until} goes past unused"
    return words


def _span(lasts: timedelta) -> str:
    return years(lasts) if lasts >= _TO_THE_DAY else f"{lasts.days} days"


def _good_until(line: Line, arrives: date) -> date | None:
    """The last good day of a pack that comes on a day and is opened then."""
    record = Record(received=arrives, opened=arrives, nominal=line.strength)
    limits = limits_of(record, line.rules, arrives, Purpose.ANY)
    return min((x.until for x in limits if not x.known_until and x.until < date.max), default=None)


def _late(planned: PlannedShelf, order: Order, pack: Pack) -> str:
    facts, line = planned.facts, planned.facts.lines[order.line]
    lead = facts.house.default_lead if pack.lead is None else pack.lead
    comes = arrives_on(facts, line, facts.as_at, pack.lead)
    days = f"{lead} open days{f', {line.ask_days} more to ask first' if line.ask_days else ''}"
    late = f"too late for {order.need_by}" if comes > order.need_by else f"needed {order.need_by}"
    return f"ordered today it comes {comes} ({days}), {late}"


def other_day(planned: PlannedShelf, order: Order, day: date) -> list[str]:
    """What ordering on another day would mean."""
    facts, usual = planned.facts, planned.facts.house.default_lead
    # of several sizes it has come when the last has
    leads = [usual if pack.lead is None else pack.lead for pack in order.sold_as]
    if day < facts.as_at:
        return [f"{order.id} on {day}: past, today is {facts.as_at}"]
    comes = arrives_on(facts, facts.lines[order.line], day, max(leads, default=None))
    if day > order.order_by:
        late = facts.calendar.between(order.order_by, day)
        margin = facts.house.margin_days
        return [
            f"{order.id} ordered on {day} comes {comes}, {late} open days after {order.order_by}",
            f"it is needed {order.need_by}, less a margin of {margin} open days, or the start of "
            f"a make where that is sooner",
        ]
    return [f"{order.id} may go on {day}: it comes {comes}; {order.order_by} is the last day"]


def other_bottle(planned: PlannedShelf, order: Order, other: Bottle) -> list[str]:
    """Why a bottle on the shelf does not make an order needless."""
    line = planned.facts.lines[other.line]
    if other.line != order.line:
        return [f"{other.number} is {other.line}, and {order.id} is for {order.line}"]
    judged = verdict(other.record, line.rules, planned.plan.as_at)
    promised = sum(claim.amount for claim in planned.claims.get(other.number, []))
    head = f"{other.number} does not save {order.id}"
    if judged.condition not in USABLE:
        return [f"{head}: {judged.condition} ({judged.decided_by})"]
    left = f"{say(other.left, line.kind)} in it, {say(promised, line.kind)} of that promised"
    return [f"{head}: {left}", *order.reasons[:2]]


def other_line(planned: PlannedShelf, order: Order, other: Line) -> list[str]:
    """Whether another line could be bought: a method or an allowed swap must name it."""
    facts = planned.facts
    if other.key == order.line:
        return [f"{order.id} is for {order.line}: {_sold(other)}"]
    methods = [
        method.line
        for method in facts.methods.values()
        if any({order.line, other.key} <= set(part.lines) for part in method.ingredients)
    ]
    swaps = [
        f"{recipe.code} ({swap.note})"
        for recipe in facts.recipes.values()
        for swap in recipe.swaps
        if swap.line == order.line and swap.instead in (other.key, other.substance)
    ]
    if methods:
        makes = ", ".join(methods)
        return [f"{other.key} would do for {makes}, whose method names {order.line} before it"]
    if swaps:
        return [f"{other.key} is allowed instead in {', '.join(swaps)}"]
    return [
        f"{other.key} does not take the place of {order.line}: no method names both, and no "
        f"recipe of {', '.join(order.for_bookings) or 'this term'} allows the swap"
    ]
