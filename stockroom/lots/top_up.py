"""Vessels that need not be filled, because others have room for what they would hold."""

from __future__ import annotations

from math import fsum

from stockroom.lots.ground import Item, Making
from stockroom.lots.groups import HAIR, vessels_for

Share = tuple[int, int, float]
"""Item's place, day of the batch it is served from, cm³."""


def save_vessels(
    making: Making, items: list[Item], shares: list[Share], *, whole: bool
) -> list[Share]:
    """Move what one vessel holds into room that others have, the least first, while it can be."""
    largest = making.largest
    volumes: dict[int, float] = {}
    for _, day, volume in shares:
        volumes[day] = volumes.get(day, 0.0) + volume
    if len(volumes) < 2:
        return shares
    rooms = {day: vessels_for(making, each) * largest - each for day, each in volumes.items()}
    tried: set[int] = set()
    while True:
        chances = [
            (largest - room, day)
            for day, room in rooms.items()
            if day not in tried and largest - room <= fsum(rooms.values()) - room + HAIR
        ]
        if not chances:
            return shares
        excess, day = min(chances)
        tried.add(day)
        moved = _moved(items, shares, rooms, day, excess, whole=whole)
        if moved is not None:
            shares, rooms = moved
            if not any(each[1] == day for each in shares):
                del rooms[day]


def _moved(
    items: list[Item],
    shares: list[Share],
    rooms: dict[int, float],
    day: int,
    excess: float,
    *,
    whole: bool,
) -> tuple[list[Share], dict[int, float]] | None:
    """`excess` cm³ taken from the batch of `day` to others; None: it cannot all go."""
    left = dict(rooms)
    moved: list[Share] = []
    given: dict[int, float] = {}
    days = sorted(other for other in rooms if other != day)
    mine = [each for each in shares if each[1] == day]
    for place, _, volume in sorted(mine, key=lambda each: (-each[2], each[0])):
        last, first = items[place][0], items[place][1]
        for other in days:
            wanted = min(volume - given.get(place, 0.0), excess)
            if whole:
                wanted = volume if place not in given else 0.0
            if wanted <= HAIR or excess <= HAIR:
                break
            if not first <= other <= last:
                continue
            amount = min(wanted, left[other])
            if amount <= HAIR or (whole and amount < volume - HAIR):
                continue
            left[other] -= amount
            excess -= amount
            given[place] = given.get(place, 0.0) + amount
            moved.append((place, other, amount))
    if excess > HAIR:
        return None
    # what has gone is room in the vessels that stay, and none in the one that is saved
    left[day] = max(-excess, 0.0)
    return _put_together(shares, moved, given, day), left


def _put_together(
    shares: list[Share], moved: list[Share], given: dict[int, float], day: int
) -> list[Share]:
    total: dict[tuple[int, int], float] = {}
    for place, on, volume in [*shares, *moved]:
        total[place, on] = total.get((place, on), 0.0) + volume
    for place, volume in given.items():
        total[place, day] -= volume
    return [(place, on, volume) for (place, on), volume in sorted(total.items()) if volume > HAIR]
