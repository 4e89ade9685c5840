"""However a list is saved, turned round or brought in, it says the same."""

from __future__ import annotations

import contextlib
import io
import random
from pathlib import Path

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st
from old_spreadsheet import SETTLED, Read, outcome, reader_of, row, rows_of, table
from openpyxl import Workbook

from stockroom.bringing.answers import WHOLE_FILE, answers_of
from stockroom.bringing.fields import FIELDS
from stockroom.bringing.outcome import ListRead, Status
from stockroom.errors import StockroomError

ENCODINGS = ("utf-8", "utf-8-sig", "utf-16", "utf-16-be", "cp1252", "mac_roman")


@pytest.fixture(scope="module")
def read(practice: Path) -> Read:
    return reader_of(practice)


def workbook(rows: list[list[str]]) -> bytes:
    made = Workbook()
    sheet = made.active
    assert sheet is not None
    for each in rows:
        sheet.append([cell or None for cell in each])
    out = io.BytesIO()
    made.save(out)
    return out.getvalue()


@settings(max_examples=25)
@given(
    order=st.permutations(range(7)),
    mark=st.sampled_from(";,\t|"),
    encoding=st.sampled_from(ENCODINGS),
    end=st.sampled_from(["\n", "\r\n"]),
    settled=st.booleans(),
)
def test_encoding_separator_and_order_of_columns_change_nothing(
    read: Read, order: list[int], mark: str, encoding: str, end: str, settled: bool
) -> None:
    answers = SETTLED if settled else ()
    turned = [[each[at] for at in order] for each in rows_of()]
    data = table(turned, mark, end).encode(encoding)
    assert outcome(read(data, *answers)) == outcome(read(table(rows_of()), *answers))


@pytest.mark.parametrize("seed", range(4))
def test_a_workbook_of_the_columns_in_any_order_says_the_same(read: Read, seed: int) -> None:
    order = random.Random(seed).sample(range(7), 7)
    turned = [[each[at] for at in order] for each in rows_of()]
    assert outcome(read(workbook(turned), *SETTLED)) == outcome(read(table(rows_of()), *SETTLED))


@settings(max_examples=25)
@given(order=st.permutations(range(1, 15)))
def test_rows_in_any_order_are_known_again(read: Read, order: list[int]) -> None:
    """Marks do not go by place: what was brought in is here, whatever was shuffled since."""
    first = read(table(rows_of()), *SETTLED)
    marks = {each.mark: (f"B{each.row}",) for each in first.going_in}
    rows = rows_of()
    again = read(table([rows[0], *(rows[at] for at in order)]), marks=marks)
    assert again.going_in == ()
    assert again.count(Status.HELD) == len(marks)


def test_a_row_that_says_something_else_is_another_row(read: Read) -> None:
    marks = {each.mark: ("B99",) for each in read(table(rows_of()), *SETTLED).going_in}
    changed = rows_of()
    changed[4][1] = "170"
    found = read(table(changed), marks=marks)
    assert row(found, 4).goes_in
    assert found.count(Status.HELD) == len(marks) - 1


@settings(max_examples=60)
@given(st.binary(max_size=400))
def test_any_bytes_are_read_or_refused_in_words(read: Read, data: bytes) -> None:
    # an error of any other kind would come through
    with contextlib.suppress(StockroomError):
        assert read(data).file == "old.csv"


CELLS = st.text(st.characters(exclude_categories=["Cs", "Cc"]), max_size=24) | st.sampled_from(
    "KI;5;g;1,000;13/05/26;04/05/27;46301;20 vol;A2;lost;12%;yes"
    # what a hand slips into a number
    ";1.2.3;95.5.5;9.9.9 %;H2SO4 sp. gr. 1.84.;3/2;2 x;\u1369;1..5 M".split(";")
)


@settings(max_examples=120)
@given(st.lists(st.lists(CELLS, min_size=7, max_size=7), min_size=1, max_size=5))
def test_any_cells_come_to_something_and_only_whole_rows_go_in(
    read: Read, body: list[list[str]]
) -> None:
    found: ListRead = read(table([rows_of()[0], *body]))
    for each in found.rows:
        assert each.status in Status
        if each.goes_in:
            assert each.incoming is not None
            assert each.incoming.line is not None
            assert each.incoming.left is not None
            assert each.incoming.left.micro > 0
        elif each.status in (Status.ASKED, Status.REFUSED):
            # what keeps a row out can be answered
            assert any(doubt.key for doubt in each.doubts)


@given(st.text(max_size=20), st.text(max_size=20))
def test_any_answer_is_taken_or_refused_in_words(key: str, value: str) -> None:
    with contextlib.suppress(StockroomError):
        answers_of([f"{key}={value}"])


def test_no_field_is_called_as_a_question_is() -> None:
    assert not set(FIELDS) & set(WHOLE_FILE)
