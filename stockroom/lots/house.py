"""Plans of all sorts side by side: what each asks of the others, what it pays for their batches.

A sort sees, for each day, whether a batch or a lot of its parts is there already: then
opening a batch on that day costs nothing beyond its own work; else what opening one of
the part costs. `hidden` and `lured` change what is seen, to break up what two sorts
keep going for each other's sake, and to try a day nobody has asked for yet.
"""

from __future__ import annotations

from math import inf

from stockroom.lots.ground import DEAR, Ground, Item, Making, Opening, Price, back_to
from stockroom.lots.model import Part
from stockroom.lots.objective import OVER
from stockroom.lots.plans import Made, SortPlan, plan_sort
from stockroom.lots.programme import OverLimit

FEW = 3
"""Above so many vessels in a batch the room in the last one is not looked at. Our choice."""


class House:
    """The plans as they stand, each day's load, and how much work has gone into them."""

    def __init__(self, ground: Ground) -> None:
        self.ground = ground
        self.plans: list[SortPlan | None] = [None] * len(ground.makings)
        self.load = [0.0] * ground.days
        self.work = 0
        self.hidden: set[tuple[int, int]] = set()
        self.lured: dict[int, list[int]] = {}
        self.lots_hidden: set[tuple[int, int]] = set()
        self.kept_off: set[tuple[int, int]] = set()
        self.memo: dict[tuple[object, ...], SortPlan] = {}

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
        items = self.items_of(making)
        opening = self.opening_of(making)
        old = self.plans[number]
        if self.ground.room is None:
            key = (number, tuple(items), *_key_of(making, opening))
            plan = self.memo.get(key)
            if plan is None:
                self.work += 4 + len(items)
                plan = self.memo[key] = plan_sort(self.ground, making, items, opening, None)
        else:
            self.work += 8 + 2 * len(items)
            if old is not None:
                self.bear(making, old.batches, -1.0)
            plan = plan_sort(self.ground, making, items, opening, self.over())
            self.bear(making, plan.batches, 1.0)
        self.plans[number] = plan
        return old is None or old.batches != plan.batches

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

    def over(self) -> OverLimit | None:
        """What more minutes on a day cost beyond its limit, by the load as it stands."""
        room = self.ground.room
        if room is None:
            return None
        load = self.load

        def more(day: int, minutes: float) -> float:
            free = room[day] - load[day]
            if minutes <= free:
                return 0.0
            return OVER * (minutes - max(free, 0.0))

        return more

    def over_cost(self) -> float:
        """What all days cost beyond their limits."""
        room = self.ground.room
        if room is None:
            return 0.0
        return OVER * sum(
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

    def opening_of(self, making: Making) -> Opening:
        """For each day, what opening a batch costs in batches of its parts."""
        opening = self._opening_of(making)
        off = [day for number, day in self.kept_off if number == making.number]
        if off:
            price = opening.price[:]
            for day in off:
                price[day] += DEAR
            opening = Opening(price, opening.room, opening.beyond)
        return opening

    def _opening_of(self, making: Making) -> Opening:
        if making.flat:
            return making.always
        days = self.ground.days
        price = [0.0 if each < inf else inf for each in making.alone]
        beyond, room = price[:], [inf] * days
        for place, part in enumerate(making.parts):
            self._add_part(making, place, part, (price, beyond, room))
        most = sum(each[2] for each in making.items) if not making.takers else inf
        if all(each >= most or fixed == inf for each, fixed in zip(room, price, strict=True)):
            return Opening(price)
        return Opening(price, room, beyond)

    def _add_part(
        self, making: Making, place: int, part: Part, answer: tuple[Price, Price, Price]
    ) -> None:
        """One part's price of every day: nothing where a batch or a lot has enough left."""
        price, beyond, room = answer
        of = self.ground.makings[part.sort]
        seen, left = self._batches_seen(making, place, of)
        lots = self._lots_left(making, place, part, of)
        upto = max((through for through, _ in lots), default=-1)
        opening = self._day_by_day(of)
        over = self.over()
        for day, first, last, dear in making.rows[place]:
            if last >= 0:
                known = seen[last]
                if known >= first:
                    beyond[day] += of.fix
                    if known in left and left[known] < room[day] * part.share:
                        room[day] = left[known] / part.share
                    continue
                if opening is not None:
                    dear = min(opening[first : last + 1])
                    if over is not None and last == day:
                        # both on one day: what fits alone may not fit together
                        mine, both = over(day, making.fix), over(day, making.fix + of.fix)
                        own = opening[day] - over(day, of.fix) + both - mine
                        dear = min(min(opening[first:last], default=inf), own)
                    dear = dear if dear < inf else DEAR
            beyond[day] += dear
            if day > upto:
                price[day] += dear
                continue
            there = [amount for through, amount in lots if day <= through]
            there_is = max(there) if self.ground.whole else sum(there)
            room[day] = min(room[day], there_is / part.share)

    def _day_by_day(self, of: Making) -> Price | None:
        """What a batch of a part costs to open on each day; None: `fix` on any that will do."""
        over = self.over()
        if of.flat and over is None:
            return None
        price = self.opening_of(of).price
        if over is None:
            return [each + of.fix for each in price]
        return [each + of.fix + over(day, of.fix) for day, each in enumerate(price)]

    def _batches_seen(
        self, making: Making, place: int, of: Making
    ) -> tuple[list[int], dict[int, float]]:
        """For each day the last day up to it with a batch to be seen, and cm³ its vessels hold.

        What the sort takes of a batch now counts as room in it. Empty: vessels hold anything.
        """
        number = of.number
        plan = self.plans[number]
        left: dict[int, float] = {}
        days = set(self.lured.get(number, ()))
        if of.largest < inf:
            left = dict.fromkeys(days, of.largest)
        if plan is not None:
            me = (making.number, place)
            for day, vessels, made in plan.batches:
                if (number, day) not in self.hidden:
                    days.add(day)
                    if of.largest < inf and vessels <= FEW:
                        left[day] = vessels * of.largest - made
            if left:
                for item, day, volume in plan.shares:
                    if day in left and plan.items[item][5:] == me:
                        left[day] += volume
        seen: list[int] = []
        before = -1
        for day in sorted(days):
            seen += [before] * (day - len(seen))
            before = day
        seen += [before] * (self.ground.days - len(seen))
        return seen, left

    def _lots_left(
        self, making: Making, place: int, part: Part, of: Making
    ) -> list[tuple[int, float]]:
        """Lots of a part: through which day they will do, and cm³ the sort could have of them."""
        if not of.shelf or (making.number, of.number) in self.lots_hidden:
            return []
        theirs = self.plans[of.number]
        there = [each.lot.volume for each in of.shelf]
        if theirs is not None:
            there = theirs.serving.left[:]
            for lot, item, amount in theirs.serving.given:
                if theirs.items[item][5:] == (making.number, place):
                    there[lot] += amount
        return [
            (each.last_day_for(part.strength), amount)
            for each, amount in zip(of.shelf, there, strict=True)
            if amount > 1e-6
        ]


def _key_of(making: Making, opening: Opening) -> tuple[object, ...]:
    if making.flat:
        return ()
    if opening.room is None:
        return (tuple(opening.price),)
    return tuple(opening.price), tuple(opening.room), tuple(opening.beyond)
