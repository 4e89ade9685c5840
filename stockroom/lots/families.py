"""A stock and everything made from it: the pieces a problem falls into, and together again.

Without a daily limit the pieces have nothing to do with each other, and the best of each
together are the best of all. With a limit they share the days' minutes: then the best of a
piece is only the best it could do with the days to itself.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace

from stockroom.lots.model import Arrangement, Batch, Gift, Problem

Family = tuple[int, ...]
"""Places of sorts in the problem's row, rising."""


def families(problem: Problem) -> list[Family]:
    """The sorts, put together where one goes into the other; by their first sort."""
    head = list(range(len(problem.sorts)))

    def first(sort: int) -> int:
        while head[sort] != sort:
            head[sort] = sort = head[head[sort]]
        return sort

    for number, sort in enumerate(problem.sorts):
        for part in sort.parts:
            a, b = first(number), first(part.sort)
            head[max(a, b)] = min(a, b)
    members: dict[int, list[int]] = {}
    for number in range(len(problem.sorts)):
        members.setdefault(first(number), []).append(number)
    return [tuple(each) for each in members.values()]


def part_of(problem: Problem, family: Family) -> Problem:
    """The problem of some sorts alone: their demands and lots, the same days and limit.

    The family must hold the parts of its sorts; `together` finds the way back.
    """
    place = {sort: n for n, sort in enumerate(family)}
    sorts = (problem.sorts[each] for each in family)
    return replace(
        problem,
        sorts=tuple(
            replace(sort, parts=tuple(replace(part, sort=place[part.sort]) for part in sort.parts))
            for sort in sorts
        ),
        demands=tuple(
            replace(each, sort=place[each.sort]) for each in problem.demands if each.sort in place
        ),
        lots=tuple(
            replace(each, sort=place[each.sort]) for each in problem.lots if each.sort in place
        ),
    )


def together(
    problem: Problem, pieces: Sequence[Family], arrangements: Sequence[Arrangement]
) -> Arrangement:
    """One arrangement of the whole from one for each piece, in the pieces' order."""
    batches: list[Batch] = []
    gifts: list[Gift] = []
    short = [0.0] * len(problem.demands)
    for piece, arrangement in zip(pieces, arrangements, strict=True):
        members = frozenset(piece)
        demands = [n for n, each in enumerate(problem.demands) if each.sort in members]
        lots = [n for n, each in enumerate(problem.lots) if each.sort in members]
        before = len(batches)
        batches += [replace(each, sort=piece[each.sort]) for each in arrangement.batches]
        gifts += [
            replace(
                gift,
                batch=gift.batch + before if gift.batch >= 0 else -1,
                lot=lots[gift.lot] if gift.lot >= 0 else -1,
                demand=demands[gift.demand] if gift.demand >= 0 else -1,
                into=gift.into + before if gift.into >= 0 else -1,
            )
            for gift in arrangement.gifts
        ]
        for n, lacking in zip(demands, arrangement.short, strict=False):
            short[n] = lacking
    return Arrangement(tuple(batches), tuple(gifts), tuple(short))


def only(problem: Problem, family: Family, arrangement: Arrangement) -> Arrangement:
    """What an arrangement of the whole says about one family: the other way round."""
    place = {sort: n for n, sort in enumerate(family)}
    demands = _places([each.sort in place for each in problem.demands])
    lots = _places([each.sort in place for each in problem.lots])
    batches = _places([each.sort in place for each in arrangement.batches])
    return Arrangement(
        tuple(
            replace(each, sort=place[each.sort])
            for each in arrangement.batches
            if each.sort in place
        ),
        tuple(
            replace(
                gift,
                batch=batches.get(gift.batch, -1),
                lot=lots.get(gift.lot, -1),
                demand=demands.get(gift.demand, -1),
                into=batches.get(gift.into, -1),
            )
            for gift in arrangement.gifts
            if gift.demand in demands or gift.into in batches
        ),
        tuple(each for n, each in enumerate(arrangement.short) if n in demands),
    )


def _places(chosen: list[bool]) -> dict[int, int]:
    """Old number -> new number of the rows chosen."""
    return {old: new for new, old in enumerate(n for n, is_one in enumerate(chosen) if is_one)}
