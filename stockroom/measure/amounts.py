"""An amount: a whole number of micrograms, microlitres or items.

Whole numbers, so that a ledger of ten thousand entries adds up exactly.
"""

from __future__ import annotations

import math
from dataclasses import dataclass
from decimal import ROUND_HALF_EVEN, Decimal
from enum import StrEnum
from functools import total_ordering

from stockroom.errors import BadAmount

# 64 bits of millionths hold nine million tonnes, so no sum in a store can overflow


class Kind(StrEnum):
    """What is being counted; amounts of two kinds never add."""

    MASS = "mass"
    VOLUME = "volume"
    ITEMS = "items"


BASE_UNIT: dict[Kind, str] = {Kind.MASS: "g", Kind.VOLUME: "cm3", Kind.ITEMS: "items"}

PER_UNIT: dict[Kind, int] = {Kind.MASS: 1_000_000, Kind.VOLUME: 1_000, Kind.ITEMS: 1}
"""Micrograms in a gram, microlitres in a cm³, and items, which do not come in parts."""

FULLEST_PERCENT = 105
"""More than this part of a bottle's size in it is a slip. Common practice, no source."""


def over_full(size: int, held: int) -> bool:
    """Whether `held` is past that part of the size, both in micro-units; size 0 is unknown."""
    return 0 < size * FULLEST_PERCENT < held * 100


@total_ordering
@dataclass(frozen=True, slots=True)
class Amount:
    """So many micrograms, microlitres or items.

    `micro` is whole and may be below zero (the change an entry makes). Amounts
    of one kind add, subtract and compare; two kinds raise `BadAmount`. There is
    no truth value: write `amount.micro > 0` or `amount.micro == 0`, whichever is meant.

    >>> Amount.grams(0.5) + Amount.grams(0.25)
    Amount(kind=<Kind.MASS: 'mass'>, micro=750000)
    """

    kind: Kind
    micro: int

    @classmethod
    def grams(cls, grams: float) -> Amount:
        """A mass given in g, rounded half-even, once, to whole micrograms."""
        return cls(Kind.MASS, _whole_micro(grams, Kind.MASS))

    @classmethod
    def cm3(cls, cubic: float) -> Amount:
        """A volume given in cm³, rounded half-even, once, to whole microlitres."""
        return cls(Kind.VOLUME, _whole_micro(cubic, Kind.VOLUME))

    @classmethod
    def items(cls, count: float) -> Amount:
        """A count of things, rounded half-even, once, to whole ones."""
        return cls(Kind.ITEMS, _whole_micro(count, Kind.ITEMS))

    @property
    def number(self) -> float:
        """The amount in g, cm³ or items."""
        return self.micro / PER_UNIT[self.kind]

    @property
    def unit(self) -> str:
        """The unit `number` is in: "g", "cm3" or "items"."""
        return BASE_UNIT[self.kind]

    def __add__(self, other: Amount) -> Amount:
        return Amount(self.kind, self.micro + self._same_kind(other).micro)

    def __sub__(self, other: Amount) -> Amount:
        return Amount(self.kind, self.micro - self._same_kind(other).micro)

    def __lt__(self, other: Amount) -> bool:
        return self.micro < self._same_kind(other).micro

    def __bool__(self) -> bool:
        # "if amount:" could mean "is one known?" or "is any left?", so neither is guessed
        raise TypeError(f"{self!r} is neither true nor false: compare its .micro with 0.")

    def _same_kind(self, other: Amount) -> Amount:
        if self.kind is not other.kind:
            raise BadAmount(
                f"{self.number:g} {self.unit} and {other.number:g} {other.unit} do not add up:"
                f" one is {self.kind}, the other {other.kind}.",
                "Give both in g, both in cm³, or both as items.",
            )
        return other


def _whole_micro(number: float, kind: Kind) -> int:
    if not math.isfinite(number):
        raise BadAmount(f"{number} {BASE_UNIT[kind]} is not an amount.", "Give a plain number.")
    # through repr: 0.0000005 typed is a tie, and the binary float beside it is not
    micro = Decimal(repr(float(number))) * PER_UNIT[kind]
    return int(micro.to_integral_value(ROUND_HALF_EVEN))
