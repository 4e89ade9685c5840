"""What stands on the shelf while a plan is made: balances, promises, openings.

The one mutable thing in the planner. A bottle's contents are promised at most
once; a sealed bottle the plan opens ages as opened from that day.
"""

from __future__ import annotations

from collections import defaultdict
from collections.abc import Iterable
from dataclasses import replace
from datetime import date, timedelta

from stockroom.keeping.record import Record
from stockroom.keeping.rules import Origin, Purpose, RuleKind
from stockroom.keeping.strength import Strengths, strengths_on
from stockroom.keeping.verdict import USABLE, Condition, Limit, Verdict, judge, limits_of
from stockroom.measure.amounts import Kind
from stockroom.planning.choosing.promises import Judge as Judge
from stockroom.planning.choosing.promises import Promise as Promise
from stockroom.planning.choosing.promises import Promises
from stockroom.planning.choosing.strengths_held import last_found
from stockroom.planning.facts import Bottle, Facts, Line
from stockroom.planning.numbers import Natural, natural

TOO_CLOSE_UL = 5_000
TOO_CLOSE_PART = 0.03
"""Under 5 cm³ or 3 % of what it held, what would remain is too close to call."""


class Shelf:
    """Balances of every bottle less what is promised. Deterministic: ties by number."""

    def __init__(self, facts: Facts, like: Shelf | None = None) -> None:
        self.facts = facts
        self.left = {bottle.number: bottle.left for bottle in facts.bottles}
        self.bottle = {bottle.number: bottle for bottle in facts.bottles}
        self.promises: dict[str, Promises] = defaultdict(Promises)
        self._by_line: dict[str, list[Bottle]] = defaultdict(list)
        self._judged: dict[tuple[str, date, Purpose, date | None], Verdict] = {}
        self._spells: dict[tuple[str, Purpose, date | None, int], Verdict] = {}
        self._until: dict[tuple[str, Purpose, date | None], date] = {}
        self._limits: dict[tuple[str, Purpose, date | None], tuple[Record, list[Limit]]] = {}
        self._strengths: dict[tuple[str, date | None, date | None], Strengths] = {}
        self._orders: dict[tuple[str, Purpose, date | None], list[Bottle]] = {}
        self._in_use: dict[str, bool] = {}
        self._sealed: dict[str, bool] = {}
        self._ages: dict[str, bool] = {}
        self._unfit: dict[tuple[str, date, Judge, Purpose, date | None], str] = {}
        rules = [(key, rule) for key, line in facts.lines.items() for rule in line.rules]
        self._opening_matters = {key for key, rule in rules if rule.origin is Origin.OPENED}
        self._fading = {key for key, rule in rules if rule.kind is RuleKind.FADES}
        self._fading_opened = {
            key
            for key, rule in rules
            if rule.kind is RuleKind.FADES and rule.origin is Origin.OPENED
        }
        # sorted once here, and every tie further on is broken by it
        for bottle in sorted(facts.bottles, key=lambda b: natural(b.number)):
            self._by_line[bottle.line].append(bottle)
        if like is not None and same_house(facts, like.facts):
            self._learn_from(like)

    def _learn_from(self, like: Shelf) -> None:
        """Take over what was worked out of every bottle that is still the same."""
        new = self.changed_since(like)
        lines = {shelf.bottle[n].line for shelf in (self, like) for n in new if n in shelf.bottle}
        self._judged = {k: v for k, v in like._judged.items() if k[0] not in new}
        self._limits = {k: v for k, v in like._limits.items() if k[0] not in new}
        self._strengths = {k: v for k, v in like._strengths.items() if k[0] not in new}
        self._unfit = {k: v for k, v in like._unfit.items() if k[0] not in new}
        self._orders = {k: v for k, v in like._orders.items() if k[0] not in lines}

    def changed_since(self, like: Shelf) -> set[str]:
        """The numbers of bottles that are not the very same on another shelf."""
        numbers = self.bottle.keys() | like.bottle.keys()
        return {n for n in numbers if self.bottle.get(n) is not like.bottle.get(n)}

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
            self._judged[key] = self._judge(number, on, purpose, opened)
        return self._judged[key]

    def _judge(self, number: str, on: date, purpose: Purpose, opened: date | None) -> Verdict:
        record, limits = self._limits_of(number, purpose, opened)
        strengths = self._strengths_of(number, record, on)
        if self.changes_daily(number):
            return judge(record, limits, strengths, on)
        # what stays as it is has one verdict on all days between two of its limits
        key = (number, purpose, opened, sum(limit.until < on for limit in limits))
        if key not in self._spells:
            self._spells[key] = judge(record, limits, strengths, on)
        return self._spells[key]

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
        key = (number, on if self.changes_daily(number) else None, record.opened)
        if key not in self._strengths:
            self._strengths[key] = strengths_on(record, self._line(number).rules, on)
        return self._strengths[key]

    def changes_daily(self, number: str) -> bool:
        """True for a bottle whose strength is another on every day."""
        bottle = self.bottle[number]
        # a lower limit falls with the days, even where no rule of fading does
        return bottle.line in self._fading or bottle.record.caution is not None

    def usable_until(self, number: str, purpose: Purpose, opened: date | None) -> date:
        """The last day before any limit that is not a recheck; far off if there is none."""
        key = (number, purpose, self._opening_that_counts(number, opened))
        if key not in self._until:
            _, limits = self._limits_of(*key)
            hard = (limit.until for limit in limits if not limit.known_until)
            self._until[key] = min(hard, default=date.max)
        return self._until[key]

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
            if promise.beside and self.fades_from_opening(number):
                return f"opening it on {opened} changes its strength for {promise.for_ref}"
            if self.unfit_opened(number, promise.on, promise.purpose, promise.judge, opened):
                return f"opening it on {opened} spoils it for {promise.for_ref}"
        return ""

    def ages_from_opening(self, number: str) -> bool:
        """True for a bottle still sealed of a line whose life or strength counts from opening."""
        if number not in self._ages:
            matters = self.bottle[number].line in self._opening_matters
            self._ages[number] = matters and self.is_sealed(number)
        return self._ages[number]

    def fades_from_opening(self, number: str) -> bool:
        """True for a bottle still sealed whose strength, and not only its life, opening changes."""
        return self.bottle[number].line in self._fading_opened and self.is_sealed(number)

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
            recent = -last_found(bottle) if purpose is Purpose.EXACT else 0
            until = self.usable_until(bottle.number, purpose, opened)
            return recent, until, self.is_sealed(bottle.number), natural(bottle.number)

        return sorted(self.of_line(key), key=rank)


def same_house(facts: Facts, other: Facts) -> bool:
    """True when only what stands on the shelf may differ: the same lines and methods, one day."""
    same = facts.lines is other.lines and facts.methods is other.methods
    return same and facts.calendar is other.calendar and facts.as_at == other.as_at
