"""A logger's file comes in whole or not at all, and bottles then age by it."""

from __future__ import annotations

import sqlite3
from collections.abc import Callable
from datetime import date, datetime, timedelta
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadDate, BadInput, NotAllowed, StockroomError, UnknownName
from stockroom.keeping.strength import strengths_on
from stockroom.service.logger import Meant, bring_in, held, taken_back
from stockroom.store.snapshot import facts

TODAY = date(2027, 2, 1)
FIRST = datetime(2027, 1, 4)
Write = Callable[..., Path]


@pytest.fixture
def write(tmp_path: Path) -> Write:
    """Writes a table of hourly readings: °C by the hour, from a day on."""

    def table(
        *celsius: float, first: datetime = FIRST, heading: str = "time,temp °C", every: float = 1
    ) -> Path:
        rows = [
            f"{(first + timedelta(hours=every * at)).isoformat(' ', 'minutes')},{each}"
            for at, each in enumerate(celsius)
        ]
        path = tmp_path / f"logger{len(list(tmp_path.iterdir()))}.csv"
        path.write_text("\n".join([heading, *rows]), encoding="utf-8")
        return path

    return table


def rows_held(path: Path) -> int:
    with sqlite3.connect(path) as link:
        (count,) = link.execute("SELECT count(*) FROM reading").fetchone()
        return int(count)


def brought(store: Path, place: str, file: Path, **meant: Any) -> tuple[int | None, int | None]:
    done = bring_in(store, place, file, meant=Meant(**meant), today=TODAY, by="T1")
    return done.added, done.already


def test_what_came_in_is_told(own: Path, write: Write) -> None:
    done = bring_in(own, "F1", write(5, 5, 10), today=TODAY, by="T1")
    found = done.summary
    assert found is not None
    assert (done.added, done.already, found.count) == (3, 0, 3)
    assert (found.first, found.last) == (FIRST, FIRST + timedelta(hours=2))
    assert [found.lowest, found.highest, found.mean] == pytest.approx([5, 10, 20 / 3])
    # from 5 to 10 °C in an hour: two fifths of it over the refrigerator's 8 °C
    assert done.limits is not None
    assert done.limits.name == "refrigerator"
    assert done.above == pytest.approx(0.4)


@pytest.mark.file
def test_twice_adds_nothing_twice(own: Path, write: Write) -> None:
    file = write(5, 5.2, 5.4)
    assert brought(own, "F1", file) == (3, 0)
    assert brought(own, "F1", file) == (0, 3)
    assert brought(own, "F1", write(5, 5.2, 5.4, 5.6)) == (1, 3)
    assert rows_held(own) == 4


def test_a_place_goes_by_its_long_name_too(own: Path, write: Write) -> None:
    assert brought(own, "refrigerator", write(5)) == (1, 0)
    assert held(own, "f1").summary is not None


@pytest.mark.file
def test_another_temperature_of_the_same_time_is_refused(own: Path, write: Write) -> None:
    brought(own, "F1", write(5, 5))
    with pytest.raises(NotAllowed, match="2027-01-04 01:00: 5 °C is held, and the file says 9 °C"):
        brought(own, "F1", write(5, 9, 9))
    assert rows_held(own) == 2


@pytest.mark.file
@pytest.mark.parametrize(
    "bad", ["2027-01-04 02:00,warm", "2027-01-03 00:00,5", "2027-01-04 02:00,-127"]
)
def test_one_bad_row_leaves_the_whole_file(own: Path, write: Write, bad: str) -> None:
    file = write(5, 5)
    file.write_text(f"{file.read_text('utf-8')}\n{bad}\n", encoding="utf-8")
    with pytest.raises(StockroomError):
        brought(own, "F1", file)
    assert rows_held(own) == 0


