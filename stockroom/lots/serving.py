"""Which needs the lots on the shelf serve, before anything is made: five ways to try.

Covering the most is not the same as making the fewest (a lot kept for the one need that
stands alone may save a batch), so each way is costed with the batches it leaves to make.
Needs that no batch can meet always come first.
"""

from __future__ import annotations

from collections.abc import Callable, Iterable
from dataclasses import dataclass
from math import exp, fsum

from stockroom.lots.ground import Item, Making
from stockroom.lots.groups import HAIR, Groups, vessels_for
from stockroom.lots.programme import Run

Cut = tuple[Groups, list[Run]]
"""The batches there would be without lots: what a lot could save."""


@dataclass(slots=True)
class Serving:
    """What lots give: (lot's place on the shelf, item's place, cm³), and what stays in them."""

    need: list[float]
    left: list[float]
    given: list[tuple[int, int, float]]

    def copy(self) -> Serving:
        """One to change, that leaves this one as it is."""
        return Serving(self.need[:], self.left[:], self.given[:])


def untouched(making: Making, items: list[Item]) -> Serving:
    """Nothing given yet."""
    return Serving([item[2] for item in items], [each.lot.volume for each in making.shelf], [])


def serve_what_cannot_be_made(
    making: Making, items: list[Item], serving: Serving, *, whole: bool
) -> None:
    """Needs no batch can meet, each from the lot first past that will do.

    Those a cm³ goes furthest for come first (a stock before it is diluted), then the hardest.
    """
    lost = [place for place, item in enumerate(items) if item[0] < item[1]]
    if lost:
        order = _hardest(making, items, lost)
        order.sort(key=lambda place: -making.dearest_share(items[place]))
        _pour(making, items, serving, order, whole=whole)


def first_past_first(
    making: Making,
    items: list[Item],
    serving: Serving,
    cut: Cut,
    whole: bool,
) -> None:
    """Needs in order of their day, each from the lot first past that will do."""
    order = sorted(range(len(items)), key=lambda place: (items[place][3], place))
    _pour(making, items, serving, order, whole=whole)


def hardest_first(
    making: Making,
    items: list[Item],
    serving: Serving,
    cut: Cut,
    whole: bool,
) -> None:
    """Needs by falling strength, carried back to the first day."""
    _pour(making, items, serving, _hardest(making, items, range(len(items))), whole=whole)


def whole_runs(
    making: Making,
    items: list[Item],
    serving: Serving,
    cut: Cut,
    whole: bool,
) -> None:
    """Batches saved whole first, those that save most for their cm³ before the others."""
    groups, runs = cut
    chances = []
    for number, (start, end, fillings) in enumerate(runs):
        volume = fsum(each[1] for each in fillings)
        vessels = vessels_for(making, volume)
        chances.append((-vessels * making.fix / volume, number, start, end, volume))
        surplus = volume - making.largest * (vessels - 1)
        if vessels > 1 and HAIR < surplus < volume:
            chances.append((-making.fix / surplus, number, start, end, surplus))
    done: set[int] = set()
    for _, number, start, end, volume in sorted(chances):
        if number in done or volume > fsum(serving.left) + HAIR:
            continue
        places = range(groups.ends[start - 1] if start else 0, groups.ends[end - 1])
        trial = serving.copy()
        served = _pour(
            making, items, trial, _hardest(making, items, places), whole=whole, enough=volume
        )
        if served >= volume - HAIR:
            done.add(number)
            serving.need, serving.left, serving.given = trial.need, trial.left, trial.given
    first_past_first(making, items, serving, cut, whole)


def last_first(
    making: Making,
    items: list[Item],
    serving: Serving,
    cut: Cut,
    whole: bool,
) -> None:
    """Needs from the last day back, each from the lot that keeps longest and will do."""
    order = sorted(range(len(items)), key=lambda place: (-items[place][3], -place))
    _pour(making, items, serving, order, whole=whole)


def dearest_left_first(
    making: Making,
    items: list[Item],
    serving: Serving,
    cut: Cut,
    whole: bool,
) -> None:
    """Needs by falling volume, each from the lot that is dearest to throw away and will do."""
    order = sorted(range(len(items)), key=lambda place: (-items[place][2], place))
    shelf = sorted(
        range(len(making.shelf)), key=lambda number: (-making.shelf[number].lot.waste, number)
    )
    _pour(making, items, serving, order, whole=whole, lots=shelf)


Way = Callable[[Making, list[Item], Serving, Cut, bool], None]

WAYS: tuple[Way, ...] = (
    whole_runs,
    first_past_first,
    hardest_first,
    last_first,
    dearest_left_first,
)


def _hardest(making: Making, items: list[Item], places: Iterable[int]) -> list[int]:
    decay = making.shelf[0].lot.decay if making.shelf else 0.0

    def rank(place: int) -> tuple[float, int, int]:
        _, _, _, use, strength, _, _ = items[place]
        return (-strength * exp(decay * use) if decay else -strength, -use, place)

    return sorted(places, key=rank)


def _pour(
    making: Making,
    items: list[Item],
    serving: Serving,
    order: Iterable[int],
    *,
    whole: bool,
    enough: float = float("inf"),
    lots: Iterable[int] | None = None,
) -> float:
    """Pour lots into items in this order; cm³ given. `lots`: their order, else first past first."""
    need, left, shelf = serving.need, serving.left, making.shelf
    row = range(len(left)) if lots is None else lots
    open_lots = [number for number in row if left[number] > HAIR]
    poured = 0.0
    for place in order:
        wanted = need[place]
        if wanted <= HAIR:
            continue
        if not open_lots:
            break
        item = items[place]
        use, strength = item[3], item[4]
        emptied = False
        for number in open_lots:
            there = left[number]
            if (whole and there < wanted - HAIR) or use > shelf[number].last_day_for(strength):
                continue
            amount = wanted if whole else min(there, wanted, enough - poured)
            there -= amount
            left[number] = there if there > HAIR else 0.0
            emptied |= there <= HAIR
            wanted -= amount
            poured += amount
            serving.given.append((number, place, amount))
            if wanted <= HAIR or poured >= enough:
                break
        need[place] = wanted if wanted > HAIR else 0.0
        if poured >= enough:
            break
        if emptied:
            open_lots = [number for number in open_lots if left[number] > HAIR]
    return poured
