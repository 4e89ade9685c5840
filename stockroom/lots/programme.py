"""One sort's needs cut into runs, each run one batch, at the least cost.

The age-limited programme of Wagner and Whitin: needs in order of their last day, and for
every run of consecutive needs one day that will do for all of them. Exact where one
vessel holds a run. Where it does not, a second way fills one vessel after another: the
next is opened on the last day of the need at which the one before runs out.
"""

from __future__ import annotations

from collections.abc import Callable
from math import ceil, inf

from stockroom.lots.ground import Making, Opening
from stockroom.lots.groups import HAIR, Groups, amount_made
from stockroom.lots.objective import EARLY

Filling = tuple[int, float]
"""Day, and how much of what is made then is needed, cm³."""

Run = tuple[int, int, list[Filling]]
"""Groups from the first up to the second (left out) are poured from these, in their order."""

OverLimit = Callable[[int, float], float]
"""What so many minutes more on a day cost beyond the limit."""

Came = tuple[int, list[Filling]]


def cheapest_runs(
    making: Making, groups: Groups, opening: Opening, *, refill: bool, over: OverLimit | None
) -> tuple[float, list[Run]]:
    """Cut the groups into runs; the cost leaves out `per` for what is needed in any case."""
    programme = _Programme(making, groups, opening, over)
    for start in range(len(groups.last)):
        several = programme.best[start] < inf and programme.single(start)
        if several and refill and not programme.is_reached_with_more_left(start):
            programme.one_after_another(start)
    return programme.best[-1], programme.runs()


