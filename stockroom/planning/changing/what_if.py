"""The facts as they would be: a class resized, moved, dropped or added, a bottle not there.

Each gives back changed facts and leaves the old ones as they were. What is planned from
them is what would be planned had it been entered; nobody here asks whether it may be.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace
from datetime import date

from stockroom.planning.facts import Booking, Facts, Firmness


def with_groups(facts: Facts, number: str, groups: int) -> Facts:
    """The facts with so many groups in a booking."""
    return _changed(facts, number, groups=groups)


def shifted(
    facts: Facts, number: str, *, on: date | None = None, minute: int | None = None
) -> Facts:
    """The facts with a booking on another day or at another time; None leaves it as it is."""
    moved = {"on": on, "minute": minute}
    return _changed(facts, number, **{k: v for k, v in moved.items() if v is not None})


def cancelled(facts: Facts, number: str) -> Facts:
    """The facts with a booking dropped."""
    return _changed(facts, number, firmness=Firmness.DROPPED)


def booked(facts: Facts, booking: Booking) -> Facts:
    """The facts with one booking more."""
    return _with_bookings(facts, (*facts.bookings, booking))


def without(facts: Facts, number: str) -> Facts:
    """The facts with a bottle not found: it is in nobody's hands, and may turn up again."""
    bottles = tuple(
        replace(bottle, record=replace(bottle.record, not_found=True))
        if bottle.number == number
        else bottle
        for bottle in facts.bottles
    )
    return replace(facts, bottles=bottles)


def _changed(facts: Facts, number: str, **what: object) -> Facts:
    changed = (
        replace(booking, **what) if booking.number == number else booking  # type: ignore[arg-type]
        for booking in facts.bookings
    )
    return _with_bookings(facts, changed)


def _with_bookings(facts: Facts, bookings: Iterable[Booking]) -> Facts:
    """The facts with these bookings: those of the days they cover, in the order of a snapshot."""
    first, last = min(facts.start, facts.as_at), facts.horizon or facts.end
    inside = [booking for booking in bookings if first <= booking.on <= last]
    ordered = sorted(inside, key=lambda b: (b.on, b.minute, b.number))
    return replace(facts, bookings=tuple(ordered))
