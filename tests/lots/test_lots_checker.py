"""An arrangement that can be carried out, and one fault of every kind planted in it."""

from __future__ import annotations

from dataclasses import replace
from math import inf, nan

import pytest

from stockroom.lots.check import faults
from stockroom.lots.cost import cost_of, load_of
from stockroom.lots.model import Arrangement, Batch, Demand, Gift, Lot, Part, Problem, Sort
from stockroom.lots.objective import Cost

DAYS = tuple(range(8))
# a dilution, and the stock it takes a tenth of: made the day before, or up to two before that
DILUTION = Sort(
    "dilution",
    minutes=10.0,
    per_cm3=0.01,
    smallest=100.0,
    largest=500.0,
    waste=0.02,
    parts=(Part(1, 0.1, (-1, 0, 0, 0, 1, 2, 3, 4), (-1, 0, 1, 2, 3, 4, 5, 6), strength=0.9),),
    finishing=2.0,
    finish_on=(1, 2, 3, 4, 5, 6, 7, -1),
)
STOCK = Sort("stock", minutes=30.0, largest=100.0, waste=0.5)
PROBLEM = Problem(
    days=8,
    working=(0, 1, 2, 3, 4, 7),
    sorts=(DILUTION, STOCK),
    demands=(
        Demand(0, 400.0, first=2, last=4, use=4, strength=0.95),
        Demand(0, 450.0, first=3, last=7, use=7, strength=0.9),
        Demand(0, 60.0, first=5, last=4, use=4),
    ),
    lots=(
        Lot(0, 80.0, until=6, strength=1.0, decay=0.01, waste=0.02),
        Lot(1, 50.0, until=3, strength=0.95),
    ),
)
GOOD = Arrangement(
    batches=(Batch(0, 3, 2, 770.0), Batch(1, 1, 1, 40.0)),
    gifts=(
        Gift(320.0, batch=0, demand=0),
        Gift(450.0, batch=0, demand=1),
        Gift(80.0, lot=0, demand=0),
        Gift(40.0, batch=1, into=0, part=0),
        Gift(37.0, lot=1, into=0, part=0),
    ),
    short=(0.0, 0.0, 60.0),
)


def with_gift(number: int, gift: Gift) -> Arrangement:
    gifts = list(GOOD.gifts)
    gifts[number] = gift
    return replace(GOOD, gifts=tuple(gifts))


def with_batch(number: int, batch: Batch) -> Arrangement:
    batches = list(GOOD.batches)
    batches[number] = batch
    return replace(GOOD, batches=tuple(batches))


def test_the_good_one_has_no_fault() -> None:
    assert faults(PROBLEM, GOOD) == []


