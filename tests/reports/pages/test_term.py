"""The page of the term as a value: days with their lines, lives as bars and words, and parts."""

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
    made_bottle,
    made_from,
    pack,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.errors import UnknownName
from stockroom.measure.workdays import Calendar
from stockroom.planning.facts import Facts
from stockroom.planning.plan import plan
from stockroom.reports.pages.term import TermPage, marks_in_words, term_page
from stockroom.reports.pages.term_choice import Choice
from stockroom.reports.pages.term_days import TermDay
from stockroom.reports.pages.term_lives import USUAL
from stockroom.reports.paper.strip import Day

SALT = solid(packs=(pack(g(100), 5.00),))
WEAK = solution(0.1, rules=(keeps(7),))
OTHER = solution(0.1, "other", rules=(keeps(7),))


def college(**more: Any) -> Facts:
    """Two classes of two departments, each wanting one solution made from the salt."""
    usual: dict[str, Any] = {
        "as_at": day("01-11"),
        "start": day("01-04"),
        "end": day("01-29"),
        "methods": [made_from(WEAK, SALT), made_from(OTHER, SALT)],
        "recipes": [recipe(wants(WEAK, cm3(100))), recipe(wants(OTHER, cm3(100)), code="R02")],
        "bookings": [
            booking("K01", "01-13"),
            booking("K02", "01-20", recipe="R02", department="BI"),
        ],
        "bottles": [bought_bottle("B01", SALT, g(100))],
    }
    return house([SALT, WEAK, OTHER], **usual | more)


def seen(known: Facts, **choice: str) -> TermPage:
    return term_page(known, plan(known), {day("01-18"): "inset day"}, Choice(**choice))


def days_of(page: TermPage) -> dict[date, TermDay]:
    return {one.on: one for week in page.weeks for one in week.days}


def lines_of(page: TermPage) -> list[tuple[str, str, str]]:
    return [
        (one.on.isoformat()[5:], entry.kind[1], entry.row.what.replace("\u00a0", " "))
        for one in days_of(page).values()
        for entry in one.entries
    ]


def test_a_class_its_make_and_the_last_day_of_that_each_stand_on_their_day() -> None:
    lines = lines_of(seen(college()))
    assert ("01-13", "class", "practical R01") in lines
    made = [line for line in lines if line[1:] == ("make", "salt solution 0.1 mol/dm³, 100 cm³")]
    (last,) = [line for line in lines if line[1:] == ("last day", "salt solution 0.1 mol/dm³")]
    assert len(made) == 1
    assert made[0][0] <= "01-13" <= last[0]


def test_a_make_that_stands_is_started_on_one_day_and_finished_on_another() -> None:
    stands = made_from(WEAK, SALT, stands_hours=48.0, finish_minutes=10)
    kinds = [kind for _, kind, _ in lines_of(seen(college(methods=[stands]), item=WEAK.item))]
    assert {"start", "finish"} <= set(kinds)


def test_what_is_to_be_ordered_stands_on_the_last_day_for_it() -> None:
    known = college(bottles=[], bookings=[booking("K02", "01-29")])
    assert any(
        kind == "order by" and what == "salt, 1 × pack" for _, kind, what in lines_of(seen(known))
    )


def test_a_lack_stands_at_its_class_and_counts_for_its_week() -> None:
    page = seen(college(bottles=[], bookings=[booking("K01", "01-13")]))
    (entry,) = [e for e in days_of(page)[day("01-13")].entries if e.kind[1] == "class"]
    assert [row.mark for row in entry.row.rows] == ["short"]
    assert [week.short for week in page.weeks] == [0, 1, 0, 0]


def test_a_day_out_of_the_ordinary_says_why_it_is_closed() -> None:
    known = college(calendar=Calendar(closed=((day("01-18"), day("01-18")),)))
    closed = days_of(seen(known))[day("01-18")]
    assert (closed.state, closed.told) == ("closed", "Closed: inset day.")


