"""What a batch needs and nobody can give: the batch is cut down, and its takers with it."""

from __future__ import annotations

from math import fsum

from stockroom.lots.house import House
from stockroom.lots.plans import SortPlan
from stockroom.lots.search import Family

TRIES = 60
"""Rounds of cutting down before a batch that lacks a part is left out altogether. Our choice."""


def mend(house: House, families: list[Family]) -> None:
    """Cut demands down until every batch left has its parts in full; they end up short.

    Only needed where a part can neither be made in time nor taken from a lot that has
    enough: what there is of it goes as far as it will.
    """
    for family in families:
        for attempt in range(2 * TRIES):
            lacking = [
                plan
                for number in family.numbers
                if (plan := house.plans[number]) is not None and plan.unmet
            ]
            if not lacking:
                break
            wholly = house.ground.whole or attempt >= TRIES
            asked = lacking[0]
            for place, volume in asked.unmet:
                _, _, _, day, _, taker, part = asked.items[place]
                share = house.ground.makings[taker].parts[part].share
                _cut_down(house, taker, day, volume / share, wholly=wholly)
            family.first_pass()
            family.settle()


def _cut_down(house: House, number: int, day: int, volume: float, *, wholly: bool) -> None:
    """Take so much off what one batch serves, those used last before the others."""
    plan = house.plans[number]
    if plan is None:
        return
    batch = next((each for each in plan.batches if each[0] == day), None)
    if batch is None:
        return
    # a batch made larger than its need lacks nothing of what is poured away
    served = fsum(each[2] for each in plan.shares if each[1] == day)
    volume = max(volume - (batch[2] - served), min(volume, 1.0))
    volume -= _put_off(house, number, day)
    mine = sorted(
        (each for each in plan.shares if each[1] == day),
        key=lambda each: (-plan.items[each[0]][3], -each[0]),
    )
    mine = [each for each in mine if plan.items[each[0]][5] >= 0 or plan.items[each[0]][0] <= day]
    for place, _, amount in mine:
        if volume <= 1e-9:
            return
        less = amount if wholly else min(amount, volume)
        volume -= less
        _take_off(house, number, plan, place, less, wholly=wholly)


def _put_off(house: House, number: int, day: int) -> float:
    """Leave later days alone to the demands that have them; cm³ that go."""
    plan, making = house.plans[number], house.ground.makings[number]
    house.cuts += 1
    gone = 0.0
    for place, on, amount in plan.shares if plan else ():
        item = plan.items[place] if plan else None
        if item is None or on != day or item[5] >= 0 or item[0] <= day:
            continue
        for at, each in enumerate(making.items):
            if each[6] == item[6]:
                making.items[at] = (each[0], day + 1, *each[2:])
                gone += amount
    return gone


def _take_off(
    house: House, number: int, plan: SortPlan, place: int, less: float, *, wholly: bool
) -> None:
    item = plan.items[place]
    if item[5] >= 0:
        share = house.ground.makings[item[5]].parts[item[6]].share
        _cut_down(house, item[5], item[3], less / share, wholly=wholly)
        return
    making = house.ground.makings[number]
    house.cuts += 1
    for at, each in enumerate(making.items):
        if each[6] == item[6]:
            left = 0.0 if wholly else each[2] - less
            if left <= 1e-6:
                del making.items[at]
            else:
                making.items[at] = (*each[:2], left, *each[3:])
            return
