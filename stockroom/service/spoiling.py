"""A bottle is spoiled or suspected: set aside at once, and what leans on it is told."""

from __future__ import annotations

from datetime import date

from stockroom.errors import BadInput, NotAllowed
from stockroom.service.answers import Done
from stockroom.service.hit import hit_by
from stockroom.service.work import Work, check_at_hand, working
from stockroom.settings import StoreAt
from stockroom.store.history import children
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event
from stockroom.store.likeness import plain
from stockroom.store.tables import Bottle


def spoil(
    path: StoreAt, bottle: str, reason: str, *, on: date | None, today: date, by: str
) -> Done:
    """Set a bottle aside at once; list what was made from it and the bookings that lean on it.

    Raises: BadInput without a reason; NotAllowed when it is gone or not found.
    """
    if not reason.strip():
        raise BadInput(f"Why set {bottle} aside?", "One word is enough, but I need it: --why …")
    with working(path, on=on, today=today, by=by) as work:
        spoiled = work.bottle(bottle)
        check_at_hand(work, spoiled)
        before = _apart_already(work, spoiled, reason.strip())
        hit, made = hit_by(work, spoiled), children(work.session, spoiled)
        entry = work.write(spoiled, Event(EntryKind.SET_ASIDE, reason=reason.strip()))
        text = f"Set aside {work.called(spoiled)}: {reason.strip()}."
        following = f"stockroom look {made[0].number}" if made else ""
        return work.done(text, spoiled, entry, following=following, details=(*before, *hit))


def _apart_already(work: Work, bottle: Bottle, reason: str) -> tuple[str, ...]:
    """One line where it is set aside for another reason. Raises: NotAllowed for the very same."""
    if not work.seen(bottle).record.set_aside:
        return ()
    told = f"set aside already: {work.seen(bottle).record.set_aside}"
    if plain(work.seen(bottle).record.set_aside) == plain(reason):
        raise NotAllowed(
            f"{bottle.number} is {told}; nothing entered.",
            f"What else is known of it: stockroom diary {bottle.number}",
        )
    return (f"It was {told}.",)
