"""Needs of one sort put together by their last day, and what a batch for them comes to."""

from __future__ import annotations

from math import ceil

from stockroom.lots.ground import Item, Making

HAIR = 1e-9
"""cm³ and minutes below which a difference is a rounding error. Our choice."""


class Groups:
    """Needs with the same last day are one group: they can only gain by one batch."""

    __slots__ = ("ends", "first", "last", "volume")

    def __init__(self, items: list[Item], need: list[float]) -> None:
        """Take items in order of their last day; what lots have served (need 0) is left out."""
        last, first, volume, ends = [], [], [], []
        day = -1
        for place, wanted in enumerate(need):
            if wanted <= HAIR:
                continue
            item = items[place]
            if item[0] != day:
                day = item[0]
                last.append(day)
                first.append(item[1])
                volume.append(wanted)
                ends.append(place + 1)
            else:
                if item[1] > first[-1]:
                    first[-1] = item[1]
                volume[-1] += wanted
                ends[-1] = place + 1
        self.last: list[int] = last
        self.first: list[int] = first
        self.volume: list[float] = volume
        self.ends: list[int] = ends


def vessels_for(making: Making, volume: float) -> int:
    """The fewest vessels that hold the volume; at least one."""
    if volume <= making.largest:
        return 1
    return ceil(volume / making.largest - HAIR)


def amount_made(making: Making, volume: float) -> tuple[int, float]:
    """Vessels and cm³ of a batch of which `volume` is needed: no less than a vessel may hold.

    Rounded up to whole steps, but never to more than the vessels hold.
    """
    vessels = vessels_for(making, volume)
    made = max(volume, making.smallest * vessels)
    if making.step > 0.0:
        rounded = ceil(made / making.step - HAIR) * making.step
        made = max(made, min(rounded, making.largest * vessels))
    return vessels, made
