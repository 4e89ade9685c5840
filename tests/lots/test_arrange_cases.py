"""Small cases worked out by hand: what the planner of batches must find, and what it must not."""

from __future__ import annotations

import random
from collections.abc import Sequence
from dataclasses import replace
from math import inf

import pytest

from stockroom.errors import BadInput
from stockroom.lots.arrange import arrange
from stockroom.lots.check import faults
from stockroom.lots.cost import cost_of, load_of
from stockroom.lots.model import Arrangement, Demand, Lot, Part, Problem, Sort

DAYS = 90
WORKING = tuple(day for day in range(DAYS) if day % 7 < 5)


def use(
    sort: int,
    volume: float,
    day: int,
    *,
    life: int,
    strength: float = 0.0,
    first: int | None = None,
) -> Demand:
    """A demand for what keeps `life` days and may be made the same day."""
    start = max(day - life, 0) if first is None else first
    return Demand(sort, volume, start, day, day, strength)


def part(sort: int, share: float, life: int, *, days: int = DAYS, strength: float = 0.0) -> Part:
    """A part that keeps `life` days and may be made the same day."""
    first = tuple(max(day - life, 0) for day in range(days))
    return Part(sort, share, first, tuple(range(days)), strength)


def problem(
    sorts: Sequence[Sort], demands: Sequence[Demand], lots: Sequence[Lot] = (), whole: bool = False
) -> Problem:
    """Ninety days from a Monday, no daily limit."""
    return Problem(DAYS, WORKING, tuple(sorts), tuple(demands), tuple(lots), None, whole)


def arranged(asked: Problem) -> Arrangement:
    """The planner's answer, read back for faults first."""
    answer = arrange(asked)
    assert faults(asked, answer) == []
    return answer


def days_of(answer: Arrangement, sort: int) -> list[int]:
    return [batch.day for batch in answer.batches if batch.sort == sort]


# a stock that keeps 2 days, dilutions that keep 3 and 14 days, for days 14 and 21
X, Y = Sort("X", 10.0, parts=(part(2, 0.1, 2),)), Sort("Y", 10.0, parts=(part(2, 0.1, 2),))
STOCK = Sort("stock", 30.0)


def test_two_dilutions_share_one_stock() -> None:
    asked = problem([X, Y, STOCK], [use(0, 500, 14, life=3), use(1, 500, 21, life=14)])
    answer = arranged(asked)
    assert len(answer.batches) == 3
    assert cost_of(asked, answer).minutes == 50.0
    (stock,) = days_of(answer, 2)
    assert all(0 <= day - stock <= 2 for day in (*days_of(answer, 0), *days_of(answer, 1)))


def test_a_dilution_is_made_while_the_bottle_of_its_part_is_good() -> None:
    sorts = [Sort("dilution", 20.0, parts=(part(1, 0.5, 30, strength=0.9),)), Sort("stock", 35.0)]
    lot = Lot(1, 300.0, until=200, strength=1.0, decay=0.0018)
    answer = arranged(problem(sorts, [use(0, 400, 79, life=30)], [lot]))
    (batch,) = answer.batches
    # 1.0 · e^(−0.0018 · 58) is 0.9008, a day later 0.8992; 56 and 57 are a weekend's end
    assert (batch.sort, batch.day) == (0, 58)


def test_vessels_are_filled_one_after_another() -> None:
    # 2850 cm³ over five weeks in vessels of 500: by days 7, one after another 6
    row = [400, 350, 300, 450, 250, 350, 300, 450]
    demands = [use(0, volume, 7 + 4 * n - (n % 2), life=7) for n, volume in enumerate(row)]
    demands = [replace(each, last=max(d for d in WORKING if d <= each.use)) for each in demands]
    answer = arranged(problem([Sort("solution", 13.0, largest=500.0)], demands))
    assert sum(row) == 2850
    assert sum(batch.vessels for batch in answer.batches) == 6


def test_two_sorts_that_hold_each_other_to_a_day_are_moved_together() -> None:
    # each sees the stock made on day 18 for the other; together both can go to day 15
    sorts = [
        Sort("X", 10.0, parts=(part(2, 0.1, 0),)),
        Sort("Y", 10.0, parts=(part(2, 0.1, 0),)),
        STOCK,
    ]
    demands = [use(0, 300, 18, life=7), use(1, 300, 18, life=7), use(2, 100, 15, life=0)]
    answer = arranged(problem(sorts, demands))
    assert days_of(answer, 2) == [15]
    assert days_of(answer, 0) == days_of(answer, 1) == [15]


def test_a_lot_is_kept_for_the_need_that_stands_alone() -> None:
    # reference: the lot on day 7 leaves two batches, the lot on day 23 one
    demands = [use(0, 100, 7, life=7), use(0, 100, 8, life=7), use(0, 100, 23, life=7)]
    answer = arranged(problem([Sort("S", 20.0)], demands, [Lot(0, 100.0, until=60)]))
    assert days_of(answer, 0) == [7]
    assert [gift.demand for gift in answer.gifts if gift.lot == 0] == [2]


