"""What left the bottles and was not used: poured away, spilled, lent, counted otherwise."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.measure.amounts import Kind
from stockroom.store.kinds import EntryKind, standing_on
from stockroom.store.reading import Reader

_KINDS = (EntryKind.DISCARDED, EntryKind.SPILLED, EntryKind.LENT, EntryKind.COUNTED)


@dataclass(frozen=True, slots=True)
class LeftBottle:
    """One entry that took something off a bottle; `amount` in micro-units of `kind`.

    `how` is the kind of entry. Below zero is what came back, or was counted more than entered.
    """

    bottle: str
    item: str
    strength: str
    on: date
    amount: int
    kind: Kind
    how: str
    why: str
    way: str
    by: str
    made_here: bool


def left_bottles(reader: Reader, first: date, last: date) -> tuple[LeftBottle, ...]:
    """All of them from the first to the last day, oldest first; slips put right left out."""
    rows = reader.ask(
        "SELECT bottle.number, item, line.strength_text, happened_on, -change, line.kind,"
        " entry_kind, reason, note, by, made_here FROM (SELECT entry.*, entry.kind AS entry_kind"
        f" FROM entry WHERE entry.kind IN (?, ?, ?, ?) AND happened_on BETWEEN ? AND ? AND"
        f" {standing_on(None)}) AS told JOIN bottle ON bottle.id = told.bottle_id"
        " JOIN line ON line.id = bottle.line_id ORDER BY happened_on, told.id",
        *_KINDS,
        first.isoformat(),
        last.isoformat(),
    )
    return tuple(
        LeftBottle(
            number, item, strength, date.fromisoformat(on), amount, Kind(kind), how, why, way, by,
            bool(made),
        )
        for number, item, strength, on, amount, kind, how, why, way, by, made in rows
        # a bottle poured away empty still counts as one; a count that was right is no loss
        if amount or how == EntryKind.DISCARDED
    )  # fmt: skip
