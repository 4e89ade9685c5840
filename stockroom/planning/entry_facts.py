"""What the planner is told of the ledger: what really left the bottles, and how.

Import these from `facts.py`, which hands them on beside the stock and the bookings.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date


@dataclass(frozen=True, slots=True)
class Drawn:
    """What the ledger says was really drawn from a bottle, for consumption so far."""

    bottle: str
    line: str
    on: date
    amount: int
    booking: str = ""


@dataclass(frozen=True, slots=True)
class WrittenOff:
    """What the ledger says left a bottle and was not drawn: `how` is "spilled" or "lent".

    `amount` is in micro-units, below zero for what was lent and came back.
    """

    bottle: str
    line: str
    on: date
    amount: int
    how: str
