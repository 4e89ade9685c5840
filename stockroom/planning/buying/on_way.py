"""What is on its way: amounts ordered and not come yet, counted from the day they are expected.

What should have come already is counted from the next open day, and is a guess. A
delivery that would have lapsed, unopened, by the day of use does not count for it.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date

from stockroom.findings import Finding, Lasting
from stockroom.keeping.record import Record
from stockroom.keeping.verdict import limits_of
from stockroom.planning.amounts import say
from stockroom.planning.decisions import Coming
from stockroom.planning.facts import Facts, Line, Placed
from stockroom.planning.numbers import natural
from stockroom.planning.wants import Want


@dataclass(frozen=True, slots=True)
class Receipt:
    """So much of a line (micro-units) to be counted from `on` up to and including `until`."""

    number: str
    amount: int
    on: date
    until: date


def receipts(facts: Facts) -> dict[str, list[Receipt]]:
    """What is still to come of each line, the soonest first."""
    found: dict[str, list[Receipt]] = {}
    for order in facts.placed:
        if order.outstanding and order.line in facts.lines:
            on = counts_from(facts, order)
            until = lasts_unopened(facts.lines[order.line], on) or date.max
            receipt = Receipt(order.number, order.outstanding, on, until)
            found.setdefault(order.line, []).append(receipt)
    for row in found.values():
        row.sort(key=lambda receipt: (receipt.on, natural(receipt.number)))
    return found


def counts_from(facts: Facts, order: Placed) -> date:
    """The open day an order counts from: the expected one, or the next when that is past."""
    # nobody knows when it comes: tomorrow is the soonest anybody may hope for
    if order.expected < facts.as_at:
        return facts.calendar.after(facts.as_at, 1)
    return facts.calendar.on_or_after(order.expected)


def lasts_unopened(line: Line, received: date) -> date | None:
    """The last good day of a pack nobody opens, by the line's own rules; None if none says."""
    record = Record(received=received, nominal=line.strength)
    limits = limits_of(record, line.rules, received)
    return min((limit.until for limit in limits if not limit.known_until), default=None)


def ordered_today(facts: Facts, line: Line) -> date:
    """The open day an order placed today would come, at the shortest lead time known."""
    # the dearest pack may be the quickest; whether it is worth it is for the order to say
    leads = [pack.lead for pack in line.packs if pack.lead is not None]
    lead = min(leads, default=facts.house.default_lead) + line.ask_days
    return facts.calendar.after(facts.as_at, lead)


class OnWay:
    """What is still to come, less what is promised of it. Nothing is promised twice."""

    def __init__(self, facts: Facts) -> None:
        self._by_line = receipts(facts)
        self._left = {r.number: r.amount for row in self._by_line.values() for r in row}

    def available(self, line: str, by: date, on: date) -> int:
        """How much of a line comes by a day and is still good on the day it is used."""
        return sum(self._left[r.number] for r in self._fitting(line, by, on))

    def soonest(self, line: str) -> str:
        """When the next of a line comes that is not promised, in words; "" when none does."""
        row = [receipt for receipt in self._by_line.get(line, []) if self._left[receipt.number]]
        return f"{row[0].number} comes {row[0].on}" if row else ""

    def promise(
        self, line: str, amount: int, by: date, on: date, *, whole: bool = False
    ) -> list[tuple[Receipt, int]]:
        """Promise up to `amount` of what comes by a day; all of it or nothing, with `whole`."""
        if whole and self.available(line, by, on) < amount:
            return []
        return self._take(self._fitting(line, by, on), amount)

    def promise_late(self, line: str, amount: int) -> list[tuple[Receipt, int]]:
        """Promise up to `amount` of what comes at all, be it too late."""
        return self._take(self._by_line.get(line, []), amount)

    def set_apart(self, promised: Iterable[tuple[str, int]]) -> None:
        """Leave out what was promised elsewhere, by the order's number."""
        for number, amount in promised:
            self._left[number] -= amount

    def release(self, promised: list[tuple[Receipt, int]]) -> None:
        """Take promises back."""
        for receipt, amount in promised:
            self._left[receipt.number] += amount

    def unpromised(self, line: str, on: date = date.max) -> int:
        """What is not promised of a line, of all that has come and is still good on a day.

        At the end of time: of all that comes.
        """
        row = self._by_line.get(line, [])
        if on != date.max:
            row = [receipt for receipt in row if receipt.on <= on <= receipt.until]
        return sum(self._left[receipt.number] for receipt in row)

    def _fitting(self, line: str, by: date, on: date) -> list[Receipt]:
        return [r for r in self._by_line.get(line, []) if r.on <= by and on <= r.until]

    def _take(self, row: list[Receipt], amount: int) -> list[tuple[Receipt, int]]:
        taken = []
        for receipt in row:
            share = min(amount, self._left[receipt.number])
            if share > 0:
                self._left[receipt.number] -= share
                amount -= share
                taken.append((receipt, share))
        return taken


def on_its_way(facts: Facts) -> list[Coming]:
    """Every order with something still to come, the soonest first; whom it serves left blank."""
    row = []
    for order in facts.placed:
        line = facts.lines.get(order.line)
        if order.outstanding and line is not None:
            coming = Coming(
                number=order.number,
                line=line.key,
                item=line.item,
                pack=order.pack,
                packs=order.packs,
                amount=order.outstanding,
                ordered=order.amount,
                kind=line.kind,
                placed_on=order.ordered,
                expected=order.expected,
                counts=counts_from(facts, order),
                overdue=facts.calendar.between(order.expected, facts.as_at),
                supplier=order.supplier,
                by=order.by,
            )
            row.append(coming)
    return sorted(row, key=lambda one: (one.counts, natural(one.number)))


def placed_for(wants: Iterable[Want]) -> dict[str, str]:
    """The order on its way that each need waits for, by the need, where nothing else is bought."""
    found: dict[str, str] = {}
    for root in wants:
        waiting = [want for want in root.tree() if want.to_buy]
        numbers = [number for want in waiting for number, _ in want.on_way]
        covered = all(want.to_buy <= sum(n for _, n in want.on_way) for want in waiting)
        if numbers and covered:
            found[root.ref] = numbers[0]
    return found


def overdue_guesses(facts: Facts) -> list[Finding]:
    """A guess for each order that should have come already and is counted on all the same."""
    return [
        Lasting(one.number, f"{one.line} counted from {one.counts}: overdue, so that is a guess")
        for one in on_its_way(facts)
        if one.expected < facts.as_at
    ]


def overdue_notes(facts: Facts) -> list[Finding]:
    """A note, every day, for each order that should have come already."""
    return [
        Finding(
            one.number,
            f"{say(one.amount, one.kind)} of {one.line} expected {one.expected}, "
            f"{one.overdue} open day{'' if one.overdue == 1 else 's'} overdue: ask the supplier",
        )
        for one in on_its_way(facts)
        if one.overdue
    ]
