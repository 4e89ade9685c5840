"""The workbook, read back by a second, independent reader and held against the plan's data."""

from __future__ import annotations

import io
from dataclasses import replace
from pathlib import Path
from typing import Any

import houses
import openpyxl
import pytest
from python_calamine import CalamineWorkbook

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts, House
from stockroom.planning.plan import plan
from stockroom.reports.files.workbook import workbook_bytes
from stockroom.reports.files.workbook_sheets import workbook_of
from stockroom.reports.json_plan import plan_json
from stockroom.service.sheets import known_and_planned


@pytest.fixture(scope="module")
def college(college_file: Path) -> tuple[Facts, Plan]:
    return known_and_planned(college_file, as_at=houses.MONDAY)


@pytest.fixture(scope="module")
def written(college: tuple[Facts, Plan]) -> bytes:
    return workbook_bytes(workbook_of(*college))


def rows_of(written: bytes, name: str) -> list[dict[str, Any]]:
    sheet = CalamineWorkbook.from_filelike(io.BytesIO(written)).get_sheet_by_name(name)
    headings, *rows = sheet.to_python()
    return [dict(zip(map(str, headings), row, strict=True)) for row in rows]


SAME = {
    "Needs": ("needs", {"ref", "on", "amount", "unit", "outcome"}),
    "Makes": ("makes", {"id", "on", "volume", "needed", "ready", "latest", "minutes"}),
    "Orders": ("orders", {"id", "order_by", "need_by", "amount", "unit", "arrives"}),
    "Usage": ("usage", {"item", "amount", "unit", "spare"}),
    "Short": ("short", {"ref", "amount", "unit"}),
    "Levels": ("levels", {"on", "left", "level", "unit"}),
    "Checks": ("checks", {"item", "not_before", "best", "by"}),
    "Past": ("past", {"bottle", "condition", "good_until"}),
}


@pytest.mark.parametrize("name", SAME)
def test_every_amount_and_day_is_that_of_the_plan(
    college: tuple[Facts, Plan], written: bytes, name: str
) -> None:
    key, columns = SAME[name]
    told, found = plan_json(college[1])[key], rows_of(written, name)
    assert len(found) == len(told) > 0
    for row, said in zip(found, told, strict=True):
        for column in columns:
            value = said[column] if said[column] is not None else ""
            cell = row[column.replace("_", " ")]
            assert (cell, isinstance(cell, str)) == (value, isinstance(value, str))


def test_money_is_a_number_of_pounds(college: tuple[Facts, Plan], written: bytes) -> None:
    costs = [row["cost £"] for row in rows_of(written, "Orders")]
    assert costs == [order.pence / 100 for order in college[1].orders]


def test_every_amount_taken_is_one_row(college: tuple[Facts, Plan], written: bytes) -> None:
    data = plan_json(college[1])
    taken = [s["amount"] for make in data["makes"] for s in make["sources"]]
    rows = [r["amount"] for r in rows_of(written, "Taken from") if str(r["for"]).startswith("M")]
    assert rows == taken


def test_it_is_laid_out_to_be_read_and_printed(written: bytes) -> None:
    book: Any = openpyxl.load_workbook(io.BytesIO(written))
    assert book.sheetnames[0] == "About"
    assert book["About"]["A1"].value == "PRACTICE"
    for sheet in book.worksheets:
        assert sheet.page_setup.orientation == "landscape"
        assert sheet.sheet_properties.pageSetUpPr.fitToPage
        assert sheet.oddHeader.center.text == sheet.oddFooter.center.text == "PRACTICE"
        assert all(each.width <= 60 for each in sheet.column_dimensions.values())
        if sheet.title != "About":
            assert (sheet.freeze_panes, sheet.print_title_rows) == ("A2", "$1:$1")
            assert sheet["A1"].font.b


def test_a_row_is_as_high_as_its_longest_text(written: bytes) -> None:
    book: Any = openpyxl.load_workbook(io.BytesIO(written))
    for name in ("Needs", "Makes", "Orders", "Guesses"):
        sheet = book[name]
        for row in sheet.iter_rows(min_row=2):
            for cell in row:
                width = sheet.column_dimensions[cell.column_letter].width
                lines = -(-len(str(cell.value or "")) // width)
                assert sheet.row_dimensions[cell.row].height >= min(12.75 * lines, 400)


def test_the_same_plan_gives_the_same_bytes(college: tuple[Facts, Plan], written: bytes) -> None:
    assert workbook_bytes(workbook_of(*college)) == written


@pytest.mark.parametrize(
    ("typed", "kept"),
    [
        ('=HYPERLINK("x")', '\'=HYPERLINK("x")'),
        ("+1", "'+1"),
        ("-1", "'-1"),
        ("@cmd", "'@cmd"),
        ("\t=1", "'\t=1"),
        ("\x07=1", "'=1"),
        ("bell \x07 half \ud800 end \uffff", "bell  half  end "),
        ("2027-03", "2027-03"),
        ("3/4", "3/4"),
        ("007", "007"),
    ],
)
def test_no_text_runs_or_becomes_a_day(college: tuple[Facts, Plan], typed: str, kept: str) -> None:
    known, made = college
    one = replace(made, needs=(), makes=(), orders=(replace(made.orders[0], supplier=typed),))
    written = workbook_bytes(workbook_of(known, one))
    assert rows_of(written, "Orders")[0]["supplier"] == kept
    cell = openpyxl.load_workbook(io.BytesIO(written))["Orders"]["I2"]
    assert (cell.data_type, cell.value, cell.number_format) == ("s", kept, "@")


def test_a_text_longer_than_a_cell_is_cut_and_says_so(college: tuple[Facts, Plan]) -> None:
    known, made = college
    one = replace(made, orders=(replace(made.orders[0], supplier="x" * 40_000),))
    (row,) = rows_of(workbook_bytes(workbook_of(known, one)), "Orders")
    assert (len(row["supplier"]), row["supplier"][-1]) == (32_767, "…")


def test_a_house_with_an_ampersand_and_nothing_in_it() -> None:
    empty = houses.house([], house=House(name="Art & Science " * 30))
    written = workbook_bytes(workbook_of(empty, plan(empty)))
    book: Any = openpyxl.load_workbook(io.BytesIO(written))
    assert str(book["About"]["A1"].value).startswith("Art & Science")
    assert rows_of(written, "Needs") == []
    assert book["Needs"].oddHeader.center.text is None
