"""The closed days of the invented college, spring term 2027."""

from __future__ import annotations

from datetime import date, timedelta

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadDate
from stockroom.measure.workdays import Calendar

TERM = Calendar(
    closed=(
        (date(2026, 12, 21), date(2027, 1, 3)),
        (date(2027, 2, 15), date(2027, 2, 19)),
        (date(2027, 3, 8), date(2027, 3, 8)),
        (date(2027, 3, 26), date(2027, 3, 26)),
    )
)
DAYS = st.dates(date(2026, 11, 1), date(2027, 5, 31))
COUNTS = st.integers(0, 40)


@pytest.mark.parametrize(
    ("needed", "order_by"),
    [
        (date(2027, 1, 12), date(2026, 12, 11)),
        (date(2027, 2, 2), date(2027, 1, 15)),
        (date(2027, 3, 18), date(2027, 3, 1)),
    ],
)
def test_order_by_is_two_open_days_and_ten_more_before(needed: date, order_by: date) -> None:
    assert TERM.before(TERM.before(needed, 2), 10) == order_by


def test_an_order_missed_in_december_is_late_by_six_open_days() -> None:
    assert TERM.between(date(2026, 12, 11), date(2027, 1, 4)) == 6


def test_ten_open_days_from_the_fourth_is_the_eighteenth() -> None:
    assert TERM.after(date(2027, 1, 4), 10) == date(2027, 1, 18)


def test_standing_a_day_over_a_closed_monday_starts_on_friday() -> None:
    assert TERM.before(date(2027, 3, 9)) == date(2027, 3, 5)


@pytest.mark.parametrize(
    ("day", "is_open"),
    [
        (date(2027, 1, 4), True),
        (date(2027, 1, 9), False),
        (date(2027, 1, 3), False),
        (date(2026, 12, 21), False),
        (date(2027, 3, 8), False),
        (date(2027, 3, 25), True),
    ],
)
def test_weekends_and_closures_are_closed_to_the_last_day(day: date, is_open: bool) -> None:
    assert TERM.is_open(day) is is_open


def test_a_closed_day_gives_its_open_neighbours() -> None:
    day = date(2027, 2, 17)
    assert TERM.on_or_before(day) == date(2027, 2, 12)
    assert TERM.on_or_after(day) == date(2027, 2, 22)


def test_two_years_without_an_open_day_are_refused() -> None:
    shut = Calendar(closed=((date(2027, 1, 1), date(2029, 1, 1)),))
    with pytest.raises(BadDate, match="No open day within 400 days after 2027-01-01"):
        shut.after(date(2027, 1, 1))


@pytest.mark.parametrize("edge", [date.min, date.max])
def test_the_edge_of_the_calendar_is_refused(edge: date) -> None:
    search = TERM.before if edge == date.min else TERM.after
    with pytest.raises(BadDate, match=str(edge)):
        search(edge, 3)


def test_a_closure_that_runs_backwards_is_refused() -> None:
    with pytest.raises(BadDate, match="2027-01-02 to 2027-01-01"):
        Calendar(closed=((date(2027, 1, 2), date(2027, 1, 1)),))


@pytest.mark.parametrize(("start", "end"), [(990, 480), (-1, 480), (480, 1441)])
def test_hours_that_run_backwards_are_refused(start: int, end: int) -> None:
    with pytest.raises(BadDate, match=f"{start} to {end}"):
        Calendar(open_from=start, open_to=end)


def test_fewer_than_no_open_days_is_refused() -> None:
    with pytest.raises(BadDate, match="-1"):
        TERM.before(date(2027, 1, 4), -1)


def test_calendars_with_the_same_closures_are_equal() -> None:
    assert Calendar(closed=TERM.closed) == TERM
    assert hash(Calendar(closed=TERM.closed)) == hash(TERM)


@given(DAYS, COUNTS)
def test_before_undoes_after_from_an_open_day(day: date, n: int) -> None:
    start = TERM.on_or_after(day)
    assert TERM.before(TERM.after(start, n), n) == start


@given(DAYS, COUNTS)
def test_between_counts_what_after_steps_over(day: date, n: int) -> None:
    start = TERM.on_or_after(day)
    assert TERM.between(start, TERM.after(start, n)) == n


@given(DAYS, DAYS)
def test_between_is_the_open_days_one_by_one(earlier: date, later: date) -> None:
    days = [earlier + timedelta(days=n) for n in range(1, (later - earlier).days + 1)]
    assert TERM.between(earlier, later) == sum(TERM.is_open(day) for day in days)


@given(DAYS, COUNTS)
def test_every_answer_is_an_open_day(day: date, n: int) -> None:
    assert TERM.is_open(TERM.before(day, n))
    assert TERM.is_open(TERM.after(day, n))
