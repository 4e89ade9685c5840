"""An order that should have gone off already says what to do, in order of trouble, with days."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    g,
    keeps,
    made_from,
    pack,
    planned,
    recipe,
    solid,
    solution,
    wants,
)
from hypothesis import given, settings
from hypothesis import strategies as st

from stockroom.keeping.rules import Origin
from stockroom.planning.decisions import Instead, Order, Outcome, Plan
from stockroom.planning.facts import Swap

SALT = solid(packs=(pack(g(100), 9.60),))
OTHER = solid("other salt", packs=(pack(g(100), 5.0),))
HALF = solution(0.5)
SWAP = Swap(HALF.key, OTHER.key, 1.2, "smells")


def late(on: str = "01-12", *, swaps: tuple[Swap, ...] = (), held: float = 0, **more: Any) -> Plan:
    """50 g wanted for a class, nothing here, ten open days to come: on Monday 18 January."""
    return planned(
        [SALT, OTHER, HALF], methods=[made_from(HALF, SALT, **more)],
        recipes=[recipe(wants(HALF, cm3(1000)), swaps=swaps)], bookings=[booking("K1", on)],
        bottles=[bought_bottle("B9", OTHER, g(held))] if held else [],
    )  # fmt: skip


def ways(made: Plan) -> tuple[Instead, ...]:
    (order,) = made.orders
    return order.instead


def test_in_order_of_trouble_each_with_its_day() -> None:
    row = ways(late(swaps=(SWAP,)))
    assert [(way.what, way.on, way.booking) for way in row] == [
        ("swap", day("01-11"), "K1"),
        ("borrow", day("01-11"), "K1"),
        ("run without", day("01-11"), "K1"),
        ("another day", day("01-19"), "K1"),
    ]
    assert row[1].text == "borrow 50 g of salt by 2027-01-11 for K1"


def test_a_swap_says_how_much_and_whether_it_is_here() -> None:
    here = ways(late(swaps=(SWAP,), held=75))[0]
    assert here.text == "take 60 g of other salt for K1 (smells): 75 g here, wanted by 2027-01-11"
    away = ways(late(swaps=(SWAP,)))[0]
    assert "none here, so borrow it by 2027-01-11; ordered today it comes 2027-01-18" in away.text


def test_a_swap_the_recipe_does_not_allow_is_not_offered() -> None:
    other = replace(SWAP, line="something else")
    assert "swap" not in {way.what for way in ways(late(swaps=(other,), held=75))}


def test_a_factor_nobody_wrote_gives_no_amount() -> None:
    told = ways(late(swaps=(replace(SWAP, factor=None),), held=75))[0].text
    assert told.startswith("take other salt for K1")


def test_the_next_day_counts_the_making_and_the_standing() -> None:
    # in hand on Monday 18 January; four days' standing end on Friday, so Monday the 25th
    assert ways(late())[-1].on == day("01-19")
    assert ways(late(stands_hours=96.0))[-1].on == day("01-25")


def test_late_and_still_in_time_says_only_to_order_today() -> None:
    # in hand on the 18th, the day of the make: short of the margin, not of the stuff
    made = late("01-19")
    (way,) = ways(made)
    assert made.needs[0].outcome is Outcome.BUY
    assert (way.what, way.on) == ("order today", day("01-04"))
    assert way.text == "order today: it comes 2027-01-18, the day it is wanted"


def test_in_time_nothing_is_said() -> None:
    assert ways(late("02-10")) == ()


@settings(max_examples=40)
@given(st.integers(0, 25), st.integers(1, 15), st.integers(0, 4))
def test_the_day_offered_really_will_do(ahead: int, lead: int, stands: int) -> None:
    """The class held on the day offered has what it needs; a class any sooner has not."""
    salt = replace(SALT, packs=(pack(g(100), 9.60, lead),))

    def held_on(on: str) -> Plan:
        return planned(
            [salt, HALF], methods=[made_from(HALF, salt, stands_hours=24.0 * stands)],
            recipes=[recipe(wants(HALF, cm3(1000)))], bookings=[booking("K1", on)],
        )  # fmt: skip

    first = day("01-04").toordinal() + ahead
    made = held_on(day("01-04").fromordinal(first).isoformat())
    moved = [way.on for order in made.orders for way in order.instead if way.what == "another day"]
    for on in moved:
        assert held_on(on.isoformat()).needs[0].outcome is Outcome.BUY
        assert held_on(made.needs[0].booking.on.isoformat()).needs[0].outcome is Outcome.SHORT


# -- leave to be asked first ----------------------------------------------------------


def asking(days: int, on: str = "02-10", first: str = "the head of science") -> Order:
    salt = replace(SALT, ask_first=first, ask_days=days)
    made = planned(
        [salt, HALF], methods=[made_from(HALF, salt)], recipes=[recipe(wants(HALF, cm3(1000)))],
        bookings=[booking("K1", on)],
    )  # fmt: skip
    (order,) = made.orders
    return order


def test_leave_moves_the_order_by_day_earlier_and_says_so() -> None:
    assert asking(0).order_by == day("01-25")
    assert asking(5).order_by == day("01-18")
    assert (
        "ask first: the head of science; that takes 5 open days, "
        "so order by 2027-01-18 and not 2027-01-25"
    ) in asking(5).reasons


def test_leave_counts_towards_the_day_it_comes() -> None:
    # ten open days' lead and five of asking from Monday 4 January
    assert asking(5, "01-12").arrives == day("01-25")


def test_leave_nobody_is_named_for_still_takes_its_days() -> None:
    assert any("leave is needed" in reason for reason in asking(1, first="").reasons)


# -- not to throw away ----------------------------------------------------------------


def lapsing(life: int, *packs: float, days: tuple[str, ...] = ("01-26", "03-16")) -> Order:
    """50 g for each class of a salt that keeps so many days from the day it comes."""
    salt = solid(
        rules=(keeps(life, Origin.RECEIVED),), packs=tuple(pack(g(n), n / 10) for n in packs)
    )
    # made anew for each class, or all of the salt would be used at once
    half = solution(0.5, rules=(keeps(2),))
    made = planned(
        [salt, half], methods=[made_from(half, salt)], recipes=[recipe(wants(half, cm3(1000)))],
        bookings=[booking(f"K{n}", on) for n, on in enumerate(days, 1)],
    )  # fmt: skip
    (order,) = made.orders
    return order


def test_what_is_used_before_it_lapses_is_not_queried() -> None:
    assert not lapsing(120, 100).queried
    assert lapsing(120, 100).keeps_until is not None


def test_an_order_half_of_which_would_lapse_is_queried_and_split() -> None:
    order = lapsing(30, 60, days=("01-26", "03-09", "03-16"))
    assert order.queried
    first, second = order.deliveries
    assert (first.packs, first.amount, first.need_by) == (1, g(60), day("01-26"))
    assert (second.packs, second.amount, second.need_by) == (2, g(120), day("03-09"))
    assert (first.order_by, second.order_by) == (day("01-08"), day("02-19"))
    assert any("split it into 2 deliveries?" in reason for reason in order.reasons)


def test_where_no_smaller_pack_is_sold_that_is_said() -> None:
    order = lapsing(30, 500)
    assert (order.queried, order.deliveries) == (True, ())
    assert any("no smaller pack is entered" in reason for reason in order.reasons)


def test_what_nobody_dates_is_never_queried() -> None:
    salt = solid(packs=(pack(g(500), 5),))
    made = planned(
        [salt, HALF], methods=[made_from(HALF, salt)], recipes=[recipe(wants(HALF, cm3(10)))],
        bookings=[booking("K1", "02-10")],
    )  # fmt: skip
    assert (made.orders[0].keeps_until, made.orders[0].queried) == (None, False)


@pytest.mark.parametrize("life", [20, 35, 50])
def test_each_delivery_outlasts_what_it_serves(life: int) -> None:
    days = ("01-26", "02-09", "02-23", "03-09", "03-23")
    order = lapsing(life, 50, days=days)
    assert sum(each.amount for each in order.deliveries) in (0, g(250))
    firsts = [each.need_by for each in order.deliveries]
    assert firsts == sorted(firsts)
