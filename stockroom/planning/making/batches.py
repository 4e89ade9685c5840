"""Step 3: gather what is to be made into batches, and give each its day.

For one line, the things to be served are taken in order of their latest day
and cut into runs; each run is one batch, made on the latest day that still
serves its first. Minutes come first, then what is thrown away, then lateness:
that sum is the least possible over all ways to cut the row (a shelf-life-limited
lot-sizing programme; Wagner and Whitin 1958 for the idea).
"""

from __future__ import annotations

from collections.abc import Callable, Iterator, Sequence
from dataclasses import dataclass
from datetime import date

from stockroom.planning.numbers import Natural
from stockroom.planning.timing import Moment
from stockroom.planning.wants import Want

Cost = tuple[int, int, int]
"""Hands-on minutes, µL thrown away, and minus the sum of the days chosen."""


@dataclass(slots=True)
class Item:
    """One thing a batch serves: exact µL, for `wants`, used on a day, made within a window."""

    wants: list[Want]
    volume: int
    use_on: date
    deadline: Moment
    earliest: date
    latest: date
    fresh: bool = False

    @property
    def order(self) -> tuple[date, date, Natural, int]:
        """Latest day first; ties by the day of use, then the need's own number."""
        first = min(want.need.rank for want in self.wants)
        return self.latest, self.use_on, first[3], first[4]


@dataclass(frozen=True, slots=True)
class Run:
    """Consecutive items served by one batch, and the day it is made."""

    items: tuple[Item, ...]
    on: date

    @property
    def needed(self) -> int:
        """The exact volume its items ask for, µL."""
        return sum(item.volume for item in self.items)


def cut(
    items: Sequence[Item],
    *,
    most: int | None,
    cost_of: Callable[[Run], tuple[int, int]],
) -> list[Run]:
    """The cheapest way to cut items into runs. `most`: the largest batch in µL, or None.

    `cost_of` gives a run's minutes and waste. A single item may exceed `most`
    (it is then made in several vessels); two together may not. O(n²) in items,
    stopping at the first run that cannot be.
    """
    # by latest day, since the first due sets the day of whatever shares its batch
    row = sorted(items, key=lambda item: item.order)
    best: list[tuple[Cost, int]] = [((0, 0, 0), 0)]
    for end in range(1, len(row) + 1):
        choices = [
            (_plus(best[end - len(run.items)][0], run, cost_of(run)), end - len(run.items))
            for run in _runs_ending(row, end, most)
        ]
        # compared as a row of figures: no rate of exchange between minutes and waste is known
        best.append(min(choices))
    return _cuts(row, best, most)


def _runs_ending(row: list[Item], end: int, most: int | None) -> Iterator[Run]:
    """The runs whose last item is row[end − 1], shortest first, until one cannot be."""
    for start in range(end - 1, -1, -1):
        run = _run(row[start:end], most)
        if run is None:
            # a longer run starts no later, is due no later and holds more: none can be either
            return
        yield run


def _plus(so_far: Cost, run: Run, cost: tuple[int, int]) -> Cost:
    # the day counts backwards, so that the least cost is the latest make, the freshest
    return so_far[0] + cost[0], so_far[1] + cost[1], so_far[2] - run.on.toordinal()


def _cuts(row: list[Item], best: list[tuple[Cost, int]], most: int | None) -> list[Run]:
    runs, end = [], len(row)
    while end:
        start = best[end][1]
        run = _run(row[start:end], most)
        assert run is not None
        runs.append(run)
        end = start
    return runs[::-1]


def _run(items: list[Item], most: int | None) -> Run | None:
    day = min(item.latest for item in items)
    if len(items) > 1:
        if max(item.earliest for item in items) > day:
            return None
        if most is not None and sum(item.volume for item in items) > most:
            return None
    return Run(tuple(items), day)
