"""When what is made and set out on a day is begun at the latest, by one pair of hands.

Backwards from the classes, one thing after the other, so that nothing waits for two hands at
once: first what is set out, before it what is made for it. One pair of hands is our choice.
"""

from __future__ import annotations

import re
from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date

from stockroom.planning.decisions import Make, Plan
from stockroom.planning.facts import Booking, Facts, Firmness
from stockroom.planning.numbers import natural
from stockroom.planning.timing import DAY_MINUTES, latest_start

SET_OUT = 30
"""Minutes before a class by which all stands ready. Common practice, no source."""

USUAL_MINUTES = 10
"""Minutes to set out a class whose recipe says none. Our choice."""

LATEST = (
    "Latest times for one pair of hands; to set out takes "
    f"{USUAL_MINUTES} min where the recipe says nothing."
)
"""What the list says of its times."""

TOO_LATE = "does not fit before the class for one pair of hands: begin the day before, or with help"
"""What is said of work that does not."""

TO_SET_OUT = re.compile(r"(\d+) ?min to set out")
"""How the words of a recipe say how long it takes."""


@dataclass(frozen=True, slots=True)
class Times:
    """Minutes after midnight: of setting out by booking, of beginning a make by its number.

    `too_late` are the bookings and makes that do not fit between the opening and the class.
    """

    set_out: dict[str, int]
    makes: dict[str, int]
    too_late: frozenset[str] = frozenset()


def minutes_to_set_out(known: Facts, booking: Booking) -> int:
    """How long it takes: "25 min to set out" in the words of its recipe, else USUAL_MINUTES."""
    found = TO_SET_OUT.search(known.recipes[booking.recipe, booking.version].handling)
    return int(found[1]) if found else USUAL_MINUTES


def times_of(known: Facts, plan: Plan, on: date) -> Times:
    """The latest times of a day, whichever of its classes a sheet is about.

    All stands ready SET_OUT minutes before its class where that fits into staffed hours, else by
    the class; what fits neither way begins when the doors open.
    """
    over = (Firmness.DONE, Firmness.DROPPED)
    classes = [b for b in known.bookings if b.on == on and b.firmness not in over]
    day = _Backwards(known, on, classes)
    for minute in sorted({booking.minute for booking in classes}, reverse=True):
        same = [booking for booking in classes if booking.minute == minute]
        makes = [m for m in plan.makes if m.on == on == m.ready and day.first_of(m) == minute]
        earlier, before = set(day.too_late), day.free
        day.group(same, makes, SET_OUT)
        if day.too_late != earlier:
            # no half hour to spare, or nobody there yet: then by the class itself
            day.too_late, day.free = earlier, before
            day.group(same, makes, 0)
    return Times(day.outs, day.begun, frozenset(day.too_late))


class _Backwards:
    def __init__(self, known: Facts, on: date, classes: Iterable[Booking]) -> None:
        self.known, self.on, self.calendar = known, on, known.calendar
        self.minutes = {booking.number: booking.minute for booking in classes}
        self.free = DAY_MINUTES
        self.outs: dict[str, int] = {}
        self.begun: dict[str, int] = {}
        self.too_late: set[str] = set()

    def first_of(self, make: Make) -> int | None:
        """When the first class of the day begins that a make is for; None for none."""
        return min((self.minutes[b] for b in make.bookings if b in self.minutes), default=None)

    def group(self, classes: list[Booking], makes: list[Make], spare: int) -> None:
        """Classes of one minute, all ready so many minutes before it, and what is made for them."""
        for booking in sorted(classes, key=lambda b: natural(b.number), reverse=True):
            self._set_out(booking, spare)
        # what another is made from has the lower number, and so is begun before it
        for make in sorted(makes, key=lambda each: natural(each.id), reverse=True):
            self._make(make)

    def _set_out(self, booking: Booking, spare: int) -> None:
        start = min(self.free, booking.minute - spare) - minutes_to_set_out(self.known, booking)
        opens, shuts = self.calendar.open_from, self.calendar.open_to
        staffed = opens <= start < shuts or not self.calendar.is_open(self.on)
        if not staffed and (spare or booking.minute >= opens > start):
            self.too_late.add(booking.number)
        if booking.minute >= opens:
            start = max(start, opens)
        self.outs[booking.number] = self.free = max(start, 0)

    def _make(self, make: Make) -> None:
        method = self.known.methods.get(make.line)
        opens = self.calendar.open_from
        outs = min(self.outs[b] for b in make.bookings if b in self.outs)
        begun = latest_start((make.on, outs), method, self.calendar, make.on) if method else None
        start = min(begun[1] if begun else opens, self.free - make.minutes)
        if begun is None or start < opens:
            self.too_late.add(make.id)
        self.begun[make.id] = self.free = max(start, opens)
