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


BY = ("--why", "x", "--by", "T1")


def test_a_word_that_fits_several_rules_is_asked_about(stockroom: Stockroom, own: Path) -> None:
    for band in ("colder_than_c=10", "warmer_than_c=10"):
        stockroom("rule", STARCH, "life", "lasts=2 d", band, *BY, store=own)
    refused = stockroom("rule", STARCH, "life", "lasts=9 d", "purpose=any", *BY, store=own)
    assert (refused.code, "has 3 life rules: which one?" in refused.err) == (2, True)


def test_a_bound_with_fewer_figures_is_the_one_that_is_there(
    stockroom: Stockroom, own: Path
) -> None:
    line = "hydrogen peroxide 100 vol"
    for bound in ("stronger_than=50 vol", "up_to_strength=50 vol"):
        stockroom("rule", line, "life", "lasts=10 d", bound, *BY, store=own)
    # 50 vol is 4.46149727… mol/dm³
    said = stockroom(
        "rule", line, "life", "lasts=8 d", "stronger_than=4.461497 mol/dm3", *BY, store=own
    )
    assert said.code == 0, said.err
    assert "life: 10 days from made, above 4.461 mol/dm³ → life: 8 days" in said.said


@pytest.mark.parametrize(
    ("cells", "told"),
    [
        (("colder_than_c=10", "warmer_than_c=20"), "warmer_than_c 20 and colder_than_c 10 leave"),
        (("stronger_than=4 g/dm3", "up_to_strength=3 g/dm3"), "leave nothing between"),
        (("at_c=20", "factor_per_10c=0.5"), "factor_per_10c 0.5 is not between 1 and 20"),
        (("at_c=20", "factor_per_10c=35"), "factor_per_10c 35 is not between 1 and 20"),
    ],
)
def test_a_rule_that_holds_nowhere_or_runs_backwards_is_refused(
    stockroom: Stockroom, own: Path, cells: tuple[str, ...], told: str
) -> None:
    refused = stockroom("rule", STARCH, "life", "lasts=2 d", *cells, *BY, store=own)
    assert (refused.code, told in refused.err) == (2, True), refused.err


def test_a_longer_life_beside_a_shorter_one_is_told_not_to_count(
    stockroom: Stockroom, own: Path
) -> None:
    said = stockroom("rule", STARCH, "life", "lasts=9 d", "colder_than_c=8", *BY, store=own).said
    assert "life: 3 days from made: holds there too, and the earlier day counts." in said


@pytest.mark.parametrize("kind", ["same day", "never kept"])
def test_what_its_name_says_wants_no_cells(stockroom: Stockroom, own: Path, kind: str) -> None:
    said = stockroom("rule", STARCH, kind, *BY, store=own)
    assert (said.code, f"no such rule → {kind}." in said.said) == (0, True), said.err


@pytest.mark.parametrize("how", [("--withdraw",), ("safety=no",)])
def test_what_is_never_kept_stays_so(stockroom: Stockroom, own: Path, how: tuple[str, ...]) -> None:
    refused = stockroom("rule", "ammoniacal silver", "never kept", *how, *BY, store=own)
    assert (refused.code, "There is no test that extends it" in refused.err) == (1, True)


@pytest.mark.parametrize(
    ("cells", "warned"), [("lasts=12 months", True), ("safety=no", True), ("lasts=3 months", False)]
)
def test_a_looser_safety_date_is_allowed_with_a_word_of_caution(
    stockroom: Stockroom, own: Path, cells: str, warned: bool
) -> None:
    said = stockroom("rule", "cyclohexene", "test or discard", cells, *BY, store=own)
    assert (said.code, "It was a safety date" in said.said) == (0, warned), said.err


def test_a_bottles_number_stands_for_its_line(stockroom: Stockroom, practice: Path) -> None:
    lines = stockroom("rule", "b01", store=practice).out.splitlines()
    assert lines[1] == "hydrogen peroxide 100 vol"


def test_no_name_is_no_line(stockroom: Stockroom, practice: Path) -> None:
    refused = stockroom("rule", " ", store=practice)
    assert (refused.code, "names none" in refused.err) == (2, True)
