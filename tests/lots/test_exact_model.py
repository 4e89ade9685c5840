"""The proof by solver: small cases worked by hand, others tried every way, and its own word."""

from __future__ import annotations

import random
import sys
from dataclasses import replace
from itertools import product
from math import ceil, inf

import pytest
from terms import demands_of, problem_of, term_of

from stockroom.errors import Refused
from stockroom.lots import candidate_days, exact_model
from stockroom.lots.check import faults
from stockroom.lots.cost import cost_of
from stockroom.lots.exact import Proof, prove
from stockroom.lots.families import families, only, part_of, together
from stockroom.lots.model import Arrangement, Batch, Demand, Lot, Part, Problem, Sort
from stockroom.lots.objective import SHORT, Cost

MONTH = tuple(range(30))


def window(before: int, days: int = 30) -> tuple[tuple[int, ...], tuple[int, ...]]:
    """A part that keeps so many days, for a batch of any day."""
    return tuple(max(0, day - before) for day in range(days)), tuple(range(days))


def proved(problem: Problem, seconds: float = 20.0) -> Proof:
    proof = prove(problem, seconds=seconds)
    assert faults(problem, proof.arrangement) == []
    assert cost_of(problem, proof.arrangement) == proof.cost
    assert proof.bound <= proof.cost.total
    assert proof.proved
    return proof


def days_of(proof: Proof, sort: int) -> list[int]:
    return sorted(batch.day for batch in proof.arrangement.batches if batch.sort == sort)


def test_a_shared_stock_is_made_three_times_and_not_four() -> None:
    # X keeps 3 days and is used on day 14, Y keeps 14 and is used on day 21; their stock
    # keeps 2 days and takes 30 minutes: Y is made early, from X's stock
    first, last = window(2)
    part = (Part(2, 0.1, first, last),)
    problem = Problem(
        30,
        MONTH,
        (Sort("X", 5.0, parts=part), Sort("Y", 5.0, parts=part), Sort("stock", 30.0)),
        (Demand(0, 100.0, 11, 14, 14), Demand(1, 100.0, 7, 21, 21)),
    )
    proof = proved(problem)
    assert proof.cost.total == pytest.approx(40.0)
    assert len(proof.arrangement.batches) == 3
    assert 12 <= days_of(proof, 1)[0] <= 16


def test_a_bottle_that_goes_off_is_used_while_it_is_good() -> None:
    part = (Part(1, 0.5, *window(10), strength=0.9),)
    problem = Problem(
        30,
        MONTH,
        (Sort("dilution", 10.0, parts=part), Sort("stock", 20.0)),
        (Demand(0, 100.0, 0, 25, 25),),
        (Lot(1, 60.0, until=29, strength=1.0, decay=0.01),),  # 0.9 until day 10
    )
    proof = proved(problem)
    assert proof.cost.total == pytest.approx(10.0)
    assert days_of(proof, 0) == [10]


def test_filling_one_vessel_after_another_needs_two_and_not_three() -> None:
    # 300, 400 and 300 cm³ every other day, good for three days, in a 500 cm³ vessel: the
    # second vessel starts on the day the first runs out, in the middle of a demand
    volumes = {1: 300.0, 3: 400.0, 5: 300.0}
    demands = tuple(Demand(0, v, max(0, day - 3), day, day) for day, v in volumes.items())
    one = Problem(9, tuple(range(9)), (Sort("one", 13.0, largest=500.0),), demands)
    assert proved(one).cost.total == pytest.approx(2 * 13.0)
    assert proved(replace(one, whole=True)).cost.total == pytest.approx(3 * 13.0)


