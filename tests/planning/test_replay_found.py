"""What the replay has found of the planner, each as the smallest house that shows it.

A mark says that the planner is still to be mended; once it is, the mark must go.
"""

from __future__ import annotations

from dataclasses import replace
from typing import Any

from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    found,
    g,
    house,
    made_bottle,
    made_from,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.rules import Law, Rule, RuleKind
from stockroom.planning.decisions import Make
from stockroom.planning.facts import Balance, Closeness, Facts, House, Ingredient, Vessel
from stockroom.planning.plan import plan
from stockroom.planning.replaying.replay import Broken, replay

SALT = solid()
JAR = bought_bottle("B1", SALT, g(500), opened=day("01-04"))
FIFTH = solution(0.2, "fifth")


def test_a_make_that_fades_before_it_is_diluted_gives_more() -> None:
    """1.00 mol/dm³ made on 12 January holds 0.92 on 1 February: 108 cm³ are as 100 were."""
    fading = solution(1.0, "stock", rules=(Rule(RuleKind.FADES, law=Law(1, 0.004)),))
    known = house(
        [SALT, fading, FIFTH],
        methods=[made_from(fading, SALT, minutes=60), made_from(FIFTH, fading)],
        recipes=[recipe(wants(FIFTH, cm3(500), freshest_days=2))],
        bookings=[booking("K1", "01-13"), booking("K2", "02-01")],
        bottles=[JAR],
    )
    assert replay(known, plan(known)) == ()


def test_a_millionth_of_a_litre_of_rounding_is_nothing_to_buy() -> None:
    stock = solution(1.0, "stock")
    checked = found("01-04", 1.03)
    held = Ingredient((stock.key, SALT.key), only_if_held=frozenset({stock.key}))
    known = house(
        [SALT, stock, FIFTH],
        methods=[made_from(FIFTH, held)],
        recipes=[
            recipe(wants(FIFTH, cm3(140)), code="R1"),
            recipe(wants(FIFTH, cm3(540)), code="R2"),
            recipe(wants(stock, cm3(480), closeness=Closeness.PRESENT), code="R3"),
        ],
        bookings=[
            booking("K1", "01-12", recipe="R1"),
            booking("K2", "01-13", recipe="R2"),
            booking("K3", "02-15", recipe="R3"),
        ],
        bottles=[
            JAR,
            made_bottle("S1", stock, cm3(400), checks=(checked,)),
            made_bottle("S2", stock, cm3(400), checks=(checked,)),
        ],
    )
    assert replay(known, plan(known)) == ()


# -- too little to weigh, when all is settled --------------------------------------------

COARSE = Balance("BAL1", g(0.1))


def weighed(left: float, volume: float, **more: Any) -> tuple[Facts, Make]:
    """A house where so many cm³ at 0.200 mol/dm³ are made to 1 % from a jar: 10 g is the least."""
    method = made_from(FIFTH, SALT, **more.pop("method", {}))
    known = house(
        [SALT, FIFTH],
        methods=[method],
        recipes=[recipe(wants(FIFTH, cm3(volume), tolerance=0.01))],
        bookings=[booking("K1", "01-12")],
        bottles=[bought_bottle("B1", SALT, g(left), opened=day("01-04"))],
        **{"balances": (COARSE,), **more},
    )
    (made,) = plan(known).makes
    return known, made


def test_a_batch_that_shrinks_to_what_the_jar_holds_says_what_else_to_do() -> None:
    """10 g in 500 cm³ can be weighed; the jar holds 5 g, which is all that is made up."""
    known, made = weighed(5, 200)
    way = "4 g of salt is too little to weigh: borrow a finer balance, since one step of BAL1"
    assert made.too_little == (f"{way} is 2.5 % of it",)
    assert made.too_little[0] in "; ".join(made.reasons)
    assert replay(known, plan(known)) == ()


def test_a_batch_the_houses_step_made_heavy_enough_says_so_when_it_is_not() -> None:
    """Rounded up to 500 cm³ it could be weighed, and no rule was broken until the jar ran out."""
    known, made = weighed(9.5, 460, house=House(batch_step=cm3(250)))
    assert made.volume == cm3(460)
    assert made.too_little[0].startswith("9.2 g of salt is too little to weigh: borrow")
    assert replay(known, plan(known)) == ()


def test_a_batch_in_several_vessels_is_weighed_once_where_each_is_too_little() -> None:
    known, made = weighed(500, 800, vessels=(Vessel("V1", cm3(400)),))
    way = "weigh 16 g once, dissolve it and share it out among the 2 vessels"
    assert made.too_little == (f"8 g of salt is too little to weigh: {way}",)
    assert replay(known, plan(known)) == ()
    # 10 g for each of two can be weighed, and a thousandth less by rounding alone is as good
    known, made = weighed(500, 1000, vessels=(Vessel("V1", cm3(500)),))
    assert (made.vessels, made.too_little) == (2, ())


def test_with_every_balance_away_a_batch_made_to_the_exact_need_says_so_too() -> None:
    away = replace(COARSE, away=((day("01-04"), day("03-26")),))
    known, made = weighed(500, 200, balances=(away,))
    assert (made.reasons.count("No balance that day"), made.too_little) == (1, ())
    assert replay(known, plan(known)) == ()
    assert too_light(known, replace(made, reasons=()))


def test_a_vessel_bounds_a_batch_when_the_house_has_no_word_on_it() -> None:
    """All are away, and none of them would hold a litre: it is made in two, and noted."""
    away = ((day("01-04"), day("03-26")),)
    vessels = (Vessel("V2", cm3(250), away), Vessel("V1", cm3(500), away))
    known, made = weighed(500, 1000, balances=(), vessels=vessels)
    assert known.house.largest_vessel is None
    assert made.vessels == 2
    assert replay(known, plan(known)) == ()


def too_light(known: Facts, made: Make) -> bool:
    """Whether the replay sees something that cannot be weighed in the plan with this make."""
    faults = replay(known, replace(plan(known), makes=(made,)))
    return Broken.WEIGHED in {fault.rule for fault in faults}


def test_words_of_a_larger_batch_do_not_excuse_one_too_small() -> None:
    """What is said to be made instead must have been made."""
    known, made = weighed(500, 200)
    assert "instead" in "; ".join(made.reasons)
    assert not too_light(known, made)
    (source,) = made.sources
    assert too_light(known, replace(made, sources=(replace(source, amount=g(4)),)))
