"""A logger's table is read as its program wrote it, and what has two meanings is asked about."""

from __future__ import annotations

from datetime import datetime, timedelta

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadAmount, BadDate, BadInput, NotAllowed, StockroomError
from stockroom.keeping.logger_file import read_logger

TEN, HALF_PAST = datetime(2027, 1, 22, 10), datetime(2027, 1, 22, 10, 30)
BOTH = ((TEN, 5.1), (HALF_PAST, 5.3))


def table(*rows: str) -> str:
    return "\n".join(rows)


READABLE = {
    "ISO": table("time,temperature °C", "2027-01-22 10:00,5.1", "2027-01-22T10:30:00,5.3"),
    "semicolons and decimal commas": table(
        "Datum/Uhrzeit;Temperatur [°C]", "22.01.2027 10:00:00;5,1", "22.01.2027 10:30:00;5,3"
    ),
    "quoted decimal commas": table(
        "Date/time,Temp (C)", '2027-01-22 10:00,"5,1"', '2027-01-22 10:30,"5,3"'
    ),
    "tabs": table("Timestamp\tCelsius", "2027-01-22 10:00\t5.1", "2027-01-22 10:30\t5.3"),
    "day before month": table("Date Time,Temp C", "22/01/2027 10:00,5.1", "22/01/2027 10:30,5.3"),
    "month before day": table(
        '"#","Date Time, GMT+00:00","Temp, °C (LGR S/N: 1)"',
        "1,01/22/27 10:00:00 AM,5.1",
        "2,01/22/27 10:30:00 AM,5.3",
    ),
    "date and time apart": table(
        "Date,Time,Temperature(°C),Humidity(%rh)",
        "2027-01-22,10:00,5.1,40",
        "2027-01-22,10:30,5.3,41",
    ),
    "things above the table": table(
        "Logger F1",
        "Serial;123",
        "",
        "Zeit;Temp. in °C",
        "2027-01-22 10:00;5.1",
        "2027-01-22 10:30;5.3",
    ),
    "units in the cells": table("when,temp", "2027-01-22 10:00,5.1 °C", "2027-01-22 10:30,5.3°C"),
    "no headings": table("2027-01-22 10:00,5.1", "2027-01-22 10:30,5.3"),
    "no headings, numbered, apart": table("1;2027-01-22;10:00;5,1", "2;2027-01-22;10:30;5,3"),
    "limits beside it": table(
        "No,Time,Celsius(°C),High Alarm,Low Alarm",
        "1,2027-01-22 10:00,5.1,8,2",
        "2,2027-01-22 10:30,5.3,8,2",
    ),
    "newest first": table("time,temp C", "2027-01-22 10:30,5.3", "2027-01-22 10:00,5.1"),
    "afternoon": table("time,temp C", "2027-01-22 10:00 AM,5.1", "2027-01-22 10:30 am,5.3"),
    "with its distance from UTC": table(
        "time,temp C", "2027-01-22T10:00:00+01:00,5.1", "2027-01-22T09:30:00Z,5.3"
    ),
}  # fmt: skip


@pytest.mark.parametrize("text", READABLE.values(), ids=READABLE.keys())
def test_one_and_the_same_record_is_read_however_it_is_written(text: str) -> None:
    assert read_logger(text).readings == BOTH


def test_rows_are_numbered_as_in_the_file() -> None:
    assert read_logger(READABLE["things above the table"]).rows == (5, 6)


def test_minus_signs_midnight_and_noon_are_read() -> None:
    found = read_logger(table("time;°C", "2027-01-22 12:10 am;-18,2", "2027-01-22 12:10 pm;−17,9"))
    assert found.readings == (
        (datetime(2027, 1, 22, 0, 10), -18.2),
        (datetime(2027, 1, 22, 12, 10), -17.9),
    )


def test_a_date_above_twelve_settles_the_whole_file() -> None:
    found = read_logger(table("time,°C", "12/05/2027 10:00,5.1", "13/05/2027 10:00,5.3"))
    assert [when.date().isoformat() for when, _ in found.readings] == ["2027-05-12", "2027-05-13"]


