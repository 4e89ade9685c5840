"""The kinds of ledger entry."""

from __future__ import annotations

import re
from datetime import date
from enum import StrEnum


class EntryKind(StrEnum):
    """What happened to a bottle, in the words the ledger keeps."""

    ARRIVED = "arrived"
    OPENED = "opened"
    MADE = "made"
    DRAWN = "drawn"
    DECANTED = "decanted"
    DECANTED_IN = "decanted in"
    MIXED = "mixed"
    COUNTED = "counted"
    FOUND = "found"
    LOOKED = "looked"
    TESTED = "tested"
    DATE_READ = "date read"
    MOVED = "moved"
    LOST = "lost"
    TURNED_UP = "turned up"
    SET_ASIDE = "set aside"
    SPILLED = "spilled"
    LENT = "lent"
    DISCARDED = "discarded"
    PUT_RIGHT = "put right"


BEGINNINGS = (EntryKind.ARRIVED, EntryKind.MADE, EntryKind.DECANTED_IN, EntryKind.MIXED)
"""The entry each bottle's story starts with."""

POURED = (EntryKind.DECANTED_IN, EntryKind.MIXED)
"""Those of a bottle that keeps what the bottles it was poured from were known to be."""

DAY_NOT_WRITTEN = "day not written"
"""The note on an opened entry whose day is a guess (the earliest it can have been)."""

TURNED_UP = "turned up: needs a look"
"""Why a bottle that turned up stands apart until somebody has looked at it."""

# asked row by row through the index of puts_right: one bottle never reads the whole ledger.
# The plus keeps SQLite from that index for the first half, which nearly every entry fits.
STANDING = (
    "+entry.puts_right IS NULL"
    " AND NOT EXISTS (SELECT 1 FROM entry mended WHERE mended.puts_right = entry.id)"
)
"""SQL for entries that still hold: neither put right, nor the putting right itself."""


INTO = "into "
"""How the note begins on what left a bottle for another one."""

EVENED = "keeps the count of entry "
"""How the note begins on an entry that keeps an earlier count true."""

_BY_DRAW = "by the draw of entry "


def made_note(number: str) -> str:
    """The note on what left a bottle for another one: made up, decanted or mixed."""
    return f"{INTO}{number}"


def made_into(note: str) -> str:
    """The number of the bottle that note names; "" for any other note."""
    return note.removeprefix(INTO) if note.startswith(INTO) else ""


def evening_note(count_id: int | None) -> str:
    """The note on the entry that keeps an earlier count true."""
    return f"{EVENED}{count_id} as it was"


def evened_count(note: str) -> int | None:
    """The count that note keeps true; None for any other note."""
    found = re.fullmatch(rf"{EVENED}(\d+) as it was", note)
    return int(found[1]) if found else None


def opened_note(draw_id: int | None) -> str:
    """The note on an opening nobody entered: a sealed bottle was drawn from."""
    return f"{_BY_DRAW}{draw_id}"


def is_by_draw(note: str) -> bool:
    """Whether the note on an opening says it was only taken from a draw."""
    return note.startswith(_BY_DRAW)


def standing_on(known_on: date | None) -> str:
    """The same as it stood at the end of a day: by what was entered up to it alone.

    None is by all that was ever entered.
    """
    if known_on is None:
        return STANDING
    # a date is no text of a person's, so it may stand in the question itself
    entered = f"entered_on <= '{known_on.isoformat()}'"
    return (
        f"entry.{entered} AND +entry.puts_right IS NULL AND NOT EXISTS"
        f" (SELECT 1 FROM entry mended WHERE mended.puts_right = entry.id AND mended.{entered})"
    )


CANCELLED, EXPECTED = "cancelled", "expected"
"""What may be changed of an order that was placed: given up, or put off to another day."""

MIXTURE, STANDS, DESTROYED = "mixture", "stands", "destroyed"
"""In a booking's record: its mixture that is never kept, before and after somebody destroyed it."""
