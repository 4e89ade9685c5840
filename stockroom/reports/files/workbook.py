"""The term's workbook as XLSX bytes (ISO/IEC 29500): black on white, ready to print."""

from __future__ import annotations

import io
import re
import zipfile
from datetime import datetime, time
from textwrap import wrap
from typing import Any

from stockroom.reports.files.harmless import harmless
from stockroom.reports.files.workbook_sheets import Cell, Sheet, Workbook
from stockroom.reports.words import TIED, counted

NARROWEST, WIDEST = 6, 60
"""Widths of columns in characters; what is longer wraps. Our choice."""

LINE, TALLEST = 13.5, 400.0
"""Points of height for a line of text, and the most a row may have: the format ends at 409."""

TEXT, NUMBER, HEADING, LINE_OF_TEXT = "text", "number", "heading", "line of text"
"""The kinds of cell."""

LONGEST = 32_767
"""Characters a cell may hold. Source: the published limits of the format's first program."""

PAPERS = {"A4": 9, "Letter": 1}
"""The papers it can be set up for, by the number the format has for them."""

FIRST = "About"
"""The name of the first sheet."""

# what XML 1.0 cannot hold (its production 2), and halves of pairs, which have no UTF-8
_NO_XML = re.compile("[\x00-\x08\x0b\x0c\x0e-\x1f\ud800-\udfff\ufffe\uffff]")
_MODIFIED = re.compile(rb"(<dcterms:modified[^>]*>)[^<]*")
_DAY_OF_ZIP = (1980, 1, 1, 0, 0, 0)


def workbook_bytes(book: Workbook, paper: str = "A4") -> bytes:
    """The file, to print on one of `PAPERS`: the same bytes for the same plan and day."""
    from openpyxl import Workbook as Pages

    pages = Pages(write_only=True)
    pages.properties.creator = "stockroom"
    pages.properties.title = _text(book.house)
    pages.properties.created = datetime.combine(book.as_at, time())
    _styles(pages)
    _first(pages, book, paper)
    for sheet in book.sheets:
        _page(pages, sheet, book, paper)
    drawn = io.BytesIO()
    pages.save(drawn)
    return _settled(drawn.getvalue(), book)


def _settled(written: bytes, book: Workbook) -> bytes:
    """The same file without the moment it was written at."""
    day = f"{book.as_at.isoformat()}T00:00:00Z".encode()
    drawn = io.BytesIO()
    with zipfile.ZipFile(io.BytesIO(written)) as found, zipfile.ZipFile(drawn, "w") as settled:
        for name in found.namelist():
            part = found.read(name)
            if name == "docProps/core.xml":
                part = _MODIFIED.sub(rb"\g<1>" + day, part)
            info = zipfile.ZipInfo(name, _DAY_OF_ZIP)
            info.compress_type = zipfile.ZIP_DEFLATED
            settled.writestr(info, part)
    return drawn.getvalue()


def _first(pages: Any, book: Workbook, paper: str) -> None:
    page = pages.create_sheet(FIRST)
    page.column_dimensions["A"].width = 20
    page.column_dimensions["B"].width = WIDEST
    _for_paper(page, book, paper)
    for line in book.about:
        page.append([_styled(page, line, HEADING if line in book.about[:2] else LINE_OF_TEXT)])
    page.append([])
    for sheet in book.sheets:
        rows = counted(len(sheet.rows), "row") if sheet.rows else "nothing"
        page.append([_styled(page, sheet.name, HEADING), _styled(page, rows)])


