"""Questions asked of the ledger by those who are about to write in it."""

from __future__ import annotations

from datetime import date

from sqlalchemy import text
from sqlmodel import Session, col, select

from stockroom.store.kinds import BEGINNINGS, STANDING
from stockroom.store.ledger import entries_of
from stockroom.store.tables import (
    Booking,
    BookingChange,
    Bottle,
    Entry,
    Parent,
    Term,
)


def undone_by(session: Session, entry: Entry) -> Entry | None:
    """The entry that put this one right, None while it stands."""
    return session.exec(select(Entry).where(Entry.puts_right == entry.id)).first()


def noted(session: Session, note: str) -> list[Entry]:
    """The entries still standing that carry exactly this note, the earliest written first."""
    kept = select(Entry).where(Entry.note == note, text(STANDING))
    return list(session.exec(kept.order_by(col(Entry.id))))


def children(session: Session, bottle: Bottle) -> list[Bottle]:
    """The bottles made from this one, at whatever remove, by number."""
    found: dict[int | None, Bottle] = {}
    generation = [bottle.id]
    while generation:
        made = select(Parent.bottle_id).where(col(Parent.parent_id).in_(generation))
        rows = session.exec(select(Bottle).where(col(Bottle.id).in_(made))).all()
        generation = [row.id for row in rows if row.id not in found]
        found |= {row.id: row for row in rows}
    # a parent link stays when its make is put right
    really = [row for row in found.values() if is_there(session, row)]
    return sorted(really, key=lambda row: row.number)


def is_there(session: Session, bottle: Bottle) -> bool:
    """Whether the bottle ever came to be: a make or an arrival put right never happened."""
    return any(entry.kind in BEGINNINGS for entry in entries_of(session, bottle))


def changes_of(session: Session, booking: Booking) -> list[BookingChange]:
    """What was ever changed of a booking, the earliest first."""
    # by number and not by day: two changes may be entered on one day
    made = select(BookingChange).where(BookingChange.booking_id == booking.id)
    return list(session.exec(made.order_by(col(BookingChange.id))))


def terms(session: Session) -> list[tuple[date, date]]:
    """The first and last day of every term written down, the earliest first."""
    rows = session.exec(select(Term).order_by(col(Term.starts_on)))
    return [(row.starts_on, row.ends_on) for row in rows]
