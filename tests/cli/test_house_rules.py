"""rule: how a line keeps, and the house's own word in the place of a starter value."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

THIO, STARCH = "sodium thiosulfate 0.100 mol/dm3", "starch 0.5 % w/v"


def test_a_line_shows_its_rules_and_whose_they_are(stockroom: Stockroom, practice: Path) -> None:
    said = stockroom("rule", THIO, store=practice).out
    assert "recheck: 28 days from made" in said
    assert "starter value; Bench experience" in said
    assert "common practice, no source" in said


def test_a_house_rule_replaces_the_starter_value(stockroom: Stockroom, own: Path) -> None:
    done = stockroom(
        "rule", STARCH, "life", "lasts=5 d", "--why", "warm room", "--by", "T1", store=own
    )
    assert done.code == 0
    assert "life: 3 days from made → life: 5 days from made" in done.out
    said = stockroom("rule", STARCH, "--json", store=own).json
    assert [(rule["text"], rule["whose"]) for rule in said["rules"]] == [
        ("life: 5 days from made", "house rule")
    ]


def test_who_when_why_and_the_old_value_are_kept(stockroom: Stockroom, own: Path) -> None:
    stockroom("rule", STARCH, "life", "lasts=5 d", "--why", "warm room", "--by", "T1", store=own)
    (change,) = stockroom("rule", STARCH, "--json", store=own).json["changes"]
    assert change == {
        "on": "2027-01-04",
        "by": "T1",
        "rule": "life",
        "before": "life: 3 days from made",
        "after": "life: 5 days from made",
        "why": "warm room",
    }


def test_a_house_rule_is_what_the_plan_goes_by(stockroom: Stockroom, own: Path) -> None:
    def made() -> int:
        makes = stockroom("plan", "--json", store=own).json["makes"]
        return sum(make["item"].startswith("starch") for make in makes)

    before = made()
    stockroom("rule", STARCH, "life", "lasts=1 d", "--why", "mould", "--by", "T1", store=own)
    assert made() > before


def test_what_a_new_rule_leaves_unsaid_stays(stockroom: Stockroom, own: Path) -> None:
    line = "hydrogen peroxide 100 vol"
    said = stockroom(
        "rule", line, "fades", "ea_kj_mol=60", "at_c=20", "--why", "x", "--by", "T1", store=own
    ).out
    assert "→ fades: order 1, 0.000329 a day at 20 °C, Ea 60 kJ/mol from opened" in said


def test_a_factor_takes_the_place_of_an_activation_energy(stockroom: Stockroom, own: Path) -> None:
    line, by = "hydrogen peroxide 100 vol", ("--why", "x", "--by", "T1")
    stockroom("rule", line, "fades", "ea_kj_mol=60", "at_c=20", *by, store=own)
    said = stockroom("rule", line, "fades", "factor_per_10c=2.2", *by, store=own).out
    assert said.splitlines()[-1].endswith("× 2.2 per 10 °C from opened.")


def test_a_rule_can_be_withdrawn(stockroom: Stockroom, own: Path) -> None:
    done = stockroom(
        "rule", STARCH, "life", "--withdraw", "--why", "looked at", "--by", "T1", store=own
    )
    assert "→ withdrawn" in done.out
    assert "no ageing rule" in stockroom("rule", STARCH, store=own).out


@pytest.mark.parametrize(
    ("words", "code", "told"),
    [
        (["life", "lasts=0 d", "--why", "x", "--by", "T1"], 2, "A life of 0 days means never keep"),
        (["life", "lasts=5 d", "--by", "T1"], 2, "Why is life of starch 0.5 % w/v changed?"),
        (["life", "lasts=5 d", "--why", "x"], 2, "initials"),
        (["life", "last=5 d", "--why", "x", "--by", "T1"], 2, '"last"'),
        (["live", "lasts=5 d", "--why", "x", "--by", "T1"], 2, '"live" is not known'),
        (["life", "lasts=3 d", "--why", "x", "--by", "T1"], 2, "keeps so already"),
        (["life", "--why", "x", "--by", "T1"], 2, "What does life of"),
        (["recheck", "--withdraw", "--why", "x", "--by", "T1"], 2, "no rule 'recheck'"),
        (["fades", "order=1", "rate=-1", "--why", "x", "--by", "T1"], 2, '"-1"'),
        (
            ["life", "lasts=5 d", "up_to_strength=0.4 g/dm3", "--why", "x", "--by", "T1"],
            2,
            "two rules for",
        ),
    ],
)
def test_what_says_no_rule_is_refused_and_nothing_saved(
    stockroom: Stockroom, own: Path, words: list[str], code: int, told: str
) -> None:
    result = stockroom("rule", STARCH, *words, store=own)
    assert (result.code, told in result.err) == (code, True), result.err
    said = stockroom("rule", STARCH, "--json", store=own).json
    assert [rule["text"] for rule in said["rules"]] == ["life: 3 days from made"]
    assert said["changes"] == []


def test_bands_that_leave_a_strength_out_are_refused(stockroom: Stockroom, own: Path) -> None:
    by = ("--why", "x", "--by", "T1")
    line = "hydrogen peroxide 100 vol"
    stockroom("rule", line, "life", "lasts=10 d", "stronger_than=0.5 M", *by, store=own)
    result = stockroom("rule", line, "life", "lasts=9 d", "up_to_strength=0.3 M", *by, store=own)
    assert result.code == 2
    assert "no life given between 0.3 and 0.5 mol/dm³. Nothing was saved." in result.err


def test_of_two_bands_the_one_that_is_named_is_replaced(stockroom: Stockroom, own: Path) -> None:
    by = ("--why", "x", "--by", "T1")
    line = "hydrogen peroxide 100 vol"
    stockroom("rule", line, "life", "lasts=10 d", "stronger_than=0.5 M", *by, store=own)
    stockroom("rule", line, "life", "lasts=9 d", "up_to_strength=0.5 M", *by, store=own)
    unsaid = stockroom("rule", line, "life", "lasts=8 d", *by, store=own)
    assert "has 2 life rules: which one?" in unsaid.err
    said = stockroom(
        "rule", line, "life", "lasts=8 d", "up_to_strength=0.500 mol/dm3", *by, store=own
    )
    assert "9 days from made, up to 0.5 mol/dm³ → life: 8 days" in said.out


def test_the_starter_and_a_folder_of_ones_own_exclude_each_other(
    stockroom: Stockroom, tmp_path: Path
) -> None:
    result = stockroom("new", "--starter", "--from", str(tmp_path), store=tmp_path / "s.sqlite")
    assert result.code == 2
    assert "not both" in result.err


def test_a_rule_typed_in_is_the_houses_own(stockroom: Stockroom, own: Path) -> None:
    stockroom("add", "keeping", f"line={STARCH}", "rule=look", "lasts=2 d", "--by", "T1", store=own)
    rules = stockroom("rule", STARCH, "--json", store=own).json["rules"]
    assert [rule["whose"] for rule in rules] == ["starter value", "house rule"]
