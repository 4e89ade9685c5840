"""The ledger: one function writes an entry, and nothing takes one away.

A bottle's balance is the sum of its changes; a trigger keeps a copy of that sum with
every entry. What happened and what was typed when are kept apart, so Friday's draw can
be entered on Monday.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date, datetime
from typing import Any

from sqlalchemy import insert, text
from sqlmodel import Session, col, select

from stockroom.errors import BadDate, BadInput, NotEnough
from stockroom.measure.amounts import Amount, Kind, over_full
from stockroom.measure.days import spell_day
from stockroom.measure.formats import format_amount
from stockroom.store.booking_limits import next_number
from stockroom.store.days_held import least_held
from stockroom.store.engine import reader_in
from stockroom.store.kinds import (
    BEGINNINGS,
    EVENED,
    STANDING,
    EntryKind,
    evening_note,
    is_by_draw,
)

# whoever writes an entry finds here the words it carries
from stockroom.store.kinds import opened_note as opened_note
from stockroom.store.remembered import forget
from stockroom.store.tables import Booking, Bottle, Entry, Line


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
    counted was seen, so the difference is evened out on the day of the count. What was
    thrown away is as good as counted.

    Raises: BadInput without initials; BadDate before the bottle was there; NotEnough for
    more than the bottle holds, or held on any day from the one it happened up to that count.
    """
    if not stamp.by.strip():
        raise BadInput("Whose initials?", "Add --by T1, or set STOCKROOM_BY.")
    _check_begun(session, bottle, event, stamp.happened_on)
    took_effect = _effect(session, event, stamp.happened_on)
    count = _count_after(session, bottle, took_effect) if event.change else None
    _check_enough_then(session, bottle, event, stamp, took_effect, count)
    evening = _evening(count, event) if count else None
    # evened out first when it adds, or a full bottle's late draw would look too large
    if evening and count and evening.change > 0:
        _write(session, bottle, evening, stamp, count.happened_on)
    entry = _write(session, bottle, event, stamp, stamp.happened_on)
    if evening and count and evening.change < 0:
        _write(session, bottle, evening, stamp, count.happened_on)
    return entry


def left(session: Session, bottle: Bottle) -> int:
    """What the bottle holds, in micro-units: the kept sum of everything ever entered for it."""
    # everything, put right or not: the pairs cancel
    held = reader_in(session).ask("SELECT held FROM kept_balance WHERE bottle_id = ?", bottle.id)
    return int(held[0][0]) if held else 0


def entries_of(session: Session, bottle: Bottle, kind: EntryKind | None = None) -> list[Entry]:
    """The entries that still hold, in the order things happened; put-right pairs left out.

    Of one `kind` alone where it is given: a bottle in daily use has a thousand draws.
    """
    kept = select(Entry).where(Entry.bottle_id == bottle.id, text(STANDING))
    if kind is not None:
        kept = kept.where(Entry.kind == kind)
    return list(session.exec(kept.order_by(col(Entry.happened_on), col(Entry.id))))


def first_of(session: Session, bottle: Bottle, kind: EntryKind) -> Entry | None:
    """The first of a kind that still holds, None where there is none."""
    which = f"bottle_id = ? AND kind = ? AND {STANDING} ORDER BY happened_on, id LIMIT 1"
    found = reader_in(session).ask(f"SELECT id FROM entry WHERE {which}", bottle.id, kind)
    return session.get(Entry, found[0][0]) if found else None


def amount_of(session: Session, bottle: Bottle, micro: int) -> Amount:
    """Micro-units of what is in the bottle as an amount with its kind."""
    return Amount(Kind(session.get_one(Line, bottle.line_id).kind), micro)


def overfull(bottle: Bottle, micro: int) -> bool:
    """Whether so many micro-units are over 5 % more than the bottle holds when full."""
    # makers fill a little over; a size that nobody wrote down is 0 and tells nothing
    return over_full(bottle.size, micro)


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
    values = row_of(bottle.id, event, stamp, happened_on)
    # past the session's own bookkeeping, which costs more than the entry; so what waits goes first
    session.flush()
    key = session.connection().execute(ADDED, values).inserted_primary_key
    forget(session)
    assert key is not None
    return Entry(id=key[0], **values)


ADDED = insert(Entry)
"""What puts rows of `row_of` into the ledger."""


