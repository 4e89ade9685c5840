"""What the planner is told of buying: packs, orders placed, and what an earlier term used.

Import these from `facts.py`, which hands them on beside the stock and the bookings.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date


@dataclass(frozen=True, slots=True)
class Pack:
    """A size a supplier sells: micro-units, price in pence, lead time in open days."""

    size: int
    text: str
    pence: int
    lead: int | None = None
    supplier: str = ""


@dataclass(frozen=True, slots=True)
class Placed:
    """An order placed with a supplier: `packs` of `size` micro-units, `pence` for all of them.

    `came` is what has arrived of it (micro-units); `cancelled` the day the rest was given
    up. `shares` are pence by department, and add up to `pence`.
    """

    number: str
    line: str
    size: int
    pack: str
    packs: int
    pence: int
    ordered: date
    expected: date
    came: int = 0
    cancelled: date | None = None
    supplier: str = ""
    by: str = ""
    shares: tuple[tuple[str, int], ...] = ()

    @property
    def amount(self) -> int:
        """All that was ordered, micro-units."""
        return self.size * self.packs

    @property
    def outstanding(self) -> int:
        """What is still to come: nothing of what was cancelled, or came and more."""
        return 0 if self.cancelled else max(0, self.amount - self.came)


@dataclass(frozen=True, slots=True)
class FormerUse:
    """What a term gone by used of a line, as somebody wrote it down; `groups` if known."""

    line: str
    start: date
    end: date
    amount: int
    groups: int | None = None
