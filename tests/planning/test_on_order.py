"""What is on its way: counted from the expected day, served from, and never ordered twice."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from typing import Any

from houses import (
    answer,
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
    planned,
    recipe,
    solid,
    solution,
    wants,
)
from hypothesis import given, settings
from hypothesis import strategies as st

from stockroom.keeping.rules import Origin
from stockroom.planning.buying.on_way import receipts
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.facts import Form, Line, Placed, Swap
from stockroom.planning.leaned_on import leaned_on
from stockroom.planning.plan import plan

# 100 g/mol: 1 dm³ of 0.5 takes 50 g
SALT = solid(packs=(pack(g(100), 9.60),))
HALF = solution(0.5)
CLASSES = (("K1", "01-20"), ("K2", "02-03"))


def placed(number: str = "P01", expected: str = "01-18", grams: float = 100, **more: Any) -> Placed:
    """So many grams of the salt in one pack, ordered on 4 January."""
    usual = {"pence": 960, "ordered": day("01-04"), "shares": (("CH", 960),)}
    return Placed(
        number, SALT.key, g(grams), "pack", 1, expected=day(expected), **{**usual, **more}
    )


def term(*orders: Placed, salt: Line = SALT, volume: float = 1000, **more: Any) -> Plan:
    return planned(
        [salt, HALF], methods=[made_from(HALF, salt)], recipes=[recipe(wants(HALF, cm3(volume)))],
        bookings=[booking(number, on) for number, on in CLASSES], placed=orders, **more,
    )  # fmt: skip


def test_what_is_on_its_way_serves_and_is_not_ordered_again() -> None:
    made = term(placed())
    assert outcomes(made) == {"K1.1": Outcome.BUY, "K2.1": Outcome.BUY}
    assert made.orders == ()
    assert [a.order for a in made.needs] == ["P01", "P01"]
    assert "50 g of salt on its way: P01, counted from 2027-01-18" in answer(made, "K1.1").reasons


def test_it_is_shown_apart_with_whom_it_serves() -> None:
    (one,) = term(placed()).on_order
    assert (one.number, one.amount, one.counts, one.overdue) == ("P01", g(100), day("01-18"), 0)
    assert one.bookings == ("K1", "K2")


def test_it_reduces_what_is_to_be_ordered() -> None:
    made = term(placed(grams=60))
    (order,) = made.orders
    assert order.amount == g(100)
    assert order.reasons[0].startswith("40 g short for K2")
    # K2 waits for both: the new order is the one still to be sent
    assert [a.order for a in made.needs] == ["P01", "O01"]


def test_it_does_not_count_before_its_day() -> None:
    made = term(placed(expected="01-25"))
    assert outcomes(made)["K2.1"] is Outcome.BUY
    assert answer(made, "K1.1").order == "O01"
    assert made.orders[0].reasons[0].startswith("50 g short for K1")


def test_too_late_for_both_it_is_not_ordered_again() -> None:
    made = term(placed(expected="01-25"), as_at=day("01-11"))
    assert outcomes(made) == {"K1.1": Outcome.SHORT, "K2.1": Outcome.BUY}
    assert made.orders == ()
    assert "P01 comes 2027-01-25" in made.short[0].reason
    (one,) = made.on_order
    assert [way.what for way in one.instead] == ["borrow", "run without", "another day"]


def late_for_one(*orders: Placed, swaps: tuple[Swap, ...] = ()) -> Plan:
    """One class on 12 January, 50 g wanted, nothing here: what is placed comes too late."""
    other = solid("other salt", packs=(pack(g(100), 5.0),))
    return planned(
        [SALT, other, HALF], methods=[made_from(HALF, SALT)],
        recipes=[recipe(wants(HALF, cm3(1000)), swaps=swaps)], bookings=[booking("K1", "01-12")],
        placed=orders,
    )  # fmt: skip


def test_the_ways_round_stand_once_with_the_last_of_two_orders_and_the_sum() -> None:
    made = late_for_one(placed("P01", "01-18", 30), placed("P02", "01-20", 30))
    first, last = made.on_order
    assert first.instead == ()
    told = {way.what: way.text for way in last.instead}
    assert told["borrow"] == "borrow 50 g of salt by 2027-01-11 for K1"
    # both must have come
    assert "it comes 2027-01-20" in told["another day"]


def test_what_is_still_to_be_ordered_too_is_told_with_that_order_alone() -> None:
    made = late_for_one(placed("P01", "01-25", 30))
    assert made.on_order[0].instead == ()
    (order,) = made.orders
    told = {way.what: way.text for way in order.instead}
    assert told["borrow"] == "borrow 50 g of salt by 2027-01-11 for K1"
    assert "it comes 2027-01-25" in told["another day"]


def test_a_swap_beside_an_order_sent_off_is_not_told_as_ordered_today() -> None:
    swap = Swap(HALF.key, "other salt", None, "smells")
    made = late_for_one(placed("P01", "01-18", 60), swaps=(swap,))
    told = made.on_order[0].instead[0].text
    assert told == "take other salt for K1 (smells): none here, so borrow it by 2027-01-11"


def test_a_swap_that_is_on_its_way_itself_says_its_number() -> None:
    swap = Swap(HALF.key, "other salt", None, "smells")
    coming = replace(placed("P07", "01-14"), line="other salt")
    made = late_for_one(coming, swaps=(swap,))
    told = made.orders[0].instead[0].text
    assert told.endswith("none here, so borrow it by 2027-01-11; P07 comes 2027-01-14")
    soon = late_for_one(replace(coming, expected=day("01-08")), swaps=(swap,))
    assert soon.orders[0].instead[0].text.endswith("none here; P07 comes 2027-01-08")


def test_a_part_delivery_leaves_the_rest_outstanding() -> None:
    made = term(placed(came=g(30)), bottles=[bought_bottle("B1", SALT, g(30))])
    assert made.on_order[0].amount == g(70)
    assert made.orders == ()


def test_more_than_ordered_leaves_nothing_outstanding() -> None:
    assert placed(came=g(130)).outstanding == 0
    assert term(placed(came=g(130))).on_order == ()


def test_cancelled_it_is_ordered_anew() -> None:
    made = term(placed(cancelled=day("01-04")))
    assert made.on_order == ()
    assert made.orders[0].amount == g(100)


def test_overdue_it_counts_from_the_next_open_day_and_is_a_guess() -> None:
    # expected on Thursday the 7th; on Friday the 15th that is six open days ago
    made = term(placed(expected="01-07"), as_at=day("01-15"))
    (one,) = made.on_order
    assert (one.counts, one.overdue) == (day("01-18"), 6)
    assert set(outcomes(made).values()) == {Outcome.BUY}
    assert [guess.subject for guess in made.guesses if "guess" in guess.text] == ["P01"]
    (note,) = [note.text for note in made.notes if note.subject == "P01"]
    assert note == "100 g of salt expected 2027-01-07, 6 open days overdue: ask the supplier"


def test_only_the_class_an_overdue_order_serves_leans_on_it() -> None:
    # each takes 50 g: so much is on its way
    known = house(
        [SALT, HALF], methods=[made_from(HALF, SALT)], recipes=[recipe(wants(HALF, cm3(1000)))],
        bookings=[booking(number, on) for number, on in CLASSES],
        placed=(placed(expected="01-07", grams=50),), as_at=day("01-15"),
    )  # fmt: skip
    made = plan(known)
    leant = [[g.subject for g in leaned_on(known, made, [need])] for need in made.needs]
    assert leant == [["P01"], []]


def test_expected_on_a_closed_day_it_counts_from_the_next_open_one() -> None:
    assert term(placed(expected="01-16")).on_order[0].counts == day("01-18")


def test_expected_today_it_is_no_guess() -> None:
    made = term(placed(expected="01-04"))
    assert made.on_order[0].counts == day("01-04")
    assert made.guesses == ()


def test_what_would_have_lapsed_by_the_day_does_not_serve_it() -> None:
    salt = replace(SALT, rules=(keeps(7, Origin.RECEIVED),))
    made = term(placed(expected="01-18"), salt=salt)
    # good through the 25th: K1 has it, K2 on 3 February has not
    assert answer(made, "K1.1").order == "P01"
    assert answer(made, "K2.1").order == "O01"


def test_it_fills_the_level_too() -> None:
    salt = replace(SALT, level=g(80))
    assert term(placed(grams=200), salt=salt).orders == ()
    (order,) = term(placed(grams=170), salt=salt).orders
    assert order.amount == g(100)


def test_a_line_nobody_draws_on_is_seen_to_once_ordered() -> None:
    other = replace(solid("other"), level=g(50))
    coming = replace(placed(), line=other.key)
    bare, seen_to = (
        planned([other], placed=orders, bottles=[bought_bottle("B1", other, g(10))])
        for orders in ((), (coming,))
    )
    assert [level.line for level in bare.levels] == ["other"]
    assert seen_to.levels == ()


def test_a_solution_comes_whole_from_one_order_or_not_at_all() -> None:
    sold = replace(solution(2.0, "acid"), form=Form.SOLUTION, packs=(pack(cm3(500), 5),))
    orders = [
        Placed(n, sold.key, cm3(60), "pack", 1, 500, day("01-04"), day("01-11"))
        for n in ("P01", "P02")
    ]
    made = planned(
        [sold], recipes=[recipe(wants(sold, cm3(100)))], bookings=[booking("K1", "02-10")],
        placed=tuple(orders),
    )  # fmt: skip
    assert outcomes(made) == {"K1.1": Outcome.BUY}


def test_the_soonest_of_several_serves_first() -> None:
    row = receipts(house([SALT], placed=(placed("P10", "02-01"), placed("P9", "01-18"))))
    assert [receipt.number for receipt in row[SALT.key]] == ["P9", "P10"]


deliveries = st.lists(st.tuples(st.integers(0, 60), st.integers(1, 120)), max_size=5)


@settings(max_examples=60)
@given(deliveries, st.integers(0, 120), st.integers(0, 30))
def test_ordered_and_on_its_way_always_cover_what_is_to_be_bought(
    coming: list[tuple[int, int]], held: int, as_at: int
) -> None:
    """Nothing on its way is promised twice, and nothing wanted is left out."""
    first = date(2027, 1, 4)
    orders = tuple(
        placed(f"P{n:02d}", date.fromordinal(first.toordinal() + after).isoformat(), grams)
        for n, (after, grams) in enumerate(coming, 1)
    )
    facts = house(
        [SALT, HALF], methods=[made_from(HALF, SALT)], recipes=[recipe(wants(HALF, cm3(1000)))],
        bookings=[booking(f"K{n}", on) for n, on in enumerate(("01-20", "02-03", "02-24"), 1)],
        bottles=[bought_bottle("B1", SALT, g(held))] if held else [], placed=orders,
        as_at=date.fromordinal(first.toordinal() + as_at),
    )  # fmt: skip
    made = plan(facts)
    bought = [s.amount for m in made.makes for s in m.sources if not s.bottle]
    there = sum(one.amount for one in made.on_order) + sum(o.amount for o in made.orders)
    assert sum(bought) <= there
    # what is there in time is not ordered for a second time
    soon = sum(n for after, n in coming if after <= 12) if as_at <= 12 else 0
    if held + soon >= 150:
        assert made.orders == ()
