"""The ledger: one function writes an entry, and nothing takes one away.

A bottle's balance is the sum of its changes. What happened and what was typed
when are kept apart, so Friday's draw can be entered on Monday.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date, datetime

from sqlalchemy import func, text
from sqlmodel import Session, col, select

from stockroom.errors import BadDate, BadInput, NotEnough
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount
from stockroom.store.booking_limits import next_number
from stockroom.store.kinds import BEGINNINGS, STANDING, EntryKind
from stockroom.store.tables import Booking, Bottle, Entry, Line

FULLEST = 1.05
"""More than this part of a bottle's size in it is a slip. Common practice, no source."""


@dataclass(frozen=True, slots=True)
class Stamp:
    """When it happened, when it was entered, and the initials of who entered it."""

    happened_on: date
    entered_on: date
    entered_at: datetime
    by: str


@dataclass(frozen=True, slots=True)
class Event:
    """What happened. `change` is signed, in micro-units; blank means nothing to say."""

    kind: EntryKind
    change: int = 0
    strength: float | None = None
    strength_text: str = ""
    uncertainty: float | None = None
    peroxide_mg_kg: float | None = None
    passed: bool | None = None
    place_id: int | None = None
    reason: str = ""
    note: str = ""
    booking: str = ""
    puts_right: int | None = None
    about: bool = False
    walk_id: int | None = None


def append(session: Session, bottle: Bottle, event: Event, stamp: Stamp) -> Entry:
    """Write one entry and return it, numbered.

    A change that happened before a later count leaves that count true: what was
    counted was seen, so the difference is evened out on the day of the count.

    Raises: BadInput without initials; BadDate before the bottle was there;
    NotEnough for more than the bottle holds.
    """
    if not stamp.by.strip():
        raise BadInput("Whose initials?", "Add --by T1, or set STOCKROOM_BY.")
    _check_begun(session, bottle, event, stamp.happened_on)
    count = _count_after(session, bottle, event, stamp.happened_on) if event.change else None
    evening = _evening(count, event) if count else None
    # evened out first when it adds, or a full bottle's late draw would look too large
    if evening and count and evening.change > 0:
        _write(session, bottle, evening, stamp, count.happened_on)
    entry = _write(session, bottle, event, stamp, stamp.happened_on)
    if evening and count and evening.change < 0:
        _write(session, bottle, evening, stamp, count.happened_on)
    return entry


def left(session: Session, bottle: Bottle) -> int:
    """What the bottle holds, in micro-units: the sum of everything ever entered for it."""
    # everything, put right or not: the pairs cancel, and the trigger sums the same way
    total = select(func.coalesce(func.sum(Entry.change), 0)).where(Entry.bottle_id == bottle.id)
    return int(session.exec(total).one())


def entries_of(session: Session, bottle: Bottle) -> list[Entry]:
    """The entries that still hold, in the order things happened; put-right pairs left out."""
    kept = select(Entry).where(Entry.bottle_id == bottle.id, text(STANDING))
    return list(session.exec(kept.order_by(col(Entry.happened_on), col(Entry.id))))


def amount_of(session: Session, bottle: Bottle, micro: int) -> Amount:
    """Micro-units of what is in the bottle as an amount with its kind."""
    return Amount(Kind(session.get_one(Line, bottle.line_id).kind), micro)


def overfull(bottle: Bottle, micro: int) -> bool:
    """Whether so many micro-units are over 5 % more than the bottle holds when full."""
    # makers fill a little over; a size that nobody wrote down is 0 and tells nothing
    return 0 < bottle.size * FULLEST < micro


def next_bottle_number(session: Session, *, made_here: bool) -> str:
    """The next label number: B for bought, S for made here; numbers are never used again."""
    return next_number("S" if made_here else "B", session.exec(select(Bottle.number)).all())


def next_booking_number(session: Session) -> str:
    """The next booking number: K and digits."""
    return next_number("K", session.exec(select(Booking.number)).all())


def _write(
    session: Session, bottle: Bottle, event: Event, stamp: Stamp, happened_on: date
) -> Entry:
    _check_enough(session, bottle, event)
    assert bottle.id is not None
    entry = Entry(
        bottle_id=bottle.id,
        kind=event.kind.value,
        happened_on=happened_on,
        entered_on=stamp.entered_on,
        entered_at=stamp.entered_at.isoformat(sep=" "),
        by=stamp.by.strip(),
        change=event.change,
        strength=event.strength,
        strength_text=event.strength_text,
        uncertainty=event.uncertainty,
        peroxide_mg_kg=event.peroxide_mg_kg,
        passed=event.passed,
        place_id=event.place_id,
        reason=event.reason,
        note=event.note,
        booking=event.booking,
        puts_right=event.puts_right,
        about=event.about,
        walk_id=event.walk_id,
    )
    session.add(entry)
    # numbered at once: the next sum, and the trigger, must see it
    session.flush()
    return entry


def _check_enough(session: Session, bottle: Bottle, event: Event) -> None:
    # asked here for the words; the trigger is what holds when two write at once
    if event.change >= 0:
        return
    held = left(session, bottle)
    if held + event.change < 0:
        has = format_amount(amount_of(session, bottle, held))
        asked = format_amount(amount_of(session, bottle, -event.change))
        raise NotEnough(
            f"{bottle.number} holds {has}; {asked} asked.", "Count it, then put it right."
        )


def _check_begun(session: Session, bottle: Bottle, event: Event, on: date) -> None:
    if event.kind in BEGINNINGS:
        return
    first = [entry.happened_on for entry in entries_of(session, bottle) if entry.kind in BEGINNINGS]
    if not first or on < first[0]:
        what = f"{event.kind.capitalize()} {spell_day(on)}"
        raise before_it_was_there(bottle, what, first[0] if first else None)


def before_it_was_there(bottle: Bottle, what: str, begun: date | None) -> BadDate:
    """The error for something said of a bottle earlier than it arrived or was made."""
    day = begun or bottle.made_on or bottle.received_on
    how = "was made" if bottle.made_here else "arrived"
    when = f" {spell_day(day)}" if day else ""
    return BadDate(f"{what} is before {bottle.number} {how}{when}.", "One of these is wrong.")


def _count_after(session: Session, bottle: Bottle, event: Event, happened_on: date) -> Entry | None:
    """The first count, still standing, of a later day than the change took effect."""
    # a reversal takes effect on the day of the slip, whenever it is entered
    original = session.get(Entry, event.puts_right) if event.puts_right else None
    since = original.happened_on if original else happened_on
    counts = [
        entry
        for entry in entries_of(session, bottle)
        if entry.kind == EntryKind.COUNTED and entry.happened_on > since
    ]
    return counts[0] if counts else None


def made_note(number: str) -> str:
    """The note on a draw that went into a bottle made here."""
    return f"into {number}"


def opened_note(draw_id: int | None) -> str:
    """The note on an opening nobody entered: a sealed bottle was drawn from."""
    return f"by the draw of entry {draw_id}"


def evening_note(count_id: int | None) -> str:
    """The note on the entry that keeps an earlier count true."""
    return f"keeps the count of entry {count_id} as it was"


def _evening(count: Entry, event: Event) -> Event:
    return Event(EntryKind.COUNTED, change=-event.change, note=evening_note(count.id))
