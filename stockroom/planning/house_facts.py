"""What the planner is told of the house itself: its equipment, its places, who pays, its choices.

Import these from `facts.py`, which hands them on beside the stock and the bookings.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from enum import StrEnum


class Closeness(StrEnum):
    """How near its stated strength a need must be served."""

    EXACT = "exact"
    CLOSE = "close"
    ROUGH = "rough"
    PRESENT = "present"


EXACT = 0.005
"""How closely an exact line wants its strength, as a fraction. A house choice."""

TOLERANCE: dict[Closeness, float | None] = {
    Closeness.EXACT: EXACT,
    Closeness.CLOSE: 0.05,
    Closeness.ROUGH: 0.20,
    Closeness.PRESENT: None,
}
"""Allowed difference as a fraction; None: any strength will do. A house choice."""


@dataclass(frozen=True, slots=True)
class Balance:
    """A balance: its step in µg, and the days it is away."""

    name: str
    step: int
    away: tuple[tuple[date, date], ...] = ()

    def here(self, day: date) -> bool:
        """True when it can be used that day."""
        # both days away: it goes off in the morning and comes back in the evening
        return not any(first <= day <= last for first, last in self.away)


@dataclass(frozen=True, slots=True)
class Glass:
    """A piece of measuring glass: size and finest mark in µL, and the days it is away.

    `kind` is pipette, graduated pipette, burette, flask or cylinder; `glass_class`
    is "A", "B" or "" where nobody looked.
    """

    name: str
    kind: str
    size: int
    glass_class: str = ""
    step: int | None = None
    away: tuple[tuple[date, date], ...] = ()

    def here(self, day: date) -> bool:
        """True when it can be used that day."""
        return not any(first <= day <= last for first, last in self.away)


@dataclass(frozen=True, slots=True)
class Vessel:
    """A flask or carboy to make up in: what it holds in µL, and the days it is away."""

    name: str
    size: int
    away: tuple[tuple[date, date], ...] = ()

    def here(self, day: date) -> bool:
        """True when it can be used that day."""
        return not any(first <= day <= last for first, last in self.away)


@dataclass(frozen=True, slots=True)
class Department:
    """Who pays: code, name, and pence left for the term (None: no limit kept)."""

    code: str
    name: str
    left_pence: int | None = None


@dataclass(frozen=True, slots=True)
class Place:
    """Where bottles stand: °C if known, and the storage group it is kept for."""

    name: str
    title: str
    temperature_c: float | None = None
    meant_for: str = ""


@dataclass(frozen=True, slots=True)
class House:
    """What is settled once for the whole house. Amounts in µL."""

    name: str = "this house"
    practice: bool = False
    margin_days: int = 2
    default_lead: int = 10
    batch_step: int = 50_000
    heel_floor: int = 50_000
    finish_day_before: bool = True
    largest_vessel: int | None = None
    day_minutes: int = 300
    """Hands-on minutes that fill a day, since classes take the rest; 0: no limit is kept."""
