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
class Blend:
    """The strength of bottles mixed on a day, worked out from theirs, in the line's unit.

    No check, so it dates nothing: what is expected starts from it until one is made.
    """

    on: date
    strength: float


@dataclass(frozen=True, slots=True)
class Bound:
    """A last good day that no check moves, and what set it, in words.

    What was poured never outlasts the bottle it came from; its own label may say less.
    """

    until: date
    because: str
    safety: bool = False


@dataclass(frozen=True, slots=True)
class Record:
    """The dates, checks and stays of one bottle; None means nobody wrote it down.

    `nominal` is the label's strength in the line's unit (mol/dm³ or g/dm³).
    `opened_guessed` marks an opened bottle whose day was not written: it counts
    as opened on the day it was received, the earliest it can have been. `caution` is
    there in a plan on the safe side only. `blend` and `bound` are there for what was
    poured from other bottles; `from_undated` where one of those had no date that day.
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
    blend: Blend | None = None
    bound: Bound | None = None
    from_undated: bool = False

    @property
    def undated(self) -> bool:
        """True when no day of it is known, nor printed: nothing to count a life from."""
        return self.undated_on(date.max)

    def undated_on(self, day: date) -> bool:
        """The same, as far as anybody knew on that day."""
        # a date printed on it or the day it was opened dates it, though nobody wrote when it came
        printed = self.printed is not None and self.printed.day is not None
        known = self.received or self.made or self.opened or printed
        # pouring it dates nothing, whatever the new bottle or the other part says
        dated = known and not self.from_undated
        return not (dated or self.first_passed(day))

    def first_passed(self, until: date) -> date | None:
        """The day of the first passed check up to and including `until`, if any."""
        return min((c.on for c in self.checks if c.passed and c.on <= until), default=None)
