"""What a make's liquids are measured with, and the way out where nothing is fine enough.

0.35 cm³, a usual case of the trade, and tolerances of the ISO tables in `chemistry/glassware.py`.
"""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    house,
    keeps,
    made_bottle,
    made_from,
    make_of,
    recipe,
    solution,
    wants,
)
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.glassware import Ware, ware
from stockroom.planning.decisions import Make
from stockroom.planning.facts import Closeness, Facts, Glass, House, Ingredient
from stockroom.planning.making.glass import best, nearest, vessel_for
from stockroom.planning.plan import plan

STOCK = solution(10.0, "stock")
WEAK = solution(0.1, "weak")

FINE = Glass("1 cm³ graduated pipette", "graduated pipette", cm3(1), "B", cm3(0.01))
COARSE = Glass("10 cm³ graduated pipette", "graduated pipette", cm3(10), "B", cm3(0.1))
CYLINDER = Glass("100 cm³ cylinder", "cylinder", cm3(100), "B", cm3(1))
BULB = Glass("10 cm³ bulb pipette", "pipette", cm3(10), "B")
FLASKS = tuple(Glass(f"{n} cm³ flask", "flask", cm3(n), "B") for n in (50, 100, 250, 1000))
ALL = (FINE, COARSE, CYLINDER, BULB, *FLASKS)


def diluted(volume: float, *glass: Glass, tolerance: float = 0.05, **more: Any) -> Facts:
    """A class wants `volume` cm³ of WEAK, a hundredth as strong as the STOCK it is made from."""
    weak = replace(WEAK, rules=more.pop("rules", ()))
    known = house(
        [STOCK, weak],
        methods=[made_from(weak, STOCK)],
        recipes=[recipe(wants(weak, cm3(volume), tolerance=tolerance))],
        bookings=[booking("K1", "01-12")],
        bottles=[bought_bottle("B01", STOCK, cm3(1000))],
    )
    return replace(known, glassware=glass, **more)


def made(facts: Facts) -> Make:
    return make_of(plan(facts), WEAK)


def said(facts: Facts) -> str:
    return "; ".join(made(facts).reasons)


# -- what it is measured with ---------------------------------------------------------


def test_a_small_draw_names_its_pipette_and_how_near_that_comes() -> None:
    # one mark of 0.01 on 0.754 is 1.33 %
    fine_steps = diluted(75.4, *ALL, house=House(batch_step=cm3(0.1)))
    assert "0.754 cm³ of B01: 1 cm³ graduated pipette, ±1.3 %" in said(fine_steps)


def test_a_third_of_a_cubic_centimetre_passes_to_five_per_cent_and_not_to_two() -> None:
    # worked out by hand: one mark of 0.01 on 0.35 is 2.9 %
    assert made(diluted(35, *ALL)).too_little == ()
    (poor,) = made(diluted(35, *ALL, tolerance=0.02)).too_little
    assert poor.startswith("0.35 cm³ of B01: nothing here measures it to 2 %")
    assert "nearest 1 cm³ graduated pipette, ±2.9 %" in poor


def test_a_piece_that_is_away_is_not_used_and_said() -> None:
    away = replace(FINE, away=((day("01-01"), day("01-31")),))
    told = said(diluted(240, away, COARSE, *FLASKS))
    assert "2.4 cm³ of B01: 10 cm³ graduated pipette, ±4.2 %" in told
    assert "(1 cm³ graduated pipette is away)" not in told
    told = said(diluted(120, away, COARSE, *FLASKS, tolerance=0.1))
    assert "1.2 cm³ of B01: 10 cm³ graduated pipette, ±8.3 %" in told


def test_the_piece_that_would_have_been_used_is_named_where_it_is_away() -> None:
    away = replace(FINE, away=((day("01-01"), day("01-31")),))
    told = said(diluted(90, away, COARSE, *FLASKS, tolerance=0.2))
    assert "10 cm³ graduated pipette, ±11 % (1 cm³ graduated pipette is away)" in told


def test_with_all_of_it_away_that_is_said() -> None:
    away = replace(COARSE, away=((day("01-01"), day("01-31")),))
    (poor,) = made(diluted(500, away, *FLASKS)).too_little
    assert "(no pipette, burette or cylinder that day)" in poor


@pytest.mark.parametrize("glass", [(), FLASKS, (Glass("odd", "cylinder", cm3(7)),)])
def test_a_house_that_wrote_down_nothing_to_measure_with_is_told_nothing(
    glass: tuple[Glass, ...],
) -> None:
    found = made(diluted(35, *glass, tolerance=0.02))
    assert found.too_little == ()
    assert "cm³ of B01:" not in "; ".join(found.reasons)


def test_what_it_is_made_up_in_is_not_measured() -> None:
    acid = solution(0.5, "acid")
    salt = made_from(WEAK, STOCK, Ingredient((acid.key,), cm3(1000), role="acid"))
    bottles = (bought_bottle("B01", STOCK, cm3(99)), made_bottle("S1", acid, cm3(999)))
    facts = diluted(400, *ALL, bottles=bottles)
    facts = replace(facts, lines={**facts.lines, acid.key: acid}, methods={WEAK.key: salt})
    told = said(facts)
    assert "4 cm³ of B01:" in told
    assert "of S1:" not in told


