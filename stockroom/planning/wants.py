"""A want: one need, or one ingredient of something to be made for it, while it is settled.

Wants form a tree under each need: the need itself, then what its make takes,
then what those take. Netting (`net.py`) settles each; batching reads them.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date
from enum import StrEnum

from stockroom.keeping.rules import Purpose
from stockroom.planning.choosing.shelf import Promise
from stockroom.planning.explode import Need
from stockroom.planning.facts import TOLERANCE, Closeness, Ingredient, Method
from stockroom.planning.timing import Moment


class Settled(StrEnum):
    """How a want came out."""

    OPEN = "open"
    HELD = "held"
    MAKE = "make"
    BUY = "buy"
    SHOP = "shop"
    SHORT = "short"
    REFUSED = "refused"


TOO_CLOSE = "too close to call"
"""Said of a bottle in which so little would be left that nothing is counted on it."""


@dataclass(slots=True)
class Want:
    """So much of a line (`amount`, or `solute` at its strength), in hand by `deadline`.

    `choices` are the lines that may give it, in order; `line` is the one being
    tried. `under` is the want whose make this is an ingredient of. A make may
    start from `earliest` (its keeping) and `ready_from` (what it takes) to `latest`.
    `on_way` is what comes of `to_buy` with orders already placed, by their numbers.
    """

    need: Need
    choices: tuple[str, ...]
    deadline: Moment
    amount: int | None = None
    solute: float | None = None
    under: Want | None = None
    ingredient: Ingredient | None = None
    tried: int = 0
    settled: Settled = Settled.OPEN
    promises: list[Promise] = field(default_factory=list)
    method: Method | None = None
    parts: list[Want] = field(default_factory=list)
    to_buy: int = 0
    on_way: list[tuple[str, int]] = field(default_factory=list)
    latest: Moment | None = None
    earliest: date | None = None
    ready_from: date | None = None
    available: date | None = None
    reasons: list[str] = field(default_factory=list)
    passed_over: list[tuple[str, str]] = field(default_factory=list)

    @property
    def line(self) -> str:
        """The line being tried."""
        return self.choices[self.tried]

    @property
    def ref(self) -> str:
        """The need it belongs to, "K08.2"."""
        return self.need.ref

    @property
    def use_day(self) -> date:
        """The day it is used: the booking's, or the last day its make can start."""
        # the latest start, not the day chosen in the end: a bottle good then is good before
        return self.need.on if self.under is None else self.deadline[0]

    @property
    def purpose(self) -> Purpose:
        """Exact only for the need itself: what it is made from only has to be known."""
        # a stock is measured by what it was found to be, so its batch need not be exact
        exact = self.under is None and self.need.requirement.closeness is Closeness.EXACT
        return Purpose.EXACT if exact else Purpose.ANY

    @property
    def tolerance(self) -> float | None:
        """How far off its amount may be, as a fraction; None when only presence matters."""
        requirement = self.need.requirement
        # the recipe's own figure before the word, which only stands for one
        return requirement.tolerance or TOLERANCE[requirement.closeness]

    def tree(self) -> list[Want]:
        """This want and everything under it."""
        return [self, *(want for part in self.parts for want in part.tree())]
