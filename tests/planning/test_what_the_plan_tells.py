"""What is past, what to check, what was guessed, and why: told from the same plan."""

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
    looked,
    made_bottle,
    made_from,
    planned,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.findings import Lasting
from stockroom.keeping.rules import Origin, Rule, RuleKind
from stockroom.keeping.verdict import Condition
from stockroom.measure.days import parse_printed
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Bar, Closeness, Facts, Line, Place, Swap
from stockroom.planning.plan import plan
from stockroom.planning.ready import Readiness, readiness
from stockroom.planning.whys.why import LINES, folded, instead, why

SALT = solid()
TENTH = solution(0.1)
RECHECK = Rule(RuleKind.RECHECK, days(28))
LOOK = Rule(RuleKind.LOOK, days(90))


def on_shelf(line: Line, *bottles: Any, on: str = "03-04", **asked: Any) -> Plan:
    """The plan of one booking of 100 cm³ from these bottles."""
    need = recipe(wants(line, cm3(100), **asked))
    return planned([line], recipes=[need], bookings=[booking("K1", on)], bottles=bottles)


def guessed(made: Plan) -> list[tuple[str, str]]:
    return [(guess.subject, guess.text) for guess in made.guesses]


# -- guesses ---------------------------------------------------------------------


def test_nothing_leaned_on_is_nothing_guessed() -> None:
    bottle = made_bottle("S1", TENTH, cm3(500), checks=(found("01-04", 0.1),))
    assert guessed(on_shelf(TENTH, bottle)) == []


def test_a_label_nobody_checked_is_a_guess() -> None:
    made = on_shelf(TENTH, made_bottle("S1", TENTH, cm3(500)))
    assert guessed(made) == [
        ("S1", "label strength 0.1 mol/dm3 taken as it stands: never titrated")
    ]


@pytest.mark.parametrize("closeness", [Closeness.ROUGH, Closeness.PRESENT])
def test_where_strength_hardly_matters_the_label_is_no_guess(closeness: Closeness) -> None:
    made = on_shelf(TENTH, made_bottle("S1", TENTH, cm3(500)), closeness=closeness)
    assert guessed(made) == []


def test_an_opening_day_nobody_wrote_is_a_guess() -> None:
    bottle = bought_bottle("B1", TENTH, cm3(500), opened=day("01-04"), opened_guessed=True)
    made = on_shelf(TENTH, bottle, closeness=Closeness.ROUGH)
    assert guessed(made) == [
        ("B1", "opened, day not written: counted from the day it was received")
    ]


def test_a_date_with_two_readings_is_asked_about() -> None:
    bottle = bought_bottle("B1", TENTH, cm3(500), printed=parse_printed("04/05/27"))
    ((subject, text),) = guessed(on_shelf(TENTH, bottle, closeness=Closeness.ROUGH))
    assert subject == "B1"
    assert "5 April 2027 or 4 May 2027" in text


def test_a_check_overdue_on_the_day_is_a_guess() -> None:
    line = solution(0.1, rules=(RECHECK,))
    made = on_shelf(line, made_bottle("S1", line, cm3(500)), closeness=Closeness.ROUGH)
    assert [text.split(" (")[0] for _, text in guessed(made)] == [
        "its check falls due before it is used"
    ]


def test_a_closeness_and_minutes_nobody_wrote_are_guesses() -> None:
    method = made_from(TENTH, SALT, minutes_guessed=True)
    need = recipe(wants(TENTH, cm3(100), closeness_guessed=True))
    made = planned(
        [SALT, TENTH], methods=[method], recipes=[need], bookings=[booking("K1", "01-12")],
        bottles=[bought_bottle("B1", SALT, g(500))],
    )  # fmt: skip
    assert guessed(made) == [
        (TENTH.key, "no closeness written in R01: close assumed"),
        (TENTH.key, "no hands-on time written: 10 min assumed"),
    ]
    assert all(isinstance(guess, Lasting) for guess in made.guesses)


def test_a_bottle_made_from_one_overdue_its_check_is_in_doubt_with_it() -> None:
    # the worked case: diluted six days after its parent's recheck fell due
    strong = solution(10.0, "ammonia", rules=(Rule(RuleKind.RECHECK, days(365), Origin.OPENED),))
    weak = solution(2.0, "ammonia")
    parent = bought_bottle("B16", strong, cm3(210), "2025-09-29", opened=day("2025-10-06"))
    child = replace(made_bottle("S20", weak, cm3(420), "2026-10-12"), lineage=("B16",))
    made = planned(
        [strong, weak], recipes=[recipe(wants(weak, cm3(48), closeness=Closeness.ROUGH))],
        bookings=[booking("K16", "02-10")], bottles=[parent, child],
    )  # fmt: skip
    assert guessed(made) == [
        ("S20", "made from B16 6 d after its recheck fell due: in doubt with it")
    ]


