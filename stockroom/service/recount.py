"""One bottle counted inside a unit of work, alone or on a walk along the shelves."""

from __future__ import annotations

from dataclasses import dataclass

from stockroom.errors import NotAllowed
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_about, format_amount
from stockroom.service.counting import difference, which_it_was
from stockroom.service.walk import check_not_ended, no_walk, walk_from
from stockroom.service.work import Work, check_at_hand, check_kind
from stockroom.store import walks as rows
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event, overfull
from stockroom.store.reading import Row
from stockroom.store.tables import Bottle, Entry


@dataclass(frozen=True, slots=True)
class Round:
    """The walk a count belongs to: its name and its row; "" and None for a count by itself."""

    name: str = ""
    walk_id: int | None = None


@dataclass(frozen=True, slots=True)
class Recount:
    """What a count came to: its entry, how it differs in micro-units, and what that may mean."""

    entry: Entry
    change: int
    text: str
    details: tuple[str, ...] = ()


def count_in(
    work: Work,
    bottle: Bottle,
    amount: Amount,
    *,
    walk: Round,
    about: bool = False,
    sure: bool = False,
    confirm: str = "--sure",
) -> Recount:
    """Write what is really in a bottle; the difference is an entry, nothing is rubbed out.

    Zero is a count; `about` an estimate by eye. Raises: BadAmount for the wrong kind; NotAllowed
    for over 5 % more than the bottle's size, unless `sure`, which `confirm` says how to say.
    """
    check_kind(work.line(bottle), amount)
    if overfull(bottle, amount.micro) and not sure:
        raise NotAllowed(
            f"{bottle.number} holds {work.say(bottle, bottle.size)} when full;"
            f" {format_amount(amount)} counted?",
            f"Check the unit, or confirm with {confirm}.",
        )
    # against what was there on the day of the count, not today
    seen = check_at_hand(work, bottle)
    before = seen.left
    # asked before the entry, which would itself be the last count
    details = () if about else which_it_was(work, bottle, before, amount.micro)
    change = amount.micro - before
    event = Event(
        EntryKind.COUNTED, change=change, note=walk.name, about=about, walk_id=walk.walk_id
    )
    entry = work.write(bottle, event)
    # an empty bottle is seen to be empty
    said = format_about(amount) if about and amount.micro else format_amount(amount)
    differs = difference(work, bottle, change, about=about or seen.about)
    text = f"Counted {said} of {work.called(bottle)}{differs}"
    return Recount(entry, change, text, details)


def round_named(work: Work, name: str) -> Round:
    """The walk a count is said to be of, none for "".

    Raises: UnknownName for one nobody started; NotAllowed when it was ended.
    """
    if not name.strip():
        return Round()
    row = rows.walk_named(work.reader, name)
    if row is None:
        raise no_walk(name, [str(each["name"]) for each in rows.walks(work.reader)])
    check_not_ended(walk_from(work.reader, row))
    return Round(row["name"], row["id"])


def check_first(work: Work, bottle: Bottle, walk: Round, again: str) -> None:
    """Pass unless the bottle was counted in this walk already. Raises: NotAllowed."""
    before = counted_before(work, bottle, walk)
    if before is not None:
        raise NotAllowed(
            f'{bottle.number} was counted in "{walk.name}" already, by {before["by"]} on'
            f" {before['happened_on']}: {counted_as(work, bottle, before)}"
            f" (entry {before['id']}).",
            f"If it was counted again, {again}; if that was a slip: stockroom put-right"
            f" {before['id']}.",
        )


def counted_before(work: Work, bottle: Bottle, walk: Round) -> Row | None:
    """The last entry that this walk made for the bottle, None when it has not met it."""
    if walk.walk_id is None or bottle.id is None:
        return None
    entries = rows.entries_for(work.reader, bottle.id)
    own = [row for row in entries if row["walk_id"] == walk.walk_id]
    # where it stood is no count: what was said of its contents comes first
    return max(own, key=lambda row: (row["kind"] != EntryKind.MOVED, row["id"]), default=None)


def counted_as(work: Work, bottle: Bottle, entry: Row) -> str:
    """What a walk said of a bottle, in words: "640 g", "not found"."""
    if entry["kind"] != EntryKind.COUNTED:
        return "not found" if entry["kind"] == EntryKind.LOST else "seen"
    assert bottle.id is not None
    held = rows.left_after(rows.entries_for(work.reader, bottle.id), entry)
    amount = Amount(Kind(work.line(bottle).kind), held)
    return format_about(amount) if entry["about"] and held else format_amount(amount)
