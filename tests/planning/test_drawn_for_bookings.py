"""What was already drawn for a booking is had: its need shrinks by that much.

Also the faults a first user found: an order for what a bottle still gives on its
last good day, a batch rounded up beyond its jar, a class of more than a vessel.
"""

from __future__ import annotations

from houses import (
    answer,
    booking,
    bought_bottle,
    cm3,
    day,
    g,
    keeps,
    made_bottle,
    made_from,
    make_of,
    outcomes,
    pack,
    planned,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.rules import Origin
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.facts import Drawn, House, Per

DYE = solution(0.5, "dye")
SALT = solid(packs=(pack(g(250), 9.60),), rules=(keeps(60, Origin.RECEIVED),))


def plan_with(*drawn: int) -> Plan:
    """One class of 5 × 100 cm³ + 10 %; 30 cm³ stand there; so many cm³ were drawn for it."""
    return planned(
        [DYE],
        recipes=[recipe(wants(DYE, cm3(100), per=Per.GROUP))],
        bookings=[booking("K1", "01-19", groups=5, spare=100)],
        bottles=[made_bottle("S1", DYE, cm3(30))],
        drawn=tuple(Drawn("S1", DYE.key, day("01-18"), cm3(x), "K1") for x in drawn),
    )


def test_a_class_whose_amount_was_drawn_is_served() -> None:
    served = answer(plan_with(550), "K1.1")
    assert served.outcome is Outcome.HAVE
    assert any("550 cm³ of S1 already drawn for it 2027-01-18" in r for r in served.reasons)


def test_the_spare_need_not_be_drawn() -> None:
    assert outcomes(plan_with(500)) == {"K1.1": Outcome.HAVE}


def test_two_draws_add_up() -> None:
    assert outcomes(plan_with(300, 200)) == {"K1.1": Outcome.HAVE}


def test_what_is_missing_is_still_wanted() -> None:
    plan = plan_with(300)
    assert outcomes(plan) == {"K1.1": Outcome.SHORT}
    assert plan.short[0].amount == cm3(250)


def made_on_the_last_day(volume: int = 500, jar: float = 200, **more: object) -> Plan:
    """A class on 12 January; its salt is good through the 11th, the day it is made up."""
    return planned(
        [DYE, SALT],
        methods=[made_from(DYE, SALT)],
        recipes=[recipe(wants(DYE, cm3(volume)))],
        bookings=[booking("K1", "01-12")],
        bottles=[bought_bottle("B1", SALT, g(jar), "2026-11-12")],
        **more,
    )


def test_a_bottle_serves_on_its_last_good_day_and_nothing_is_ordered() -> None:
    plan = made_on_the_last_day()
    assert outcomes(plan) == {"K1.1": Outcome.MAKE}
    assert plan.orders == ()


def test_a_batch_is_not_rounded_up_beyond_its_jar() -> None:
    """352 cm³ of 0.5 takes 17.6 g; the jar holds 18; rounded to 400 it would want 20."""
    plan = made_on_the_last_day(352, 18, house=House(batch_step=cm3(50)))
    assert make_of(plan, DYE).volume == cm3(352)
    assert outcomes(plan) == {"K1.1": Outcome.MAKE}


def test_more_than_the_largest_vessel_is_made_in_two_and_said() -> None:
    plan = made_on_the_last_day(2000, house=House(batch_step=1, largest_vessel=cm3(1000)))
    made = make_of(plan, DYE)
    assert any("in 2 vessels of 1 000 cm³ at most" in reason for reason in made.reasons)
    assert made.minutes == 20
