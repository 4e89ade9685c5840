"""Answers as they are typed: to the whole file, to blank cells, to one row."""

from __future__ import annotations

from pathlib import Path

import pytest
from old_spreadsheet import OLD, reader_of

from stockroom.bringing.answers import answers_of, lines_of_answers
from stockroom.errors import BadInput


def test_each_kind_of_answer_has_its_place() -> None:
    found = answers_of(
        ["dates=day-first", "unit=g", "7.amount=560 cm3", "row 3 strength=100 vol", "13=second"]
    )
    assert found.whole == {"dates": "day-first"}
    assert found.blanks == {"unit": "g"}
    assert found.cells == {(7, "amount"): "560 cm3", (3, "strength"): "100 vol"}
    assert found.rows == {13: "second"}


def test_words_may_be_written_apart() -> None:
    assert answers_of(["dates = Day First"]).day_first is True
    assert answers_of(["dates=month_first"]).day_first is False
    assert answers_of(["13=leave out"]).rows == {13: "leave-out"}


def test_the_same_answer_twice_is_one() -> None:
    assert answers_of(["epoch=1904", "epoch=1904"]).epoch == 1904


@pytest.mark.parametrize(
    ("answers", "said"),
    [
        (["dates"], "to which question"),
        (["dates="], "to which question"),
        (["dates=sometimes"], 'dates is not answered by "sometimes"'),
        (["date=day-first"], "nothing is called date"),
        (["7.amont=5 g"], "nothing is called amont"),
        (["13=third"], '13 is not answered by "third"'),
        (["dates=day-first", "dates=month-first"], "dates is answered twice"),
    ],
)
def test_what_is_no_answer_is_told(answers: list[str], said: str) -> None:
    with pytest.raises(BadInput, match=said) as trouble:
        answers_of(answers)
    assert trouble.value.hint


def test_an_answer_to_a_row_that_is_not_there_is_told(practice: Path) -> None:
    for answer in ("15=second", "99.name=KI"):
        with pytest.raises(BadInput, match="the last is row 14"):
            reader_of(practice)(OLD, answer)


def test_a_file_of_answers_may_say_why() -> None:
    assert lines_of_answers("\ufeff# asked T1\n\ndates=day-first\r\n 13=second \n") == [
        "dates=day-first",
        "13=second",
    ]
