"""Too little to weigh or measure: the designs of named cases, and what is refused."""

from __future__ import annotations

from collections.abc import Callable

import pytest

from stockroom.chemistry.glassware import Ware, ware
from stockroom.chemistry.steps import Bench, Design, Step, design, worst_error
from stockroom.chemistry.weighing import Scale
from stockroom.errors import BadAmount

BAL1, BAL2 = Scale("BAL1", 0.01), Scale("BAL2", 0.001)
FLASKS = tuple(ware("flask", size, "B") for size in (50, 100, 250, 500, 1000, 2000))
BULBS = tuple(ware("pipette", size, "B") for size in (1, 2, 5, 10, 20, 25, 50))
SMALL = ware("graduated pipette", 1, "B", step=0.01)
MARKED = (SMALL, ware("graduated pipette", 10, "B"), ware("burette", 50, "B"))
SHELF = (*FLASKS, *BULBS, *MARKED, ware("cylinder", 500, "B"))
BENCH = Bench((BAL1,), SHELF)


def amounts(found: Design) -> list[tuple[float, float]]:
    return [(round(step.amount, 6), round(step.volume, 6)) for step in found.steps]


# a usual case of the trade: 0.176 g on a 0.01 g balance at ±2 %
def test_0_176_g_with_no_glass_entered_brings_both_offers() -> None:
    batch, diluted = design(0.176, 176, closeness=0.02, bench=Bench((BAL1,)))
    assert amounts(batch) == [(0.5, 500)]
    assert amounts(diluted) == [(0.5, 50), (17.6, 176)]


def test_0_176_g_on_a_whole_bench_brings_both_offers() -> None:
    found = [amounts(each) for each in design(0.176, 176, closeness=0.02, bench=BENCH)]
    assert found[0] == [(0.5, 500)]
    assert [(0.5, 50), (25, 250)] in found


def test_the_fewest_steps_come_first_and_a_longer_way_only_if_it_wastes_less() -> None:
    found = design(0.176, 176, closeness=0.02, bench=BENCH)
    assert [len(each.steps) for each in found] == [1, 1, 2]
    assert found[2].poured < found[0].poured
    assert found[2].waste == pytest.approx(found[0].waste)


def test_enough_to_weigh_is_weighed_as_it_is() -> None:
    assert amounts(design(2.5, 250, closeness=0.05, bench=BENCH)[0]) == [(2.5, 250)]


def test_a_finer_balance_needs_no_larger_batch() -> None:
    # a usual case of the trade: with BAL2 there, and with it away
    there = design(0.25, 250, closeness=0.02, bench=Bench((BAL1, BAL2), SHELF))[0]
    away = design(0.25, 250, closeness=0.02, bench=BENCH)[0]
    assert (there.steps[0].tool, there.steps[0].amount) == (BAL2, 0.25)
    assert (away.steps[0].tool, away.steps[0].amount) == (BAL1, 0.5)


def test_without_a_balance_nothing_can_be_weighed() -> None:
    assert design(0.176, 176, closeness=0.02, bench=Bench((), SHELF)) == ()
    assert design(0.176, 176, closeness=0.02, bench=Bench()) == ()


# a usual case of the trade: 0.35 cm³ with a 1 cm³ graduated pipette
def test_0_35_cm3_is_measured_at_once_at_5_per_cent() -> None:
    found = design(0.35, 500, closeness=0.05, bench=BENCH, liquid=True)[0]
    assert amounts(found) == [(0.35, 500)]
    assert found.steps[0].tool == SMALL


def test_0_35_cm3_takes_an_intermediate_at_2_per_cent() -> None:
    only_500 = tuple(each for each in SHELF if each.size <= 500)
    found = design(0.35, 500, closeness=0.02, bench=Bench((), only_500), liquid=True)
    assert len(found[0].steps) == 2
    assert found[0].error <= 0.02


