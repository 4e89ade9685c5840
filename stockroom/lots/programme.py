"""One sort's needs cut into runs, each run one batch, at the least cost.

The age-limited programme of Wagner and Whitin: needs in order of their last day, and for
every run of consecutive needs one day that will do for all of them. Exact where one
vessel holds a run. Where it does not, a second way fills one vessel after another: the
next is opened on the last day of the need at which the one before runs out.
"""

from __future__ import annotations

from collections.abc import Iterator
from math import ceil, fsum, inf

from stockroom.lots.ground import Making, Opening
from stockroom.lots.groups import HAIR, Groups, amount_made
from stockroom.lots.objective import EARLY
from stockroom.lots.picking import OverLimit, Picking

Filling = tuple[int, float]
"""Day, and how much of what is made then is needed, cm³."""

Run = tuple[int, int, list[Filling]]
"""Groups from the first up to the second (left out) are poured from these, in their order."""

Came = tuple[int, int, float]
"""First group of the run, day and cm³ of its one batch; day −1: vessel after vessel."""


def cheapest_runs(
    making: Making,
    groups: Groups,
    opening: Opening,
    *,
    refill: bool,
    over: OverLimit | None,
    hasty: bool = False,
) -> tuple[float, list[Run]]:
    """Cut the groups into runs; the cost leaves out `per` for what is needed in any case.

    `refill`: one vessel after another is tried; `hasty`: from fewer days.
    """
    programme = _Programme(making, groups, opening, over)
    programme.hasty = hasty
    best = programme.best
    for start in range(len(groups.last)):
        several = best[start] < inf and programme.single(start)
        if several and refill and not programme.is_reached_with_more_left(start):
            programme.one_after_another(start)
    return best[-1], programme.runs()


