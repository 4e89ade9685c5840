"""What a successor has to be told beside the plan: settings, closures, changes, backups, hands."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.settings import StoreAt
from stockroom.store.reading import Reader, Row, reading


@dataclass(frozen=True, slots=True)
class Changed:
    """What was corrected in a table of the house: by whom, when, why, and both wordings."""

    table: str
    row: str
    column: str
    before: str
    after: str
    why: str
    by: str
    on: str


@dataclass(frozen=True, slots=True)
class Hand:
    """Initials in the ledger: how many entries, from which day to which."""

    initials: str
    entries: int
    first: date
    last: date


@dataclass(frozen=True, slots=True)
class Kept:
    """All of it. `terms` is how many are entered.

    `backup` is the day and place of the last copy made, None for never.
    """

    store: str
    terms: int
    settings: tuple[tuple[str, str], ...]
    closures: tuple[tuple[date, date, str], ...]
    changes: tuple[Changed, ...]
    hands: tuple[Hand, ...]
    backup: tuple[date, str] | None


def kept_of(path: StoreAt, as_at: date) -> Kept:
    """What the store holds of it up to a day."""
    with reading(path) as reader:
        backups = reader.rows("backup_made", "ORDER BY entered_on DESC, id DESC LIMIT 1")
        return Kept(
            store=str(path),
            terms=len(reader.rows("term", "")),
            settings=tuple((row["setting"], row["value"]) for row in reader.rows("house", "")),
            closures=_closures(reader, as_at),
            changes=tuple(_changed(row) for row in reader.rows("row_change")),
            hands=_hands(reader),
            backup=(date.fromisoformat(backups[0]["entered_on"]), str(backups[0]["place"]))
            if backups
            else None,
        )


def _closures(reader: Reader, as_at: date) -> tuple[tuple[date, date, str], ...]:
    rows = reader.rows("closure", "WHERE ends_on >= ? ORDER BY starts_on, id", as_at.isoformat())
    return tuple(
        (date.fromisoformat(r["starts_on"]), date.fromisoformat(r["ends_on"]), r["reason"])
        for r in rows
    )


def _changed(row: Row) -> Changed:
    return Changed(
        row["table_name"], row["row_key"], row["column_name"], row["before"], row["after"],
        row["why"], row["by"], row["entered_on"],
    )  # fmt: skip


def _hands(reader: Reader) -> tuple[Hand, ...]:
    rows = reader.ask(
        'SELECT "by", COUNT(*), MIN(entered_on), MAX(entered_on) FROM entry GROUP BY "by"'
        ' ORDER BY "by"'
    )
    return tuple(
        Hand(by, count, date.fromisoformat(first), date.fromisoformat(last))
        for by, count, first, last in rows
    )
