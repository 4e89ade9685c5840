"""Whatever was entered wrongly can be seen, and put right or corrected, at the command line."""

from __future__ import annotations

import shlex
import sqlite3
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Result, Stockroom


def run(stockroom: Stockroom, own: Path, line: str) -> Result:
    return stockroom(*shlex.split(line), "--by", "T1", store=own)


def test_a_printed_date_is_settled(stockroom: Stockroom, own: Path) -> None:
    before = stockroom("why", "B21", store=own).out
    assert "until somebody says" in " ".join(before.split())
    done = run(stockroom, own, "printed B21 2027-05-04")
    assert 'printed "04/05/27" is 4 May 2027.' in done.out
    assert "2027-05-04" in stockroom("why", "B21", store=own).out


def test_a_day_the_date_cannot_mean_is_refused_with_those_it_can(
    stockroom: Stockroom, own: Path
) -> None:
    refused = run(stockroom, own, "printed B21 2027-06-04")
    assert refused.code == 2
    assert "5 April 2027 or 4 May 2027, and not 4 June 2027" in refused.err


def test_the_diary_shows_numbers_that_can_be_put_right(stockroom: Stockroom, own: Path) -> None:
    run(stockroom, own, "draw B06 '5 g'")
    entries = stockroom("diary", "B06", "--json", store=own).json["entries"]
    last = entries[-1]
    assert (last["what"], last["amount"], last["left"], last["unit"]) == ("drawn", -5, 635, "g")
    assert run(stockroom, own, f"put-right {last['entry']} --why typo").code == 0


def test_the_diary_marks_what_was_put_right(stockroom: Stockroom, practice: Path) -> None:
    told = stockroom("diary", "B06", store=practice).out
    [struck] = [line for line in told.splitlines() if "-500 g" in line]
    [mended] = [line for line in told.splitlines() if "+500 g" in line]
    assert f"put right by {mended.split()[0]}" in struck
    assert "690 g" in struck


def test_the_diary_says_that_it_is_practice(stockroom: Stockroom, practice: Path) -> None:
    assert stockroom("diary", "B06", store=practice).out.startswith("PRACTICE\nB06 sodium")
    assert stockroom("diary", "B06", "--json", store=practice).json["practice"] is True


def test_the_diary_of_an_unknown_bottle_shows_the_nearest(
    stockroom: Stockroom, practice: Path
) -> None:
    result = stockroom("diary", "B60", store=practice)
    assert (result.code, "B06" in result.err) == (2, True)


def test_a_row_is_corrected_and_the_plan_follows(stockroom: Stockroom, own: Path) -> None:
    words = "change departments CH left_gbp=50 --why 'counted again'"
    done = run(stockroom, own, words)
    assert "CH: left_gbp £" in done.out
    assert "→ £50.00" in done.out


@pytest.mark.parametrize(
    ("line", "said"),
    [
        ("change places A3 temperature_c=21 --why measured", "A3: temperature_c"),
        ("change lines 'potassium iodide' level_g=75 --why more --as-at 2027-01-05", "75 g"),
        ("change packs 'lithium chloride, 100 g' price_gbp=15.00 --why list", "→ £15.00"),
        ("change packs 'lithium chloride, 100 g' lead_open_days=12 --why told", "→ 12"),
    ],
)
def test_each_table_can_be_corrected(stockroom: Stockroom, own: Path, line: str, said: str) -> None:
    done = run(stockroom, own, line)
    assert done.code == 0, done.err
    assert said in done.out


