"""Dates, decimal signs, amounts and places as people type them, and what cannot be meant."""

from __future__ import annotations

from datetime import date
from pathlib import Path

import pytest
from old_spreadsheet import Read, open_in, reader_of, row

from stockroom.bringing.outcome import ListRead, RowRead, Status
from stockroom.bringing.row import Incoming
from stockroom.measure.amounts import Amount


@pytest.fixture
def read(practice: Path) -> Read:
    return reader_of(practice)


def one(read: Read, heads: str, cells: str, *answers: str) -> RowRead:
    return read(f"name;{heads}\nKI;{cells}\n", *answers).rows[0]


def said(found: RowRead | ListRead, number: int = 1) -> Incoming:
    each = found if isinstance(found, RowRead) else row(found, number)
    assert each.incoming is not None
    return each.incoming


def told(found: RowRead) -> str:
    return "; ".join(doubt.text for doubt in found.doubts)


# -- dates ----------------------------------------------------------------------------


def test_two_hands_in_one_file_are_told(read: Read) -> None:
    found = read("name,amount,opened\nKI,5 g,29/09/2025\nNaCl,5 g,09/29/2025\nLiCl,5 g,4/5/2025\n")
    [question] = found.questions
    assert "row 1 begins with the day and row 2 with the month: two hands?" in question.text
    assert [said(found, number).opened for number in (1, 2)] == [date(2025, 9, 29)] * 2


def test_the_reading_that_is_still_to_come_cannot_be_meant(read: Read) -> None:
    # 5 April 2027 is after the day the list is brought in
    assert said(one(read, "amount;opened", "5 g;05/04/2027", "dates=day-first")).opened is None
    found = one(read, "amount;opened", "5 g;03/12/2026")
    assert open_in(read("name,amount,opened\nKI,5 g,03/12/2026\n"), 1) == {"dates"}
    assert found.status is Status.ASKED
    assert said(one(read, "amount;opened", "5 g;12/02/2027")).opened is None
    assert said(one(read, "amount;opened", "5 g;01/02/2027")).opened == date(2027, 1, 2)


@pytest.mark.parametrize(
    ("opened", "words"),
    [
        ("13/05/2027", "13 May 2027 is still to come: today is 4 January 2027"),
        ("31/02/2026", "February 2026 has 28 days"),
        ("June", "June of which year?"),
        ("long ago", "I cannot read it as a date"),
        ("29/02/25", "February 2025 has 28 days"),
    ],
)
def test_a_day_that_cannot_be_is_refused(read: Read, opened: str, words: str) -> None:
    found = one(read, "amount;opened", f"5 g;{opened}")
    assert found.status is Status.REFUSED
    assert words in told(found)


def test_a_month_without_a_day_asks_and_offers_the_careful_first(read: Read) -> None:
    found = one(read, "amount;opened", "5 g;Oct-25")
    assert found.status is Status.ASKED
    assert found.doubts[0].options == ("2025-10-01",)


@pytest.mark.parametrize(
    ("opened", "sometime", "sealed"),
    [("yes", True, False), ("", False, True), ("no", False, True), ("unopened", False, True)],
)
def test_opened_may_be_said_without_a_day(
    read: Read, opened: str, sometime: bool, sealed: bool
) -> None:
    found = said(one(read, "amount;opened", f"5 g;{opened}"))
    assert (found.opened, found.opened_sometime) == (None, sometime)
    # sealed, it holds what it held when it came; opened, nobody knows how much it was
    assert (found.size is not None) is sealed


def test_opened_before_it_arrived_is_refused(read: Read) -> None:
    found = one(read, "amount;received;opened", "5 g;2026-02-01;2026-01-01")
    assert found.status is Status.REFUSED
    assert "1 January 2026 is before it arrived, 1 February 2026" in told(found)


def test_a_day_number_that_both_counts_allow_is_asked(read: Read) -> None:
    found = one(read, "amount;opened", "5 g;43000")
    assert [doubt.key for doubt in found.doubts if doubt.key] == ["epoch"]
    assert "22 September 2017 or 23 September 2021" in told(found)
    days = [
        said(one(read, "amount;opened", "5 g;43000", f"epoch={epoch}")).opened
        for epoch in (1900, 1904)
    ]
    assert days == [date(2017, 9, 22), date(2021, 9, 23)]


def test_a_printed_day_number_keeps_both_and_plans_on_the_earlier(read: Read) -> None:
    found = one(read, "amount;exp", "5 g;47000")
    printed = said(found).printed
    assert printed is not None
    assert printed.readings == (date(2028, 9, 4), date(2032, 9, 5))
    assert found.goes_in


def test_no_day_at_all_needs_a_look(read: Read) -> None:
    assert "no day it came: needs a look" in told(one(read, "amount", "5 g"))
    for known in ("received;2026-02-01", "opened;2026-02-01", "exp;2028-02"):
        column, day = known.split(";")
        assert "needs a look" not in told(one(read, f"amount;{column}", f"5 g;{day}"))


# -- decimal signs --------------------------------------------------------------------


def test_a_thousand_or_one_is_asked(read: Read) -> None:
    found = one(read, "amount", "1,000 g")
    assert (found.status, "One thousand or one?" in told(found)) == (Status.ASKED, True)
    assert said(one(read, "amount", "1,000 g", "decimal=point")).left == Amount.grams(1000)
    assert said(one(read, "amount", "1,000 g", "decimal=comma")).left == Amount.grams(1)


