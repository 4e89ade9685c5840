"""The plans of all sorts written out as an answer: batches, and who gets what from where."""

from __future__ import annotations

from stockroom.lots.ground import Ground, Making
from stockroom.lots.model import Arrangement, Batch, Gift
from stockroom.lots.plans import SortPlan

Source = tuple[int, int]
"""The answer's batch or −1, the problem's lot or −1."""


def written_out(ground: Ground, plans: list[SortPlan | None]) -> Arrangement:
    """Batches in order of sort and day, gifts in order of sort and last day of the need."""
    batches: list[Batch] = []
    place: dict[tuple[int, int], int] = {}
    for number, plan in enumerate(plans):
        for day, vessels, made in plan.batches if plan else ():
            place[number, day] = len(batches)
            batches.append(Batch(number, day, vessels, made))
    given = [0.0] * len(ground.problem.demands)
    gifts: list[Gift] = []
    for number, plan in enumerate(plans):
        if plan is not None:
            for item, volume, source in poured(ground.makings[number], plan, place):
                _, _, _, use, _, taker, what = plan.items[item]
                if taker < 0:
                    given[what] += volume
                    gifts.append(Gift(volume, *source, demand=what))
                else:
                    gifts.append(Gift(volume, *source, into=place[taker, use], part=what))
    short = tuple(
        max(demand.volume - got, 0.0) if demand.volume - got > 1e-7 else 0.0
        for demand, got in zip(ground.problem.demands, given, strict=True)
    )
    return Arrangement(tuple(batches), tuple(gifts), short)


def poured(
    making: Making, plan: SortPlan, place: dict[tuple[int, int], int]
) -> list[tuple[int, float, Source]]:
    """What each item gets: item, cm³, source; lots first, then batches."""
    total: dict[tuple[int, int], float] = {}
    for lot, item, volume in plan.serving.given:
        total[lot, item] = total.get((lot, item), 0.0) + volume
    out: list[tuple[int, float, Source]] = []
    for (lot, item), volume in total.items():
        out.append((item, volume, (-1, making.shelf[lot].number)))
    for item, day, volume in plan.shares:
        out.append((item, volume, (place[making.number, day], -1)))
    return out
