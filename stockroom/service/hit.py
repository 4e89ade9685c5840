"""What a doubt about a bottle, or its being missed, hits: bottles and bookings that lean on it."""

from __future__ import annotations

from collections.abc import Sequence

from stockroom.errors import StockroomError
from stockroom.planning.decisions import Draw, Plan
from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Facts
from stockroom.service.replayed import replayed_plan
from stockroom.service.work import Work
from stockroom.store.history import children, is_poured
from stockroom.store.snapshot import facts_from
from stockroom.store.tables import Bottle


def made_from(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """A line for each bottle made or poured from it, at whatever remove."""
    return tuple(
        f"{'Poured' if is_poured(work.session, child) else 'Made'} from it: {work.called(child)}."
        for child in children(work.session, bottle)
    )


def drawn_on_for(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """One line naming the bookings the plan draws on the bottle for; asked before it leaves it."""
    return _drawn_on(work, bottle, ())


def hit_by(work: Work, bottle: Bottle) -> tuple[str, ...]:
    """The same, after a line for each bottle made or poured from it, with its own bookings."""
    return _drawn_on(work, bottle, children(work.session, bottle))


def _drawn_on(work: Work, bottle: Bottle, below: Sequence[Bottle]) -> tuple[str, ...]:
    made = made_from(work, bottle) if below else ()
    # from the day of entry and not the day it happened: what is over can no longer be helped
    try:
        known = with_derived(facts_from(work.reader, work.stamp.entered_on))
        whole = replayed_plan(known)
    except StockroomError as error:
        # a spoiled bottle must be set aside whatever else is wrong in the house
        unknown = f"Which bookings it was for is not known, as no plan can be made: {error.message}"
        return (*made, unknown)
    listed = bookings_drawn(known, whole, bottle.number)
    told = (f"Drawn on by the plan for {listed}: stockroom plan",) if listed else ()
    on = [bookings_drawn(known, whole, child.number) for child in below]
    also = [f" Drawn on for {bookings}." if bookings else "" for bookings in on]
    return (*(line + more for line, more in zip(made, also, strict=True)), *told)


def bookings_drawn(known: Facts, whole: Plan, bottle: str) -> str:
    """The bookings a plan draws on a bottle for, straight or by way of a make; "" for none."""

    def draws(row: tuple[Draw, ...]) -> bool:
        return any(draw.bottle == bottle for draw in row)

    hit = {need.booking.number for need in whole.needs if draws(need.draws)}
    hit |= {one for make in whole.makes if draws(make.sources) for one in make.bookings}
    # in the order of the bookings, which is by day and number
    return ", ".join(booking.number for booking in known.bookings if booking.number in hit)