def test_with_the_small_pipette_away_the_next_is_used() -> None:
    left = tuple(each for each in SHELF if each != SMALL)
    found = design(0.35, 500, closeness=0.05, bench=Bench((), left), liquid=True)
    assert found
    assert all(step.tool != SMALL for each in found for step in each.steps)


def test_a_bulb_pipette_may_come_first_and_the_odd_volume_after() -> None:
    glass = (ware("pipette", 1, "A"), ware("flask", 100, "A"), ware("burette", 50, "A"))
    found = design(0.35, 100, closeness=0.02, bench=Bench((), glass), liquid=True)[0]
    assert amounts(found) == [(1.0, 100), (35.0, 100)]


def test_a_trace_takes_a_row_of_dilutions() -> None:
    found = design(1e-6, 100, closeness=0.05, bench=BENCH)[0]
    assert len(found.steps) == 3
    assert found.steps[0].amount >= 0.2


def test_more_than_the_largest_vessel_is_made_in_batches_from_one_intermediate() -> None:
    found = design(0.00585, 10_000, closeness=0.05, bench=BENCH)[0]
    last = found.steps[-1]
    assert last.times * last.volume >= 10_000
    assert last.times * last.amount < found.steps[0].volume


def test_what_cannot_be_done_has_no_design() -> None:
    assert design(1e-6, 100, closeness=0.0005, bench=BENCH) == ()
    assert design(0.176, 176, closeness=0.02, bench=Bench((BAL1,), (FLASKS[0],))) == ()


def test_no_intermediate_is_stronger_than_what_dissolves() -> None:
    found = design(0.02, 1000, closeness=0.01, bench=BENCH, strongest=0.002)
    assert found
    assert all(each.steps[0].amount / each.steps[0].volume <= 0.002 for each in found)


def test_a_pharmacopoeias_least_mass_is_kept_to() -> None:
    # USP <41>, a+b: s = 0.15 mg, so 0.30 g
    scale = Scale("BAL3", 0.0001, least=0.30)
    found = design(0.05, 100, closeness=0.05, bench=Bench((scale,), SHELF))
    assert found
    assert all(each.steps[0].amount >= 0.30 for each in found)


def test_the_order_of_the_shelf_changes_nothing() -> None:
    forwards = design(0.176, 176, closeness=0.05, bench=BENCH)
    assert design(0.176, 176, closeness=0.05, bench=Bench((BAL1,), SHELF[::-1])) == forwards


def test_a_piece_there_twice_is_one_piece() -> None:
    twice = Bench((BAL1,), SHELF + SHELF)
    assert design(0.176, 176, closeness=0.02, bench=twice) == design(
        0.176, 176, closeness=0.02, bench=BENCH
    )


def test_the_worst_error_takes_every_fault_the_same_way() -> None:
    # recomputed: 0.500 ± 0.005 g into 500 ± 0.5 cm³
    step = Step(0.5, 500, BAL1, ware("flask", 500, "B"))
    assert worst_error([step], 0.001) == pytest.approx(0.505 / 499.5 / 0.001 - 1)


def test_a_tolerance_wider_than_a_mark_counts() -> None:
    wide: Ware = ware("flask", 50, "B")
    assert wide.error == 0.12


BAD: list[tuple[str, Callable[[], object]]] = [
    ("amount 0", lambda: design(0.0, 100, closeness=0.05, bench=BENCH)),
    ("amount nan", lambda: design(float("nan"), 100, closeness=0.05, bench=BENCH)),
    ("volume -1", lambda: design(0.1, -1, closeness=0.05, bench=BENCH)),
    ("closeness 0", lambda: design(0.1, 100, closeness=0.0, bench=BENCH)),
    ("closeness 5 ", lambda: design(0.1, 100, closeness=5.0, bench=BENCH)),
    ("200 cm³ of the stock", lambda: design(200, 100, closeness=0.1, bench=BENCH, liquid=True)),
]


@pytest.mark.parametrize(("said", "asked"), BAD)
def test_figures_that_are_none_are_refused(said: str, asked: Callable[[], object]) -> None:
    with pytest.raises(BadAmount, match=said):
        asked()
