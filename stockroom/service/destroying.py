"""What is never kept, ticked as destroyed in the record of its booking, or the tick taken back."""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadDate, BadInput, NotAllowed
from stockroom.measure.days import spell_day
from stockroom.planning.facts import Facts, Firmness
from stockroom.service.answers import Done
from stockroom.service.bookings import Hand
from stockroom.service.known import known_from
from stockroom.service.replayed import replayed_plan
from stockroom.service.work import initials
from stockroom.settings import StoreAt
from stockroom.store import names
from stockroom.store.engine import reader_in, writing
from stockroom.store.history import changes_of
from stockroom.store.kinds import DESTROYED, MIXTURE, STANDS
from stockroom.store.tables import Booking


def destroyed(path: StoreAt, booking: str, *, today: date, by: str) -> Done:
    """Tick that what is left of a booking's mixture was destroyed, by whoever did it.

    Raises: UnknownName; BadDate before its day; NotAllowed where nothing of it is never kept,
    it is dropped, or it is ticked already.
    """
    with writing(path) as session:
        hand = Hand(session, today, initials(by))
        found = names.find_booking(session, booking)
        if found.on_day > today:
            raise BadDate(
                f"{found.number} is on {spell_day(found.on_day)}: there is nothing to destroy yet.",
                "Tick it once it is done.",
            )
        how = _how(known_from(reader_in(session), found.on_day), found)
        ticked = _ticked_by(hand, found)
        if ticked:
            raise NotAllowed(f"{found.number} is ticked as destroyed already, by {ticked}.")
        hand.record(found, MIXTURE, STANDS, DESTROYED)
        return hand.done(f"{found.number}: destroyed, ticked by {hand.by}.", how)


def not_destroyed(path: StoreAt, booking: str, *, why: str, today: date, by: str) -> Done:
    """Take a tick back: it stands still. Both stay in the booking's record.

    Raises: UnknownName; BadInput without a reason; NotAllowed where nobody ticked it.
    """
    if not why.strip():
        raise BadInput(f"Why is the tick of {booking} taken back?", "One word is enough: --why …")
    with writing(path) as session:
        hand = Hand(session, today, initials(by))
        found = names.find_booking(session, booking)
        if not _ticked_by(hand, found):
            raise NotAllowed(f"{found.number} is not ticked as destroyed.")
        hand.record(found, MIXTURE, DESTROYED, f"{STANDS} ({why.strip()})")
        return hand.done(f"{found.number}: not destroyed after all: destroy it now.")


def _ticked_by(hand: Hand, booking: Booking) -> str:
    ticks = [each for each in changes_of(hand.session, booking) if each.what == MIXTURE]
    return ticks[-1].by if ticks and ticks[-1].after == DESTROYED else ""


def _how(known: Facts, booking: Booking) -> tuple[str, ...]:
    """Why and how it is destroyed, as its recipe or line says. Raises: NotAllowed for nothing."""
    if booking.firmness == Firmness.DROPPED:
        raise NotAllowed(f"{booking.number} is dropped: nothing was mixed for it.")
    # by the plan of its own day, which knows what it got
    for watch in replayed_plan(known).watch:
        if watch.booking == booking.number:
            return (*watch.dangers, watch.how)
    recipe = next(b for b in known.bookings if b.number == booking.number).recipe
    raise NotAllowed(
        f"{booking.number} ({recipe}) mixes nothing that is never kept.",
        "To pour away a bottle: stockroom discard BOTTLE --how … --why …",
    )
