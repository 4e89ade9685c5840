"""Lot sizes other people published, and what a life does to them.

Marks as everywhere: seen = read in the named public source; memory = from memory, so only
where our own two ways agree with it; ours = computed here, by the runs and by the solver.
"""

from __future__ import annotations

import random
from itertools import product

import pytest

from stockroom.errors import BadAmount
from stockroom.lots.exact import prove
from stockroom.lots.model import Demand, Problem, Sort
from stockroom.lots.runs import cheapest_runs

# Wagner & Whitin 1958, Management Science 5, 89-96: data as reprinted in several public code
# files and an article that cite the paper (seen)
WAGNER_WHITIN = [69, 29, 36, 61, 61, 26, 34, 67, 45, 67, 79, 56]
SET_UPS = [85, 102, 102, 101, 98, 114, 105, 86, 119, 110, 98, 114]
# a year after Silver & Peterson's textbook (data seen in two public sources)
YEAR = [10, 62, 12, 130, 154, 129, 88, 52, 124, 160, 238, 41]


def test_wagner_and_whitin_s_twelve_periods_cost_864() -> None:
    cost, makes = cheapest_runs(WAGNER_WHITIN, SET_UPS, 1)  # 864: seen
    assert cost == 864
    assert makes == [98, 0, 97, 0, 121, 0, 0, 112, 0, 67, 135, 0]  # ours; month 10 alone: seen


def test_each_shorter_horizon_costs_what_the_table_of_the_paper_has() -> None:
    costs = [cheapest_runs(WAGNER_WHITIN[:n], SET_UPS[:n], 1)[0] for n in range(1, 13)]
    # ours; agrees with the paper's table (memory)
    assert costs == [85, 114, 186, 277, 348, 400, 469, 555, 600, 710, 789, 864]


def test_making_each_month_s_need_alone_costs_1234() -> None:
    assert cheapest_runs(WAGNER_WHITIN, SET_UPS, 1, life=0) == (1234, WAGNER_WHITIN)  # seen


def test_a_life_of_one_period_costs_37_more_and_two_periods_are_enough() -> None:
    cost, makes = cheapest_runs(WAGNER_WHITIN, SET_UPS, 1, life=1)  # ours
    assert (cost, makes) == (901, [98, 0, 97, 0, 87, 0, 34, 112, 0, 67, 135, 0])
    assert cheapest_runs(WAGNER_WHITIN, SET_UPS, 1, life=2)[0] == 864


@pytest.mark.parametrize(
    ("life", "cost"), [(None, 501.2), (2, 501.2), (1, 525.6), (0, 648.0)]
)  # 501.20 seen in two sources; 648 memory; 525.6 ours
def test_the_textbook_year_costs_501_20(life: int | None, cost: float) -> None:
    assert cheapest_runs(YEAR, 54, 0.4, life)[0] == pytest.approx(cost, abs=1e-9)


def test_the_computer_casings_cost_310() -> None:
    cost, makes = cheapest_runs([18, 30, 42, 5, 20], 80, 2)  # 310 seen, as the part-period answer
    assert cost == 310
    # (48, 0, 47, 0, 20) seen as the Silver-Meal answer; (48, 0, 67, 0, 0) costs the same
    assert makes == [48, 0, 47, 0, 20]


def test_the_course_sheet_costs_225() -> None:
    assert cheapest_runs([100, 100, 50, 50, 210], 50, 0.5)[0] == 225  # data seen, answer ours


def test_a_cheap_period_is_bought_ahead_as_far_as_it_keeps() -> None:
    # worked by hand: period 1 is cheap and keeps one period; period 3's set-up is out of the
    # question, so period 2 makes for it while there is still stock from period 1
    cost, makes = cheapest_runs([1, 1, 1], [1, 1, 100], 0, life=1, unit_cost=[1, 5, 1])
    assert (cost, makes) == (1 + 2 * 1 + 1 + 5, [2, 1, 0])


def test_periods_without_demand_need_no_make() -> None:
    assert cheapest_runs([0, 0, 5, 0], 7, 1) == (7, [0, 0, 5, 0])
    assert cheapest_runs([0, 0], 7, 1) == (0, [0, 0])
    assert cheapest_runs([], 7, 1) == (0, [])


def _by_trial(
    demand: list[int], fixed: list[int], hold: list[int], life: int, price: list[int]
) -> float:
    """Every way of giving each demand its make, tried."""
    costs = []
    places = [range(max(0, now - life), now + 1) for now in range(len(demand))]
    for made_in in product(*places):
        used = {make for make, wanted in zip(made_in, demand, strict=True) if wanted}
        cost = sum(fixed[make] for make in used)
        for now, make in enumerate(made_in):
            cost += demand[now] * (price[make] + sum(hold[make:now]))
        costs.append(cost)
    return min(costs)


def test_random_rows_cost_what_trying_every_way_finds() -> None:
    chance = random.Random(20)
    for _ in range(150):
        periods, life = chance.randint(1, 6), chance.randint(0, 4)
        demand = [chance.choice((0, 1, 3, 8)) for _ in range(periods)]
        fixed, hold, price = (
            [chance.randint(0, most) for _ in range(periods)] for most in (20, 3, 6)
        )
        cost, makes = cheapest_runs(demand, fixed, hold, life, price)
        assert cost == _by_trial(demand, fixed, hold, life, price)
        assert sum(makes) == sum(demand)


def test_the_solver_finds_the_same_number_of_makes() -> None:
    """Carrying costs nothing in a prep room: the same cases as batches, 10 minutes each."""
    for life in (0, 1, 3, 11):
        demands = tuple(
            Demand(0, float(volume), max(0, day - life), day, day)
            for day, volume in enumerate(YEAR)
        )
        problem = Problem(12, tuple(range(12)), (Sort("one", 10.0),), demands)
        proof = prove(problem, seconds=20)
        assert proof.proved
        assert proof.cost.total == pytest.approx(cheapest_runs(YEAR, 10, 0, life)[0])


def test_what_makes_no_sense_is_told_with_its_period() -> None:
    with pytest.raises(BadAmount, match=r"-3 in period 2"):
        cheapest_runs([1, -3], 1, 1)
    with pytest.raises(BadAmount, match="life of -1"):
        cheapest_runs([1], 1, 1, life=-1)
    with pytest.raises(BadAmount, match="1 figures of set-up for 2 periods"):
        cheapest_runs([1, 1], [5], 1)
