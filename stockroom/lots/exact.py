"""The proof: how far an arrangement is from the best there can be, by a solver.

The solver is HiGHS (Huangfu & Hall 2018, Math. Prog. Comp. 10, 119–142: from memory) through
highspy, an optional library; nothing but this file needs it.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, replace
from math import fsum, inf
from typing import TYPE_CHECKING, Any

from stockroom.errors import Refused
from stockroom.lots.check import SLACK, faults
from stockroom.lots.cost import cost_of
from stockroom.lots.exact_columns import DM3, Flow, Programme
from stockroom.lots.exact_covers import at_least
from stockroom.lots.exact_model import programme
from stockroom.lots.families import Family, families, only, part_of, together
from stockroom.lots.model import Arrangement, Batch, Gift, Problem
from stockroom.lots.objective import Cost

if TYPE_CHECKING:
    from types import ModuleType

CLOSED = 1e-6
"""The gap, as a fraction, at which an arrangement counts as proved. Our choice."""


@dataclass(frozen=True, slots=True)
class Proof:
    """The best arrangement found, its cost, and a `bound` no arrangement can be below.

    Both in minutes as `Cost.total` counts them, ties left out. `proved`: they meet.
    """

    arrangement: Arrangement
    cost: Cost
    bound: float
    proved: bool

    @property
    def gap(self) -> float:
        """How much of the cost might still be saved, as a fraction from 0 to 1; 0: nothing."""
        return gap(self.cost.total, self.bound)


def gap(total: float, bound: float) -> float:
    """By what fraction of `total` it may be above the best, when nothing is below `bound`."""
    return max(0.0, (total - bound) / total) if total > 0 else 0.0


def prove(problem: Problem, *, seconds: float, start: Arrangement | None = None) -> Proof:
    """The least `Cost.total` by one mixed-integer programme, or as near as time allows.

    `seconds` is the solver's time for all of it, above 0; what it has by then is the answer.
    `start`, an arrangement without faults, saves the solver looking for a first one, and
    the answer is never dearer. Without a daily limit each family is proved alone and the
    bounds add up; with one that comes first, in half the time, since no limit makes a family
    cheaper, and what it costs with the days to itself is a floor for all of it; so is, under
    `whole`, what it costs when demands may be split. One thread
    and a fixed seed: with time enough the answer is always the same one. `Refused` where the
    solver is not installed.
    """
    highspy = _solver()
    share = seconds if problem.limit is None else seconds / 2
    arrangement, floors, used = _apart(highspy, replace(problem, limit=None), share, start)
    bound = fsum(floors.values())
    if problem.limit is not None:
        arrangement = _cheapest(problem, arrangement, start)
        left = max(seconds - used, 0.0)
        arrangement, bound, _ = _prove(highspy, problem, left, arrangement, floors)
    cost = cost_of(problem, arrangement)
    bound = min(bound, cost.total)
    return Proof(arrangement, cost, bound, gap(cost.total, bound) <= CLOSED)


def _apart(
    highspy: ModuleType, problem: Problem, seconds: float, start: Arrangement | None
) -> tuple[Arrangement, dict[Family, float], float]:
    """The best found with each family alone, the bound of each, and the seconds used."""
    # the large ones last: what the others do not use of their time is theirs
    pieces = sorted(
        families(problem),
        key=lambda piece: (sum(each.sort in piece for each in problem.demands), piece),
    )
    found, bounds, left = [], {}, seconds
    for n, piece in enumerate(pieces):
        first = only(problem, piece, start) if start else None
        part, time = part_of(problem, piece), left / (len(pieces) - n)
        floors, spent = {}, 0.0
        if part.whole:
            # splitting where it is forbidden is soon solved, and nothing is below it
            split, floor, spent = _prove(highspy, replace(part, whole=False), time / 3, None)
            floors = {tuple(range(len(part.sorts))): floor}
            if not faults(part, split):
                first = _cheapest(part, first, split)
        arrangement, bounds[piece], used = _prove(highspy, part, time - spent, first, floors)
        left = max(left - spent - used, 0.0)
        found.append(arrangement)
    return together(problem, pieces, found), bounds, seconds - left


def _cheapest(problem: Problem, *known: Arrangement | None) -> Arrangement:
    """The first of the cheapest."""
    there = [each for each in known if each is not None]
    return min(there, key=lambda each: cost_of(problem, each).total)


def _solver() -> ModuleType:
    try:
        import highspy
    except ImportError:
        raise Refused(
            "The proof needs the solver highspy, which is not installed.",
            'Install it: pip install "stockroom[exact]". The plan itself does not need it.',
        ) from None
    return highspy


def _prove(
    highspy: ModuleType,
    problem: Problem,
    seconds: float,
    start: Arrangement | None,
    floors: Mapping[Family, float] | None = None,
) -> tuple[Arrangement, float, float]:
    """The best arrangement found of one piece, the bound on it, and the seconds used."""
    nothing = Arrangement(short=tuple(demand.volume for demand in problem.demands))
    least = fsum(floors.values()) if floors else 0.0
    if start is not None and floors and gap(cost_of(problem, start).total, least) <= CLOSED:
        return start, least, 0.0
    made = programme(problem)
    for family, floor in (floors or {}).items():
        at_least(made, family, floor)
    if not made.costs:
        return nothing, made.constant, 0.0
    solver = _loaded(highspy, made, seconds)
    if start is not None:
        solution = highspy.HighsSolution()
        solution.col_value = _values(made, start)
        solver.setSolution(solution)
    solver.run()
    info = solver.getInfo()
    # without a whole number to settle it was a linear programme, and has no such bound
    bound = info.mip_dual_bound if any(made.whole) else info.objective_function_value
    answer = None
    if info.primal_solution_status:
        answer = _arrangement(made, list(solver.getSolution().col_value))
    best = _cheapest(problem, start, answer, nothing)
    return best, max(bound, least), float(solver.getRunTime())


def _loaded(highspy: ModuleType, made: Programme, seconds: float) -> Any:
    """The solver with the programme in it, silent, on one thread."""
    lp = highspy.HighsLp()
    lp.num_col_, lp.num_row_ = len(made.costs), len(made.rows)
    lp.offset_ = made.constant
    lp.col_cost_ = made.costs
    lp.col_lower_ = [0.0] * len(made.costs)
    lp.col_upper_ = [highspy.kHighsInf if top == inf else top for top in made.tops]
    kinds = highspy.HighsVarType
    lp.integrality_ = [kinds.kInteger if each else kinds.kContinuous for each in made.whole]
    lp.row_lower_ = [-highspy.kHighsInf if low == -inf else low for low, _, _ in made.rows]
    lp.row_upper_ = [highspy.kHighsInf if high == inf else high for _, _, high in made.rows]
    starts, columns, figures = [0], [], []
    for _, terms, _ in made.rows:
        columns += [column for column, _ in terms]
        figures += [figure for _, figure in terms]
        starts.append(len(columns))
    lp.a_matrix_.format_ = highspy.MatrixFormat.kRowwise
    lp.a_matrix_.num_col_, lp.a_matrix_.num_row_ = lp.num_col_, lp.num_row_
    lp.a_matrix_.start_, lp.a_matrix_.index_, lp.a_matrix_.value_ = starts, columns, figures
    solver = highspy.Highs.__new__(highspy.Highs)
    # its own beginning, without what highspy adds to listen to it: that prints a line
    super(highspy.Highs, solver).__init__()
    for option, value in (
        ("output_flag", False),
        ("threads", 1),
        ("random_seed", 0),
        ("time_limit", seconds),
        ("mip_rel_gap", CLOSED / 2),
        ("mip_abs_gap", 1e-6),
        ("mip_feasibility_tolerance", 1e-9),
        ("primal_feasibility_tolerance", 1e-9),
    ):
        solver.setOptionValue(option, value)
    solver.passModel(lp)
    return solver


def _arrangement(made: Programme, values: list[float]) -> Arrangement:
    """A solver's answer as batches and gifts; trickles under `SLACK` are left out."""
    batches: list[Batch] = []
    numbers: dict[tuple[int, int], int] = {}
    for (sort, day), run in made.runs.items():
        vessels = round(values[run.vessels])
        if vessels > 0:
            numbers[sort, day] = len(batches)
            batches.append(Batch(sort, day, vessels, values[run.volume] * DM3))
    gifts = []
    for flow in made.flows:
        volume = values[flow.column] * flow.scale
        if volume > SLACK / 10 and (flow.demand >= 0 or flow.into in numbers):
            gifts.append(_gift(made.problem, flow, volume, numbers))
    left = [demand.volume for demand in made.problem.demands]
    for gift in gifts:
        if gift.demand >= 0:
            left[gift.demand] -= gift.volume
    short = tuple(each if each > SLACK else 0.0 for each in left)
    return Arrangement(tuple(batches), tuple(gifts), short)