def test_the_strong_bottle_is_kept_for_the_strict_need() -> None:
    problem = Problem(
        21,
        tuple(range(21)),
        (Sort("one", 50.0),),
        (Demand(0, 100.0, 5, 4, 2, strength=0.85), Demand(0, 100.0, 5, 4, 4, strength=0.98)),
        (Lot(0, 100.0, until=10), Lot(0, 100.0, until=20, strength=0.9)),
    )
    proof = proved(problem)
    assert proof.cost.total == 0.0
    assert {(gift.lot, gift.demand) for gift in proof.arrangement.gifts} == {(1, 0), (0, 1)}


def test_a_bottle_is_kept_for_what_would_need_a_make_of_its_own() -> None:
    demands = tuple(Demand(0, 100.0, day - 7, day, day) for day in (7, 8, 23))
    problem = Problem(30, MONTH, (Sort("one", 20.0),), demands, (Lot(0, 100.0, until=29),))
    proof = proved(problem)
    assert proof.cost.total == pytest.approx(20.0)
    assert proof.arrangement.batches == (Batch(0, 7, 1, 200.0),)


@pytest.mark.parametrize("whole", [False, True])
def test_ten_dm3_take_two_vessels_of_five(whole: bool) -> None:
    # 3 + 4 + 2 + 1 dm³ on one day, mixed
    demands = tuple(Demand(0, volume, 0, 3, 3) for volume in (3000.0, 4000.0, 2000.0, 1000.0))
    problem = Problem(5, tuple(range(5)), (Sort("one", 9.0, largest=5000.0),), demands, whole=whole)
    assert proved(problem).arrangement.batches == (Batch(0, 3, 2, 10_000.0),)


def test_what_may_not_be_split_is_made_though_two_bottles_hold_enough() -> None:
    lots = (Lot(0, 60.0, until=9), Lot(0, 60.0, until=9))
    split = Problem(5, tuple(range(5)), (Sort("one", 9.0),), (Demand(0, 100.0, 0, 3, 3),), lots)
    assert proved(split).cost.total == 0.0
    assert proved(replace(split, whole=True)).cost.total == pytest.approx(9.0)


def test_a_smallest_batch_is_wasted_in_part_and_sized_to_the_vessels() -> None:
    sort = Sort("one", 9.0, per_cm3=0.01, smallest=100.0, largest=250.0, waste=0.05)
    problem = Problem(5, tuple(range(5)), (sort,), (Demand(0, 40.0, 0, 3, 3),))
    proof = proved(problem)
    assert proof.arrangement.batches == (Batch(0, 3, 1, 100.0),)
    assert (proof.cost.minutes, proof.cost.waste) == pytest.approx((10.0, 3.0))


def test_a_batch_is_whole_steps_or_all_its_vessels_hold() -> None:
    # 230 cm³ in steps of 50; and 480 in a 490 cm³ vessel, where the tenth step will not go in
    sort = Sort("one", 9.0, largest=490.0, waste=0.1, step=50.0)
    for wanted, made in ((230.0, 250.0), (480.0, 490.0)):
        problem = Problem(5, tuple(range(5)), (sort,), (Demand(0, wanted, 0, 3, 3),))
        proof = proved(problem)
        assert [batch.volume for batch in proof.arrangement.batches] == pytest.approx([made])
        assert proof.cost.waste == pytest.approx(0.1 * (made - wanted))


def test_what_cannot_be_had_is_short_and_so_dear_that_little_is_left_out() -> None:
    sorts = (Sort("one", 200.0),)
    demands = (Demand(0, 10.0, 0, 3, 3), Demand(0, 50.0, 3, 2, 4))
    proof = proved(Problem(5, tuple(range(5)), sorts, demands))
    assert proof.arrangement.short == (0.0, 50.0)
    assert proof.cost.total == pytest.approx(200.0 + SHORT * 50)


