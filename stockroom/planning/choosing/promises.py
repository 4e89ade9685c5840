"""What is promised of a bottle, and to whom; and what says whether a bottle will do."""

from __future__ import annotations

from collections.abc import Callable, Iterator
from dataclasses import dataclass
from datetime import date

from stockroom.keeping.rules import Purpose
from stockroom.keeping.verdict import Verdict
from stockroom.planning.facts import Bottle

Judge = Callable[[Bottle, Verdict], str]
"""Says why a bottle will not do ("" when it will)."""


@dataclass(frozen=True, slots=True)
class Promise:
    """So much of a bottle for somebody (`for_ref`), on a day, judged by `judge`.

    `beside` others: of equal strength on that day, which an opening on another would end.
    """

    bottle: str
    amount: int
    on: date
    for_ref: str
    purpose: Purpose
    judge: Judge
    beside: bool = False


class Promises:
    """What is promised of one bottle, in the order it was promised; the first day is known."""

    __slots__ = ("_first", "_row")

    def __init__(self) -> None:
        # by identity: to find one among thousands by its values would take all day
        self._row: dict[int, Promise] = {}
        self._first: date | None = None

    def __iter__(self) -> Iterator[Promise]:
        return iter(self._row.values())

    def __len__(self) -> int:
        return len(self._row)

    @property
    def first(self) -> date | None:
        """The first day anything is drawn; None while nothing is promised."""
        if self._first is None and self._row:
            self._first = min(promise.on for promise in self)
        return self._first

    def add(self, made: Promise) -> None:
        """Put one more on."""
        first = self.first
        self._row[id(made)] = made
        self._first = made.on if first is None else min(first, made.on)

    def take_off(self, made: Promise) -> None:
        """Take one back: the very promise, not another that is equal to it."""
        del self._row[id(made)]
        # worked out again only when somebody asks
        if made.on == self._first:
            self._first = None
