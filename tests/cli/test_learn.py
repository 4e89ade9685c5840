"""`learn` and `--cautious` as they are typed: what they print, refuse and change."""

from __future__ import annotations

import shlex
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.keeping.fits import fit_line, shelf_life

if TYPE_CHECKING:
    from conftest import Stockroom

# 100 vol peroxide opened on 29 September; 91 vol was found on 8 December, 70 days on
LATER = {"2026-12-16": 90.7, "2026-12-22": 90.6, "2026-12-31": 90.3, "2027-01-04": 90.1}
AGES, FOUND = (70, 78, 84, 93, 97), (91.0, *LATER.values())
PEROXIDE = "hydrogen peroxide 100 vol"


@pytest.fixture
def checked(own: Path, stockroom: Stockroom) -> Path:
    """The practice store with B01 found four times more."""
    for on, vol in LATER.items():
        done = stockroom("found", "B01", f"{vol} vol", "--on", on, "--by", "T1", store=own)
        assert done.code == 0, done.err
    return own


# -- learn ---------------------------------------------------------------------------


def test_the_rate_its_interval_and_the_keeping_time_come_first(
    checked: Path, stockroom: Stockroom
) -> None:
    lines = stockroom("learn", "B01", store=checked).out.splitlines()
    assert lines[0] == "PRACTICE"
    assert lines[1] == f"B01 {PEROXIDE}: 5 checks, Tue 2026-12-08 to Mon 2027-01-04"
    assert lines[2].startswith("It loses 1.1 % a month at 18 °C, 0.83 to 1.3 (95 %")
    assert lines[3].startswith("Keep it 9")


def test_the_life_as_data_is_that_of_the_fit(checked: Path, stockroom: Stockroom) -> None:
    told = stockroom("learn", "B01", "--order", "0", "--json", store=checked).json
    # vol is in a straight line with mol/dm³, so the days do not depend on which
    line = fit_line(AGES, FOUND)
    assert told["life_days"] == pytest.approx(shelf_life(line, lowest=90.0), abs=1e-6)
    assert told["counted_from"] == "opened"
    assert told["rate_per_day"]["low"] < told["rate_per_day"]["value"]


def test_a_line_is_learnt_from_by_its_name(checked: Path, stockroom: Stockroom) -> None:
    told = stockroom("learn", PEROXIDE, "--json", store=checked).json
    assert (told["about"], told["decides"], told["model"]) == (PEROXIDE, "B01", "one bottle")


def test_more_asked_for_is_kept_a_shorter_time(checked: Path, stockroom: Stockroom) -> None:
    lives = [
        stockroom("learn", "B01", "--to", to, "--json", store=checked).json["life_days"]
        for to in ("80", "85", "90 %")
    ]
    assert lives == sorted(lives, reverse=True)


def test_below_from_the_start_keeps_no_time(checked: Path, stockroom: Stockroom) -> None:
    told = stockroom("learn", "B01", "--to", "95", store=checked).out
    assert "It keeps no time at 95 %: the limit starts below 95 vol." in told
    assert f'"{PEROXIDE}" life' not in told


def test_the_commands_it_prints_can_be_typed(checked: Path, stockroom: Stockroom) -> None:
    for line in stockroom("learn", "B01", "--by", "T1", "--json", store=checked).json["commands"]:
        done = stockroom(*shlex.split(line)[1:], store=checked)
        assert done.code == 0, done.err
    rules = stockroom("rule", PEROXIDE, store=checked).out
    assert "fades: order 1, 0.000351 a day at 18 °C from opened" in rules
    assert "life: 9" in rules


def test_use_makes_it_the_houses_rule_with_who_and_why(checked: Path, stockroom: Stockroom) -> None:
    done = stockroom(
        "learn", "B01", "--use", "--why", "five titrations", "--by", "T1", store=checked
    )
    assert done.code == 0, done.err
    assert "T1: five titrations" in stockroom("rule", PEROXIDE, store=checked).out


def test_use_without_a_reason_changes_nothing(checked: Path, stockroom: Stockroom) -> None:
    before = stockroom("rule", PEROXIDE, store=checked).out
    assert stockroom("learn", "B01", "--use", "--by", "T1", store=checked).code == 2
    assert stockroom("rule", PEROXIDE, store=checked).out == before


