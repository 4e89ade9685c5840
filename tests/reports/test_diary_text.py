"""A bottle's entries as a table and as data."""

from __future__ import annotations

from dataclasses import fields, replace
from datetime import date
from typing import Any

from stockroom.measure.amounts import Amount
from stockroom.reports.diary_text import DiaryRow, diary_json, diary_rows, diary_text

DRAWN = DiaryRow(
    7,
    happened=date(2027, 1, 8),
    entered=date(2027, 1, 11),
    by="T1",
    kind="drawn",
    change=Amount.cm3(-50),
    left=Amount.cm3(2550),
    said="poured by eye",
)


def test_a_row_says_all_that_the_entry_says() -> None:
    full = DRAWN
    for number, each in enumerate(fields(DiaryRow)):
        value: Any = f"value {number}"
        full = replace(full, **{each.name: value})
    assert list(diary_rows([full, DRAWN])) == [full, DRAWN]


def told(entry: DiaryRow, *, practice: bool = False) -> list[str]:
    return diary_text("S05", "acid", [entry], 120, practice=practice).splitlines()


def test_both_days_the_amount_and_what_is_left_stand_in_a_row() -> None:
    title, _, row = told(DRAWN)
    cells = ["7", "2027-01-08", "2027-01-11", "T1", "drawn", "-50 cm³", "2 550 cm³"]
    assert title == "S05 acid"
    assert [cell.strip() for cell in row.split("  ") if cell.strip()] == [*cells, "poured by eye"]


def test_what_came_in_has_a_plus() -> None:
    assert "+50 cm³" in told(replace(DRAWN, change=Amount.cm3(50)))[-1]


def test_a_slip_and_its_putting_right_name_each_other() -> None:
    assert "drawn (put right by 9)" in told(replace(DRAWN, undone_by=9))[-1]
    assert "puts right 7" in told(replace(DRAWN, entry=9, puts_right=7))[-1]


def test_place_and_bookings_come_before_what_was_said() -> None:
    row = told(replace(DRAWN, place="D1", booking="K05;K06"))[-1]
    assert row.endswith("at D1; for K05, K06; poured by eye")


def test_practice_is_the_first_line_of_a_practice_store_alone() -> None:
    assert told(DRAWN, practice=True)[0] == "PRACTICE"
    assert told(DRAWN)[0] == "S05 acid"


def test_the_data_keeps_what_the_words_say() -> None:
    data = diary_json("S05", "acid", [replace(DRAWN, undone_by=9)], practice=True)
    (entry,) = data["entries"]
    assert (data["bottle"], data["item"], data["practice"]) == ("S05", "acid", True)
    assert (entry["amount"], entry["left"], entry["unit"]) == (-50.0, 2550.0, "cm3")
    assert (entry["what"], entry["put_right_by"], entry["puts_right"]) == ("drawn", 9, None)
