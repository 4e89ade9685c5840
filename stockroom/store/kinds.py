"""The kinds of ledger entry."""

from __future__ import annotations

from enum import StrEnum


class EntryKind(StrEnum):
    """What happened to a bottle, in the words the ledger keeps."""

    ARRIVED = "arrived"
    OPENED = "opened"
    MADE = "made"
    DRAWN = "drawn"
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


BEGINNINGS = (EntryKind.ARRIVED, EntryKind.MADE)
"""The entry each bottle's story starts with."""

DAY_NOT_WRITTEN = "day not written"
"""The note on an opened entry whose day is a guess (the earliest it can have been)."""

TURNED_UP = "turned up: needs a look"
"""Why a bottle that turned up stands apart until somebody has looked at it."""

# IS NOT NULL matters: NOT IN over a NULL is never true
STANDING = (
    "entry.puts_right IS NULL"
    " AND entry.id NOT IN (SELECT puts_right FROM entry WHERE puts_right IS NOT NULL)"
)
"""SQL for entries that still hold: neither put right, nor the putting right itself."""

CANCELLED, EXPECTED = "cancelled", "expected"
"""What may be changed of an order that was placed: given up, or put off to another day."""