# -- checks to do ----------------------------------------------------------------


def test_an_exact_need_wants_one_titration_inside_its_interval() -> None:
    # the worked case: S02 for 4 March, within 28 days: once between 4 February and 4 March
    line = solution(0.1, rules=(RECHECK,))
    bottle = made_bottle(
        "S02", line, cm3(1400), "2026-12-02", checks=(found("2026-12-10", 0.0987),)
    )
    made = on_shelf(line, bottle, closeness=Closeness.EXACT, may_differ=0.05)
    (check,) = made.checks
    assert (check.subject, check.what) == ("S02", "titrate")
    assert (check.not_before, check.by, check.best) == (day("02-04"), day("03-04"), day("03-03"))


def test_one_titration_serves_all_exact_needs_it_covers() -> None:
    line = solution(0.1, rules=(RECHECK,))
    need = recipe(wants(line, cm3(100), closeness=Closeness.EXACT))
    bookings = [booking("K1", "03-02"), booking("K2", "03-04"), booking("K3", "03-25")]
    bottle = made_bottle("S1", line, cm3(900), "2026-12-02", checks=(found("2026-12-10", 0.1),))
    made = planned([line], recipes=[need], bookings=bookings, bottles=[bottle])
    assert [check.bookings for check in made.checks] == [("K1", "K2", "K3")]


def test_what_is_found_inside_its_interval_needs_no_check() -> None:
    line = solution(0.1, rules=(RECHECK,))
    bottle = made_bottle("S1", line, cm3(900), checks=(found("01-04", 0.1),))
    assert on_shelf(line, bottle, on="02-01", closeness=Closeness.EXACT).checks == ()


def test_a_look_that_would_save_a_make_is_asked_for() -> None:
    line = solution(0.1, rules=(LOOK,))
    made = planned(
        [SALT, line], methods=[made_from(line, SALT)], recipes=[recipe(wants(line, cm3(100)))],
        bookings=[booking("K1", "01-26")],
        bottles=[bought_bottle("B1", SALT, g(9)), made_bottle("S3", line, cm3(400), "2026-10-05")],
    )  # fmt: skip
    (check,) = made.checks
    assert (check.subject, check.what, check.by) == ("S3", "look", day("01-25"))
    assert "save or change M01" in check.reason


def test_a_recheck_that_falls_due_on_a_closed_day_is_done_before_it() -> None:
    # due Saturday 6 March, used on Tuesday 9
    line = solution(0.1, rules=(RECHECK,))
    bottle = made_bottle("S1", line, cm3(900), checks=(found("2027-02-06", 0.1),))
    need = recipe(wants(line, cm3(100), closeness=Closeness.ROUGH))
    made = planned(
        [line], recipes=[need], bookings=[booking("K1", "03-09")], bottles=[bottle],
        as_at=day("02-08"),
    )  # fmt: skip
    (check,) = made.checks
    assert check.by == day("03-05")
    assert "a closed day" in check.reason


# -- what is past ----------------------------------------------------------------


def test_past_bottles_are_told_with_whom_they_matter_to() -> None:
    line = solution(0.1, rules=(keeps(10),))
    row = [
        made_bottle("S2", line, cm3(500), "2026-12-01"),
        made_bottle("S10", line, cm3(500), "2026-12-02"),
        made_bottle("S1", line, cm3(500), "01-04"),
    ]
    told = on_shelf(line, *row, on="01-12").past
    assert [(p.bottle, p.condition, p.good_until, p.matters_for) for p in told] == [
        ("S2", Condition.PAST, day("2026-12-11"), ("K1",)),
        ("S10", Condition.PAST, day("2026-12-12"), ("K1",)),
    ]


def test_past_is_told_as_at_any_day() -> None:
    line = solution(0.1, rules=(keeps(10),))
    facts = house([line], bottles=[made_bottle("S1", line, cm3(500), "01-04")])
    days_told = [len(plan(facts, past_day=day(on)).past) for on in ("01-14", "01-15")]
    assert days_told == [0, 1]


# -- why, ready, instead -----------------------------------------------------------


