"""Days as sheets write them: one subject, each form under a name of its own."""

from __future__ import annotations

from datetime import date, timedelta

import pytest

from stockroom.reports.words import (
    TIED,
    WEEKDAYS,
    day,
    day_and_month,
    day_heading,
    day_in_words,
    day_seen_from,
    days_in_words,
    weekday_and_day,
)

ON = date(2027, 1, 5)


def test_each_form_is_what_its_name_says() -> None:
    assert day(ON) == f"Tue{TIED}2027-01-05"
    assert day_heading(ON) == "Tue 5 Jan 2027"
    assert day_in_words(ON) == "5 Jan 2027"
    assert day_and_month(ON) == "5 Jan"
    assert weekday_and_day(ON) == f"Tue{TIED}5{TIED}Jan"


@pytest.mark.parametrize(
    ("seen_from", "said"),
    [(date(2027, 12, 31), "Tue 5 Jan"), (date(2026, 12, 31), "Tue 5 Jan 2027")],
)
def test_another_year_is_said_and_this_one_is_not(seen_from: date, said: str) -> None:
    assert day_seen_from(ON, seen_from) == said


def test_every_weekday_has_its_own_name() -> None:
    week = [day_heading(ON + timedelta(days=n)).split()[0] for n in range(-1, 6)]
    assert tuple(week) == WEEKDAYS


@pytest.mark.parametrize(
    ("text", "told"),
    [
        ("made Tue 2027-01-05 + 30 days", "made Tue 5 Jan 2027 + 30 days"),
        ('printed "2027-01-05", 2027-01-06', 'printed "2027-01-05", 6 Jan 2027'),
        ("2027-02-31 is no day, 12027-01-05 no year", "2027-02-31 is no day, 12027-01-05 no year"),
    ],
)
def test_days_in_a_sentence_are_spelt_and_what_is_quoted_is_not(text: str, told: str) -> None:
    assert days_in_words(text) == told
