"""A make starts on the last open day that leaves it ready, and never too early to keep."""

from __future__ import annotations

from datetime import date
from typing import Any

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    g,
    house,
    keeps,
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

from stockroom.keeping.rules import Rule, RuleKind
from stockroom.measure.workdays import Calendar
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.facts import Closeness, House, Ingredient, Line
from stockroom.planning.plan import plan

SALT = solid()
JAR = bought_bottle("B1", SALT, g(500), opened=day("01-04"))
MARCH_SHUT = Calendar(closed=((day("03-08"), day("03-08")),))


def one_make(line: Line, on: str, minute: int = 555, **more: Any) -> Plan:
    """The plan of one booking of 100 cm³; `asked` and `method` go to the need and the method."""
    asked, method = more.pop("asked", {}), more.pop("method", {})
    return planned(
        [SALT, line], methods=[made_from(line, SALT, **method)],
        recipes=[recipe(wants(line, cm3(100), **asked))],
        bookings=[booking("K1", on, minute)], bottles=[JAR], **more,
    )  # fmt: skip


HALF = solution(0.5)


# -- standing and closed days ----------------------------------------------------------

LIME = solution(None, "limewater")
HYDROXIDE = solid("calcium hydroxide")


def limewater(as_at: str, **house_more: Any) -> Plan:
    three_grams = Ingredient((HYDROXIDE.key,), g(3))
    return planned(
        [HYDROXIDE, LIME],
        methods=[made_from(LIME, three_grams, minutes=15, stands_hours=24.0)],
        recipes=[recipe(wants(LIME, cm3(500), closeness=Closeness.PRESENT))],
        bookings=[booking("K22", "03-09")], bottles=[bought_bottle("B26", HYDROXIDE, g(290))],
        as_at=day(as_at), calendar=MARCH_SHUT, **house_more,
    )  # fmt: skip


@pytest.mark.parametrize("day_before", [True, False])
def test_limewater_for_tuesday_starts_on_friday_over_a_closed_monday(day_before: bool) -> None:
    # the worked case: Tue 9 March, Mon 8 closed, stands 24 h
    made = limewater("03-01", house=House(batch_step=cm3(1), finish_day_before=day_before))
    make = make_of(made, LIME)
    assert (make.on, make.ready) == (day("03-05"), day("03-06"))
    assert "stands 24 h" in "; ".join(make.reasons)
    assert [source.amount for source in make.sources] == [g(1.5)]


def test_limewater_thought_of_on_the_closed_monday_cannot_be_had() -> None:
    made = limewater("03-08")
    assert outcomes(made) == {"K22.1": Outcome.SHORT}
    assert made.short[0].reason == (
        "cannot: limewater saturated stands 24 h, booked 2027-03-09, and today is 2027-03-08"
        "; work had to start by 2027-03-05"
    )


STANDING = {"minutes": 25, "finish_minutes": 30, "stands_hours": 48.0, "titrated": True}


def test_what_stands_two_days_and_is_filtered_starts_on_friday_for_tuesday() -> None:
    # permanganate for Tue 2 February: Fri 29 January, filtered and titrated on Mon 1 February
    make = make_of(one_make(HALF, "02-02", method=STANDING), HALF)
    assert (make.on, make.ready, make.finish_on) == (day("01-29"), day("02-01"), day("02-01"))


def test_started_on_monday_it_cannot_be_ready() -> None:
    made = one_make(HALF, "02-02", method=STANDING, as_at=day("02-01"))
    assert outcomes(made) == {"K1.1": Outcome.SHORT}
    assert "stands 48 h" in made.short[0].reason


# -- the same morning ------------------------------------------------------------------


def test_fresh_is_made_on_the_day_of_use() -> None:
    make = make_of(one_make(HALF, "01-13", asked={"fresh": True}), HALF)
    assert (make.on, make.earliest, make.latest, make.fresh) == (*[day("01-13")] * 3, True)


def test_fresh_leaves_what_stands_too_long_short() -> None:
    made = one_make(HALF, "01-13", asked={"fresh": True}, method={"stands_hours": 2.0})
    assert outcomes(made) == {"K1.1": Outcome.SHORT}
    assert made.short[0].reason == (
        f"cannot: {HALF.key} takes 130 min on the morning of 2027-01-13, "
        "and that day leaves no staffed time before 09:15: ready 10:10, class 09:15"
    )


@pytest.mark.parametrize(("minute", "outcome"), [(490, Outcome.MAKE), (489, Outcome.SHORT)])
def test_ten_minutes_from_opening_are_needed_for_a_ten_minute_make(
    minute: int, outcome: Outcome
) -> None:
    assert outcomes(one_make(HALF, "01-13", minute, asked={"fresh": True})) == {"K1.1": outcome}


def test_for_an_evening_it_is_made_in_staffed_hours() -> None:
    assert make_of(one_make(HALF, "01-13", 1110, asked={"fresh": True}), HALF).on == day("01-13")


def test_fresh_on_a_closed_day_is_short() -> None:
    made = one_make(HALF, "01-16", asked={"fresh": True})
    assert outcomes(made) == {"K1.1": Outcome.SHORT}


