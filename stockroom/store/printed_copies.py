"""Sheets that were printed, by the number on each copy. Light, as reading is."""

from __future__ import annotations

import json
from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date

from stockroom.store.reading import Reader

TABLE = "printed_copy"


@dataclass(frozen=True, slots=True)
class Copy:
    """One printed copy: its number, as at what day, by whom, and what each line said.

    `lines` is empty where they cannot be read: there is then nothing to mark changes by.
    """

    number: str
    as_at: date
    by: str
    lines: dict[str, str]


def last_copy(reader: Reader, sheet: str, about: str) -> Copy | None:
    """The copy of this sheet, of the same thing, that was printed last; None when none was."""
    rows = reader.rows(
        TABLE, "WHERE sheet = ? AND about = ? ORDER BY id DESC LIMIT 1", sheet, about
    )
    if not rows:
        return None
    row = rows[0]
    return Copy(row["number"], date.fromisoformat(row["as_at"]), row["by"], _lines(row["lines"]))


def copy_with(reader: Reader, sheets: Sequence[str], start: str) -> tuple[str, str] | None:
    """The copy of these sheets printed last with a line whose key begins so: its number, the key.

    None when none was. `start` is of plain letters and digits.
    """
    marks = ", ".join("?" * len(sheets))
    where = f"WHERE sheet IN ({marks}) AND lines LIKE ? ORDER BY id DESC LIMIT 1"
    for row in reader.rows(TABLE, where, *sheets, f'%"{start}%'):
        for key in _lines(row["lines"]):
            if key.startswith(start):
                return row["number"], key
    return None


def next_copy(reader: Reader) -> str:
    """The number for the next copy of any sheet: "0001" for the first."""
    found = reader.ask(f"SELECT MAX(id) FROM {TABLE}")
    return f"{(found[0][0] or 0) + 1:04d}"


def lines_written(lines: dict[str, str]) -> str:
    """The lines as text, for their column, in the order they stand in on the sheet."""
    return json.dumps(lines, ensure_ascii=False)


def _lines(text: str) -> dict[str, str]:
    try:
        found = json.loads(text)
    except ValueError:
        return {}
    if not isinstance(found, dict):
        return {}
    return {str(key): str(said) for key, said in found.items()}
