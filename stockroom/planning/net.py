"""Step 2: settle every want, by the shelf, by making, by buying, or not at all.

Lines are taken in order, what is made before what it is made from. On each
line the wants are served firm before pencilled, then by day: from one bottle
where one will do (one class, one strength), else by the next line that may
give it, else by making, else by buying. A need that cannot be met is left out
and the rest settled again, so that nothing is held for it.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date

from stockroom.measure.days import format_time
from stockroom.planning.amounts import say, solute_in
from stockroom.planning.explode import Need
from stockroom.planning.facts import Facts, Form, Line, Method
from stockroom.planning.order_of_lines import settling_order
from stockroom.planning.serve import Serving
from stockroom.planning.shelf import Shelf
from stockroom.planning.timing import Moment, deadline_for, earliest_ready, hours, latest_start
from stockroom.planning.wants import Settled, Want
from stockroom.planning.windows import earliest_start, will_do
from stockroom.safety.bars import barred_by


@dataclass(slots=True)
class Netted:
    """Every need's want, the shelf with all promises on it, and the needs that failed."""

    wants: list[Want]
    shelf: Shelf
    missed: list[Want] = field(default_factory=list)


def net(facts: Facts, needs: tuple[Need, ...]) -> Netted:
    """Settle all needs; those that cannot be met come out SHORT or REFUSED, with the reason."""
    failed: dict[str, Want] = {}
    missed: list[Want] = []
    while True:
        netting = _Netting(facts)
        wants = [_root(facts, need) for need in needs if need.ref not in failed]
        netting.settle(wants)
        new = netting.failures(wants)
        if not new:
            settled = [*wants, *failed.values()]
            return Netted(sorted(settled, key=lambda w: w.need.rank), netting.shelf, missed)
        for root in _to_drop(new, netting.shelf):
            failed[root.ref] = root
            missed += [w for w in root.tree() if w.to_buy and w.settled is Settled.SHORT]


def _to_drop(failing: list[Want], shelf: Shelf) -> list[Want]:
    """Those that fail whatever the others do; else, of those that only clash, the last in rank.

    A need may be short only because another failing one holds its bottle: once
    that one is dropped there is enough, so it is settled again first.
    """
    holders: dict[str, set[str]] = {}
    for root in failing:
        for want in root.tree():
            for promise in want.promises:
                holders.setdefault(promise.bottle, set()).add(root.ref)
    alone = [root for root in failing if not _clashes(root, holders, shelf)]
    return alone or [max(failing, key=lambda root: root.need.rank)]


def _clashes(root: Want, holders: dict[str, set[str]], shelf: Shelf) -> bool:
    """True when a bottle of a line it lacks is held for another need that fails."""
    lacking = [w for w in root.tree() if w.settled is Settled.SHORT and not w.parts]
    bottles = [b.number for want in lacking for key in want.choices for b in shelf.of_line(key)]
    return any(holders.get(number, set()) - {root.ref} for number in bottles)


def _root(facts: Facts, need: Need) -> Want:
    booking = need.booking
    method = facts.methods.get(need.line.key)
    deadline = (booking.on, booking.minute)
    if method:
        deadline = deadline_for(
            booking.on,
            booking.minute,
            fresh=need.fresh,
            method=method,
            calendar=facts.calendar,
            house=facts.house,
        )
    settled = Settled.OPEN if need.missing else Settled.HELD
    return Want(need, (need.line.key,), deadline, amount=need.missing, settled=settled)