def test_a_sixty_minute_job_does_not_fit_a_fifty_minute_morning() -> None:
    narrow = Calendar(open_from=480, open_to=530)
    made = one_make(HALF, "01-13", 900, method={"minutes": 60}, calendar=narrow)
    assert outcomes(made) == {"K1.1": Outcome.SHORT}


# -- the day before --------------------------------------------------------------------


@pytest.mark.parametrize(("on", "made_on"), [("01-13", "01-12"), ("01-18", "01-15")])
def test_what_is_not_fresh_is_finished_the_open_day_before(on: str, made_on: str) -> None:
    assert make_of(one_make(HALF, on), HALF).on == day(made_on)


def test_a_house_may_let_it_be_made_the_same_morning() -> None:
    same = House(batch_step=cm3(1), finish_day_before=False)
    assert make_of(one_make(HALF, "01-13", house=same), HALF).on == day("01-13")


def test_too_late_for_the_day_before_the_morning_itself_will_do() -> None:
    made = one_make(HALF, "01-04")
    assert make_of(made, HALF).on == day("01-04")
    assert "too late" in reasons(made, "K1.1")


def test_nothing_is_planned_to_start_before_today() -> None:
    make = make_of(one_make(HALF, "01-06", as_at=day("01-05")), HALF)
    assert (make.earliest, make.on) == (day("01-05"), day("01-05"))


# -- never too early -------------------------------------------------------------------


@pytest.mark.parametrize(
    ("life", "earliest"),
    # a life of N days counts from the day made: made Monday with 2 days is good through Wednesday
    [(keeps(1), "01-20"), (keeps(2), "01-19"), (keeps(7), "01-14")],
)
def test_it_is_not_made_so_early_that_it_would_be_past(life: Rule, earliest: str) -> None:
    line = solution(0.5, rules=(life,))
    make = make_of(one_make(line, "01-21"), line)
    assert (make.earliest, make.on) == (day(earliest), day("01-20"))


def test_the_recipes_freshest_age_is_stricter_than_the_life() -> None:
    line = solution(0.5, rules=(keeps(28),))
    make = make_of(one_make(line, "01-21", asked={"freshest_days": 3}), line)
    assert make.earliest == day("01-18")


def test_what_has_no_life_may_be_made_from_today_on() -> None:
    assert make_of(one_make(HALF, "01-21"), HALF).earliest == day("01-04")


def test_what_keeps_only_that_day_is_made_that_day_though_the_recipe_does_not_say_fresh() -> None:
    line = solution(0.5, rules=(Rule(RuleKind.SAME_DAY),))
    assert make_of(one_make(line, "01-21"), line).on == day("01-21")


def test_a_make_is_still_good_on_the_day_it_is_for() -> None:
    # finished on Friday with two days, it is past on Monday
    line = solution(0.5, rules=(keeps(2),))
    make = make_of(one_make(line, "01-18"), line)
    assert make.good_until is not None
    assert make.good_until >= day("01-18")


# -- levels ----------------------------------------------------------------------------

STRONG, WEAK = solution(1.0), solution(0.1)


def two_levels(on: str, **strong: Any) -> Plan:
    return planned(
        [SALT, STRONG, WEAK],
        methods=[made_from(STRONG, SALT, **strong), made_from(WEAK, STRONG)],
        recipes=[recipe(wants(WEAK, cm3(1000)))], bookings=[booking("K1", on)], bottles=[JAR],
    )  # fmt: skip


def test_the_stock_is_ready_before_the_dilution_starts() -> None:
    made = two_levels("01-21", stands_hours=48.0)
    strong, weak = make_of(made, STRONG), make_of(made, WEAK)
    assert (strong.on, strong.ready, weak.on) == (day("01-18"), day("01-20"), day("01-20"))


def test_the_dilution_cannot_start_before_its_stock_is_ready() -> None:
    made = two_levels("01-08", stands_hours=48.0)
    assert make_of(made, WEAK).earliest == day("01-06")


def test_two_levels_that_cannot_both_be_done_are_short() -> None:
    made = two_levels("01-06", stands_hours=48.0)
    assert outcomes(made) == {"K1.1": Outcome.SHORT}
    assert made.makes == ()


def test_a_bought_solid_holds_back_the_make() -> None:
    sold = solid(packs=(pack(g(500), 10.0, lead=3),))
    made = planned(
        [sold, HALF], methods=[made_from(HALF, sold)], recipes=[recipe(wants(HALF, cm3(100)))],
        bookings=[booking("K1", "01-14")],
    )  # fmt: skip
    assert (make_of(made, HALF).earliest, make_of(made, HALF).on) == (day("01-07"), day("01-13"))


# -- periods ---------------------------------------------------------------------------


def test_bookings_before_the_period_are_planned_and_left_out() -> None:
    facts = house(
        [SALT, HALF], methods=[made_from(HALF, SALT)], recipes=[recipe(wants(HALF, cm3(100)))],
        bookings=[booking("K1", "01-12"), booking("K2", "02-12")], bottles=[JAR],
        start=date(2027, 2, 1),
    )  # fmt: skip
    made = plan(facts)
    assert list(outcomes(made)) == ["K2.1"]
    assert {number for make in made.makes for number in make.bookings} >= {"K2"}
