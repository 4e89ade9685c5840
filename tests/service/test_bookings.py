"""Bookings are asked about when they cannot be meant, and every change stays on record."""

from __future__ import annotations

import sqlite3
from datetime import date
from pathlib import Path
from typing import Any

import pytest

from stockroom.errors import BadDate, BadInput, NotAllowed, StockroomError, UnknownName
from stockroom.planning.facts import Booking, Firmness
from stockroom.service import bookings
from stockroom.service.answers import Done
from stockroom.store.snapshot import facts

TODAY = date(2027, 1, 11)
WHO: dict[str, Any] = {"today": TODAY, "by": "P1"}


def book(path: Path, **changed: Any) -> Done:
    usual: dict[str, Any] = {"number": None, "recipe": "R04", "on": date(2027, 3, 9)}
    usual |= {"time": 555, "groups": 12, "department": "CH"}
    return bookings.book(path, **(usual | WHO | changed))


def seen(path: Path, number: str) -> Booking:
    return next(one for one in facts(path, TODAY).bookings if one.number == number)


def changes(path: Path) -> list[tuple[str, str, str]]:
    with sqlite3.connect(path) as connection:
        rows = connection.execute("SELECT what, before, after FROM booking_change ORDER BY id")
        found = rows.fetchall()
    connection.close()
    return found


def test_a_booking_gets_the_next_number_and_ten_per_cent_spare(own: Path) -> None:
    assert book(own).text.startswith("Booked K30: R04 Thiosulfate and acid")
    booking = seen(own, "K30")
    assert (booking.groups, booking.spare, booking.minute) == (12, 100, 555)
    assert (booking.version, booking.firmness) == (1, Firmness.FIRM)


def test_a_room_that_is_taken_is_told_and_not_refused(own: Path) -> None:
    room: dict[str, Any] = {"room": "hall lab", "on": date(2027, 2, 10)}
    said = book(own, time=19 * 60, **room).details
    assert any("hall lab has K16 (R10) at the same time as K30" in each for each in said)
    assert not [each for each in book(own, time=555, **room).details if "same time" in each]
    moved = bookings.shift(own, "K31", time=19 * 60, **WHO).details
    assert len([each for each in moved if "at the same time as K31" in each]) == 3


def test_a_booking_keeps_the_number_it_is_given(own: Path) -> None:
    book(own, number="K77", spare=20.0, firmness="pencilled")
    assert (seen(own, "K77").spare, seen(own, "K77").firmness) == (200, Firmness.PENCILLED)


@pytest.mark.parametrize(
    ("changed", "kind", "said"),
    [
        ({"groups": 0}, BadInput, "0 groups"),
        ({"groups": 400}, BadInput, "400 groups"),
        ({"spare": 150.0}, BadInput, r"150 %\? Spare is usually 5-20"),
        ({"recipe": "R4"}, UnknownName, 'No recipe "R4"'),
        ({"department": ""}, BadInput, "needs to know who pays"),
        ({"department": "XX"}, UnknownName, 'No department "XX"'),
        ({"number": "K01"}, BadInput, "K01 is booked already"),
        ({"firmness": "perhaps"}, UnknownName, 'No firmness "perhaps"'),
        ({"version": 9}, UnknownName, "R04 has no version 9"),
        ({"on": date(2027, 3, 8)}, NotAllowed, r"8 March 2027 is closed\. Keep it\?"),
        ({"on": date(2027, 3, 6)}, NotAllowed, "6 March 2027 is closed"),
        ({"by": ""}, BadInput, "Whose initials"),
    ],
)
def test_a_booking_that_cannot_be_meant_is_asked_about(
    own: Path, changed: dict[str, Any], kind: type[StockroomError], said: str
) -> None:
    with pytest.raises(kind, match=said):
        book(own, **changed)
    assert len(facts(own, TODAY).bookings) == 29


def test_a_mistyped_recipe_shows_the_nearest(own: Path) -> None:
    with pytest.raises(UnknownName) as caught:
        book(own, recipe="R4")
    assert caught.value.hint.startswith("Nearest: R04;")


