"""One family planned in passes, then bettered move by move: kept only when it costs less.

A family is sorts joined by what goes into what. Moves are of one kind: show the family a
day of a part that is not there, or hide one that is, plan again whoever looked at it,
then the part itself, and count. What was shown or hidden is only a hint: the cost is
always that of the plans as they come out.
"""

from __future__ import annotations

from math import inf

from stockroom.lots.ground import Making, back_to
from stockroom.lots.house import House
from stockroom.lots.plans import SortPlan
from stockroom.lots.serving import WAYS

GAIN = 1e-9

PASSES = 2
"""More change nothing on the terms that were tried; in a large one none is made. Our choice."""


class Family:
    """The sorts of one family, in the order of their numbers: parts last."""

    def __init__(self, house: House, numbers: list[int]) -> None:
        self.house = house
        self.numbers = numbers
        self.makings = [house.ground.makings[each] for each in numbers]
        self.cost = 0.0

    def first_pass(self) -> None:
        """Each sort once; what the earlier ones ask of a part is seen by the later ones."""
        house = self.house
        for making in self.makings:
            if making.takers and making.items:
                house.replan(making)
        for making in self.makings:
            house.replan(making)
            self._ask_for_parts(making)
        house.lured.clear()
        self.cost = house.cost_of(self.numbers)

    def _ask_for_parts(self, making: Making) -> None:
        """The latest days its parts would be made for it, shown to those planned after it."""
        house = self.house
        plan = house.plans[making.number]
        for part in making.parts:
            of = house.ground.makings[part.sort]
            theirs = house.plans[of.number]
            days = house.lured.setdefault(of.number, [])
            known = [*days, *(each[0] for each in theirs.batches)] if theirs else days
            for batch in plan.batches if plan else ():
                first, last = part.first[batch[0]], part.last[batch[0]]
                day = back_to(of.back, last)
                if 0 <= first <= day and not any(first <= each <= last for each in known):
                    days.append(day)

    def settle(self) -> None:
        """Each sort again by what it now sees, as long as that costs less."""
        self.cost = self.house.cost_of(self.numbers)
        for _ in range(0 if self.house.ground.large else PASSES):
            if not self._try(list(self.numbers)):
                break

    def better(self, budget: int) -> None:
        """Moves, those that take a batch away first, until none helps or the work is spent."""
        house = self.house
        self.cost = house.cost_of(self.numbers)
        stop = house.work + budget
        parts = [each for each in self.makings if each.takers]
        again = True
        while again and house.work < stop:
            again = house.ground.room is not None and self.off_full_days(stop)
            for making in reversed(parts):
                again |= self._without_batches(making, stop)
            for making in self.makings:
                if making.parts:
                    again |= self._without_what_it_takes(making, stop)
                    again |= bool(making.shelf) and self._with_lots_elsewhere(making, stop)
            if not again:
                for making in parts:
                    again |= self._on_other_days(making, stop)

    def off_full_days(self, stop: int) -> bool:
        """Keep batches off days over their limit: each alone, with its takers, with its parts."""
        found = False
        for day in self.house.days_over():
            for making in self.makings:
                plan = self.house.plans[making.number]
                if plan is None or all(each[0] != day for each in plan.batches):
                    continue
                if self.house.work >= stop:
                    return found
                found |= self._off_one_day(making, day)
        return found

    def _off_one_day(self, making: Making, day: int) -> bool:
        house, number = self.house, making.number
        takers = {taker for taker, _, _ in making.takers}
        chances: list[tuple[int, ...]] = [(number,)]
        if takers:
            chances.append((number, *sorted(takers)))
        if making.parts:
            chances.append((number, *sorted({part.sort for part in making.parts})))
        for together in chances:
            # those who take of it must not count on the batch that is to go
            house.hidden.update((each, day) for each in together)
            house.kept_off.update((each, day) for each in together)
            better = self._try(list(together))
            house.hidden.clear()
            if not better:
                house.kept_off -= {(each, day) for each in together if each != number}
                house.hidden.add((number, day))
                better = self._try(list(together))
            house.hidden.clear()
            house.kept_off.clear()
            if better:
                return True
        return False

    def _without_batches(self, making: Making, stop: int) -> bool:
        """Hide each batch of a part in turn, and its lots, from those who take of it."""
        house, number = self.house, making.number
        found = False
        plan = house.plans[number]
        for day in [each[0] for each in plan.batches] if plan else []:
            if house.work >= stop:
                return found
            askers = self._takers_on(number, day)
            if not askers:
                continue
            house.hidden.add((number, day))
            found |= self._try([*askers, number])
            house.hidden.clear()
        if making.shelf and house.work < stop:
            askers = {taker for taker, _, _ in making.takers}
            house.lots_hidden.update((taker, number) for taker in askers)
            found |= self._try([*askers, number])
            house.lots_hidden.clear()
        return found

    def _takers_on(self, number: int, day: int) -> set[int]:
        """The sorts that take of a batch as the plans stand: hidden, it is dearer to no other."""
        plan = self.house.plans[number]
        if plan is None:
            return set()
        items = plan.items
        return {items[item][5] for item, on, _ in plan.shares if on == day} - {-1}

    def _without_what_it_takes(self, making: Making, stop: int) -> bool:
        """Hide all that one batch takes of, and what that takes of, so that they move together."""
        house, number = self.house, making.number
        found = False
        plan = house.plans[number]
        for day in [each[0] for each in plan.batches] if plan else []:
            if house.work >= stop:
                return found
            below = self._below({(number, day)})
            if len(below) < 2:
                continue
            house.hidden.update(below)
            found |= self._try([number, *{each for each, _ in below}])
            house.hidden.clear()
        return found

    def _with_lots_elsewhere(self, making: Making, stop: int) -> bool:
        """Use the lots in each of the other ways, and see what its parts come to then."""
        found = False
        used = making.way
        for way in range(len(WAYS)):
            if way == used or self.house.work >= stop:
                continue
            making.forced = way
            better = self._try([making.number])
            making.forced = -1
            if better:
                found, used = True, way
        making.way = used
        return found

    def _below(self, batches: set[tuple[int, int]]) -> set[tuple[int, int]]:
        """Sort and day of all batches that go into these, into those, and so on."""
        below: set[tuple[int, int]] = set()
        for making in self.makings:
            plan = self.house.plans[making.number]
            if plan is None or not making.takers:
                continue
            items, above = plan.items, batches | below
            below |= {
                (making.number, day)
                for item, day, _ in plan.shares
                if (items[item][5], items[item][3]) in above
            }
        return below

    def _on_other_days(self, making: Making, stop: int) -> bool:
        """Show a part's batch on another day, and hide the one before it, or after it."""
        house, number = self.house, making.number
        found = False
        askers = sorted({taker for taker, _, _ in making.takers})
        for day in self._days_to_try(making):
            plan = house.plans[number]
            days = [each[0] for each in plan.batches] if plan else []
            before = [each for each in days if each < day][-1:]
            after = [each for each in days if each > day][:1]
            for hidden in (*after, *before):
                if house.work >= stop:
                    return found
                better = self._moved(number, hidden, day, askers)
                if better:
                    found = True
                    break
        return found

    def _moved(self, number: int, before: int, day: int, askers: list[int]) -> bool:
        """Show a batch on `day`, hide the one there is, with all it takes of, then that alone."""
        house = self.house
        one = (number, before)
        below = self._below({one})
        for hidden in (below, set[tuple[int, int]]()) if below else (below,):
            house.lured[number] = [day]
            house.hidden.update(hidden, [one])
            better = self._try([*askers, number])
            house.lured.clear()
            house.hidden.clear()
            if better:
                return True
        return False

    def _days_to_try(self, making: Making) -> list[int]:
        """Last days on which it would still do for somebody's last day, and days its parts have."""
        house = self.house
        days = {item[0] for item in making.items}
        for taker, place, _ in making.takers:
            plan = house.plans[taker]
            part = house.ground.makings[taker].parts[place]
            if plan is not None:
                for day in {item[0] for item in plan.items if item[0] >= item[1]}:
                    days.add(back_to(making.back, part.last[day]))
        for part in making.parts:
            plan = house.plans[part.sort]
            days.update(each[0] for each in (plan.batches if plan else ()))
        plan = house.plans[making.number]
        there = {each[0] for each in plan.batches} if plan else set()
        return sorted(day for day in days - there if day >= 0 and making.alone[day] < inf)

    def _try(self, numbers: list[int]) -> bool:
        """Plan these again, and whatever their batches go on to ask for; back if it is no gain."""
        house = self.house
        before: dict[int, SortPlan | None] = {}
        dirty = set(numbers)
        for number in self.numbers:
            if number not in dirty:
                continue
            before[number] = house.plans[number]
            if house.replan(house.ground.makings[number]):
                dirty.update(part.sort for part in house.ground.makings[number].parts)
        cost = house.cost_of(self.numbers)
        if cost < self.cost - GAIN:
            self.cost = cost
            return True
        for number, plan in before.items():
            house.restore(number, plan)
        return False
