"""Printed copies: the number on each, and what the one before it said.

To look at a sheet writes nothing; to print one takes the next number and keeps its lines.
"""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date

from stockroom.settings import StoreAt
from stockroom.store.printed_copies import Copy, last_copy, lines_written, next_copy
from stockroom.store.reading import reading


def copy_before(path: StoreAt, sheet: str, about: str) -> Copy | None:
    """The copy of this sheet, of the same thing, that was printed last; None when none was."""
    with reading(path) as reader:
        return last_copy(reader, sheet, about)


def number_copy(
    path: StoreAt, sheet: str, about: str, lines: Mapping[str, str], *, as_at: date, by: str = ""
) -> str:
    """Keep what a sheet says and give the number to print on it.

    Initials are kept where they are known and not asked for: a sheet is no entry.
    """
    from stockroom import clock
    from stockroom.store.engine import reader_in, writing
    from stockroom.store.tables import PrintedCopy

    with writing(path) as session:
        row = PrintedCopy(
            number=next_copy(reader_in(session)),
            sheet=sheet,
            about=about,
            as_at=as_at,
            printed_at=clock.now().isoformat(sep=" "),
            by=by.strip(),
            lines=lines_written(dict(lines)),
        )
        session.add(row)
        return row.number