def test_a_comma_that_can_only_be_decimal_is_read(read: Read) -> None:
    assert said(one(read, "amount", "0,05 g")).left == Amount.grams(0.05)
    assert one(read, "amount", "7,8 g").status is Status.ACCEPTED


def test_a_point_is_asked_about_in_a_file_of_commas(read: Read) -> None:
    found = read("name;amount\nKI;7,8 g\nNaCl;1.250 g\n")
    assert open_in(found, 2) == {"decimal"}
    settled = read("name;amount\nKI;7,8 g\nNaCl;1.250 g\n", "decimal=comma")
    assert said(settled, 2).left == Amount.grams(1250)


def test_mixed_signs_are_queried_and_the_rows_go_in(read: Read) -> None:
    found = read("name;amount\nKI;7,8 g\nNaCl;2.5 g\n")
    assert [question.key for question in found.questions] == ["decimal"]
    assert [said(found, number).left for number in (1, 2)] == [Amount.grams(7.8), Amount.grams(2.5)]
    assert all(each.goes_in for each in found.rows)


def test_a_comma_that_groups_nothing_is_refused_where_points_are_said(read: Read) -> None:
    assert one(read, "amount", "7,8 g", "decimal=point").status is Status.REFUSED


def test_grouped_millions_have_one_reading(read: Read) -> None:
    assert said(one(read, "amount", "1,000,000 mg")).left == Amount.grams(1000)


# -- amounts --------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("heads", "cells", "left", "count"),
    [
        ("amount", "500gms", 500, 1),
        ("amount;unit", "0.5;Kg", 500, 1),
        ("amount;unit", "620;mg", 0.62, 1),
        ("amount", "2 x 250 g", 250, 2),
        ("amount;unit;size", "3;bottles;100 g", 100, 3),
        ("amount;size", "3/4;500 g", 375, 1),
        ("amount;size", "half full;500 g", 250, 1),
        ("amount;unit;size", "½;full;500 g", 250, 1),
        ("size", "500 g", 500, 1),
        ("amount", "about 200 g", 200, 1),
    ],
)
def test_an_amount_is_read_as_people_write_it(
    read: Read, heads: str, cells: str, left: float, count: int
) -> None:
    found = said(one(read, heads, cells))
    assert (found.left, found.count) == (Amount.grams(left), count)


def test_a_part_of_a_bottle_is_about(read: Read) -> None:
    assert said(one(read, "amount;size", "3/4;500 g")).about
    assert said(one(read, "amount", "~200 g")).about
    assert not said(one(read, "amount", "200 g")).about


@pytest.mark.parametrize(
    ("heads", "cells", "words"),
    [
        ("amount;unit", "3/4;bottle", "of how big a bottle?"),
        ("amount", "lots", "how much?"),
        ("amount", "-5 g", "less than nothing"),
        ("amount", "0 g", "nothing is in it"),
        ("amount;size", "empty;500 g", "nothing is in it"),
        ("amount", "5 firkins", "firkins"),
        ("amount;size", "600 g;500 g", "more than the bottle holds"),
        ("amount;size", "5 g;500 ml", "a volume, and what is left is a mass"),
        ("amount;bottles", "5 g;400", "400 bottles in one row?"),
        ("amount;bottles", "5 g;few", "not a whole number of bottles"),
        ("amount", "2027-04-03", "did the spreadsheet program make one of 3/4"),
        ("amount", "", "blank: how much is left?"),
        ("amount", "2000 kg", "more than 1000 kg"),
    ],
)
def test_an_amount_that_cannot_be_is_refused(
    read: Read, heads: str, cells: str, words: str
) -> None:
    found = one(read, heads, cells)
    assert found.status is Status.REFUSED
    assert words in told(found)


def test_an_answer_is_what_the_cell_should_have_said(read: Read) -> None:
    assert said(one(read, "amount", "lots", "1.amount=5 g")).left == Amount.grams(5)


def test_an_answer_without_a_row_fills_blank_cells_only(read: Read) -> None:
    found = read("name,amount,unit,where\nKI,5,,\nNaCl,6,kg,A1\n", "unit=g", "place=A2")
    assert [(said(found, n).left, said(found, n).place) for n in (1, 2)] == [
        (Amount.grams(5), "A2"),
        (Amount.grams(6000), "A1"),
    ]


# -- places ---------------------------------------------------------------------------


@pytest.mark.parametrize(
    ("where", "place"),
    [("A2", "A2"), ("a2 ", "A2"), ("dark", "D1"), ("acids", "A1"), ("acid cupboard", "A1"),
     ("the fridge", "F1"), ("flammables", "F2")],
)  # fmt: skip
def test_a_place_is_known_by_one_word_of_it(read: Read, where: str, place: str) -> None:
    assert said(one(read, "amount;where", f"5 g;{where}")).place == place


@pytest.mark.parametrize("where", ["lost??", "LOST", "missing", "can't find", "?"])
def test_a_bottle_nobody_can_find_is_asked_about(read: Read, where: str) -> None:
    found = one(read, "amount;where", f"5 g;{where}")
    assert (found.status, found.doubts[-1].options[:1]) == (Status.ASKED, ("not found",)) or (
        "not found" in told(found)
    )


def test_a_place_that_is_not_there_offers_the_nearest_and_none(read: Read) -> None:
    found = one(read, "amount;where", "5 g;A22")
    [doubt] = [each for each in found.doubts if each.field == "place"]
    assert doubt.options[0] == "A2"
    assert doubt.options[-1] == "none"
    assert said(one(read, "amount;where", "5 g;A22", "1.place=none")).place == ""
    assert said(one(read, "amount;where", "5 g;shelf", "1.place=C1")).place == "C1"
