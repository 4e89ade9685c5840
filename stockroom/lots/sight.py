"""What each sort sees of the others' plans, and what opening a batch costs it by that.

A sort sees, for each day, whether a batch or a lot of its parts is there already: then
opening a batch on that day costs nothing beyond its own work; else what opening one of
the part costs. `hidden` and `lured` change what is seen, to break up what two sorts
keep going for each other's sake, and to try a day nobody has asked for yet.
"""

from __future__ import annotations

from math import fsum, inf

from stockroom.lots.ground import DEAR, Ground, Making, Opening, Price
from stockroom.lots.model import Part
from stockroom.lots.objective import OVER
from stockroom.lots.picking import OverLimit
from stockroom.lots.plans import SortPlan

FEW = 3
"""Above so many vessels in a batch the room in the last one is not looked at. Our choice."""


class Sight:
    """The plans as they stand, each day's load, and what is hidden from whom."""

    def __init__(self, ground: Ground) -> None:
        self.ground = ground
        self.plans: list[SortPlan | None] = [None] * len(ground.makings)
        self.load = [0.0] * ground.days
        self.hidden: set[tuple[int, int]] = set()
        self.lured: dict[int, list[int]] = {}
        self.lots_hidden: set[tuple[int, int]] = set()
        self.kept_off: set[tuple[int, int]] = set()
        self.openings: dict[tuple[object, ...], Opening] = {}

    def serial(self, number: int) -> int:
        plan = self.plans[number]
        return plan.serial if plan is not None else 0

    def sight(self, making: Making) -> tuple[object, ...]:
        """All that the opening of a sort's batches depends on while there is no limit."""
        number = making.number
        seen: list[object] = []
        for part in making.parts:
            other = part.sort
            of = self.ground.makings[other]
            seen.append(self.serial(other))
            if self.hidden:
                seen.append(tuple(sorted(day for each, day in self.hidden if each == other)))
            if other in self.lured:
                seen.append((other, *self.lured[other]))
            if self.lots_hidden:
                seen.append((number, other) in self.lots_hidden)
            if not of.flat:
                seen.append(self.sight(of))
        if self.kept_off:
            seen.append(tuple(sorted(day for each, day in self.kept_off if each == number)))
        return tuple(seen)

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

    def opening_of(self, making: Making) -> Opening:
        """For each day, what opening a batch costs in batches of its parts."""
        if making.flat:
            opening = making.always
        elif self.ground.room is None:
            sight = (making.number, *self.sight(making))
            known = self.openings.get(sight)
            if known is None:
                known = self.openings[sight] = self._opening_of(making)
            opening = known
        else:
            opening = self._opening_of(making)
        off = [day for number, day in self.kept_off if number == making.number]
        if off:
            price = opening.price[:]
            for day in off:
                price[day] += DEAR
            opening = Opening(price, opening.room, opening.beyond)
        return opening

    def _opening_of(self, making: Making) -> Opening:
        days = self.ground.days
        price = [0.0 if each < inf else inf for each in making.alone]
        beyond, room = price[:], [inf] * days
        for place, part in enumerate(making.parts):
            self._add_part(making, place, part, (price, beyond, room))
        most = fsum(each[2] for each in making.items) if not making.takers else inf
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
            there_is = max(there) if self.ground.whole else fsum(there)
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
