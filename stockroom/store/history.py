"""Questions asked of the ledger by those who are about to write in it."""

from __future__ import annotations

from collections.abc import Iterable
from datetime import date

from sqlalchemy import text
from sqlmodel import Session, col, select

from stockroom.store.kinds import BEGINNINGS, POURED, STANDING, EntryKind
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


def noted(session: Session, note: str, kind: EntryKind, bottles: Iterable[Bottle]) -> list[Entry]:
    """The entries of a kind still standing with exactly this note, the earliest written first.

    Of these bottles only. A note of somebody's own may read the same, so the kind counts.
    """
    of = [bottle.id for bottle in bottles]
    kept = select(Entry).where(col(Entry.bottle_id).in_(of), Entry.kind == kind)
    kept = kept.where(Entry.note == note, text(STANDING))
    return list(session.exec(kept.order_by(col(Entry.id))))


def children(session: Session, bottle: Bottle) -> list[Bottle]:
    """The bottles made or poured from this one, at whatever remove, by number."""
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
    return beginning_of(session, bottle) is not None


def beginning_of(session: Session, bottle: Bottle) -> Entry | None:
    """The entry a bottle's story begins with, None where that was put right."""
    begun = (entry for entry in entries_of(session, bottle) if entry.kind in BEGINNINGS)
    return next(begun, None)


def is_poured(session: Session, bottle: Bottle) -> bool:
    """Whether it was decanted or mixed, and so keeps what its sources were known to be."""
    begun = beginning_of(session, bottle)
    return begun is not None and begun.kind in POURED


def parents(session: Session, bottle: Bottle) -> list[Bottle]:
    """The bottles it was made or poured from itself, by number."""
    above = select(Parent.parent_id).where(Parent.bottle_id == bottle.id)
    rows = session.exec(select(Bottle).where(col(Bottle.id).in_(above)))
    return sorted(rows, key=lambda row: row.number)


def changes_of(session: Session, booking: Booking) -> list[BookingChange]:
    """What was ever changed of a booking, the earliest first."""
    # by number and not by day: two changes may be entered on one day
    made = select(BookingChange).where(BookingChange.booking_id == booking.id)
    return list(session.exec(made.order_by(col(BookingChange.id))))


def terms(session: Session) -> list[tuple[date, date]]:
    """The first and last day of every term written down, the earliest first."""
    rows = session.exec(select(Term).order_by(col(Term.starts_on)))
    return [(row.starts_on, row.ends_on) for row in rows]