def test_learning_alone_changes_no_rule(checked: Path, stockroom: Stockroom) -> None:
    before = stockroom("rule", PEROXIDE, store=checked).out
    stockroom("learn", PEROXIDE, store=checked)
    assert stockroom("rule", PEROXIDE, store=checked).out == before


def test_a_loss_that_may_be_none_is_offered_as_no_rule(checked: Path, stockroom: Stockroom) -> None:
    asked = ("learn", "B01", "--since", "2026-12-22")
    told = " ".join(stockroom(*asked, store=checked).out.split())
    assert "too early to tell it from no loss at all" in told
    assert "stockroom rule" not in told
    refused = stockroom(*asked, "--use", "--why", "x", "--by", "T1", store=checked)
    assert (refused.code, "takes in no loss" in refused.err) == (1, True)


def test_a_time_counted_from_a_day_given_is_offered_as_no_life(
    checked: Path, stockroom: Stockroom
) -> None:
    told = stockroom("learn", "B01", "--since", "2026-12-16", "--json", store=checked).json
    assert told["life_days"] > 1
    assert [shlex.split(words)[3] for words in told["commands"]] == ["fades"]


def test_checks_before_a_top_up_are_not_mixed_in(checked: Path, stockroom: Stockroom) -> None:
    counted = stockroom("count", "B01", "500 cm3", "--on", "2026-12-30", "--by", "T1",
                        store=checked)  # fmt: skip
    assert counted.code == 0, counted.err
    refused = stockroom("learn", "B01", store=checked)
    assert refused.code == 1
    assert "2 checks of B01 so far (2026-12-31 to 2027-01-04)" in refused.err


# -- what cannot be answered ------------------------------------------------------------


def test_one_check_is_too_few(own: Path, stockroom: Stockroom) -> None:
    refused = stockroom("learn", "S02", store=own)
    assert (refused.code, refused.out) == (1, "")
    assert refused.err.splitlines() == [
        "One check of S02 so far (2026-12-10); a rate with its limits wants 3 different days.",
        "Titrate S02 on 2 more days, the first after 2027-01-07.",
    ]


@pytest.mark.parametrize(
    ("words", "code", "said"),
    [
        (["B99"], 2, 'No bottle "B99"'),
        (["moonshine"], 2, 'No stock line "moonshine"'),
        (["starch, soluble"], 1, "no strength that can be found"),
        (["S01"], 1, "No strength of S01 has been found yet"),
        (["sodium thiosulfate 1.00 mol/dm3"], 1, "has been found yet"),
        (["S02", "--order", "3"], 2, "--order 3"),
        (["S02", "--order", "first"], 2, "'first'"),
        (["S02", "--to", "100"], 2, "--to 100"),
        (["S02", "--to", "most"], 2, "'most'"),
        (["S02", "--since", "soon"], 2, "soon"),
        (["S02", "--since", "2026-12-11"], 1, "found yet since 2026-12-11"),
        ([PEROXIDE, "--since", "2026-12-11"], 2, "2026-12-11"),
    ],
)
def test_what_cannot_be_learnt_says_why(
    words: list[str], code: int, said: str, own: Path, stockroom: Stockroom
) -> None:
    refused = stockroom("learn", *words, store=own)
    assert (refused.code, refused.out) == (code, "")
    assert said in refused.err


# -- cautious ------------------------------------------------------------------------------


@pytest.mark.parametrize("words", ["plan", "fresh", "past", "usage", "buying", "ready K01",
                                   "why B01"])  # fmt: skip
def test_every_reading_command_can_be_cautious(
    words: str, checked: Path, stockroom: Stockroom
) -> None:
    for cautious in (True, False):
        asked = [*words.split(), *(["--cautious"] * cautious)]
        assert stockroom(*asked, "--json", store=checked).json["cautious"] is cautious
        assert ("CAUTIOUS" in stockroom(*asked, store=checked).out) is cautious


def test_a_cautious_plan_says_what_it_had_nothing_for(checked: Path, stockroom: Stockroom) -> None:
    told = stockroom("plan", "--cautious", "--json", store=checked).json["lower_limits"]
    assert (told["own_checks"], told["line_checks"]) == (1, 1)
    assert told["nothing"] > 20


