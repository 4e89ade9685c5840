"""What to order, by when, in which pack, and who pays, to the penny."""

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
    made_bottle,
    made_from,
    outcomes,
    pack,
    planned,
    recipe,
    solid,
    solution,
    wants,
)
from hypothesis import given
from hypothesis import strategies as st

from stockroom.keeping.rules import Origin
from stockroom.measure.workdays import Calendar
from stockroom.planning.buying.money import share_out
from stockroom.planning.buying.packs import choose_packs
from stockroom.planning.decisions import Order, Outcome, Plan
from stockroom.planning.facts import Department, Line

QUILLMERE = Calendar(
    closed=(
        (day("2026-12-21"), day("01-03")),
        (day("02-15"), day("02-19")),
        (day("03-08"), day("03-08")),
        (day("03-26"), day("03-26")),
    )
)

# -- lithium, late ----------------------------------------------------------------


# 42.39 g/mol; the college, its closures and its prices are invented
LITHIUM = solid("lithium chloride", 42.39, packs=(pack(g(100), 14.50),), level=g(10))
FLAME = solution(0.5, "lithium chloride", rules=(keeps(730),))


def lithium(**more: Any) -> Plan:
    groups = {"K01": ("01-12", 55.0), "K03": ("01-14", 49.5), "K29": ("03-23", 6.0)}
    return planned(
        [LITHIUM, FLAME], methods=[made_from(FLAME, LITHIUM, minutes=15)],
        recipes=[recipe(wants(FLAME, cm3(v)), code=number) for number, (_, v) in groups.items()],
        bookings=[booking(number, on, recipe=number) for number, (on, _) in groups.items()],
        bottles=[bought_bottle("B28", LITHIUM, g(38), "2024-09-02", not_found=True)],
        calendar=QUILLMERE, **more,
    )  # fmt: skip


def order(made: Plan) -> Order:
    (one,) = made.orders
    return one


def test_an_order_is_dated_from_the_first_need_even_when_that_is_missed() -> None:
    late = order(lithium())
    assert (late.need_by, late.order_by, late.late) == (day("01-12"), day("2026-12-11"), 6)
    assert late.arrives == day("01-18")


def test_a_late_delivery_serves_only_the_later_needs() -> None:
    made = lithium()
    assert outcomes(made) == {
        "K01.1": Outcome.SHORT,
        "K03.1": Outcome.SHORT,
        "K29.1": Outcome.BUY,
    }
    assert order(made).for_bookings == ("K01", "K03", "K29")


def test_lateness_is_said_with_the_day_it_comes() -> None:
    said = "; ".join(order(lithium()).reasons)
    assert "late by 6 open days; ordered today it comes 2027-01-18" in said


def test_ordered_in_time_it_is_not_late() -> None:
    made = lithium(as_at=day("2026-12-11"))
    assert order(made).late == 0
    assert set(outcomes(made).values()) == {Outcome.BUY}


def test_no_lead_time_written_counts_as_ten_and_says_so() -> None:
    unknown = solid("salt", packs=())
    half = solution(0.5)
    made = planned(
        [unknown, half], methods=[made_from(half, unknown)],
        recipes=[recipe(wants(half, cm3(100)))], bookings=[booking("K1", "02-01")],
    )  # fmt: skip
    assert order(made).order_by == day("01-14")
    assert "no pack or lead time entered: 10 open days assumed" in order(made).reasons


def test_where_the_make_takes_longer_the_margin_is_the_make() -> None:
    salt, half = solid(packs=(pack(g(500), 10),)), solution(0.5)
    quick, slow = (
        planned(
            [salt, half], methods=[made_from(half, salt, stands_hours=stands)],
            recipes=[recipe(wants(half, cm3(100)))], bookings=[booking("K1", "02-12")],
        )
        for stands in (0.0, 96.0)
    )  # fmt: skip
    # margin two open days; started Friday 5 February it is five before Friday 12
    assert order(quick).order_by == day("01-27")
    assert order(slow).order_by == day("01-22")


# -- the line it falls below ---------------------------------------------------------


IRON_SALT = solid("iron salt", 392.14, packs=(pack(g(500), 13.80),), level=g(100))
IRON = solution(0.1, "iron(II)", rules=(keeps(2),))


def iron(held: float = 130, salt: Line = IRON_SALT) -> Plan:
    groups = {"K11": ("02-02", 1320.0), "K13": ("02-04", 1320.0), "K25": ("03-18", 1056.0)}
    return planned(
        [salt, IRON], methods=[made_from(IRON, salt, minutes=20)],
        recipes=[recipe(wants(IRON, cm3(v)), code=number) for number, (_, v) in groups.items()],
        bookings=[booking(number, on, recipe=number) for number, (on, _) in groups.items()],
        bottles=[bought_bottle("B11", salt, g(held), "2024-02-05", opened=day("2024-02-12"))],
        calendar=QUILLMERE,
    )  # fmt: skip


def test_the_day_it_falls_below_its_level_is_the_day_of_the_booking() -> None:
    # the worked case: 130 g is 78.2 after 2 February and 14.9 g short for K25
    crossed = order(iron())
    assert (crossed.need_by, crossed.order_by) == (day("02-02"), day("01-15"))
    assert crossed.reasons == (
        "below 100 g on 2027-02-02 (K11; 78.238 g then left)",
        "14.935 g short for K25: order by 2027-03-01 at the latest",
    )


def test_above_its_level_to_the_end_nothing_is_ordered() -> None:
    assert iron(held=245).orders == ()
    assert len(iron(held=244.9).orders) == 1