class _Netting:
    """One pass over all lines. Not reused: a new one for each attempt."""

    def __init__(self, facts: Facts) -> None:
        self.facts = facts
        self.shelf = Shelf(facts)
        self.serving = Serving(facts, self.shelf)
        self.waiting: dict[str, list[Want]] = {}
        self.passed: set[str] = set()

    def settle(self, wants: list[Want]) -> None:
        for want in wants:
            if want.settled is Settled.OPEN:
                self._queue(want)
        for key in settling_order(self.facts):
            self.passed.add(key)
            # sorted anew on each line: who falls back to it keeps the place of its booking
            for want in sorted(self.waiting.get(key, []), key=lambda w: w.need.rank):
                self._settle_one(want)
        for want in wants:
            self._available(want)

    def failures(self, wants: list[Want]) -> list[Want]:
        """The roots under which something came out short or refused, each with its reason."""
        return [want for want in wants if self._failed(want)]

    def _failed(self, want: Want) -> bool:
        bad = (Settled.SHORT, Settled.REFUSED)
        if want.settled in bad:
            return True
        for part in want.parts:
            if self._failed(part):
                want.settled = part.settled
                want.reasons += part.reasons
                return True
        return False

    def _queue(self, want: Want) -> None:
        if want.line in self.passed:
            # a later choice whose turn is over: it takes what is left there
            self._settle_one(want)
        else:
            self.waiting.setdefault(want.line, []).append(want)

    def _settle_one(self, want: Want) -> None:
        line = self.facts.lines[want.line]
        more = want.tried + 1 < len(want.choices)
        refused = self._refusal(want, line)
        if refused and not more:
            want.settled = Settled.REFUSED
            want.reasons.append(refused)
        elif not refused and self.serving.from_shelf(want, line):
            want.settled = Settled.HELD
        # a next choice is tried before buying, since what is held costs nothing
        elif more and (refused or not self._may_make(want, line)):
            want.tried += 1
            self._queue(want)
        elif self._may_make(want, line):
            self._make(want, line)
        elif not self.serving.from_shelf(want, line, last_drops=not self._buyable(want)):
            self._buy(want, line)

    def _refusal(self, want: Want, line: Line) -> str:
        recipe = want.need.recipe
        if line.never_kept and line.key not in self.facts.methods:
            return f"{line.item} is never kept: {line.never_kept}"
        barred = barred_by(recipe, line.substance, self._own_substances(want.need))
        if barred and want.under is not None:
            return f"{line.item} is barred in {recipe.code}: {barred}"
        return ""

    def _buyable(self, want: Want) -> bool:
        return any(self._can_be_bought(key) for key in want.choices)

    def _own_substances(self, need: Need) -> frozenset[str]:
        keys = (requirement.line for requirement in need.recipe.requirements)
        return frozenset(self.facts.lines[key].substance for key in keys if key in self.facts.lines)

    def _may_make(self, want: Want, line: Line) -> bool:
        # a stock made for this alone would be weighed out and then diluted: twice the work
        held_only = want.ingredient is not None and line.key in want.ingredient.only_if_held
        return line.key in self.facts.methods and not held_only

    # -- by making --------------------------------------------------------------------

    def _make(self, want: Want, line: Line) -> None:
        method = self.facts.methods[line.key]
        fresh = want.under is None and want.need.fresh
        want.method = method
        want.latest = self._latest(want, line, method)
        if want.latest is None:
            self._cannot(want, line, method)
        elif fresh and want.latest[0] != want.need.on:
            want.settled = Settled.SHORT
            want.reasons.append(_not_by_then(want, line, method))
        else:
            want.earliest = want.latest[0] if fresh else self._earliest(want, line)
            want.settled = Settled.MAKE
            self._add_parts(want, line, method)

    def _latest(self, want: Want, line: Line, method: Method) -> Moment | None:
        """The last start in time and not too early to keep; else the morning itself may do."""
        found = self._last_good_start(want, line, method, want.deadline)
        own_time = (want.need.on, want.need.booking.minute)
        if found is not None or want.under is not None or want.deadline == own_time:
            return found
        found = self._last_good_start(want, line, method, own_time)
        if found is not None:
            day_before = self.facts.calendar.before(want.need.on, 1)
            late = day_before < self.facts.as_at
            why = "it is too late for that" if late else "it would not keep, or not be ready"
            want.deadline = own_time
            want.reasons.append(f"not done by {day_before} as the house has it: {why}")
        return found

    def _last_good_start(
        self, want: Want, line: Line, method: Method, deadline: Moment
    ) -> Moment | None:
        found = latest_start(deadline, method, self.facts.calendar, self.facts.as_at)
        requirement = want.need.requirement if want.under is None else None
        if found is None or will_do(line, requirement, found[0], want.use_day):
            return found
        return None

    def _earliest(self, want: Want, line: Line) -> date:
        assert want.latest is not None
        requirement = want.need.requirement if want.under is None else None
        return earliest_start(self.facts, line, requirement, want.use_day, want.latest[0])

    def _cannot(self, want: Want, line: Line, method: Method) -> None:
        want.settled = Settled.SHORT
        start = latest_start(want.deadline, method, self.facts.calendar, date.min.replace(year=2))
        if start and start[0] >= self.facts.as_at:
            want.reasons.append(
                f"cannot: {line.key} made on {start[0]} would not do on {want.use_day}"
            )
            return
        day = f"; work had to start by {start[0]}" if start else ""
        stands = f"stands {hours(method.stands_hours)}, " if method.stands_hours else ""
        want.reasons.append(
            f"cannot: {line.key} {stands}booked {want.need.on}, "
            f"and today is {self.facts.as_at}{day}"
        )

    def _add_parts(self, want: Want, line: Line, method: Method) -> None:
        assert want.latest is not None
        volume = self.serving.amount_from(want, line)
        for ingredient in method.ingredients:
            part = Want(want.need, ingredient.lines, want.latest, under=want, ingredient=ingredient)
            if ingredient.per_dm3 is not None:
                part.amount = -(-volume * ingredient.per_dm3 // 1_000_000)
            else:
                part.solute = solute_in(line, volume)
            want.parts.append(part)
            self._queue(part)

    # -- by buying --------------------------------------------------------------------

    def _buy(self, want: Want, line: Line) -> None:
        if want.ingredient is not None:
            # nothing on the shelf under any choice: buy the one preferred
            want.tried = next(
                (i for i, key in enumerate(want.choices) if self._can_be_bought(key)), want.tried
            )
            line = self.facts.lines[want.line]
        if line.form is Form.SUNDRY:
            want.settled, want.available = Settled.SHOP, self.facts.as_at
            return
        if not self._can_be_bought(line.key):
            want.settled = Settled.SHORT
            want.reasons.append(_not_made_not_sold(want, line))
            return
        whole = self.serving.amount_from(want, line)
        self.serving.rest_of_jars(want, line)
        want.to_buy = whole - sum(promise.amount for promise in want.promises)
        arrives = self.arrival(line)
        if arrives <= want.deadline[0]:
            want.settled, want.available = Settled.BUY, arrives
            want.reasons.append(f"{say(want.to_buy, line.kind)} of {line.key} to be bought")
        else:
            want.settled = Settled.SHORT
            want.reasons.append(
                f"no {line.key} in hand by {want.deadline[0]}; ordered today it comes {arrives}"
            )

    def _can_be_bought(self, key: str) -> bool:
        line = self.facts.lines[key]
        bought = line.form in (Form.SOLID, Form.LIQUID, Form.SUNDRY) or bool(line.packs)
        return bought and key not in self.facts.methods

    def arrival(self, line: Line) -> date:
        """The open day an order placed today would come, at the shortest lead time known."""
        # the dearest pack may be the quickest; whether it is worth it is for the order to say
        leads = [pack.lead for pack in line.packs if pack.lead is not None]
        lead = min(leads, default=self.facts.house.default_lead)
        return self.facts.calendar.after(self.facts.as_at, lead)

    # -- when each can be in hand -------------------------------------------------------

    def _available(self, want: Want) -> Moment:
        """The first moment this can be in hand, from the bottom of its tree up."""
        today = (self.facts.as_at, 0)
        if want.settled is not Settled.MAKE or want.method is None or want.latest is None:
            return (want.available, 0) if want.available else today
        ready = max([today, *(self._available(part) for part in want.parts)])
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


def _not_by_then(want: Want, line: Line, method: Method) -> str:
    minutes = method.minutes + round(60 * method.stands_hours)
    return (
        f"cannot: {line.key} takes {minutes} min on the morning of {want.need.on}, "
        f"and that day leaves no staffed time before {format_time(want.need.booking.minute)}"
    )


def _not_made_not_sold(want: Want, line: Line) -> str:
    why = "; ".join(f"{number} {reason}" for number, reason in want.passed_over[:2])
    return f"no method and no supplier for {line.key}" + (f" ({why})" if why else "")
