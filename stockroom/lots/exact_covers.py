"""Rows that every answer in whole numbers keeps anyway, said so that halves of batches do not.

A solver first lets a tenth of a batch feed all that a tenth of it could. Between levels that
hides most of the cost: these rows say that what reaches a demand takes a batch at each level.
"""

from __future__ import annotations

from collections import defaultdict
from math import inf

from stockroom.lots.candidate_days import within
from stockroom.lots.exact_columns import DM3, Flow, Programme, Run
from stockroom.lots.families import Family
from stockroom.lots.model import Part

Terms = list[tuple[int, float]]


def covers(made: Programme) -> None:
    """No batch without a batch of each of its parts, but for what lots give."""
    given: defaultdict[tuple[int, int], list[Flow]] = defaultdict(list)
    for flow in made.flows:
        if flow.demand >= 0 and flow.made >= 0:
            given[made.problem.demands[flow.demand].sort, flow.made].append(flow)
    lots = _lots(made)
    for taker in list(made.runs.values()):
        for n, part in enumerate(made.problem.sorts[taker.sort].parts):
            if part.share > 0:
                _cover(made, taker, part, lots[taker.sort, taker.day, n], given)


def _cover(
    made: Programme,
    taker: Run,
    part: Part,
    lots: list[int],
    given: dict[tuple[int, int], list[Flow]],
) -> None:
    batches = _vessels(made, part.sort, _reach(made, part, {taker.day}))
    smallest = made.problem.sorts[taker.sort].smallest
    if taker.most_vessels == 1 and (smallest or not lots):
        supply = [(column, DM3 / (part.share * smallest)) for column in lots]
        made.row(0.0, [*batches, *supply, (taker.vessels, -1.0)], inf)
        return
    for flow in given.get((taker.sort, taker.day), ()):
        supply = [(column, DM3 / (part.share * flow.scale)) for column in lots]
        made.row(0.0, [*batches, *supply, (flow.column, -1.0)], inf)


def chains(made: Programme) -> None:
    """What a demand gets from batches takes a batch of each part, and of the parts of those.

    On any of the days that could reach it, taken together; lots count by the share of the
    demand they could feed.
    """
    given: defaultdict[int, list[Flow]] = defaultdict(list)
    for flow in made.flows:
        if flow.demand >= 0 and flow.made >= 0:
            given[flow.demand].append(flow)
    lots = _lots(made)
    for demand, flows in given.items():
        got = [(flow.column, -1.0) for flow in flows]
        days = {flow.made for flow in flows}
        _chain(made, made.problem.demands[demand].sort, days, flows[0].scale, got, lots)


def at_least(made: Programme, family: Family, floor: float) -> None:
    """No less for a family than it costs with the days to itself, minutes over left out."""
    problem = made.problem
    columns: list[int] = []
    for run in made.runs.values():
        if run.sort in family:
            columns += [run.vessels, run.volume]
    for flow in made.flows:
        sort = flow.into[0] if flow.demand < 0 else problem.demands[flow.demand].sort
        if sort in family:
            columns.append(flow.column)
    for column, demand in zip(made.shorts, problem.demands, strict=True):
        if demand.sort in family:
            columns.append(column)
    lots = sum(lot.waste * lot.volume for lot in problem.lots if lot.sort in family)
    terms = [(column, made.costs[column]) for column in columns if made.costs[column]]
    if terms:
        # a hair below, lest rounding shuts the best out
        made.row(floor - lots - 1e-6 * max(1.0, abs(floor)), terms, inf)


def _chain(
    made: Programme,
    sort: int,
    days: set[int],
    volume: float,
    terms: Terms,
    lots: dict[tuple[int, int, int], list[int]],
) -> None:
    """`volume` cm³ of a sort, made on one of the days, and the parts that takes."""
    for n, part in enumerate(made.problem.sorts[sort].parts):
        taken = part.share * volume
        if taken <= 0:
            continue
        supply = [(column, DM3 / taken) for day in sorted(days) for column in lots[sort, day, n]]
        reach = _reach(made, part, days)
        made.row(0.0, [*_vessels(made, part.sort, reach), *supply, *terms], inf)
        _chain(made, part.sort, reach, taken, [*supply, *terms], lots)


def _reach(made: Programme, part: Part, days: set[int]) -> set[int]:
    """Days of batches of a part that will do for a batch on one of the days."""
    known = {day for sort, day in made.runs if sort == part.sort}
    return {each for day in days for each in within(known, part.first[day], part.last[day])}


def _vessels(made: Programme, sort: int, days: set[int]) -> Terms:
    return [(made.runs[sort, day].vessels, 1.0) for day in sorted(days)]


def _lots(made: Programme) -> defaultdict[tuple[int, int, int], list[int]]:
    """Columns of what lots give to each part of a batch: by sort, day and part."""
    found: defaultdict[tuple[int, int, int], list[int]] = defaultdict(list)
    for flow in made.flows:
        if flow.lot >= 0 and flow.demand < 0:
            found[(*flow.into, flow.part)].append(flow.column)
    return found