def test_a_limit_spreads_batches_and_counts_finishing_on_its_own_day() -> None:
    two = tuple(Sort(name, 30.0) for name in ("a", "b"))
    demands = (Demand(0, 10.0, 2, 3, 3), Demand(1, 10.0, 2, 3, 3))
    problem = Problem(5, tuple(range(5)), two, demands, limit=30.0)
    proof = proved(problem)
    assert (proof.cost.over, days_of(proof, 0) + days_of(proof, 1)) in ((0, [2, 3]), (0, [3, 2]))
    # day 2 is spoken for, so both stand on day 3 at 30 minutes over, or 30 of them are busy's
    busy = replace(problem, busy=(0.0, 0.0, 30.0, 0.0, 0.0))
    assert proved(busy).cost.over == pytest.approx(30.0)
    late = replace(two[0], minutes=20.0, finishing=10.0, finish_on=(1, 2, 3, 4, 4))
    finishing = replace(problem, sorts=(late, replace(two[1], minutes=20.0)), limit=20.0)
    # both started on day 3, or b on 2; a's finishing on day 4 is in nobody's way
    assert proved(finishing).cost.over == 0.0


def _whole_by_trial(problem: Problem) -> float:
    """Each demand of one sort given to each day, each lot or nobody: every way tried."""
    sort = problem.sorts[0]
    best = inf
    takers = [
        [("day", day) for day in problem.working if demand.first <= day <= demand.last]
        + [("lot", n) for n, lot in enumerate(problem.lots) if demand.use <= lot.until]
        + [("none", 0)]
        for demand in problem.demands
    ]
    for chosen in product(*takers):
        taken: dict[tuple[str, int], float] = {}
        for demand, giver in zip(problem.demands, chosen, strict=True):
            taken[giver] = taken.get(giver, 0.0) + demand.volume
        total = sum(lot.waste * lot.volume for lot in problem.lots)
        for (kind, number), volume in taken.items():
            if kind == "none":
                total += SHORT * volume
            elif kind == "lot":
                lot = problem.lots[number]
                total += inf if volume > lot.volume else -lot.waste * volume
            else:
                vessels = ceil(volume / sort.largest)
                made = max(volume, sort.smallest * vessels)
                minutes = sort.minutes * vessels + sort.per_cm3 * made
                total += minutes + sort.waste * (made - volume)
                if problem.limit is not None:
                    total += 3 * max(0.0, minutes - problem.limit)
        best = min(best, total)
    return best


@pytest.mark.parametrize("seed", range(12))
def test_unsplit_demands_cost_what_trying_every_way_finds(seed: int) -> None:
    chance = random.Random(seed)
    smallest = chance.choice((0.0, 100.0, 180.0))
    sort = Sort("one", 12.0, 0.01, smallest, chance.choice((250.0, 400.0)), waste=0.03)
    demands = []
    for _ in range(5):
        day = chance.randint(1, 6)
        first = max(0, day - chance.randint(0, 4))
        demands.append(Demand(0, float(chance.randint(2, 30) * 10), first, day, day))
    lots = tuple(
        Lot(0, float(chance.randint(5, 30) * 10), chance.randint(2, 6), waste=0.03)
        for _ in range(2)
    )
    limit = chance.choice((None, 14.0, 25.0))
    problem = Problem(7, (0, 1, 3, 4, 6), (sort,), tuple(demands), lots, limit, whole=True)
    assert proved(problem).cost.total == pytest.approx(_whole_by_trial(problem))


@pytest.mark.parametrize("seed", range(8))
def test_days_left_out_hold_nothing_better(seed: int, monkeypatch: pytest.MonkeyPatch) -> None:
    """The few days worth looking at against all of them, on terms with levels and bottles."""
    chance = random.Random(seed)
    term = term_of(10, seed=seed, solutions=5, bottles=3, weeks=4, levels=chance.choice((2, 3)))
    problem = problem_of(term)
    few = proved(problem)

    def every_day(asked: Problem) -> list[tuple[int, ...]]:
        useful = candidate_days._useful(asked)
        return [tuple(sorted(row)) for row in candidate_days._with_parts(asked, useful)]

    monkeypatch.setattr(exact_model, "candidate_days", every_day)
    assert few.cost.total == pytest.approx(proved(problem).cost.total, rel=1e-5)


