"""What is to be bought for a want, and when each thing a want takes can be in hand."""

from __future__ import annotations

from collections.abc import Collection
from datetime import date
from itertools import islice

from stockroom.planning.amounts import say
from stockroom.planning.buying.on_way import OnWay, Receipt, ordered_today
from stockroom.planning.choosing.serve import Serving
from stockroom.planning.facts import Facts, Form, Line
from stockroom.planning.timing import Moment, earliest_ready
from stockroom.planning.wants import Settled, Want

_NAMED = 3
"""So many holders of a bottle are named; the rest are counted. Our choice."""


class Obtaining:
    """Settles by buying whatever no bottle serves and nobody makes."""

    def __init__(self, facts: Facts, serving: Serving) -> None:
        self.facts, self.serving = facts, serving
        self.coming = OnWay(facts)

    def buyable(self, want: Want) -> bool:
        """True when some line that may give it can be bought."""
        return any(self._can_be_bought(key) for key in want.choices)

    def buy(self, want: Want, line: Line) -> None:
        """Settle a want as bought, at a shop or from a supplier, or as short with the reason."""
        if want.ingredient is not None:
            # nothing on the shelf under any choice: buy the one preferred
            want.tried = self._preferred(want)
            line = self.facts.lines[want.line]
        if line.form is Form.SUNDRY:
            want.settled, want.available = Settled.SHOP, self.facts.as_at
            return
        if not self._can_be_bought(line.key):
            want.settled = Settled.SHORT
            want.reasons.append(self._not_made_not_sold(want, line))
            return
        whole = self.serving.amount_from(want, line)
        self.serving.rest_of_jars(want, line)
        want.to_buy = whole - sum(promise.amount for promise in want.promises)
        coming, arrives = self._on_way(want, line)
        if arrives <= want.deadline[0]:
            want.settled, want.available = Settled.BUY, arrives
            want.on_way = [(receipt.number, amount) for receipt, amount in coming]
            want.reasons += [
                f"{say(amount, line.kind)} of {line.key} on its way: "
                f"{receipt.number}, counted from {receipt.on}"
                for receipt, amount in coming
            ]
            rest = want.to_buy - sum(amount for _, amount in coming)
            if rest:
                want.reasons.append(f"{say(rest, line.kind)} of {line.key} to be bought")
        else:
            self.coming.release(coming)
            want.settled = Settled.SHORT
            want.reasons.append(
                f"no {line.key} in hand by {want.deadline[0]}; "
                f"{self.coming.soonest(line.key) or f'ordered today it comes {arrives}'}"
            )

    def _preferred(self, want: Want) -> int:
        """Which choice to wait for: one on its way in time, else the first that can be bought."""
        row = [i for i, key in enumerate(want.choices) if self._can_be_bought(key)]
        for i in row:
            line = self.facts.lines[want.choices[i]]
            wanted = self.serving.amount_from(want, line)
            if self.coming.available(line.key, want.deadline[0], want.use_day) >= wanted:
                return i
        return next(iter(row), want.tried)

    def _on_way(self, want: Want, line: Line) -> tuple[list[tuple[Receipt, int]], date]:
        """What is on its way for a want, and the day all of it can be in hand."""
        # one class one strength: a solution comes whole from one order, or not at all
        whole = line.form is not Form.SOLID
        coming = self.coming.promise(
            line.key, want.to_buy, want.deadline[0], want.use_day, whole=whole
        )
        days = [receipt.on for receipt, _ in coming]
        if sum(amount for _, amount in coming) < want.to_buy:
            days.append(self.arrival(line))
        return coming, max(days, default=self.arrival(line))

    def _can_be_bought(self, key: str) -> bool:
        line = self.facts.lines[key]
        bought = line.form in (Form.SOLID, Form.LIQUID, Form.SUNDRY) or bool(line.packs)
        return bought and key not in self.facts.methods

    def arrival(self, line: Line) -> date:
        """The open day an order placed today would come, at the shortest lead time known."""
        return ordered_today(self.facts, line)

    def in_hand(self, want: Want) -> Moment:
        """The first moment this can be in hand, from the bottom of its tree up.

        A make that cannot be started in time for that comes out short.
        """
        today = (self.facts.as_at, 0)
        if want.settled is not Settled.MAKE or want.method is None or want.latest is None:
            return (want.available, 0) if want.available else today
        ready = max([today, *(self.in_hand(part) for part in want.parts)])
        # what is ready after the hour work must start serves only the next open day
        first = ready[0] if ready[1] <= want.latest[1] else self.facts.calendar.after(ready[0], 1)
        want.ready_from, done = earliest_ready(first, want.method, self.facts.calendar)
        if want.ready_from > want.latest[0]:
            want.settled = Settled.SHORT
            want.reasons.append(
                f"cannot: {want.line} can be started on {want.ready_from} at the earliest, "
                f"and had to be by {want.latest[0]}"
            )
        return done

    def _not_made_not_sold(self, want: Want, line: Line) -> str:
        """No way to get any, and of at most two bottles why they will not do."""
        held = self._promised_away(want)
        # a second look, to the last drop, has passed the same bottles over once more
        others = dict.fromkeys(
            f"{number} {reason}" for number, reason in want.passed_over if number not in held
        )
        why = "; ".join([*(f"{number}: {words}" for number, words in held.items()), *others][:2])
        return f"no method and no supplier for {line.key}" + (f" ({why})" if why else "")

    def _promised_away(self, want: Want) -> dict[str, str]:
        """Who holds the bottles that would do: "80 cm³ of 100 cm³ promised to K02"."""
        shelf, row = self.serving.shelf, {}
        for key in want.choices:
            line = self.facts.lines[key]
            for bottle in shelf.of_line(key):
                number, promised = bottle.number, bottle.left - shelf.left[bottle.number]
                if promised and not self.serving.unfit(want, line, bottle):
                    total, kind = bottle.left, line.kind
                    names = _first_few(dict.fromkeys(p.for_ref for p in shelf.promises[number]))
                    row[number] = f"{say(promised, kind)} of {say(total, kind)} promised to {names}"
        return row


def _first_few(names: Collection[str]) -> str:
    few = ", ".join(islice(names, _NAMED))
    return few if len(names) <= _NAMED else f"{few} and {len(names) - _NAMED} more"
