"""A walk along the shelves: what it is to count, what it met, and what came of it.

Differences are kept apart from consumption: what a count finds missing was not drawn,
as far as anybody wrote down.
"""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date
from enum import StrEnum

from stockroom.measure.amounts import Kind
from stockroom.planning.facts import Bottle, Place
from stockroom.planning.on_shelf import OnShelf


class Met(StrEnum):
    """How a walk met a bottle."""

    COUNTED = "counted"
    MISSING = "not found"
    TURNED_UP = "turned up"
    SEEN = "seen only"
    """It stands there; how much is in it was not looked at."""
    UNLISTED = "not on the list"


@dataclass(frozen=True, slots=True)
class Walk:
    """A round of counting; `places` are the short names it goes along, () for all of them."""

    name: str
    places: tuple[str, ...]
    started: date
    by: str
    ended: date | None = None
    ended_by: str = ""


@dataclass(frozen=True, slots=True)
class Visit:
    """One bottle as the walk met it, in micro-units.

    `left` is what it held by the walk's last word, of a missing one what went with it;
    `difference` what the counts of this walk added or took; `about` an estimate by eye.
    """

    bottle: str
    line: str
    kind: Kind
    how: Met
    left: int
    difference: int
    about: bool
    by: str
    on: date
    entry: int


@dataclass(frozen=True, slots=True)
class Sheet:
    """A walk as it stands: met so far, still to be counted, and to be looked out for.

    `again` is every bottle of it, met or not, where it is to be counted once more; () else.
    """

    walk: Walk
    visits: tuple[Visit, ...]
    to_count: tuple[OnShelf, ...]
    look_out: tuple[OnShelf, ...]
    places: tuple[Place, ...]
    house: str
    practice: bool
    again: tuple[OnShelf, ...] = ()

    @property
    def differing(self) -> tuple[Visit, ...]:
        """The bottles of which a count found more or less than was entered."""
        return tuple(visit for visit in self.visits if visit.difference)


@dataclass(frozen=True, slots=True)
class Total:
    """What the counts of one line came to, apart from consumption; `less` and `more` from 0 up."""

    line: str
    kind: Kind
    less: int
    more: int


def along(walk: Walk, bottles: Iterable[Bottle], met: Iterable[str]) -> list[Bottle]:
    """The bottles at the walk's places that it has not met; missing ones by their last place."""
    numbers = set(met)
    return [
        one
        for one in bottles
        if one.number not in numbers and (not walk.places or one.place in walk.places)
    ]


def totals(visits: Sequence[Visit]) -> tuple[Total, ...]:
    """The differences by line, A to Z."""
    found: dict[str, Total] = {}
    for visit in visits:
        if visit.difference:
            sum_ = found.get(visit.line, Total(visit.line, visit.kind, 0, 0))
            less, more = max(-visit.difference, 0), max(visit.difference, 0)
            found[visit.line] = Total(sum_.line, sum_.kind, sum_.less + less, sum_.more + more)
    return tuple(found[line] for line in sorted(found))