def _gift(problem: Problem, flow: Flow, volume: float, numbers: dict[tuple[int, int], int]) -> Gift:
    if flow.demand >= 0:
        sort = problem.demands[flow.demand].sort
        batch = numbers.get((sort, flow.made), -1) if flow.made >= 0 else -1
        return Gift(volume, batch=batch, lot=flow.lot, demand=flow.demand)
    sort = problem.sorts[flow.into[0]].parts[flow.part].sort
    batch = numbers.get((sort, flow.made), -1) if flow.made >= 0 else -1
    return Gift(volume, batch=batch, lot=flow.lot, into=numbers[flow.into], part=flow.part)


def _values(made: Programme, start: Arrangement) -> list[float]:
    """An arrangement as a solver's first answer, its batches put off to days it knows."""
    problem = made.problem
    values = [0.0] * len(made.costs)
    days: dict[int, list[int]] = {}
    for sort, day in made.runs:
        days.setdefault(sort, []).append(day)
    at = [
        min((day for day in days.get(batch.sort, ()) if day >= batch.day), default=-1)
        for batch in start.batches
    ]
    for batch, day in zip(start.batches, at, strict=True):
        if (batch.sort, day) in made.runs:
            run = made.runs[batch.sort, day]
            values[run.vessels] += batch.vessels
            values[run.volume] += batch.volume / DM3
    columns = {
        (flow.made, flow.lot, flow.demand, flow.into, flow.part): flow for flow in made.flows
    }
    for gift in start.gifts:
        source = (at[gift.batch], -1) if gift.batch >= 0 else (-1, gift.lot)
        into = (start.batches[gift.into].sort, at[gift.into]) if gift.into >= 0 else (-1, -1)
        flow = columns.get((*source, gift.demand, into, gift.part if gift.into >= 0 else 0))
        if flow is not None:
            values[flow.column] += gift.volume / flow.scale
            if flow.column in made.chosen:
                values[made.chosen[flow.column]] = 1.0
    for column, lacking, demand in zip(made.shorts, start.short, problem.demands, strict=False):
        values[column] = lacking / max(demand.volume, 1e-9)
    return values
