"""A setting is kept in the one way of writing that every plan reads, or refused."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest

from stockroom.errors import StockroomError
from stockroom.service.database import add_row, day_for, is_practice, new_store
from stockroom.store.reading import house_value
from stockroom.store.snapshot import facts


def say(path: Path, setting: str, value: str) -> None:
    add_row(path, "house", {"setting": setting, "value": value}, by="T1")


@pytest.mark.parametrize(
    ("setting", "typed", "kept"),
    [
        ("margin_open_days", "2.0", "2"),
        ("lead_open_days", "1e1", "10"),
        ("session_minutes", "0100", "100"),
        ("batch_step_cm3", "1 000", "1000"),
        ("batch_step_cm3", "0,5", "0.5"),
        ("heel_floor_cm3", "0", "0"),
        ("practice_day", "4 Jan 2027", "2027-01-04"),
        ("staffed_from", "8:15", "08:15"),
        ("finish_day_before", "No", "no"),
        ("practice", "y", "yes"),
    ],
)
def test_a_setting_is_kept_as_every_plan_reads_it(
    own: Path, setting: str, typed: str, kept: str
) -> None:
    say(own, setting, typed)
    assert house_value(own, setting) == kept
    facts(own, day_for(own, None))


def test_what_was_typed_is_what_the_planner_is_told(own: Path) -> None:
    say(own, "margin_open_days", "3.0")
    say(own, "batch_step_cm3", "1 000")
    house = facts(own, date(2027, 1, 4)).house
    assert (house.margin_days, house.batch_step) == (3, 1_000_000)


@pytest.mark.parametrize(
    ("setting", "typed", "said"),
    [
        ("margin_open_days", "2.5", '"2.5" is not a whole number'),
        ("margin_open_days", "two", 'margin_open_days "two"'),
        ("lead_open_days", "4000", '"4000" is not between 0 and 400'),
        ("session_minutes", "0", '"0" is not between 1 and 600'),
        ("batch_step_cm3", "0", '"0" is not between 0.001 and 10000'),
        ("batch_step_cm3", "1,000", '"1,000": One thousand or one?'),
        ("heel_floor_cm3", "1e9", '"1e9" is not between 0 and 10000'),
        ("practice_day", "04/05/27", 'practice_day "04/05/27"'),
        ("staffed_to", "half past four", 'staffed_to "half past four"'),
        ("finish_day_before", "maybe", 'finish_day_before "maybe" is neither yes nor no'),
        ("staffed_from", "17:00", 'staffed_from "17:00": staffed from 17:00 to 16:30'),
    ],
)
def test_a_setting_no_plan_could_read_is_refused(
    own: Path, setting: str, typed: str, said: str
) -> None:
    before = house_value(own, setting)
    with pytest.raises(StockroomError) as caught:
        say(own, setting, typed)
    assert said in str(caught.value)
    assert house_value(own, setting) == before


def test_an_hour_is_held_against_the_usual_one_where_the_other_is_not_said(tmp_path: Path) -> None:
    path = tmp_path / "ours.sqlite"
    new_store(path)
    with pytest.raises(StockroomError, match="not a day's work"):
        say(path, "staffed_from", "17:00")
    facts(path, date(2027, 1, 4))


def test_the_hours_of_an_evening_house_load_in_either_order(tmp_path: Path) -> None:
    tables = tmp_path / "tables"
    tables.mkdir()
    rows = "setting,value\nstaffed_from,17:00\nstaffed_to,21:30\npractice,Yes\n"
    (tables / "house.csv").write_text(rows, encoding="utf-8")
    new_store(tmp_path / "evening.sqlite", tables=tables)
    calendar = facts(tmp_path / "evening.sqlite", date(2027, 1, 4)).calendar
    assert (calendar.open_from, calendar.open_to) == (1020, 1290)
    assert is_practice(tmp_path / "evening.sqlite")