def test_a_gap_is_asked_about_and_named(own: Path, write: Write) -> None:
    file = write(5, 5, 5, every=25)
    assert brought(own, "F1", file) == (3, 0)
    late = write(6, 6, first=datetime(2027, 1, 20))
    with pytest.raises(NotAllowed, match="Nothing was logged 2027-01-06 02:00 to 2027-01-20 00:00"):
        brought(own, "F1", late)
    assert brought(own, "F1", late, accept_gaps=True) == (2, 0)
    # it was asked about once
    assert brought(own, "F1", late) == (0, 2)


@pytest.mark.file
def test_a_gap_inside_a_file_is_asked_about(own: Path, write: Write) -> None:
    file = write(*[5.0] * 30)
    rows = file.read_text("utf-8").splitlines()
    file.write_text("\n".join(rows[:3] + rows[-2:]), encoding="utf-8")
    with pytest.raises(NotAllowed, match="more than 24 h is a gap"):
        brought(own, "F1", file)
    assert rows_held(own) == 0


def test_readings_still_to_come_are_refused(own: Path, write: Write) -> None:
    with pytest.raises(BadDate, match="Row 2 is of 2 February 2027, still to come"):
        brought(own, "F1", write(5, first=datetime(2027, 2, 2)))


@pytest.mark.parametrize(("place", "number"), [("F1", 41.0), ("A3", 66.0), ("X1", 68.0)])
def test_numbers_that_read_like_fahrenheit_are_asked_about(
    own: Path, write: Write, place: str, number: float
) -> None:
    file = write(number, number, heading="time,temp")
    with pytest.raises(NotAllowed, match="no unit is given") as told:
        brought(own, place, file)
    assert "--fahrenheit" in told.value.hint
    assert brought(own, place, file, scale="F") == (2, 0)


def test_a_file_without_unit_is_taken_as_celsius_where_that_fits(own: Path, write: Write) -> None:
    assert brought(own, "F1", write(5, 6, heading="time,temp")) == (2, 0)


def test_a_warm_file_can_be_celsius_after_all(own: Path, write: Write) -> None:
    file = write(55, 55, heading="time,temp")
    with pytest.raises(NotAllowed, match="no unit is given"):
        brought(own, "X1", file)
    assert brought(own, "X1", file, scale="C") == (2, 0)


@pytest.mark.parametrize("code", ["utf-16", "cp1252", "utf-8-sig"])
def test_files_of_other_programs_are_read(own: Path, write: Write, code: str) -> None:
    file = write(5, 6)
    file.write_bytes(file.read_text("utf-8").encode(code))
    assert brought(own, "F1", file) == (2, 0)


def test_a_place_nobody_knows_gets_the_nearest(own: Path, write: Write) -> None:
    with pytest.raises(UnknownName, match='No place "F9"'):
        brought(own, "F9", write(5))


def test_a_file_that_is_not_there_is_named(own: Path, tmp_path: Path) -> None:
    with pytest.raises(BadInput, match=r"no file .*nothing\.csv"):
        brought(own, "F1", tmp_path / "nothing.csv")


@pytest.mark.file
def test_who_brought_which_file_stays_on_record(own: Path, write: Write) -> None:
    brought(own, "F1", write(5))
    with sqlite3.connect(own) as link:
        rows = link.execute("SELECT row_key, after, by FROM row_change").fetchall()
    assert [(place, by) for place, _, by in rows] == [("F1", "T1")]
    assert rows[0][1].endswith(".csv: 1 reading, 2027-01-04 00:00 to 2027-01-04 00:00")


def test_what_is_held_is_looked_at_by_days(own: Path, write: Write) -> None:
    brought(own, "A3", write(*[18.0] * 24, *[28.0] * 24))
    whole, second = held(own, "A3"), held(own, "A3", start=date(2027, 1, 5), end=date(2027, 1, 5))
    assert whole.summary is not None
    assert second.summary is not None
    assert (whole.summary.count, second.summary.count) == (48, 24)
    assert second.summary.kinetic == pytest.approx(28.0)
    assert held(own, "A3", start=date(2027, 3, 1)).summary is None