def _page(pages: Any, sheet: Sheet, book: Workbook, paper: str) -> None:
    page = pages.create_sheet(sheet.name)
    widths = _widths(sheet)
    for number, width in enumerate(widths):
        page.column_dimensions[_letter(number)].width = width
    for number, row in enumerate(sheet.rows, 2):
        page.row_dimensions[number].height = _height(row, widths)
    # a heading goes along when the rows are rolled up, and stands on every printed side
    page.freeze_panes = "A2"
    page.print_title_rows = "1:1"
    page.auto_filter.ref = f"A1:{_letter(len(sheet.headings) - 1)}{len(sheet.rows) + 1}"
    _for_paper(page, book, paper)
    page.append([_styled(page, heading, HEADING) for heading in sheet.headings])
    for row in sheet.rows:
        page.append([_value(page, cell) for cell in row])


def _letter(number: int) -> str:
    from openpyxl.utils import get_column_letter

    return str(get_column_letter(number + 1))


def _widths(sheet: Sheet) -> list[int]:
    """The longest cell of each column, within bounds, and a space on each side."""
    longest = [len(heading) + 3 for heading in sheet.headings]
    for row in sheet.rows:
        for number, cell in enumerate(row):
            if cell is not None:
                longest[number] = max(longest[number], len(str(cell)))
    return [min(max(length + 2, NARROWEST), WIDEST) for length in longest]


def _height(row: tuple[Cell, ...], widths: list[int]) -> float:
    """The height of a row for its wrapped texts: not every program works it out by itself."""
    texts = [(cell, width) for cell, width in zip(row, widths, strict=True) if type(cell) is str]
    lines = max((_lines(text, width) for text, width in texts), default=1)
    return min(lines * LINE, TALLEST)


def _lines(text: str, width: int) -> int:
    parts = text.split("\n")
    # a column as wide as its text needs no second line; else a margin for letters wider than a
    # figure, by which widths are counted
    return sum(len(wrap(part, width - 5)) if len(part) + 2 > width else 1 for part in parts)


def _for_paper(page: Any, book: Workbook, paper: str) -> None:
    page.page_setup.orientation = "landscape"
    page.page_setup.paperSize = PAPERS[paper]
    page.page_setup.fitToWidth, page.page_setup.fitToHeight = 1, 0
    page.sheet_properties.pageSetUpPr.fitToPage = True
    # an ampersand begins a code there, and more than 255 characters are refused
    house = _text(book.house)[:80].replace("&", "&&")
    practice = "PRACTICE" if book.practice else None
    page.oddHeader.left.text, page.oddHeader.center.text = house, practice
    page.oddHeader.right.text = book.as_at.isoformat()
    page.oddFooter.left.text, page.oddFooter.center.text = "&A", practice
    page.oddFooter.right.text = "&P of &N"


def _value(page: Any, cell: Cell) -> Any:
    return None if cell is None else _styled(page, cell)


def _styled(page: Any, cell: Cell, style: str = "") -> Any:
    from openpyxl.cell import WriteOnlyCell

    is_text = isinstance(cell, str)
    made = WriteOnlyCell(page, value=_text(cell) if isinstance(cell, str) else cell)
    made.style = style or (TEXT if is_text else NUMBER)
    return made


def _styles(pages: Any) -> None:
    """The four kinds of cell, named once: a style of its own for each cell takes most of a run."""
    from openpyxl.styles import Alignment, Font, NamedStyle

    # a font without a name is another one in some programs
    plain, bold = Font(name="Calibri", size=11), Font(name="Calibri", size=11, bold=True)
    # a text that looks like a day or a sum stays a text, when it is typed over too
    kinds = ((TEXT, plain, True, "@"), (LINE_OF_TEXT, plain, False, "@"))
    more = ((HEADING, bold, False, "@"), (NUMBER, plain, False, "General"))
    for name, font, wrapped, form in (*kinds, *more):
        aligned = Alignment(vertical="top", wrap_text=wrapped)
        pages.add_named_style(NamedStyle(name, font=font, alignment=aligned, number_format=form))


def _text(words: str) -> str:
    plain = _NO_XML.sub("", words.replace(TIED, " "))
    safe = harmless(plain)
    return safe if len(safe) <= LONGEST else f"{safe[: LONGEST - 1]}…"
