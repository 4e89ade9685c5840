from __future__ import annotations

from datetime import date

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadDate
from stockroom.measure.periods import UNITS, Period, add, format_period, parse_period

START = date(2027, 1, 31)
PERIODS = st.builds(Period, st.integers(1, 100), st.sampled_from(UNITS))


@pytest.mark.parametrize(
    ("text", "period"),
    [
        ("28 d", Period(28, "days")),
        ("28days", Period(28, "days")),
        ("1 day", Period(1, "days")),
        ("2 weeks", Period(2, "weeks")),
        ("6 months", Period(6, "months")),
        ("3 y", Period(3, "years")),
        ("48 h", Period(48, "hours")),
        ("same day", Period(0, "days")),
        ("Same-day", Period(0, "days")),
    ],
)
def test_a_period_is_read_as_meant(text: str, period: Period) -> None:
    assert parse_period(text) == period


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("0 days", "A life of 0 days means never keep. Did you mean same day?"),
        ("-3 d", "means never keep"),
        ("1.5 years", "not a period I can read"),
        ("5 m", "months or minutes?"),
        ("5 parsecs", '"parsecs" is no unit of time'),
        ("200 years", "longer than a hundred years"),
        ("99999999999999999999 d", "longer than a hundred years"),
        ("", "not a period I can read"),
    ],
)
def test_a_doubtful_period_is_refused_with_its_reason(text: str, says: str) -> None:
    with pytest.raises(BadDate) as caught:
        parse_period(text, where="opened life")
    assert says in str(caught.value)
    assert f'opened life "{text}"' in caught.value.message


def test_months_are_counted_from_the_origin() -> None:
    month = Period(1, "months")
    assert [add(START, month, n) for n in (1, 2, 3)] == [
        date(2027, 2, 28),
        date(2027, 3, 31),
        date(2027, 4, 30),
    ]


def test_opened_in_january_with_180_days_lasts_into_july() -> None:
    assert add(date(2027, 1, 10), parse_period("180 d")) == date(2027, 7, 9)


@pytest.mark.parametrize(("hours", "days"), [(23, 0), (24, 1), (47, 1), (48, 2)])
def test_hours_count_as_whole_days_rounded_down(hours: int, days: int) -> None:
    assert (add(START, Period(hours, "hours")) - START).days == days


def test_the_same_day_is_no_step() -> None:
    assert add(START, parse_period("same day")) == START


def test_a_leap_day_plus_a_year_is_the_end_of_february() -> None:
    assert add(date(2028, 2, 29), Period(1, "years")) == date(2029, 2, 28)


@pytest.mark.parametrize("unit", ["days", "years"])
def test_leaving_the_calendar_is_refused(unit: str) -> None:
    with pytest.raises(BadDate, match="leave the calendar"):
        add(START, Period(9999, unit), 1000)


def test_a_period_in_an_unknown_unit_is_refused() -> None:
    with pytest.raises(BadDate, match="fortnights"):
        Period(1, "fortnights")


def test_a_period_below_nothing_is_refused() -> None:
    with pytest.raises(BadDate, match="-1 days"):
        Period(-1, "days")


@given(PERIODS)
def test_a_period_written_is_read_back(period: Period) -> None:
    assert parse_period(format_period(period)) == period


@given(PERIODS, st.integers(0, 20))
def test_more_steps_never_end_earlier(period: Period, times: int) -> None:
    assert add(START, period, times) <= add(START, period, times + 1)


@given(st.integers(1, 300), st.sampled_from(["days", "weeks"]), st.integers(0, 10))
def test_days_and_weeks_can_be_taken_back(count: int, unit: str, times: int) -> None:
    period = Period(count, unit)
    assert add(add(START, period, times), period, -times) == START
