"""What holds of every answer of the planner of batches, on small invented terms."""

from __future__ import annotations

import random
from dataclasses import replace
from functools import cache
from itertools import product
from math import ceil

import pytest

from stockroom.lots.arrange import arrange
from stockroom.lots.check import faults
from stockroom.lots.cost import cost_of
from stockroom.lots.exact import prove
from stockroom.lots.model import Demand, Lot, Part, Problem, Sort

DAYS = 26
WORKING = tuple(day for day in range(DAYS) if day % 7 < 5)

SEEDS = 300


def windows(life: int, lead: int) -> tuple[tuple[int, ...], tuple[int, ...]]:
    """First and last day of a batch for each day; −1 where none will do."""
    first, last = [], []
    for day in range(DAYS):
        there = [each for each in WORKING if day - life <= each <= day - lead]
        first.append(there[0] if there else -1)
        last.append(there[-1] if there else -1)
    return tuple(first), tuple(last)


@cache
def invented(seed: int) -> Problem:
    """Three to five sorts in up to three levels, a few demands, lots, vessels; some a limit."""
    chance = random.Random(seed)
    number = chance.randint(3, 5)
    lives = [(chance.choice((0, 1, 3, 7, 14, 30)), 0) for _ in range(number)]
    lives = [(life, chance.choice((0, 1)) if life > 6 else 0) for life, _ in lives]
    fading = [chance.choice((0.0, 0.01)) for _ in range(number)]
    sorts = []
    for n in range(number):
        below = range(n + 1, number)
        parts = [
            Part(each, chance.uniform(0.05, 0.5), *windows(*lives[each]), chance.choice((0.0, 0.9)))
            for each in chance.sample(below, min(len(below), chance.choice((0, 1, 1, 2))))
        ]
        sort = Sort(
            f"S{n}",
            minutes=float(chance.randint(5, 40)),
            per_cm3=chance.choice((0.0, 0.002)),
            smallest=chance.choice((0.0, 100.0)),
            largest=chance.choice((300.0, 1000.0, 5000.0)),
            waste=chance.choice((0.0, 0.004)),
            parts=tuple(parts),
            finishing=chance.choice((0.0, 0.0, 5.0)),
            step=chance.choice((0.0, 0.0, 50.0)) if seed % 4 == 3 else 0.0,
            usual=frozenset(chance.sample(WORKING, 2)) if seed % 5 == 0 else frozenset(),
        )
        sorts.append(sort)
    demands = []
    for _ in range(chance.randint(3, 10)):
        n, day = chance.randrange(number), chance.choice(WORKING)
        first, last = (row[day] for row in windows(*lives[n]))
        volume = float(chance.randrange(20, 800, 20))
        end = last if last >= 0 else -1
        demands.append(Demand(n, volume, max(first, 0), end, day, chance.choice((0.0, 0.8, 0.95))))
    lots = tuple(
        Lot(
            n := chance.randrange(number),
            float(chance.randrange(40, 900, 20)),
            chance.randint(0, 40),
            chance.uniform(0.8, 1.0),
            fading[n],
            chance.choice((0.0, 0.003)),
        )
        for _ in range(chance.randint(0, 6))
    )
    limit = chance.choice((None, None, 60.0))
    return Problem(DAYS, WORKING, tuple(sorts), tuple(demands), lots, limit, seed % 2 == 1)


def lot_for_lot(problem: Problem) -> float:
    """Minutes and shortage if each demand had batches of its own, and so had they."""

    def made(number: int, volume: float) -> float:
        sort = problem.sorts[number]
        vessels = max(1, ceil(volume / sort.largest - 1e-9))
        much = max(volume, sort.smallest * vessels)
        if sort.step:
            much = max(much, ceil(much / sort.step - 1e-9) * sort.step)
        minutes = (sort.minutes + sort.finishing) * vessels + sort.per_cm3 * much
        minutes += sort.waste * (much - volume)
        return minutes + sum(made(part.sort, part.share * much) for part in sort.parts)

    return sum(made(each.sort, each.volume) for each in problem.demands)


