"""The two commands of fading and warmth, as typed: what they print, and what they refuse."""

from __future__ import annotations

from datetime import datetime, timedelta
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

BLEACH = ("fades", "12.5 % w/v", "--order", "2", "--rate", "0.0090", "--per", "month")


@pytest.fixture
def week(tmp_path: Path) -> str:
    """A week of hourly readings of the refrigerator, before the practice day."""
    first = datetime(2026, 12, 21)
    rows = [
        f"{(first + timedelta(hours=at)).isoformat(' ', 'minutes')};{5 + at % 3},0"
        for at in range(24 * 7)
    ]
    (tmp_path / "week.csv").write_text("\n".join(["time;°C", *rows]), encoding="utf-8")
    return "week.csv"


def test_a_bottle_tells_its_course(stockroom: Stockroom, practice: Path) -> None:
    lines = stockroom("fades", "B01", "--below", "80 vol", store=practice).out.splitlines()
    assert lines[0] == "PRACTICE"
    assert lines[1] == "B01 hydrogen peroxide 100 vol, as at Mon 2027-01-04"
    told = "\n".join(lines)
    assert "found     91 vol on Tue 2026-12-08" in told
    assert "expected  90 vol" in told
    assert "below 80 vol on Wed 2028-01-05" in told


def test_what_was_not_found_has_two_figures(stockroom: Stockroom, practice: Path) -> None:
    out = stockroom("fades", "B05a", store=practice).out
    assert "expected  4.2 % w/v" in out
    assert "a tenth is gone in 61 days at 28 °C, half in 550 days" in out


def test_a_bottles_course_as_data(stockroom: Stockroom, practice: Path) -> None:
    data = stockroom("fades", "B05a", "--json", store=practice).json
    assert data["basis"] == "nominal"
    assert data["mkt"] == pytest.approx(28.0)
    assert [mark["on"] for mark in data["falls_below"]] == ["2027-01-31", "2027-04-17"]
    assert data["practice"] is True


def test_a_typed_law_wants_no_store(stockroom: Stockroom) -> None:
    words = ("--at", "20", "--factor", "3.5", "--to", "30", "--after", "3 months")
    out = stockroom(*BLEACH, *words).out
    assert out.splitlines()[0].startswith("12.5 % w/v: a tenth is gone in 8.6 days")
    assert "3.5 times as fast as at 20 °C" in out


def test_a_typed_law_as_data(stockroom: Stockroom) -> None:
    # t90 of second order, 1/(9 k C₀), worked out
    data = stockroom(*BLEACH, "--json").json
    assert data["t90_days"] == pytest.approx(30.4375 / (9 * 0.0090 * 12.5), rel=1e-5)
    assert data["falls_below"] is None


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (("--rate", "0"), "1 M: it never fades"),
        (("--rate", "0", "--below", "0.5 M"), "below 0.5 M never"),
        (("--rate", "0.1", "--below", "2 M"), "below 2 M already"),
        (("--rate", "0.1", "--below", "0.5 M", "--as-at", "2027-01-04"), "Mon 2027-01-11"),
        (("--rate", "0.1", "--per", "s", "--below", "0.5 M"), "below 0.5 M after 6.9 seconds"),
    ],
)
def test_times_are_told_as_they_are(
    stockroom: Stockroom, words: tuple[str, ...], told: str
) -> None:
    assert told in stockroom("fades", "1 M", "--order", "1", *words).out


def test_second_order_leaves_the_published_strength(stockroom: Stockroom) -> None:
    # Source: OpenStax Chemistry 2e (CC BY), example 12.8, from memory (c): 0.179 mol/dm³
    words = ("--order", "2", "--rate", "5.76e-2", "--per", "min", "--after", "10 min")
    data = stockroom("fades", "0.200 M", *words, "--json").json
    assert data["after"]["strength"] == pytest.approx(0.179, abs=5e-4)


def test_the_published_law_by_name(stockroom: Stockroom) -> None:
    # Adam and Gordon 1999: 15 % trade halves in 124 d at 25 °C, worked out
    words = ("fades", "15 % w/v available chlorine", "--law", "hypochlorite", "--at", "25")
    assert stockroom(*words, "--json").json["half_life_days"] == pytest.approx(124, rel=0.01)
    assert "Adam and Gordon 1999" in stockroom(*words).out


