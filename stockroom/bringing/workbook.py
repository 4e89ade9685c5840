"""A workbook's sheet to cells of text: real dates stay dates, numbers lose no digit."""

from __future__ import annotations

import io
import re
import warnings
import zipfile
from datetime import date, datetime, time
from decimal import Decimal
from typing import Any

from stockroom.bringing.sheet import MOST_COLUMNS, MOST_ROWS, Sheet, trimmed
from stockroom.errors import BadInput
from stockroom.measure.reading import quote

_MOST_UNPACKED = 500_000_000
"""Bytes it may unpack to: a few can be made to fill a disc. Ten times the largest file; ours."""
_FORMULA = re.compile(rb"<f[ >/]")
# words in quotes and colours in brackets are no part of how a date is written
_ASIDE = re.compile(r'"[^"]*"|\[[^\]]*\]|\\.')


def read_workbook(data: bytes, name: str, sheet: str = "") -> Sheet:
    """The sheet named, or the only one with anything in it.

    Raises: BadInput for what is no workbook, a sheet that is not there, and when several
    hold something and none is named; also for a formula that was never worked out.
    """
    formulas = _checked(data, name)
    with warnings.catch_warnings():
        # it warns of what it leaves out, such as pictures, and none of that is a bottle
        warnings.simplefilter("ignore")
        book = _load(data, name, values=True)
        chosen = _chosen(book, name, sheet)
        cells = _cells(book[chosen])
        if formulas:
            _check_worked_out(_load(data, name, values=False)[chosen], cells, name)
    epoch = 1904 if book.epoch.year == 1904 else 1900
    return Sheet(trimmed(cells), f'workbook, sheet "{chosen}"', chosen, epoch)


def _checked(data: bytes, name: str) -> bool:
    """Whether any sheet holds a formula. Raises: BadInput for what is no workbook."""
    wrong = "Save it as .xlsx or .csv in the spreadsheet program."
    try:
        with zipfile.ZipFile(io.BytesIO(data)) as packed:
            inside = packed.infolist()
            names = {each.filename for each in inside}
            if "xl/workbook.xml" not in names:
                raise BadInput(f"{name} is no workbook of sheets (.xlsx).", wrong)
            if sum(each.file_size for each in inside) > _MOST_UNPACKED:
                raise BadInput(f"{name} unpacks to more than a list of bottles can be.", wrong)
            sheets = [each for each in names if each.startswith("xl/worksheets/")]
            return any(_FORMULA.search(packed.read(each)) for each in sheets)
    except (zipfile.BadZipFile, OSError, RuntimeError, NotImplementedError):
        raise BadInput(f"{name} begins as a workbook and cannot be read.", wrong) from None


def _load(data: bytes, name: str, *, values: bool) -> Any:
    from openpyxl import load_workbook

    try:
        return load_workbook(io.BytesIO(data), read_only=True, data_only=values)
    except Exception as error:
        # the reader has no error of its own for a file that is damaged inside
        raise BadInput(
            f"{name} is damaged inside: {type(error).__name__}.",
            "Open it in the spreadsheet program and save it anew.",
        ) from None


def _chosen(book: Any, name: str, sheet: str) -> str:
    titles = [each.title for each in book.worksheets]
    listed = ", ".join(quote(title) for title in titles)
    if sheet:
        found = [title for title in titles if title.strip().casefold() == sheet.strip().casefold()]
        if not found:
            raise BadInput(f"{name} has no sheet {quote(sheet)}.", f"There are: {listed}.")
        return str(found[0])
    filled = [each.title for each in book.worksheets if _holds_something(each)]
    if len(filled) > 1:
        several = ", ".join(quote(title) for title in filled)
        raise BadInput(
            f"{name} has {len(filled)} sheets with something in them: {several}.",
            f'Name the one to bring in: --sheet "{filled[0]}".',
        )
    if not filled:
        raise BadInput(f"{name} has no row with anything in it.", "Give the list of bottles.")
    return str(filled[0])


def _holds_something(sheet: Any) -> bool:
    sheet.reset_dimensions()
    return any(value is not None for row in sheet.iter_rows(values_only=True) for value in row)


def _cells(sheet: Any) -> list[list[str]]:
    # the size a workbook states of its sheet is often wrong
    sheet.reset_dimensions()
    rows: list[list[str]] = []
    for row in sheet.iter_rows(max_col=MOST_COLUMNS + 1):
        rows.append([_text(cell) for cell in row])
        if len(rows) > 2 * MOST_ROWS:
            break
    return rows


def _text(cell: Any) -> str:
    value = cell.value
    if value is None:
        return ""
    if isinstance(value, str):
        return value.strip()
    if isinstance(value, bool):
        return "yes" if value else "no"
    if isinstance(value, date):
        return _day(value, cell.number_format or "")
    if isinstance(value, float) and "%" in _ASIDE.sub("", cell.number_format or ""):
        return f"{_number(value * 100)}%"
    return _number(value) if isinstance(value, int | float) else str(value)


def _day(value: date, written: str) -> str:
    # somebody typed "Oct-26" and the program made it the first of the month
    shows_day = "d" in _ASIDE.sub("", written).lower()
    if isinstance(value, datetime) and value.time() != time() and not shows_day:
        return value.time().isoformat("minutes")
    return value.strftime("%Y-%m-%d" if shows_day or not written else "%Y-%m")


def _number(value: float) -> str:
    # to the 15 figures a spreadsheet holds (a double keeps no more for certain; IEEE 754, from
    # memory); what is behind them is the computer's
    return f"{Decimal(f'{value:.15g}'):f}"


def _check_worked_out(sheet: Any, cells: list[list[str]], name: str) -> None:
    sheet.reset_dimensions()
    for row, values in zip(sheet.iter_rows(max_col=MOST_COLUMNS + 1), cells, strict=False):
        for cell, text in zip(row, values, strict=False):
            if not text and isinstance(cell.value, str) and cell.value.startswith("="):
                raise BadInput(
                    f"{name}, cell {cell.coordinate} holds {quote(cell.value)} and no value.",
                    "Open the workbook in its spreadsheet program, save it, and bring that in.",
                )
