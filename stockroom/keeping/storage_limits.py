"""How warm a place was, and what one of its kind is held to: refrigerator, cool place, room.

Source: USP <659>, as restated in exam notes (a secondary source).
"""

from __future__ import annotations

from dataclasses import dataclass, replace
from itertools import pairwise

from stockroom.keeping.temperatures import Summary, TemperatureLog


@dataclass(frozen=True, slots=True)
class StorageLimits:
    """A kind of place by name, and the °C it keeps to; `kinetic` bounds its mean kinetic one."""

    name: str
    lowest: float
    highest: float
    kinetic: float | None = None

    def held_by(self, temperature_c: float) -> bool:
        """True when a place of that °C is of this kind."""
        return self.lowest <= temperature_c <= self.highest


LIMITS = (
    StorageLimits("refrigerator", 2.0, 8.0),
    StorageLimits("cool place", 8.0, 15.0),
    # 20 to 25 °C, and excursions to 15 and to 30 °C allowed
    StorageLimits("controlled room temperature", 15.0, 30.0, 25.0),
)


@dataclass(frozen=True, slots=True)
class Warmth:
    """What is known of how warm a place was; `summary` None when nothing is held.

    `place` is its short name, `title` its long one; `below` and `above` are the hours
    outside `limits`, the kind of place its temperature makes it. `added` and `already` count a
    file's readings and `told` is what was done to the file; empty when only looking.
    `taken` is what was just taken back, in words, and `noted` what was brought in and
    taken back before, a line each.
    """

    place: str
    title: str
    temperature_c: float | None
    summary: Summary | None
    energy: float
    limits: StorageLimits | None = None
    below: float = 0.0
    above: float = 0.0
    added: int | None = None
    already: int | None = None
    told: tuple[str, ...] = ()
    taken: str = ""
    noted: tuple[str, ...] = ()
    practice: bool = False


def with_record(bare: Warmth, log: TemperatureLog) -> Warmth:
    """The same place with what its record comes to."""
    limits = limits_for(bare.temperature_c)
    below, above = minutes_outside(log, limits) if limits else (0.0, 0.0)
    return replace(
        bare,
        summary=log.summary(ea_kj_mol=bare.energy),
        limits=limits,
        below=below / 60,
        above=above / 60,
    )


def limits_for(temperature_c: float | None) -> StorageLimits | None:
    """The limits of the kind of place a temperature makes; None for a freezer, an oven, unknown."""
    if temperature_c is None:
        return None
    return next((limits for limits in LIMITS if limits.held_by(temperature_c)), None)


def minutes_outside(log: TemperatureLog, limits: StorageLimits) -> tuple[float, float]:
    """Minutes a record stood below and above the limits, straight from reading to reading."""
    below = above = 0.0
    for (start, end), (one, two) in zip(pairwise(log.minutes), pairwise(log.celsius), strict=True):
        span = log.told_minutes(start, end)
        below += span * _part_over(-one, -two, -limits.lowest)
        above += span * _part_over(one, two, limits.highest)
    return below, above


def _part_over(one: float, two: float, limit: float) -> float:
    """The part of a straight run from one value to another that lies over a limit."""
    low, high = min(one, two), max(one, two)
    if high <= limit:
        return 0.0
    return 1.0 if low >= limit else (high - limit) / (high - low)
