"""Bookings become dated needs: per what, how many, spare, and the sum in words."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest
from houses import booking, cm3, day, house, recipe, solution, wants
from hypothesis import given
from hypothesis import strategies as st

from stockroom.planning.explode import Need, amount_needed, explode, standing
from stockroom.planning.facts import Firmness, Per

LINE = solution(0.1)


def needs(per: Per, amount: float, groups: int = 10, spare: int = 0, **more: Any) -> Need:
    asked = recipe(wants(LINE, cm3(amount), per=per, **more))
    facts = house([LINE], recipes=[asked])
    (one,) = explode(facts, [booking("K1", "01-12", groups=groups, spare=spare)])
    return one


@pytest.mark.parametrize(
    ("per", "times"),
    [
        (Per.GROUP, 10),
        (Per.PERFORMANCE, 10),
        (Per.CLASS, 1),
        (Per.ROOM, 1),
        (Per.DEMONSTRATOR, 1),
    ],
)
def test_amounts_go_by_what_they_are_per(per: Per, times: int) -> None:
    assert needs(per, 10).amount == cm3(10 * times)


def test_spare_is_added_and_each_step_is_said() -> None:
    # the worked case: 8 × 60 = 480, + 10 % = 528
    need = needs(Per.GROUP, 60, groups=8, spare=100)
    assert need.amount == cm3(528)
    assert need.sum_in_words == "8 groups × 60 cm³ = 480 cm³, + 10 % spare = 528 cm³"


def test_one_of_a_thing_is_not_many() -> None:
    assert needs(Per.GROUP, 60, groups=1).sum_in_words == "1 group × 60 cm³ = 60 cm³"


def test_a_stand_by_gets_no_spare() -> None:
    stand_by = wants(LINE, cm3(250), per=Per.ROOM, spare=False)
    assert amount_needed(stand_by, groups=10, spare=100) == cm3(250)


def test_a_fraction_is_rounded_up_to_what_can_be_counted() -> None:
    requirement = wants(LINE, 1, per=Per.GROUP)
    assert amount_needed(requirement, groups=3, spare=50) == 4


@given(st.integers(0, 10**7), st.integers(1, 40), st.integers(0, 200))
def test_spare_never_takes_anything_away(amount: int, groups: int, spare: int) -> None:
    requirement = wants(LINE, amount, per=Per.GROUP)
    plain = amount_needed(requirement, groups, 0)
    assert plain == amount * groups
    assert plain <= amount_needed(requirement, groups, spare) < plain * (1 + spare / 1000) + 1


@given(st.integers(0, 10**7), st.integers(1, 39), st.integers(0, 200))
def test_one_more_group_never_wants_less(amount: int, groups: int, spare: int) -> None:
    requirement = wants(LINE, amount, per=Per.GROUP)
    fewer, more = (amount_needed(requirement, n, spare) for n in (groups, groups + 1))
    assert fewer <= more


def test_needs_come_in_order_of_day_time_and_number() -> None:
    asked = recipe(wants(LINE, cm3(1)), wants(LINE, cm3(1)))
    row = [
        booking("K3", "01-12", 600),
        booking("K2", "01-13", 540),
        booking("K4", "01-12", 540),
        booking("K1", "01-12", 600),
    ]
    refs = [need.ref for need in explode(house([LINE], recipes=[asked]), row)]
    assert refs == ["K4.1", "K4.2", "K1.1", "K1.2", "K3.1", "K3.2", "K2.1", "K2.2"]


@pytest.mark.parametrize("firmness", Firmness)
def test_only_what_still_stands_is_planned(firmness: Firmness) -> None:
    row = [booking("K1", "01-12", firmness=firmness)]
    found = standing(row, day("01-04"), day("03-26"))
    assert bool(found) is (firmness in (Firmness.FIRM, Firmness.PENCILLED))


def test_the_first_and_the_last_day_of_a_period_belong_to_it() -> None:
    row = [booking(f"K{n}", on) for n, on in enumerate(("01-03", "01-04", "01-08", "01-09"))]
    found = standing(row, day("01-04"), day("01-08"))
    assert [one.number for one in found] == ["K1", "K2"]


def test_a_booking_keeps_the_version_it_was_booked_on() -> None:
    first = recipe(wants(LINE, cm3(1)))
    second = replace(recipe(wants(LINE, cm3(2))), version=2)
    row = [booking("K1", "01-12"), booking("K2", "01-12", version=2)]
    amounts = [need.amount for need in explode(house([LINE], recipes=[first, second]), row)]
    assert amounts == [cm3(1), cm3(2)]
