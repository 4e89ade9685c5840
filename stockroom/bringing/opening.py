"""The bytes of a file to a sheet: a workbook or a table of text, or the reason it is neither."""

from __future__ import annotations

from stockroom.bringing.plain_text import read_text
from stockroom.bringing.sheet import MOST_BYTES, MOST_COLUMNS, MOST_ROWS, Sheet
from stockroom.errors import BadInput

# the first bytes of what people give for a spreadsheet; common knowledge
_OTHERS = (
    (b"\xd0\xcf\x11\xe0", "an old workbook (.xls), or one behind a password"),
    (b"%PDF", "a PDF"),
    (b"SQLite format 3\x00", "a database; a store of one's own is opened with --store"),
    (b"\x89PNG", "a picture"),
    (b"\xff\xd8\xff", "a picture"),
    (b"\x1f\x8b", "a packed file"),
    (b"{\\rtf", "a page of a word processor"),
)
_SAVE_AS = "Save it as .xlsx or .csv in the spreadsheet program, and bring that in."


def read_file(data: bytes, name: str, *, sheet: str = "", encoding: str = "") -> Sheet:
    """The sheet in a file's bytes; `name` is only quoted.

    `sheet` names one of a workbook's, `encoding` that of a text; both are found out when empty.
    Raises: BadInput for an empty file, one that is too big, one that is no spreadsheet, and
    for a workbook of several sheets of which none is named.
    """
    if not data.strip():
        raise BadInput(f"{name} is empty: {len(data)} bytes.", "Give the list of bottles.")
    if len(data) > MOST_BYTES:
        raise BadInput(
            f"{name} is too big: {len(data) // 1_000_000} MB;"
            f" {MOST_BYTES // 1_000_000} MB is most.",
            "Save the sheet with the bottles alone.",
        )
    for mark, what in _OTHERS:
        if data.startswith(mark):
            raise BadInput(f"{name} is no spreadsheet that I can read: {what}.", _SAVE_AS)
    if data.startswith(b"PK"):
        # loaded here: a list saved as text never pays for the workbook's reader
        from stockroom.bringing.workbook import read_workbook

        found = read_workbook(data, name, sheet)
    else:
        if sheet:
            raise BadInput(f'--sheet "{sheet}": {name} has one sheet only.', "Leave --sheet out.")
        found = read_text(data, name, encoding)
    return _checked(found, name)


def _checked(found: Sheet, name: str) -> Sheet:
    if not found.rows:
        raise BadInput(f"{name} has no row with anything in it.", "Give the list of bottles.")
    if len(found.rows) > MOST_ROWS:
        raise BadInput(
            f"{name} has {len(found.rows)} rows, and {MOST_ROWS} is most.",
            "Split it, and bring in one part after the other.",
        )
    widest = max(len(row) for row in found.rows)
    if widest > MOST_COLUMNS:
        raise BadInput(
            f"{name} has {widest} columns, and {MOST_COLUMNS} is most.",
            "Save the columns that tell of bottles, one bottle a row.",
        )
    return found
