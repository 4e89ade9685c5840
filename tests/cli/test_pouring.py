"""Decanting, mixing and putting right, as they are typed."""

from __future__ import annotations

from datetime import date
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.store.reading import reading
from stockroom.store.snapshot import facts

if TYPE_CHECKING:
    from conftest import Stockroom

WRITTEN = ("entry", "bottle", "parent")
BY = ("--by", "T1", "--as-at", "2027-01-11")


def written(path: Path) -> list[int]:
    """How many rows there are of what a pouring writes."""
    with reading(path) as reader:
        return [reader.ask(f"SELECT COUNT(*) FROM {table}")[0][0] for table in WRITTEN]


def test_a_decant_is_told_in_one_line_with_its_date(stockroom: Stockroom, own: Path) -> None:
    done = stockroom("decant", "B02", "50 cm3", "--place", "A3", *BY, store=own)
    assert done.code == 0
    assert "Decanted 50 cm³ of B02 hydrogen peroxide 100 vol into B46; recheck by" in done.said
    assert "B02: 450 cm³ left." in done.said


@pytest.mark.parametrize(
    ("words", "code", "said"),
    [
        (("decant", "B02", "50 cm3", "--good-until", "2029-01-01"), 1,
         "Good until 1 January 2029: it cannot outlast the bottle it came from (31 August 2027)"),
        (("decant", "B02", "50 cm3", "--good-until", "04/05/27"), 2, "04/05/27"),
        (("decant", "B02", "50 g"), 2, "is measured by volume"),
        (("decant", "B02", "0 cm3"), 2, "is nothing"),
        (("decant", "B99", "5 cm3"), 2, "B99"),
        (("decant", "B36", "5 g"), 1, "B36"),
        (("decant", "B28", "5 g"), 1, "B28 was not found"),
        (("decant", "B02", "50 cm3", "--place", "Z9"), 2, "Z9"),
        (("mix", "S02", "S01"), 1, "only bottles of one line are mixed"),
        (("mix", "S02", "S02"), 1, "S02 with itself"),
        (("put-right", "K05", "--why", "x"), 2, "K05 is a booking"),
        (("put-right", "P01", "--why", "x"), 2, "P01 is an order"),
        (("put-right", "S05", "--why", "x"), 2, "stockroom diary S05"),
    ],
)  # fmt: skip
def test_what_cannot_be_is_refused_and_nothing_is_written(
    stockroom: Stockroom, own: Path, words: tuple[str, ...], code: int, said: str
) -> None:
    before = written(own)
    refused = stockroom(*words, *BY, store=own)
    assert (refused.code, said in refused.err) == (code, True), refused.err
    assert written(own) == before


def test_initials_are_wanted(stockroom: Stockroom, own: Path) -> None:
    refused = stockroom("decant", "B02", "50 cm3", store=own)
    assert (refused.code, "initials" in refused.err) == (2, True)


def test_topped_up_and_taken_back(stockroom: Stockroom, own: Path) -> None:
    def enter(*words: str) -> str:
        done = stockroom(*words, *BY, store=own)
        assert done.code == 0, done.err
        return done.said

    before = facts(own, date(2027, 1, 11))
    enter("decant", "S02", "300 cm3")
    said = enter("mix", "S25", "S02", "200 cm3", "--into", "1 dm3")
    assert "Mixed S25 and S02 in S26" in said
    assert "0.0987 mol/dm³ by mixing of S25 and S02: an exact line wants it found." in said
    assert "Pour nothing back into a stock bottle" in said
    entry = said.split("Entry ")[1].split(".")[0]
    assert "put right with it" in enter("put-right", entry, "--why", "did not")
    decanted = stockroom("diary", "S25", "--json", store=own).json["entries"][0]["entry"]
    enter("put-right", str(decanted), "--why", "did not")
    assert facts(own, date(2027, 1, 11)) == before


def test_the_diary_shows_both_days_and_what_was_known(stockroom: Stockroom, own: Path) -> None:
    drawn = ("draw", "S13", "40 cm3", "--on", "2027-01-08")
    stockroom(*drawn, *BY, store=own)
    now = stockroom("diary", "S13", "--json", store=own).json["entries"]
    then = stockroom("diary", "S13", "--known-on", "2027-01-08", "--json", store=own).json
    assert (now[-1]["happened"], now[-1]["entered"]) == ("2027-01-08", "2027-01-11")
    assert then["entries"] == now[:-1]