@pytest.mark.parametrize(("day_first", "month"), [(True, 5), (False, 4)])
def test_a_file_that_settles_nothing_is_asked_about(day_first: bool, month: int) -> None:
    text = table("time,°C", "04/05/2027 10:00,5.1", "04/05/2027 10:30,5.3")
    with pytest.raises(BadDate, match="4 May 2027 or 5 April 2027") as told:
        read_logger(text)
    assert told.value.hint == "Add --day-first or --month-first."
    assert read_logger(text, day_first=day_first).readings[0][0].month == month


def test_dates_of_both_ways_are_refused() -> None:
    with pytest.raises(BadDate, match=r"begins with the day and .* with the month"):
        read_logger(table("time,°C", "13/05/2027 10:00,5.1", "05/14/2027 10:00,5.3"))


FAHRENHEIT = table("time,Temp (°F)", "2027-01-22 10:00,41.0", "2027-01-22 10:30,41.9")


@pytest.mark.parametrize(
    "text",
    [
        FAHRENHEIT,
        FAHRENHEIT.replace("(°F)", "deg F"),
        FAHRENHEIT.replace("Temp (°F)", "Fahrenheit"),
        FAHRENHEIT.replace("Temp (°F)", "temp").replace("41.0", "41.0 F").replace("41.9", "41.9°F"),
    ],
)
def test_fahrenheit_is_refused_with_what_to_do_and_turned_when_asked(text: str) -> None:
    with pytest.raises(NotAllowed, match="The readings are in °F") as told:
        read_logger(text)
    assert "--fahrenheit" in told.value.hint
    found = read_logger(text, scale="F")
    assert [celsius for _, celsius in found.readings] == [5.0, 5.5]
    assert "turned from °F into °C" in found.told


def test_celsius_is_not_turned_though_asked() -> None:
    with pytest.raises(NotAllowed, match="the file says °C"):
        read_logger(READABLE["ISO"], scale="F")


def test_a_clock_that_went_back_in_october_is_named() -> None:
    text = table("time,°C", "2026-10-25 01:50,5.1", "2026-10-25 01:00,5.3", "2026-10-25 01:10,5.3")
    with pytest.raises(
        BadDate, match="row 2 is 2026-10-25 01:50 and row 3 is 2026-10-25 01:00"
    ) as e:
        read_logger(text)
    assert "clocks going back in October" in e.value.hint


def test_an_hour_twice_at_two_temperatures_is_the_same_october() -> None:
    with pytest.raises(BadDate, match="Rows 2 and 3 are both 2026-10-25 01:00") as told:
        read_logger(table("time,°C", "2026-10-25 01:00,5.1", "2026-10-25 01:00,5.3"))
    assert "clocks going back in October" in told.value.hint


def test_a_clock_that_went_back_in_june_is_something_else() -> None:
    with pytest.raises(BadDate, match="Time runs backwards") as told:
        read_logger(
            table("time,°C", "2026-06-01 02:00,5", "2026-06-01 01:30,5", "2026-06-01 03:00,5")
        )
    assert "Two files put together" in told.value.hint


def test_the_same_reading_twice_counts_once() -> None:
    row = "2027-01-22 10:00,5.1"
    found = read_logger(table("time,°C", row, row, "2027-01-22 10:30,5.3"))
    assert found.readings == BOTH
    assert "1 repeated readings left out" in found.told


def test_seconds_within_a_minute_are_left_out() -> None:
    rows = ("2027-01-22 10:00:00,5.1", "2027-01-22 10:00:30,5.2", "2027-01-22 10:30:00,5.3")
    assert read_logger(table("time,°C", *rows)).readings == BOTH


@pytest.mark.parametrize("blank", ["", "---", "NaN", "n/a"])
def test_rows_without_a_reading_are_left_out_and_told(blank: str) -> None:
    rows = ("2027-01-22 10:00,5.1", f"2027-01-22 10:10,{blank}", "2027-01-22 10:30,5.3")
    found = read_logger(table("time,°C", *rows))
    assert found.readings == BOTH
    assert "1 rows without a reading left out" in found.told


@pytest.mark.parametrize("celsius", ["-127", "150", "-90.1"])
def test_a_temperature_no_place_has_is_refused_with_its_row(celsius: str) -> None:
    with pytest.raises(BadAmount, match=f"Row 3: {celsius} °C is not between -90 and 120"):
        read_logger(table("time,°C", "2027-01-22 10:00,5.1", f"2027-01-22 10:10,{celsius}"))


