"""What the calendar file of a term said last, and keeping what it says now.

Kept beside the printed copies, one after the other, so that the next file updates the entries
of this one and withdraws what is no longer planned.
"""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date

from stockroom.service.copies import copy_before, number_copy
from stockroom.settings import StoreAt

SHEET = "calendar"
"""The name its copies have among those of the sheets."""


def put_out_last(path: StoreAt, term: date) -> tuple[str, dict[str, str]]:
    """The number and the entries of the file written last for the term that begins that day.

    "" and nothing where none was.
    """
    copy = copy_before(path, SHEET, term.isoformat())
    return (copy.number, copy.lines) if copy else ("", {})


def keep_put_out(
    path: StoreAt, term: date, lines: Mapping[str, str], *, as_at: date, by: str = ""
) -> str:
    """Keep what the file says, and give its number. Raises: StoreTrouble where none can be."""
    return number_copy(path, SHEET, term.isoformat(), lines, as_at=as_at, by=by)
