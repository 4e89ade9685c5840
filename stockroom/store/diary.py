"""The ledger of one bottle as it was written, slips and their putting-right included."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.measure.amounts import Amount, Kind
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import Reader, Row, reading


@dataclass(frozen=True, slots=True)
class Told:
    """One entry. `puts_right` is the entry it undoes, `undone_by` the one that undid it.

    `left` is what the bottle holds after it. An entry put right and the one that
    did it leave that as it was, as if the slip had never happened.
    """

    entry: int
    happened: date
    entered: date
    by: str
    kind: str
    change: Amount
    left: Amount
    said: str = ""
    place: str = ""
    booking: str = ""
    puts_right: int | None = None
    undone_by: int | None = None


@dataclass(frozen=True, slots=True)
class Diary:
    """The story of one bottle: its number, the line it holds, and its entries."""

    bottle: str
    line: str
    entries: tuple[Told, ...]


def diary(path: StoreAt, bottle: str) -> tuple[Told, ...]:
    """Everything entered for a bottle, in the order it happened.

    Raises: UnknownName with the nearest three numbers; StoreTrouble.
    """
    return diary_of(path, bottle).entries


def diary_of(path: StoreAt, bottle: str) -> Diary:
    """The same, with the bottle's number and what it holds. Raises: as `diary`."""
    with reading(path) as reader:
        row = _bottle(reader, bottle)
        line = reader.rows("line", "WHERE id = ?", row["line_id"])[0]
        places = reader.pairs("SELECT id, place FROM place")
        undone = reader.pairs("SELECT puts_right, id FROM entry WHERE puts_right IS NOT NULL")
        entries = reader.rows("entry", "WHERE bottle_id = ? ORDER BY happened_on, id", row["id"])
        told, left = [], 0
        for entry in entries:
            if entry["id"] not in undone and entry["puts_right"] is None:
                left += entry["change"]
            told.append(_told(entry, Amount(Kind(line["kind"]), left), places, undone))
        return Diary(row["number"], line["key"], tuple(told))


def _bottle(reader: Reader, number: str) -> Row:
    # every bottle, gone ones too: it is their story that is asked for last
    rows = reader.rows("bottle")
    # compared in Python: SQL's lower() knows no look-alike letters
    for row in rows:
        if plain(row["number"]) == plain(number):
            return row
    raise unknown("bottle", number, (row["number"] for row in rows))


def _told(entry: Row, left: Amount, places: dict[int, str], undone: dict[int, int]) -> Told:
    said = [entry["strength_text"], entry["reason"], entry["note"]]
    if entry["passed"] is not None:
        said.insert(0, "passed" if entry["passed"] else "did not pass")
    return Told(
        entry=entry["id"],
        happened=date.fromisoformat(entry["happened_on"]),
        entered=date.fromisoformat(entry["entered_on"]),
        by=entry["by"],
        kind=entry["kind"],
        change=Amount(left.kind, entry["change"]),
        left=left,
        said="; ".join(part for part in said if part),
        place=places.get(entry["place_id"], ""),
        booking=entry["booking"],
        puts_right=entry["puts_right"],
        undone_by=undone.get(entry["id"]),
    )