@pytest.mark.parametrize(
    ("line", "code", "said"),
    [
        ("change departments CH left_gbp=50", 2, "Why is CH of departments changed?"),
        ("change departments XX left_gbp=50 --why typo", 2, 'No department "XX"'),
        ("change departments CH left_gbp=-5 --why typo", 2, "less than nothing"),
        ("change departments CH left_eur=5 --why typo", 2, "left_gbp"),
        ("change departments CH department=CX --why typo", 1, "earlier entries lean on it"),
        ("change bottles B06 size_g=5 --why typo", 1, "May be changed: places"),
        ("change plaices A2 name=x --why typo", 2, "places"),
        ("change places A2 temperature_c=-300 --why typo", 2, "between -90 and 120"),
        ("change places A2 name --why typo", 2, "COLUMN=VALUE"),
        ("change lines 'potassium iodide' level_cm3=5 --why typo", 2, "measured in g"),
        ("change packs 'lithium chloride, 5 g' price_gbp=1 --why x", 2, "lithium chloride, 100 g"),
    ],
)
def test_a_correction_that_cannot_be_is_refused(
    stockroom: Stockroom, own: Path, line: str, code: int, said: str
) -> None:
    refused = run(stockroom, own, line)
    assert (refused.code, said in refused.err) == (code, True), refused


@pytest.mark.file
def test_what_stood_there_before_stays_on_record(stockroom: Stockroom, own: Path) -> None:
    run(stockroom, own, "change places A3 temperature_c=21 --why measured")
    with sqlite3.connect(own) as connection:
        columns = "table_name, row_key, column_name, before, after, why, by"
        [row] = connection.execute(f"SELECT {columns} FROM row_change")
    connection.close()
    assert row == ("places", "A3", "temperature_c", "18", "21", "measured", "T1")


def test_a_correction_that_changes_nothing_is_refused(stockroom: Stockroom, own: Path) -> None:
    line = "change places A3 temperature_c=21 --why measured"
    assert run(stockroom, own, line).code == 0
    again = run(stockroom, own, line)
    assert (again.code, "A3 of places is so already" in again.err) == (2, True)


def test_a_name_in_use_says_how_it_is_corrected(stockroom: Stockroom, own: Path) -> None:
    refused = run(stockroom, own, "add departments department=CH left_gbp=50")
    assert "stockroom change departments 'CH'" in refused.err


def test_the_words_a_column_takes_are_listed(stockroom: Stockroom) -> None:
    lines = stockroom("add", "--columns", "lines").out.splitlines()
    assert "form               solid, liquid, solution, sundry" in lines
    words = stockroom("add", "--columns", "recipe_lines", "--json").json["words"]
    assert words["closeness"] == ["exact", "close", "rough", "present"]


def test_flags_are_shown_without_a_kind_of_value(stockroom: Stockroom) -> None:
    for words in (["--help"], ["look", "--help"], ["found", "--help"]):
        told = stockroom(*words).said
        assert "<bool>" not in told
        assert "--help" in told


def test_an_empty_store_suggests_a_table_there_is(stockroom: Stockroom, tmp_path: Path) -> None:
    made = stockroom("new", store=tmp_path / "new.sqlite")
    assert "add lines item=" in made.err


@pytest.mark.parametrize(
    ("line", "said"),
    [
        ("draw S01 '1000 g'", "Give it in cm³."),
        ("draw B06 '5 cm3'", "Give it in g."),
        ("lend B04 5cm3", "--to"),
        ("plan --as-at 31/04/2027", "April 2027 has 30 days.\nWhich day is meant?"),
        ("book R04 --on 2027-01-21 --at 09:15 --groups 12", "--dept"),
        (
            "arrive 'lithium chloride' '100 g' --place A2 --printed 'best before Easter'",
            '--printed none --note "best before Easter"',
        ),
        ("draw S05 '½ L'", 'amount "½ L": a fraction.'),
        ("strength '1 M' --of HCl --to '% w/w' --density 1200", "not kg/m³?"),
    ],
)
def test_a_refusal_says_what_would_do(
    stockroom: Stockroom, own: Path, line: str, said: str
) -> None:
    refused = run(stockroom, own, line)
    assert refused.code == 2, refused
    assert said in refused.err


def test_an_assumed_density_is_owned_up_to(stockroom: Stockroom) -> None:
    words = ("strength", "36 % w/w", "--of", "HCl", "--to", "mol/dm3")
    assert "give --density off the label" in stockroom(*words).said
    assert "give --density" not in stockroom(*words, "--density", "1.18").said
    dense = stockroom("dilute", "1 L", "1 M", "--from", "36 % w/w", "--of", "HCl").said
    assert "give --density off the label" in dense
