"""The day picked for a batch: the cheapest of its window, with what breaks ties."""

from __future__ import annotations

from collections.abc import Callable
from math import inf

from stockroom.lots.ground import Making, Opening
from stockroom.lots.groups import HAIR
from stockroom.lots.objective import EARLY

OverLimit = Callable[[int, float], float]
"""What so many minutes more on a day cost beyond the limit."""


class Picking:
    """The days of one sort and what opening a batch costs on each."""

    def __init__(self, making: Making, opening: Opening) -> None:
        self.making, self.opening = making, opening
        self.price, self.room, self.beyond = opening.price, opening.room, opening.beyond
        self.usual = making.usual
        self.flat = opening is making.always and not making.usual

    def pick(self, first: int, last: int, volume: float) -> tuple[int, float]:
        """The cheapest day for so much: a usual one among equals, then the latest.

        With it what opening a batch costs on that day, and what breaks ties.
        """
        if self.flat:
            return last, 0.0
        known = self.opening.known
        window = first, last
        found = known.get(window)
        if found is None:
            found = known[window] = self._pick(first, last)
        if self.room is not None and volume > self.room[found[0]]:
            much = first, last, volume
            found = self.opening.much.get(much)
            if found is None:
                found = self.opening.much[much] = self.pick_for_much(first, last, volume)
        return found

    def _pick(self, first: int, last: int) -> tuple[int, float]:
        opening, price = self.opening, self.price
        if price[last] <= opening.lowest:
            day, cost = last, price[last]
        else:
            tilted = opening.tilted
            cost = min(tilted[first : last + 1])
            day = tilted.index(cost, first)
            cost += EARLY * last
        if self.usual:
            cost += self.making.unusual
            for each in self.usual:
                if first <= each <= last and price[each] <= cost:
                    day, cost = each, price[each]
        return day, cost

    def pick_for_much(self, first: int, last: int, volume: float) -> tuple[int, float]:
        """The same where what is there of a part does not reach on every day."""
        price, beyond, room = self.price, self.beyond, self.room or []
        lowest = self.opening.lowest
        best, day, early = inf, last, 0.0
        for other in range(last, first - 1, -1):
            cost = (price if volume <= room[other] else beyond)[other] + early
            if cost < best:
                best, day = cost, other
            early += EARLY
            if best <= lowest + early:
                break
        if self.usual:
            best += self.making.unusual
            for each in self.usual:
                if first <= each <= last:
                    cost = (price if volume <= room[each] else beyond)[each]
                    if cost <= best:
                        day, best = each, cost
        return day, best

    def reach(self, day: int, volume: float) -> float:
        """Up to how much the day stays the cheapest; one paid in full stays so for any more."""
        if self.room is None or volume > self.room[day]:
            return inf
        return self.room[day]

    def off_the_full_days(
        self, first: int, last: int, day: int, opening: float, work: float, over: OverLimit
    ) -> tuple[int, float]:
        """Another day where the cheapest is over its limit; and what it costs above `opening`."""
        least = over(day, work)
        if least <= 0.0:
            return day, least
        unusual = self.making.unusual
        for other in range(last, first - 1, -1):
            if other == day or self.price[other] == inf:
                continue
            early = 0.0 if other in self.usual else EARLY * (last - other) + unusual
            more = self.price[other] + early - opening
            if more < least:
                more += over(other, work)
                if more < least - HAIR:
                    least, day = more, other
        return day, least
