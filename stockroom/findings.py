"""A finding: one thing a check noticed, with what to do about it.

Checks over many records return findings rather than stop at the first, so a
list with nine faults is mended in one sitting. The words more than one room must say alike
stand here too.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from enum import StrEnum

DO_NOT_TOUCH = "do not open or move it; ask"
"""What every message about a bottle past its safety date says, and of peroxide. House choice.

It stands at the root because keeping and safety both say it and neither may see the other.
"""


@dataclass(frozen=True, slots=True)
class Finding:
    """What was noticed (`text`) about what (`subject`: a bottle, booking or item)."""

    subject: str
    text: str


class DangerKind(StrEnum):
    """What can hurt whoever does nothing about it, the worst first. The order is our choice."""

    TIGHT = "tight cap"
    BESIDE = "beside"
    SAFETY_DATE = "safety date"
    WARM = "too warm"


class Moves(StrEnum):
    """Which bottle goes, of those that must not stand together: the surest first."""

    IT = "it"
    ONE = "one"
    OTHER = "the other"


@dataclass(frozen=True, slots=True)
class Danger(Finding):
    """A finding of what can hurt somebody as things stand; sheets tell it apart from the rest.

    Its sentence is for reading only: what a sheet decides by stands here as values. Of what
    stands wrongly, `others` are all the bottles beside it, those its sentence names first
    (none where only the place is wrong), `why` the reason and `moves` which of them goes;
    `day` is a safety date, the last good day.
    """

    kind: DangerKind
    others: tuple[str, ...] = ()
    why: str = ""
    moves: Moves = Moves.IT
    day: date | None = None


@dataclass(frozen=True, slots=True)
class Lasting(Finding):
    """A guess that hangs on no day: it stands as it was made, whenever the thing is used."""


@dataclass(frozen=True, slots=True)
class Fault(Finding):
    """Something in a store that does not hold together, and how to mend it.

    `check` is the word for the kind of fault. A `remark` is worth knowing and wants no
    mending: it alone never makes a store out of order.
    """

    check: str
    mend: str
    remark: bool = False
