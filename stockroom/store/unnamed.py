"""Bottles nobody can name, as the ledger has them: set aside, and named later. Light."""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from stockroom.keeping.record import Record
from stockroom.keeping.unnamed import is_unnamed
from stockroom.store.kinds import EntryKind
from stockroom.store.reading import Reader

NAMED = "named from evidence: needs a look"
"""Why a bottle that was given a name stands apart until somebody has looked at it."""


def named_later(reader: Reader, known_on: date | None) -> dict[str, str]:
    """The line each bottle was known by at the end of a day, where it was given another since.

    By the numbers of the bottles; for None nothing is.
    """
    if known_on is None:
        return {}
    return reader.pairs(
        "SELECT row_key, before FROM row_change WHERE id IN (SELECT MIN(id) FROM row_change"
        " WHERE table_name = ? AND column_name = ? AND entered_on > ? GROUP BY row_key)",
        "bottle",
        "line",
        known_on.isoformat(),
    )


def nameless_on(reader: Reader, day: str, which: str) -> frozenset[int]:
    """The ids of the bottles that have a name by the entries of `which`, and had none on a day."""
    rows = reader.ask(
        "SELECT bottle_id FROM entry WHERE bottle_id IN (SELECT bottle.id FROM row_change"
        " JOIN bottle ON bottle.number = row_key WHERE table_name = ? AND column_name = ?)"
        f" AND kind = ? AND reason = ? AND happened_on > ? AND {which}",
        *("bottle", "line", EntryKind.SET_ASIDE, NAMED, day),
    )
    return frozenset(row[0] for row in rows)


def apart(record: Record, line: str, remark: str, *, nameless: bool = False) -> Record:
    """The record of a bottle, set aside for good while nobody can name what is in it.

    `nameless` is one that has its name by now, on a day before it was given.
    """
    # not left to an entry, which a slip put right or a good look could take away
    if record.set_aside or not (nameless or is_unnamed(line)):
        return record
    return replace(record, set_aside=f"unknown: {remark}" if remark else "unknown")
