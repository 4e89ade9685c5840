"""What was entered since a plan was kept, told from the row numbers it had then.

Light, as reading is. By number and not by the clock: a clock may be set, and entries
brought in later may have happened before. Where a plan goes by the day (entries, orders),
what had been entered already but happened after the day it was made for counts too, and
what happened after the day looked from does not. A booking, a correction, a row that is
added and a slip put right hold for every day as soon as they are entered: number alone.
"""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date

from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.planning.facts import Happened, HappenedKind
from stockroom.store.kinds import POURED, STANDING, EntryKind
from stockroom.store.reading import Reader, Row

Marks = dict[str, int]

_KINDS = {
    EntryKind.ARRIVED: HappenedKind.ARRIVED,
    EntryKind.MADE: HappenedKind.MADE,
    EntryKind.FOUND: HappenedKind.CHECKED,
    EntryKind.LOOKED: HappenedKind.CHECKED,
    EntryKind.TESTED: HappenedKind.CHECKED,
    EntryKind.DRAWN: HappenedKind.TAKEN,
    EntryKind.OPENED: HappenedKind.TAKEN,
    EntryKind.MOVED: HappenedKind.TAKEN,
}
"""The entries a plan may have foreseen; every other kind is something that befell a bottle."""

_SAID = {
    EntryKind.LOOKED: "looked at",
    EntryKind.LOST: "not found",
    EntryKind.FOUND: "found",
    EntryKind.TESTED: "tested for peroxide",
}


def happened_since(
    reader: Reader, marks: Marks, kept_as_at: date, as_at: date
) -> tuple[Happened, ...]:
    """Everything entered after the marks, or that happened after the day the plan was made for.

    Entries and orders of days after `as_at` are left out, as they are from the plan itself.
    """
    return (
        *_bookings(reader, marks),
        *_entries(reader, marks, kept_as_at, as_at),
        *_placed(reader, marks, kept_as_at, as_at),
        *_placed_changes(reader, marks, kept_as_at, as_at),
        *_corrections(reader, marks),
        *_added(reader, marks),
    )


def _entries(reader: Reader, marks: Marks, kept_as_at: date, as_at: date) -> Iterator[Happened]:
    mark = marks.get("entry", 0)
    rows = reader.ask(
        "SELECT entry.*, bottle.number AS number, line.key AS line_key, line.kind AS line_kind,"
        " place.place AS place FROM entry JOIN bottle ON bottle.id = bottle_id"
        " JOIN line ON line.id = line_id LEFT JOIN place ON place.id = place_id"
        f" WHERE ((entry.id > ? OR happened_on > ?) AND happened_on <= ? AND {STANDING})"
        # a slip the plan did not know of, entered since or of a later day, is missing from it
        # with or without its putting right
        " OR (entry.id > ? AND puts_right IN"
        " (SELECT id FROM entry WHERE id <= ? AND happened_on <= ?))"
        " ORDER BY happened_on, entry.id",
        mark,
        kept_as_at.isoformat(),
        as_at.isoformat(),
        mark,
        mark,
        kept_as_at.isoformat(),
    )
    return map(_entry, rows)


def _entry(row: Row) -> Happened:
    kind = EntryKind(row["kind"])
    said, more = _said(kind, row)
    return Happened(
        kind=_KINDS.get(kind, HappenedKind.BOTTLE),
        subject=row["number"],
        said=f"{row['number']} {said}",
        line=row["line_key"],
        on=date.fromisoformat(row["happened_on"]),
        by=row["by"],
        bookings=tuple(filter(None, row["booking"].split(";"))),
        more=more,
        sense=_sense(kind, row),
    )


def _sense(kind: EntryKind, row: Row) -> int:
    """1 for what leaves less to draw on than there was thought to be, -1 for more."""
    if kind in (EntryKind.LOST, EntryKind.SET_ASIDE, EntryKind.DISCARDED):
        return 1
    if kind is EntryKind.TURNED_UP:
        return -1
    if kind in (EntryKind.LOOKED, EntryKind.TESTED) and row["passed"] is not None:
        return -1 if row["passed"] else 1
    change = int(row["change"])
    return (change < 0) - (change > 0)


def _said(kind: EntryKind, row: Row) -> tuple[str, str]:
    """The words for an entry, and those that stand behind the day and the initials."""
    change = format_amount(Amount(Kind(row["line_kind"]), abs(row["change"])))
    if kind is EntryKind.PUT_RIGHT:
        return f"entry {row['puts_right']} put right", row["reason"]
    if kind is EntryKind.LOOKED:
        return _SAID[kind], "good" if row["passed"] else "not good"
    if kind is EntryKind.FOUND:
        return f"{_SAID[kind]} {row['strength_text']}", ""
    if kind in (EntryKind.DRAWN, EntryKind.SPILLED, EntryKind.LENT, EntryKind.MADE):
        return f"{change} {kind.value}", _for(row)
    if kind in (EntryKind.DECANTED, *POURED):
        return f"{change} {kind.value}", row["note"]
    if kind is EntryKind.MOVED:
        return f"moved to {row['place']}", ""
    if kind is EntryKind.COUNTED:
        # a count that agrees changes no balance, and is worth saying all the same
        more = f", {change} {'more' if row['change'] > 0 else 'less'} than entered"
        return f"counted{more if row['change'] else ''}", ""
    return _SAID.get(kind, kind.value), row["reason"]


