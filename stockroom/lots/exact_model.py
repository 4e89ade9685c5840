"""The whole problem as one mixed-integer programme, before any solver: what it says.

`exact_columns.py` has the columns, `exact_covers.py` the rows that only make it tighter.
"""

from __future__ import annotations

from math import ceil, inf

from stockroom.lots.candidate_days import candidate_days, fits, good_on, within
from stockroom.lots.exact_columns import DM3, Flow, Programme, Run
from stockroom.lots.exact_covers import chains, covers
from stockroom.lots.model import Problem, Sort
from stockroom.lots.objective import OVER, SHORT


def programme(problem: Problem) -> Programme:
    """The programme of reference: least minutes, waste, shortage and minutes over the limit.

    Ties are left out (`objective.EARLY`): what is proved is `Cost.total`. A day on which a
    sort can have no parts has no batch. Links between what is given and whether there is a
    batch are as tight as the least of the two volumes; the covers say once more that a
    batch needs its parts, which closes most of the gap the links leave between levels.
    """
    made = Programme(problem)
    days = candidate_days(problem)
    _batches(made, days, _most(problem, days))
    _demands(made)
    _parts(made, days)
    covers(made)
    chains(made)
    _givers(made)
    _limit(made)
    return made


def _most(problem: Problem, days: list[tuple[int, ...]]) -> dict[tuple[int, int], float]:
    """cm³ that could ever be drawn from a batch of a sort on a day.

    A solver takes a batch of next to no vessels for none at all, so its volume must have a
    top that is no larger than it can be worth.
    """
    most = {(number, day): 0.0 for number, row in enumerate(days) for day in row}
    for demand in problem.demands:
        for day in within(days[demand.sort], max(demand.first, 0), demand.last):
            most[demand.sort, day] += demand.volume
    # parts come later in the row, so what a batch takes is known before the batch it takes from
    for number, sort in enumerate(problem.sorts):
        for day in days[number]:
            vessels = max(1, ceil(most[number, day] / sort.largest - 1e-9))
            most[number, day] = max(most[number, day], sort.smallest * vessels)
            if sort.step:
                stepped = ceil(most[number, day] / sort.step - 1e-9) * sort.step
                most[number, day] = max(most[number, day], min(stepped, sort.largest * vessels))
            for part in sort.parts:
                for earlier in within(days[part.sort], part.first[day], part.last[day]):
                    most[part.sort, earlier] += part.share * most[number, day]
    return most


def _batches(
    made: Programme, days: list[tuple[int, ...]], most: dict[tuple[int, int], float]
) -> None:
    for number, sort in enumerate(made.problem.sorts):
        for day in days[number]:
            top = most[number, day]
            vessels = max(1, ceil(top / sort.largest - 1e-9))
            y = made.column(sort.minutes + sort.finishing, vessels, whole=True)
            x = made.column((sort.per_cm3 + sort.waste) * DM3, top / DM3)
            made.runs[number, day] = Run(number, day, y, x, top, vessels)
            per_vessel = min(sort.largest, top) / DM3
            made.row(-inf, [(x, 1.0), (y, -per_vessel)], 0.0)
            if sort.smallest:
                made.row(0.0, [(x, 1.0), (y, -sort.smallest / DM3)], inf)
            if sort.step:
                _steps(made, sort, made.runs[number, day])


def _steps(made: Programme, sort: Sort, run: Run) -> None:
    """A batch is whole steps, or all its vessels hold where that is no whole step."""
    step = sort.step / DM3
    count = made.column(0.0, ceil(run.most / sort.step), whole=True)
    if fits(sort):
        made.row(0.0, [(run.volume, 1.0), (count, -step)], 0.0)
        return
    full, rest = made.column(0.0, 1.0, whole=True), made.column(0.0, step)
    made.row(0.0, [(run.volume, 1.0), (count, -step), (rest, -1.0)], 0.0)
    made.row(-inf, [(rest, 1.0), (full, -step)], 0.0)
    all_of_it = sort.largest / DM3
    most = all_of_it * run.most_vessels
    made.row(-most, [(run.volume, 1.0), (run.vessels, -all_of_it), (full, -most)], inf)


def _demands(made: Programme) -> None:
    problem = made.problem
    for number, demand in enumerate(problem.demands):
        volume = max(demand.volume, 1e-9)  # nothing wanted: anything will do, and costs nothing
        short = made.column(SHORT * volume, 1.0)
        made.shorts.append(short)
        terms = [(short, 1.0)]
        waste = problem.sorts[demand.sort].waste
        for (sort, day), run in made.runs.items():
            if sort == demand.sort and demand.first <= day <= demand.last:
                share = made.column(-waste * volume, 1.0, whole=problem.whole)
                made.flows.append(Flow(share, volume, day, -1, demand=number))
                terms.append((share, 1.0))
                made.row(
                    -inf, [(share, 1.0), (run.vessels, -min(1.0, _room(made, run, volume)))], 0
                )
        for n, lot in enumerate(problem.lots):
            if lot.sort == demand.sort and good_on(lot, demand.use, demand.strength):
                top = 1.0 if problem.whole else min(1.0, lot.volume / volume)
                share = made.column(-lot.waste * volume, top, whole=problem.whole)
                made.flows.append(Flow(share, volume, -1, n, demand=number))
                terms.append((share, 1.0))
        made.row(1.0, terms, 1.0)


