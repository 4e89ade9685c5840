"""Vessels away and the minutes of a day: entered, refused when odd, told to the planner."""

from __future__ import annotations

import sqlite3
from datetime import date
from pathlib import Path

import pytest

from stockroom.errors import StockroomError
from stockroom.planning.facts import Vessel
from stockroom.service.database import add_row
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 4)


def add(path: Path, **fields: str) -> None:
    add_row(path, "vessels", fields, by="T1")


def carboy(path: Path) -> Vessel:
    (found,) = [vessel for vessel in facts(path, TODAY).vessels if vessel.name == "5 L carboy"]
    return found


def test_the_planner_is_told_every_vessel(practice: Path) -> None:
    row = facts(practice, TODAY).vessels
    assert [(v.name, v.size, v.away) for v in row] == [
        ("1 L flask", 1_000_000, ()), ("2 L flask", 2_000_000, ()), ("5 L carboy", 5_000_000, ())
    ]  # fmt: skip


def test_absences_are_added_one_by_one_in_any_order(own: Path) -> None:
    add(own, vessel="5 L carboy", away_from="2027-03-01", away_to="2027-03-02")
    add(own, vessel="5 L carboy", size_cm3="5000", away_from="2027-02-01", away_to="2027-02-12")
    assert carboy(own).away == (
        (date(2027, 2, 1), date(2027, 2, 12)), (date(2027, 3, 1), date(2027, 3, 2))
    )  # fmt: skip
    assert [carboy(own).here(date(2027, 2, n)) for n in (12, 13)] == [False, True]


def test_a_new_vessel_may_be_away_from_the_first(own: Path) -> None:
    add(own, vessel="10 L", size_cm3="10000", away_from="2027-02-01", away_to="2027-02-01")
    assert facts(own, TODAY).vessels[-1].away == ((date(2027, 2, 1), date(2027, 2, 1)),)


@pytest.mark.parametrize(
    ("fields", "said"),
    [
        ({"vessel": "5 L carboy", "size_cm3": "5000"}, 'already a vessel "5 L carboy"'),
        ({"vessel": "5 L carboy", "size_cm3": "4000", "away_from": "2027-02-01",
          "away_to": "2027-02-02"}, "4000 cm³ here, and 5000 cm³ where it was entered"),
        ({"vessel": "jug", "away_from": "2027-02-01", "away_to": "2027-02-02"},
         "size_cm3 of jug is blank"),
        ({"vessel": "5 L carboy", "away_from": "2027-02-12", "away_to": "2027-02-01"},
         "2027-02-12"),
        ({"vessel": "5 L carboy", "away_from": "2027-02-12"}, "away_to"),
    ],
)  # fmt: skip
def test_an_odd_absence_is_refused_and_leaves_nothing(
    own: Path, fields: dict[str, str], said: str
) -> None:
    before = facts(own, TODAY).vessels
    with pytest.raises(StockroomError) as refused:
        add(own, **fields)
    assert said in str(refused.value)
    assert facts(own, TODAY).vessels == before


@pytest.mark.file
def test_an_absence_belongs_to_a_vessel_that_is_there(own: Path) -> None:
    with sqlite3.connect(own) as connection:
        connection.execute("PRAGMA foreign_keys = ON")
        with pytest.raises(sqlite3.IntegrityError):
            connection.execute(
                "INSERT INTO vessel_away (vessel_id, starts_on, ends_on)"
                " VALUES (99, '2027-02-01', '2027-02-02')"
            )


# -- the minutes of a day ---------------------------------------------------------------


def test_five_hours_fill_a_day_unless_the_house_says_otherwise(own: Path) -> None:
    assert facts(own, TODAY).house.day_minutes == 300
    add_row(own, "house", {"setting": "day_minutes", "value": "240"}, by="T1")
    assert facts(own, TODAY).house.day_minutes == 240


@pytest.mark.parametrize("value", ["-1", "1441", "7.5", "five hours"])
def test_what_is_no_number_of_minutes_of_a_day_is_refused(own: Path, value: str) -> None:
    with pytest.raises(StockroomError, match="day_minutes"):
        add_row(own, "house", {"setting": "day_minutes", "value": value}, by="T1")
