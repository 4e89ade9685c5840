"""What must be in each bottle, worked out anew from what was done: the ledger's independent judge.

It knows nothing of entries that undo or even out others. A change is added on its day, a count
says what was there on its day, and what was put right never happened.
"""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date


@dataclass(frozen=True, slots=True)
class Fact:
    """One thing that was done to a bottle, by the number of its entry.

    `change` in micro-units is added; where `counted` is said, that is what was there.
    """

    entry: int
    bottle: str
    on: date
    change: int = 0
    counted: int | None = None


@dataclass
class Model:
    """All that was done and stands, by bottle."""

    facts: dict[str, dict[int, Fact]] = field(default_factory=dict)
    where: dict[int, str] = field(default_factory=dict)

    def add(self, fact: Fact) -> None:
        """Remember what was done."""
        self.facts.setdefault(fact.bottle, {})[fact.entry] = fact
        self.where[fact.entry] = fact.bottle

    def never(self, entry: int) -> None:
        """Forget what was put right; nothing where it changed no balance."""
        bottle = self.where.pop(entry, None)
        if bottle is not None:
            del self.facts[bottle][entry]

    def held(self, bottle: str, on: date | None = None) -> int:
        """Micro-units in a bottle at the end of a day, or with everything that was done."""
        told = self.facts.get(bottle, {}).values()
        held = 0
        # within a day in the order it was written down
        for fact in sorted(told, key=lambda fact: (fact.on, fact.entry)):
            if on is None or fact.on <= on:
                held = fact.change + held if fact.counted is None else fact.counted
        return held
