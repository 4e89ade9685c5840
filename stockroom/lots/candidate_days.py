"""The days on which the best arrangement may start its batches: the fewer, the sooner proved."""

from __future__ import annotations

from itertools import pairwise
from math import exp, inf

from stockroom.lots.model import Days, Lot, Part, Problem, Sort

_CLOSE = 1e-9


def candidate_days(problem: Problem) -> list[tuple[int, ...]]:
    """For each sort the days worth looking at, rising; at least one best arrangement keeps to them.

    A day is useful when a batch of it can go somewhere and can have its parts. Without a
    daily limit a batch may be put off until something stops it: the last day of a demand or
    of a batch it goes into, the last good day of a lot, or the last day a batch of a part
    will do. Take the closure over those events and put each batch off to the next such day:
    the same batches still fit, as long as windows of parts do not move back from one day to
    the next; where they do, with a limit, and where two batches put off to the same day
    could not be one (their parts under `whole`, steps that full vessels are no number of),
    every useful day is kept.
    """
    useful = _useful(problem)
    if problem.limit is None and _windows_advance(problem) and not _mixing_counts(problem):
        days = _closure(problem, useful)
    else:
        days = useful
    return [tuple(sorted(each)) for each in _with_parts(problem, days)]


def good_on(lot: Lot, day: int, strength: float) -> bool:
    """Whether a lot may be used on a day where so much strength is asked for."""
    return day <= lot.until and lot.strength * exp(-lot.decay * day) >= strength - _CLOSE


def within(days: tuple[int, ...] | set[int], first: int, last: int) -> list[int]:
    """The days of a row from `first` to `last`, rising; none where `first` is −1."""
    return sorted(day for day in days if first <= day <= last) if first >= 0 else []


def _useful(problem: Problem) -> list[set[int]]:
    """Working days on which a batch could go to a demand, or into a batch that could."""
    days: list[set[int]] = [set() for _ in problem.sorts]
    for demand in problem.demands:
        days[demand.sort].update(within(problem.working, max(demand.first, 0), demand.last))
    for number, sort in enumerate(problem.sorts):
        for part in sort.parts:
            for day in days[number]:
                days[part.sort].update(within(problem.working, part.first[day], part.last[day]))
    return days


def _with_parts(problem: Problem, days: list[set[int]]) -> list[set[int]]:
    """The days on which every part of a batch can be had; parts come later in the row."""
    kept: list[set[int]] = [set() for _ in days]
    for number in reversed(range(len(days))):
        parts = problem.sorts[number].parts
        kept[number] = {
            day
            for day in days[number]
            if all(
                within(kept[part.sort], part.first[day], part.last[day])
                or any(
                    lot.sort == part.sort and good_on(lot, day, part.strength)
                    for lot in problem.lots
                )
                for part in parts
            )
        }
    return kept


def _closure(problem: Problem, useful: list[set[int]]) -> list[set[int]]:
    days: list[set[int]] = [set() for _ in problem.sorts]
    for demand in problem.demands:
        days[demand.sort].update(
            within(useful[demand.sort], max(demand.first, 0), demand.last)[-1:]
        )
    while True:
        before = sum(map(len, days))
        for number, sort in enumerate(problem.sorts):
            for part in sort.parts:
                _stop_parts(part, days[number], useful[part.sort], days[part.sort])
                _stop_takers(problem, part, days[part.sort], useful[number], days[number])
        if sum(map(len, days)) == before:
            return days


def _stop_parts(part: Part, takers: set[int], useful: set[int], days: set[int]) -> None:
    """A batch of a part can be put off to the last day that will do for each of its takers."""
    for taker in takers:
        days.update(within(useful, part.first[taker], part.last[taker])[-1:])


def _stop_takers(
    problem: Problem, part: Part, parts: set[int], useful: set[int], days: set[int]
) -> None:
    """A taker can be put off to the last day a lot or a batch of its part will do."""
    lots = [lot for lot in problem.lots if lot.sort == part.sort]
    ends = [[day for day in useful if good_on(lot, day, part.strength)] for lot in lots]
    ends += [[day for day in useful if part.first[day] <= made <= part.last[day]] for made in parts]
    days.update(max(each) for each in ends if each)


def _windows_advance(problem: Problem) -> bool:
    def rises(row: Days) -> bool:
        picked = [row[day] for day in problem.working]
        return all(a <= b for a, b in pairwise(picked))

    return all(rises(part.first) and rises(part.last) for s in problem.sorts for part in s.parts)


def _mixing_counts(problem: Problem) -> bool:
    """Whether two batches on one day may be worse than on two: their parts or their steps."""
    return any(
        (problem.whole and sort.parts) or (sort.step and not fits(sort)) for sort in problem.sorts
    )


def fits(sort: Sort) -> bool:
    """Whether full vessels of a sort are whole steps."""
    over = sort.largest % sort.step if sort.step and sort.largest < inf else 0.0
    return min(over, sort.step - over) < _CLOSE
