"""What stands on the shelf while a plan is made: balances, promises, openings.

The one mutable thing in the planner. A bottle's contents are promised at most
once; a sealed bottle the plan opens ages as opened from that day.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable
from dataclasses import replace
from datetime import date, timedelta

from stockroom.keeping.record import CheckKind, Record
from stockroom.keeping.rules import Origin, Purpose, RuleKind
from stockroom.keeping.strength import Strengths, strengths_on
from stockroom.keeping.verdict import USABLE, Condition, Limit, Verdict, judge, limits_of
from stockroom.measure.amounts import Kind
from stockroom.planning.choosing.promises import Judge as Judge
from stockroom.planning.choosing.promises import Promise as Promise
from stockroom.planning.choosing.promises import Promises
from stockroom.planning.facts import Bottle, Facts, Form, Line
from stockroom.planning.numbers import Natural, natural

TOO_CLOSE_UL = 5_000
TOO_CLOSE_PART = 0.03
"""Under 5 cm³ or 3 % of what it held, what would remain is too close to call."""


class Shelf:
    """Balances of every bottle less what is promised. Deterministic: ties by number."""

    def __init__(self, facts: Facts) -> None:
        self.facts = facts
        self.left = {bottle.number: bottle.left for bottle in facts.bottles}
        self.bottle = {bottle.number: bottle for bottle in facts.bottles}
        self.promises: dict[str, Promises] = defaultdict(Promises)
        self._by_line: dict[str, list[Bottle]] = defaultdict(list)
        self._judged: dict[tuple[str, date, Purpose, date | None], Verdict] = {}
        self._limits: dict[tuple[str, Purpose, date | None], tuple[Record, list[Limit]]] = {}
        self._strengths: dict[tuple[str, date | None, date | None], Strengths] = {}
        self._orders: dict[tuple[str, Purpose, date | None], list[Bottle]] = {}
        self._in_use: dict[str, bool] = {}
        self._sealed: dict[str, bool] = {}
        self._unfit: dict[tuple[str, date, Judge, Purpose, date | None], str] = {}
        self._opening_matters = {
            key
            for key, line in facts.lines.items()
            if any(rule.origin is Origin.OPENED for rule in line.rules)
        }
        # sorted once here, and every tie further on is broken by it
        for bottle in sorted(facts.bottles, key=lambda b: natural(b.number)):
            self._by_line[bottle.line].append(bottle)

    def of_line(self, key: str) -> list[Bottle]:
        """Every bottle of a line, by number."""
        return self._by_line.get(key, [])

    def opening(self, number: str) -> date | None:
        """The day the plan opens a sealed bottle: the first day it draws on it."""
        if not self.is_sealed(number):
            return None
        return self.promises[number].first

    def is_sealed(self, number: str) -> bool:
        """True for a bought bottle nobody has opened yet."""
        if number not in self._sealed:
            bottle = self.bottle[number]
            self._sealed[number] = not bottle.made_here and bottle.record.opened is None
        return self._sealed[number]

    def would_open(self, number: str) -> bool:
        """True for a sealed bottle that nothing in the plan has opened so far."""
        return self.is_sealed(number) and not self.promises[number]

    def clear(self, lines: Iterable[str]) -> None:
        """Take back every promise on bottles of these lines."""
        for bottle in (b for key in lines for b in self.of_line(key)):
            self.left[bottle.number] = bottle.left
            self.promises.pop(bottle.number, None)

    def verdict(
        self, number: str, on: date, purpose: Purpose = Purpose.ANY, opened: date | None = None
    ) -> Verdict:
        """Judge a bottle on a day from `as_at` on, as opened on `opened` if it is still sealed."""
        opened = self._opening_that_counts(number, opened)
        key = (number, on, purpose, opened)
        if key not in self._judged:
            record, limits = self._limits_of(number, purpose, opened)
            strengths = self._strengths_of(number, record, on)
            self._judged[key] = judge(record, limits, strengths, on)
        return self._judged[key]

    def _opening_that_counts(self, number: str, opened: date | None) -> date | None:
        # most lines age alike opened or not: one answer then serves every day
        return opened if opened and self.ages_from_opening(number) else None

    def _line(self, number: str) -> Line:
        return self.facts.lines[self.bottle[number].line]

    def _limits_of(
        self, number: str, purpose: Purpose, opened: date | None
    ) -> tuple[Record, list[Limit]]:
        # nothing entered lies after as_at, so a bottle's limits are the same on every later day
        key = (number, purpose, opened)
        if key not in self._limits:
            record = self.bottle[number].record
            record = replace(record, opened=opened) if opened else record
            day = max(self.facts.as_at, opened or self.facts.as_at)
            self._limits[key] = record, limits_of(record, self._line(number).rules, day, purpose)
        return self._limits[key]

    def _strengths_of(self, number: str, record: Record, on: date) -> Strengths:
        line = self._line(number)
        fades = any(rule.kind is RuleKind.FADES for rule in line.rules)
        # a lower limit falls with the days, even where no rule of fading does
        daily = fades or record.caution is not None
        key = (number, on if daily else None, record.opened)
        if key not in self._strengths:
            self._strengths[key] = strengths_on(record, line.rules, on)
        return self._strengths[key]

    def usable_until(self, number: str, purpose: Purpose, opened: date | None) -> date:
        """The last day before any limit that is not a recheck; far off if there is none."""
        _, limits = self._limits_of(number, purpose, self._opening_that_counts(number, opened))
        return min((x.until for x in limits if not x.known_until), default=date.max)

    def verdict_planned(self, number: str, on: date, purpose: Purpose = Purpose.ANY) -> Verdict:
        """Judge a bottle on a day, opened as the plan so far opens it."""
        return self.verdict(number, on, purpose, self.opening(number))

    def may_be_used(self, number: str, on: date) -> bool:
        """True when it is sound, watch or weak on a day, as the plan so far opens it."""
        if number not in self._in_use:
            # lost, set aside, undated or gone: the same on every day from as_at on
            condition = self.verdict(number, self.facts.as_at).condition
            self._in_use[number] = condition in USABLE or condition is Condition.PAST
        opened = self.opening(number)
        return self._in_use[number] and self.usable_until(number, Purpose.ANY, opened) >= on

    def unfit(self, number: str, on: date, purpose: Purpose, judge: Judge) -> str:
        """Why this bottle cannot be drawn on that day for that purpose; "" when it can.

        Opening it earlier than the plan already does must leave every promise
        already made on it good.
        """
        before = self.opening(number)
        opened = on if before is None else min(before, on)
        reason = self.unfit_opened(number, on, purpose, judge, opened)
        if reason or before is None or opened == before or not self.ages_from_opening(number):
            return reason
        return self.spoilt(number, opened)

    def spoilt(self, number: str, opened: date) -> str:
        """Whom opening it on a day would spoil it for, of those it is promised to; "" if nobody."""
        for promise in self.promises[number]:
            if self.unfit_opened(number, promise.on, promise.purpose, promise.judge, opened):
                return f"opening it on {opened} spoils it for {promise.for_ref}"
        return ""

    def ages_from_opening(self, number: str) -> bool:
        """True for a bottle still sealed of a line whose life or strength counts from opening."""
        return self.is_sealed(number) and self._line(number).key in self._opening_matters

    def unfit_opened(
        self, number: str, on: date, purpose: Purpose, judge: Judge, opened: date
    ) -> str:
        """Why this bottle would not do on that day if it were opened on `opened`; "" if it would.

        Asked once for all who are judged alike, whatever is promised.
        """
        counts = self._opening_that_counts(number, opened)
        key = (number, on, judge, purpose, counts)
        if key not in self._unfit:
            self._unfit[key] = self._unfit_afresh(number, on, purpose, judge, opened)
        return self._unfit[key]

    def _unfit_afresh(
        self, number: str, on: date, purpose: Purpose, judge: Judge, opened: date
    ) -> str:
        standing_until = self.ready_on(number)
        if standing_until and on < standing_until:
            return f"still standing until {standing_until}"
        judged = self.verdict(number, on, purpose, opened)
        if judged.condition not in USABLE:
            when = f" after {judged.good_until}" if judged.good_until else ""
            warned = f": {judged.warning}" if judged.warning else ""
            return f"{judged.condition}{when} ({judged.decided_by}){warned}"
        return judge(self.bottle[number], judged)

    def ready_on(self, number: str) -> date | None:
        """The day a made bottle has stood long enough; standing under half a day does not count."""
        bottle = self.bottle[number]
        method = self.facts.methods.get(bottle.line)
        if method is None or bottle.record.made is None or not bottle.made_here:
            return bottle.record.ready_on
        return bottle.record.made + timedelta(days=round(method.stands_hours / 24))

    def promise(self, made: Promise) -> None:
        """Set aside part of a bottle; the balance never goes below zero."""
        # a fault of the planner and not of the user's tables, so no StockroomError
        if made.amount > self.left[made.bottle]:
            raise AssertionError(
                f"{made.bottle} promised {made.amount} of {self.left[made.bottle]}"
            )
        self.left[made.bottle] -= made.amount
        self.promises[made.bottle].add(made)

    def release(self, made: Promise) -> None:
        """Take a promise back."""
        self.promises[made.bottle].take_off(made)
        self.left[made.bottle] += made.amount

    def too_close(self, number: str, amount: int, booking: str) -> bool:
        """True when drawing `amount` leaves too little of a liquid to count on.

        Never for a booking the bottle was made for: its share was measured in.
        """
        bottle = self.bottle[number]
        line = self.facts.lines[bottle.line]
        after = self.left[number] - amount
        # what clings to glass and pipettes is never got out; a solid is weighed to the last
        if line.kind is not Kind.VOLUME or booking in bottle.meant_for:
            return False
        return after < max(TOO_CLOSE_UL, TOO_CLOSE_PART * bottle.left)

    def in_order(self, key: str, on: date, purpose: Purpose) -> list[Bottle]:
        """A line's bottles in the order to use them: going past soonest, then open ones, by number.

        For an exact purpose the most recently checked comes first.
        """
        # where opening does not matter one order serves every day
        opened = on if key in self._opening_matters else None
        if (key, purpose, opened) not in self._orders:
            self._orders[key, purpose, opened] = self._sorted(key, opened, purpose)
        return self._orders[key, purpose, opened]

    def _sorted(self, key: str, opened: date | None, purpose: Purpose) -> list[Bottle]:
        def rank(bottle: Bottle) -> tuple[int, date, bool, Natural]:
            recent = -_last_found(bottle) if purpose is Purpose.EXACT else 0
            until = self.usable_until(bottle.number, purpose, opened)
            return recent, until, self.is_sealed(bottle.number), natural(bottle.number)

        return sorted(self.of_line(key), key=rank)


def _last_found(bottle: Bottle) -> int:
    """The day, as a number, of the last strength found of it; 0 when never."""
    found = [c.on for c in bottle.record.checks if c.kind is CheckKind.FOUND and c.passed]
    return max(found).toordinal() if found else 0


def solute_held(shelf: Shelf, line: Line, number: str, on: date) -> float | None:
    """The strength a bottle is expected to hold on a day, in the line's unit; None if a solid."""
    if line.form is Form.SOLID:
        return None
    opened = shelf.opening(number) or on
    return shelf.verdict(number, on, opened=opened).strengths.expected