PLANTED = {
    "a sort that is not there": (with_batch(1, Batch(2, 1, 1, 40.0)), "no sort 2"),
    "a day that is not there": (with_batch(0, Batch(0, 8, 2, 770.0)), "day 8 is not one of"),
    "no volume at all": (with_batch(0, Batch(0, 3, 2, nan)), "nan cm³ is no volume"),
    "an endless gift": (with_gift(0, Gift(inf, batch=0, demand=0)), "inf cm³ is no volume"),
    "two givers": (with_gift(0, Gift(320.0, batch=0, lot=0, demand=0)), "must be one of them"),
    "no taker": (with_gift(0, Gift(320.0, batch=0)), "must be one of them"),
    "a batch that is not there": (with_gift(0, Gift(320.0, batch=2, demand=0)), "no batch 2"),
    "a lot that is not there": (with_gift(2, Gift(80.0, lot=2, demand=0)), "no lot 2"),
    "a demand that is not there": (with_gift(0, Gift(320.0, batch=0, demand=3)), "no demand 3"),
    "a part that is not there": (
        with_gift(3, Gift(40.0, batch=1, into=0, part=1)),
        "batch 0 has no part 1",
    ),
    "a part of what is bought whole": (
        with_gift(3, Gift(40.0, batch=0, into=1, part=0)),
        "batch 1 has no part 0",
    ),
    "a row of shortages too short": (replace(GOOD, short=(0.0,)), "1 shortages for 3 demands"),
    "a closed day": (with_batch(0, Batch(0, 5, 2, 770.0)), "day 5 is not a working day"),
    "no vessel": (with_batch(0, Batch(0, 3, 0, 770.0)), "0 vessels"),
    "a batch of nothing": (with_batch(0, Batch(0, 3, 2, 0.0)), "0.0 cm³ is no volume"),
    "too much for its vessels": (with_batch(0, Batch(0, 3, 1, 770.0)), "do not go into 1 × 500"),
    "too little for its vessels": (with_batch(0, Batch(0, 3, 8, 770.0)), "too little for 8 × 100"),
    "two batches that are one": (
        replace(GOOD, batches=(*GOOD.batches, Batch(1, 1, 1, 5.0))),
        "2 batches of stock on day 1",
    ),
    "a negative gift": (with_gift(0, Gift(-320.0, batch=0, demand=0)), "negative"),
    "a batch of another sort": (with_gift(0, Gift(320.0, batch=1, demand=0)), "is of sort 1"),
    "a batch too early for a demand": (
        with_batch(0, Batch(0, 2, 2, 770.0)),
        "day 2 is outside days 3 to 7 of demand 1",
    ),
    "a batch too late for a demand": (
        with_batch(0, Batch(0, 7, 2, 770.0)),
        "day 7 is outside days 2 to 4 of demand 0",
    ),
    "a demand no batch will do for": (
        replace(with_gift(1, Gift(60.0, batch=0, demand=2)), short=(0.0, 450.0, 0.0)),
        "outside days 5 to 4 of demand 2",
    ),
    "a lot of another sort": (with_gift(2, Gift(50.0, lot=1, demand=0)), "lot 1 is of sort 1"),
    "a lot that is past": (
        with_gift(2, Gift(80.0, lot=0, demand=1)),
        "good through day 6, demand 1 needs it on day 7",
    ),
    "a part of another sort": (
        with_gift(4, Gift(37.0, lot=0, into=0, part=0)),
        "lot 0 is of sort 0",
    ),
    "a batch of another sort in a part": (
        with_gift(3, Gift(40.0, batch=0, into=0, part=0)),
        "batch 0 is of sort 0",
    ),
    "a part made too late": (
        with_batch(1, Batch(1, 3, 1, 40.0)),
        "day 3 is outside days 0 to 2 of part 0 of batch 0",
    ),
    "a part on a day none will do": (
        with_batch(0, Batch(0, 0, 2, 770.0)),
        "no batch will do as part 0 of batch 0, made on day 0",
    ),
    "a part from a lot that is past": (
        with_batch(0, Batch(0, 4, 2, 770.0)),
        "good through day 3, part 0 of batch 0 needs it on day 4",
    ),
    "more given of a batch than made": (
        with_batch(0, Batch(0, 3, 2, 700.0)),
        "batch 0: 770.0 cm³ given of 700.0 cm³ made",
    ),
    "more given of a lot than there": (
        with_gift(4, Gift(57.0, lot=1, into=0, part=0)),
        "lot 1: 57.0 cm³ given of 50.0 cm³ there",
    ),
    "a part that is not its share": (
        with_gift(4, Gift(27.0, lot=1, into=0, part=0)),
        "part 0 gets 67.0 cm³, its share is 77.0 cm³",
    ),
    "a part forgotten": (
        replace(GOOD, gifts=GOOD.gifts[:3]),
        "part 0 gets 0.0 cm³",
    ),
    "a shortage not told": (replace(GOOD, short=()), "demand 2: 0.0 cm³ given and 0.0"),
    "a shortage that is none": (
        replace(GOOD, short=(0.0, 5.0, 60.0)),
        "demand 1: 450.0 cm³ given and 5.0 cm³",
    ),
    "a negative shortage": (replace(GOOD, short=(0.0, -5.0, 60.0)), "-5.0 cm³ short is negative"),
    "a demand given twice over": (
        replace(GOOD, gifts=(*GOOD.gifts, Gift(10.0, batch=0, demand=0))),
        "demand 0: 410.0 cm³ given",
    ),
}


@pytest.mark.parametrize("name", PLANTED)
def test_a_planted_fault_is_found(name: str) -> None:
    arrangement, words = PLANTED[name]
    assert any(words in fault for fault in faults(PROBLEM, arrangement)), faults(
        PROBLEM, arrangement
    )


def test_a_lot_too_weak_on_the_day_is_found_and_one_strong_enough_is_not() -> None:
    strong = replace(PROBLEM.demands[0], strength=0.961)  # 0.9608 is left on day 4
    problem = replace(PROBLEM, demands=(strong, *PROBLEM.demands[1:]))
    assert faults(problem, GOOD) == [
        "gift 2: lot 0 holds 0.960789 on day 4, demand 0 asks for 0.961"
    ]
    weak = replace(PROBLEM.sorts[0].parts[0], strength=0.96)
    problem = replace(PROBLEM, sorts=(replace(DILUTION, parts=(weak,)), STOCK))
    assert faults(problem, GOOD) == [
        "gift 4: lot 1 holds 0.95 on day 3, part 0 of batch 0 asks for 0.96"
    ]


