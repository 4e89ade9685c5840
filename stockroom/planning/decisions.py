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
from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.formats import format_amount
from stockroom.planning.facts import Booking, House, Pack
from stockroom.planning.order_decisions import Budget as Budget
from stockroom.planning.order_decisions import Coming as Coming
from stockroom.planning.order_decisions import Delivery as Delivery
from stockroom.planning.order_decisions import Instead as Instead


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

    `minutes` is all hands-on work, `finishing` the part of it done on `finish_on`,
    in `vessels` at once, which are mixed.
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
    vessels: int = 1

    @property
    def wanted(self) -> str:
        """What it is, the same while its number moves: "starch 0.5 % w/v, 176 cm³, 2027-01-25"."""
        return f"{self.line}, {format_amount(Amount(Kind.VOLUME, self.volume))}, {self.on}"


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
    """What the term uses of one line: `made` lines as solutions, others in bought form.

    `groups` are those of its bookings. `before` is what the same term a year before used,
    for `groups_before`; `basis` says by what that is known: entries, bookings or a table.
    """

    line: str
    item: str
    strength: str
    form: str
    amount: int
    kind: Kind
    by_booking: tuple[tuple[str, int], ...] = ()
    spare: int = 0
    groups: int = 0
    before: int | None = None
    groups_before: int | None = None
    basis: str = ""


@dataclass(frozen=True, slots=True)
class Order:
    """What to buy. `late` counts open days past the order-by day; shares are pence.

    Several sizes together are one set: `pack` names it, `mixture` its sizes with how many
    of each and the price of one, `sold_as` the packs themselves in that order, by whom they
    are sold. `falls_below` and `runs_out` are the first days the usable stock is below its
    level and does not suffice; `keeps_until` how long it lasts unopened, where known.
    `queried` says that not half of it would be used by then, and `deliveries` how to split
    it; `instead` what to do when it is late.
    """

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
    amount: int = 0
    kind: Kind = Kind.MASS
    supplier: str = ""
    mixture: tuple[tuple[str, int, int], ...] = ()
    falls_below: date | None = None
    runs_out: date | None = None
    ask_first: str = ""
    ask_days: int = 0
    keeps_until: date | None = None
    queried: bool = False
    deliveries: tuple[Delivery, ...] = ()
    instead: tuple[Instead, ...] = ()
    sold_as: tuple[Pack, ...] = ()

    @property
    def wanted(self) -> str:
        """What it is of, the same while its number moves: "ascorbic acid, 1 × 100 g"."""
        return f"{self.line}, {self.packs} × {self.pack}"


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

    `not_before` is the first day a result would count, closed or not; `opens` the first open
    day from then on, and `best` the day to do it. `minutes` is hands-on work. `optional` marks
    one that only saves work: nothing waits for it, and `worth` is what it saves.
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
    opens: date | None = None
    minutes: int = 0
    worth: Worth | None = None


@dataclass(frozen=True, slots=True)
class Worth:
    """What a good look saves: makes no longer done, hands-on minutes, money, shortages.

    `orders` holds each order with the pence less it would cost, `shares` the same pence by
    department; `serves` the needs that are short without it. `estimated` is True when only
    what hangs on the bottle was added up, and nothing was planned again.
    """

    makes: tuple[str, ...] = ()
    minutes: int = 0
    orders: tuple[tuple[str, int], ...] = ()
    shares: tuple[tuple[str, int], ...] = ()
    serves: tuple[str, ...] = ()
    estimated: bool = False


@dataclass(frozen=True, slots=True)
class DayLoad:
    """The hands-on work of one day: minutes, and the limit of the house (0: none is kept).

    `makes` and `checks` are what is worked on; `movable` pairs a make with the earlier day it
    could be made on, so that all of these moves together keep every day within the limit.
    """

    day: date
    minutes: int
    limit: int
    makes: tuple[str, ...] = ()
    checks: tuple[str, ...] = ()
    movable: tuple[tuple[str, date], ...] = ()

    @property
    def over(self) -> int:
        """Minutes over the limit; 0 when within it, or where none is kept."""
        return max(0, self.minutes - self.limit) if self.limit else 0


@dataclass(frozen=True, slots=True)
class Watch:
    """A booking whose mixture is never kept: when it may be mixed, and must be gone.

    `not_before` and `destroy_by` are minutes after midnight of its day, 1440 and more the day
    after. `ticked_by` holds the initials of whoever destroyed it, "" while nobody has.
    `dangers` say why it is never kept, where `how` does not.
    """

    booking: str
    on: date
    title: str
    not_before: int
    destroy_by: int
    how: str
    ticked_by: str = ""
    dangers: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Level:
    """The day a line falls below its reorder level, what is then left, and when it runs out.

    `not_counted` names the bottles that stand there and may not be used as they are, and why.
    """

    line: str
    item: str
    on: date
    left: int
    level: int
    kind: Kind
    runs_out: date | None = None
    not_counted: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class LastBackup:
    """The last good backup a store knows of: its day, None for never, and where it is."""

    on: date | None
    place: str = ""


@dataclass(frozen=True, slots=True)
class Plan:
    """The whole answer for a period, as at one day.

    `lower_limits` is there when it was made on the safe side, on lower limits of strength.
    `kept_as` is the number on its printed copy, "" for one not kept; `changed_since` the number
    of the plan kept last, and how many changes there are since, where there are any;
    `kept_unread` is its number where it cannot be read. `backup` is the store's last good one,
    None where nobody asks for it.
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
    written_off: tuple[Use, ...] = ()
    orders: tuple[Order, ...] = ()
    short: tuple[Short, ...] = ()
    checks: tuple[CheckToDo, ...] = ()
    levels: tuple[Level, ...] = ()
    on_order: tuple[Coming, ...] = ()
    budgets: tuple[Budget, ...] = ()
    differences: tuple[str, ...] = ()
    """The five biggest differences from the same term a year before, in words."""
    guesses: tuple[Finding, ...] = ()
    notes: tuple[Finding, ...] = field(default=())
    loads: tuple[DayLoad, ...] = ()
    watch: tuple[Watch, ...] = ()
    lower_limits: LowerLimits | None = None
    kept_as: str = ""
    changed_since: tuple[str, int] | None = None
    kept_unread: str = ""
    backup: LastBackup | None = None
