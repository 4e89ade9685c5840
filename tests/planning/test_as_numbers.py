"""What the planner of batches is told: windows, shares and values, as a person would work them."""

from __future__ import annotations

from dataclasses import replace

from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    g,
    house,
    keeps,
    made_from,
    outcomes,
    pack,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.lots.model import Problem
from stockroom.planning.amounts import price
from stockroom.planning.decisions import Outcome
from stockroom.planning.facts import Balance, Facts, Ingredient
from stockroom.planning.making.as_numbers import as_numbers, share_of
from stockroom.planning.making.groups import grouped
from stockroom.planning.plan import plan
from stockroom.planning.settle import needs_of, settled

SALT = solid(packs=(pack(g(500), 10.00),))
STOCK = solution(1.0, rules=(keeps(14),))
DILUTE = solution(0.1, rules=(keeps(7),))
METHODS = (made_from(STOCK, SALT, minutes=20), made_from(DILUTE, STOCK, minutes=10))
JAR = bought_bottle("B01", SALT, g(500))


def stated(facts: Facts) -> Problem:
    netted, _ = settled(facts, needs_of(facts))
    return as_numbers(facts, grouped(facts, netted.wants), netted.shelf).problem


def two_levels(**more: object) -> Facts:
    """K01 asks for 500 cm³ of the dilution on Wednesday 20 January."""
    return house(
        [SALT, STOCK, DILUTE],
        methods=METHODS,
        recipes=[recipe(wants(DILUTE, cm3(500)))],
        bookings=[booking("K01", "01-20")],
        bottles=[JAR],
        **more,
    )


def test_a_demand_may_be_made_from_when_it_keeps_to_the_open_day_before() -> None:
    (demand,) = stated(two_levels()).demands
    assert demand.volume == 500
    # good for seven days: from Wednesday 13 January, and done by Tuesday
    assert (demand.first, demand.last, demand.use) == (9, 15, 16)


def test_products_come_before_what_they_are_made_from() -> None:
    problem = stated(two_levels())
    assert [sort.name for sort in problem.sorts] == [DILUTE.key, STOCK.key]
    (part,) = problem.sorts[0].parts
    assert (part.sort, part.share) == (1, 0.1)


def test_a_part_may_be_made_from_when_it_keeps_to_the_same_day() -> None:
    (part,) = stated(two_levels()).sorts[0].parts
    # on Friday 15 January, day 11: fourteen days back is before today, and the morning will do
    assert (part.first[11], part.last[11]) == (0, 11)
    # a Saturday: nobody is there to start anything
    assert (part.first[12], part.last[12]) == (-1, -1)


def test_what_waits_for_a_delivery_cannot_be_made_before_it() -> None:
    slow = replace(SALT, packs=(pack(g(500), 10.00, lead=8),))
    facts = house(
        [slow, STOCK, DILUTE],
        methods=METHODS,
        recipes=[recipe(wants(DILUTE, cm3(500)))],
        bookings=[booking("K01", "01-20")],
    )
    problem = stated(facts)
    # ordered today it comes on Thursday 14 January, day 10
    assert problem.demands[0].first == 10
    assert problem.sorts[0].parts[0].first[11] == 10


def test_the_house_s_minutes_a_day_are_the_limit() -> None:
    facts = two_levels()
    assert stated(facts).limit == 300
    assert stated(replace(facts, house=replace(facts.house, day_minutes=0))).limit is None


def test_the_days_of_the_plan_kept_last_are_told() -> None:
    facts = replace(two_levels(), usual={STOCK.key: (day("01-11"),)})
    assert stated(facts).sorts[1].usual == frozenset({7})


def test_a_share_goes_by_nominal_strengths_unless_the_recipe_gives_it() -> None:
    assert share_of(STOCK, DILUTE, Ingredient((STOCK.key,))) == 0.1
    assert share_of(STOCK, DILUTE, Ingredient((STOCK.key,), per_dm3=250_000)) == 0.25


def test_a_volume_is_worth_what_its_cheapest_pack_would_cost() -> None:
    facts = two_levels()
    # 100 g/mol at £10 for 500 g: 2 p/g, so 0.2 p for a cm³ of 1 mol/dm³ and a tenth of that
    assert round(1000 * price(facts, STOCK), 9) == 0.2
    assert round(1000 * price(facts, DILUTE), 9) == 0.02


def test_what_does_not_keep_is_dearer_to_throw_away() -> None:
    fresh = solution(0.1, rules=(keeps(0),))
    facts = house(
        [SALT, fresh],
        methods=[made_from(fresh, SALT)],
        recipes=[recipe(wants(fresh, cm3(500), fresh=True))],
        bookings=[booking("K01", "01-20")],
        bottles=[JAR],
    )
    (sort,) = stated(facts).sorts
    assert round(sort.waste, 9) == 0.001 + 0.02 / 25
    assert stated(two_levels()).sorts[0].waste == 0.001


def test_one_need_alone_is_a_sort_of_its_own() -> None:
    facts = house(
        [SALT, STOCK],
        methods=METHODS[:1],
        recipes=[recipe(wants(STOCK, cm3(500)))],
        bookings=[booking("K01", "01-20"), booking("K02", "01-21")],
        bottles=[JAR],
    )
    netted, _ = settled(facts, needs_of(facts))
    assert len(grouped(facts, netted.wants)) == 1
    assert len(grouped(facts, netted.wants, frozenset({"K02.1"}))) == 2


def test_what_is_weighed_is_made_on_a_day_with_a_balance() -> None:
    away = (day("01-19"), day("01-19"))
    facts = house(
        [SALT, STOCK],
        methods=METHODS[:1],
        recipes=[recipe(wants(STOCK, cm3(500)))],
        bookings=[booking("K01", "01-20")],
        bottles=[JAR],
        balances=(Balance("BAL1", 10_000, (away,)),),
    )
    (make,) = plan(facts).makes
    assert make.on == day("01-18")


def test_nobody_waits_for_what_another_class_has_to_buy() -> None:
    # 90 g in hand are all the first class wants and a part of the second's
    facts = house(
        [SALT, STOCK],
        methods=METHODS[:1],
        recipes=[recipe(wants(STOCK, cm3(600)))],
        bookings=[booking("K01", "01-20"), booking("K02", "01-21")],
        bottles=[bought_bottle("B01", SALT, g(90))],
    )
    made = plan(facts)
    assert outcomes(made) == {"K01.1": Outcome.MAKE, "K02.1": Outcome.BUY}


def test_what_is_never_kept_is_mixed_for_each_sitting() -> None:
    silver = solution(0.1, never_kept="it becomes explosive")
    facts = house(
        [SALT, silver],
        methods=[made_from(silver, SALT)],
        recipes=[recipe(wants(silver, cm3(100)))],
        bookings=[booking("K01", "01-20", 555), booking("K02", "01-20", 800)],
        bottles=[JAR],
    )
    assert [make.bookings for make in plan(facts).makes] == [("K01",), ("K02",)]
