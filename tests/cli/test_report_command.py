"""`stockroom report`, and the tables and prints of `buying`, `usage` and `past`."""

from __future__ import annotations

import csv
from pathlib import Path
from typing import TYPE_CHECKING

import paper_reading
import pytest

if TYPE_CHECKING:
    from conftest import Stockroom


def test_what_is_poured_away_spilled_and_lent_reaches_the_report(
    own: Path, stockroom: Stockroom
) -> None:
    by = ("--by", "T1")
    for words in (
        ("discard", "S14", "--how", "iron waste bottle", "--why", "past"),
        ("discard", "S23", "--how", "sink", "--why", "surplus, too much made"),
        ("spill", "S01", "20 cm3", "--why", "knocked over"),
        ("lend", "S02", "30 cm3", "--to", "next door"),
    ):
        ran = stockroom(*words, *by, store=own)
        assert ran.code == 0, ran.err
    said = stockroom("report", store=own).said
    assert (
        "2 bottles were poured away (1 past, 1 surplus), 270 cm³ in all; 20 cm³ was spilled" in said
    )
    assert "30 cm³ is lent and not back" in said
    assert "surplus poured away so far: 70 cm³" in said
    assert "iron(II) sulfate 0.100 mol/dm³ 200 cm³ (S14, iron waste bottle)" in said


def test_a_term_that_is_over_is_told_of_until_the_next_begins(
    own: Path, stockroom: Stockroom
) -> None:
    after = stockroom("report", "--as-at", "2027-04-05", store=own)
    assert "2027-01-04 to 2027-03-26" in after.said
    assert "29 bookings this term use 40 things" in after.said
    words = ("add", "terms", "term=summer", "from=2027-04-12", "to=2027-07-16", "--by", "T1")
    assert stockroom(*words, store=own).code == 0
    assert (
        "2027-04-12 to 2027-07-16" in stockroom("report", "--as-at", "2027-04-12", store=own).said
    )
    named = stockroom("report", "--term", "Summer", "--as-at", "2027-04-05", store=own)
    assert "2027-04-12 to 2027-07-16" in named.said
    wrong = stockroom("report", "--term", "sumer", store=own)
    assert (wrong.code, "summer" in wrong.err) == (2, True), wrong.err


def test_an_entry_put_right_is_no_waste(own: Path, stockroom: Stockroom) -> None:
    ran = stockroom("spill", "S01", "20 cm3", "--why", "slip", "--by", "T1", "--json", store=own)
    entry = str(ran.json["entry"])
    ran = stockroom("put-right", entry, "--why", "it was water", "--by", "T1", store=own)
    assert ran.code == 0, ran.err
    assert (
        "Nothing is entered as poured away, spilled or lent" in stockroom("report", store=own).said
    )


def test_a_second_print_says_what_changed(own: Path, tmp_path: Path, stockroom: Stockroom) -> None:
    page = tmp_path / "buying.pdf"
    assert stockroom("buying", "--print", str(page), store=own).code == 0
    words = ("order", "lithium chloride", "1", "100 g", "--by", "T1")
    assert stockroom(*words, store=own).code == 0
    assert stockroom("buying", "--print", str(page), store=own).code == 0
    said = paper_reading.words(page.read_bytes())
    assert "copy 0002" in said
    assert "gone: order lithium chloride" in said
    assert "On its way" in said or "ON ITS WAY" in said


@pytest.mark.parametrize("command", ["buying", "usage", "past"])
def test_a_table_is_written_and_read_back(
    command: str, practice: Path, tmp_path: Path, stockroom: Stockroom
) -> None:
    to = tmp_path / f"{command}.csv"
    told = stockroom(command, "--csv", str(to), "--bom", store=practice)
    assert told.code == 0, told.err
    with to.open(encoding="utf-8-sig", newline="") as file:
        rows = list(csv.reader(file))
    assert len(rows) > 3
    assert len({len(row) for row in rows}) == 1
    assert to.read_bytes().count(b"\r\n") == len(rows)


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (("buying", "--csv", "a.xls"), "Name it buying.csv"),
        (("buying", "--csv", "a.csv", "--print", "a.doc"), "written as .pdf"),
        (("past", "--bom"), "--bom goes with --csv only"),
        (("usage", "--csv", "no/such/a.csv"), "there is no folder"),
        (("report", "--print", "a.doc"), "written as .pdf"),
        (("report", "--paper", "A9", "--print", "a.pdf"), "A9"),
    ],
)
def test_bad_input_writes_nothing(
    words: tuple[str, ...], said: str, practice: Path, stockroom: Stockroom
) -> None:
    told = stockroom(*words, store=practice)
    assert (told.code, said in told.err) == (2, True), told.err
