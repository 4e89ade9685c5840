"""`stockroom week` as it is typed: which week, what is refused, and what changed since printed."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import pytest
from paper_reading import page_words, words

if TYPE_CHECKING:
    from conftest import Stockroom

BOOKED = (
    *("book", "R01", "--on", "2027-04-14", "--at", "09:15", "--groups", "8"),
    *("--dept", "CH", "--by", "T1"),
)


@pytest.mark.parametrize(
    ("typed", "as_at", "title"),
    [
        (["2027-01-25"], "2027-01-04", "Week 4: 25 to 29 January 2027"),
        (["31/01/2027"], "2027-01-04", "Week 4: 25 to 29 January 2027"),
        ([], "2027-01-29", "Week 4: 25 to 29 January 2027"),
        ([], "2027-01-30", "Week 5: 1 to 5 February 2027"),
        ([], "2027-01-31", "Week 5: 1 to 5 February 2027"),
        (["2027-03-31"], "2027-01-04", "Week 13: 29 March to 2 April 2027"),
        (["2026-11-04"], "2027-01-04", "Week of 2 to 6 November 2026"),
    ],
)
def test_any_day_names_its_week(
    practice: Path, stockroom: Stockroom, typed: list[str], as_at: str, title: str
) -> None:
    told = stockroom("week", *typed, "--as-at", as_at, "--json", store=practice)
    assert told.code == 0, told.err
    assert told.json["head"]["title"] == title


@pytest.mark.parametrize("typed", ["week 4", "2027-02-30", "05/06/2027", ""])
def test_a_day_that_cannot_be_read_is_quoted(
    practice: Path, stockroom: Stockroom, typed: str
) -> None:
    told = stockroom("week", typed, store=practice)
    assert (told.code, told.out) == (2, "")
    assert typed in told.err


def test_days_before_the_day_of_asking_are_over(practice: Path, stockroom: Stockroom) -> None:
    told = stockroom("week", "--as-at", "2027-01-28", "--json", store=practice).json
    by_day = {rung["on"]: rung for rung in told["rungs"]}
    tuesday, thursday = by_day["2027-01-26"], by_day["2027-01-28"]
    assert (tuesday["told"], tuesday["shelves"], tuesday["minutes"]) == ("Over.", [], "")
    assert [each["what"] for each in tuesday["classes"]] == ["Iodine clock: peroxide and iodide"]
    assert thursday["state"] == ""
    assert thursday["shelves"]


def test_a_week_outside_the_term_says_that_nothing_is_booked(
    practice: Path, stockroom: Stockroom
) -> None:
    told = stockroom("week", "2027-04-07", store=practice)
    assert "No bookings." in told.said
    assert "Nothing is booked in this week: nothing to make or set out." in told.said
    assert "GUESSES: nothing guessed" in told.said


def test_a_booking_past_the_term_is_planned_through(own: Path, stockroom: Stockroom) -> None:
    booked = stockroom(*BOOKED, store=own)
    assert booked.code == 0, booked.err
    told = stockroom("week", "2027-04-14", store=own)
    assert "MAKE" in told.out
    assert "528 cm³ hydrogen peroxide 0.100 mol/dm³: to be made that day" in told.said


def test_a_resize_and_a_move_are_marked_against_the_copy_printed_last(
    own: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    first = tmp_path / "first.pdf"
    assert stockroom("week", "2027-01-25", "--print", str(first), store=own).code == 0
    same = stockroom("week", "2027-01-25", store=own)
    assert "nothing changed since copy 0001" in same.said
    assert stockroom("shift", "K08", "--groups", "11", "--by", "T1", store=own).code == 0
    assert stockroom("shift", "K10", "--on", "2027-02-12", "--by", "T1", store=own).code == 0

    told = stockroom("week", "2027-01-25", store=own)
    lines = told.out.splitlines()
    marked = [line for line in lines if line.lstrip().startswith(">")]
    assert any("hydrogen peroxide 0.100 mol/dm³, 726 cm³" in line for line in marked)
    assert any("968 cm³ potassium iodide 0.100 mol/dm³" in line for line in marked)
    # what is as it was keeps no mark: the second class of the same thing
    assert not any("704 cm³ potassium iodide" in line for line in marked)
    assert not any("Water bath" in line for line in marked)
    listed = stockroom("week", "2027-01-25", "--json", store=own).json["head"]["since"]["changes"]
    assert listed[0].startswith("Tue 26 Jan 09:15 Iodine clock: peroxide and iodide, 11 groups")
    # what hangs on a booking that is gone is counted beside it
    assert listed[1] == (
        "gone: Fri 29 Jan 09:15 Starch and amylase, 9 groups, LAB2, BI, K10; 5 lines with it"
    )
    (fresh,) = [each for each in listed if each.startswith("Tue 26 Jan make: 08:10 hydrogen")]
    assert "(was: Tue 26 Jan make: 08:10 hydrogen peroxide 0.100 mol/dm³, 528 cm³;" in fresh

    second = tmp_path / "second.pdf"
    assert stockroom("week", "2027-01-25", "--print", str(second), store=own).code == 0
    printed = words(second.read_bytes())
    assert "changes since copy 0001, marked >" in printed
    assert "Iodine clock: peroxide and iodide, 11 groups" in printed
    assert all("copy 0002" in each for each in page_words(second.read_bytes()))


def test_a_make_done_since_is_told_by_its_bottle_and_comes_back_when_that_is_gone(
    own: Path, stockroom: Stockroom
) -> None:
    on = ("--as-at", "2027-01-26")
    week = ("week", "2027-01-25", *on)

    def changes() -> list[str]:
        told: list[str] = stockroom(*week, "--json", store=own).json["head"]["since"]["changes"]
        return told

    assert stockroom(*week, "--print", "one.pdf", store=own).code == 0
    made = ("make", "starch 0.5 % w/v", "176 cm3", *on, "--by", "T1")
    assert stockroom(*made, store=own).code == 0
    assert changes()[0] == "made: S25 starch 0.5 % w/v"
    assert not any(each.startswith("gone: Tue 26 Jan make") for each in changes())
    assert "made: S25 starch 0.5 % w/v" in stockroom(*week, store=own).said

    # the next copy knows of it: it is told once, and a make to be done again is new
    assert stockroom(*week, "--print", "two.pdf", store=own).code == 0
    assert changes() == []
    thrown = stockroom(
        "discard", "S25", "--how", "sink", "--why", "mould", *on, "--by", "T1", store=own
    )
    assert thrown.code == 0, thrown.err
    assert any(each.startswith("new: Tue 26 Jan make: 08:") for each in changes())


def test_another_week_is_another_sheet(own: Path, stockroom: Stockroom) -> None:
    assert stockroom("week", "2027-01-25", "--print", "one.pdf", store=own).code == 0
    told = stockroom("week", "2027-02-01", "--json", store=own).json
    assert told["head"]["since"] is None


def test_what_was_made_and_is_good_today_only_is_still_poured_away(
    own: Path, stockroom: Stockroom
) -> None:
    made = stockroom(
        "make", "hydrogen peroxide 0.100 mol/dm3", "528 cm3", "--as-at", "2027-01-26",
        "--by", "T1", store=own,
    )  # fmt: skip
    assert made.code == 0, made.err
    told = stockroom("week", "--as-at", "2027-01-26", store=own).said
    assert "S25 hydrogen peroxide 0.100 mol/dm³: pour away what is left good today only" in told
    assert "Never return any to the bottle" in told.partition("S25 hydrogen peroxide")[2]
    # a bottle that keeps, and one from before the term, are nobody's tidying
    assert "S01 sodium thiosulfate 1.00 mol/dm³: pour away" not in told


def test_what_a_class_had_of_a_bottle_thrown_away_since_is_still_told(
    stockroom: Stockroom, own: Path
) -> None:
    """Made, drawn to the last drop for its class and thrown away, all on the class's day."""
    at = ("--as-at", "2027-01-26", "--by", "T1")
    made = stockroom("make", "hydrogen peroxide 0.100 mol/dm3", "528 cm3", *at, "--json", store=own)
    bottle = made.json["bottle"]
    assert stockroom("draw", bottle, "528 cm3", "--for", "K08", *at, store=own).code == 0
    thrown = ("discard", bottle, "--how", "sink", "--why", "surplus")
    assert stockroom(*thrown, *at, store=own).code == 0
    for command in (("week",), ("day", "K08"), ("ready", "K08")):
        told = stockroom(*command, *at, store=own)
        assert (told.code in (0, 1), told.err) == (True, told.err)
        assert "hydrogen peroxide" in told.said
    assert bottle not in stockroom("past", *at, store=own).out
