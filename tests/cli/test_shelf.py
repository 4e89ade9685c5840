"""What stands where, and where a thing is, by whatever name somebody has for it."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

HYPO = ["B06", "B07", "S01", "S02"]
ACIDS = ["B04", "B13", "B14", "B15"]


@pytest.mark.parametrize(
    ("what", "numbers"),
    [
        ("A1", ACIDS),
        ("acids cupboard", ACIDS),
        ("acid cupboard", ACIDS),
        ("ACIDS", ACIDS),
        ("fridge shelf", None),
        ("hypo", HYPO),
        ("thio", HYPO),
        ("sodium thiosulphate", HYPO),
        ("Na2S2O3", HYPO),
        ("7772-98-7", HYPO),
        ("thiosulf", HYPO),
        ("Na2S2O3.5H2O", ["B06"]),
        ("hypo 0.1 M", ["S02"]),
        ("KI 1.00", ["S03"]),
        ("b06", ["B06"]),
        ("brown powder", ["B36"]),
        ("lithium sulfate", []),
    ],
)
def test_any_name_finds_it(
    stockroom: Stockroom, practice: Path, what: str, numbers: list[str] | None
) -> None:
    result = stockroom("shelf", what, "--json", store=practice)
    if numbers is None:
        assert (result.code, result.out) == (2, "")
        return
    assert [row["bottle"] for row in result.json["bottles"]] == numbers


def test_a_part_of_a_word_never_outdoes_a_whole_name(stockroom: Stockroom, practice: Path) -> None:
    # "iodide" is what the house calls potassium iodide, and a part of sodium iodide too
    found = stockroom("shelf", "iodide", "--json", store=practice).json["bottles"]
    assert {row["item"].split(" 1")[0] for row in found} == {"potassium iodide"}


def test_a_row_says_how_much_of_how_much_where_and_how_good_it_is(
    stockroom: Stockroom, practice: Path
) -> None:
    result = stockroom("shelf", "S01", store=practice)
    assert result.out.startswith("PRACTICE\nS01: 1 bottle on Mon 2027-01-04\n")
    row = "S01 D1 ● sound 1 350 of 2 000 cm³ sodium thiosulfate 1.00 mol/dm³; good until Sat"
    assert f"{row} 2027-05-15, decided by: made 2026-11-16 + 180 days" in result.said


def test_what_must_not_stand_together_is_said_of_a_place_only(
    stockroom: Stockroom, practice: Path
) -> None:
    place = stockroom("shelf", "A1", store=practice)
    assert "chlorine if they meet" in place.said.partition("MUST NOT STAND TOGETHER")[2]
    assert "MUST NOT" not in stockroom("shelf", "B04", store=practice).out
    assert stockroom("shelf", "A2", "--json", store=practice).json["neighbours"] == []


def test_without_a_name_every_bottle_comes_by_place_and_number(
    stockroom: Stockroom, practice: Path
) -> None:
    rows = stockroom("shelf", "--json", store=practice).json["bottles"]
    places = list(dict.fromkeys(row["place"] for row in rows))
    assert places == ["A1", "A2", "A3", "A4", "D1", "C1", "F1", "F2", "H1", "X1"]
    assert [row["bottle"] for row in rows if row["place"] == "H1"] == ["B05a", "B05b"]
    assert len(rows) == 75


def test_a_stranger_gets_the_three_nearest_and_nothing_is_made(
    stockroom: Stockroom, practice: Path
) -> None:
    result = stockroom("shelf", "sodium thiosulfite", store=practice)
    assert (result.code, result.out) == (2, "")
    assert result.err.startswith('No place, bottle or thing "sodium thiosulfite".\nNearest: ')
    assert result.err.count(";") == 2
    assert "sodium thiosulfate" in result.err


def test_a_shelf_is_shown_as_it_was_in_both_senses(stockroom: Stockroom, own: Path) -> None:
    def left(*words: str) -> float:
        return float(
            stockroom("shelf", "S05", "--json", *words, store=own).json["bottles"][0]["left"]
        )

    late = ["draw", "S05", "300 cm3", "--on", "2027-01-06", "--by", "T1", "--as-at", "2027-01-08"]
    assert stockroom(*late, store=own).code == 0
    before = left("--on", "2027-01-05")
    assert left("--on", "2027-01-07") == before - 300
    # on the Thursday nobody had written it down
    assert left("--on", "2027-01-07", "--known-on", "2027-01-07") == before


def test_a_day_still_to_come_is_a_forecast(stockroom: Stockroom, practice: Path) -> None:
    ahead = stockroom("shelf", "S01", "--on", "2027-06-01", store=practice)
    assert "S01: 1 bottle on Tue 2027-06-01 (a forecast: if nothing happens" in ahead.said
    assert "forecast" not in stockroom("shelf", "S01", "--on", "2027-01-03", store=practice).out


def test_a_bottle_that_came_later_was_not_there_yet(stockroom: Stockroom, practice: Path) -> None:
    result = stockroom("shelf", "S01", "--on", "2026-11-15", store=practice)
    assert (result.code, "S01, not there yet: 0 bottles" in result.said) == (0, True)


def test_an_emptied_bottle_is_listed_and_a_discarded_one_only_by_number(
    stockroom: Stockroom, own: Path
) -> None:
    assert "S24f C1 ● sound empty lithium chloride" in stockroom("shelf", "C1", store=own).said
    gone = ["discard", "S24f", "--how", "salt waste", "--why", "empty", "--by", "T1"]
    assert stockroom(*gone, store=own).code == 0
    assert "S24f" not in stockroom("shelf", "C1", store=own).out
    assert "× gone" in stockroom("shelf", "S24f", store=own).said


def test_what_was_judged_by_eye_says_about(stockroom: Stockroom, own: Path) -> None:
    assert stockroom("draw", "B14", "half left", "--by", "T1", store=own).code == 0
    result = stockroom("shelf", "B14", store=own)
    assert "about 1 250 of 2 500 cm³" in result.said
    assert stockroom("shelf", "B14", "--json", store=own).json["bottles"][0]["about"] is True
    # no finer than an eye sees, on the shelf and on the sheet of a walk
    assert stockroom("draw", "B14", "a third left", "--by", "T1", store=own).code == 0
    assert "about 833 of 2 500 cm³" in stockroom("shelf", "B14", store=own).said
    sheet = stockroom("walk", "Jan", "--places", "A1", "--by", "T1", store=own).said
    assert "B14 about 833 cm³ ...." in sheet


def test_an_empty_bottle_is_empty_and_not_about_empty(stockroom: Stockroom, own: Path) -> None:
    for words in (["half left"], ["1250 cm3"]):
        assert stockroom("draw", "B14", *words, "--by", "T1", store=own).code == 0
    said = stockroom("shelf", "B14", store=own).said
    assert ("● sound empty" in said, "about" in said) == (True, False)