def test_each_vessel_has_its_own_share_measured_in() -> None:
    facts = diluted(1600, *ALL, house=House(batch_step=cm3(1), largest_vessel=cm3(800)))
    assert "2 × 8 cm³ of B01: 10 cm³ graduated pipette, ±1.2 %" in said(facts)


def test_an_exact_line_whose_true_strength_is_told_may_be_off_by_as_much() -> None:
    need = wants(WEAK, cm3(400), closeness=Closeness.EXACT, may_differ=0.05)
    facts = replace(diluted(400, *ALL), recipes={("R01", 1): recipe(need)})
    assert made(facts).too_little == ()


# -- the way out ----------------------------------------------------------------------


def test_what_keeps_is_made_larger() -> None:
    (poor,) = made(diluted(35, *ALL, tolerance=0.02)).too_little
    # 0.7 cm³ in 70 would do, and the next flask holds 100 and takes a whole one
    assert poor.endswith("make more: 1 cm³ (1 cm³ graduated pipette) to 100 cm³")


def test_what_does_not_keep_goes_through_an_intermediate() -> None:
    facts = diluted(100, COARSE, BULB, *FLASKS, tolerance=0.02, rules=(keeps(0),))
    (poor,) = made(facts).too_little
    assert poor.endswith(
        "through an intermediate: 10 cm³ (10 cm³ bulb pipette) to 100 cm³, "
        "then 10 cm³ (10 cm³ bulb pipette) of that to 100 cm³"
    )


def test_where_no_glass_will_do_that_is_said() -> None:
    (poor,) = made(diluted(35, CYLINDER, *FLASKS, tolerance=0.005)).too_little
    assert poor.endswith("wants a weaker stock, or finer glass")


@pytest.mark.parametrize("tolerance", [0.02, 0.005])
def test_nothing_is_made_larger_for_it(tolerance: float) -> None:
    found = made(diluted(35, *ALL, tolerance=tolerance))
    assert (found.volume, found.heel) == (cm3(35), 0)
    assert found.too_little[0] in "; ".join(found.reasons)


# -- choosing among the glass ---------------------------------------------------------

CUPBOARD = [
    ware("pipette", 10, "B", name="bulb"),
    ware("graduated pipette", 10, "B", step=0.1, name="graduated"),
    ware("burette", 50, "B", step=0.1, name="burette"),
    ware("cylinder", 10, "B", step=0.2, name="small"),
    ware("cylinder", 100, "B", step=1, name="large"),
    ware("flask", 100, "B", name="flask"),
]


@pytest.mark.parametrize(
    ("volume", "closeness", "piece", "fills"),
    [
        (10, 0.01, "bulb", 1),
        (30, 0.004, "burette", 1),
        (9, 0.05, "graduated", 1),
        # a cylinder does it with ease, and nobody fills a burette with the strong acid
        (80, 0.2, "large", 1),
        (60, 0.01, "burette", 2),
        (95, 0.06, "large", 1),
    ],
)
def test_the_handiest_piece_that_is_close_enough(
    volume: float, closeness: float, piece: str, fills: int
) -> None:
    found = best(CUPBOARD, volume, closeness)
    assert found is not None
    assert (found.piece.name, found.fills) == (piece, fills)


@given(st.floats(0.05, 900), st.floats(0.001, 0.5))
def test_what_is_chosen_is_close_enough_and_a_bulb_gives_whole_bulbs(
    volume: float, closeness: float
) -> None:
    found = best(CUPBOARD, volume, closeness)
    if found is None:
        near = nearest(CUPBOARD, volume)
        assert near is None or near.part > closeness
        return
    assert found.part <= closeness * (1 + 1e-6)
    assert found.fills * found.piece.size >= volume * (1 - 1e-6)
    if found.piece.kind.one_mark:
        assert found.fills * found.piece.size == pytest.approx(volume)


def test_the_order_the_glass_was_written_down_in_changes_nothing() -> None:
    one, other = best(CUPBOARD, 30, 0.05), best(CUPBOARD[::-1], 30, 0.05)
    assert one == other


@pytest.mark.parametrize(
    ("volume", "piece", "fills"), [(100, "flask", 1), (80, "large", 1), (250, "large", 3)]
)
def test_it_is_made_up_in_a_flask_of_that_size_or_a_cylinder(
    volume: float, piece: str, fills: int
) -> None:
    found = vessel_for(CUPBOARD, volume)
    assert found is not None
    assert (found.piece.name, found.fills) == (piece, fills)


def test_with_nothing_there_is_nothing() -> None:
    empty: list[Ware] = []
    assert (best(empty, 1, 0.1), nearest(empty, 1), vessel_for(empty, 1)) == (None, None, None)
