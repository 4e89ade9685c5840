"""The orders and checks of a finished plan: enough, in time, on a day that will do."""

from __future__ import annotations

import math
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date

from stockroom.keeping.record import Record
from stockroom.keeping.verdict import limits_of
from stockroom.planning.decisions import Order
from stockroom.planning.facts import Facts, Form, Line, Placed
from stockroom.planning.replaying.exact import said_closed
from stockroom.planning.replaying.ordering import faults_of_order
from stockroom.planning.replaying.rules import Broken, Fault
from stockroom.planning.replaying.walk import ToCome, Walk


@dataclass(slots=True)
class _Supply:
    """What is still to come of a line: so much `left`, from `on` until it lapses."""

    left: float
    on: date
    until: date = date.max


def faults_of_orders(laid: Walk) -> Iterator[Fault]:
    """What is wrong with the orders, by the lines that wait for them, and with their shares."""
    waiting: dict[str, list[ToCome]] = {}
    for one in laid.to_come:
        if one.line.form is not Form.SUNDRY and one.amount:
            waiting.setdefault(one.line.key, []).append(one)
    supplies: dict[str, list[_Supply]] = {}
    for order in laid.plan.orders:
        line = laid.facts.lines.get(order.line)
        size = _size(line, order) if line else 0
        supplies.setdefault(order.line, []).append(_Supply(size, order.arrives))
        if line is not None:
            yield from faults_of_order(laid, order, line, waiting.get(order.line, []))
    for placed in laid.facts.placed:
        if placed.outstanding and placed.line in laid.facts.lines:
            supplies.setdefault(placed.line, []).append(_on_its_way(laid.facts, placed))
    for key, row in waiting.items():
        yield from _covered(row, supplies.get(key, []))


def _covered(row: list[ToCome], supplies: list[_Supply]) -> Iterator[Fault]:
    """In the order of the days, each takes of what has come, what lapses soonest first."""
    missing = sum(one.amount for one in row) - sum(supply.left for supply in supplies)
    first = row[0]
    if missing > 0:
        words = f"{missing:.0f} of {first.line.key!r} is neither ordered nor on its way"
        yield Fault(Broken.ORDERED, first.where, words)
        return
    for one in sorted(row, key=lambda waiting: waiting.on):
        still = float(one.amount)
        there = [supply for supply in supplies if supply.on <= one.on <= supply.until]
        for supply in sorted(there, key=lambda supply: supply.until):
            taken = min(still, supply.left)
            still -= taken
            supply.left -= taken if math.isfinite(supply.left) else 0.0
        if still > 0:
            words = f"{still:.0f} of {one.line.key!r} has not come by {one.on}"
            yield Fault(Broken.IN_TIME, one.where, words)


def _size(line: Line, order: Order) -> float:
    """What an order brings, micro-units; without end where no pack is entered.

    One size by its name, or a set of several, each with how many of it.
    """
    sizes = {pack.text: pack.size for pack in line.packs}
    if not sizes:
        return math.inf
    one = sum(sizes.get(text, 0) * many for text, many, _ in order.mixture)
    return float(sizes.get(order.pack, one) * order.packs)


def _on_its_way(facts: Facts, placed: Placed) -> _Supply:
    """What was ordered before: from the day expected, or the next open day where that is past."""
    expected, calendar = placed.expected, facts.calendar
    late = expected < facts.as_at
    on = calendar.after(facts.as_at, 1) if late else calendar.on_or_after(expected)
    line = facts.lines[placed.line]
    found = limits_of(Record(received=on, nominal=line.strength), line.rules, on)
    until = min((limit.until for limit in found if not limit.known_until), default=date.max)
    return _Supply(float(placed.outstanding), on, until)


def faults_of_checks(laid: Walk) -> Iterator[Fault]:
    """Checks on a closed day or before today, and those outside their own time unsaid."""
    days = {asked.booking.number: asked.booking.on for asked in laid.asked.values()}
    for check in laid.plan.checks:
        where, calendar = f"{check.what} {check.subject}", laid.facts.calendar
        if check.best < laid.facts.as_at:
            yield Fault(Broken.NOT_YET, where, f"on {check.best}, and today is {laid.facts.as_at}")
        if not calendar.is_open(check.best):
            yield Fault(Broken.CHECK_DAY, where, f"on {check.best}, a closed day")
        inside = check.not_before <= check.best <= check.by
        last = min((days[one] for one in check.bookings if one in days), default=check.by)
        if not inside and not said_closed(laid.facts, check, check.not_before, last):
            words = f"on {check.best}, to be from {check.not_before} to {check.by}"
            yield Fault(Broken.CHECK_DAY, where, words)