def test_one_spike_is_told_and_kept() -> None:
    rows = ("2027-01-22 10:00,5.1", "2027-01-22 10:10,35.0", "2027-01-22 10:20,5.2")
    found = read_logger(table("time,°C", *rows))
    assert found.readings[1][1] == 35.0
    assert found.told == (
        "row 3: 35 °C at 2027-01-22 10:10, 29.8 above the readings beside it: a spike?"
        " kept as written",
    )


def test_a_door_left_open_is_no_spike() -> None:
    rows = ("2027-01-22 10:00,5", "2027-01-22 10:10,20", "2027-01-22 10:20,21")
    assert read_logger(table("time,°C", *rows)).told == ()


def test_two_temperatures_are_asked_about() -> None:
    text = table("time,Temp 1 °C,Temp 2 °C", "2027-01-22 10:00,5.1,9", "2027-01-22 10:30,5.3,9")
    with pytest.raises(BadInput, match='Which temperature: "Temp 1 °C", "Temp 2 °C"'):
        read_logger(text)
    assert read_logger(text, column="temp 1").readings == BOTH
    with pytest.raises(BadInput, match='No heading holds "temp 3"'):
        read_logger(text, column="temp 3")


@pytest.mark.parametrize(
    ("text", "words"),
    [
        ("", "The file is empty"),
        ("PK\0\3", "no table of text"),
        ("hello\nworld", 'no separator in "world"'),
        (table("name,amount", "KI,5 g"), "no headings for time and temperature"),
        (table("time,°C"), "no temperature in the file"),
        (table("time,°C", "2027-01-22,5.1"), 'Row 2: "2027-01-22" is no date and time of day'),
        (table("time,°C", "31/02/2027 10:00,5.1"), "February 2027 has 28 days"),
        (table("time,°C", "2027-01-22 25:00,5.1"), "no such time of day"),
        (table("time,°C", "2027-01-22 13:00 pm,5.1"), "no such time of day"),
        (table("time,°C", "2027-01-22 10:00,warm"), 'Row 2: "warm" is no temperature'),
        (table("time,°C", "2027-01-22 10:00,41 °F"), 'Row 2: "41 °F" is no temperature'),
        (table("time,°C", "2027-01-22 10:00,5,1"), "Row 2 has 3 cells where 2 are expected"),
        (table("2027-01-22 10:00,5,1", "2027-01-22 10:30,5,3"), "no headings"),
        (
            table("time,°C", "2027-01-22T10:00Z,5.1", "2027-01-22T10:30,5.3"),
            "Row 3: .* and row 2 do not agree",
        ),
    ],
)
def test_what_is_no_record_is_refused_with_the_reason(text: str, words: str) -> None:
    with pytest.raises(StockroomError, match=words):
        read_logger(text)


@given(
    st.lists(st.tuples(st.integers(1, 5000), st.integers(-900, 1200)), min_size=1, max_size=30),
    st.sampled_from([",", ";", "\t"]),
)
def test_what_a_logger_writes_comes_back(steps: list[tuple[int, int]], mark: str) -> None:
    when, rows = TEN, []
    for step, tenths in steps:
        when += timedelta(minutes=step)
        rows.append((when, tenths / 10))
    lines = [f"{at.isoformat(' ', 'minutes')}{mark}{celsius}" for at, celsius in rows]
    assert read_logger(table(f"time{mark}temp °C", *lines)).readings == tuple(rows)


@pytest.mark.parametrize("heading", ["Ch1 (C)", "Channel 1 [C]", "T1 ( c )"])
def test_a_scale_in_brackets_marks_the_temperature(heading: str) -> None:
    rows = (f"Date,Time,{heading}", "2027-01-22,10:00:00,5.1", "2027-01-22,10:30:00,5.3")
    found = read_logger(table("Logger EL", "Serial: 1", *rows))
    assert (found.readings, found.stated) == (BOTH, "C")


def test_a_heading_that_says_nothing_is_read_when_named() -> None:
    text = table("Time,Reading", "2027-01-22 10:00,5.1", "2027-01-22 10:30,5.3")
    with pytest.raises(BadInput, match="the nearest is") as refused:
        read_logger(text)
    assert "--column" in refused.value.hint
    assert read_logger(text, column="reading").readings == BOTH
