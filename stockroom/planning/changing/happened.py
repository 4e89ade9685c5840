"""What was entered since a plan was kept: the values from which causes are told.

`facts.py` hands `Happened` on, since the store may see no more of the planner than that.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from enum import StrEnum


class HappenedKind(StrEnum):
    """What kind of thing happened, as far as a cause needs to know."""

    BOOKING = "booking"
    MADE = "made"
    ARRIVED = "arrived"
    ORDERED = "ordered"
    CHECKED = "checked"
    TAKEN = "taken"
    """Drawn, opened or moved: it changes a plan only when it was not as planned."""
    BOTTLE = "bottle"
    LINE = "line"
    HOUSE = "house"


@dataclass(frozen=True, slots=True)
class Happened:
    """One thing entered since: what it touches, on what day, by whom, and the words for it.

    `subject` is the bottle, the booking or the line it was entered for. `bookings` are those
    a bottle was made for or drawn for. `more` stands behind the day and the initials. `by` is
    "" where nobody's initials were kept, `on` None where no day was. `sense` is 1 where it
    leaves less to draw on, so that more is to be made or bought, -1 where it leaves more.
    """

    kind: HappenedKind
    subject: str
    said: str
    line: str = ""
    on: date | None = None
    by: str = ""
    bookings: tuple[str, ...] = ()
    more: str = ""
    sense: int = 0

    @property
    def words(self) -> str:
        """The whole of it: "S03 looked at 2027-01-11 by T1, good"."""
        stamp = " ".join(
            [*([str(self.on)] if self.on else ()), *([f"by {self.by}"] * bool(self.by))]
        )
        # the words for a booking may end with a day of their own
        if stamp and self.kind is HappenedKind.BOOKING:
            stamp = f"({stamp})"
        said = f"{self.said} {stamp}" if stamp else self.said
        return f"{said}, {self.more}" if self.more else said
