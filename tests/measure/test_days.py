from __future__ import annotations

from collections.abc import Callable
from contextlib import suppress
from datetime import date

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadDate, StockroomError
from stockroom.measure.days import format_time, parse_day, parse_printed, parse_time, spell_day
from stockroom.measure.periods import parse_period

DAYS = st.dates(date(2000, 1, 1), date(2099, 12, 31))


@pytest.mark.parametrize(
    ("text", "day"),
    [
        ("2027-03-09", date(2027, 3, 9)),
        ("2027/3/9", date(2027, 3, 9)),
        ("12 Jan 2027", date(2027, 1, 12)),
        ("12th January 2027", date(2027, 1, 12)),
        ("Jan 12, 2027", date(2027, 1, 12)),
        ("9-Jun-25", date(2025, 6, 9)),
        ("13/05/27", date(2027, 5, 13)),
        ("05/13/27", date(2027, 5, 13)),
        ("13.05.2027", date(2027, 5, 13)),
        ("03.11.25", date(2025, 11, 3)),
        ("2/2/26", date(2026, 2, 2)),
        ("29/02/28", date(2028, 2, 29)),
        ("1 Sept 2027", date(2027, 9, 1)),
    ],
)
def test_a_day_with_one_reading_is_read(text: str, day: date) -> None:
    assert parse_day(text) == day


def test_a_day_with_two_readings_is_asked_about_with_the_months_spelt_out() -> None:
    with pytest.raises(BadDate, match=r'opened "04/05/27": 4 May 2027 or 5 April 2027\?'):
        parse_day("04/05/27", where="opened")


@pytest.mark.parametrize(
    ("day_first", "day"), [(True, date(2027, 5, 4)), (False, date(2027, 4, 5))]
)
def test_a_settled_order_leaves_one_reading(day_first: bool, day: date) -> None:
    assert parse_day("04/05/27", day_first=day_first) == day


def test_a_date_against_the_settled_order_is_refused() -> None:
    with pytest.raises(BadDate, match="there is no month 13"):
        parse_day("05/13/27", day_first=True)


@pytest.mark.parametrize(
    ("text", "says"),
    [
        ("2027-02-31", "February 2027 has 28 days."),
        ("31/02/27", "February 2027 has 28 days."),
        ("02/31/27", "February 2027 has 28 days."),
        ("30/02/28", "February 2028 has 29 days."),
        ("2027-13", "there is no month 13"),
        ("2027-13-01", "there is no month 13"),
        ("32/13/27", "there is no month 13"),
        ("03/2027", "which day of the month?"),
        ("Mar 2027", "which day of the month?"),
        ("0207-01-01", "the year 0207?"),
        ("June", "June of which year?"),
        ("46301", "6 October 2026"),
        ("old", "cannot read it as a date"),
        ("", "cannot read it as a date"),
        ("1 Foo 2027", "cannot read it as a date"),
        ("3/4", "cannot read it as a date"),
    ],
)
def test_no_such_day_is_refused_with_its_reason(text: str, says: str) -> None:
    with pytest.raises(BadDate) as caught:
        parse_day(text)
    assert says in str(caught.value)
    assert f'"{text}"' in caught.value.message


# Month-only dates end on the last day of the month: pharmacopoeia convention (USP, on
# expiry dates, as quoted in a pharmacy textbook).
@pytest.mark.parametrize(
    ("text", "day"),
    [
        ("03/2027", date(2027, 3, 31)),
        ("2027-03", date(2027, 3, 31)),
        ("Mar 2027", date(2027, 3, 31)),
        ("MARCH 2027", date(2027, 3, 31)),
        ("EXP 03/2027", date(2027, 3, 31)),
        ("Use by: 03/2027", date(2027, 3, 31)),
        ("2027 Mar", date(2027, 3, 31)),
        ("03/27", date(2027, 3, 31)),
        ("02/2028", date(2028, 2, 29)),
        ("Oct-26", date(2026, 10, 31)),
        ("2026-10", date(2026, 10, 31)),
        ("31/12/2028", date(2028, 12, 31)),
    ],
)
def test_a_printed_date_ends_on_its_last_good_day(text: str, day: date) -> None:
    printed = parse_printed(text)
    assert printed is not None
    assert (printed.day, printed.text, printed.ambiguous) == (day, text, False)


