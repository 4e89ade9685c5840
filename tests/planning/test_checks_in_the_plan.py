"""Titrations and looks are planned like makes: as few as will do, in time, on open days."""

from __future__ import annotations

import random
from dataclasses import replace
from datetime import date, timedelta
from itertools import combinations
from typing import Any

import pytest
from houses import (
    MONDAY,
    booking,
    bought_bottle,
    cm3,
    day,
    days,
    found,
    g,
    house,
    looked,
    made_bottle,
    made_from,
    pack,
    planned,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.rules import Rule, RuleKind
from stockroom.measure.workdays import Calendar
from stockroom.planning.checking.titrations import fewest_days
from stockroom.planning.decisions import CheckToDo, Plan, Worth
from stockroom.planning.facts import Closeness, Facts, Line, Requirement
from stockroom.planning.plan import plan
from stockroom.reports.checks_text import check_lines

RECHECK = Rule(RuleKind.RECHECK, days(28))
LOOK = Rule(RuleKind.LOOK, days(90))
TENTH = solution(0.1, rules=(RECHECK,))
FIFTH = solution(0.2, "other salt", rules=(RECHECK,))
SALT = solid()


def exact(line: Line, **more: Any) -> Requirement:
    return wants(line, cm3(10), closeness=Closeness.EXACT, **more)


def old(number: str, line: Line, on: str = "2026-11-02", **record: Any) -> Any:
    """A bottle of 900 cm³ made here long ago and found at its label strength that day."""
    record = {"checks": (found(on, line.strength or 0),), **record}
    return made_bottle(number, line, cm3(900), on, **record)


def asked(*bookings: Any, line: Line = TENTH, bottle: Any = None, **more: Any) -> list[CheckToDo]:
    needs = more.pop("needs", [recipe(exact(line))])
    bottles = [bottle or old("S1", line)]
    made = planned([line], recipes=needs, bookings=bookings, bottles=bottles, **more)
    return list(made.checks)


def told(check: CheckToDo) -> tuple[date, date, date]:
    assert check.opens is not None
    return check.opens, check.best, check.by


# -- titrations of exact needs --------------------------------------------------------


def test_it_is_done_the_open_day_before_so_that_a_bad_result_is_no_surprise() -> None:
    # Monday 1 February: the open day before is Friday 29 January
    (check,) = asked(booking("K1", "02-01"))
    assert told(check) == (day("01-04"), day("01-29"), day("02-01"))


def test_where_only_the_day_itself_would_count_it_is_done_that_morning() -> None:
    needs = [recipe(exact(TENTH, found_within_days=0))]
    (check,) = asked(booking("K1", "02-02"), needs=needs)
    assert told(check) == (day("02-02"), day("02-02"), day("02-02"))


def test_a_window_that_opens_in_a_closed_week_is_told_from_its_first_open_day() -> None:
    # found within 28 days of Thursday 18 March: from 18 February, in a week that is shut
    shut = Calendar(closed=((day("02-15"), day("02-19")),))
    (check,) = asked(booking("K1", "03-18"), calendar=shut)
    assert check.not_before == day("02-18")
    assert told(check) == (day("02-22"), day("03-17"), day("03-18"))


def test_where_every_day_that_would_count_is_closed_that_is_said() -> None:
    # a Saturday class that wants a result of that Saturday or the Friday, which is shut
    shut = Calendar(closed=((day("01-29"), day("01-29")),))
    needs = [recipe(exact(TENTH, found_within_days=1))]
    (check,) = asked(booking("K1", "01-30"), needs=needs, calendar=shut)
    assert check.best == check.by == day("01-28")
    assert "it counts from 2027-01-29 to 2027-01-30 only, and all of that is closed" in check.reason


def test_what_has_not_stood_is_not_titrated() -> None:
    # made on Monday 4 January and stands 48 h: from Wednesday
    made = planned(
        [TENTH, SALT], methods=[made_from(TENTH, SALT, stands_hours=48.0)],
        recipes=[recipe(exact(TENTH))], bookings=[booking("K1", "01-08")],
        bottles=[made_bottle("S1", TENTH, cm3(900), "01-04")],
    )  # fmt: skip
    (check,) = made.checks
    assert told(check) == (day("01-06"), day("01-07"), day("01-08"))


def test_a_batch_not_titrated_when_made_is_titrated_the_day_it_is_ready() -> None:
    made = planned(
        [SALT, TENTH], methods=[made_from(TENTH, SALT)], recipes=[recipe(exact(TENTH))],
        bookings=[booking("K1", "01-13")], bottles=[bought_bottle("B1", SALT, g(50))],
    )  # fmt: skip
    (check,) = made.checks
    assert (check.subject, *told(check)) == ("M01", day("01-12"), day("01-12"), day("01-13"))
    assert check.reason == "not titrated when made; exact"


def test_nothing_nobody_needs_is_titrated() -> None:
    rough = [recipe(wants(FIFTH, cm3(10), closeness=Closeness.ROUGH))]
    made = planned(
        [TENTH, FIFTH], recipes=rough, bookings=[booking("K1", "02-02")],
        bottles=[old("S1", TENTH), made_bottle("S2", FIFTH, cm3(900), "01-04")],
    )  # fmt: skip
    # S1's recheck fell due long ago, and nothing draws on it
    assert [check.subject for check in made.checks] == ["S2"]


def test_bottles_of_two_recipes_and_a_batch_share_one_morning() -> None:
    made = shared("02-09", "02-16", "02-23")
    assert {check.best for check in made.checks} == {day("02-08")}
    assert [check.subject for check in made.checks] == ["S1", "S2", "M01"]


def shared(*on: str) -> Plan:
    """An exact need each of two bottles and of a batch titrated when it was finished long ago."""
    batch = solution(0.3, "third salt", rules=(RECHECK,))
    lines = (TENTH, FIFTH, batch)
    early = booking("K9", "01-13", recipe="R3")
    return planned(
        [TENTH, FIFTH, SALT, batch],
        methods=[made_from(batch, SALT, titrated=True, finish_minutes=30, stands_hours=1.0)],
        recipes=[recipe(exact(line), code=f"R{n}") for n, line in enumerate(lines, 1)],
        bookings=[early, *(booking(f"K{n}", at, recipe=f"R{n}") for n, at in enumerate(on, 1))],
        bottles=[bought_bottle("B1", SALT, g(50)), old("S1", TENTH), old("S2", FIFTH)],
    )  # fmt: skip


def test_too_far_apart_each_has_a_day_of_its_own() -> None:
    # 28 days before 23 March is 23 February: nothing for 9 February counts then
    made = shared("02-09", "03-23", "02-16")
    assert sorted({check.best for check in made.checks}) == [day("02-08"), day("03-22")]


def test_a_recheck_joins_a_titration_that_is_to_be_done_anyway() -> None:
    rough = recipe(wants(FIFTH, cm3(10), closeness=Closeness.ROUGH), code="R2")
    made = planned(
        [TENTH, FIFTH], recipes=[recipe(exact(TENTH)), rough],
        bookings=[booking("K1", "02-09"), booking("K2", "02-11", recipe="R2")],
        bottles=[old("S1", TENTH), old("S2", FIFTH)],
    )  # fmt: skip
    assert {check.subject: check.best for check in made.checks} == dict.fromkeys(
        ("S1", "S2"), day("02-08")
    )


def test_a_recheck_that_would_not_last_to_its_use_is_not_asked_for_when_it_falls_due() -> None:
    # due 14 January, used on 4 March: a result of January would be overdue again by then
    rough = [recipe(wants(TENTH, cm3(10), closeness=Closeness.ROUGH))]
    bottle = old("S1", TENTH, "2026-12-17")
    (check,) = asked(booking("K1", "03-04"), needs=rough, bottle=bottle)
    assert told(check) == (day("02-04"), day("03-03"), day("03-04"))


def test_a_titration_counts_in_the_work_of_its_day_where_its_time_is_known() -> None:
    made = shared("02-09", "02-16", "02-23")
    assert {check.subject: check.minutes for check in made.checks} == {"S1": 0, "S2": 0, "M01": 30}
    (load,) = [load for load in made.loads if load.day == day("02-08")]
    assert (load.minutes, load.checks) == (30, ("M01",))


def test_the_checks_of_one_morning_are_told_together() -> None:
    lines = check_lines(shared("02-09", "02-16", "02-23").checks, 200)
    assert lines[0] == "  Mon 2027-02-08  3 checks together, 30 min hands-on:"
    assert lines[1].startswith("                  titrate M01 third salt 0.3 mol/dm³, between")
    assert len(lines) == 4


# -- the fewest days, held against trying them all ------------------------------------


def smallest(spans: list[tuple[date, date]], open_days: list[date]) -> int:
    """How few of the open days hit every span, by trying all choices in order of size."""
    for count in range(len(open_days) + 1):
        for choice in combinations(open_days, count):
            if all(any(first <= one <= last for one in choice) for first, last in spans):
                return count
    raise AssertionError("some span holds no open day")


def random_spans(seed: int) -> tuple[list[tuple[date, date]], list[date]]:
    draw = random.Random(seed)
    row = [MONDAY + timedelta(days=n) for n in range(14)]
    open_days = [one for one in row if one.weekday() < 5]
    spans = []
    for _ in range(draw.randint(1, 7)):
        last = draw.choice(open_days)
        spans.append((last - timedelta(days=draw.randint(0, 6)), last))
    return spans, open_days


@pytest.mark.parametrize("seed", range(400))
def test_no_fewer_days_would_do(seed: int) -> None:
    spans, open_days = random_spans(seed)
    chosen = fewest_days(spans)
    assert set(chosen) <= set(open_days)
    assert all(any(first <= one <= last for one in chosen) for first, last in spans)
    assert len(chosen) == smallest(spans, open_days)


def random_house(seed: int) -> tuple[Facts, dict[str, tuple[date, int]]]:
    """A few classes on two bottles with exact needs; each need's day and its interval."""
    draw = random.Random(seed)
    shut = MONDAY + timedelta(days=draw.randint(2, 20))
    calendar = Calendar(closed=((shut, shut + timedelta(days=draw.randint(0, 2))),))
    needs, recipes, bookings = {}, [], []
    for n in range(draw.randint(1, 5)):
        line, within = draw.choice((TENTH, FIFTH)), draw.choice((1, 3, 7, 10))
        on = calendar.on_or_after(MONDAY + timedelta(days=draw.randint(1, 22)))
        recipes.append(recipe(exact(line, found_within_days=within), code=f"R{n}"))
        bookings.append(booking(f"K{n}", on.isoformat(), recipe=f"R{n}"))
        needs[f"K{n}"] = on, within
    bottles = [old("S1", TENTH), old("S2", FIFTH)]
    draw.shuffle(bottles)
    facts = house(
        [TENTH, FIFTH], recipes=recipes, bookings=bookings, bottles=bottles, calendar=calendar
    )
    return facts, needs


def windows(facts: Facts, on: date, within: int) -> list[date]:
    """The open days a result may be found on, the day itself only where no other will do."""
    row = (on - timedelta(days=n) for n in range(within, -1, -1))
    inside = [one for one in row if one >= facts.as_at and facts.calendar.is_open(one)]
    return [one for one in inside if one < on] or inside


@pytest.mark.parametrize("seed", range(250))
def test_every_exact_need_is_served_by_the_fewest_titrations(seed: int) -> None:
    facts, needs = random_house(seed)
    made = plan(facts)
    taken = {draw.bottle: set[str]() for need in made.needs for draw in need.draws}
    for need in made.needs:
        for each in need.draws:
            taken[each.bottle].add(need.booking.number)
    for bottle, numbers in taken.items():
        own = [check for check in made.checks if check.subject == bottle]
        served = {number: windows(facts, *needs[number]) for number in numbers}
        for check in own:
            assert facts.calendar.is_open(check.best)
            assert facts.calendar.is_open(check.by)
            assert all(check.best in served[number] for number in check.bookings)
        assert {number for check in own for number in check.bookings} == numbers
        spans = [(row[0], row[-1]) for row in served.values()]
        choices = sorted({one for row in served.values() for one in row})
        assert len(own) == smallest(spans, choices)
    spans = [together(facts, needs, check) for check in made.checks]
    choices = [MONDAY + timedelta(days=n) for n in range(30)]
    open_days = [one for one in choices if facts.calendar.is_open(one)]
    assert len({check.best for check in made.checks}) == smallest(spans, open_days)


def together(
    facts: Facts, needs: dict[str, tuple[date, int]], check: CheckToDo
) -> tuple[date, date]:
    """The days that will do for everything one titration serves."""
    rows = [windows(facts, *needs[number]) for number in check.bookings]
    return max(row[0] for row in rows), min(row[-1] for row in rows)


# -- what a look is worth -------------------------------------------------------------


def past_for_want_of_a_look(**more: Any) -> Facts:
    """S3 went past for want of a look; 100 cm³ are made from a salt in its place."""
    line = solution(0.1, rules=(LOOK,))
    usual = {"bottles": [
        bought_bottle("B1", SALT, g(9)), made_bottle("S3", line, cm3(400), "2026-10-05")
    ]}  # fmt: skip
    return house(
        [SALT, line], methods=[made_from(line, SALT)], recipes=[recipe(wants(line, cm3(100)))],
        bookings=[booking("K1", "01-26")], **{**usual, **more},
    )  # fmt: skip


def test_a_look_says_the_make_and_the_minutes_it_saves() -> None:
    (check,) = plan(past_for_want_of_a_look()).checks
    assert check.reason.endswith(": saves M01 and 10 min")
    assert check.worth == Worth(makes=("M01",), minutes=10)
    assert check.optional


def test_a_look_says_the_order_it_saves_and_who_would_pay() -> None:
    salt = solid(packs=(pack(g(100), 24.90),))
    line = solution(0.1, rules=(LOOK,))
    facts = house(
        [salt, line], methods=[made_from(line, salt)], recipes=[recipe(wants(line, cm3(100)))],
        bookings=[booking("K1", "01-26"), booking("K2", "01-27", department="BI")],
        bottles=[made_bottle("S3", line, cm3(400), "2026-10-05")],
    )  # fmt: skip
    (check,) = plan(facts).checks
    assert "and the order of salt: saves M01, 10 min, and £24.90 of O01" in check.reason
    assert check.reason.endswith("(BI £12.45, CH £12.45)")
    assert check.worth is not None
    assert check.worth.orders == (("O01", 2490),)
    # an order not needed is one not sent: the look comes before its order-by day
    assert check.best == plan(facts).orders[0].order_by < check.by


def test_a_look_that_ends_a_shortage_says_so() -> None:
    facts = replace(past_for_want_of_a_look(), methods={})
    (check,) = plan(facts).checks
    assert check.reason.endswith(": saves the shortage of K1.1")


def test_a_make_that_only_gets_smaller_is_changed_and_not_saved() -> None:
    # 120 cm³ of it serve one of two classes: the other's 100 are made all the same
    line = solution(0.1, rules=(LOOK,))
    held = [bought_bottle("B1", SALT, g(9)), made_bottle("S3", line, cm3(120), "2026-10-05")]
    facts = past_for_want_of_a_look(bottles=held)
    facts = replace(facts, bookings=(booking("K1", "01-26"), booking("K2", "01-26")))
    (check,) = plan(facts).checks
    assert check.worth == Worth()
    assert check.reason.endswith("save or change M01")


def test_a_look_that_would_change_nothing_is_not_asked_for() -> None:
    # 8 cm³ of it serve nobody: the class wants 100 from one bottle
    line = solution(0.1, rules=(LOOK,))
    small = [bought_bottle("B1", SALT, g(9)), made_bottle("S3", line, cm3(8), "2026-10-05")]
    assert plan(past_for_want_of_a_look(bottles=small)).checks == ()


def test_its_worth_is_that_of_the_plan_once_the_look_is_entered() -> None:
    facts = past_for_want_of_a_look()
    before = plan(facts)
    (check,) = before.checks
    seen = [
        replace(b, record=replace(b.record, checks=(looked("01-04"),))) if b.number == "S3" else b
        for b in facts.bottles
    ]
    after = plan(replace(facts, bottles=tuple(seen)))
    saved = sum(m.minutes for m in before.makes) - sum(m.minutes for m in after.makes)
    assert check.worth is not None
    assert check.worth.minutes == saved == 10
    assert after.makes == ()


def test_many_looks_are_estimated_from_what_hangs_on_them() -> None:
    lines = [solution(0.1, f"salt {n}", rules=(LOOK,)) for n in range(6)]
    made = planned(
        [SALT, *lines], methods=[made_from(line, SALT) for line in lines],
        recipes=[recipe(wants(line, cm3(100)), code=f"R{n}") for n, line in enumerate(lines)],
        bookings=[booking(f"K{n}", "01-26", recipe=f"R{n}") for n in range(6)],
        bottles=[bought_bottle("B1", SALT, g(90)), *(
            made_bottle(f"S{n}", line, cm3(400), "2026-10-05") for n, line in enumerate(lines)
        )],
    )  # fmt: skip
    estimated = [check.worth.estimated for check in made.checks if check.worth]
    assert sorted(estimated) == [False] * 4 + [True] * 2
    assert all(check.worth and check.worth.minutes == 10 for check in made.checks)
    assert sum("saves about M" in check.reason for check in made.checks) == 2


def test_a_bottle_in_doubt_is_looked_at_the_open_day_before_it_is_used() -> None:
    parent = made_bottle("S1", FIFTH, cm3(0), "01-04", set_aside="yellow")
    child = replace(made_bottle("S2", TENTH, cm3(500), "01-04"), lineage=("S1",))
    made = planned(
        [TENTH, FIFTH], recipes=[recipe(wants(TENTH, cm3(100)))],
        bookings=[booking("K1", "01-18")], bottles=[parent, child],
    )  # fmt: skip
    (look,) = [check for check in made.checks if check.what == "look"]
    assert (look.best, look.by) == (day("01-15"), day("01-18"))


# -- the college ----------------------------------------------------------------------


def test_the_look_at_the_iodide_is_worth_its_order(term: Plan) -> None:
    (look,) = [check for check in term.checks if check.subject == "S03"]
    (iodide,) = [order for order in term.orders if order.line == "potassium iodide"]
    assert look.worth is not None
    assert look.worth.orders == ((iodide.id, 2490),)
    assert f"£24.90 of {iodide.id}" in look.reason


def test_the_college_titrates_the_thiosulfate_and_the_permanganate_in_one_morning(
    term: Plan,
) -> None:
    days = {check.best for check in term.checks if "exact" in check.reason}
    assert days == {day("03-03")}


def test_no_check_of_the_college_is_on_a_closed_day(term: Plan, practice: Any) -> None:
    from stockroom.store.snapshot import facts

    calendar = facts(practice, MONDAY).calendar
    for check in term.checks:
        assert all(calendar.is_open(one) for one in (check.best, check.by, check.opens) if one)
