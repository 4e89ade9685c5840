"""One order of a finished plan: sent off in time, arriving when its lead says, at its price.

Whether the orders of a line cover what waits for them is asked in `orders.py`.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from datetime import date

from stockroom.planning.decisions import Order
from stockroom.planning.facts import Facts, Line
from stockroom.planning.replaying.rules import Broken, Fault
from stockroom.planning.replaying.walk import ToCome, Walk


def faults_of_order(
    laid: Walk, order: Order, line: Line, waiting: Sequence[ToCome]
) -> Iterator[Fault]:
    """What is wrong with one order; `waiting` is what is still to come of its line."""
    yield from _sent_in_time(laid, order, line, waiting)
    yield from _arrives(laid.facts, order, line)
    yield from _priced(order, line)
    yield from _shares(order)


def _sent_in_time(
    laid: Walk, order: Order, line: Line, waiting: Sequence[ToCome]
) -> Iterator[Fault]:
    facts, lead = laid.facts, _lead(laid.facts, order, line)
    first = facts.calendar.before(_with_margin(facts, order.need_by), lead)
    if order.order_by > first:
        words = f"to be sent by {order.order_by}, needed by {order.need_by}: {first} at the latest"
        yield Fault(Broken.ORDER_BY, order.id, words)
    if any(placed.line == line.key and placed.outstanding for placed in facts.placed):
        # who waits for which of the two is not told, so that no single need can be held to it
        return
    for one in waiting:
        used = _used(laid, one)
        in_hand = min(_with_margin(facts, used), facts.calendar.on_or_before(one.on))
        last = facts.calendar.before(in_hand, lead)
        if order.order_by > last or order.need_by > used:
            words = f"{order.id} sent by {order.order_by} for {order.need_by}, wanted {one.on}"
            yield Fault(Broken.ORDER_BY, one.where, f"{words}: {last} at the latest")


def _with_margin(facts: Facts, used: date) -> date:
    """The open day the house wants it in hand for a day of use: the van may be late."""
    return facts.calendar.before(used, facts.house.margin_days)


def _used(laid: Walk, one: ToCome) -> date:
    """The last class that gets something of it, straight or through makes.

    A jar may hold enough for the first of them: which class waits is not told.
    """
    served = laid.served.get(one.where, ())
    return max((asked.booking.on for asked in served), default=one.on)


def _lead(facts: Facts, order: Order, line: Line) -> int:
    """Open days from asking for leave until the last of its packs comes."""
    usual = facts.house.default_lead
    leads = [usual if pack.lead is None else pack.lead for pack in order.sold_as]
    return max(leads, default=usual) + line.ask_days


def _arrives(facts: Facts, order: Order, line: Line) -> Iterator[Fault]:
    lead, calendar = _lead(facts, order, line), facts.calendar
    # nothing is sent off before today
    comes = calendar.after(max(facts.as_at, order.order_by), lead)
    late = calendar.between(order.order_by, facts.as_at)
    if (order.arrives, order.late) != (comes, late):
        words = f"comes {order.arrives}, late by {order.late}; by its days {comes}, by {late}"
        yield Fault(Broken.ARRIVES, order.id, words)


def _priced(order: Order, line: Line) -> Iterator[Fault]:
    """Sizes, counts and prices are those of packs the line is sold in, and add up."""
    told = tuple((pack.text, pack.pence) for pack in order.sold_as)
    counts = [count for _, count, _ in order.mixture]
    if told != tuple((text, pence) for text, _, pence in order.mixture):
        yield Fault(Broken.PRICED, order.id, f"{order.mixture}, sold as {told}")
        return
    if line.packs and not set(order.sold_as) <= set(line.packs):
        yield Fault(Broken.PRICED, order.id, f"{line.key!r} is not sold as {told}")
    rows = list(zip(order.sold_as, counts, strict=True))
    pence = sum(pack.pence * count for pack, count in rows)
    amount = sum(pack.size * count for pack, count in rows)
    if (order.pence, order.amount) != (pence, amount):
        words = f"{order.amount} for {order.pence}p; its packs are {amount} for {pence}p"
        yield Fault(Broken.PRICED, order.id, words)
    # a set of several sizes is one of its kind
    many = counts[0] if len(counts) == 1 else 1
    if order.packs != many or any(count <= 0 for count in counts):
        yield Fault(Broken.PRICED, order.id, f"{order.packs} × {order.pack}, of {counts}")


def _shares(order: Order) -> Iterator[Fault]:
    shared = sum(pence for _, pence in order.shares)
    if shared != order.pence or any(pence < 0 for _, pence in order.shares):
        yield Fault(Broken.SHARES, order.id, f"shares of {shared}p in {order.pence}p")