class _Programme:
    def __init__(
        self, making: Making, groups: Groups, opening: Opening, over: OverLimit | None
    ) -> None:
        self.making, self.groups, self.over = making, groups, over
        count = len(groups.last)
        self.best = [inf] * (count + 1)
        self.best[0] = 0.0
        self.came: list[Came] = [(0, [])] * (count + 1)
        self.price, self.room, self.beyond = opening.price, opening.room, opening.beyond
        self.usual = making.usual
        self.flat = opening is making.always and not making.usual
        self.tilted: list[float] = []
        self.lowest = 0.0
        if not self.flat:
            self.tilted = [each - EARLY * day for day, each in enumerate(self.price)]
            self.lowest = min(self.price)
        self.tilted_beyond: list[float] = []
        if self.room is not None:
            self.tilted_beyond = [each - EARLY * day for day, each in enumerate(self.beyond)]
        # among equals the run that starts last, as what can wait is made later; but batches that
        # ask for parts, or others may ask for, are worth more on one day than on two
        self.tie = HAIR if making.flat and not making.takers else -HAIR
        self.labels: list[tuple[float, float, int]] = [(inf, 0.0, -1)] * (count + 1)

    def runs(self) -> list[Run]:
        """The cheapest runs, in order."""
        runs: list[Run] = []
        end = len(self.groups.last)
        while end:
            start, fillings = self.came[end]
            runs.append((start, end, fillings))
            end = start
        runs.reverse()
        return runs

    def pick(self, first: int, last: int, volume: float) -> tuple[int, float]:
        """The cheapest day for so much, the latest among equals, the usual one before that.

        With it what opening a batch costs on that day, and EARLY for each day before the last.
        """
        if self.flat:
            return last, 0.0
        price = self.price
        if not self.usual and price[last] <= self.lowest:
            day, cost = last, price[last]
        else:
            cost = min(self.tilted[first : last + 1])
            day = self.tilted.index(cost, first)
            cost += EARLY * last
            for each in self.usual:
                if first <= each <= last and price[each] <= cost:
                    day, cost = each, price[each]
        if self.room is not None and volume > self.room[day]:
            return self._pick_for_much(first, last, volume)
        return day, cost

    def _pick_for_much(self, first: int, last: int, volume: float) -> tuple[int, float]:
        """The same where what is there of a part does not reach on every day."""
        end = last + 1
        room = self.room or []
        costs = [
            low if volume <= there else high
            for low, high, there in zip(
                self.tilted[first:end], self.tilted_beyond[first:end], room[first:end], strict=True
            )
        ]
        cost = min(costs)
        day = first + costs.index(cost)
        cost += EARLY * last
        for each in self.usual:
            if first <= each <= last:
                price = self.price[each] if volume <= room[each] else self.beyond[each]
                if price <= cost:
                    day, cost = each, price
        return day, cost

    def single(self, start: int) -> bool:
        """Every run from this group on as one batch on one day; True: vessels do not hold all.

        A run is not followed further once a fresh vessel for what comes next is as cheap.
        """
        making, best, over = self.making, self.best, self.over
        first_of, volume_of = self.groups.first, self.groups.volume
        last, count = self.groups.last[start], len(volume_of)
        fix, largest, smallest, spare = making.fix, making.largest, making.smallest, making.spare
        so_far, first, day, volume, opening = best[start], -1, -1, 0.0, 0.0
        step, reach = making.step, inf
        for end in range(start, count):
            volume += volume_of[end]
            if first_of[end] > first:
                first = first_of[end]
                if first > last:
                    break
                if day < first:
                    day, opening = self.pick(first, last, volume)
                    reach = self._reach(day, volume)
            if volume > reach:
                day, opening = self._pick_for_much(first, last, volume)
                reach = self._reach(day, volume)
            work = fix if volume <= largest else fix * ceil(volume / largest - HAIR)
            cost = so_far + work
            fresh = over is None and not step and end + 1 < count and volume_of[end + 1] >= smallest
            if fresh and cost >= best[end + 1] + fix:
                break
            on = day
            cost += opening
            if step > 0.0:
                cost += spare * (self._rounded(volume) - volume)
            elif volume < smallest:
                cost += spare * (smallest - volume)
            if over is not None:
                on, more = self._off_the_full_days(
                    first, last, day, opening, work + making.per * volume, over
                )
                cost += more
            if cost < best[end + 1] + self.tie:
                best[end + 1] = min(cost, best[end + 1])
                self.came[end + 1] = (start, [(on, volume)])
        return volume > largest

    def _reach(self, day: int, volume: float) -> float:
        """Up to how much the day stays the cheapest; one paid in full stays so for any more."""
        if self.room is None or volume > self.room[day]:
            return inf
        return self.room[day]

    def _rounded(self, volume: float) -> float:
        return amount_made(self.making, volume)[1]

    def _off_the_full_days(
        self, first: int, last: int, day: int, opening: float, work: float, over: OverLimit
    ) -> tuple[int, float]:
        """Another day where the cheapest is over its limit; and what it costs above `opening`."""
        least = over(day, work)
        if least <= 0.0:
            return day, least
        for other in range(last, first - 1, -1):
            if other == day or self.price[other] == inf:
                continue
            early = 0.0 if other in self.usual else EARLY * (last - other)
            more = self.price[other] + early - opening
            if more < least:
                more += over(other, work)
                if more < least - HAIR:
                    least, day = more, other
        return day, least

    def one_after_another(self, start: int) -> None:
        """Fill one vessel, and open the next on the last day of the need that empties it.

        Given up where an earlier start has come as far with no more spent, no less left
        in the open vessel, and that no older.
        """
        making, groups, best = self.making, self.groups, self.best
        largest, smallest = making.largest, making.smallest
        filled: list[Filling] = []
        cost, left, day = best[start], 0.0, groups.last[start]
        for end in range(start, len(groups.last)):
            wanted = groups.volume[end]
            if groups.first[end] > day:
                return
            while wanted > left + HAIR:
                wanted -= left
                day, vessels, more = self._next_vessels(filled, end, wanted)
                cost += more
                left = largest * vessels
                filled.append((day, left))
            left = max(left - wanted, 0.0)
            if self._no_better_than_before(end + 1, cost, left, day):
                return
            if len(filled) == 1:
                continue
            held = filled[-1][1] - left
            total = cost
            if held < smallest:
                total += making.spare * (smallest - held)
            if total < best[end + 1] - HAIR:
                best[end + 1] = total
                self.came[end + 1] = (start, [*filled[:-1], (day, held)])

    def is_reached_with_more_left(self, start: int) -> bool:
        """Whether vessels opened before come to this group as cheaply as a fresh start."""
        return self._no_better_than_before(start, self.best[start], 0.0, self.groups.last[start])

    def _no_better_than_before(self, end: int, cost: float, left: float, day: int) -> bool:
        """Whether an earlier start stands as well here: as cheap, as much left, not too old."""
        first, volume = self.groups.first, self.groups.volume
        was_cost, was_left, was_day = self.labels[end]
        if cost < was_cost - HAIR:
            self.labels[end] = (cost, left, day)
            return False
        if left > was_left + HAIR:
            return False
        if day <= was_day or end == len(first):
            return True
        # older, but young enough for all that what is left in it could serve
        return was_day >= first[end] and (
            volume[end] >= was_left or end + 1 == len(first) or was_day >= first[end + 1]
        )

    def _next_vessels(
        self, filled: list[Filling], end: int, wanted: float
    ) -> tuple[int, int, float]:
        """Day, number and cost of the vessels opened when those before have run out."""
        first, last = self.groups.first[end], self.groups.last[end]
        fix, largest = self.making.fix, self.making.largest
        day, opening = self.pick(first, last, min(wanted, largest) if filled else largest)
        if self.over is not None:
            return self._next_by_the_limit(filled, end, min(wanted, largest))
        vessels = max(1, ceil(wanted / largest - HAIR))
        if self.room is not None:
            there = sum(volume for other, volume in filled if other == day)
            if there:
                day, opening = self.pick(first, last, there + min(wanted, largest))
                there = sum(volume for other, volume in filled if other == day)
            fit = (self.room[day] - there) / largest
            vessels = vessels if fit >= vessels else max(1, int(fit))
        if filled and filled[-1][0] == day:
            opening = 0.0
        return day, vessels, fix * vessels + opening

    def _next_by_the_limit(
        self, filled: list[Filling], end: int, wanted: float
    ) -> tuple[int, int, float]:
        """One vessel on the day where it is cheapest, what this run has put there counted."""
        making, over = self.making, self.over
        assert over is not None
        work = making.fix + making.per * wanted
        best, chosen = inf, self.groups.last[end]
        for day in range(self.groups.last[end], self.groups.first[end] - 1, -1):
            if self.price[day] == inf:
                continue
            mine = [volume for other, volume in filled if other == day]
            before = making.fix * len(mine) + making.per * sum(mine)
            cost = over(day, before + work) - over(day, before)
            if not mine:
                there = self.room is None or wanted <= self.room[day]
                cost += self.price[day] if there else self.beyond[day]
            if day not in self.usual:
                cost += EARLY * (self.groups.last[end] - day)
            if cost < best - HAIR:
                best, chosen = cost, day
        return chosen, 1, making.fix + best
