"""The planner of batches: how many, how big and on which day, at the least `Cost` it can find.

Sorts are planned one by one, each by an exact programme (`programme.py`), what is made
before what it is made from; then families are bettered move by move (`search.py`). The
same problem gives the same answer, whatever the order of its demands: work is counted,
never timed.
"""

from __future__ import annotations

from dataclasses import replace

from stockroom.lots.answer import written_out
from stockroom.lots.cost import cost_of
from stockroom.lots.families import families
from stockroom.lots.ground import lay_out
from stockroom.lots.house import House
from stockroom.lots.mending import mend
from stockroom.lots.model import Arrangement, Problem
from stockroom.lots.search import Family

EFFORT = 3
"""Units of `effort` where nothing else is said: on terms that were proved, more finds little.

How much one unit is, `SMALL` and `LARGE` say. Our choice.
"""

SMALL, LARGE = 80, 900
"""Work spent on moves for each unit of effort in one family: at least, and in all at most."""


def arrange(problem: Problem, *, effort: int = EFFORT) -> Arrangement:
    """Batches that serve all demands that can be served, at the least cost found.

    `effort` 0 or more: how long to look for better ones after the first passes; 0 not at
    all. What cannot be had is in `short`; the answer has no faults (`check.py`). Cost: near
    linear in demands. `BadInput` where a part comes before what it goes into.

    Source: the programme is that of Wagner and Whitin (Manag. Sci. 5, 1958) with an age limit.
    """
    kept = _arranged(problem, effort)
    if not any(sort.usual for sort in problem.sorts):
        return kept
    # a search may go astray for the sake of the usual days, and work counts before those
    anew = _arranged(_without_usual(problem), effort)
    # both by the same objective, the usual days in it
    saves = cost_of(problem, kept).with_ties - cost_of(problem, anew).with_ties
    return anew if saves > _SAVES else kept


_SAVES = 1e-6
"""Minutes: less is no more than rounding."""


def _without_usual(problem: Problem) -> Problem:
    sorts = tuple(replace(sort, usual=frozenset()) for sort in problem.sorts)
    return replace(problem, sorts=sorts)


def _arranged(problem: Problem, effort: int) -> Arrangement:
    ground = lay_out(problem)
    house = House(ground)
    clans = [Family(house, list(each)) for each in families(problem)]
    for clan in clans:
        clan.first_pass()
    for clan in clans:
        clan.settle()
    ground.settled = True
    if effort > 0:
        weights = [SMALL + sum(2 + len(each.items) for each in clan.makings) for clan in clans]
        unit = effort * min(1.0, LARGE / max(sum(weights), 1))
        for clan, weight in zip(clans, weights, strict=True):
            clan.better(int(unit * weight))
    mend(house, clans)
    return written_out(ground, house.plans)