def test_a_law_outside_its_range_is_marked_a_guess(stockroom: Stockroom) -> None:
    out = stockroom("fades", "0.05 M", "--law", "hypochlorite", "--at", "-5").out
    assert "! at -5 °C it is a guess: the law was fitted to 15 to 55 °C" in out


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (("fades", "B01", "--at", "20"), "--at want a law"),
        (("fades", "12 % w/v", "--order", "1.5", "--rate", "1"), "'1.5' is not a whole number"),
        (("fades", "12 % w/v", "--order", "1", "--rate", "fast"), "'fast' is not a number"),
        (("fades", "12 % w/v", "--order", "1", "--rate", "-1"), "would gain strength"),
        (("fades", "12 %", "--order", "1", "--rate", "1"), "Which"),
        ((*BLEACH, "--below", "9 % w/v", "--below", "8 % w/v"), "one sum dates one"),
    ],
)
def test_a_law_that_cannot_be_read_is_refused(
    stockroom: Stockroom, practice: Path, words: tuple[str, ...], told: str
) -> None:
    result = stockroom(*words, store=practice)
    assert result.code == 2
    assert told in result.err


def test_a_logger_comes_in_and_is_looked_at(stockroom: Stockroom, own: Path, week: str) -> None:
    came = stockroom("logger", "F1", week, "--by", "T1", store=own)
    assert came.code == 0
    assert "F1 refrigerator: 168 readings, 2026-12-21 00:00 to 2026-12-27 23:00" in came.out
    assert "added 168; 0 were held already" in came.out
    assert "lowest 5 °C, highest 7 °C, mean 6.00 °C" in came.out
    assert "refrigerator, 2 to 8 °C: inside all the time" in came.out
    looked = stockroom("logger", "F1", "--from", "2026-12-22", "--to", "2026-12-22", store=own)
    assert "24 readings" in looked.out


def test_a_logger_as_data(stockroom: Stockroom, own: Path, week: str) -> None:
    data = stockroom("logger", "F1", week, "--json", store=own).json
    assert (data["count"], data["added"], data["held_already"]) == (168, 168, 0)
    assert (data["min"], data["max"]) == (5, 7)
    assert data["mean"] <= data["mkt"] <= data["max"]
    assert data["limits"]["hours_above"] == 0


def test_a_place_without_a_record_says_so(stockroom: Stockroom, practice: Path) -> None:
    out = stockroom("logger", "F1", store=practice).out
    assert "no logged temperatures; its own 5 °C counts" in out
    assert stockroom("logger", "F1", "--json", store=practice).json["count"] == 0


@pytest.mark.parametrize(
    ("words", "code", "told"),
    [
        (("F9", "week.csv"), 2, 'No place "F9"'),
        (("F1", "none.csv"), 2, "There is no file none.csv"),
        (("F1", "week.csv", "--from", "2026-12-22"), 2, "is brought in whole"),
        (("F1", "week.csv", "--fahrenheit", "--celsius"), 2, "a file is in one unit"),
        (("F1", "week.csv", "--fahrenheit"), 1, "the file says °C"),
        (("F1", "week.csv", "--ea", "83144"), 2, "83144 kJ/mol is not between"),
        (("F1", "week.csv", "--as-at", "2026-12-24"), 2, "still to come"),
    ],
)
def test_a_logger_that_cannot_come_in_is_refused(
    stockroom: Stockroom, own: Path, week: str, words: tuple[str, ...], code: int, told: str
) -> None:
    result = stockroom("logger", *words, store=own)
    assert result.code == code, (result.out, result.err)
    assert told in result.err


def test_the_verdict_says_that_it_goes_by_the_record(
    stockroom: Stockroom, own: Path, tmp_path: Path
) -> None:
    # B05a stands at H1: three months at 45 °C make it weak
    first = datetime(2026, 11, 30)
    rows = [
        f"{(first + timedelta(hours=at)).isoformat(' ', 'minutes')},45" for at in range(24 * 34)
    ]
    (tmp_path / "hot.csv").write_text("\n".join(["time,°C", *rows]), encoding="utf-8")
    assert stockroom("logger", "H1", "hot.csv", store=own).code == 0
    out = stockroom("past", store=own).out
    assert "temperatures as logged to 2027-01-02" in " ".join(out.split())
