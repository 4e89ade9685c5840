"""The wall strip: a mark for all there is, one page whatever the term, large where it can be."""

from __future__ import annotations

from dataclasses import replace
from datetime import date, timedelta
from typing import TYPE_CHECKING

import paper_reading as read
import pytest

from stockroom.measure.workdays import Calendar
from stockroom.planning.facts import Booking, Facts
from stockroom.reports.paper.head import Since, head_for
from stockroom.reports.paper.strip import (
    NOTHING_BOOKED,
    STRIP,
    Day,
    Strip,
    Week,
    strip_lines,
    strip_of,
    strip_text,
)
from stockroom.reports.typesetting import typeset
from stockroom.reports.words import WEEKDAYS

if TYPE_CHECKING:
    from stockroom.planning.decisions import Plan

FIRST = date(2027, 1, 4)
LONG = "The College of Further Education at Great Quillmere upon the Water " * 3


@pytest.mark.parametrize(
    ("day", "marks"),
    [
        (Day(FIRST), "."),
        (Day(FIRST, closed=True), "/"),
        (Day(FIRST, closed=True, starts=1), "/o"),
        (Day(FIRST, closed=True, classes=1, evenings=1), "*"),
        (Day(FIRST, classes=3, evenings=1, starts=2), "##*o"),
        (Day(FIRST, classes=4), "####"),
        (Day(FIRST, classes=5), "5×#"),
        (Day(FIRST, classes=17, evenings=6, starts=1), "11×#6×*o"),
    ],
)
def test_a_day_in_marks(day: Day, marks: str) -> None:
    assert day.marks == marks


def strip(weeks: int, columns: int, changes: int = 0) -> Strip:
    """A term with all kinds of marks in it."""
    rows = []
    for number in range(weeks):
        monday = FIRST + timedelta(weeks=number)
        days = tuple(
            Day(
                monday + timedelta(days=d),
                classes=number * d % 13,
                evenings=min(number * d % 13, number % 3),
                starts=number % 2,
                closed=(number + d) % 9 == 0,
            )
            for d in range(columns)
        )
        rows.append(Week(number + 1, f"{monday.day} Jan", days, tuple(d.marks for d in days)))
    told = Since("0122", ("2027-01-04",), tuple(f"new: day {n} (was: ##o)" for n in range(changes)))
    head = replace(head_for(LONG, "The term at a glance", FIRST, practice=True), since=told)
    return Strip(head, WEEKDAYS[:columns], tuple(rows))


@pytest.mark.parametrize(
    ("weeks", "columns", "changes", "paper"),
    [(20, 7, 60, "A4"), (20, 7, 60, "Letter"), (12, 5, 12, "A4"), (1, 5, 0, "Letter")],
)
def test_a_term_stands_on_one_page_and_nothing_overlaps(
    weeks: int, columns: int, changes: int, paper: str
) -> None:
    pdf = typeset("strip", STRIP.data(strip(weeks, columns, changes)), paper=paper)[0]
    assert len(read.sizes_mm(pdf)) == 1
    assert read.outside(pdf, margin=12) == []
    assert read.overlapping(pdf) == []
    assert read.greys_only(pdf)
    told = read.words(pdf)
    assert all(week.label in told for week in strip(weeks, columns).weeks)
    assert ("and 48 more" in told) == (changes == 60)


def test_a_short_term_is_set_larger_than_a_long_one() -> None:
    def tallest(weeks: int) -> float:
        pdf = typeset("strip", STRIP.data(strip(weeks, 5)))[0]
        (found,) = (p for p in read.pieces(pdf) if p.text == "Wed")
        return found.top - found.bottom

    assert tallest(6) > tallest(20)


def test_the_week_numbers_read_from_the_door(practice_strip: Strip) -> None:
    """Our choice: digits of 6 mm and more are read at four metres."""
    pdf = typeset("strip", STRIP.data(practice_strip))[0]
    heights = [p.top - p.bottom for p in read.pieces(pdf) if p.text in {"1", "12"}]
    assert len(heights) == 2
    assert min(heights) * read.POINTS_TO_MM >= 6


def test_a_count_goes_in_the_text_too() -> None:
    text = strip_text(strip(20, 7, 60), 100)
    assert "12×#" in text
    assert max(map(len, text.splitlines())) <= 100


def test_each_day_is_a_line_of_its_own() -> None:
    lines = strip_lines(strip(2, 5))
    assert list(lines)[:1] == ["2027-01-04"]
    assert len(lines) == 10


@pytest.fixture(scope="module")
def practice_strip() -> Strip:
    """Twelve weeks of one class a day."""
    weeks = [FIRST + timedelta(weeks=n) for n in range(12)]
    rows = tuple(
        Week(n, f"{m.day} Jan", (Day(m, classes=1),) * 5, ("#",) * 5)
        for n, m in enumerate(weeks, 1)
    )
    head = head_for("Quillmere College", "The term at a glance", FIRST)
    return Strip(head, WEEKDAYS[:5], rows)


def test_a_term_without_a_booking_says_so(term: Plan) -> None:
    known = Facts(FIRST, FIRST, FIRST + timedelta(days=20), Calendar())
    made = strip_of(known, replace(term, makes=()))
    assert made.told == NOTHING_BOOKED
    assert NOTHING_BOOKED in strip_text(made, 80)
    assert NOTHING_BOOKED in read.words(typeset("strip", STRIP.data(made))[0])


def test_a_class_on_a_saturday_brings_the_weekend_in(term: Plan) -> None:
    known = Facts(FIRST, FIRST, FIRST + timedelta(days=20), Calendar())
    saturday = FIRST + timedelta(days=5)
    booking = Booking("K01", "R01", 1, saturday, 555, 10, 0, "CH")
    made = strip_of(replace(known, bookings=(booking,)), replace(term, makes=()))
    assert made.weekdays == WEEKDAYS
    # nobody is in on a Saturday unless the house says so
    assert made.weeks[0].marks[5] == "*"
