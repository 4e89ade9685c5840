"""Why the house is shut on a day, where somebody wrote it down. Light, as reading is."""

from __future__ import annotations

from datetime import date, timedelta

from stockroom.service.kept import kept
from stockroom.settings import StoreAt
from stockroom.store.reading import reading


def why_closed(path: StoreAt, first: date, last: date) -> dict[date, str]:
    """The reason written for each closed day from `first` to `last`; weekends have none."""
    spans = kept(path, "closures", (), lambda: _spans(path))
    days = [first + timedelta(days=number) for number in range((last - first).days + 1)]
    return {day: reason for day in days for starts, ends, reason in spans if starts <= day <= ends}


def _spans(path: StoreAt) -> list[tuple[date, date, str]]:
    with reading(path) as reader:
        rows = reader.rows("closure", "ORDER BY starts_on, id")
    return [
        (date.fromisoformat(row["starts_on"]), date.fromisoformat(row["ends_on"]), row["reason"])
        for row in rows
    ]
