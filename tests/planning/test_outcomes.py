"""Each need comes out as have, make, buy, short or refused, and says why."""

from __future__ import annotations

import pytest
from houses import (
    answer,
    booking,
    bought_bottle,
    cm3,
    day,
    g,
    house,
    made_bottle,
    made_from,
    make_of,
    outcomes,
    pack,
    planned,
    reasons,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.errors import NotAllowed, UnknownName
from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Bar, Closeness, Form, Ingredient, Line, Method, Swap
from stockroom.planning.plan import plan

SALT = solid(packs=(pack(g(500), 10.00),))
HALF = solution(0.5)
MADE = made_from(HALF, SALT)
JAR = bought_bottle("B1", SALT, g(500), opened=day("01-04"))
NEED = recipe(wants(HALF, cm3(500)))


def test_what_stands_on_the_shelf_is_had() -> None:
    made = planned(
        [SALT, HALF], methods=[MADE], recipes=[NEED], bookings=[booking("K1", "01-06")],
        bottles=[made_bottle("S1", HALF, cm3(1000))],
    )  # fmt: skip
    assert outcomes(made) == {"K1.1": Outcome.HAVE}
    assert [(d.bottle, d.amount) for d in answer(made, "K1.1").draws] == [("S1", cm3(500))]
    assert (made.makes, made.orders, made.short) == ((), (), ())


def test_what_is_not_there_is_made_the_open_day_before() -> None:
    made = planned(
        [SALT, HALF], methods=[MADE], recipes=[NEED], bookings=[booking("K1", "01-06")],
        bottles=[JAR],
    )  # fmt: skip
    assert outcomes(made) == {"K1.1": Outcome.MAKE}
    make = make_of(made, HALF)
    assert (make.id, make.on, make.volume) == (answer(made, "K1.1").make, day("01-05"), cm3(500))
    assert [(s.bottle, s.amount) for s in make.sources] == [("B1", g(25))]


def test_a_make_that_waits_for_something_is_a_buy() -> None:
    made = planned([SALT, HALF], methods=[MADE], recipes=[NEED], bookings=[booking("K1", "02-03")])
    assert outcomes(made) == {"K1.1": Outcome.BUY}
    assert answer(made, "K1.1").order == made.orders[0].id
    assert make_of(made, HALF).sources[0].bottle == ""


def test_what_cannot_come_in_time_is_short_and_still_ordered() -> None:
    made = planned([SALT, HALF], methods=[MADE], recipes=[NEED], bookings=[booking("K1", "01-06")])
    assert outcomes(made) == {"K1.1": Outcome.SHORT}
    assert made.short[0].reason == (
        "no salt in hand by 2027-01-05; ordered today it comes 2027-01-18"
    )
    assert [order.line for order in made.orders] == ["salt"]
    assert made.makes == ()


def test_what_is_neither_made_nor_sold_is_short() -> None:
    made = planned([HALF], recipes=[NEED], bookings=[booking("K1", "03-01")])
    assert made.short[0].reason == f"no method and no supplier for {HALF.key}"


def test_a_bottle_that_would_not_do_is_named_in_the_shortage() -> None:
    old = made_bottle("S1", HALF, cm3(1000), set_aside="rust specks")
    made = planned([HALF], recipes=[NEED], bookings=[booking("K1", "03-01")], bottles=[old])
    assert "S1 set aside (rust specks)" in made.short[0].reason


def test_a_perishable_comes_from_a_shop_and_not_by_order() -> None:
    juice = Line("orange juice", "orange juice", "orange juice", Form.SUNDRY, Kind.VOLUME)
    need = recipe(wants(juice, cm3(200), lowest=None, highest=None))
    made = planned([juice], recipes=[need], bookings=[booking("K1", "02-03")])
    assert outcomes(made) == {"K1.1": Outcome.BUY}
    assert made.orders == ()
    assert [(note.subject, note.text) for note in made.notes] == [
        ("K1", "200 cm³ of orange juice from a shop by 2027-02-02")
    ]


def test_the_day_it_can_come_is_in_time_to_make_it() -> None:
    # ordered Monday 4 January at ten open days it comes Monday 18, made that day for the 19th
    made = planned(
        [SALT, HALF], methods=[MADE], recipes=[NEED],
        bookings=[booking("K1", "01-18"), booking("K2", "01-19")],
    )  # fmt: skip
    assert outcomes(made) == {"K1.1": Outcome.SHORT, "K2.1": Outcome.BUY}
    assert make_of(made, HALF).on == day("01-18")


# -- several levels --------------------------------------------------------------------

ACID = solution(2.0, "sulfuric acid")
WEAK_ACID = solution(0.5, "sulfuric acid")
IRON_SALT = solid("iron salt", 392.14)
IRON = solution(0.1, "iron(II) solution")
IN_ACID = made_from(
    IRON, Ingredient((IRON_SALT.key,)), Ingredient((WEAK_ACID.key,), 1_000_000, role="solvent")
)
IRON_HOUSE = {
    "methods": [IN_ACID, made_from(WEAK_ACID, ACID)],
    "bookings": [booking("K1", "01-14")],
    "bottles": [
        bought_bottle("B1", IRON_SALT, g(100), opened=day("01-04")),
        made_bottle("S1", ACID, cm3(3000)),
    ],
}
IRON_LINES = [ACID, WEAK_ACID, IRON_SALT, IRON]


def test_the_acid_inside_a_solution_is_a_need_too() -> None:
    made = planned(IRON_LINES, recipes=[recipe(wants(IRON, cm3(1000)))], **IRON_HOUSE)
    iron, acid = make_of(made, IRON), make_of(made, WEAK_ACID)
    assert [(s.bottle, s.make, s.amount) for s in iron.sources] == [
        ("B1", "", g(39.214)),
        ("", acid.id, cm3(1000)),
    ]
    assert [(s.bottle, s.amount) for s in acid.sources] == [("S1", cm3(250))]
    assert acid.on <= iron.on < day("01-14")


def test_the_chain_is_counted_once_in_the_bought_form() -> None:
    made = planned(IRON_LINES, recipes=[recipe(wants(IRON, cm3(1000)))], **IRON_HOUSE)
    used = {(use.form, use.line): use.amount for use in made.usage}
    assert used == {
        ("solution", IRON.key): cm3(1000),
        ("stock", WEAK_ACID.key): cm3(1000),
        ("stock", ACID.key): cm3(250),
        ("bought", IRON_SALT.key): g(39.214),
    }


def test_a_barred_solvent_refuses_the_need_and_holds_nothing() -> None:
    barring = recipe(
        wants(IRON, cm3(1000)), bars=(Bar("sulfuric acid", "throws barium sulfate down"),)
    )
    made = planned(IRON_LINES, recipes=[barring], **IRON_HOUSE)
    assert outcomes(made) == {"K1.1": Outcome.REFUSED}
    assert made.short[0].reason == ("sulfuric acid is barred in R01: throws barium sulfate down")
    assert (made.makes, made.orders) == ((), ())
    assert answer(made, "K1.1").draws == ()


def test_a_bar_leaves_the_recipes_own_lines_alone() -> None:
    own = recipe(
        wants(IRON, cm3(100)), wants(WEAK_ACID, cm3(100)), bars=(Bar("sulfuric acid", "elsewhere"),)
    )
    made = planned(IRON_LINES, recipes=[own], **IRON_HOUSE)
    assert set(outcomes(made).values()) == {Outcome.MAKE}


def test_a_barred_choice_leaves_the_next_choice_open() -> None:
    either = made_from(IRON, Ingredient((ACID.key, IRON_SALT.key)))
    barring = recipe(wants(IRON, cm3(100)), bars=(Bar("sulfuric acid", "why"),))
    made = planned(IRON_LINES, recipes=[barring], **{**IRON_HOUSE, "methods": [either]})
    assert outcomes(made) == {"K1.1": Outcome.MAKE}


def test_a_swap_is_not_taken_by_itself() -> None:
    other = solid("other salt")
    swapping = recipe(wants(SALT, g(5)), swaps=(Swap(SALT.key, other.key, 0.7, "smells"),))
    made = planned(
        [SALT, other], recipes=[swapping], bookings=[booking("K1", "01-06")],
        bottles=[bought_bottle("B9", other, g(500))],
    )  # fmt: skip
    assert outcomes(made) == {"K1.1": Outcome.SHORT}


# -- never kept ------------------------------------------------------------------------

SILVER = solution(0.05, "ammoniacal silver", never_kept="can turn explosive")


def silver_plan(*bookings: tuple[str, str, int], fresh: bool = True) -> Plan:
    need = recipe(wants(SILVER, cm3(100), fresh=fresh))
    row = [booking(number, on, minute) for number, on, minute in bookings]
    return planned(
        [SALT, SILVER], methods=[made_from(SILVER, SALT)], recipes=[need], bookings=row,
        bottles=[JAR, made_bottle("S9", SILVER, cm3(900), "01-06")],
    )  # fmt: skip


def test_a_never_kept_bottle_is_never_drawn_on() -> None:
    made = silver_plan(("K1", "01-06", 840))
    assert outcomes(made) == {"K1.1": Outcome.MAKE}
    assert make_of(made, SILVER).on == day("01-06")


def test_a_never_kept_line_nobody_makes_is_refused() -> None:
    made = planned(
        [SILVER], recipes=[recipe(wants(SILVER, cm3(100)))], bookings=[booking("K1", "01-06")]
    )
    assert outcomes(made) == {"K1.1": Outcome.REFUSED}
    assert made.short[0].reason == "ammoniacal silver is never kept: can turn explosive"


def test_what_is_over_of_a_never_kept_make_is_not_kept() -> None:
    assert not make_of(silver_plan(("K1", "01-06", 840)), SILVER).heel_kept


@pytest.mark.parametrize(
    "bookings",
    [(("K1", "01-12", 840), ("K2", "01-13", 840)), (("K1", "01-12", 481),)],
    ids=["two days", "first thing in the morning"],
)
def test_a_never_kept_make_is_mixed_on_the_day_of_each_booking(
    bookings: tuple[tuple[str, str, int], ...],
) -> None:
    made = silver_plan(*bookings, fresh=False)
    days = {booking: make.on for make in made.makes for booking in make.bookings}
    assert days == {a.booking.number: a.booking.on for a in made.needs if a.make}
    assert all(a.make == "" or a.booking.minute > 490 for a in made.needs)


# -- names and circles -----------------------------------------------------------------


def test_a_recipe_asking_for_no_stock_line_names_recipe_and_line() -> None:
    with pytest.raises(UnknownName, match=r"R01 line 1 asks for 'salt solution 0.5 mol/dm3'"):
        planned([SALT], recipes=[NEED], bookings=[booking("K1", "01-06")])


def test_a_booking_on_no_recipe_names_the_booking() -> None:
    with pytest.raises(UnknownName, match="K1 is booked on R01 version 1"):
        planned([SALT], bookings=[booking("K1", "01-06")])


def test_a_line_made_from_itself_is_refused_with_its_chain() -> None:
    a, b = solution(1.0, "a"), solution(2.0, "b")
    methods = [made_from(a, b), made_from(b, a)]
    with pytest.raises(NotAllowed, match="a 1 mol/dm3 from b 2 mol/dm3 from a 1 mol/dm3"):
        planned([a, b], methods=methods)


A, B = solid("a"), solid("b")
ONE, TWO = solution(1.0, "one"), solution(1.0, "two")


def test_two_methods_may_prefer_the_same_two_solids_in_opposite_order() -> None:
    methods = [
        made_from(ONE, Ingredient((A.key, B.key))),
        made_from(TWO, Ingredient((B.key, A.key))),
    ]
    made = planned(
        [A, B, ONE, TWO], methods=methods, recipes=[recipe(wants(ONE, cm3(10)))],
        bookings=[booking("K1", "01-12")], bottles=[bought_bottle("B1", B, g(100))],
    )  # fmt: skip
    assert outcomes(made) == {"K1.1": Outcome.MAKE}


def test_a_derived_method_may_choose_between_ten_and_two_molar() -> None:
    ten, two, tenth = (solution(strength, "acid") for strength in (10.0, 2.0, 0.1))
    methods = [Method(two.key, ()), Method(tenth.key, ())]
    facts = house(
        [ten, two, tenth], methods=methods, recipes=[recipe(wants(tenth, cm3(100)))],
        bookings=[booking("K1", "01-12")], bottles=[bought_bottle("B1", ten, cm3(500))],
    )  # fmt: skip
    assert outcomes(plan(with_derived(facts))) == {"K1.1": Outcome.MAKE}


def test_present_takes_any_strength_and_an_unknown_one() -> None:
    unknown = made_bottle("S1", HALF, cm3(900), nominal=None)
    need = recipe(wants(HALF, cm3(100), closeness=Closeness.PRESENT))
    made = planned([HALF], recipes=[need], bookings=[booking("K1", "01-06")], bottles=[unknown])
    assert outcomes(made) == {"K1.1": Outcome.HAVE}


def test_an_unknown_strength_is_no_use_where_strength_matters() -> None:
    unknown = made_bottle("S1", HALF, cm3(900), nominal=None)
    made = planned([HALF], recipes=[NEED], bookings=[booking("K1", "01-06")], bottles=[unknown])
    assert "its strength is not known" in reasons(made, "K1.1")
