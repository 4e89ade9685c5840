"""Plans of all sorts side by side: what each asks of the others; one of them planned again."""

from __future__ import annotations

from math import fsum

from stockroom.lots.ground import Ground, Item, Making, Opening, back_to
from stockroom.lots.objective import OVER
from stockroom.lots.plans import Made, SortPlan, plan_sort
from stockroom.lots.sight import Sight


class House(Sight):
    """The plans as they stand, each day's load, and how much work has gone into them."""

    def __init__(self, ground: Ground) -> None:
        super().__init__(ground)
        self.work = 0
        self.memo: dict[tuple[object, ...], SortPlan] = {}
        self.cuts = 0

    def items_of(self, making: Making) -> list[Item]:
        """What is asked of a sort: its own demands, and its share of the batches it goes into."""
        items = making.items[:]
        for number, place, share in making.takers:
            plan = self.plans[number]
            if plan is None:
                continue
            part = self.ground.makings[number].parts[place]
            for day, _, made in plan.batches:
                last = back_to(making.back, part.last[day])
                first = part.first[day]
                items.append(
                    (
                        last,
                        first if first >= 0 else self.ground.days,
                        share * made,
                        day,
                        part.strength,
                        number,
                        place,
                    )
                )
        items.sort()
        return items

    def replan(self, making: Making) -> bool:
        """Plan one sort anew by what it sees; True: its batches are no longer the same."""
        number = making.number
        old = self.plans[number]
        if self.ground.room is None:
            plan = self._remembered(making)
        else:
            items = self.items_of(making)
            opening = self.opening_of(making)
            self.work += 8 + 2 * len(items)
            if old is not None:
                self.bear(making, old.batches, -1.0)
            plan = plan_sort(self.ground, making, items, opening, self.over())
            self.bear(making, plan.batches, 1.0)
        self.plans[number] = plan
        return old is None or old.batches != plan.batches

    def _remembered(self, making: Making) -> SortPlan:
        """The plan of a sort without a limit: by whose plans it sees, by what it comes to, or new.

        Plans that are alike are one object with one serial, so that asking again costs little.
        """
        asking = tuple(self.serial(number) for number, _, _ in making.takers)
        seen = (making.number, self.cuts, making.forced, asking, self.sight(making))
        plan = self.memo.get(seen)
        if plan is not None:
            return plan
        items = self.items_of(making)
        opening = self.opening_of(making)
        key = (making.number, making.forced, tuple(items), *_key_of(making, opening))
        plan = self.memo.get(key)
        if plan is None:
            self.work += 4 + len(items)
            plan = self.memo[key] = plan_sort(self.ground, making, items, opening, None)
            plan.serial = len(self.memo)
        self.memo[seen] = plan
        return plan

    def restore(self, number: int, plan: SortPlan | None) -> None:
        """Put back the plan a sort had before."""
        now = self.plans[number]
        if now is plan:
            return
        if self.ground.room is not None:
            making = self.ground.makings[number]
            if now is not None:
                self.bear(making, now.batches, -1.0)
            if plan is not None:
                self.bear(making, plan.batches, 1.0)
        self.plans[number] = plan

    def bear(self, making: Making, batches: tuple[Made, ...], sign: float) -> None:
        """Add the work of batches to the days it falls on, or take it off again."""
        sort = making.sort
        for day, vessels, made in batches:
            self.load[day] += sign * (sort.minutes * vessels + sort.per_cm3 * made)
            if sort.finishing:
                done = sort.finish_on[day] if sort.finish_on else day
                if done >= 0:
                    self.load[done] += sign * sort.finishing * vessels

    def over_cost(self) -> float:
        """What all days cost beyond their limits."""
        room = self.ground.room
        if room is None:
            return 0.0
        return OVER * fsum(
            load - free for load, free in zip(self.load, room, strict=True) if load > free + 1e-9
        )

    def days_over(self) -> list[int]:
        """Days with more minutes than their limit leaves, the worst first."""
        room = self.ground.room or self.load
        over = [
            (free - load, day) for day, (load, free) in enumerate(zip(self.load, room, strict=True))
        ]
        return [day for less, day in sorted(over) if less < -1e-6]

    def cost_of(self, numbers: list[int]) -> float:
        """What the plans of these sorts cost, and the limits of all."""
        total = self.over_cost()
        for number in numbers:
            plan = self.plans[number]
            if plan is not None:
                total += plan.cost
        return total


def _key_of(making: Making, opening: Opening) -> tuple[object, ...]:
    if making.flat:
        return ()
    if opening.room is None:
        return (tuple(opening.price),)
    return tuple(opening.price), tuple(opening.room), tuple(opening.beyond)