@pytest.mark.parametrize("block", range(6))
def test_nothing_in_an_answer_is_at_fault(block: int) -> None:
    for seed in range(block, SEEDS, 6):
        problem = invented(seed)
        assert faults(problem, arrange(problem)) == [], seed


@pytest.mark.parametrize("whole", [False, True])
def test_never_dearer_than_a_batch_for_each_demand(whole: bool) -> None:
    for seed in range(SEEDS):
        problem = replace(invented(seed), limit=None, whole=whole, lots=())
        cost = cost_of(problem, arrange(problem))
        if cost.short == 0.0:
            assert cost.total <= lot_for_lot(problem) + 1e-6, seed


def test_the_same_whatever_the_order_of_demands_and_however_often() -> None:
    for seed in range(0, SEEDS, 10):
        problem = invented(seed)
        mixed = list(problem.demands)
        random.Random(seed).shuffle(mixed)
        answer = arrange(problem)
        again = arrange(replace(problem, demands=tuple(mixed)))
        assert cost_of(problem, answer).with_ties == pytest.approx(
            cost_of(replace(problem, demands=tuple(mixed)), again).with_ties, abs=1e-6
        ), seed
        assert arrange(problem) == answer


def test_more_effort_is_never_dearer() -> None:
    for seed in range(0, SEEDS, 5):
        problem = invented(seed)
        little, much = (cost_of(problem, arrange(problem, effort=each)) for each in (0, 20))
        assert much.with_ties <= little.with_ties + 1e-6, seed


def test_as_cheap_as_every_way_tried_where_there_are_few() -> None:
    # one sort, one vessel holds all: every set of days, each demand from any of them
    for seed in range(120):
        chance = random.Random(seed)
        row = sorted(chance.sample(WORKING, 5))
        demands = tuple(
            Demand(0, 100.0, max(day - chance.choice((0, 2, 6)), 0), day, day) for day in row
        )
        problem = Problem(DAYS, WORKING, (Sort("S", 10.0),), demands)
        fewest = min(
            len(set(days)) for days in product(*(range(d.first, d.last + 1) for d in demands))
            if set(days) <= set(WORKING)
        )  # fmt: skip
        answer = arrange(problem)
        assert (len(answer.batches), sum(answer.short)) == (fewest, 0.0), seed


@pytest.mark.parametrize("whole", [False, True])
def test_nearly_always_as_cheap_as_the_proof_and_never_much_dearer(whole: bool) -> None:
    gaps = []
    for seed in range(0, 84, 3):
        problem = replace(invented(seed), limit=None, whole=whole)
        if any(sort.step for sort in problem.sorts):
            continue
        proof = prove(problem, seconds=2.0 if whole else 5.0)
        if not proof.proved:
            continue
        cost = cost_of(problem, arrange(problem))
        assert cost.short <= proof.cost.short + 0.01, seed
        dearest = max(sort.minutes + sort.finishing for sort in problem.sorts)
        assert cost.total - proof.cost.total <= dearest + 1e-6, seed
        gaps.append(cost.total / max(proof.cost.total, 1e-9) - 1)
    assert len(gaps) >= 15
    assert sum(gap <= 1e-6 for gap in gaps) >= 0.9 * len(gaps)
    assert sum(gaps) <= 0.002 * len(gaps)
    # the aim is 2 %; split, one tiny term of these is a cheap vessel dearer, and no other may be
    beyond = [gap for gap in gaps if gap > 0.02]
    assert len(beyond) <= (0 if whole else 1)
    assert max(gaps) <= 0.16


@pytest.mark.parametrize("seed", [10, 42, 89, 107, 125, 146])
def test_what_was_once_missed_is_found(seed: int) -> None:
    """A chain moved together, lots used another way, and the lot dearest to throw away first."""
    problem = replace(invented(seed), limit=None, whole=True)
    proof = prove(problem, seconds=10.0)
    assert proof.proved
    assert cost_of(problem, arrange(problem)).total <= 1.005 * proof.cost.total