def test_the_strong_lot_goes_to_the_strict_need() -> None:
    # A pours out first by date and is the only one strong enough for day 4
    demands = [Demand(0, 100, 1, 0, 2, strength=0.85), Demand(0, 100, 1, 0, 4, strength=0.98)]
    lots = [Lot(0, 100.0, until=10, strength=1.0), Lot(0, 100.0, until=20, strength=0.9)]
    answer = arranged(problem([Sort("S", 20.0)], demands, lots))
    assert (answer.short, answer.batches) == ((0.0, 0.0), ())
    assert {(gift.lot, gift.demand) for gift in answer.gifts} == {(1, 0), (0, 1)}


def test_whole_two_vessels_of_five_hold_ten_litres() -> None:
    demands = [use(0, 1000.0 * each, 14 + n, life=30) for n, each in enumerate((3, 4, 2, 1))]
    answer = arranged(problem([Sort("S", 20.0, largest=5000.0)], demands, whole=True))
    assert sum(batch.vessels for batch in answer.batches) == 2


def test_whole_no_need_is_poured_from_two_lots() -> None:
    lots = [Lot(0, 60.0, until=50), Lot(0, 60.0, until=50)]
    asked = problem([Sort("S", 20.0)], [use(0, 100, 7, life=7)], lots, whole=True)
    whole = arranged(asked)
    assert [gift.lot for gift in whole.gifts] == [-1]
    # once it may come from both there is enough
    assert arranged(replace(asked, whole=False)).batches == ()


def test_what_a_lot_of_a_part_cannot_give_is_short_and_no_more() -> None:
    sorts = [
        Sort("dilution", 10.0, parts=(Part(1, 0.5, (-1,) * DAYS, (-1,) * DAYS),)),
        Sort("stock", 10.0),
    ]
    answer = arranged(problem(sorts, [use(0, 400, 7, life=3)], [Lot(1, 150.0, until=30)]))
    assert sum(answer.short) == pytest.approx(100.0)


def test_no_day_goes_over_its_limit_when_another_would_do() -> None:
    sorts = [Sort(f"S{n}", 30.0) for n in range(4)]
    asked = replace(problem(sorts, [use(n, 200, 18, life=7) for n in range(4)]), limit=60.0)
    answer = arranged(asked)
    assert max(load_of(asked, answer.batches)) <= 60.0
    busy = tuple(60.0 if day == 18 else 0.0 for day in range(DAYS))
    elsewhere = arranged(replace(asked, busy=busy))
    assert 18 not in {batch.day for batch in elsewhere.batches}


def test_among_equals_the_day_last_printed_is_kept_and_else_the_latest() -> None:
    demands = [use(0, 200, 18, life=7)]
    assert days_of(arranged(problem([Sort("S", 30.0)], demands)), 0) == [18]
    kept = Sort("S", 30.0, usual=frozenset({15}))
    assert days_of(arranged(problem([kept], demands)), 0) == [15]


def test_a_usual_day_is_kept_where_a_later_one_would_do_as_well() -> None:
    kept = Sort("S", 30.0, usual=frozenset({14, 16}))
    asked = problem([kept], [use(0, 200, 18, life=7)])
    answer = arranged(asked)
    assert days_of(answer, 0) == [16]
    later = Arrangement((replace(answer.batches[0], day=18),), answer.gifts, answer.short)
    assert cost_of(asked, answer).with_ties < cost_of(asked, later).with_ties


def test_a_usual_day_is_left_to_save_minutes() -> None:
    # one batch on day 21 does for both; on day 18 it would not keep
    kept = Sort("S", 30.0, usual=frozenset({18}))
    demands = [use(0, 200, 21, life=7), use(0, 200, 26, life=7)]
    (batch,) = arranged(problem([kept], demands)).batches
    assert batch.day == 21


def test_what_is_made_is_rounded_up_to_steps_and_to_the_smallest_batch() -> None:
    sort = Sort("S", 30.0, smallest=100.0, largest=500.0, step=50.0)
    for wanted, made in ((20.0, 100.0), (120.0, 150.0), (490.0, 500.0)):
        (batch,) = arranged(problem([sort], [use(0, wanted, 7, life=0)])).batches
        assert batch.volume == made


def test_the_order_of_the_demands_changes_nothing() -> None:
    chance = random.Random(4)
    sorts = [X, Y, replace(STOCK, largest=300.0)]
    sizes = range(50, 900, 10)
    demands = [use(chance.randrange(3), chance.choice(sizes), day, life=3) for day in WORKING[3:40]]
    first = arranged(problem(sorts, demands))
    for _ in range(5):
        chance.shuffle(demands)
        assert arranged(problem(sorts, demands)).batches == first.batches


def test_nothing_asked_nothing_made() -> None:
    assert arrange(problem([STOCK], [])) == Arrangement((), (), ())
    assert arrange(problem([], [])) == Arrangement((), (), ())


def test_a_demand_no_batch_can_meet_is_short() -> None:
    answer = arranged(problem([STOCK], [Demand(0, 80.0, 5, 4, 6)]))
    assert (answer.short, answer.batches) == ((80.0,), ())


def test_a_part_that_comes_before_what_it_goes_into_is_refused() -> None:
    upside_down = [STOCK, Sort("X", 10.0, largest=inf, parts=(part(0, 0.1, 2),))]
    with pytest.raises(BadInput, match="X: its part 0"):
        arrange(problem(upside_down, []))
