"""`day`, `slip` and `phone` at the command line: what may be asked, and what changes say."""

from __future__ import annotations

from pathlib import Path
from typing import TYPE_CHECKING

import paper_reading
import pytest

if TYPE_CHECKING:
    from conftest import Stockroom


def test_without_a_day_it_is_the_next_with_a_booking(stockroom: Stockroom, practice: Path) -> None:
    assert stockroom("day", "--json", store=practice).json["on"] == "2027-01-12"
    # on the day itself that day, and over a booking that is done with the next
    on_it = stockroom("day", "--json", "--as-at", "2027-01-13", store=practice)
    assert on_it.json["on"] == "2027-01-13"
    after = stockroom("day", "--as-at", "2027-03-24", store=practice)
    assert (after.code, after.out.splitlines()[0]) == (0, "Nothing booked   PRACTICE")


def test_the_answer_is_that_of_ready(stockroom: Stockroom, practice: Path) -> None:
    for ref in ("2027-03-23", "K15", "K21", "2027-01-14"):
        ready = stockroom("ready", ref, "--json", store=practice)
        sheet = stockroom("day", ref, "--json", store=practice)
        assert sheet.code == 0
        to_do = [each for part in sheet.json["parts"] for each in part["to_do"]]
        assert len(to_do) == len(ready.json["to_do"])
        assert sheet.json["ready"] is ready.json["ready"]


@pytest.mark.parametrize("command", ["day", "slip", "phone"])
@pytest.mark.parametrize(
    ("ref", "quoted"), [("K99", 'No booking "K99"'), ("31/02/2027", "February 2027 has 28 days")]
)
def test_what_cannot_be_meant_is_misuse(
    stockroom: Stockroom, practice: Path, command: str, ref: str, quoted: str
) -> None:
    asked = stockroom(command, ref, store=practice)
    assert (asked.code, asked.out) == (2, "")
    assert quoted in asked.err


def test_a_booking_in_small_letters(stockroom: Stockroom, practice: Path) -> None:
    assert stockroom("slip", "k11", "--json", store=practice).json["single"] == "K11"


def test_the_found_strength_goes_to_the_board(stockroom: Stockroom, own: Path) -> None:
    """Scenario 7: permanganate found 0.0201 on 1 February, and the slip prints it."""
    line = "potassium permanganate 0.0200 mol/dm3"
    made = ("make", line, "4620 cm3", "--from", "B10", "--place", "D1", "--by", "T1")
    assert stockroom(*made, "--as-at", "2027-01-29", store=own).code == 0
    day = ("--as-at", "2027-02-01", "--by", "T1")
    assert stockroom("found", "S25", "0.0201 mol/dm3", *day, store=own).code == 0
    told = stockroom("slip", "K11", *day, store=own).out
    assert "potassium permanganate today: 0.0201 mol/dm³, found 1 Feb 2027" in told
    page = stockroom("day", "K11", *day, store=own).out
    assert "potassium permanganate stronger by 0.5 %: 0.0201 mol/dm³ (found)" in page
    printed = stockroom("slip", "K11", "--print", "slip.pdf", *day, store=own)
    assert printed.code == 0, printed.err
    assert "0.0201 mol/dm³" in paper_reading.words(Path("slip.pdf").read_bytes())


def test_what_changed_since_it_was_printed(stockroom: Stockroom, own: Path) -> None:
    day = ("--as-at", "2027-02-01", "--by", "T1")
    printed = stockroom("day", "2027-03-23", "--print", "day.pdf", *day, store=own)
    assert printed.out == "day.pdf: Tue 23 Mar 2027, copy 0001\n"
    same = stockroom("day", "2027-03-23", *day, store=own)
    assert "nothing changed since copy 0001" in same.out
    assert stockroom("cancel", "K28", *day, store=own).code == 0
    assert stockroom("shift", "K29", "--on", "2027-03-24", *day, store=own).code == 0
    told = stockroom("day", "2027-03-23", *day, store=own).said
    assert ">13:30 K28 Iodine clock: peroxide and iodide" in told
    assert "dropped: not planned (was: K28 Iodine clock" in told
    assert "gone: K29 Flame tests, Tue 23 Mar 2027 13:30" in told


def test_one_booking_is_followed_to_its_new_day(stockroom: Stockroom, own: Path) -> None:
    day = ("--as-at", "2027-02-01", "--by", "T1")
    assert stockroom("day", "K13", "--print", "k13.pdf", *day, store=own).code == 0
    assert stockroom("shift", "K13", "--on", "2027-02-09", *day, store=own).code == 0
    told = stockroom("day", "K13", *day, store=own).said
    assert "Tue 9 Feb 2027 14:00, LAB1, 10 groups (was: K13" in told
    assert "gone: K13" not in told


def test_a_phone_text_is_never_printed(stockroom: Stockroom, practice: Path) -> None:
    assert stockroom("phone", "K01", "--print", "x.pdf", store=practice).code == 2
    assert stockroom("phone", store=practice).code == 2
