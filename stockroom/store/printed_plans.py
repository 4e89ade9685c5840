"""Plans that were kept, by the number on their printed copy. Light, as reading is."""

from __future__ import annotations

import json
from dataclasses import dataclass
from datetime import date

from stockroom.errors import UnknownName
from stockroom.store.columns import COLUMNS
from stockroom.store.likeness import unknown
from stockroom.store.reading import Reader, Row

TABLE = "printed_plan"

# what another text than was written there comes to
_DAMAGED = (ValueError, TypeError, AttributeError, RecursionError)


@dataclass(frozen=True, slots=True)
class Printed:
    """One kept plan: its number, as at what day, who kept it, and the decisions as text.

    `marks` is the last row number of each table at that moment. `unread` says what in the row
    is damaged, "" for nothing; the decisions are read, and may still fail, elsewhere.
    """

    number: str
    as_at: date
    by: str
    cautious: bool
    digest: str
    decisions: str
    marks: dict[str, int]
    unread: str = ""


def last_kept(reader: Reader, as_at: date) -> Printed | None:
    """The plan kept last of those as at `as_at` or before; None when there is none."""
    # a plan as at a later day knows what has not happened yet on this one
    rows = reader.rows(TABLE, "WHERE as_at <= ? ORDER BY id DESC LIMIT 1", as_at.isoformat())
    return _printed(rows[0]) if rows else None


def kept_under(reader: Reader, number: str) -> Printed:
    """The plan of that number: "0003", or "3". Raises: UnknownName with the nearest."""
    wanted = number.strip().removeprefix("#")
    wanted = wanted.zfill(4) if wanted.isascii() and wanted.isdigit() else wanted
    rows = reader.rows(TABLE, "WHERE number = ?", wanted)
    if rows:
        return _printed(rows[0])
    numbers = [row[0] for row in reader.ask(f"SELECT number FROM {TABLE} ORDER BY id")]
    if not numbers:
        raise UnknownName(f'No plan "{number}": none was kept yet.', "stockroom plan --keep")
    raise unknown("kept plan", number, numbers)


def next_number(reader: Reader) -> str:
    """The number for the next printed copy: "0001" for the first."""
    found = reader.ask(f"SELECT MAX(id) FROM {TABLE}")
    return f"{(found[0][0] or 0) + 1:04d}"


def usual_of(reader: Reader, as_at: date) -> dict[str, tuple[date, ...]]:
    """For each line, the days its makes had in the plan kept last; nothing where none was.

    Nothing too where they cannot be read: they only break ties, and no plan fails for that.
    """
    # one column of one row: every plan asks this, and most houses have a long row there
    rows = reader.ask(
        f"SELECT usual FROM {TABLE} WHERE as_at <= ? ORDER BY id DESC LIMIT 1", as_at.isoformat()
    )
    try:
        return _days(rows[0][0]) if rows else {}
    except _DAMAGED:
        return {}


def _days(text: str) -> dict[str, tuple[date, ...]]:
    days: dict[str, list[str]] = json.loads(text)
    return {line: tuple(map(date.fromisoformat, row)) for line, row in days.items()}


def marks(reader: Reader) -> dict[str, int]:
    """The last row number of every table now."""
    tables = [table for table, names in COLUMNS.items() if "id" in names]
    return {table: reader.ask(f"SELECT MAX(id) FROM {table}")[0][0] or 0 for table in tables}


def _printed(row: Row) -> Printed:
    known, unread = {}, ""
    try:
        known = _marks(row["marks"])
        _days(row["usual"])
    except _DAMAGED as error:
        unread = str(error)
    return Printed(
        number=row["number"],
        as_at=date.fromisoformat(row["as_at"]),
        by=row["by"],
        cautious=bool(row["cautious"]),
        digest=row["digest"],
        decisions=row["decisions"],
        marks=known,
        unread=unread,
    )


def _marks(text: str) -> dict[str, int]:
    found: dict[str, int] = json.loads(text)
    return {table: int(mark) for table, mark in found.items()}


def marks_written(now: dict[str, int]) -> str:
    """The marks as text, for their column."""
    return json.dumps(now, sort_keys=True)