def test_a_cautious_dilution_takes_more_of_a_bottle_that_may_be_weaker(
    checked: Path, stockroom: Stockroom
) -> None:
    taken = []
    for words in (["plan"], ["plan", "--cautious"]):
        makes = stockroom(*words, "--json", store=checked).json["makes"]
        taken += [s["amount"] for m in makes for s in m["sources"] if s.get("bottle") == "B01"][:1]
    assert taken[0] < taken[1] < 1.02 * taken[0]


def test_why_tells_the_lower_limit_beside_the_others(checked: Path, stockroom: Stockroom) -> None:
    told = stockroom("why", "B01", "--cautious", store=checked).out
    assert "found 90.1 vol on 2027-01-04; expected 90.1 vol" in told
    assert "by its own checks" in told


@pytest.fixture
def starter(tmp_path: Path, stockroom: Stockroom) -> Path:
    """A starter house with a bottle of 100 vol at 18 °C, titrated four times."""
    store, by = tmp_path / "starter.sqlite", ("--by", "T1", *NOW)
    stockroom("new", "--starter", store=store)
    stockroom("add", "places", "place=O1", "temperature_c=18", *by, store=store)
    arrives = ("--printed", "none", "--place", "O1", "--opened", "2026-10-05")
    stockroom("arrive", PEROXIDE, "500 cm3", *arrives, "--on", "2026-10-05", *by, store=store)
    for on, vol in STARTED.items():
        done = stockroom("found", "B01", f"{vol} vol", "--on", on, *by, store=store)
        assert done.code == 0, done.err
    return store


NOW = ("--as-at", "2027-01-04")
STARTED = {"2026-11-09": 97.9, "2026-12-07": 97.4, "2026-12-14": 97.1, "2027-01-04": 96.1}


def test_what_is_offered_can_be_typed_on_a_starter_house(
    starter: Path, stockroom: Stockroom
) -> None:
    # its rule holds above 50 vol, 4.46149727… mol/dm³: a bound that no line prints in full
    fades, life = stockroom("learn", "B01", "--by", "T1", "--json", *NOW, store=starter).json[
        "commands"
    ]
    for words in (fades, life):
        done = stockroom(*shlex.split(words)[1:], *NOW, store=starter)
        assert done.code == 0, done.err
    kinds = [
        rule["rule"] for rule in stockroom("rule", "B01", "--json", store=starter).json["rules"]
    ]
    assert sorted(kinds) == ["fades", "life", "recheck"]


def test_a_life_learnt_at_a_temperature_says_which_and_how_warmth_shortens_it(
    starter: Path, stockroom: Stockroom
) -> None:
    told = stockroom("learn", "B01", *NOW, store=starter).said
    assert "% a month at 20 °C" in told
    assert "at 20 °C for 90 % of its label" in told
    life = stockroom("learn", "B01", "--json", *NOW, store=starter).json["commands"][1]
    assert "at_c=20 factor_per_10c=2.2" in life


def test_what_a_used_rate_rests_on_is_kept_with_the_reason(
    starter: Path, stockroom: Stockroom
) -> None:
    use = ("--use", "--why", "my titres", "--by", "T1", *NOW)
    assert stockroom("learn", "B01", *use, store=starter).code == 0
    (change,) = stockroom("rule", "B01", "--json", store=starter).json["changes"]
    assert change["why"].startswith("my titres (4 checks: 1")
    cited = stockroom("fades", "B01", *NOW, store=starter).said
    assert "figures house rule of 2027-01-04, T1: my titres (4 checks: 1" in cited


def test_a_rate_that_may_be_none_is_told_as_none_throughout(
    checked: Path, stockroom: Stockroom
) -> None:
    told = stockroom("learn", "B01", "--since", "2026-12-22", store=checked).said
    assert "at 18 °C, none to" in told
    assert ", -0.0" not in told


def test_no_name_is_neither_line_nor_bottle(practice: Path, stockroom: Stockroom) -> None:
    refused = stockroom("learn", "", store=practice)
    assert (refused.code, "names none" in refused.err) == (2, True)
