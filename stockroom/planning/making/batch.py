"""One batch while it is worked out, where it comes from, and what it takes of bought lines."""

from __future__ import annotations

from dataclasses import dataclass, field
from datetime import date

from stockroom.planning.explode import Need
from stockroom.planning.facts import Facts, Line, Method
from stockroom.planning.making.batches import Run
from stockroom.planning.making.groups import Group
from stockroom.planning.timing import Moment
from stockroom.planning.wants import TOO_CLOSE, Want
from stockroom.planning.windows import good_until


@dataclass(slots=True)
class Source:
    """So much of a line for a batch: from a bottle, or (`bottle` "") made or bought."""

    line: Line
    amount: int
    bottle: str = ""
    strength: float | None = None
    batch: Batch | None = None


@dataclass(slots=True)
class Batch:
    """One batch as it is worked out; `decide.py` freezes it into a Make.

    `forced` is what a rule adds to the rounded need (smallest batch, least
    weighable), µL; `vessels` how many it takes.
    """

    line: Line
    method: Method
    run: Run
    start: Moment
    ready: Moment
    volume: int
    sources: list[Source] = field(default_factory=list)
    reasons: list[str] = field(default_factory=list)
    forced: int = 0
    vessels: int = 1
    id: str = ""
    group: Group | None = None
    wants: list[Want] = field(init=False)
    """Every want it serves, in order."""

    def __post_init__(self) -> None:
        served = (want for item in self.run.items for want in item.wants)
        # kept, since a batch is asked for them at every step
        self.wants = sorted(served, key=lambda want: want.need.rank)

    @property
    def needs(self) -> list[Need]:
        """Every need it serves in the end, each once, in order."""
        return list({want.ref: want.need for want in self.wants}.values())

    @property
    def heel(self) -> int:
        """What is left over when all is served, µL."""
        return max(0, self.volume - self.run.needed)

    @property
    def forced_part(self) -> float:
        """The part a rule forces of what is made over the exact need, 0 to 1; else rounding."""
        over = self.volume - self.run.needed
        return min(1.0, self.forced / over) if over > 0 else 0.0

    @property
    def fresh(self) -> bool:
        """True when it is made on the morning of its booking."""
        return any(item.fresh for item in self.run.items)


@dataclass(frozen=True, slots=True)
class Taken:
    """What a need takes of a bought line: from the shelf by bottle, and still `to_buy`.

    Running sums, orders and shares are made of these. `start` is the day it is
    wanted: of the make, or of the booking itself. `close` says of bottles that would have
    done, but for so little that nothing is counted on it.
    """

    line: str
    need: Need
    start: date
    held: tuple[tuple[str, int], ...] = ()
    to_buy: int = 0
    close: tuple[str, ...] = ()

    @property
    def amount(self) -> int:
        """All of it, micro-units."""
        return self.to_buy + sum(amount for _, amount in self.held)


def taken_for(want: Want, start: date, held: int, to_buy: int, bottles: list[str]) -> Taken:
    """What one want takes: `held` from its bottles (else from `bottles`), and `to_buy` besides."""
    row: dict[str, int] = {}
    for promise in want.promises:
        share = min(promise.amount, held)
        row[promise.bottle] = row.get(promise.bottle, 0) + share
        held -= share
    last = next(iter([*reversed(bottles), *row]), "")
    if held and last:
        row[last] = row.get(last, 0) + held
    return Taken(want.line, want.need, start, tuple(row.items()), to_buy, _too_close(want))


def _too_close(want: Want) -> tuple[str, ...]:
    """What was too close to call for it, or for what it goes into, in words."""
    asked: Want | None = want
    found: list[str] = []
    while asked is not None:
        found += [words for words in asked.reasons if TOO_CLOSE in words]
        asked = asked.under
    return tuple(dict.fromkeys(words.partition(", count on")[0] for words in found))


def taken_alone(want: Want, start: date) -> Taken:
    """What a want takes as netting left it: its promises, and what is to be bought."""
    held = sum(promise.amount for promise in want.promises)
    return taken_for(want, start, held, want.to_buy, [])


def keeps(facts: Facts, line: Line, heel: int, made: date) -> bool:
    """True when a heel of this size becomes stock: above the floor, and of a line that keeps."""
    # a bottle of dregs costs a label and a place, and nobody counts on it
    if heel <= facts.house.heel_floor or line.never_kept:
        return False
    until = good_until(line, made)
    return until is None or until > made
