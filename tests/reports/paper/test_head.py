"""The top and foot of a sheet, and the laws of what changed since the copy before."""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from hypothesis import given, settings
from hypothesis import strategies as st

from stockroom.reports.paper.head import (
    MOST_CHANGES,
    Head,
    Since,
    change_words,
    copy_line,
    foot_lines,
    head_for,
    head_lines,
    mark,
    since,
)

TODAY = date(2027, 2, 1)
KEYS = st.one_of(
    st.sampled_from(["M01", "K05", "B06", ""]),
    st.dates(date(2027, 1, 20), date(2027, 2, 10)).map(date.isoformat),
    st.dates(date(2027, 1, 20), date(2027, 2, 10)).map(lambda on: f"{on} K05"),
)
LINES = st.dictionaries(KEYS, st.sampled_from(["one thing", "another", "a third"]), max_size=7)
BOTH = settings(max_examples=60)


def over(key: str) -> bool:
    return key[:4] == "2027" and key[:10] < TODAY.isoformat()


@BOTH
@given(LINES)
def test_the_same_lines_are_no_change(lines: dict[str, str]) -> None:
    assert since("0001", lines, dict(lines), TODAY) == Since("0001")


@BOTH
@given(LINES, LINES)
def test_only_what_stands_on_the_sheet_now_is_marked(
    before: dict[str, str], now: dict[str, str]
) -> None:
    told = since("0001", before, now, TODAY)
    expected = {key for key in now if before.get(key) != now[key] and not over(key)}
    assert set(told.marked) == expected
    assert len(told.marked) == len(expected)


@BOTH
@given(LINES, LINES)
def test_each_change_is_told_once(before: dict[str, str], now: dict[str, str]) -> None:
    told = since("0001", before, now, TODAY)
    gone = [before[key] for key in before if key not in now and not over(key)]
    assert len(told.changes) == len(told.marked) + len(gone)
    assert sorted(told.changes[len(told.marked) :]) == sorted(f"gone: {each}" for each in gone)


@BOTH
@given(LINES, LINES)
def test_the_order_of_the_lines_does_not_count(before: dict[str, str], now: dict[str, str]) -> None:
    backwards = since("0001", dict(reversed(before.items())), dict(reversed(now.items())), TODAY)
    told = since("0001", before, now, TODAY)
    assert sorted(backwards.marked) == sorted(told.marked)
    assert sorted(backwards.changes) == sorted(told.changes)


@BOTH
@given(LINES, LINES)
def test_a_day_that_is_over_is_left_out(before: dict[str, str], now: dict[str, str]) -> None:
    def kept(lines: dict[str, str]) -> dict[str, str]:
        return {key: said for key, said in lines.items() if not over(key)}

    assert since("0001", before, now, TODAY) == since("0001", kept(before), kept(now), TODAY)


def test_a_change_says_what_it_was() -> None:
    told = since("0007", {"M01": "2 dm³", "M02": "x"}, {"M01": "3 dm³", "M03": "y"}, TODAY)
    assert told == Since("0007", ("M01", "M03"), ("3 dm³ (was: 2 dm³)", "new: y", "gone: x"))


def head(changes: int | None) -> Head:
    told = None if changes is None else Since("0003", ("a",), ("new: it",) * changes)
    return replace(head_for("A school", "A sheet", TODAY), since=told)


def test_the_copy_line_says_the_number_and_the_changes() -> None:
    assert copy_line(head(None)) == "as at Mon\u00a02027-02-01, not printed"
    assert copy_line(head(0)).endswith("not printed; nothing changed since copy 0003")
    assert copy_line(head(1)).endswith("1 change since copy 0003 (marked >)")
    printed = replace(head(2), copy="0004")
    assert copy_line(printed).endswith("copy 0004; 2 changes since copy 0003 (marked >)")


def test_a_mark_stands_only_before_what_changed() -> None:
    assert [mark(head(1), key) for key in ("a", "b")] == [">", " "]
    assert mark(head(None), "a") == " "


def test_more_than_a_dozen_changes_are_counted() -> None:
    few, many = foot_lines(head(MOST_CHANGES), 80), foot_lines(head(60), 80)
    assert few.count("new: it") == many.count("new: it") == MOST_CHANGES
    assert "more" not in few.split("\n\n")[0]
    assert "  and 48 more\n" in many


def test_practice_is_the_first_line() -> None:
    assert head_lines(head_for("A school", "A sheet", TODAY, practice=True), 80).startswith(
        "PRACTICE\nA school\nA sheet\nas at"
    )


def test_of_a_line_in_parts_only_those_are_told_that_changed() -> None:
    before = "make starch, 176 cm³; from B23; ! Boiling water"
    now = "make starch, 176 cm³; from B30; ! Boiling water; ! Mould"
    assert change_words(before, now) == ("make starch, 176 cm³; from B30; ! Mould (was: from B23)")
    assert change_words("a; b; c", "a; b") == "a (was: c)"
    assert change_words("a; b", "a; b; c") == "a; c (was: without)"
    assert change_words("a, 1; b", "a, 2; b") == "a, 2 (was: a, 1)"
