"""The writing commands, each on a copy of the practice college."""

from __future__ import annotations

import shlex
from typing import TYPE_CHECKING, Any

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

# every event command once, as its help shows it
EVENTS = [
    'arrive "lithium chloride" "100 g" --printed 2029-01 --place A2',
    'arrive "hydrogen peroxide 100 vol" "500 cm3" --printed none --place A3 --cap tight',
    "open B02",
    'make "sodium thiosulfate 0.200 mol/dm3" 400cm3 --from S01 --place D1',
    "draw S05 200cm3",
    'draw S05 "200 cm3" --on 2026-12-18',
    "draw S13 10cm3 --for K16",
    'found S02 "0.0987 mol/dm3"',
    'look S03 --good --note "starch blank clear"',
    "look S12 --bad",
    'tested B29 --passed --note "strip"',
    "move S01 F1",
    'count B06 "640 g"',
    "lost S21",
    "turned-up B28 --place A2",
    'spoil S05 --why "yellow tinge"',
    'spill B18 "2 g"',
    'lend B32 "10 g" --to "the physics store"',
    'discard S14 --how "iron waste bottle" --why past',
    "book R04 --on 2027-01-21 --at 09:15 --groups 12 --dept CH",
    "shift K06 --groups 13",
    "cancel K06",
]


@pytest.mark.parametrize("line", EVENTS)
def test_every_event_says_what_was_done_and_that_it_is_practice(
    stockroom: Stockroom, own: Path, line: str
) -> None:
    result = stockroom(*shlex.split(line), "--by", "T1", store=own)
    assert result.code == 0, result
    first, second, *_ = result.out.splitlines()
    assert first == "PRACTICE"
    assert second.strip()


@pytest.mark.parametrize("line", EVENTS)
def test_every_event_answers_a_program_too(stockroom: Stockroom, own: Path, line: str) -> None:
    data = stockroom(*shlex.split(line), "--by", "T1", "--json", store=own).json
    assert {"text", "bottle", "entry", "practice"} <= set(data)
    assert data["practice"] is True


def test_a_wrong_neighbour_and_a_tight_cap_are_told_and_nothing_is_refused(
    stockroom: Stockroom, own: Path
) -> None:
    line = 'arrive "sodium hypochlorite 12 % w/v" 500cm3 --printed none --place A1 --cap tight'
    result = stockroom(*shlex.split(line), "--by", "T1", store=own)
    assert result.code == 0
    assert "B46: stands beside B13, B14, B15 in A1, kept for acid: bleach beside" in result.said
    assert "B46: tight cap on a solution that gives off gas" in result.said


def test_a_count_that_is_less_offers_two_ways_and_takes_neither(
    stockroom: Stockroom, own: Path
) -> None:
    result = stockroom("count", "S17", "460cm3", "--by", "T1", store=own)
    assert '×1.043 by now: stockroom found S17 "0.1043 mol/dm³"' in result.said
    assert "Or drawn, not written down? Then its strength is as it was" in result.said
    assert "found" not in stockroom("diary", "S17", store=own).out


def past(stockroom: Stockroom, own: Path, bottle: str, **words: str) -> dict[str, Any] | None:
    rows = stockroom("past", "--json", store=own, **words).json["past"]
    return next((row for row in rows if row["bottle"] == bottle), None)


def test_a_good_look_takes_the_bottle_off_the_past_list(stockroom: Stockroom, own: Path) -> None:
    # scenario section 7, 01-11
    assert past(stockroom, own, "S03")
    stockroom("look", "S03", "--good", "--by", "T1", store=own)
    assert past(stockroom, own, "S03") is None


def test_a_spoiled_bottle_is_set_aside(stockroom: Stockroom, own: Path) -> None:
    stockroom("spoil", "S05", "--why", "yellow tinge", "--by", "T2", store=own)
    row = past(stockroom, own, "S05")
    assert row is not None
    assert row["condition"] == "set aside"


def test_more_groups_need_more(stockroom: Stockroom, own: Path) -> None:
    # scenario section 7, 01-18: 11 groups to 13, 1 936 cm³ to 2 288
    stockroom("shift", "K06", "--groups", "13", "--by", "T1", store=own)
    needs = stockroom("plan", "--json", store=own).json["needs"]
    assert [each["amount"] for each in needs if each["ref"] == "K06.1"] == [2288]


def test_an_entry_put_right_changes_nothing_in_the_end(stockroom: Stockroom, own: Path) -> None:
    before = stockroom("why", "S05", store=own).out
    drawn = stockroom("draw", "S05", "50cm3", "--by", "T1", "--json", store=own).json
    assert stockroom("why", "S05", store=own).out != before
    words = ("put-right", str(drawn["entry"]), "--why", "meant S04", "--by", "T1")
    assert stockroom(*words, store=own).code == 0
    assert stockroom("why", "S05", store=own).out == before


def test_initials_may_come_from_the_environment(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.setenv("STOCKROOM_BY", "T2")
    assert stockroom("lost", "S21", store=own).code == 0


def test_a_note_that_looks_like_an_option_is_kept_as_a_note(
    stockroom: Stockroom, own: Path
) -> None:
    result = stockroom("look", "S03", "--good", "--note", "--json", "--by", "T1", store=own)
    assert result.out.startswith("PRACTICE\n")


def test_a_finished_step_suggests_the_next_on_standard_error(
    stockroom: Stockroom, own: Path
) -> None:
    result = stockroom("lost", "S21", "--by", "T1", store=own)
    assert result.err.startswith("next: stockroom ")
    assert "next:" not in result.out


def test_several_alike_get_separate_numbers(stockroom: Stockroom, own: Path) -> None:
    words = shlex.split(EVENTS[0])
    result = stockroom(*words, "--count", "2", "--by", "T1", store=own)
    assert "B46" in result.out or "B47" in result.out
    assert result.code == 0
