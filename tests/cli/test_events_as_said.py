"""Events as a person says them: short, by eye, by weight; initials asked once at a terminal."""

from __future__ import annotations

import shlex
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

from stockroom.cli import shared

if TYPE_CHECKING:
    from conftest import Result, Stockroom

THIO = "sodium thiosulfate pentahydrate"


def enter(stockroom: Stockroom, own: Path, line: str) -> Result:
    return stockroom(*shlex.split(line), "--by", "T1", "--as-at", "2027-01-11", store=own)


@pytest.mark.parametrize(
    ("line", "said"),
    [
        (f'arrive "{THIO}" --printed none', "As last time: A2, 1 000 g."),
        (f'arrive "{THIO}" --printed none --lot 2231 --assay "99.5 %"', "lot 2231, at A2"),
        ('draw S05 "about a third left"', "Drew about 933 cm³ from S05"),
        ('draw S05 "about 100 cm3"', "about 2 500 cm³ left"),
        ('draw B06 --gross "772 g" --tare "172 g"', "Drew 40 g from B06"),
        ('draw B13 "18.4 g"', "18.4 g is 10 cm³ at 1.84 g/cm³"),
        ('unknown "grey lumps" --place X1 --size "50 g"', "B46: unknown, grey lumps"),
        ('unknown B36 --is "sodium chloride" --evidence "label found"', "B36 is sodium chloride"),
        ('cancel K06 --why "trip"', "Dropped K06"),
    ],
)
def test_what_is_said_is_entered(stockroom: Stockroom, own: Path, line: str, said: str) -> None:
    result = enter(stockroom, own, line)
    assert result.code == 0, result
    assert said in result.said


@pytest.mark.parametrize(
    ("line", "said"),
    [
        ("draw S05", "S05: how much was drawn?"),
        ('draw S05 100cm3 --gross "5 g"', "100cm3 drawn, and 5 g gross"),
        ('draw B06 --tare "172 g"', "B06: how much was drawn?"),
        ('draw B06 5g --tare "172 g"', "a tare of 172 g, and no gross"),
        ('draw S05 "4/3 left"', "4/3 left"),
        (f'arrive "{THIO}" --printed none --assay 101', "101"),
        (f'arrive "{THIO}"', '"none printed" must be chosen'),
        ('lend B32 "1 g" --back --to BI', "B32: lent, or back?"),
        ('lend B32 "1 g" --from BI', "B32: lent, or back?"),
        ('unknown "grey lumps" --size "50 g"', "grey lumps: where does it stand?"),
        ('unknown "grey lumps" --place X1', "grey lumps: about how much"),
        ('unknown B36 --evidence "x"', "B36: evidence of what?"),
        ('unknown B36 --is "sodium chloride" --place X1', "B36: named, or logged?"),
        ('unknown B36 --is "sodium chloride"', "By what evidence is B36"),
    ],
)
def test_what_is_left_out_is_asked_for(
    stockroom: Stockroom, own: Path, line: str, said: str
) -> None:
    result = enter(stockroom, own, line)
    assert result.code == 2, result
    assert said in result.err


def test_a_loan_comes_back(stockroom: Stockroom, own: Path) -> None:
    enter(stockroom, own, 'lend B32 "10 g" --to "the physics store"')
    assert "LENT, AND NOT COME BACK" in enter(stockroom, own, "usage").out
    result = enter(stockroom, own, 'lend B32 "10 g" --back --from "the physics store"')
    assert "Back from the physics store: 10 g" in result.said
    assert "LENT, AND NOT COME BACK" not in enter(stockroom, own, "usage").out


def test_a_dropped_booking_comes_back(stockroom: Stockroom, own: Path) -> None:
    before = enter(stockroom, own, "plan").out
    enter(stockroom, own, "cancel K06 --why trip")
    assert enter(stockroom, own, 'cancel K06 --undo --why "no trip"').code == 0
    assert enter(stockroom, own, "plan").out == before


def test_about_is_said_where_what_is_left_is_shown(stockroom: Stockroom, own: Path) -> None:
    enter(stockroom, own, 'draw S05 "a third left"')
    assert "about 1 667 cm³ left" in enter(stockroom, own, "why S05").said
    assert "about" in enter(stockroom, own, "diary S05").out
    enter(stockroom, own, "count S05 1600cm3")
    assert "about" not in enter(stockroom, own, "why S05").said


# -- initials ---------------------------------------------------------------------------


def test_initials_are_asked_once_at_a_terminal(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.delenv("STOCKROOM_BY", raising=False)
    monkeypatch.setattr(shared, "at_a_terminal", lambda: True)
    result = stockroom("lost", "S21", store=own, typed="T2\n")
    assert result.code == 0
    assert result.err.count("Whose initials?") == 1
    assert "Whose initials" not in result.out
    assert "T2" in stockroom("diary", "S21", store=own).out


def test_no_answer_at_a_terminal_is_refused_as_ever(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.delenv("STOCKROOM_BY", raising=False)
    monkeypatch.setattr(shared, "at_a_terminal", lambda: True)
    result = stockroom("lost", "S21", store=own, typed="\n")
    assert result.code == 2
    assert "--by T1" in result.err


def test_a_script_is_never_kept_waiting(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.delenv("STOCKROOM_BY", raising=False)
    result = stockroom("lost", "S21", store=own, typed="T2\n")
    assert result.code == 2
    assert "Whose initials?" in result.err


def test_initials_are_asked_once_however_often_they_are_wanted(
    monkeypatch: pytest.MonkeyPatch,
) -> None:
    import io
    import sys

    monkeypatch.delenv("STOCKROOM_BY", raising=False)
    monkeypatch.setattr(shared, "at_a_terminal", lambda: True)
    monkeypatch.setattr(sys, "stdin", io.StringIO("T1\nT2\n"))
    asked = shared.Shared()
    assert (asked.initials, asked.initials) == ("T1", "T1")


def test_reading_never_asks_who_reads(
    stockroom: Stockroom, own: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.delenv("STOCKROOM_BY", raising=False)
    monkeypatch.setattr(shared, "at_a_terminal", lambda: True)
    for line in ("why S05", "diary S05", "learn S02", "usage"):
        assert "Whose" not in stockroom(*shlex.split(line), store=own).err, line
