"""An order is dated from whoever waits first, in a pack that comes in time, and shared fairly."""

from __future__ import annotations

from typing import Any

import pytest
from houses import (
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

from stockroom.planning.decisions import Order, Outcome, Plan
from stockroom.planning.facts import Booking, Firmness, House, Line, Pack

HALF = solution(0.5)
PENCILLED = Firmness.PENCILLED


def salted(*bookings: tuple[Booking, float], salt: Line, jar: float = 0, **more: Any) -> Plan:
    """The plan of bookings, each with its cm³ of 0.5 mol/dm³: 50 g of salt to the dm³."""
    line = more.pop("line", HALF)
    method = made_from(line, salt, **more.pop("method", {}))
    return planned(
        [salt, line], methods=[method],
        recipes=[recipe(wants(line, cm3(v)), code=one.recipe) for one, v in bookings],
        bookings=[one for one, _ in bookings],
        bottles=[bought_bottle("B1", salt, g(jar))] if jar else [], **more,
    )  # fmt: skip


def class_on(number: str, on: str, **more: Any) -> Booking:
    """A booking on a recipe of its own."""
    return booking(number, on, recipe=number, **more)


def order(made: Plan) -> Order:
    (one,) = made.orders
    return one


# -- the pack, and the day it comes ---------------------------------------------------


def test_an_order_that_can_wait_comes_its_lead_after_its_last_day_to_order() -> None:
    # made Tuesday 2 March, two open days before: Monday 1; three before that, Wednesday 24
    salt = solid(packs=(pack(g(500), 10, lead=3),))
    one = order(salted((class_on("K1", "03-03"), 100), salt=salt))
    assert (one.order_by, one.arrives) == (day("02-24"), day("03-01"))


CHEAP, DEAR = pack(g(500), 5, lead=11), pack(g(500), 9, lead=3)


@pytest.mark.parametrize(
    ("on", "chosen"),
    # eleven open days from Monday 4 January is Tuesday 19, the day it is made up for the 20th
    [("01-19", DEAR), ("01-20", CHEAP)],
)
def test_the_cheapest_of_the_packs_that_come_in_time(on: str, chosen: Pack) -> None:
    made = salted((class_on("K1", on), 100), salt=solid(packs=(CHEAP, DEAR)))
    assert order(made).pence == chosen.pence
    assert outcomes(made) == {"K1.1": Outcome.BUY}


def test_the_first_of_those_that_wait_settles_which_packs_come_in_time() -> None:
    row = (class_on("K1", "01-14"), 100), (class_on("K2", "03-10"), 100)
    short_lived = solution(0.5, rules=(keeps(7),))
    made = salted(*row, salt=solid(packs=(CHEAP, DEAR)), line=short_lived)
    assert [make.bookings for make in made.makes] == [("K1",), ("K2",)]
    assert order(made).pence == DEAR.pence


def test_a_pack_without_a_lead_time_comes_when_the_house_assumes() -> None:
    unknown = pack(g(500), 5, lead=None)
    made = salted((class_on("K1", "01-15"), 100), salt=solid(packs=(unknown, DEAR)))
    assert order(made).pence == DEAR.pence
    quick = House(batch_step=cm3(1), default_lead=4)
    made = salted((class_on("K1", "01-15"), 100), salt=solid(packs=(unknown, DEAR)), house=quick)
    assert order(made).pence == unknown.pence


def test_where_nobody_waits_the_cheapest_pack_fills_the_level() -> None:
    salt = solid(packs=(CHEAP, DEAR), level=g(100))
    made = salted((class_on("K1", "01-06"), 100), salt=salt, jar=102)
    assert outcomes(made) == {"K1.1": Outcome.MAKE}
    assert order(made).pence == CHEAP.pence


@pytest.mark.parametrize("packs", [(CHEAP, DEAR), (DEAR, CHEAP)])
def test_the_shortest_lead_decides_whether_it_can_be_had(packs: tuple[Pack, ...]) -> None:
    made = salted((class_on("K1", "01-14"), 100), salt=solid(packs=packs))
    assert outcomes(made) == {"K1.1": Outcome.BUY}
    assert make_of(made, HALF).earliest == day("01-07")


# -- the need it is dated from --------------------------------------------------------


def test_a_need_the_shelf_serves_does_not_date_the_order() -> None:
    row = (class_on("K1", "02-02"), 100), (class_on("K2", "03-02"), 100)
    assert order(salted(*row, salt=solid(packs=(DEAR,)), jar=5)).need_by == day("03-02")


@pytest.mark.parametrize("jar", [0, 10])
def test_an_earlier_pencilled_need_that_waits_dates_the_order(jar: float) -> None:
    # with a jar of 10 g the firm class takes it all in March, and falls below the level then
    row = (class_on("K1", "02-02", firmness=PENCILLED), 100), (class_on("K2", "03-02"), 200)
    salt = solid(packs=(DEAR,), level=g(5))
    made = salted(*row, salt=salt, jar=jar)
    assert order(made).need_by == day("02-02")
    assert order(made).for_bookings == ("K1", "K2")


def test_an_order_is_dated_from_whatever_must_be_started_first() -> None:
    # the slow one for Friday 12 February starts Friday 5, the quick one for Thursday on Wednesday
    salt, slow = solid(packs=(DEAR,)), solution(0.25, "slow")
    made = planned(
        [salt, HALF, slow], methods=[made_from(HALF, salt), made_from(slow, salt, stands_hours=96)],
        recipes=[recipe(wants(HALF, cm3(100))), recipe(wants(slow, cm3(100)), code="R02")],
        bookings=[booking("K1", "02-11"), booking("K2", "02-12", recipe="R02")],
    )  # fmt: skip
    assert (order(made).need_by, order(made).order_by) == (day("02-11"), day("02-02"))
    assert order(made).arrives == make_of(made, slow).on == day("02-05")


def test_for_a_booking_on_a_saturday_the_order_still_comes_before_the_make() -> None:
    made = salted(
        (class_on("K1", "02-13"), 100), salt=solid(packs=(DEAR,)), method={"stands_hours": 96.0}
    )
    assert order(made).arrives == make_of(made, HALF).on == day("02-08")


def test_a_need_that_is_missed_does_not_let_the_slow_pack_serve_the_next() -> None:
    row = (class_on("K1", "01-05"), 100), (class_on("K2", "01-14"), 100)
    made = salted(*row, salt=solid(packs=(CHEAP, DEAR)))
    assert outcomes(made) == {"K1.1": Outcome.SHORT, "K2.1": Outcome.BUY}
    assert (order(made).pence, order(made).arrives) == (DEAR.pence, day("01-07"))


# -- what a smallest batch forces, shared -----------------------------------------------


LEAST: dict[str, Any] = {"method": {"smallest_batch": cm3(800)}}


def test_what_a_smallest_batch_forces_is_bought_and_paid_in_proportion() -> None:
    # 15 and 5 g, and 20 g more that nobody asked for: two packs of 25 g
    row = (
        (class_on("K1", "02-09", department="CH"), 300),
        (class_on("K2", "02-09", department="BI"), 100),
    )
    one = order(salted(*row, salt=solid(packs=(pack(g(25), 10),)), **LEAST))
    assert (one.packs, one.shares) == (2, (("BI", 500), ("CH", 1500)))


@pytest.mark.parametrize(("level", "said"), [(75, "K1; 70 g"), (65, "K2; 60 g")])
def test_what_a_smallest_batch_forces_runs_the_jar_down_in_proportion(
    level: float, said: str
) -> None:
    # of 40 g the first class takes 15 and 15 of the forced 20, the second 5 and 5
    row = (class_on("K1", "02-09"), 300), (class_on("K2", "02-10"), 100)
    made = salted(*row, salt=solid(packs=(DEAR,), level=g(level)), jar=100, **LEAST)
    assert said in order(made).reasons[0]


@pytest.mark.parametrize(("level", "orders"), [(84.5, 0), (84.6, 1)])
def test_rounding_a_batch_up_does_not_run_the_jar_down(level: float, orders: int) -> None:
    # 310 cm³ take 15.5 g of 100; the batch of 400 cm³ weighs 20
    rounded = House(batch_step=cm3(100))
    salt = solid(packs=(DEAR,), level=g(level))
    made = salted((class_on("K1", "02-09"), 310), salt=salt, jar=100, house=rounded)
    assert make_of(made, HALF).sources[0].amount == g(20)
    assert len(made.orders) == orders


# -- levels by the day of the booking ---------------------------------------------------


ACID, WEAK_ACID = solution(2.0, "acid", level=cm3(1000)), solution(1.0, "acid")


def test_a_level_falls_on_the_day_of_the_booking_and_not_of_the_make() -> None:
    # 1 900 cm³ less 500 a class: it is the later class that goes below, firm though it is
    bookings = [booking("K1", "01-12", firmness=PENCILLED), booking("K2", "02-12")]
    neat = solid("neat")
    made = planned(
        [ACID, WEAK_ACID, neat], methods=[made_from(ACID, neat), made_from(WEAK_ACID, ACID)],
        recipes=[recipe(wants(WEAK_ACID, cm3(1000)))], bookings=bookings,
        bottles=[made_bottle("S4", ACID, cm3(1900))],
    )  # fmt: skip
    (level,) = made.levels
    assert (level.on, level.left) == (day("02-12"), cm3(900))


@pytest.mark.parametrize(("held", "told"), [(99.9, 1), (100, 0)])
def test_what_nobody_draws_on_may_stand_below_its_level_today(held: float, told: int) -> None:
    salt = solid(level=g(100))
    made = planned([salt], bottles=[bought_bottle("B1", salt, g(held))])
    assert [level.on for level in made.levels] == [day("01-04")] * told
