"""The ledger of one bottle as it was written, slips and their putting-right included."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date

from stockroom.measure.amounts import Amount, Kind
from stockroom.settings import StoreAt
from stockroom.store.estimates import about_after
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
    about: bool = False
    """Whether `left` was judged by eye, and neither counted nor weighed since."""


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


def diary_of(path: StoreAt, bottle: str, known_on: date | None = None) -> Diary:
    """The same, with the bottle's number and what it holds. Raises: as `diary`.

    With `known_on`, only what was entered by the end of that day, as it stood then.
    """
    with reading(path) as reader:
        row = _bottle(reader, bottle)
        last = known_on or date.max
        return _diary(reader, row, *_beside(reader, last), last)


def diaries(reader: Reader) -> Iterator[Diary]:
    """The story of every bottle, gone ones too, in the order their numbers were given."""
    beside = _beside(reader)
    for row in reader.rows("bottle"):
        yield _diary(reader, row, *beside)


def _beside(reader: Reader, last: date = date.max) -> tuple[dict[int, str], dict[int, int]]:
    """The places by number, and what undid each entry that was put right by a day."""
    undone = "SELECT puts_right, id FROM entry WHERE puts_right IS NOT NULL AND entered_on <= ?"
    return (
        reader.pairs("SELECT id, place FROM place"),
        reader.pairs(undone, last.isoformat()),
    )


def _diary(
    reader: Reader,
    row: Row,
    places: dict[int, str],
    undone: dict[int, int],
    last: date = date.max,
) -> Diary:
    line = reader.rows("line", "WHERE id = ?", row["line_id"])[0]
    told, left, about, kind = [], 0, False, Kind(line["kind"])
    tail = "WHERE bottle_id = ? AND entered_on <= ? ORDER BY happened_on, id"
    for entry in reader.rows("entry", tail, row["id"], last.isoformat()):
        if entry["id"] not in undone and entry["puts_right"] is None:
            left += entry["change"]
            about = about_after(entry, about)
        told.append(_told(entry, Amount(kind, left), places, undone, about=about))
    return Diary(row["number"], line["key"], tuple(told))


def _bottle(reader: Reader, number: str) -> Row:
    # every bottle, gone ones too: it is their story that is asked for last
    rows = reader.rows("bottle")
    # compared in Python: SQL's lower() knows no look-alike letters
    for row in rows:
        if plain(row["number"]) == plain(number):
            return row
    raise unknown("bottle", number, (row["number"] for row in rows))


def _told(
    entry: Row, left: Amount, places: dict[int, str], undone: dict[int, int], *, about: bool
) -> Told:
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
        about=about,
    )
