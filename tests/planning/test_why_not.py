"""What was not chosen: another bottle, make, day, amount, pack or line, and the reason why."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    days,
    found,
    g,
    house,
    keeps,
    made_bottle,
    made_from,
    pack,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.rules import Rule, RuleKind
from stockroom.measure.amounts import Amount
from stockroom.measure.workdays import Calendar
from stockroom.planning.decisions import Coming, Plan
from stockroom.planning.facts import Balance, Bar, Booking, Bottle, Closeness, Facts, House, Swap
from stockroom.planning.plan import plan
from stockroom.planning.whys.why import why
from stockroom.planning.whys.why_not import Other, why_not

SALT = solid("salt", packs=(pack(g(250), 9.60), pack(g(1000), 30.00)), level=g(50))
TENTH = solution(0.1, rules=(keeps(60),))
EXACT = solution(0.1, "thio", rules=(Rule(RuleKind.RECHECK, days(28)), keeps(365)))


def asked(known: Facts, ref: str, other: Other | str) -> str:
    """The answer as one text; a text is a bottle's or a make's number."""
    made = plan(known)
    things: dict[object, Other] = {bottle.number: bottle for bottle in known.bottles}
    things |= {make.id: make for make in made.makes}
    thing = things[other] if isinstance(other, str) else other
    return "; ".join(why_not(known, made, ref, thing))


def shelf(*bottles: Bottle, bookings: tuple[Booking, ...] = (), **more: Any) -> Facts:
    """One class of 500 cm³ on 12 January, and what else is booked, with these bottles."""
    return house(
        [TENTH], recipes=[recipe(wants(TENTH, cm3(500)))], bottles=bottles,
        bookings=bookings or (booking("K1", "01-12"),), **more,
    )  # fmt: skip


# -- another bottle for a need ------------------------------------------------------------


def test_the_bottle_chosen_is_said_to_be_it() -> None:
    assert asked(shelf(made_bottle("S1", TENTH, cm3(800))), "K1", "S1") == (
        "S1 is used for K1.1: 500 cm³ of it"
    )


def test_what_goes_past_sooner_goes_first_and_both_days_are_told() -> None:
    known = shelf(
        made_bottle("S1", TENTH, cm3(800), "01-04"),
        made_bottle("S2", TENTH, cm3(800), "2026-12-20"),
    )
    assert asked(known, "K1.1", "S1") == (
        "S1 was not used for K1.1: S2 goes past sooner (2027-02-18; S1 2027-03-05)"
    )


def test_alike_in_every_date_the_lower_number_goes_first() -> None:
    known = shelf(*(made_bottle(n, TENTH, cm3(800)) for n in ("S2", "S10")))
    assert "S2 is as good, and has the lower number" in asked(known, "K1.1", "S10")


def test_a_bottle_past_its_date_says_which_rule_and_when() -> None:
    known = shelf(
        made_bottle("S1", TENTH, cm3(800)), made_bottle("S2", TENTH, cm3(800), "2026-11-01")
    )
    words = asked(known, "K1", "S2")
    assert "S2 was not used for K1.1: past after 2026-12-31" in words
    assert "60 days" in words


def test_too_strong_or_weak_is_told_with_the_limit() -> None:
    known = shelf(
        made_bottle("S1", TENTH, cm3(800)),
        made_bottle("S2", TENTH, cm3(800), checks=(found("01-04", 0.12),)),
    )
    words = asked(known, "K1.1", "S2")
    assert "too strong: 0.12" in words
    assert "limit 0.105" in words


def test_what_is_promised_before_it_is_named_with_how_much() -> None:
    known = shelf(
        made_bottle("S1", TENTH, cm3(700), "01-03"),
        made_bottle("S2", TENTH, cm3(700), "01-04"),
        bookings=(booking("K1", "01-12"), booking("K2", "01-13")),
    )
    assert asked(known, "K2.1", "S1") == (
        "S1 was not used for K2.1: 700 cm³ of it, 500 cm³ wanted, and 500 cm³ is promised to "
        "K1.1, which ranks before it"
    )


def test_what_is_kept_for_one_that_comes_after_is_said_so() -> None:
    known = shelf(
        made_bottle("S1", TENTH, cm3(700), "01-03"),
        made_bottle("S2", TENTH, cm3(700), "01-04"),
        bookings=(booking("K1", "01-12"), booking("K2", "01-13")),
    )
    words = asked(known, "K1.1", "S2")
    assert "500 cm³ is kept for K2.1" in words or "S1 goes past sooner" in words


def test_too_little_in_it_is_told_and_too_close_to_call_too() -> None:
    known = shelf(
        made_bottle("S1", TENTH, cm3(900)),
        made_bottle("S2", TENTH, cm3(400)),
        made_bottle("S3", TENTH, cm3(502)),
    )
    assert "only 400 cm³ of it, 500 cm³ wanted" in asked(known, "K1", "S2")
    assert "500 cm³ of 502 cm³ in it would be promised: too close" in asked(known, "K1", "S3")


def exact_house(*bottles: Bottle) -> Facts:
    asks = wants(EXACT, cm3(500), closeness=Closeness.EXACT, may_differ=0.05)
    return house(
        [EXACT], recipes=[recipe(asks)], bookings=[booking("K21", "03-04")], bottles=bottles
    )


def test_an_exact_need_says_from_when_a_result_counts_and_when_the_last_was() -> None:
    early, late = found("2026-12-01", 0.0987), found("2026-12-20", 0.0987)
    known = exact_house(
        made_bottle("S2", EXACT, cm3(800), "2026-11-01", checks=(late,)),
        made_bottle("S10", EXACT, cm3(800), "2026-11-01", checks=(early,)),
    )
    words = asked(known, "K21.1", "S10")
    assert "S2 was checked more recently (2026-12-20; S10 2026-12-01)" in words
    assert "exact needs a result after 2027-02-03, and it was last found 2026-12-01" in words


def test_a_stale_result_alone_keeps_a_bottle_from_an_exact_need() -> None:
    known = replace(
        exact_house(
            made_bottle("S2", EXACT, cm3(800), checks=(found("02-20", 0.0987),)),
            made_bottle("S10", EXACT, cm3(800), checks=(found("01-04", 0.0987),)),
        ),
        as_at=day("02-22"),
    )
    assert asked(known, "K21.1", "S10") == (
        "S10 was not used for K21.1: exact needs a result after 2027-02-03, and it was last "
        "found 2027-01-04"
    )


def test_what_a_recipe_bars_is_told_by_its_reason_also_of_a_parent() -> None:
    acid = solution(1.0, "hydrochloric acid")
    barring = recipe(wants(TENTH, cm3(500)), bars=(Bar("hydrochloric acid", "chlorine comes off"),))
    child = replace(made_bottle("S3", TENTH, cm3(800)), lineage=("S9",))
    known = house(
        [TENTH, acid], recipes=[barring], bookings=[booking("K1", "01-12")],
        bottles=[made_bottle("S1", TENTH, cm3(800)), made_bottle("S9", acid, cm3(800)), child],
    )  # fmt: skip
    assert "barred in R01: chlorine comes off" in asked(known, "K1.1", "S3")
    assert "barred: chlorine comes off" in asked(known, "K1.1", "S9")


def test_a_bottle_of_something_else_is_told_apart_and_a_swap_allowed_is_said() -> None:
    other, free = solution(0.1, "dye"), solution(0.2, "ink")
    asks = recipe(wants(TENTH, cm3(500)), swaps=(Swap(TENTH.key, free.key, None, "paler"),))
    known = house(
        [TENTH, other, free], recipes=[asks], bookings=[booking("K1", "01-12")],
        bottles=[made_bottle("S1", TENTH, cm3(800)), made_bottle("S7", other, cm3(800)),
                 made_bottle("S8", free, cm3(800))],
    )  # fmt: skip
    assert asked(known, "K1", "S7") == (
        f"S7 was not used for K1.1: it is {other.key}, and K1.1 wants {TENTH.key}; "
        "nor is anything for K1.1 made from it, or the swap written in R01 as allowed"
    )
    assert "allowed: paler" in asked(known, "K1", "S8")


# -- a make: day, amount, source ------------------------------------------------------------


def making(*bottles: Bottle, **more: Any) -> Facts:
    """500 cm³ of 0.1 mol/dm³ made of the salt for 19 January; it keeps ten days, stands a day."""
    line = solution(0.1, rules=(keeps(10),))
    more.setdefault("bookings", [booking("K1", "01-19")])
    return house(
        [SALT, line], methods=[made_from(line, SALT, stands_hours=24.0)],
        recipes=[recipe(wants(line, cm3(500)))],
        bottles=bottles or [bought_bottle("B1", SALT, g(500))], **more,
    )  # fmt: skip


@pytest.mark.parametrize(
    ("on", "words"),
    [
        ("01-08", "too early to keep: it keeps until 2027-01-18, and K1.1 is on 2027-01-19"),
        ("01-16", "a closed day (Saturday)"),
        ("01-18", "too late: standing 24 h, it is ready 2027-01-19 08:10, and K1.1 wants it by"),
        ("01-01", "past: today is 2027-01-04"),
        ("01-12", "would do as well (from 2027-01-11 to 2027-01-15): the latest day is taken"),
    ],
)
def test_another_day_says_what_is_against_it(on: str, words: str) -> None:
    assert words in asked(making(), "M01", day(on))


def test_the_day_itself_is_said_to_be_it() -> None:
    made = plan(making())
    assert asked(making(), "M01", made.makes[0].on).startswith("M01 is started on 2027-01-15")


def test_a_closed_day_in_the_week_is_told_as_one() -> None:
    shut = making(calendar=Calendar(closed=((day("01-13"), day("01-13")),)))
    assert "the house is closed that day" in asked(shut, "M01", day("01-13"))


def test_a_day_without_a_balance_names_what_is_away() -> None:
    away = Balance("BAL1", 10_000, ((day("01-13"), day("01-13")),))
    assert "no balance that day: BAL1 away" in asked(making(balances=(away,)), "M01", day("01-13"))


def test_a_full_day_counts_its_minutes() -> None:
    dye = solution(0.2, "dye", rules=(keeps(1),))
    line = solution(0.1, rules=(keeps(10),))
    known = house(
        [SALT, line, dye], house=House(batch_step=cm3(1), day_minutes=100),
        methods=[made_from(line, SALT), made_from(dye, SALT, minutes=95)],
        recipes=[recipe(wants(line, cm3(500))), recipe(wants(dye, cm3(500)), code="R02")],
        bookings=[booking("K1", "01-19"), booking("K2", "01-14", recipe="R02")],
        bottles=[bought_bottle("B1", SALT, g(500))],
    )  # fmt: skip
    made = plan(known)
    heavy = next(m for m in made.makes if m.line == dye.key)
    light = next(m for m in made.makes if m.line == line.key)
    assert "the day is full: 95 min of work, 105 with it, 100 at most" in asked(
        known, light.id, heavy.on
    )


def test_another_volume_says_who_goes_without_or_what_is_left() -> None:
    assert "400 cm³ of M01 is 100 cm³ too little: K1.1 500 cm³" in asked(
        making(), "M01", Amount.cm3(400)
    )
    more = asked(making(), "M01", Amount.cm3(600))
    assert "600 cm³ of M01: 100 cm³ over what is needed, kept as stock" in more
    assert "it takes 6 g of B1" in more


def test_another_jar_for_a_make_is_judged_as_the_chosen_one_was() -> None:
    past = replace(SALT, rules=(keeps(30, origin=keeps(1).origin),))
    known = making(bought_bottle("B1", SALT, g(500)), bought_bottle("B2", SALT, g(500)))
    assert past.key == SALT.key
    assert "B1 is as good, and has the lower number" in asked(known, "M01", "B2")
    assert asked(known, "M01", "B1") == "B1 is used for M01: 5 g of it"
    lost = replace(bought_bottle("B3", SALT, g(500)), record=replace(
        bought_bottle("B3", SALT, g(500)).record, not_found=True))  # fmt: skip
    assert "not found" in asked(making(bought_bottle("B1", SALT, g(500)), lost), "M01", "B3")


def test_a_make_too_old_for_another_class_says_until_when_it_is_good() -> None:
    known = making(bookings=[booking("K1", "01-19"), booking("K2", "02-16")])
    assert "good until 2027-01-25, it would not do on 2027-02-16" in asked(known, "K2.1", "M01")


# -- an order ---------------------------------------------------------------------------------


def ordering() -> tuple[Facts, Plan]:
    known = making(bought_bottle("B1", SALT, g(40)), bookings=[booking("K1", "02-16")])
    return known, plan(known)


def test_another_pack_says_what_it_costs_and_how_long_it_lasts() -> None:
    known, made = ordering()
    assert (made.orders[0].packs, made.orders[0].pence) == (1, 960)
    words = "; ".join(why_not(known, made, "O01", Amount.grams(1000)))
    assert "1 × pack of salt is £30.00, £20.40 dearer than 1 × pack (£9.60)" in words
    # 5 g in the 81 days from 4 January to 26 March, as in the order: 1000 g is 200 times that
    assert "1 000 g would last 44 years at this term's rate (5 g in 81 days)" in words
    assert "it lasts 44 years at this rate" in " ".join(made.orders[0].reasons)


def test_a_pack_nobody_sells_says_what_is_sold() -> None:
    known, made = ordering()
    words = " ".join(why_not(known, made, "O01", Amount.grams(500)))
    assert "no pack of 500 g of salt is entered: it is sold as pack £9.60, pack £30.00" in words


def test_another_day_of_an_order_counts_open_days() -> None:
    known, made = ordering()
    order = made.orders[0]
    late = known.calendar.after(order.order_by, 3)
    assert f"3 open days after {order.order_by}" in asked(known, "O01", late)
    assert "is the last day" in asked(known, "O01", known.as_at)


def test_leave_to_be_asked_counts_for_another_day_and_another_pack() -> None:
    known, _ = ordering()
    asking = replace(known.lines[SALT.key], ask_days=5)
    known = replace(known, lines={**known.lines, SALT.key: asking})
    # ten open days and five of asking from Monday 4 January, as the order itself reckons
    assert "may go on 2027-01-04: it comes 2027-01-25" in asked(known, "O01", known.as_at)
    words = asked(known, "O01", Amount.grams(1000))
    assert "ordered today it comes 2027-01-25 (10 open days, 5 more to ask first)" in words


def test_two_suppliers_packs_of_one_name_are_told_apart() -> None:
    dear, cheap = (replace(pack(g(100), price), text="100 g") for price in (9.90, 9.60))
    sold = (replace(dear, supplier="Southern"), replace(cheap, supplier="Northern"))
    salt = replace(SALT, packs=sold)
    known, _ = ordering()
    known = replace(known, lines={**known.lines, SALT.key: salt})
    made = plan(known)
    assert [pack.supplier for pack in made.orders[0].sold_as] == ["Northern"]
    south = why_not(known, made, "O01", "Southern")
    assert "£0.30 dearer" in south[0]
    north = "; ".join(why_not(known, made, "O01", "Northern"))
    assert "O01 is 1 × 100 g from Northern: £9.60" in north


def test_a_bottle_held_does_not_save_an_order_and_says_what_is_in_it() -> None:
    known, _ = ordering()
    assert "B1 does not save O01: 40 g in it, 5 g of that promised" in asked(known, "O01", "B1")


# -- none of it -------------------------------------------------------------------------------


def test_an_unknown_reference_has_no_answer() -> None:
    assert asked(making(), "K99", day("01-12")) == ""


def test_a_line_nothing_asks_for_says_why_there_is_no_make_order_or_check() -> None:
    idle = solution(0.5, "idle", rules=(keeps(60),))
    known = house([idle, SALT], methods=[made_from(idle, SALT)],
                  bottles=[made_bottle("S4", idle, cm3(300))])  # fmt: skip
    rows = why(known, plan(known), "idle")
    assert rows == (
        "idle 0.5 mol/dm3: nothing from 2027-01-04 to 2027-03-26 asks for it",
        "on the shelf: S4 300 cm³ (until 2027-03-05)",
        "no make: nothing asks for it",
        "no order: it is made here",
        "no check: no exact need leans on it, and no recheck falls due before it is used",
    )


def test_what_covers_a_need_is_said_where_nothing_is_made() -> None:
    rows = " / ".join(why(*_planned(shelf(made_bottle("S1", TENTH, cm3(800)))), TENTH.key))
    assert "K1.1 500 cm³ 2027-01-12 (have)" in rows
    assert "S1 800 cm³ (until 2027-03-05, 500 cm³ promised)" in rows
    assert "no make: no method for it is written" in rows


def _planned(known: Facts) -> tuple[Facts, Plan]:
    return known, plan(known)


def test_an_order_placed_is_told_by_its_number_and_by_its_line() -> None:
    known, made = ordering()
    on_way = Coming(
        "P03", SALT.key, "salt", "pack", 1, g(250), g(250), SALT.kind, day("01-04"), day("01-18"),
        day("01-19"), supplier="Acme", bookings=("K1",),
    )  # fmt: skip
    made = replace(made, on_order=(on_way,))
    head, whom = why(known, made, "p03")
    assert head == (
        "P03 250 g of salt to come from Acme, placed 2027-01-04, expected 2027-01-18, counted "
        "on from 2027-01-19"
    )
    assert whom == "for K1"
    assert head in why(known, made, "salt")
