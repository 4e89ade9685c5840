"""One sort planned alone: what its lots serve, its batches, and what that costs."""

from __future__ import annotations

from dataclasses import dataclass
from math import inf

from stockroom.lots.ground import Ground, Item, Making, Opening
from stockroom.lots.groups import HAIR, Groups, amount_made
from stockroom.lots.objective import EARLY, SHORT
from stockroom.lots.picking import OverLimit
from stockroom.lots.programme import Run, cheapest_runs
from stockroom.lots.serving import (
    WAYS,
    Serving,
    Way,
    serve_what_cannot_be_made,
    untouched,
    whole_runs,
)
from stockroom.lots.top_up import Share, save_vessels

Made = tuple[int, int, float]
"""Day, vessels, cm³ made."""

Lost = list[tuple[int, float]]
"""Item's place, and what of it neither a batch nor a lot can give, cm³."""

MANY = 24
"""With more days of need than this, two ways to use the lots are tried of the five. Our choice."""


@dataclass(slots=True, eq=False)
class SortPlan:
    """The batches of one sort in order of their days, and what each item gets of them.

    `cost` counts all but the day's limit, `guided` also what opening batches of parts was
    thought to cost. `unmet`: items of batches that ask for what cannot be had. `serial`
    tells it from all others that are kept.
    """

    items: list[Item]
    serving: Serving
    shares: list[Share]
    batches: tuple[Made, ...]
    cost: float
    guided: float
    unmet: Lost
    serial: int = 0


def plan_sort(
    ground: Ground, making: Making, items: list[Item], opening: Opening, over: OverLimit | None
) -> SortPlan:
    """The cheapest of the ways to use the lots, each with the best batches for the rest.

    `items` are sorted; `opening` guides the choice of days and is no part of the plan's cost.
    """
    serving = untouched(making, items)
    if making.shelf:
        serve_what_cannot_be_made(making, items, serving, whole=ground.whole)
    refill, hasty = not ground.whole, ground.large
    lost = _take_out_the_lost(items, serving)
    job = _Job(ground, making, items, lost, opening, over)
    groups = Groups(items, serving.need)
    runs: list[Run] = []
    ways = _ways(ground, making, len(groups.last)) if any(serving.left) else ()
    if whole_runs in ways or not ways:
        _, runs = cheapest_runs(making, groups, opening, refill=refill, over=over, hasty=hasty)
    if not ways or not groups.last:
        return job.plan(serving, groups, runs)
    best: SortPlan | None = None
    seen: list[tuple[list[float], list[float]]] = []
    for way in ways:
        trial = serving.copy()
        way(making, items, trial, (groups, runs), ground.whole)
        if (trial.need, trial.left) in seen:
            continue
        seen.append((trial.need, trial.left))
        rest = Groups(items, trial.need)
        _, fewer = cheapest_runs(making, rest, opening, refill=refill, over=over, hasty=hasty)
        answer = job.plan(trial, rest, fewer)
        if best is None or answer.guided < best.guided - HAIR:
            best, making.way = answer, WAYS.index(way)
        if not rest.last and not any(trial.left):
            break
    assert best is not None
    return best


def _ways(ground: Ground, making: Making, days: int) -> tuple[Way, ...]:
    """The ways to use lots worth trying: all of them once, then the one that was best before."""
    if making.forced >= 0:
        return WAYS[making.forced : making.forced + 1]
    if ground.large:
        return WAYS[:1]
    if making.way >= 0 and ground.settled:
        return WAYS[making.way : making.way + 1]
    return WAYS if days <= MANY else WAYS[:2]


def _take_out_the_lost(items: list[Item], serving: Serving) -> Lost:
    lost = []
    for place, item in enumerate(items):
        if item[0] < item[1] and serving.need[place] > HAIR:
            lost.append((place, serving.need[place]))
            serving.need[place] = 0.0
    return lost


@dataclass(slots=True)
class _Job:
    ground: Ground
    making: Making
    items: list[Item]
    lost: Lost
    opening: Opening
    over: OverLimit | None

    def plan(self, serving: Serving, groups: Groups, runs: list[Run]) -> SortPlan:
        """Runs poured out item by item, vessels saved where they can be, and all of it costed."""
        making, items = self.making, self.items
        shares = _poured(serving.need, groups, runs)
        if making.largest < inf and len(runs) > 1:
            shares = save_vessels(making, items, shares, whole=self.ground.whole)
        volumes: dict[int, float] = {}
        ends: dict[int, int] = {}
        for place, day, volume in shares:
            end = items[place][0]
            if day in volumes:
                volumes[day] += volume
                ends[day] = min(ends[day], end)
            else:
                volumes[day], ends[day] = volume, end
        cost = guide = 0.0
        batches: list[Made] = []
        for day in sorted(volumes):
            vessels, made = amount_made(making, volumes[day])
            cost += making.fix * vessels + making.per * made
            cost += making.waste * (made - volumes[day])
            if not making.flat:
                guide += self.opening.at(day, made)
                guide += (making.spare - making.waste - making.per) * made
            if self.over is not None:
                guide += self.over(day, making.fix * vessels + making.per * made)
            if day not in making.usual:
                cost += EARLY * (ends[day] - day) + making.unusual
            batches.append((day, vessels, made))
        for each, left in zip(making.shelf, serving.left, strict=True):
            cost += each.lot.waste * left
        unmet = []
        for place, volume in self.lost:
            cost += SHORT * volume * making.dearest_share(items[place])
            if items[place][5] >= 0:
                unmet.append((place, volume))
        return SortPlan(items, serving, shares, tuple(batches), cost, cost + guide, unmet)


def _poured(need: list[float], groups: Groups, runs: list[Run]) -> list[Share]:
    """What each item gets from which day's batch, vessels emptied in the order they are filled."""
    shares: list[Share] = []
    for start, end, fillings in runs:
        items = range(groups.ends[start - 1] if start else 0, groups.ends[end - 1])
        if len(fillings) == 1:
            day = fillings[0][0]
            shares += [(place, day, need[place]) for place in items if need[place] > HAIR]
            continue
        at, (day, there) = 0, fillings[0]
        for place in items:
            wanted = need[place]
            while wanted > HAIR:
                final = at == len(fillings) - 1
                amount = wanted if final else min(wanted, there)
                if amount > HAIR:
                    shares.append((place, day, amount))
                wanted -= amount
                there -= amount
                if there <= HAIR and not final:
                    at += 1
                    day, there = fillings[at]
    return shares