def row_of(bottle: int, event: Event, stamp: Stamp, happened_on: date) -> dict[str, Any]:
    """An entry as the table has it, still without its number."""
    return {
        "bottle_id": bottle,
        "kind": event.kind.value,
        "happened_on": happened_on,
        "entered_on": stamp.entered_on,
        "entered_at": stamp.entered_at.isoformat(sep=" "),
        "by": stamp.by.strip(),
        "change": event.change,
        "strength": event.strength,
        "strength_text": event.strength_text,
        "uncertainty": event.uncertainty,
        "peroxide_mg_kg": event.peroxide_mg_kg,
        "passed": event.passed,
        "place_id": event.place_id,
        "reason": event.reason,
        "note": event.note,
        "booking": event.booking,
        "puts_right": event.puts_right,
        "about": event.about,
        "walk_id": event.walk_id,
    }


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


@dataclass(frozen=True, slots=True)
class _Effect:
    """When a change counts from: the day, and after which entry of that day."""

    on: date
    after: int | None = None


def _effect(session: Session, event: Event, happened_on: date) -> _Effect:
    # a reversal takes effect when the slip did, whenever it is entered
    original = session.get(Entry, event.puts_right) if event.puts_right else None
    return _Effect(original.happened_on, original.id) if original else _Effect(happened_on)


def _check_enough_then(
    session: Session,
    bottle: Bottle,
    event: Event,
    stamp: Stamp,
    effect: _Effect,
    count: Entry | None,
) -> None:
    # what is written late may be too much for a day gone by, whatever the bottle holds by now
    if event.change >= 0 or effect.on >= stamp.entered_on:
        return
    until = count.happened_on if count else date.max
    least = least_held(reader_in(session), bottle.id, effect.on, until)
    if least is None or least[1] + event.change >= 0:
        return
    least_on, held = least
    has = format_amount(amount_of(session, bottle, max(0, held)))
    asked = format_amount(amount_of(session, bottle, -event.change))
    text = f"{bottle.number} held {has} on {spell_day(least_on)}; {asked} asked"
    raise NotEnough(
        f"{text}{f' of {spell_day(effect.on)}' if least_on > effect.on else ''}.",
        f"Count it as of that day, then put it right: stockroom count {bottle.number} …"
        f" --on {least_on}",
    )


def _check_begun(session: Session, bottle: Bottle, event: Event, on: date) -> None:
    if event.kind in BEGINNINGS:
        return
    marks = ", ".join("?" * len(BEGINNINGS))
    of_kind = f"bottle_id = ? AND kind IN ({marks}) AND {STANDING}"
    first = _first_day(session, of_kind, bottle.id, *BEGINNINGS)
    if first is None or on < first:
        raise before_it_was_there(bottle, f"{event.kind.capitalize()} {spell_day(on)}", first)


def _first_day(session: Session, which: str, *values: object) -> date | None:
    """The earliest day of the entries of a condition in SQL; None where there are none."""
    found = reader_in(session).ask(f"SELECT MIN(happened_on) FROM entry WHERE {which}", *values)
    return date.fromisoformat(found[0][0]) if found[0][0] else None


def before_it_was_there(bottle: Bottle, what: str, begun: date | None) -> BadDate:
    """The error for something said of a bottle earlier than it arrived or was made."""
    day = begun or bottle.made_on or bottle.received_on
    how = "was made" if bottle.made_here else "arrived"
    if bottle.decanted_from is not None:
        how = "was decanted"
    when = f" {spell_day(day)}" if day else ""
    return BadDate(f"{what} is before {bottle.number} {how}{when}.", "One of these is wrong.")


def _count_after(session: Session, bottle: Bottle, effect: _Effect) -> Entry | None:
    """The first count, still standing, after the change took effect."""
    day = effect.on.isoformat()
    after = "happened_on > ?"
    since = [day]
    if effect.after is not None:
        after = f"({after} OR (happened_on = ? AND id > {int(effect.after)}))"
        since = [day, day]
    counted = (EntryKind.COUNTED, EntryKind.DISCARDED)
    # what only kept another count true was counted by nobody
    found = reader_in(session).ask(
        "SELECT id FROM entry WHERE bottle_id = ? AND kind IN (?, ?) AND note NOT LIKE ?"
        f" AND {after} AND {STANDING} ORDER BY happened_on, id LIMIT 1",
        *(bottle.id, *counted, f"{EVENED}%", *since),
    )
    return session.get(Entry, found[0][0]) if found else None


def opened_by_draw(entry: Entry) -> bool:
    """Whether an opening was only taken from a draw."""
    return is_by_draw(entry.note)


def _evening(count: Entry, event: Event) -> Event:
    return Event(EntryKind.COUNTED, change=-event.change, note=evening_note(count.id))
