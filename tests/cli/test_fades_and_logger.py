"""The two commands of fading and warmth, as typed: what they print, and what they refuse."""

from __future__ import annotations

from datetime import datetime, timedelta
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

BLEACH = ("fades", "12.5 % w/v", "--order", "2", "--rate", "0.0090", "--per", "month")


@pytest.fixture(autouse=True)
def initials(monkeypatch: pytest.MonkeyPatch) -> None:
    """Whose hand brings a record in, where a test does not say."""
    monkeypatch.setenv("STOCKROOM_BY", "T1")


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
        (("fades", "B01", "--at", "20"), "--at wants a law"),
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


BY = ("--by", "T1")


def test_nothing_is_expected_stronger_than_it_was_found(stockroom: Stockroom, own: Path) -> None:
    # to two figures 0.0985 would read 0.099
    stockroom("found", "S02", "0.0985 mol/dm3", "--on", "2027-01-04", *BY, store=own)
    assert "expected 0.0985 mol/dm³" in stockroom("fades", "S02", store=own).said


def test_a_label_is_told_as_it_stands(stockroom: Stockroom, practice: Path) -> None:
    told = stockroom("fades", "B14", store=practice).said
    assert "label 36 % w/w (11.65 mol/dm³)" in told
    # to two figures it would be 12, and stronger than its label
    assert "expected 11.65 mol/dm³" in told


def test_a_law_without_a_factor_says_so(stockroom: Stockroom, practice: Path) -> None:
    told = stockroom("fades", "B01", store=practice).said
    assert "half in 2 100 days warmth is left out of account" in told
    assert "left out of account" not in stockroom("fades", "B05a", store=practice).said


def test_a_place_without_temperature_says_what_it_counts_as(
    stockroom: Stockroom, own: Path
) -> None:
    stockroom("add", "places", "place=N1", *BY, store=own)
    stockroom("move", "B05a", "N1", "--on", "2027-01-02", *BY, store=own)
    told = stockroom("fades", "B05a", store=own).said
    assert "N1 2027-01-02 to 2027-01-04 with its own °C not known, counted at 20 °C" in told


def test_a_line_in_the_place_of_a_bottle_names_its_bottles(
    stockroom: Stockroom, practice: Path
) -> None:
    refused = stockroom("fades", "hydrogen peroxide 100 vol", store=practice)
    assert (refused.code, "Bottles of it: B01, B02." in refused.err) == (2, True), refused.err


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (("--factor", "0.5"), "A factor of 0.5 per 10 °C is not between 1 and 20"),
        (("--ea", "80", "--to", "500"), "--to 500 °C is not between -90 and 120"),
        (("--rate", "1e-300"), "A rate of 1e-300 is no figure of a law"),
        (("--law", "bleach"), 'No law is called "bleach"'),
    ],
)
def test_a_slip_in_a_typed_law_is_asked_about(
    stockroom: Stockroom, words: tuple[str, ...], told: str
) -> None:
    law = () if "--law" in words else ("--order", "1", "--at", "20")
    rate = () if {"--law", "--rate"} & set(words) else ("--rate", "0.1")
    refused = stockroom("fades", "1 M", *law, *rate, *words)
    assert (refused.code, told in refused.err) == (2, True), refused.err


@pytest.mark.parametrize(("rate", "told"), [("1e-9", "more than a hundred"), ("1e9", "less than")])
def test_times_beyond_any_use_are_not_spelt_out(stockroom: Stockroom, rate: str, told: str) -> None:
    assert f"gone in {told}" in stockroom("fades", "1 M", "--order", "1", "--rate", rate).out


# -- a record brought into the wrong place ------------------------------------------------


def test_a_record_of_another_place_is_noticed(stockroom: Stockroom, own: Path, week: str) -> None:
    told = stockroom("logger", "H1", week, *BY, store=own).said
    assert "its mean is 22 °C below that: of another place?" in told


def test_readings_are_taken_back_and_the_right_ones_come_in(
    stockroom: Stockroom, own: Path, week: str
) -> None:
    stockroom("logger", "H1", week, *BY, store=own)
    span = ("--from", "2026-12-21", "--to", "2026-12-27")
    done = stockroom("logger", "H1", "--take-back", *span, "--why", "of F1", *BY, store=own)
    assert done.code == 0, done.err
    assert "taken back 168 readings, 2026-12-21 00:00 to 2026-12-27 23:00" in done.said
    assert "added 168; 0 were held already" in stockroom("logger", "H1", week, store=own).out


def test_what_was_done_to_a_places_record_is_told(
    stockroom: Stockroom, own: Path, week: str
) -> None:
    stockroom("logger", "H1", week, *BY, store=own)
    span = ("--from", "2026-12-22", "--to", "2026-12-22")
    stockroom("logger", "H1", "--take-back", *span, "--why", "of F1", *BY, store=own)
    record = stockroom("logger", "H1", "--json", store=own).json["record"]
    whole = "168 readings, 2026-12-21 00:00 to 2026-12-27 23:00"
    assert record == [
        f"brought in 2027-01-04 by T1: week.csv: {whole}",
        "taken back 2027-01-04 by T1: 24 readings, 2026-12-22 00:00 to 2026-12-22 23:00: of F1",
    ]


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (("--why", "x", *BY), "From which day to which"),
        (("--from", "2026-12-21", "--to", "2026-12-27", *BY), "Why are the readings"),
        (("--from", "2026-12-21", "--to", "2026-12-27", "--why", "x", "--by", " "), "initials"),
        (("--from", "2026-12-27", "--to", "2026-12-21", "--why", "x", *BY), "runs backwards"),
        (("--from", "2025-12-21", "--to", "2025-12-27", "--why", "x", *BY), "holds no readings"),
        (("week.csv",), "goes by days"),
    ],
)
def test_a_taking_back_that_says_too_little_is_refused(
    stockroom: Stockroom, own: Path, week: str, words: tuple[str, ...], told: str
) -> None:
    stockroom("logger", "F1", week, *BY, store=own)
    refused = stockroom("logger", "F1", "--take-back", *words, store=own)
    assert (refused.code, told in refused.err) == (2, True), refused.err
    assert stockroom("logger", "F1", "--json", store=own).json["count"] == 168


def test_a_record_nobody_signs_is_refused(
    stockroom: Stockroom, own: Path, tmp_path: Path, monkeypatch: pytest.MonkeyPatch
) -> None:
    monkeypatch.delenv("STOCKROOM_BY")
    (tmp_path / "week.csv").write_text("time,°C\n2027-01-01 00:00,5\n2027-01-01 01:00,5\n", "utf-8")
    result = stockroom("logger", "F1", "week.csv", store=own)
    assert (result.code, "Whose initials?" in result.err) == (2, True)