def test_a_printed_date_with_two_readings_keeps_both_and_plans_on_the_earlier() -> None:
    printed = parse_printed("04/05/27")
    assert printed is not None
    assert printed.readings == (date(2027, 4, 5), date(2027, 5, 4))
    assert (printed.day, printed.ambiguous) == (date(2027, 4, 5), True)


def test_a_short_month_and_year_may_have_two_readings() -> None:
    printed = parse_printed("11/12")
    assert printed is not None
    assert printed.readings == (date(2011, 12, 31), date(2012, 11, 30))


def test_a_settled_order_settles_a_printed_date() -> None:
    printed = parse_printed("04/05/27", day_first=True)
    assert printed is not None
    assert printed.readings == (date(2027, 5, 4),)


@pytest.mark.parametrize("text", ["", "  ", "none", "None", "-", "no date"])
def test_no_printed_date_is_no_date(text: str) -> None:
    assert parse_printed(text) is None


def test_a_word_for_a_printed_date_is_sent_to_the_note() -> None:
    with pytest.raises(BadDate, match="Leave the date empty and add a note; I will ask you"):
        parse_printed("old")


@pytest.mark.parametrize("text", ["13/2027", "2027-13", "31/02/2028", "3/4", "June", "99/99"])
def test_a_printed_date_that_does_not_exist_is_refused(text: str) -> None:
    with pytest.raises(BadDate, match=text):
        parse_printed(text)


@pytest.mark.parametrize(("text", "minutes"), [("09:15", 555), ("9.15", 555), ("00:00", 0)])
def test_a_time_is_minutes_after_midnight(text: str, minutes: int) -> None:
    assert parse_time(text) == minutes


@pytest.mark.parametrize("text", ["24:00", "09:60", "9", "6:30 pm", ""])
def test_no_such_time_is_refused(text: str) -> None:
    with pytest.raises(BadDate, match="not a time of day"):
        parse_time(text)


@pytest.mark.parametrize("minutes", [-1, 1440])
def test_minutes_of_another_day_are_refused(minutes: int) -> None:
    with pytest.raises(BadDate, match=str(minutes)):
        format_time(minutes)


@given(st.text(max_size=12) | st.from_regex(r"[0-9]{1,4}[-/. ][0-9A-Za-z]{1,9}([-/. ][0-9]{1,4})?"))
def test_any_text_gives_a_date_or_a_refusal(text: str) -> None:
    for parse in (parse_day, parse_printed, parse_time):
        with suppress(StockroomError):
            parse(text)


@pytest.mark.parametrize("parse", [parse_day, parse_printed, parse_time, parse_period])
def test_thousands_of_digits_are_refused_shortly(parse: Callable[[str], object]) -> None:
    with pytest.raises(BadDate) as caught:
        parse("9" * 5000 + (" d" if parse is parse_period else ""))
    assert len(str(caught.value)) < 200


@given(st.integers(0, 1439))
def test_a_time_written_is_read_back(minutes: int) -> None:
    assert parse_time(format_time(minutes)) == minutes


@given(DAYS)
def test_a_day_spelt_out_is_read_back(day: date) -> None:
    assert parse_day(spell_day(day)) == parse_day(day.isoformat()) == day


@given(DAYS)
def test_one_of_the_readings_is_the_day_that_was_meant(day: date) -> None:
    printed = parse_printed(f"{day:%d/%m/%y}")
    assert printed is not None
    assert day in printed.readings


def test_a_typed_day_that_does_not_exist_is_not_looked_for_on_a_label() -> None:
    with pytest.raises(BadDate) as typed:
        parse_day("31/04/2027", where="--as-at")
    with pytest.raises(BadDate) as printed:
        parse_printed("31/04/2027")
    assert typed.value.hint == "Which day is meant?"
    assert printed.value.hint == "What is printed on the bottle?"
