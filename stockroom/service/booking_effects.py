"""What a change of a booking does, told at once: the extra of more groups, what is withdrawn."""

from __future__ import annotations

from datetime import date

from stockroom.errors import StockroomError
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.planning.amounts import say_left
from stockroom.planning.explode import amount_needed
from stockroom.planning.rooms import shared_rooms
from stockroom.service.known import known_from
from stockroom.service.replayed import replayed_plan
from stockroom.store import names
from stockroom.store.engine import Session
from stockroom.store.reading import Reader
from stockroom.store.snapshot import bookings_between
from stockroom.store.snapshot_bottles import bottles_of
from stockroom.store.snapshot_lines import lines_of, recipes_of
from stockroom.store.tables import Booking, Recipe


def the_same(session: Session, booking: Booking) -> tuple[str, ...]:
    """A question where the like of it is booked at that hour already; nothing where it is not."""
    found = names.bookings_alike(session, booking)
    # two classes side by side are nothing unusual, so it is asked and not refused
    told = f"the same as {', '.join(found)}, at the same hour: is it booked twice?"
    return (told,) if found else ()


def room_shared(reader: Reader, booking: Booking) -> tuple[str, ...]:
    """Who else has the room while a booking just saved lasts; none where nobody has."""
    day = bookings_between(reader, booking.on_day, booking.on_day)
    return shared_rooms([each for each in day if each.number == booking.number], day)


def extra(reader: Reader, booking: Booking, recipe: Recipe, before: int) -> tuple[str, ...]:
    """What each recipe line wants more, or less, than for so many groups before; no more."""
    lines, told = lines_of(reader), []
    for one in recipes_of(reader)[recipe.recipe, recipe.version].requirements:
        was = amount_needed(one, before, booking.spare)
        change = amount_needed(one, booking.groups, booking.spare) - was
        if change:
            kind = lines[one.line].kind
            said = format_amount(Amount(kind, abs(change)))
            told.append(f"{said} {'more' if change > 0 else 'less'} of {one.line}.")
    return tuple(told)


def kept_as_stock(reader: Reader, number: str, today: date) -> tuple[str, ...]:
    """The bottles that were made for a booking and stay when it is dropped."""
    lines = lines_of(reader)
    return tuple(
        f"Stays as stock: {bottle.number}, {say_left(bottle, lines[bottle.line])} of {bottle.line}."
        for bottle in bottles_of(reader, today)
        if number in bottle.meant_for and bottle.left > 0
    )


def withdrawn(reader: Reader, number: str, today: date) -> tuple[str, ...]:
    """The makes the plan has for a booking, before it is dropped: withdrawn, or made smaller."""
    try:
        whole = replayed_plan(known_from(reader, today))
    except StockroomError:
        # dropping a booking may be just what mends a plan that cannot be made
        return ()
    makes = [make for make in whole.makes if number in make.bookings]
    alone = [make for make in makes if make.bookings == (number,)]
    shared = [make.line for make in makes if make not in alone]
    told = [
        f"Not made now: {format_amount(Amount(Kind.VOLUME, make.volume))} of {make.line},"
        f" planned for {make.on}."
        for make in alone
    ]
    if shared:
        told.append(f"Less is made of {', '.join(dict.fromkeys(shared))}: stockroom plan.")
    return tuple(told)
