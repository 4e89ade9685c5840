"""Walks along the shelves: the rows, and the entries made under their names. Only reads."""

from __future__ import annotations

from stockroom.store.kinds import STANDING, EntryKind, evened_count
from stockroom.store.likeness import plain
from stockroom.store.reading import Reader, Row


def walks(reader: Reader) -> list[Row]:
    """Every walk, the earliest first."""
    return reader.rows("walk")


def walk_named(reader: Reader, name: str) -> Row | None:
    """The walk of that name, None when nobody started one."""
    # compared in Python: SQL's lower() knows no look-alike letters
    return next((row for row in walks(reader) if plain(row["name"]) == plain(name)), None)


def end_of(reader: Reader, walk_id: int) -> Row | None:
    """When and by whom a walk was finished, None while it can be taken up again."""
    rows = reader.rows("walk_end", "WHERE walk_id = ?", walk_id)
    return rows[0] if rows else None


def met_by(reader: Reader, walk_id: int) -> dict[int, list[Row]]:
    """Of each bottle the walk met, every standing entry in the order things happened."""
    met = "SELECT bottle_id FROM entry WHERE walk_id = ?"
    tail = f"WHERE bottle_id IN ({met}) AND {STANDING} ORDER BY bottle_id, happened_on, id"
    found: dict[int, list[Row]] = {}
    for row in reader.rows("entry", tail, walk_id):
        found.setdefault(row["bottle_id"], []).append(row)
    # what the walk wrote may all have been put right since
    return {
        bottle: rows
        for bottle, rows in found.items()
        if any(row["walk_id"] == walk_id for row in rows)
    }


def entries_for(reader: Reader, bottle_id: int) -> list[Row]:
    """The standing entries of one bottle, in the order things happened."""
    return reader.rows(
        "entry", f"WHERE bottle_id = ? AND {STANDING} ORDER BY happened_on, id", bottle_id
    )


def left_after(entries: list[Row], entry: Row) -> int:
    """What a bottle held after one of its entries, in micro-units, as that is known now.

    What was written up later, and evened out so that the count stays true, is in it.
    """
    until = (entry["happened_on"], entry["id"])
    return sum(
        int(row["change"])
        for row in entries
        if (row["happened_on"], row["id"]) <= until or _evens(row) == entry["id"]
    )


def difference_by(entries: list[Row], entry: Row) -> int:
    """What a count found more or less than was entered, by all that has been entered since."""
    later = sum(int(row["change"]) for row in entries if _evens(row) == entry["id"])
    return int(entry["change"]) + later


def _evens(row: Row) -> int | None:
    """The count an entry keeps true, None for an entry of its own."""
    return evened_count(row["note"]) if row["kind"] == EntryKind.COUNTED else None
