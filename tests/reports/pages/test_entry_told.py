"""One entry in words, before it is put right."""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from stockroom.measure.amounts import Amount
from stockroom.reports.diary_text import DiaryRow
from stockroom.reports.pages.entry import entry_told

DRAWN = DiaryRow(
    entry=12,
    happened=date(2027, 1, 25),
    entered=date(2027, 1, 26),
    by="T1",
    kind="drawn",
    change=Amount.cm3(-100),
    left=Amount.cm3(30),
    booking="K16;K17",
)


def test_an_entry_is_told_with_its_days_and_whose_it_is() -> None:
    (told,) = entry_told("S13", "silver nitrate 0.100 mol/dm3", [DRAWN])
    assert told.heading == "Entry 12: S13 silver nitrate 0.100 mol/dm3"
    assert dict(told.rows) == {
        "What": "drawn -100 cm³",
        "Left after it": "30 cm³",
        "Happened": "Mon 25 Jan 2027",
        "Entered": "Tue 26 Jan 2027, by T1",
        "Said": "for K16, K17",
    }


def test_one_that_was_put_right_says_so_and_is_followed_by_what_did_it() -> None:
    undone = replace(DRAWN, undone_by=13)
    mend = replace(DRAWN, entry=13, kind="put right", puts_right=12, booking="", said="slip")
    first, second = entry_told("S13", "silver nitrate", [undone, mend])
    assert dict(first.rows)["Put right"] == "yes, by entry 13"
    assert dict(second.rows)["Said"] == "puts right 12; slip"


def test_what_an_entry_does_not_say_has_no_row() -> None:
    looked = replace(DRAWN, kind="looked", change=Amount.cm3(0), booking="")
    (told,) = entry_told("S13", "silver nitrate", [looked])
    assert [name for name, _ in told.rows] == ["What", "Left after it", "Happened", "Entered"]
