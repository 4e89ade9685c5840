"""Looking ahead for bottles: who moves for whom, what stays shut, what is kept for a make."""

from __future__ import annotations

from dataclasses import replace
from datetime import timedelta

import pytest
from houses import (
    MONDAY,
    answer,
    booking,
    bought_bottle,
    cm3,
    found,
    g,
    house,
    keeps,
    made_bottle,
    made_from,
    make_of,
    outcomes,
    planned,
    reasons,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.rules import Origin
from stockroom.measure.days import PrintedDate
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.explode import explode, standing
from stockroom.planning.facts import Booking, Closeness, Firmness
from stockroom.planning.net import net
from stockroom.planning.wants import Settled

TENTH = solution(0.1)
SALT = solid()


def bottles_of(made: Plan, ref: str) -> list[str]:
    return [draw.bottle for draw in answer(made, ref).draws]


def printed(day: int) -> PrintedDate:
    return PrintedDate("", (MONDAY + timedelta(day),))


def on(day: int) -> str:
    return (MONDAY + timedelta(day)).isoformat()


# -- a tolerant class before a strict one ----------------------------------------------


STRONG = made_bottle("A", TENTH, cm3(110), checks=(found("01-04", 0.1),), printed=printed(10))
WEAKER = made_bottle("B", TENTH, cm3(110), checks=(found("01-04", 0.09),), printed=printed(20))


def tolerant_then_strict(firmness: Firmness = Firmness.FIRM) -> Plan:
    """100 cm³ of at least 0.085 on day 2 and 100 of at least 0.098 on day 4."""
    tolerant = recipe(wants(TENTH, cm3(100), lowest=0.085, highest=0.2))
    strict = recipe(wants(TENTH, cm3(100), lowest=0.098, highest=0.2), code="R02")
    bookings = [booking("K1", on(2)), booking("K2", on(4), recipe="R02", firmness=firmness)]
    return planned([TENTH], recipes=[tolerant, strict], bookings=bookings, bottles=[STRONG, WEAKER])


def test_the_tolerant_class_leaves_the_strong_bottle_to_the_strict_one() -> None:
    # the strong one goes past first: served in turn it would be poured out on day 2
    made = tolerant_then_strict()
    assert outcomes(made) == {"K1.1": Outcome.HAVE, "K2.1": Outcome.HAVE}
    assert (bottles_of(made, "K1.1"), bottles_of(made, "K2.1")) == (["B"], ["A"])


def test_it_says_for_whom_the_bottle_was_kept() -> None:
    assert "A not used: kept for K2.1, which nothing else will serve" in reasons(
        tolerant_then_strict(), "K1.1"
    )


def test_it_moves_for_a_pencilled_class_too_since_nobody_loses() -> None:
    made = tolerant_then_strict(firmness=Firmness.PENCILLED)
    assert bottles_of(made, "K2.1") == ["A"]


def test_nobody_served_is_left_out_for_who_comes_after() -> None:
    need = recipe(wants(TENTH, cm3(100), lowest=0.098, highest=0.2))
    bookings = [booking("K1", on(2)), booking("K2", on(4))]
    made = planned([TENTH], recipes=[need], bookings=bookings, bottles=[STRONG, WEAKER])
    assert outcomes(made) == {"K1.1": Outcome.HAVE, "K2.1": Outcome.SHORT}


def test_where_all_are_served_in_turn_nobody_moves() -> None:
    need = recipe(wants(TENTH, cm3(100), lowest=0.085, highest=0.2))
    bookings = [booking("K1", on(2)), booking("K2", on(4))]
    made = planned([TENTH], recipes=[need], bookings=bookings, bottles=[WEAKER, STRONG])
    assert (bottles_of(made, "K1.1"), bottles_of(made, "K2.1")) == (["A"], ["B"])


def test_three_move_along_a_chain() -> None:
    bottles = [
        made_bottle(n, TENTH, cm3(110), checks=(found("01-04", s),), printed=printed(past))
        for n, s, past in (("A", 0.120, 10), ("B", 0.110, 20), ("C", 0.100, 30))
    ]
    lowest = {"K1": 0.095, "K2": 0.105, "K3": 0.115}
    recipes = [
        recipe(wants(TENTH, cm3(100), lowest=low, highest=0.2), code=k) for k, low in lowest.items()
    ]
    bookings = [booking(k, on(2 + n), recipe=k) for n, k in enumerate(lowest)]
    made = planned([TENTH], recipes=recipes, bookings=bookings, bottles=bottles)
    assert [bottles_of(made, f"{k}.1") for k in lowest] == [["C"], ["B"], ["A"]]


def test_several_may_give_way_at_once() -> None:
    # A alone holds enough for the third, and both the others stand in it
    bottles = [
        made_bottle("A", TENTH, cm3(210), printed=printed(10)),
        made_bottle("B", TENTH, cm3(110), checks=(found("01-04", 0.097),), printed=printed(20)),
        made_bottle("C", TENTH, cm3(110), checks=(found("01-04", 0.103),), printed=printed(20)),
    ]
    recipes = [recipe(wants(TENTH, cm3(n))) for n in (100, 100, 200)]
    recipes = [replace(one, code=f"R{n}") for n, one in enumerate(recipes)]
    bookings = [booking(f"K{n}", on(2 + n), recipe=f"R{n}") for n in range(3)]
    made = planned([TENTH], recipes=recipes, bookings=bookings, bottles=bottles)
    assert bottles_of(made, "K2.1") == ["A"]
    assert sorted(bottles_of(made, "K0.1") + bottles_of(made, "K1.1")) == ["B", "C"]


# -- sealed bottles ------------------------------------------------------------------


def test_a_sealed_bottle_stays_shut_though_it_goes_past_sooner() -> None:
    sealed = bought_bottle("B1", TENTH, cm3(500), printed=printed(10))
    open_ = bought_bottle("B2", TENTH, cm3(500), opened=MONDAY, printed=printed(40))
    need = recipe(wants(TENTH, cm3(100)))
    made = planned(
        [TENTH], recipes=[need], bookings=[booking("K1", on(4))], bottles=[sealed, open_]
    )
    assert bottles_of(made, "K1.1") == ["B2"]


def test_one_bottle_is_opened_where_in_turn_two_would_be() -> None:
    # the first class would open B1, and the second needs all that B2 alone still gives it
    small = bought_bottle("B1", TENTH, cm3(110), printed=printed(10))
    large = bought_bottle("B2", TENTH, cm3(500), printed=printed(40))
    need = recipe(wants(TENTH, cm3(100)))
    bookings = [booking("K1", on(4)), booking("K2", on(20))]
    made = planned([TENTH], recipes=[need], bookings=bookings, bottles=[small, large])
    assert (bottles_of(made, "K1.1"), bottles_of(made, "K2.1")) == (["B2"], ["B2"])
    assert "B1 not used: not opened: B2 will do" in reasons(made, "K1.1")


def test_whom_an_early_opening_would_spoil_it_for_is_still_served() -> None:
    life = solution(0.1, rules=(keeps(5, Origin.OPENED),))
    row = [bought_bottle(n, life, cm3(110)) for n in ("B1", "B2")]
    need = recipe(wants(life, cm3(50)))
    bookings = [booking("K1", on(4)), booking("K2", on(20)), booking("K3", on(24))]
    made = planned([life], recipes=[need], bookings=bookings, bottles=row)
    assert set(outcomes(made).values()) == {Outcome.HAVE}
    assert bottles_of(made, "K2.1") == bottles_of(made, "K3.1") != bottles_of(made, "K1.1")


def test_an_exact_class_still_takes_the_most_recently_checked() -> None:
    row = [
        made_bottle(n, TENTH, cm3(210), "2026-12-01", checks=(found(day, 0.1),))
        for n, day in (("A", "2026-12-20"), ("B", "01-04"))
    ]
    need = recipe(wants(TENTH, cm3(100), closeness=Closeness.EXACT, may_differ=0.05))
    made = planned([TENTH], recipes=[need], bookings=[booking("K1", on(2))], bottles=row)
    assert bottles_of(made, "K1.1") == ["B"]


# -- take or make --------------------------------------------------------------------


WEEK = solution(0.1, "week", rules=(keeps(7),))


def kept_or_poured(*bookings: Booking, held: float = 110) -> Plan:
    """100 cm³ a class, an open bottle of it that stays good, and salt to make the rest from."""
    bottle = bought_bottle("S1", WEEK, cm3(held), opened=MONDAY)
    return planned(
        [SALT, WEEK], methods=[made_from(WEEK, SALT)], recipes=[recipe(wants(WEEK, cm3(100)))],
        bookings=bookings, bottles=[bottle, bought_bottle("B1", SALT, g(500))],
    )  # fmt: skip


def classes(*days: int) -> list[Booking]:
    return [booking(f"K{day}", on(day)) for day in days]


def test_a_bottle_is_kept_where_that_saves_a_whole_make() -> None:
    # days 7 and 8 share a make and day 23 cannot: poured out on day 7 it would mean two makes
    made = kept_or_poured(*classes(7, 8, 23))
    assert outcomes(made) == {
        "K7.1": Outcome.MAKE,
        "K8.1": Outcome.MAKE,
        "K23.1": Outcome.HAVE,
    }
    assert make_of(made, WEEK).bookings == ("K7", "K8")
    assert "S1 not used: kept for K23.1, which would be made for by itself" in reasons(made, "K7.1")


def test_where_it_saves_nothing_it_is_used_in_turn() -> None:
    made = kept_or_poured(*classes(7, 23))
    assert outcomes(made) == {"K7.1": Outcome.HAVE, "K23.1": Outcome.MAKE}


def test_whoever_cannot_be_made_for_takes_the_bottle() -> None:
    # it stands four days, so that nobody can make it for tomorrow
    pencilled = booking("K1", on(1), firmness=Firmness.PENCILLED)
    bottle = bought_bottle("S1", WEEK, cm3(110), opened=MONDAY)
    made = planned(
        [SALT, WEEK], methods=[made_from(WEEK, SALT, stands_hours=96.0)],
        recipes=[recipe(wants(WEEK, cm3(100)))], bookings=[pencilled, booking("K9", on(9))],
        bottles=[bottle, bought_bottle("B1", SALT, g(500))],
    )  # fmt: skip
    assert outcomes(made) == {"K1.1": Outcome.HAVE, "K9.1": Outcome.MAKE}


def test_a_bottle_is_not_kept_where_the_make_cannot_be_had_after_all() -> None:
    # no salt for K7 and K8: in turn the bottle serves the first of them
    bottle = bought_bottle("S1", WEEK, cm3(110), opened=MONDAY)
    made = planned(
        [SALT, WEEK], methods=[made_from(WEEK, SALT)], recipes=[recipe(wants(WEEK, cm3(100)))],
        bookings=classes(7, 8, 23), bottles=[bottle],
    )  # fmt: skip
    # an order comes for the last of them only
    assert outcomes(made)["K7.1"] is Outcome.HAVE


# -- made while what it takes is still good ---------------------------------------------


STRONG_STOCK = solution(1.0, "strong", rules=(keeps(60),))


def diluted(life: int | None, *, past: int = 10, held: float = 100, **more: object) -> Plan:
    """100 cm³ of 0.1 on day 21, from a stock good until day `past` or, without it, from salt."""
    weak = solution(0.1, "weak", rules=(keeps(life),) if life else ())
    stock = made_bottle("S01", STRONG_STOCK, cm3(held), printed=printed(past))
    return planned(
        [SALT, STRONG_STOCK, weak],
        methods=[made_from(STRONG_STOCK, SALT), made_from(weak, STRONG_STOCK)],
        recipes=[recipe(wants(weak, cm3(100)))], bookings=[booking("K1", on(21))],
        bottles=[stock, bought_bottle("B1", SALT, g(500))],
    )  # fmt: skip


def made_on(made: Plan, item: str) -> list[int]:
    return [(make.on - MONDAY).days for make in made.makes if make.item == item]


def test_it_is_made_while_the_stock_is_good() -> None:
    made = diluted(30)
    assert (made_on(made, "weak"), made_on(made, "strong")) == ([10], [])
    said = "made by 2027-01-14, while S01 is still good: saves making strong 1 mol/dm3"
    assert said in reasons(made, "K1.1")


def test_on_a_closed_last_day_it_is_made_on_the_open_one_before() -> None:
    # day 13 is a Sunday
    assert made_on(diluted(30, past=13), "weak") == [11]


@pytest.mark.parametrize(
    ("life", "past", "held"),
    # it would not keep; nobody has said that it keeps; the stock is good all the while; too little
    [(5, 10, 100), (None, 10, 100), (30, 40, 100), (30, 10, 8)],
)
def test_else_it_is_made_as_late_as_may_be(life: int | None, past: int, held: float) -> None:
    made = diluted(life, past=past, held=held)
    assert made_on(made, "weak") == [18]
    assert "still good: saves" not in reasons(made, "K1.1")


def test_two_that_share_a_make_are_not_torn_apart_to_save_less() -> None:
    # the stock is enough for one of the two; a second make costs as much as a new stock
    weak = solution(0.1, "weak", rules=(keeps(30),))
    stock = made_bottle("S01", STRONG_STOCK, cm3(17), printed=printed(10))
    made = planned(
        [SALT, STRONG_STOCK, weak],
        methods=[made_from(STRONG_STOCK, SALT), made_from(weak, STRONG_STOCK, minutes=30)],
        recipes=[recipe(wants(weak, cm3(100)))], bookings=classes(21, 22),
        bottles=[stock, bought_bottle("B1", SALT, g(500))],
    )  # fmt: skip
    assert len(made_on(made, "weak")) == 1


# -- many at once -----------------------------------------------------------------------


def test_lines_that_have_nothing_in_common_fail_apart() -> None:
    lines = [solution(0.1, f"line {n}") for n in range(3)]
    recipes = [recipe(wants(line, cm3(100)), code=f"R{n}") for n, line in enumerate(lines)]
    bookings = [booking(f"K{n}", on(4), recipe=f"R{n}") for n in range(3)]
    facts = house(lines, recipes=recipes, bookings=bookings, bottles=[
        made_bottle("A", lines[1], cm3(500)),
    ])  # fmt: skip
    netted = net(facts, explode(facts, standing(facts.bookings, facts.as_at, facts.end)))
    settled = [want.settled for want in netted.wants]
    assert settled == [Settled.SHORT, Settled.HELD, Settled.SHORT]
