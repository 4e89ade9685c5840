"""The ledger of one bottle as it was written, slips and their putting-right included."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from pathlib import Path

from stockroom.measure.amounts import Amount, Kind
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import Reader, Row, reading


@dataclass(frozen=True, slots=True)
class Told:
    """One entry. `puts_right` is the entry it undoes, `undone_by` the one that undid it."""

    entry: int
    happened: date
    entered: date
    by: str
    kind: str
    change: Amount
    said: str = ""
    place: str = ""
    booking: str = ""
    puts_right: int | None = None
    undone_by: int | None = None


def diary(path: Path, bottle: str) -> tuple[Told, ...]:
    """Everything entered for a bottle, in the order it happened.

    Raises: UnknownName with the nearest three numbers; StoreTrouble.
    """
    with reading(path) as reader:
        row = _bottle(reader, bottle)
        kind = Kind(reader.rows("line", "WHERE id = ?", row["line_id"])[0]["kind"])
        places = reader.pairs("SELECT id, place FROM place")
        undone = reader.pairs("SELECT puts_right, id FROM entry WHERE puts_right IS NOT NULL")
        entries = reader.rows("entry", "WHERE bottle_id = ? ORDER BY happened_on, id", row["id"])
        return tuple(_told(entry, kind, places, undone) for entry in entries)


def _bottle(reader: Reader, number: str) -> Row:
    rows = reader.rows("bottle")
    # compared in Python: SQL's lower() knows no look-alike letters
    for row in rows:
        if plain(row["number"]) == plain(number):
            return row
    raise unknown("bottle", number, (row["number"] for row in rows))


def _told(entry: Row, kind: Kind, places: dict[int, str], undone: dict[int, int]) -> Told:
    said = [entry["strength_text"], entry["reason"], entry["note"]]
    if entry["passed"] is not None:
        said.insert(0, "passed" if entry["passed"] else "did not pass")
    return Told(
        entry=entry["id"],
        happened=date.fromisoformat(entry["happened_on"]),
        entered=date.fromisoformat(entry["entered_on"]),
        by=entry["by"],
        kind=entry["kind"],
        change=Amount(kind, entry["change"]),
        said="; ".join(part for part in said if part),
        place=places.get(entry["place_id"], ""),
        booking=entry["booking"],
        puts_right=entry["puts_right"],
        undone_by=undone.get(entry["id"]),
    )
