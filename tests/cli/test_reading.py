"""The reading commands, on the practice college."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

READING = [
    ("plan",),
    ("fresh",),
    ("past",),
    ("usage",),
    ("buying",),
    ("why", "K15"),
    ("ready", "K11"),
    ("ready", "2027-03-23"),
]


@pytest.mark.parametrize("words", READING)
def test_practice_is_said_on_the_first_line_and_in_json(
    stockroom: Stockroom, practice: Path, words: tuple[str, ...]
) -> None:
    assert "PRACTICE" in stockroom(*words, store=practice).out.splitlines()[0]
    assert stockroom(*words, "--json", store=practice).json["practice"] is True


# a reason of `why` is one line, however long: the terminal wraps it
@pytest.mark.parametrize("words", [words for words in READING if words[0] != "why"])
@pytest.mark.parametrize("columns", [60, 80])
def test_lines_fit_the_terminal(
    stockroom: Stockroom,
    practice: Path,
    monkeypatch: pytest.MonkeyPatch,
    words: tuple[str, ...],
    columns: int,
) -> None:
    monkeypatch.setenv("COLUMNS", str(columns))
    out = stockroom(*words, store=practice).out
    assert max(map(len, out.splitlines())) <= columns


def test_a_plan_with_shorts_is_still_a_plan(stockroom: Stockroom, practice: Path) -> None:
    result = stockroom("plan", store=practice)
    assert result.code == 0
    assert "CANNOT BE DONE" in result.out


def test_lithium_is_told_late_by_six_open_days(stockroom: Stockroom, practice: Path) -> None:
    # scenario T26
    (order,) = (
        each
        for each in stockroom("buying", "--json", store=practice).json["orders"]
        if each["item"] == "lithium chloride"
    )
    assert (order["order_by"], order["late_by_open_days"]) == ("2026-12-11", 6)


def test_strong_peroxide_for_k15_is_had_from_b02(stockroom: Stockroom, practice: Path) -> None:
    # scenario T07
    needs = stockroom("plan", "--json", store=practice).json["needs"]
    (peroxide,) = (each for each in needs if each["ref"] == "K15.1")
    assert peroxide["outcome"] == "have"
    assert peroxide["from"] == [{"bottle": "B02", "amount": 180, "unit": "cm3"}]


def test_a_period_narrows_what_is_made(stockroom: Stockroom, practice: Path) -> None:
    words = ("fresh", "--from", "2027-01-25", "--to", "2027-01-29", "--json")
    makes = stockroom(*words, store=practice).json["makes"]
    assert makes
    assert {make["on"] for make in makes} <= {f"2027-01-{day}" for day in range(25, 30)}
    assert {"K08", "K11"} <= {booking for make in makes for booking in make["for"]}


def test_a_week_of_the_plan_is_that_week_of_the_term(stockroom: Stockroom, practice: Path) -> None:
    """Asking about one week changes no batch: its makes are the term's, number and all."""
    week = stockroom("plan", "--from", "2027-02-01", "--to", "2027-02-05", "--json", store=practice)
    term = stockroom("plan", "--json", store=practice).json
    assert {need["booking"] for need in week.json["needs"]} == {"K11", "K12", "K13", "K14"}
    assert all(make in term["makes"] for make in week.json["makes"])


def test_as_at_changes_what_is_past_and_needs_no_clock(
    stockroom: Stockroom, practice: Path
) -> None:
    early = stockroom("past", "--as-at", "2026-12-20", "--json", store=practice).json
    assert early["as_at"] == "2026-12-20"
    assert "S09" not in [each["bottle"] for each in early["past"]]


def test_not_ready_leaves_with_1_and_says_no_first(stockroom: Stockroom, practice: Path) -> None:
    result = stockroom("ready", "K11", store=practice)
    assert result.code == 1
    assert result.out.startswith("NO: ")


def test_ready_leaves_with_0_and_says_yes_first(stockroom: Stockroom, practice: Path) -> None:
    result = stockroom("ready", "K19", store=practice)
    assert (result.code, result.out[:3]) == (0, "YES")


def test_why_takes_five_lines_or_fewer(stockroom: Stockroom, practice: Path) -> None:
    for ref in ("K15", "K15.1", "K01.1", "S05", "lithium chloride"):
        assert len(stockroom("why", ref, "--json", store=practice).json["reasons"]) <= 5


def test_a_make_says_what_it_is_measured_with_and_how_good_it_will_be(
    stockroom: Stockroom, practice: Path
) -> None:
    # T09: 6.608 cm³ of B01; one mark of 0.1 cm³ is 1.5 % of it
    said = stockroom("why", "M14", store=practice).said
    assert "6.608 cm³ of B01: 10 cm³ graduated pipette, ±1.5 %; made to 0.100 ± 0.003" in said
    assert "±" not in stockroom("plan", store=practice).out


def test_every_make_of_an_acid_says_acid_into_water(stockroom: Stockroom, practice: Path) -> None:
    makes = stockroom("plan", store=practice).out.split("MAKE\n")[1].split("CHECK\n")[0]
    acids = [part for part in makes.split("\n  M")[1:] if " acid " in part.splitlines()[0]]
    assert len(acids) > 6
    assert [
        part for part in acids if "Acid into water" not in part and "ascorbic" not in part
    ] == []


def test_a_class_is_told_of_flames_peroxides_and_waste(
    stockroom: Stockroom, practice: Path
) -> None:
    said = stockroom("ready", "K17", store=practice).said
    assert "at the bench (cyclohexene, unstabilised): Makes peroxides." in said
    assert "(cyclohexene, unstabilised; hexane): Flammable: no flame in the room." in said
    assert "clearing away (bromine water): Oxidising and nitric waste" in said


def test_what_is_never_kept_goes_into_no_container_undestroyed(
    stockroom: Stockroom, practice: Path
) -> None:
    said = stockroom("ready", "K27", store=practice).said
    assert "can turn explosive on standing" in said
    assert "Collect silver residues after destroying" in said
    assert "Oxidising and nitric waste" not in said
    assert "clearing away (ammonia): Ammonia never with bleach" in said


def test_what_to_do_next_is_never_a_look_at_what_must_not_be_opened(
    stockroom: Stockroom, practice: Path
) -> None:
    # B29 is cyclohexene, past its safety date on 2 March: scenario section 5
    out = stockroom("past", "--on", "2027-03-10", store=practice).out
    assert "B29" in out
    *_, last = out.splitlines()
    assert last.endswith("stockroom look B35 --good")


def test_a_barred_acid_is_refused_with_its_reason(stockroom: Stockroom, practice: Path) -> None:
    # scenario T32
    out = stockroom("why", "K11", "--instead", "hydrochloric acid", store=practice).out
    assert "refused" in out
    assert "chlor" in out


def test_the_same_question_gets_the_same_answer(stockroom: Stockroom, practice: Path) -> None:
    assert stockroom("plan", store=practice).out == stockroom("plan", store=practice).out