@pytest.mark.parametrize(
    ("held", "size", "packs"),
    # 144.9 g are used: of 130, the 14.9 short and the level of 100; of 200, from 55.1 up to it
    [(130, 114, 2), (130, 115, 1), (200, 44, 2), (200, 45, 1)],
)
def test_a_level_is_filled_up_again(held: float, size: float, packs: int) -> None:
    salt = replace(IRON_SALT, packs=(pack(g(size), 5.0),))
    assert order(iron(held, salt)).packs == packs


def test_a_made_line_says_the_day_it_falls_below() -> None:
    acid = solution(2.0, "acid", level=cm3(1000))
    weak = solution(1.0, "acid")
    neat = solid("neat")
    made = planned(
        [acid, weak, neat], methods=[made_from(acid, neat), made_from(weak, acid)],
        recipes=[recipe(wants(weak, cm3(1000)))],
        bookings=[booking("K1", "01-12"), booking("K2", "02-12")],
        bottles=[made_bottle("S4", acid, cm3(1900))],
    )  # fmt: skip
    (level,) = made.levels
    assert (level.line, level.left, level.level) == (acid.key, cm3(900), cm3(1000))


def test_stock_that_will_be_past_on_the_day_does_not_count() -> None:
    salt, half = (
        solid(packs=(pack(g(500), 10),), rules=(keeps(30, Origin.RECEIVED),)),
        solution(0.5),
    )
    made = planned(
        [salt, half], methods=[made_from(half, salt)], recipes=[recipe(wants(half, cm3(100)))],
        bookings=[booking("K1", "03-01")], bottles=[bought_bottle("B1", salt, g(500))],
    )  # fmt: skip
    assert outcomes(made) == {"K1.1": Outcome.BUY}


def test_a_part_of_a_solid_is_taken_and_the_rest_bought() -> None:
    salt, half = solid(packs=(pack(g(500), 10),)), solution(0.5)
    made = planned(
        [salt, half], methods=[made_from(half, salt)], recipes=[recipe(wants(half, cm3(1000)))],
        bookings=[booking("K1", "03-01")], bottles=[bought_bottle("B1", salt, g(20))],
    )  # fmt: skip
    assert [(s.bottle, s.amount) for s in made.makes[0].sources] == [("B1", g(20)), ("", g(30))]
    assert order(made).packs == 1


# -- packs and money --------------------------------------------------------------------


SMALL, MIDDLE, LARGE = pack(g(100), 9.0), pack(g(250), 24.90), pack(g(500), 44.00)


@pytest.mark.parametrize(
    ("grams", "chosen"),
    [
        (42, (SMALL, 1)),
        (100, (SMALL, 1)),
        (100.1, (SMALL, 2)),
        (280, (SMALL, 3)),
        (490, (LARGE, 1)),
    ],
)
def test_the_packs_that_cover_it_for_least_money(grams: float, chosen: object) -> None:
    assert choose_packs((LARGE, MIDDLE, SMALL), g(grams)) == chosen


def test_at_one_price_the_fewest_packs_then_the_smallest() -> None:
    one, two, big = pack(g(100), 5), pack(g(200), 10), pack(g(400), 10)
    assert choose_packs((one, big, two), g(150)) == (two, 1)


def test_no_pack_known_says_so() -> None:
    nothing, count = choose_packs((), g(5))
    assert (nothing.text, count) == ("no pack entered", 1)


parts = st.dictionaries(
    st.sampled_from(["BI", "CH", "OU", "PH"]), st.integers(0, 10**10), min_size=1
)


@given(st.integers(0, 10**7), parts)
def test_shares_always_add_up_to_the_penny(pence: int, parts: dict[str, int]) -> None:
    shares = dict(share_out(pence, parts))
    assert sum(shares.values()) == (pence if any(parts.values()) else 0)


@given(st.integers(0, 10**7), parts)
def test_a_share_is_within_a_penny_of_its_part(pence: int, parts: dict[str, int]) -> None:
    whole = sum(parts.values())
    for name, share in share_out(pence, parts):
        assert abs(share - pence * parts[name] / whole) < 1 + 1e-6


def test_odd_pence_go_to_the_largest_remainder_then_by_name() -> None:
    assert share_out(100, {"OU": 1, "BI": 1, "CH": 1}) == (("BI", 34), ("CH", 33), ("OU", 33))


def test_departments_pay_by_what_they_draw() -> None:
    salt, half = solid(packs=(pack(g(500), 10.01),)), solution(0.5)
    made = planned(
        [salt, half], methods=[made_from(half, salt)],
        recipes=[recipe(wants(half, cm3(300))), recipe(wants(half, cm3(100)), code="R02")],
        bookings=[
            booking("K1", "02-09", department="CH"),
            booking("K2", "02-09", recipe="R02", department="BI"),
        ],
    )  # fmt: skip
    assert order(made).shares == (("BI", 250), ("CH", 751))


@pytest.mark.parametrize(("left", "said"), [(999, True), (1000, False)])
def test_going_over_a_budget_is_said_and_blocks_nothing(left: int, said: bool) -> None:
    salt, half = solid(packs=(pack(g(500), 10.00),)), solution(0.5)
    made = planned(
        [salt, half], methods=[made_from(half, salt)], recipes=[recipe(wants(half, cm3(300)))],
        bookings=[booking("K1", "02-09")], departments=(Department("CH", "chemistry", left),),
    )  # fmt: skip
    over = [note.text for note in made.notes if note.subject == "CH"]
    assert over == (["orders come to £10.00 of £9.99 left: £0.01 over"] if said else [])
    assert outcomes(made) == {"K1.1": Outcome.BUY}
