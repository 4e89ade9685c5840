"""What the house says of a kind of thing: one rule per line of its table.

A stock line carries any number of rules. Each says one thing (see `RuleKind`),
and may hold only for a band of strength, or for a warm or a cold place.
"""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum

from stockroom.measure.periods import Period


class RuleKind(StrEnum):
    """The kinds of ageing rule; `verdict.py` holds one function for each."""

    LIFE = "life"
    """Good for a period from an origin date, then past."""
    SAME_DAY = "same day"
    """Good on the day it was made, then past."""
    RECHECK = "recheck"
    """Its strength is known for a period from the last found strength; then watch."""
    LOOK = "look"
    """Good for a period from the last look (or from making); then past until looked at."""
    TEST = "test or discard"
    """A safety date from opening, moved only by a passed test."""
    FADES = "fades"
    """Loses strength by a law of order 0, 1 or 2."""
    NEVER = "never kept"
    """Never stock at all."""


class Origin(StrEnum):
    """The day a period is counted from."""

    RECEIVED = "received"
    OPENED = "opened"
    MADE = "made"


class Purpose(StrEnum):
    """What the contents are wanted for; a standard ages faster than an indicator."""

    ANY = "any"
    EXACT = "exact"


@dataclass(frozen=True, slots=True)
class Law:
    """How strength falls: `rate` per day in the line's unit, at `at_c`.

    order 0: unit/day; order 1: 1/day; order 2: 1/(unit·day). The rate is
    multiplied by `factor_per_10c` for each 10 °C above `at_c`. None for either
    means temperature is left out of account. `ea_kj_mol` is an activation energy in
    the place of the factor. A law with a name, such as "hypochlorite", has its own
    rate, and the figures here say nothing.
    """

    order: int
    rate: float
    at_c: float | None = None
    factor_per_10c: float | None = None
    ea_kj_mol: float | None = None
    named: str = ""


@dataclass(frozen=True, slots=True)
class Rule:
    """One ageing rule of a stock line.

    `lasts` counts from `origin`; for RECHECK and LOOK the last check moves it.
    `purpose` EXACT holds only where an exact strength is wanted. `above` and
    `upto` bound the nominal strength (above < strength ≤ upto), `colder_than`
    and `warmer_than` the place. `at_c` with `factor_per_10c` shortens `lasts` in a warmer
    place and lengthens it in a colder one. `safety` dates are never moved by a
    quality check. `source` says who says so, and `house` that the house
    set it itself in the place of a starter value.
    """

    kind: RuleKind
    lasts: Period | None = None
    origin: Origin = Origin.MADE
    purpose: Purpose = Purpose.ANY
    safety: bool = False
    law: Law | None = None
    at_c: float | None = None
    factor_per_10c: float | None = None
    above: float | None = None
    upto: float | None = None
    colder_than: float | None = None
    warmer_than: float | None = None
    source: str = ""
    house: bool = False

    def holds_for(self, strength: float | None, temperature_c: float | None) -> bool:
        """True when this rule speaks of a bottle of that nominal strength in that place.

        Nobody knows how warm an unknown place is, so the rules for cold and for
        warm ones both hold there, and the shorter life decides.
        """
        # a bottle of unknown strength gets every band's rules, and the strictest decides
        if strength is not None and not _within(strength, self.above, self.upto):
            return False
        if temperature_c is None:
            return True
        cold_enough = self.colder_than is None or temperature_c <= self.colder_than
        warm_enough = self.warmer_than is None or temperature_c > self.warmer_than
        return cold_enough and warm_enough


def _within(value: float, above: float | None, upto: float | None) -> bool:
    # one part in a million keeps 0.05 typed as M/20 on the same side as 0.05
    over = above is None or value > above * (1 + 1e-6)
    under = upto is None or value <= upto * (1 + 1e-6)
    return over and under
