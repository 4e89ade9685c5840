"""The old spreadsheet, row by row: scenario section 10, and what it leaves to good sense."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest
from old_spreadsheet import OLD, SETTLED, Read, open_in, reader_of, row

from stockroom.bringing.doubts import Weight
from stockroom.bringing.outcome import ListRead, Status
from stockroom.bringing.row import Incoming
from stockroom.measure.amounts import Amount


@pytest.fixture
def read(practice: Path) -> Read:
    return reader_of(practice)


@pytest.fixture
def old(read: Read) -> ListRead:
    return read(OLD)


@pytest.fixture
def settled(read: Read) -> ListRead:
    return read(OLD, *SETTLED)


def said(read: ListRead, number: int) -> Incoming:
    found = row(read, number).incoming
    assert found is not None
    return found


def options(read: ListRead, key: str) -> tuple[str, ...]:
    return next(question.options for question in read.questions if question.key == key)


ACCEPTED, ASKED, REFUSED = Status.ACCEPTED, Status.ASKED, Status.REFUSED
# row, what becomes of it, what must be said of it
OUTCOMES = [
    (1, ASKED, {"dates"}),
    (2, ASKED, {"2.name"}),
    (3, ASKED, {"3.strength"}),
    (4, ACCEPTED, set()),
    (5, ACCEPTED, set()),
    (6, ASKED, {"dates"}),
    (7, REFUSED, {"7.amount", "7.opened", "7.strength"}),
    (8, ASKED, {"decimal", "8.name"}),
    (9, REFUSED, {"9.name"}),
    (10, ASKED, {"10.unit"}),
    (11, ACCEPTED, set()),
    (12, REFUSED, {"dates", "12.name", "12.printed"}),
    (13, ASKED, {"3.strength", "13"}),
    (14, ASKED, {"14.place"}),
]


@pytest.mark.parametrize(
    ("number", "status", "keys"), OUTCOMES, ids=[f"row {row}" for row, _, _ in OUTCOMES]
)
def test_each_row_is_accepted_asked_about_or_refused(
    old: ListRead, number: int, status: Status, keys: set[str]
) -> None:
    assert (row(old, number).status, open_in(old, number)) == (status, keys)


def test_the_columns_are_known_by_their_headings(old: ListRead) -> None:
    known = {column.heading: column.field for column in old.table.columns}
    assert known == {
        "name": "name", "amount": "amount", "unit": "unit", "opened": "opened",
        "exp": "printed", "strength": "strength", "where": "place",
    }  # fmt: skip
    assert old.table.columns[0].samples == ("Sod thiosulphate 5H2O", "hypo anhyd", "Peroxide")


def test_the_order_of_dates_is_asked_once_and_the_file_itself_shows_it(old: ListRead) -> None:
    [dates] = [question for question in old.questions if question.key == "dates"]
    assert dates.rows == (1, 6, 12)
    assert dates.options[0] == "day-first"
    assert "8 September 2025 or 9 August 2025" in dates.text
    assert "rows 3, 10" in dates.text


def test_row_2_is_half_a_kilogram_unopened_of_the_anhydrous_form(old: ListRead) -> None:
    found = said(old, 2)
    assert (found.left, found.opened, found.opened_sometime) == (Amount.grams(500), None, False)
    text = row(old, 2).doubts[0].text
    assert "sodium thiosulfate, anhydrous, not sodium thiosulfate pentahydrate" in text


def test_row_3_asks_vol_or_per_cent_and_keeps_the_month_to_its_last_day(old: ListRead) -> None:
    assert options(old, "3.strength") == ("100 vol", "100 % w/v")
    printed = said(old, 3).printed
    assert printed is not None
    assert printed.readings == (date(2027, 3, 31),)


def test_row_4_is_twenty_volume_peroxide_past_its_month(old: ListRead) -> None:
    found = said(old, 4)
    assert found.line is not None
    assert found.line.key == "hydrogen peroxide 20 vol"
    assert found.opened == date(2025, 11, 3)
    assert found.printed is not None
    assert found.printed.readings == (date(2026, 10, 31),)


def test_row_5_is_a_fiftieth_molar_and_needs_a_look(old: ListRead) -> None:
    found = said(old, 5)
    assert found.line is not None
    assert found.line.key == "potassium permanganate 0.0200 mol/dm3"
    assert (found.left, found.made, found.place) == (Amount.cm3(950), None, "D1")
    assert any("no day made: needs a look" in doubt.text for doubt in row(old, 5).doubts)


def test_row_6_keeps_both_readings_and_is_planned_on_the_earlier(old: ListRead) -> None:
    found = said(old, 6)
    assert found.left == Amount.grams(0.62)
    assert found.printed is not None
    assert found.printed.readings == (date(2027, 4, 5), date(2027, 5, 4))
    assert row(old, 6).goes_in


def test_row_7_is_told_everything_that_is_wrong_at_once(old: ListRead) -> None:
    told = {doubt.field: doubt for doubt in row(old, 7).doubts if doubt.key}
    assert "of how big a bottle?" in told["amount"].text
    assert "which year" in told["opened"].text
    assert told["strength"].options == ("12 % w/v", "12 % w/w", "12 % v/v")
    assert [told[each].value for each in ("amount", "opened")] == ["3/4", "June"]


def test_row_8_has_a_decimal_comma_in_a_file_of_points(old: ListRead) -> None:
    found = said(old, 8)
    assert (found.left, found.printed) == (Amount.grams(7.8), None)
    [decimal] = [doubt for doubt in row(old, 8).doubts if doubt.key == "decimal"]
    assert decimal.weight is Weight.CAREFUL
    assert options(old, "8.name") == ("yes",)


def test_row_9_without_a_name_is_no_bottle(old: ListRead) -> None:
    assert not row(old, 9).goes_in
    assert "stockroom unknown" in row(old, 9).doubts[0].text


def test_row_10_asks_for_the_unit_that_fits(old: ListRead) -> None:
    assert options(old, "10.unit") == ("cm3", "dm3")
    line = said(old, 10).line
    assert line is not None
    assert line.key == "Benedict's reagent"


def test_row_11_is_a_day_number_and_a_density(old: ListRead) -> None:
    found = said(old, 11)
    assert found.line is not None
    # 46 301 days after 30 December 1899; by the other count it would be still to come
    assert (found.line.key, found.opened) == ("ammonia 35 % w/w", date(2026, 10, 6))
    assert "day number: 6 October 2026" in row(old, 11).doubts[0].text


def test_row_12_asks_which_iron_sulfate_and_knows_no_such_day(old: ListRead) -> None:
    assert options(old, "12.name") == (
        "iron(II) sulfate heptahydrate",
        "ammonium iron(II) sulfate hexahydrate",
    )
    told = {doubt.field: doubt.text for doubt in row(old, 12).doubts}
    assert "February 2028 has 29 days" in told["printed"]


def test_row_13_is_never_silently_a_second_bottle(old: ListRead, read: Read) -> None:
    assert not row(old, 13).goes_in
    second = read(OLD, "3.strength=100 vol", "13=second")
    assert (row(second, 3).goes_in, row(second, 13).goes_in) == (True, True)
    once = read(OLD, "3.strength=100 vol", "13=leave-out")
    assert (row(once, 3).goes_in, row(once, 13).status) == (True, Status.LEFT_OUT)


def test_row_14_is_brought_in_as_not_found_or_where_it_is(old: ListRead, read: Read) -> None:
    assert options(old, "14.place") == ("not found",)
    lost, there = read(OLD, "14.place=not found"), read(OLD, "14.place=A2")
    assert (said(lost, 14).not_found, said(lost, 14).place) == (True, "")
    assert (said(there, 14).not_found, said(there, 14).place) == (False, "A2")


def test_settled_every_row_but_the_nameless_goes_in(settled: ListRead) -> None:
    assert {each.row for each in settled.going_in} == set(range(1, 15)) - {9}
    assert settled.questions == ()
    assert said(settled, 1).opened == date(2025, 9, 8)
    assert said(settled, 12).opened == date(2024, 10, 7)
    printed = said(settled, 6).printed
    assert printed is not None
    assert (printed.text, printed.readings) == ("04/05/27", (date(2027, 5, 4),))


def test_the_other_order_is_taken_where_it_is_said(read: Read) -> None:
    other = read(OLD, "dates=month-first")
    assert said(other, 1).opened == date(2025, 8, 9)
    # what has one reading is not turned round
    assert said(other, 3).opened == date(2026, 9, 29)


def test_one_answer_settles_all_rows_that_ask_the_same(read: Read) -> None:
    found = read(OLD, "3.strength=100 vol")
    assert open_in(found, 13) == {"13"}