def test_another_energy_gives_another_kinetic_mean(own: Path, write: Write) -> None:
    brought(own, "A3", write(*[20.0] * 12, *[30.0] * 12))
    low, high = (held(own, "A3", energy=energy).summary for energy in (50.0, 100.0))
    assert low is not None
    assert high is not None
    assert low.kinetic < high.kinetic


def test_days_that_run_backwards_are_refused(own: Path) -> None:
    with pytest.raises(BadDate, match="2027-02-01 to 2027-01-01 runs backwards"):
        held(own, "A3", start=date(2027, 2, 1), end=date(2027, 1, 1))


def expected(store: Path, number: str, on: date) -> float:
    known = facts(store, on)
    bottle = next(one for one in known.bottles if one.number == number)
    found = strengths_on(bottle.record, known.lines[bottle.line].rules, on).expected
    assert found is not None
    return found


def test_a_bottle_ages_by_the_record_of_its_place(own: Path, write: Write) -> None:
    # B05a, household bleach, stands at H1, 28 °C; logged cold it keeps its strength
    before = expected(own, "B05a", date(2027, 1, 31))
    brought(own, "H1", write(*[5.0] * 24 * 28), scale="C")
    assert expected(own, "B05a", date(2027, 1, 31)) > before
    # and a day looked at before the record is as it was
    assert expected(own, "B05a", date(2027, 1, 4)) == expected(own, "B05a", date(2027, 1, 4))


def test_a_picture_of_an_earlier_day_knows_no_later_reading(own: Path, write: Write) -> None:
    before = expected(own, "B05a", date(2027, 1, 10))
    brought(own, "H1", write(*[40.0] * 48, first=datetime(2027, 1, 12)))
    assert expected(own, "B05a", date(2027, 1, 10)) == before


def back(store: Path, place: str, first: date, last: date) -> None:
    taken_back(store, place, first, last, why="of H2", today=TODAY, by="T1")


def test_what_was_taken_back_no_longer_ages_a_bottle(own: Path, write: Write) -> None:
    before = expected(own, "B05a", date(2027, 1, 31))
    brought(own, "H1", write(*[45.0] * 24 * 7))
    assert expected(own, "B05a", date(2027, 1, 31)) < before
    back(own, "H1", FIRST.date(), date(2027, 1, 31))
    assert expected(own, "B05a", date(2027, 1, 31)) == before


@pytest.mark.file
def test_what_was_taken_back_is_kept_beside(own: Path, write: Write) -> None:
    brought(own, "F1", write(5, 6, 7))
    back(own, "F1", FIRST.date(), FIRST.date())
    assert rows_held(own) == 0
    with sqlite3.connect(own) as link:
        kept = link.execute("SELECT at, centi, change_id FROM reading_taken_back").fetchall()
        (change,) = link.execute("SELECT id FROM row_change").fetchall()[-1]
    assert [row[1:] for row in kept] == [(500, change), (600, change), (700, change)]


@pytest.mark.file
def test_only_the_days_named_and_the_place_named_are_taken_back(own: Path, write: Write) -> None:
    for place in ("F1", "H1"):
        brought(own, place, write(*[20.0] * 72))
    back(own, "F1", date(2027, 1, 5), date(2027, 1, 5))
    found = held(own, "F1").summary
    assert found is not None
    assert found.count == 48
    assert rows_held(own) == 48 + 72


@pytest.mark.file
def test_a_reading_taken_back_twice_is_kept_twice(own: Path, write: Write) -> None:
    for _ in range(2):
        brought(own, "F1", write(5))
        back(own, "F1", FIRST.date(), FIRST.date())
    with sqlite3.connect(own) as link:
        assert link.execute("SELECT count(*) FROM reading_taken_back").fetchone() == (2,)
