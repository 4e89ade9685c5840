"""Bottles that were topped up: what was found of them before says nothing of what is in them."""

from __future__ import annotations

from datetime import date

from stockroom.store.kinds import STANDING, EntryKind
from stockroom.store.reading import Reader

MORE = 0.05
"""A count so much of the bottle's size above the entries is a top-up. Ours, no source."""


def refills_of(reader: Reader, as_at: date) -> dict[str, date]:
    """By number, the last day up to `as_at` a count found much more than was entered.

    Nobody enters a top-up as such: what is counted has more in it than was left.
    """
    # what is written of a bottle after it was thrown away tops nothing up
    gone = (
        "SELECT 1 FROM entry thrown WHERE thrown.bottle_id = entry.bottle_id"
        " AND thrown.kind = ? AND thrown.happened_on = entry.happened_on"
    )
    # summed by day: a draw entered late evens out the count of its day, and adds nothing
    rows = reader.ask(
        "SELECT bottle.number, happened_on FROM entry JOIN bottle ON bottle.id = bottle_id"
        f" WHERE entry.kind = ? AND happened_on <= ? AND {STANDING} AND NOT EXISTS ({gone})"
        " AND size > 0 GROUP BY bottle.number, size, happened_on"
        " HAVING SUM(change) > ? * size ORDER BY happened_on",
        EntryKind.COUNTED,
        as_at.isoformat(),
        EntryKind.DISCARDED,
        MORE,
    )
    return {number: date.fromisoformat(day) for number, day in rows}