def test_a_closed_day_can_be_kept_on_purpose(own: Path) -> None:
    book(own, on=date(2027, 3, 8), keep=True)
    assert seen(own, "K30").on == date(2027, 3, 8)


@pytest.mark.file
def test_a_shift_says_what_was_and_what_is(own: Path) -> None:
    done = bookings.shift(own, "K06", on=date(2027, 1, 21), groups=13, **WHO)
    assert done.text == "K06: day 2027-01-20 → 2027-01-21; groups 11 → 13."
    assert changes(own) == [("day", "2027-01-20", "2027-01-21"), ("groups", "11", "13")]
    assert (seen(own, "K06").on, seen(own, "K06").groups) == (date(2027, 1, 21), 13)


def test_a_shift_of_the_time_is_told_as_a_time(own: Path) -> None:
    assert "time 11:00 → 14:15" in bookings.shift(own, "K06", time=855, **WHO).text


def test_a_booking_may_be_done(own: Path) -> None:
    bookings.shift(own, "K01", firmness="done", **WHO)
    assert seen(own, "K01").firmness is Firmness.DONE


@pytest.mark.file
@pytest.mark.parametrize(
    ("changed", "kind", "said"),
    [
        ({"groups": 11}, BadInput, "K06 is so already"),
        ({}, BadInput, "K06 is so already"),
        ({"groups": 201}, BadInput, "201 groups"),
        ({"on": date(2027, 2, 16)}, NotAllowed, "16 February 2027 is closed"),
        ({"firmness": "sure"}, UnknownName, 'No firmness "sure"'),
    ],
)
def test_a_shift_that_cannot_be_meant_changes_nothing(
    own: Path, changed: dict[str, Any], kind: type[StockroomError], said: str
) -> None:
    with pytest.raises(kind, match=said):
        bookings.shift(own, "K06", **(changed | WHO))
    assert changes(own) == []


@pytest.mark.file
def test_a_dropped_booking_stays_on_record(own: Path) -> None:
    bookings.cancel(own, "K06", **WHO)
    assert changes(own) == [("firmness", "firm", "dropped")]
    with pytest.raises(NotAllowed, match="K06 is dropped already"):
        bookings.cancel(own, "K06", **WHO)


@pytest.mark.parametrize("firmness", ["dropped", "done"])
def test_a_booking_out_of_the_plan_is_shifted_only_with_its_firmness(
    own: Path, firmness: str
) -> None:
    bookings.shift(own, "K06", firmness=firmness, **WHO)
    with pytest.raises(NotAllowed, match=f"K06 is {firmness}"):
        bookings.shift(own, "K06", groups=3, **WHO)
    bookings.shift(own, "K06", groups=3, firmness="firm", **WHO)
    assert (seen(own, "K06").groups, seen(own, "K06").firmness) == (3, Firmness.FIRM)


def test_a_day_gone_by_is_no_day_to_book(own: Path) -> None:
    past = date(2026, 3, 9)
    with pytest.raises(BadDate, match="9 March 2026 is past: today is 11 January 2027") as caught:
        book(own, on=past)
    assert "Check the year" in caught.value.hint
    with pytest.raises(BadDate, match="9 March 2026 is past"):
        bookings.shift(own, "K06", on=past, **WHO)


def test_a_day_outside_every_term_is_said(own: Path) -> None:
    assert book(own, on=date(2028, 5, 11)).details == ("11 May 2028 is outside every term.",)
    assert book(own).details == ()
    shifted = bookings.shift(own, "K06", on=date(2028, 5, 11), **WHO)
    assert shifted.details == ("11 May 2028 is outside every term.",)


def test_the_same_class_booked_again_is_asked_about(own: Path) -> None:
    assert not book(own).details
    assert book(own).details == ("the same as K30, at the same hour: is it booked twice?",)
    # another hour is another class
    assert not book(own, time=700).details
