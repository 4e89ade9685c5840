"""What leaves a bottle by being used, and by accident: drawn, spilled."""

from __future__ import annotations

from datetime import date

from stockroom.measure.amounts import Amount
from stockroom.measure.by_eye import ByEye
from stockroom.service.answers import Done
from stockroom.service.estimates import Weighed, taken
from stockroom.service.taking import (
    check_not_barred,
    open_if_sealed,
    remains,
    still_standing,
    take,
    told_of_count,
    told_of_use,
    write_off,
)
from stockroom.service.touching import check_may_open
from stockroom.service.work import check_at_hand, check_in_use, doubts, working
from stockroom.settings import StoreAt
from stockroom.store import names
from stockroom.store.kinds import EntryKind
from stockroom.store.ledger import Event


def draw(
    path: StoreAt,
    bottle: str,
    amount: Amount | ByEye | Weighed,
    *,
    booking: str | None = None,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Take so much from a bottle; a sealed one is opened by it.

    `amount` is what was drawn, what somebody judged by eye (drawn, or left), or the bottle
    weighed. Raises: NotEnough when less is left; NotAllowed when it is not found, set
    aside, gone, past its safety date, or barred by the booking's recipe, and for more left
    than there was; BadAmount for the wrong kind; MissingFigure for a tare or a density.
    """
    with working(path, on=on, today=today, by=by) as work:
        found = work.bottle(bottle)
        # before the amount: what may not be touched is not weighed either
        check_at_hand(work, found)
        check_may_open(work, found)
        seen = check_in_use(work, found)
        went = taken(work, found, amount, seen.left)
        # found before anything is written: a draw for a booking nobody knows is refused whole
        served = names.find_booking(work.session, booking) if booking else None
        if served is not None:
            check_not_barred(work, found, served)
        # judged before the draw, which may open a sealed bottle
        doubtful, stands = doubts(work, found), still_standing(work, seen)
        event = Event(
            EntryKind.DRAWN,
            change=-went.amount.micro,
            booking=served.number if served else "",
            note="; ".join(filter(None, (went.note, stands))),
            about=went.about,
        )
        entry = take(work, found, event)
        opened = open_if_sealed(work, found, entry)
        text = f"Drew {went.words} from {work.called(found)}; {remains(work, found)}."
        late = told_of_count(work, entry)
        told = told_of_use(work, found, served, stands)
        return work.done(text, found, entry, details=(*went.told, *opened, *doubtful, *late, *told))


def spill(
    path: StoreAt,
    bottle: str,
    amount: Amount,
    *,
    note: str = "",
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Write off what was spilled: its own reason, kept out of consumption. Raises: as `draw`.

    How it came about is asked where `note` does not say it, and never refused: what is on the
    floor is gone all the same.
    """
    event = Event(EntryKind.SPILLED, change=-amount.micro, note=note.strip())
    asked = () if event.note else ('How did it come about? Say so next time: --why "fell".',)
    with working(path, on=on, today=today, by=by) as work:
        return write_off(work, bottle, amount, event, "Spilled", asked)
