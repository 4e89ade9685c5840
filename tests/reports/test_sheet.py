from __future__ import annotations

from dataclasses import replace

import pytest
from hypothesis import given
from hypothesis import strategies as st
from sample_plan import PLAN

from stockroom.findings import Finding
from stockroom.reports import sheet


@given(st.lists(st.text("abc³", min_size=1, max_size=12)), st.integers(40, 120))
def test_wrapping_keeps_every_word_and_the_width(words: list[str], width: int) -> None:
    lines = sheet.wrap(" ".join(words), width, indent=2).splitlines()
    assert [word for line in lines for word in line.split()] == words
    assert all(len(line) <= width for line in lines)


def test_an_amount_is_not_parted_from_its_unit() -> None:
    lines = sheet.wrap("x" * 36 + " 27.5\u00a0cm³", 42).splitlines()
    assert lines[1].strip() == "27.5 cm³"


def test_the_last_column_wraps_under_itself() -> None:
    (row,) = sheet.columns([("K01", "word " * 20)], 60)
    first, second, *_ = row.splitlines()
    assert first.index("word") == second.index("word")


def test_a_wide_front_sends_the_last_column_below() -> None:
    (row,) = sheet.columns([("x" * 50, "why")], 60)
    assert [line.strip() for line in row.splitlines()] == ["x" * 50, "why"]


def test_no_rows_are_no_lines() -> None:
    assert sheet.columns([], 80) == []


def test_a_section_without_lines_is_left_off() -> None:
    assert sheet.page([sheet.section("MAKE", []), "kept"]) == "kept"


def test_practice_is_the_first_line_only_of_a_practice_house() -> None:
    own = replace(PLAN, house=replace(PLAN.house, practice=False))
    assert sheet.head(PLAN, 80).splitlines()[0] == "PRACTICE"
    assert "PRACTICE" not in sheet.head(own, 80)


def test_guesses_are_counted_first() -> None:
    assert sheet.guesses(PLAN, 80).splitlines()[0] == "GUESSES: 2 guesses"


def test_no_guesses_are_said_to_be_none() -> None:
    assert "nothing guessed" in sheet.guesses(replace(PLAN, guesses=()), 80)


def test_one_guess_is_not_plural() -> None:
    assert "1 guess\n" in sheet.guesses(replace(PLAN, guesses=(Finding("B01", "old"),)), 80)


def test_the_foot_says_that_local_rules_come_first() -> None:
    words = sheet.foot(200, "stockroom why K15")
    assert "Local rules" in words
    assert words.endswith("Next: stockroom why K15")


@pytest.mark.parametrize(
    ("subject", "is_one"),
    [("B01", True), ("S24f", True), ("K01", False), ("Benedict's reagent", False), ("S", False)],
)
def test_bottle_numbers_are_told_from_other_subjects(subject: str, is_one: bool) -> None:
    assert sheet.is_bottle(subject) is is_one