@pytest.mark.parametrize("seed", range(4))
def test_limits_and_whole_parts_leave_no_fault_and_never_cost_less(seed: int) -> None:
    problem = problem_of(term_of(8, seed=seed, solutions=4, bottles=2, weeks=3))
    free = proved(problem).cost.total
    for harder in (replace(problem, whole=True), replace(problem, limit=30.0)):
        proof = prove(harder, seconds=5)
        assert faults(harder, proof.arrangement) == []
        assert proof.cost.total >= free - 1e-6


def test_a_start_is_never_made_worse_and_time_that_runs_out_is_told_honestly() -> None:
    problem = problem_of(term_of(50, seed=3))
    first = prove(problem, seconds=0.01)
    assert faults(problem, first.arrangement) == []
    assert not first.proved
    assert 0 < first.gap <= 1
    again = prove(problem, seconds=0.3, start=first.arrangement)
    assert faults(problem, again.arrangement) == []
    assert again.cost.total <= first.cost.total
    assert again.bound <= again.cost.total


def test_the_best_told_as_a_start_comes_back_as_good() -> None:
    problem = replace(problem_of(term_of(6, seed=2, solutions=4, weeks=3)), whole=True)
    best = proved(problem)
    again = prove(problem, seconds=20, start=best.arrangement)
    assert again.cost.total == pytest.approx(best.cost.total)


def test_the_same_problem_has_the_same_proof() -> None:
    problem = problem_of(term_of(30, seed=4, solutions=8, weeks=5))
    assert proved(problem) == proved(problem)


def test_nothing_asked_is_proved_at_once() -> None:
    problem = Problem(3, (0, 1, 2), (Sort("one", 5.0),), (), (Lot(0, 10.0, 1, waste=0.5),))
    proof = proved(problem)
    assert proof.cost == Cost(waste=5.0)
    assert proof.arrangement == Arrangement()


def test_without_the_solver_it_says_what_to_install(monkeypatch: pytest.MonkeyPatch) -> None:
    monkeypatch.setitem(sys.modules, "highspy", None)
    with pytest.raises(Refused, match=r'pip install "stockroom\[exact\]"'):
        prove(Problem(1, (0,), (), ()), seconds=1)


def test_the_solver_says_nothing_of_its_own(capfd: pytest.CaptureFixture[str]) -> None:
    proved(problem_of(term_of(8, seed=1, solutions=4, weeks=3)))
    assert capfd.readouterr() == ("", "")


def test_families_come_apart_and_together_again() -> None:
    problem = problem_of(term_of(40, seed=5))
    pieces = families(problem)
    assert sorted(sort for piece in pieces for sort in piece) == list(range(len(problem.sorts)))
    assert len(pieces) > 1
    whole = prove(problem, seconds=3).arrangement
    parts = [only(problem, piece, whole) for piece in pieces]
    for piece, part in zip(pieces, parts, strict=True):
        assert faults(part_of(problem, piece), part) == []
    again = together(problem, pieces, parts)
    assert faults(problem, again) == []
    assert cost_of(problem, again).total == pytest.approx(cost_of(problem, whole).total)


@pytest.mark.parametrize("size", [50, 200])
def test_invented_terms_are_the_same_for_the_same_seed_and_can_be_met(size: int) -> None:
    term = term_of(size, seed=7)
    assert term == term_of(size, seed=7)
    assert term != term_of(size, seed=8)
    assert len(term.bookings) == size
    assert sum(demands_of(term).values()) == sum(volume for *_, volume in term.bookings)
    problem = problem_of(term)
    assert all(demand.first <= demand.last <= demand.use for demand in problem.demands)
    assert {demand.use for demand in problem.demands} <= set(problem.working)
    assert all(each.sort > n for n, sort in enumerate(problem.sorts) for each in sort.parts)
