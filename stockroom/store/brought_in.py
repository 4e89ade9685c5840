"""Many bottles at once, with what happened to each: a list brought in from a spreadsheet."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass
from datetime import date

from sqlalchemy import func, insert
from sqlmodel import Session, SQLModel, col, select

from stockroom.store.booking_limits import next_number
from stockroom.store.ledger import Event, Stamp
from stockroom.store.tables import Bottle, Entry

_BOTTLES, _ENTRIES = SQLModel.metadata.tables["bottle"], SQLModel.metadata.tables["entry"]
_BLANK = Bottle(number="", line_id=0, size=0).model_dump(exclude={"id"})
_BLANK_ENTRY = Entry(
    bottle_id=0, kind="", happened_on=date.min, entered_on=date.min, entered_at="", by=""
).model_dump(exclude={"id"})


@dataclass(frozen=True, slots=True)
class NewBottle:
    """A bottle to be written, without its number, and what happened to it, day by day.

    `row` is its columns by name; those it leaves out are blank.
    """

    made_here: bool
    row: dict[str, object]
    events: tuple[tuple[date, Event], ...]


def add_bottles(session: Session, new: Sequence[NewBottle], stamp: Stamp) -> list[str]:
    """Write bottles and their entries, two statements for all of them; their numbers.

    Each bottle's first event must begin it, and no later one may be of an earlier day: then
    nothing that `ledger.append` asks of an entry can fail, and the guards see the balances.
    The stamp's own day is not used: each event has its own.
    """
    numbers = _numbers(session, new)
    if not numbers:
        return []
    rows = [{**_BLANK, **one.row, "number": each} for one, each in zip(new, numbers, strict=True)]
    last = session.exec(select(func.coalesce(func.max(Bottle.id), 0))).one()
    # through the table and not its class: one statement for all, whatever is blank
    session.connection().execute(insert(_BOTTLES), rows)
    found = session.exec(select(Bottle.number, Bottle.id).where(col(Bottle.id) > last))
    ids = dict(found.all())
    entries = [
        _entry(ids[number], on, event, stamp)
        for one, number in zip(new, numbers, strict=True)
        for on, event in one.events
    ]
    # asking the store about each bottle first, as for one alone, takes ten times as long
    session.connection().execute(insert(_ENTRIES), entries)
    return numbers


def _numbers(session: Session, new: Sequence[NewBottle]) -> list[str]:
    used = session.exec(select(Bottle.number)).all()
    following = {letter: int(next_number(letter, used)[1:]) for letter in "BS"}
    numbers = []
    for one in new:
        letter = "S" if one.made_here else "B"
        numbers.append(f"{letter}{following[letter]:02d}")
        following[letter] += 1
    return numbers


def _entry(bottle_id: int | None, on: date, event: Event, stamp: Stamp) -> dict[str, object]:
    return {
        **_BLANK_ENTRY,
        "bottle_id": bottle_id,
        "kind": event.kind.value,
        "happened_on": on,
        "entered_on": stamp.entered_on,
        "entered_at": stamp.entered_at.isoformat(sep=" "),
        "by": stamp.by.strip(),
        "change": event.change,
        "place_id": event.place_id,
        "reason": event.reason,
        "note": event.note,
        "about": event.about,
    }
