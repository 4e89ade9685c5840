"""`stockroom card`: which makes are meant, what is printed, and what is refused."""

from __future__ import annotations

import re
from pathlib import Path
from typing import TYPE_CHECKING

import paper_reading as paper
import pytest

if TYPE_CHECKING:
    from conftest import Stockroom


def test_a_booking_names_all_that_is_made_for_it(practice: Path, stockroom: Stockroom) -> None:
    cards = stockroom("card", "k08", "--json", store=practice).json["cards"]
    assert [card["name"].split("\u00a0")[0] for card in cards] == [
        "starch 0.5",
        "potassium iodide 0.100",
        "sodium thiosulfate 0.0500",
        "sulfuric acid 0.250",
        "hydrogen peroxide 0.100",
    ]


def test_a_day_names_what_is_begun_and_what_is_gone_on_with(
    practice: Path, stockroom: Stockroom
) -> None:
    begun = stockroom("card", "--on", "2027-01-29", store=practice)
    finished = stockroom("card", "--on", "2027-02-01", store=practice)
    between = stockroom("card", "--on", "2027-01-31", store=practice)
    for told in (begun, finished):
        assert "potassium permanganate 0.0200 mol/dm³, 4 620 cm³" in told.out
    assert "permanganate" not in between.out
    assert "for 2027-01-31: nothing to make up" in between.said


def test_a_week_is_all_its_days(practice: Path, stockroom: Stockroom) -> None:
    cards = stockroom("card", "--week", "2027-01-27", "--json", store=practice).json["cards"]
    days = [re.findall(r"\d+ Jan 2027", card["when"])[0] for card in cards]
    assert days == sorted(days)
    assert (days[0], days[-1]) == ("25 Jan 2027", "29 Jan 2027")


@pytest.mark.parametrize(
    ("words", "code", "said"),
    [
        (("M99",), 2, 'No make or booking "M99"'),
        ((), 2, "Which card?"),
        (("M14", "--on", "2027-01-26"), 2, "Which card?"),
        (("--on", "2027-02-30"), 2, "2027-02-30"),
        (("M14", "--print", "card.doc"), 2, ".pdf, .svg or .png"),
    ],
)
def test_what_cannot_be_meant_is_said(
    practice: Path, stockroom: Stockroom, words: tuple[str, ...], code: int, said: str
) -> None:
    told = stockroom("card", *words, store=practice)
    assert told.code == code
    assert said in " ".join(told.err.split())


def test_printed_it_is_a_page_for_each_make_and_its_codes_are_the_bottles(
    own: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    told = stockroom("card", "M14", "M42", "--print", "cards.pdf", store=own)
    assert told.code == 0, told.err
    pdf = (tmp_path / "cards.pdf").read_bytes()
    first, second = paper.page_words(pdf)
    assert "6.61 cm³" in first
    assert "not 5.92 cm³, the label's 100 vol" in first
    assert "47.9 cm³" in second
    assert "nominal, not checked" in second
    assert paper.codes(pdf) == ["B01", "B13"]
    assert paper.overlapping(pdf) == []
    assert paper.outside(pdf, 15) == []
    assert paper.greys_only(pdf)
    again = stockroom("card", "M14", "M42", store=own)
    assert "nothing changed since copy" in again.said


def test_a_number_that_was_another_make_on_paper_is_said(
    own: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    printed = stockroom("card", "M15", "--print", "card.pdf", store=own)
    assert (printed.code, printed.err) == (0, "")
    assert stockroom("card", "M15", store=own).err == ""
    # its booking is dropped, and the number goes to another make
    assert stockroom("cancel", "K08", "--why", "ill", "--by", "T1", store=own).code == 0
    said = (
        "M15 was hydrogen peroxide 0.100 mol/dm³ on copy 0001;"
        " makes are numbered anew in each plan\n"
    )
    (now,) = stockroom("card", "M15", "--json", store=own).json["cards"]
    assert now["name"].startswith("starch")
    assert stockroom("card", "m15", store=own).err == said
    assert stockroom("label", "M15", store=own).err == said
    # nobody named a number here
    assert stockroom("card", "--on", "2027-01-29", store=own).err == ""
    again = stockroom("label", "M15", "--print", "label.pdf", store=own)
    assert said in again.err
    # from now on the newest copy is right
    assert stockroom("card", "M15", store=own).err == ""


def test_a_day_with_nothing_to_make_can_be_printed_and_says_so(
    own: Path, stockroom: Stockroom, tmp_path: Path
) -> None:
    assert stockroom("card", "--on", "2027-01-31", "--print", "none.pdf", store=own).code == 0
    assert "nothing to make up" in paper.words((tmp_path / "none.pdf").read_bytes())


def test_the_line_to_type_back_is_taken_as_it_stands(own: Path, stockroom: Stockroom) -> None:
    [line] = stockroom("card", "M02", "--json", store=own).json["cards"][0]["type_back"]
    assert line == (
        "stockroom make 'copper(II) sulfate 0.100 mol/dm3' '66 cm3' "
        "--from S15 --on ____ --place ____ --by ____"
    )
    done = stockroom(
        "make", "copper(II) sulfate 0.100 mol/dm3", "66 cm3",
        "--from", "S15", "--on", "2027-01-04", "--place", "A3", "--by", "T1", store=own,
    )  # fmt: skip
    assert done.code == 0, done.err
