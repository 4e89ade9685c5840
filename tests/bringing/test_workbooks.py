"""A workbook says what the same list as text says; its real dates and numbers are kept."""

from __future__ import annotations

import io
import re
import zipfile
from collections.abc import Callable, Iterable
from datetime import date, datetime
from pathlib import Path
from typing import Any

import pytest
from old_spreadsheet import OLD, SETTLED, Read, outcome, reader_of, row, rows_of
from openpyxl import Workbook

from stockroom.bringing.opening import read_file
from stockroom.bringing.outcome import Status
from stockroom.errors import BadInput
from stockroom.measure.amounts import Amount

HEAD: list[Any] = ["name", "amount", "unit", "opened", "exp", "strength", "where"]


@pytest.fixture
def read(practice: Path) -> Read:
    return reader_of(practice)


def book(*rows: Iterable[Any], change: Callable[[Workbook], object] | None = None) -> bytes:
    made = Workbook()
    sheet = made.active
    assert sheet is not None
    for each in rows:
        sheet.append(list(each))
    if change:
        change(made)
    out = io.BytesIO()
    made.save(out)
    return out.getvalue()


@pytest.mark.parametrize("answers", [(), SETTLED], ids=["as it stands", "settled"])
def test_a_list_and_its_workbook_say_the_same(read: Read, answers: tuple[str, ...]) -> None:
    rows: list[list[Any]] = [[cell or None for cell in each] for each in rows_of()]
    # as a spreadsheet program would keep them: a number is a number
    for each in rows[1:]:
        for at, cell in enumerate(each):
            each[at] = float(cell) if re.fullmatch(r"[0-9]+(\.[0-9]+)?", cell or "") else cell
    # the day number stands in a workbook that says how it counts, and needs no guess
    assert outcome(read(book(*rows), *answers)) == outcome(read(OLD, *answers))


def test_real_dates_have_one_reading(read: Read) -> None:
    found = read(book(HEAD, ["KI", 5, "g", datetime(2025, 9, 8), date(2027, 5, 4), None, "A2"]))
    said = found.rows[0].incoming
    assert found.rows[0].status is Status.ACCEPTED
    assert said is not None
    assert said.printed is not None
    assert (said.opened, said.printed.readings) == (date(2025, 9, 8), (date(2027, 5, 4),))


def test_a_date_that_shows_only_its_month_lasts_to_its_end(read: Read) -> None:
    def as_month(made: Workbook) -> None:
        made.worksheets[0]["E2"].number_format = "mmm-yy"

    rows = [HEAD, ["KI", 5, "g", None, date(2028, 10, 1), None, "A2"]]
    said = read(book(*rows, change=as_month)).rows[0].incoming
    assert said is not None
    assert said.printed is not None
    assert said.printed.readings == (date(2028, 10, 31),)


def test_a_per_cent_cell_is_a_per_cent(read: Read) -> None:
    def as_per_cent(made: Workbook) -> None:
        made.worksheets[0]["F2"].number_format = "0%"

    rows = [HEAD, ["bleach", 500, "ml", None, None, 0.12, "A3"]]
    found = read(book(*rows, change=as_per_cent))
    assert found.rows[0].doubts[0].options[0] == "12 % w/v"


def test_what_the_computer_left_behind_a_number_is_not_read(read: Read) -> None:
    said = read(book(HEAD, ["KI", 0.1 + 0.2, "kg"])).rows[0].incoming
    assert said is not None
    assert said.left == Amount.grams(300)


def test_a_merged_title_stands_above_the_headings(read: Read) -> None:
    def merge(made: Workbook) -> None:
        made.worksheets[0].merge_cells("A1:G1")

    found = read(book(["Old stock list"], [None], HEAD, ["KI", 5, "g"], change=merge))
    assert (found.table.line, found.rows[0].status) == (3, Status.ACCEPTED)


def test_of_several_sheets_one_must_be_named(read: Read) -> None:
    def more(made: Workbook) -> None:
        made.worksheets[0].title = "solids"
        made.create_sheet("acids").append(["name", "amount"])
        made.create_sheet("empty")

    data = book(HEAD, ["KI", 5, "g"], change=more)
    with pytest.raises(BadInput, match='2 sheets with something in them: "solids", "acids"'):
        read(data)
    assert row(read(data, sheet="Solids"), 1).status is Status.ACCEPTED
    with pytest.raises(BadInput, match='no sheet "alkalis"'):
        read(data, sheet="alkalis")


def test_a_formula_that_was_never_worked_out_is_no_empty_cell(read: Read) -> None:
    with pytest.raises(BadInput, match=r'cell B2 holds "=2\*250" and no value'):
        read(book(HEAD, ["KI", "=2*250", "g"]))


def test_a_workbook_says_how_it_counts_days(read: Read) -> None:
    def from_1904(made: Workbook) -> None:
        made.epoch = datetime(1904, 1, 1)

    rows = [HEAD, ["KI", 5, "g", 43000, None, None, "A2"]]
    days = []
    for change in (None, from_1904):
        said = read(book(*rows, change=change)).rows[0].incoming
        assert said is not None
        days.append(said.opened)
    assert days == [date(2017, 9, 22), date(2021, 9, 23)]


def test_an_empty_workbook_and_a_packed_file_are_told() -> None:
    with pytest.raises(BadInput, match="no row with anything in it"):
        read_file(book(), "old.xlsx")
    packed = io.BytesIO()
    with zipfile.ZipFile(packed, "w") as each:
        each.writestr("letter.txt", "no sheet")
    with pytest.raises(BadInput, match="no workbook of sheets"):
        read_file(packed.getvalue(), "old.xlsx")
