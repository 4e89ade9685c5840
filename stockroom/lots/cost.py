"""The bill of one arrangement of batches: minutes worked, value wasted, and the rest.

`objective.py` says what each part weighs; here they are counted. Nothing is checked:
`check.py` says whether the arrangement can be carried out at all.
"""

from __future__ import annotations

from math import fsum

from stockroom.lots.model import Arrangement, Batch, Problem
from stockroom.lots.objective import UNUSUAL, Cost


def cost_of(problem: Problem, arrangement: Arrangement) -> Cost:
    """What the arrangement costs, part by part.

    `minutes`: all work of all batches, finishing included, whatever the day. `waste`: in
    minutes, what is made and not used, and what is left in lots, each at its own `waste`.
    `short`: cm³ of the demands that no gift covers (read from the gifts, not from
    `arrangement.short`). `over`: minutes on any day beyond what `busy` leaves of the limit;
    where `busy` alone is over the limit nobody's batch is charged for that. `early`: days
    from each batch's day to its last possible one, the last working day on or before the
    least `last` among all it is given to; 0 for a batch on one of its sort's `usual` days,
    `UNUSUAL` more for one off them where there are any; 0 for one that goes to nothing.
    """
    sorts = problem.sorts
    waste = [sorts[each.sort].waste * each.volume for each in arrangement.batches]
    waste += [lot.waste * lot.volume for lot in problem.lots]
    short = [demand.volume for demand in problem.demands]
    for gift in arrangement.gifts:
        if gift.batch >= 0:
            waste.append(-sorts[arrangement.batches[gift.batch].sort].waste * gift.volume)
        else:
            waste.append(-problem.lots[gift.lot].waste * gift.volume)
        if gift.demand >= 0:
            short[gift.demand] -= gift.volume
    return Cost(
        minutes=fsum(_minutes(problem, each) for each in arrangement.batches),
        waste=_settled(fsum(waste)),
        short=fsum(_settled(each) for each in short),
        over=_over(problem, arrangement.batches),
        early=fsum(_early(problem, arrangement)),
    )


def load_of(problem: Problem, batches: tuple[Batch, ...]) -> list[float]:
    """Minutes of batches on each day of the problem, `busy` left out.

    Finishing counts on its own day; where `finish_on` names none (−1, beyond the days
    looked at) it loads no day.
    """
    load = [0.0] * problem.days
    for each in batches:
        sort = problem.sorts[each.sort]
        load[each.day] += sort.minutes * each.vessels + sort.per_cm3 * each.volume
        done = sort.finish_on[each.day] if sort.finish_on else each.day
        if done >= 0:
            load[done] += sort.finishing * each.vessels
    return load


def _minutes(problem: Problem, batch: Batch) -> float:
    sort = problem.sorts[batch.sort]
    return (sort.minutes + sort.finishing) * batch.vessels + sort.per_cm3 * batch.volume


def _over(problem: Problem, batches: tuple[Batch, ...]) -> float:
    if problem.limit is None:
        return 0.0
    busy = problem.busy or (0.0,) * problem.days
    rooms = (max(problem.limit - each, 0.0) for each in busy)
    return fsum(
        _settled(load - room)
        for load, room in zip(load_of(problem, batches), rooms, strict=True)
        if load > room
    )


def _early(problem: Problem, arrangement: Arrangement) -> list[float]:
    last = [problem.days] * len(arrangement.batches)
    for gift in arrangement.gifts:
        if gift.batch < 0:
            continue
        if gift.demand >= 0:
            limit = problem.demands[gift.demand].last
        else:
            into = arrangement.batches[gift.into]
            limit = problem.sorts[into.sort].parts[gift.part].last[into.day]
        last[gift.batch] = min(last[gift.batch], limit)
    open_by = _last_working(problem)
    early = []
    for batch, day in zip(arrangement.batches, last, strict=True):
        if day < problem.days and batch.day not in problem.sorts[batch.sort].usual:
            left = UNUSUAL if problem.sorts[batch.sort].usual else 0.0
            early.append(left + max(open_by[day] - batch.day, 0))
    return early


def _last_working(problem: Problem) -> list[int]:
    """For each day the last working day up to it; −1 before the first."""
    working = frozenset(problem.working)
    last, found = [], -1
    for day in range(problem.days):
        found = day if day in working else found
        last.append(found)
    return last


def _settled(amount: float) -> float:
    """Rounding errors of sums are no waste and no shortage: under a millionth counts as none."""
    return amount if amount > 1e-6 else 0.0
