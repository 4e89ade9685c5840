"""What bottles held at the end of each day gone by, as the entries that still hold have it.

Within a day the order of what happened is not known, so only its end is asked about.
"""

from __future__ import annotations

from collections.abc import Collection
from datetime import date

from stockroom.store.kinds import STANDING
from stockroom.store.reading import Reader


def least_held(
    reader: Reader, bottle: int | None, since: date, until: date
) -> tuple[date, int] | None:
    """The least a bottle (by its id) held from `since` on and before `until`, and on what day.

    In micro-units, at the end of that day, the first of several; None where no day is between.
    """
    if since >= until:
        return None
    days = reader.pairs(
        "SELECT happened_on, SUM(change) FROM entry"
        f" WHERE bottle_id = ? AND happened_on < ? AND {STANDING} GROUP BY happened_on",
        bottle,
        until.isoformat(),
    )
    changes = {date.fromisoformat(day): int(change) for day, change in days.items()}
    held = sum(change for day, change in changes.items() if day <= since)
    least = (since, held)
    for day in sorted(day for day in changes if day > since):
        held += changes[day]
        if held < least[1]:
            least = (day, held)
    return least


def below(bottles: Collection[int]) -> str:
    """SQL for the first day each of the bottles (by id) was below nothing at the end of it.

    It gives number, day, amount in micro-units, and kind.
    """
    # past so many the list would cost more than the entries of all the others; our choice
    few = len(bottles) <= 5_000
    among = f" AND bottle_id IN ({', '.join(str(int(one)) for one in bottles)})" if few else ""
    return _BELOW.format(among=among)


_BELOW = (
    "SELECT number, day, held, kind FROM (SELECT bottle.number, day, held, line.kind,"
    " ROW_NUMBER() OVER (PARTITION BY bottle.id ORDER BY day) AS nth"
    " FROM (SELECT bottle_id, day, SUM(change) OVER (PARTITION BY bottle_id ORDER BY day) AS held"
    " FROM (SELECT bottle_id, happened_on AS day, SUM(change) AS change FROM entry"
    f" WHERE {STANDING}{{among}} GROUP BY bottle_id, happened_on) AS daily) AS running"
    " JOIN bottle ON bottle.id = bottle_id JOIN line ON line.id = line_id"
    " WHERE held < 0) AS below WHERE nth = 1 ORDER BY number"
)