def test_quiet_days_of_which_the_same_is_said_stand_together() -> None:
    names = [one.name.replace("\u00a0", " ") for one in seen(college()).weeks[0].days]
    assert names == ["Mon 4 Jan to Fri 8 Jan", "Sat 9 Jan to Sun 10 Jan"]


def test_every_day_of_the_term_is_told_once() -> None:
    page = seen(college(bookings=[]))
    ends = [week.days for week in page.weeks]
    assert [days[0].on.weekday() for days in ends] == [0, 0, 0, 0]
    assert page.told == "Nothing is booked this term."


def test_a_life_runs_from_the_day_it_is_ready_to_its_last_day() -> None:
    (life,) = seen(college(), item=WEAK.item).lives.rows
    (bar,) = [bar for bar in life.bars if bar.kind == "life"]
    (make,) = [m for m in plan(college()).makes if m.line == WEAK.key]
    assert make.good_until
    assert bar.width == ((make.good_until - make.ready).days + 1) * USUAL
    assert life.words.replace("\u00a0", " ").endswith("used Wed 13 Jan for K01")


def test_a_lack_is_drawn_and_said_as_short() -> None:
    (life,) = seen(college(bottles=[], bookings=[booking("K01", "01-13")])).lives.rows
    assert life.short
    assert [bar.kind for bar in life.bars] == ["short"]
    assert "short Wed\u00a013\u00a0Jan for K01" in life.words


def test_a_bottle_in_use_lasts_from_today() -> None:
    known = college(bottles=[made_bottle("S01", WEAK, cm3(500), "01-08")], methods=[])
    (life,) = seen(known, department="CH").lives.rows
    assert life.bars[0].x == 7 * USUAL
    assert life.words.startswith("S01 good until Fri\u00a015\u00a0Jan")


def test_a_long_term_is_drawn_no_wider_than_a_page() -> None:
    lives = seen(college(end=date(2027, 7, 30))).lives
    assert 0 < lives.width <= 1000


def test_weekends_are_drawn_as_closed() -> None:
    shut = seen(college()).lives.shut
    assert [(bar.x, bar.width) for bar in shut][:2] == [
        (5 * USUAL, 2 * USUAL),
        (12 * USUAL, 2 * USUAL),
    ]


@pytest.mark.parametrize(
    ("choice", "booked"),
    [
        ({}, {"K01", "K02"}),
        ({"department": "BI"}, {"K02"}),
        ({"recipe": "R01"}, {"K01"}),
        ({"item": "other"}, {"K02"}),
        ({"department": "BI", "recipe": "R01"}, set()),
    ],
)
def test_a_choice_leaves_its_own_classes(choice: dict[str, str], booked: set[str]) -> None:
    page = seen(college(), **choice)
    entries = [e for one in days_of(page).values() for e in one.entries if e.kind[1] == "class"]
    found = {part for e in entries for more in e.row.more for part in more.split(", ")}
    assert {each for each in found if each.startswith("K")} == booked
    assert bool(page.told) == (not booked)


def test_a_choice_leaves_out_the_makes_of_others() -> None:
    lines = lines_of(seen(college(), department="BI"))
    assert [what for _, kind, what in lines if kind == "make"] == ["other 0.1 mol/dm³, 100 cm³"]


@pytest.mark.parametrize("choice", [{"department": "XX"}, {"recipe": "R99"}, {"item": "gold"}])
def test_a_choice_that_is_not_there_is_refused_with_what_is(choice: dict[str, str]) -> None:
    with pytest.raises(UnknownName, match=next(iter(choice.values()))) as refused:
        seen(college(), **choice)
    assert refused.value.hint.startswith("The term has ")


def test_the_marks_of_a_day_are_read_out_in_words() -> None:
    told = marks_in_words(Day(day("01-13"), classes=2, evenings=1, starts=1))
    assert (
        told
        == "2 classes, 1 of them outside staffed hours, something to start or make for a later day"
    )
    assert marks_in_words(Day(day("01-13"))) == "nothing"
