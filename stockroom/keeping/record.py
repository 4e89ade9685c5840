"""What is known about one bottle's ageing: its dates, its checks, where it stood."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from enum import StrEnum

from stockroom.keeping.caution import Caution
from stockroom.keeping.temperatures import TemperatureLog
from stockroom.measure.days import PrintedDate


class CheckKind(StrEnum):
    """How a bottle was checked."""

    FOUND = "found"
    """A strength was measured."""
    LOOKED = "looked"
    """A yes-or-no inspection by eye."""
    TESTED = "tested"
    """A peroxide-former's named test, the only thing that moves a safety date."""


@dataclass(frozen=True, slots=True)
class Check:
    """One dated check.

    `strength` and its standard `uncertainty` are in the line's own unit, for a found
    strength only; `peroxide_mg_kg`, counted as H2O2, is for a peroxide-former's test only.
    """

    on: date
    kind: CheckKind
    passed: bool = True
    strength: float | None = None
    uncertainty: float | None = None
    peroxide_mg_kg: float | None = None


@dataclass(frozen=True, slots=True)
class Stay:
    """Where a bottle stood from a day on: the place's name and its °C, if known.

    `log` is what a logger wrote there; it counts before the place's own °C.
    """

    since: date
    place: str
    temperature_c: float | None
    log: TemperatureLog | None = None


@dataclass(frozen=True, slots=True)
class Record:
    """The dates, checks and stays of one bottle; None means nobody wrote it down.

    `nominal` is the label's strength in the line's unit (mol/dm³ or g/dm³).
    `opened_guessed` marks an opened bottle whose day was not written: it counts
    as opened on the day it was received, the earliest it can have been. `caution` is
    there in a plan on the safe side only.
    """

    received: date | None = None
    opened: date | None = None
    opened_guessed: bool = False
    made: date | None = None
    printed: PrintedDate | None = None
    nominal: float | None = None
    checks: tuple[Check, ...] = ()
    stays: tuple[Stay, ...] = ()
    set_aside: str = ""
    not_found: bool = False
    gone: bool = False
    ready_on: date | None = None
    caution: Caution | None = None

    @property
    def undated(self) -> bool:
        """True when neither received, made nor looked at: nothing to count a life from."""
        return self.undated_on(date.max)

    def undated_on(self, day: date) -> bool:
        """The same, as far as anybody knew on that day."""
        # opened is left out: it says when it was used, not how old it was by then
        return not (self.received or self.made or self.first_passed(day))

    def first_passed(self, until: date) -> date | None:
        """The day of the first passed check up to and including `until`, if any."""
        return min((c.on for c in self.checks if c.passed and c.on <= until), default=None)
