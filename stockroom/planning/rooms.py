"""Rooms that two classes would have at one time: told and never refused, since some share one."""

from __future__ import annotations

from collections.abc import Iterable, Sequence

from stockroom.measure.days import format_time
from stockroom.planning.facts import Booking, Firmness
from stockroom.planning.numbers import natural

_OVER = (Firmness.DONE, Firmness.DROPPED)


def also_there(booking: Booking, others: Iterable[Booking]) -> tuple[Booking, ...]:
    """The other bookings in its room while it lasts; none where no room is written down.

    Rooms are the same whatever the case they are written in.
    """
    room = _plain(booking.room)
    return tuple(
        each
        for each in sorted(others, key=lambda b: (b.minute, natural(b.number)))
        if each.number != booking.number
        and room
        and _plain(each.room) == room
        and each.on == booking.on
        and each.firmness not in _OVER
        and each.minute < booking.minute + booking.lasts_minutes
        and booking.minute < each.minute + each.lasts_minutes
    )


def shared_rooms(bookings: Sequence[Booking], others: Sequence[Booking]) -> tuple[str, ...]:
    """A sentence for each booking that has its room with another; of two asked of, once.

    >>> shared_rooms((), ())
    ()
    """
    told: dict[frozenset[str], str] = {}
    for booking in bookings:
        for each in also_there(booking, others):
            told.setdefault(frozenset((booking.number, each.number)), room_words(booking, each))
    return tuple(told.values())


def room_words(booking: Booking, other: Booking) -> str:
    """Who has the room too, and when: "HALL LAB has K27 at the same time as K26, from 13:30"."""
    ends = format_time((other.minute + other.lasts_minutes) % 1440)
    return (
        f"{booking.room} has {other.number} ({other.recipe}) at the same time as {booking.number},"
        f" {format_time(other.minute)} to {ends}: can they share it?"
    )


def _plain(room: str) -> str:
    return " ".join(room.casefold().split())
