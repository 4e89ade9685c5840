"""A change of the plan: what differs, in what, and why; the values that are handed about.

`differences.py` finds them and `causes.py` says why; open `causes.py` first.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date
from enum import StrEnum

from stockroom.planning.changing.kept import KeptPlan


class About(StrEnum):
    """What a change is about, in the order they are told."""

    BOOKING = "booking"
    NEED = "need"
    MAKE = "make"
    ORDER = "order"
    CHECK = "check"


class What(StrEnum):
    """In what a thing differs."""

    ADDED = "added"
    GONE = "gone"
    DONE = "done"
    PAST = "past"
    """Its day came and went, and nothing was entered for it: nobody can say whether it was done."""
    AMOUNT = "amount"
    DAY = "day"
    SOURCES = "sources"
    OUTCOME = "outcome"


@dataclass(frozen=True, slots=True)
class Touched:
    """What a change hangs on: its line, the bookings and the bottles on either side.

    `day` is the day it had in the kept plan, None where it had none. `sense` is 1 where there
    is more of it now, -1 where there is less, 0 where neither or nobody can say.
    """

    line: str = ""
    bookings: frozenset[str] = frozenset()
    bottles: frozenset[str] = frozenset()
    day: date | None = None
    sense: int = 0


@dataclass(frozen=True, slots=True)
class Change:
    """One difference. `ref` is its number in the kept plan, `now` in the plan now; "" for none.

    `text` says in what it differs, `cause` why; neither is ever empty.
    """

    about: About
    ref: str
    now: str
    item: str
    what: tuple[What, ...]
    text: str
    cause: str = ""
    touched: Touched = field(default_factory=Touched)

    @property
    def done(self) -> bool:
        """True for what was carried out, or whose day has come and gone."""
        return bool({What.DONE, What.PAST} & set(self.what))


@dataclass(frozen=True, slots=True)
class Comparison:
    """Two plans and every change from the one to the other."""

    before: KeptPlan
    after: KeptPlan
    changes: tuple[Change, ...]

    @property
    def open(self) -> tuple[Change, ...]:
        """The changes that are not done."""
        return tuple(change for change in self.changes if not change.done)

    @property
    def done(self) -> tuple[Change, ...]:
        """What was carried out, or whose day has come and gone."""
        return tuple(change for change in self.changes if change.done)
