"""What the planner answers: decisions with their reasons, frozen.

Amounts are micro-units of the item's kind, as in `facts.py`. Every reason is a
short sentence with the numbers it used; `reports/` turns all of this to words.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date
from enum import StrEnum

from stockroom.findings import Finding
from stockroom.keeping.caution import LowerLimits
from stockroom.keeping.verdict import Condition
from stockroom.measure.amounts import Kind
from stockroom.planning.facts import Booking, House


class Outcome(StrEnum):
    """What becomes of a need."""

    HAVE = "have"
    MAKE = "make"
    BUY = "buy"
    SHORT = "short"
    REFUSED = "refused"


@dataclass(frozen=True, slots=True)
class Draw:
    """So much taken: from a bottle, or from something still to be made or bought (`item`).

    `strength` is what the bottle is expected to hold on the day, in its own unit.
    """

    amount: int
    kind: Kind
    bottle: str = ""
    item: str = ""
    line: str = ""
    make: str = ""
    strength: float | None = None


@dataclass(frozen=True, slots=True)
class Answer:
    """One need and what becomes of it. `ref` is the booking and line number, "K08.2".

    `waits_for` names the lines whose lack leaves it short.
    """

    ref: str
    booking: Booking
    recipe_title: str
    line: str
    item: str
    strength: str
    amount: int
    kind: Kind
    outcome: Outcome
    draws: tuple[Draw, ...] = ()
    make: str = ""
    order: str = ""
    closeness: str = ""
    fresh: bool = False
    reasons: tuple[str, ...] = ()
    waits_for: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Make:
    """One batch to make up. `on` is the day work starts, `ready` the day it can be used.

    `minutes` is all hands-on work, `finishing` the part of it done on `finish_on`.
    `too_little` tells the draws that nothing in the house measures closely enough, and the
    way out; `reasons` has them too.
    """

    id: str
    line: str
    item: str
    strength: str
    volume: int
    needed: int
    earliest: date
    latest: date
    on: date
    ready: date
    bookings: tuple[str, ...]
    sources: tuple[Draw, ...]
    fresh: bool
    minutes: int
    finish_on: date | None = None
    finishing: int = 0
    heel: int = 0
    heel_kept: bool = False
    good_until: date | None = None
    steps: str = ""
    cautions: tuple[str, ...] = ()
    reasons: tuple[str, ...] = ()
    too_little: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class PastBottle:
    """A bottle that is past, weak, undated, overdue a check, set aside or not found.

    `look_would_do`: a good look, and nothing else, would bring it back into use.
    """

    bottle: str
    item: str
    condition: Condition
    good_until: date | None
    decided_by: str
    matters_for: tuple[str, ...] = ()
    look_would_do: bool = False


@dataclass(frozen=True, slots=True)
class Use:
    """What the term uses of one line: `made` lines as solutions, others in bought form."""

    line: str
    item: str
    strength: str
    form: str
    amount: int
    kind: Kind
    by_booking: tuple[tuple[str, int], ...] = ()
    spare: int = 0


@dataclass(frozen=True, slots=True)
class Order:
    """What to buy. `late` counts open days past the order-by day; shares are pence."""

    id: str
    line: str
    item: str
    pack: str
    packs: int
    need_by: date
    order_by: date
    arrives: date
    late: int
    pence: int
    shares: tuple[tuple[str, int], ...]
    for_bookings: tuple[str, ...] = ()
    reasons: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Short:
    """What cannot be had, by how much, and why."""

    ref: str
    booking: str
    item: str
    strength: str
    amount: int
    kind: Kind
    reason: str


@dataclass(frozen=True, slots=True)
class CheckToDo:
    """A titration or a look to do between two days, and what hangs on it.

    `optional` marks one that only saves work: nothing waits for it.
    """

    subject: str
    item: str
    what: str
    not_before: date
    by: date
    best: date
    bookings: tuple[str, ...]
    reason: str
    optional: bool = False


@dataclass(frozen=True, slots=True)
class Level:
    """The day a line falls below its reorder level, and what is then left."""

    line: str
    item: str
    on: date
    left: int
    level: int
    kind: Kind


@dataclass(frozen=True, slots=True)
class Plan:
    """The whole answer for a period, as at one day.

    `lower_limits` is there when it was made on the safe side, on lower limits of strength.
    """

    as_at: date
    start: date
    end: date
    house: House
    needs: tuple[Answer, ...] = ()
    makes: tuple[Make, ...] = ()
    past: tuple[PastBottle, ...] = ()
    usage: tuple[Use, ...] = ()
    drawn: tuple[Use, ...] = ()
    orders: tuple[Order, ...] = ()
    short: tuple[Short, ...] = ()
    checks: tuple[CheckToDo, ...] = ()
    levels: tuple[Level, ...] = ()
    guesses: tuple[Finding, ...] = ()
    notes: tuple[Finding, ...] = field(default=())
    lower_limits: LowerLimits | None = None