class _Programme(Picking):
    def __init__(
        self, making: Making, groups: Groups, opening: Opening, over: OverLimit | None
    ) -> None:
        super().__init__(making, opening)
        self.groups, self.over = groups, over
        count = len(groups.last)
        self.best = [inf] * (count + 1)
        self.best[0] = 0.0
        self.came: list[Came] = [(0, 0, 0.0)] * (count + 1)
        self.hasty = False
        # among equals the run that starts last, as what can wait is made later; but batches that
        # ask for parts, or others may ask for, are worth more on one day than on two
        self.tie = HAIR if making.flat and not making.takers else -HAIR
        self.labels: list[tuple[float, float, int]] = [(inf, 0.0, -1)] * (count + 1)

    def runs(self) -> list[Run]:
        """The cheapest runs, in order."""
        runs: list[Run] = []
        end = len(self.groups.last)
        while end:
            start, day, volume = self.came[end]
            fillings = [(day, volume)] if day >= 0 else self._refilled(start, end)
            runs.append((start, end, fillings))
            end = start
        runs.reverse()
        return runs

    def single(self, start: int) -> bool:
        """Every run from this group on as one batch on one day; True: vessels do not hold all.

        A run is not followed further once a fresh vessel for what comes next is as cheap.
        """
        making, best, over, came = self.making, self.best, self.over, self.came
        first_of, volume_of = self.groups.first, self.groups.volume
        last, count = self.groups.last[start], len(volume_of)
        fix, largest, smallest, spare = making.fix, making.largest, making.smallest, making.spare
        so_far, first, day, volume, opening = best[start], -1, -1, 0.0, 0.0
        step, reach, tie = making.step, inf, self.tie
        simple = over is None and not step
        for end in range(start, count):
            volume += volume_of[end]
            if first_of[end] > first:
                first = first_of[end]
                if first > last:
                    break
                if day < first:
                    day, opening = self.pick(first, last, volume)
                    reach = self.reach(day, volume)
            if volume > reach:
                day, opening = self.pick_for_much(first, last, volume)
                reach = self.reach(day, volume)
            after = end + 1
            work = fix if volume <= largest else fix * ceil(volume / largest - HAIR)
            cost = so_far + work
            reached = best[after]
            if simple and cost >= reached + fix and after < count and volume_of[after] >= smallest:
                break
            on = day
            cost += opening
            if step > 0.0:
                cost += spare * (self._rounded(volume) - volume)
            elif volume < smallest:
                cost += spare * (smallest - volume)
            if over is not None:
                on, more = self.off_the_full_days(
                    first, last, day, opening, work + making.per * volume, over
                )
                cost += more
            if cost < reached + tie:
                if cost < reached:
                    best[after] = cost
                came[after] = start, on, volume
        return volume > largest

    def _rounded(self, volume: float) -> float:
        return amount_made(self.making, volume)[1]

    def one_after_another(self, start: int) -> None:
        """Fill one vessel, and open the next on the last day of the need that empties it.

        Given up where an earlier start has come as far with no more spent, no less left
        in the open vessel, and that no older.
        """
        best, came = self.best, self.came
        smallest, spare = self.making.smallest, self.making.spare
        for end, cost, left, filled in self._filling(start):
            day, held = filled[-1]
            if self._no_better_than_before(end, cost, left, day):
                return
            if len(filled) == 1:
                continue
            held -= left
            if held < smallest:
                cost += spare * (smallest - held)
            if cost < best[end] - HAIR:
                best[end] = cost
                came[end] = start, -1, 0.0

    def _filling(self, start: int) -> Iterator[tuple[int, float, float, list[Filling]]]:
        """Vessel after vessel from this group on: groups served, cost, cm³ left, and vessels."""
        firsts, lasts, volumes = self.groups.first, self.groups.last, self.groups.volume
        fix, largest = self.making.fix, self.making.largest
        free = self.over is None and (self.hasty or self.room is None)
        filled: list[Filling] = []
        cost, left, day = self.best[start], 0.0, lasts[start]
        for end in range(start, len(lasts)):
            wanted = volumes[end]
            if firsts[end] > day:
                return
            while wanted > left + HAIR:
                wanted -= left
                if free:
                    before = day if filled else -1
                    day, opening = self.pick(firsts[end], lasts[end], 0.0)
                    vessels = 1 if wanted <= largest else ceil(wanted / largest - HAIR)
                    cost += fix * vessels + (opening if day != before else 0.0)
                else:
                    day, vessels, more = self._next_vessels(filled, end, wanted)
                    cost += more
                left = largest * vessels
                filled.append((day, left))
            left = left - wanted if left > wanted else 0.0
            yield end + 1, cost, left, filled

    def _refilled(self, start: int, stop: int) -> list[Filling]:
        """The vessels of a run, and what of each is needed."""
        for end, _, left, filled in self._filling(start):
            if end == stop:
                day, held = filled[-1]
                return [*filled[:-1], (day, held - left)]
        return []

    def is_reached_with_more_left(self, start: int) -> bool:
        """Whether vessels opened before come to this group as cheaply as a fresh start.

        In haste what is left in them counts as the part of a vessel it saves.
        """
        if self.hasty:
            cost, left, day = self.labels[start]
            if self.groups.first[start] <= day:
                cost -= self.making.fix * left / self.making.largest
            if cost <= self.best[start]:
                return True
        return self._no_better_than_before(start, self.best[start], 0.0, self.groups.last[start])

    def _no_better_than_before(self, end: int, cost: float, left: float, day: int) -> bool:
        """Whether an earlier start stands as well here: as cheap, as much left, not too old."""
        was_cost, was_left, was_day = self.labels[end]
        if cost < was_cost - HAIR:
            self.labels[end] = (cost, left, day)
            return False
        if left > was_left + HAIR:
            return False
        first, volume = self.groups.first, self.groups.volume
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
        if self.over is not None:
            return self._next_by_the_limit(filled, end, min(wanted, largest))
        day, opening = self.pick(first, last, min(wanted, largest) if filled else largest)
        vessels = 1 if wanted <= largest else ceil(wanted / largest - HAIR)
        if self.room is not None:
            # days of vessels filled before only rise
            there = 0.0
            if filled and filled[-1][0] >= first:
                there = fsum(volume for other, volume in filled if other == day)
            if there:
                day, opening = self.pick(first, last, there + min(wanted, largest))
                there = fsum(volume for other, volume in filled if other == day)
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
        first, last = self.groups.first[end], self.groups.last[end]
        best, chosen = inf, last
        for day in range(last, first - 1, -1):
            if self.price[day] == inf:
                continue
            mine = [volume for other, volume in filled if other == day]
            before = making.fix * len(mine) + making.per * fsum(mine)
            cost = over(day, before + work) - (over(day, before) if mine else 0.0)
            if not mine:
                there = self.room is None or wanted <= self.room[day]
                cost += self.price[day] if there else self.beyond[day]
            if day not in self.usual:
                cost += EARLY * (last - day) + making.unusual
            if cost < best - HAIR:
                best, chosen = cost, day
                if cost <= HAIR:
                    break
        return chosen, 1, making.fix + best