def _room(made: Programme, run: Run, volume: float) -> float:
    """What one vessel can give to a demand, as a share of it; all of it when shares are whole."""
    return 1.0 if made.problem.whole else made.problem.sorts[run.sort].largest / volume


def _parts(made: Programme, days: list[tuple[int, ...]]) -> None:
    problem = made.problem
    for taker in list(made.runs.values()):
        for n, part in enumerate(problem.sorts[taker.sort].parts):
            top = part.share * taker.most
            batches = [
                made.runs[part.sort, day]
                for day in within(days[part.sort], part.first[taker.day], part.last[taker.day])
            ]
            lots = [
                number
                for number, lot in enumerate(problem.lots)
                if lot.sort == part.sort and good_on(lot, taker.day, part.strength)
            ]
            flows = _part_flows(made, taker, n, top, batches, lots)
            terms = [(flow.column, 1.0) for flow in flows]
            made.row(0.0, [*terms, (taker.volume, -part.share)], 0.0)


def _part_flows(
    made: Programme, taker: Run, part: int, top: float, batches: list[Run], lots: list[int]
) -> list[Flow]:
    """What may go into one part of one batch, with the links to what it comes from."""
    problem = made.problem
    sort = problem.sorts[taker.sort].parts[part].sort
    flows, chosen = [], []
    for run in batches:
        most = min(top, run.most)
        column = made.column(-problem.sorts[sort].waste * DM3, most / DM3)
        room = min(most, problem.sorts[sort].largest * run.most_vessels)
        per_vessel = room if problem.whole else min(room, problem.sorts[sort].largest)
        made.row(-inf, [(column, 1.0), (run.vessels, -per_vessel / DM3)], 0.0)
        flows.append(Flow(column, DM3, run.day, -1, into=(taker.sort, taker.day), part=part))
    for lot in lots:
        most = min(top, problem.lots[lot].volume)
        column = made.column(-problem.lots[lot].waste * DM3, most / DM3)
        flows.append(Flow(column, DM3, -1, lot, into=(taker.sort, taker.day), part=part))
    if problem.whole and len(flows) > 1:
        for flow in flows:
            one = made.chosen[flow.column] = made.column(0.0, 1.0, whole=True)
            made.row(-inf, [(flow.column, 1.0), (one, -made.tops[flow.column])], 0.0)
            chosen.append((one, 1.0))
        made.row(-inf, chosen, 1.0)
    made.flows += flows
    return flows


def _givers(made: Programme) -> None:
    """Nothing is given twice: of a batch no more than is made, of a lot no more than is there."""
    problem = made.problem
    taken: dict[tuple[int, int], list[tuple[int, float]]] = {}
    for flow in made.flows:
        if flow.demand >= 0:
            sort = problem.demands[flow.demand].sort
        else:
            sort = problem.sorts[flow.into[0]].parts[flow.part].sort
        giver = (-1, flow.lot) if flow.lot >= 0 else (sort, flow.made)
        taken.setdefault(giver, []).append((flow.column, flow.scale / DM3))
    for (sort, number), terms in taken.items():
        if sort < 0:
            made.row(-inf, terms, problem.lots[number].volume / DM3)
        else:
            made.row(-inf, [*terms, (made.runs[sort, number].volume, -1.0)], 0.0)
    made.constant += sum(lot.waste * lot.volume for lot in problem.lots)


def _limit(made: Programme) -> None:
    problem = made.problem
    if problem.limit is None:
        return
    loads: dict[int, list[tuple[int, float]]] = {}
    for run in made.runs.values():
        sort = problem.sorts[run.sort]
        terms = [(run.vessels, sort.minutes), (run.volume, sort.per_cm3 * DM3)]
        loads.setdefault(run.day, []).extend(terms)
        done = sort.finish_on[run.day] if sort.finish_on else run.day
        if sort.finishing and done >= 0:
            loads.setdefault(done, []).append((run.vessels, sort.finishing))
    for day, terms in loads.items():
        busy = problem.busy[day] if problem.busy else 0.0
        room = max(problem.limit - busy, 0.0)
        made.row(-inf, [*_summed(terms), (made.column(OVER), -1.0)], room)


def _summed(terms: list[tuple[int, float]]) -> list[tuple[int, float]]:
    """Each column once: a solver takes no column twice in a row."""
    total: dict[int, float] = {}
    for column, figure in terms:
        total[column] = total.get(column, 0.0) + figure
    return list(total.items())