def _for(row: Row) -> str:
    return f"for {row['booking'].replace(';', ', ')}" if row["booking"] else row["reason"]


def _bookings(reader: Reader, marks: Marks) -> Iterator[Happened]:
    rows = reader.ask(
        "SELECT number, what, before, after, by, entered_on FROM booking_change"
        " JOIN booking ON booking.id = booking_id WHERE booking_change.id > ?"
        " ORDER BY booking_change.id",
        marks.get("booking_change", 0),
    )
    for row in rows:
        yield Happened(
            HappenedKind.BOOKING,
            row["number"],
            f"{row['number']} {row['what']} {row['before']} → {row['after']}",
            on=date.fromisoformat(row["entered_on"]),
            by=row["by"],
            bookings=(row["number"],),
        )


def _placed(reader: Reader, marks: Marks, kept_as_at: date, as_at: date) -> Iterator[Happened]:
    rows = reader.ask(
        "SELECT placed.*, line.key AS line_key FROM placed JOIN line ON line.id = line_id"
        " WHERE (placed.id > ? OR ordered_on > ?) AND ordered_on <= ?"
        " ORDER BY ordered_on, placed.id",
        marks.get("placed", 0),
        kept_as_at.isoformat(),
        as_at.isoformat(),
    )
    for row in rows:
        said = f"{row['number']} {row['packs']} × {row['pack']} ordered"
        yield Happened(HappenedKind.ORDERED, row["number"], said, row["line_key"],
                       date.fromisoformat(row["ordered_on"]), row["by"])  # fmt: skip


def _placed_changes(
    reader: Reader, marks: Marks, kept_as_at: date, as_at: date
) -> Iterator[Happened]:
    rows = reader.ask(
        "SELECT placed_change.*, placed.number, line.key AS line_key FROM placed_change"
        " JOIN placed ON placed.id = placed_id JOIN line ON line.id = line_id"
        " WHERE (placed_change.id > ? OR happened_on > ?) AND happened_on <= ?"
        # an order of a later day is in no plan yet, whatever was written beside it
        " AND ordered_on <= ? ORDER BY happened_on, placed_change.id",
        marks.get("placed_change", 0),
        kept_as_at.isoformat(),
        as_at.isoformat(),
        as_at.isoformat(),
    )
    for row in rows:
        said = f"{row['number']} {row['what']} {row['after']}".rstrip()
        yield Happened(HappenedKind.LINE, row["number"], said, row["line_key"],
                       date.fromisoformat(row["happened_on"]), row["by"],
                       more=row["why"])  # fmt: skip


def _corrections(reader: Reader, marks: Marks) -> Iterator[Happened]:
    keys = [row[0] for row in reader.ask("SELECT key FROM line ORDER BY LENGTH(key) DESC, id")]
    for row in reader.rows("row_change", "WHERE id > ? ORDER BY id", marks.get("row_change", 0)):
        key = row["row_key"]
        # a pack is named by its line and its size: the longest key that begins it is its line
        line = next((each for each in keys if key == each or key.startswith(f"{each},")), "")
        before, after = row["before"] or "blank", row["after"] or "blank"
        yield Happened(
            HappenedKind.LINE if line else HappenedKind.HOUSE,
            key,
            f"{key}: {row['column_name']} {before} → {after}",
            line=line,
            on=date.fromisoformat(row["entered_on"]),
            by=row["by"],
            more=row["why"],
        )


# rows that hang on a stock line; nobody's initials are kept for a row that is added
_OF_A_LINE = {
    "keeping_rule": "a rule for how it keeps",
    "method": "a method",
    "ingredient": "an ingredient of its method",
    "pack": "a pack",
    "requirement": "a recipe line that asks for it",
}
_OF_THE_HOUSE = {
    "term": "a term",
    "closure": "closed days",
    "balance": "a balance",
    "balance_away": "days a balance is away",
    "vessel": "a vessel",
    "vessel_away": "days a vessel is away",
    "glassware": "glassware",
    "glassware_away": "days a glass is away",
    "reading": "temperatures of a logger",
}


def _added(reader: Reader, marks: Marks) -> Iterator[Happened]:
    for table, words in _OF_A_LINE.items():
        # a table the plan was kept without cannot tell what is new in it
        rows = reader.ask(
            f"SELECT DISTINCT key FROM {table} JOIN line ON line.id = line_id"
            f" WHERE {table}.id > ? ORDER BY key",
            marks.get(table, 0),
        ) if table in marks else []  # fmt: skip
        for row in rows:
            said = f"{row['key']}: {words} was added"
            yield Happened(HappenedKind.LINE, row["key"], said, line=row["key"])
    for table, words in _OF_THE_HOUSE.items():
        if table in marks and _newer(reader, table, marks[table]):
            yield Happened(HappenedKind.HOUSE, table, f"{words} added")


def _newer(reader: Reader, table: str, mark: int) -> bool:
    return bool(reader.ask(f"SELECT 1 FROM {table} WHERE id > ? LIMIT 1", mark))