def house_of_two() -> Facts:
    iodide = solid("sodium iodide")
    asked = recipe(
        wants(TENTH, cm3(500)),
        bars=(Bar("hydrochloric acid", "chloride is oxidised"),),
        swaps=(Swap(TENTH.key, "sodium iodide", 0.903, "a little dearer"),),
    )
    acid = solution(1.0, "hydrochloric acid")
    return house(
        [SALT, TENTH, iodide, acid], methods=[made_from(TENTH, SALT)], recipes=[asked],
        bookings=[booking("K1", "01-12"), booking("K2", "01-19")],
        bottles=[
            bought_bottle("B1", SALT, g(500)),
            made_bottle("S1", TENTH, cm3(700), checks=(looked("01-04"),)),
        ],
    )  # fmt: skip


@pytest.mark.parametrize(
    ("ref", "words"),
    [
        ("K1.1", "500 cm³ from S1"),
        ("k2", "make: K2.1"),
        ("M01", "5 g of salt from B1"),
        ("S1", "promised 500 cm³: K1.1 500 cm³"),
        ("salt solution", "K1.1 500 cm³"),
    ],
)
def test_any_reference_can_be_asked_why(ref: str, words: str) -> None:
    facts = house_of_two()
    assert words in "\n".join(why(facts, plan(facts), ref))


def test_an_unknown_reference_has_no_reasons() -> None:
    facts = house_of_two()
    assert why(facts, plan(facts), "K99") == ()


def test_reasons_are_five_lines_at_most_and_none_is_lost() -> None:
    row = folded(str(n) for n in range(9))
    assert len(row) == LINES
    assert row[-1] == "4; 5; 6; 7; 8"


@pytest.mark.parametrize(
    ("other", "words"),
    [
        ("hydrochloric acid 1 mol/dm3", "refused: barred: chloride is oxidised"),
        ("sodium iodide", "allowed, mass × 0.903: a little dearer"),
        ("salt", "refused: not written in the recipe as an allowed swap"),
    ],
)
def test_a_swap_that_is_offered_is_ruled_on(other: str, words: str) -> None:
    facts = house_of_two()
    (said,) = instead(facts, plan(facts), "K1.1", other)
    assert words in said


def ready(facts: Facts, number: str) -> Readiness:
    return readiness(facts, plan(facts), (number,), number, day("01-12"))


def test_what_is_on_the_shelf_is_ready_and_a_make_is_not() -> None:
    facts = house_of_two()
    assert ready(facts, "K1").ready
    waits = ready(facts, "K2")
    assert not waits.ready
    assert waits.to_do[0].startswith("make M01 on 2027-01-18: salt solution")


# -- notes -------------------------------------------------------------------------


def test_an_evening_says_somebody_must_be_there() -> None:
    facts = replace(house_of_two(), bookings=(booking("K1", "01-12", 1110),))
    (note,) = [note for note in plan(facts).notes if note.subject == "K1"]
    assert note.text.startswith("18:30 to 20:10 is outside staffed hours (08:00 to 16:30)")


def test_a_booking_on_a_closed_day_is_asked_about() -> None:
    facts = replace(house_of_two(), bookings=(booking("K1", "01-16"),))
    assert "2027-01-16 is a closed day: keep it?" in [note.text for note in plan(facts).notes]


def test_a_bottle_with_the_wrong_neighbours_is_told() -> None:
    bleach = solution(2.0, "bleach", storage_group="hypochlorite")
    bottle = replace(made_bottle("B04", bleach, cm3(500)), place="A1")
    facts = house([bleach], bottles=[bottle], places=(Place("A1", "acids", 19.0, "acid"),))
    assert [note.subject for note in plan(facts).notes] == ["B04"]


def test_a_safety_date_that_ends_inside_the_term_is_told() -> None:
    test = Rule(RuleKind.TEST, days(181), Origin.OPENED, safety=True)
    alkene = solution(None, "cyclohexene", rules=(test,))
    bottle = bought_bottle("B29", alkene, cm3(60), "2026-05-11", opened=day("2026-09-02"))
    (note,) = plan(house([alkene], bottles=[bottle])).notes
    assert note.text.startswith("safety date 2027-03-02")


def test_a_day_with_too_much_hands_on_work_is_told() -> None:
    made = planned(
        [SALT, TENTH], methods=[made_from(TENTH, SALT, minutes=301)],
        recipes=[recipe(wants(TENTH, cm3(100)))], bookings=[booking("K1", "01-12")],
        bottles=[bought_bottle("B1", SALT, g(500))],
    )  # fmt: skip
    (note,) = made.notes
    assert (note.subject, note.text) == (
        "2027-01-11",
        "301 min hands-on; could be made earlier: M01",
    )
