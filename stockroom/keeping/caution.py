"""What a plan on the safe side knows of one bottle: limits worked out beforehand.

A `Caution` rides on a bottle's record and is asked on every day the plan thinks of,
so it holds plain numbers only: the fits behind it are done once, in `safe_side.py`.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from enum import StrEnum

from stockroom.keeping.fits import Fit, strength_at, weak_side
from stockroom.keeping.rules import Rule

ONE_SIDED_95 = 1.645
"""Standard uncertainties below a result that 95 % of a normal distribution lies above."""


class Basis(StrEnum):
    """Where the lower limit of a bottle comes from, the best first."""

    OWN = "its own checks"
    LINE = "the checks of its line"
    DOUBT = "the uncertainty of what was found"


@dataclass(frozen=True, slots=True)
class Lower:
    """The lower limit of the mean strength against age, `reach` standard errors out."""

    fit: Fit
    order: int
    reach: float

    def at(self, age: float) -> float:
        """The strength the mean stays above, 95 % sure, at an age in days."""
        return strength_at(self.fit.limit(age, weak_side(self.order), self.reach), self.order)


@dataclass(frozen=True, slots=True)
class Caution:
    """How to doubt one bottle.

    `limits` hold against the age under `rule`, counted from `since` where that is given
    (after a top-up), else from the rule's origin; they speak from `from_age` days on.
    `carried_by` are the line's rules with the fading as fast as it may be; None leaves
    them as they are. `doubted` takes its uncertainty off what was found.
    """

    basis: Basis
    rule: Rule | None = None
    limits: tuple[Lower, ...] = ()
    from_age: float = 0.0
    since: date | None = None
    carried_by: tuple[Rule, ...] | None = None
    doubted: bool = False

    def least(self, age: float) -> list[float]:
        """The limits at an age, each never above what it was at `from_age`.

        The limit of a mean is widest at the ends of its results: read from a young age on
        it may first rise. It bends one way only, so its least is at one end or the other.
        """
        last = max(age, self.from_age)
        return [min(one.at(self.from_age), one.at(last)) for one in self.limits]


@dataclass(frozen=True, slots=True)
class LowerLimits:
    """A plan on the safe side: how many bottles have a lower limit, by where it is from.

    From their own checks, the checks of their line, the uncertainty of what was found;
    and those with nothing to be cautious with.
    """

    own: int = 0
    line: int = 0
    doubt: int = 0
    nothing: int = 0