def test_a_volume_that_is_no_whole_step_is_found_unless_the_vessels_are_full() -> None:
    stepped = replace(PROBLEM, sorts=(replace(DILUTION, step=50.0), STOCK))
    assert any(
        "770.0 cm³ is neither whole steps of 50.0 cm³" in each for each in faults(stepped, GOOD)
    )
    full = replace(stepped, sorts=(replace(DILUTION, step=50.0, largest=385.0), STOCK))
    assert faults(full, GOOD) == []
    assert faults(replace(PROBLEM, sorts=(replace(DILUTION, step=70.0), STOCK)), GOOD) == []


def test_where_nothing_may_be_split_two_givers_are_a_fault() -> None:
    assert sorted(faults(replace(PROBLEM, whole=True), GOOD)) == [
        "demand 0: from 2 batches or lots, and must be from one",
        "part 0 of batch 0: from 2 batches or lots, and must be from one",
    ]


def test_where_nothing_may_be_split_a_demand_is_not_met_by_half() -> None:
    half = Arrangement((), (Gift(80.0, lot=0, demand=0),), (320.0, 450.0, 60.0))
    assert faults(PROBLEM, half) == []
    assert faults(replace(PROBLEM, whole=True), half) == [
        "demand 0: 320.0 cm³ of 400.0 cm³ short, and must be all or none"
    ]


def test_nothing_made_and_all_short_is_no_fault() -> None:
    nothing = Arrangement(short=(400.0, 450.0, 60.0))
    assert faults(PROBLEM, nothing) == []
    assert cost_of(PROBLEM, nothing) == Cost(waste=0.02 * 80, short=910.0)


def test_the_bill_of_the_good_one_is_worked_by_hand() -> None:
    cost = cost_of(PROBLEM, GOOD)
    assert cost.minutes == pytest.approx(2 * (10 + 2) + 0.01 * 770 + 30)
    # all of the batches and of lot 0 is used, and lot 1 outlasts nothing but costs nothing
    assert cost.waste == 0.0
    assert cost.short == 60.0
    assert cost.over == 0.0
    # the dilution could wait for day 4, its demand's last; the stock for day 2
    assert cost.early == 1 + 1
    assert cost.total == pytest.approx(cost.minutes + 30 * 60)


def test_what_is_left_in_a_batch_or_a_lot_is_wasted() -> None:
    dearer = replace(PROBLEM, lots=(PROBLEM.lots[0], replace(PROBLEM.lots[1], waste=0.1)))
    more = replace(GOOD, batches=(GOOD.batches[0], Batch(1, 1, 1, 60.0)))
    # 20 cm³ of the stock, and 13 cm³ of lot 1
    assert cost_of(dearer, more).waste == pytest.approx(0.5 * 20 + 0.1 * 13)


def test_minutes_over_are_counted_on_their_own_day_beside_what_is_busy() -> None:
    busy = (0.0, 25.0, 0.0, 0.0, 90.0, 0.0, 0.0, 0.0)
    problem = replace(PROBLEM, limit=40.0, busy=busy)
    assert load_of(problem, GOOD.batches) == [0, 30, 0, pytest.approx(27.7), 4, 0, 0, 0]
    # day 1: 15 minutes of room for 30; day 4 is over without us, and so are our 4 minutes
    assert cost_of(problem, GOOD).over == pytest.approx(15 + 4)


def test_a_day_that_stood_in_the_printed_plan_is_not_early() -> None:
    usual = replace(PROBLEM, sorts=(replace(DILUTION, usual=frozenset({3})), STOCK))
    assert cost_of(usual, GOOD).early == 1


def test_lateness_is_counted_to_a_working_day() -> None:
    # day 7's demand alone: days 5 and 6 are closed, 7 is the last
    alone = Arrangement(
        (Batch(0, 4, 1, 450.0), Batch(1, 3, 1, 45.0)),
        (Gift(450.0, batch=0, demand=1), Gift(45.0, batch=1, into=0)),
        (400.0, 0.0, 60.0),
    )
    assert faults(PROBLEM, alone) == []
    assert cost_of(PROBLEM, alone).early == 3 + 0
    closed = replace(PROBLEM, working=(0, 1, 2, 3, 4))
    assert cost_of(closed, alone).early == 0
