"""The facts and the plan of one day, or of one booking's day, asked for as a person types it.

Light, as reading is: the day page, the class slip and the phone text are made from these.
"""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from datetime import date
from typing import Any

from stockroom.errors import BadDate
from stockroom.measure.days import parse_day
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts, Firmness
from stockroom.safety.hazards import Hazards
from stockroom.service.cards import hazards_held
from stockroom.service.closures import why_closed
from stockroom.service.known import known_of
from stockroom.service.printing import Kind, held_against
from stockroom.service.sheets import known_and_planned
from stockroom.settings import StoreAt
from stockroom.store.likeness import unknown


@dataclass(frozen=True, slots=True)
class Asked:
    """A day, the booking if one was asked for ("" for the whole day), and what is known of it.

    `closed` is why the house is shut that day, where somebody wrote it down.
    """

    known: Facts
    plan: Plan
    on: date
    booking: str = ""
    closed: str = ""

    @property
    def about(self) -> str:
        """What tells its copies from others: the booking, else the day."""
        return self.booking or self.on.isoformat()


def day_asked(path: StoreAt, ref: str | None, *, as_at: date) -> Asked:
    """The day or booking named; for None the next day from `as_at` on with a booking.

    Raises: UnknownName for a booking that does not exist, BadDate for a day that cannot be read.
    """
    on, booking = _meant(known_of(path, as_at), ref, as_at)
    known, plan = known_and_planned(path, as_at=as_at, through=on)
    return Asked(known, plan, on, booking, why_closed(path, on, on).get(on, ""))


@dataclass(frozen=True, slots=True)
class DayHeld:
    """What is known of a day, and its sheet held against the copy printed last.

    `hazards` are those of what its classes get: by bottle, or by line while it has none.
    """

    asked: Asked
    sheet: Any
    hazards: Mapping[str, Hazards]


def day_held(
    path: StoreAt,
    kind: Kind,
    make: Callable[[Facts, Plan, date, str, str], Any],
    ref: str | None,
    *,
    as_at: date,
) -> DayHeld:
    """The day or booking named, with the sheet `make` makes of it. Raises: as `day_asked`."""
    asked = day_asked(path, ref, as_at=as_at)
    sheet = make(asked.known, asked.plan, asked.on, asked.booking, asked.closed)
    return DayHeld(asked, held_against(path, kind, sheet, asked.about), _hazards(path, asked))


def _hazards(path: StoreAt, asked: Asked) -> dict[str, Hazards]:
    mine = [
        need
        for need in asked.plan.needs
        if need.booking.on == asked.on and asked.booking in ("", need.booking.number)
    ]
    numbers = {draw.bottle for need in mine for draw in need.draws if draw.bottle}
    lines = {need.line for need in mine if not any(draw.bottle for draw in need.draws)}
    return hazards_held(path, numbers, lines, as_at=asked.plan.as_at)


def _meant(known: Facts, ref: str | None, as_at: date) -> tuple[date, str]:
    if ref is None:
        dropped = (Firmness.DONE, Firmness.DROPPED)
        days = [b.on for b in known.bookings if b.on >= as_at and b.firmness not in dropped]
        return min(days, default=as_at), ""
    typed = ref.strip().lower()
    booking = next((b for b in known.bookings if b.number.lower() == typed), None)
    if booking is not None:
        return booking.on, booking.number
    try:
        return parse_day(ref), ""
    except BadDate:
        # "K99" is a number mistyped, "31/02/2027" a day that is not there
        if sum(map(str.isdigit, ref)) > 3:
            raise
        raise unknown("booking", ref, [each.number for each in known.bookings]) from None
