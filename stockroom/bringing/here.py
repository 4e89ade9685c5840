"""What the store holds already, as a row may tell of it: the same row again, or the same bottle."""

from __future__ import annotations

import hashlib
from collections.abc import Container, Iterable, Mapping
from dataclasses import dataclass, field
from datetime import date

from stockroom.bringing.row import Incoming

UNOPENED, SOMETIME = "", "?"
"""How a bottle that nobody opened, and one opened on a day nobody wrote, stand beside days."""

# as long as the mark of a text, for the same reason
_LENGTH = 16


@dataclass(frozen=True, slots=True)
class Standing:
    """A bottle here. `places` are all it ever stood in, `size` in millionths of its unit.

    `opened` are the ISO days it may have in a list: one brought in may be
    unopened there still. `listed` is True where it was brought in from a list.
    """

    number: str
    line: str
    places: frozenset[str]
    size: int
    opened: frozenset[str]
    printed: date | None
    listed: bool = False


Key = tuple[str, str, date | None, str | None]


def _keys(bottle: Standing) -> Iterable[Key]:
    for opened in bottle.opened:
        for place in (None, *(bottle.places or ("",))):
            yield bottle.line, opened, bottle.printed, place


@dataclass(frozen=True, slots=True)
class Here:
    """Bottles here: by the mark of the row they were brought in by, by its reading, by their kind.

    `readings` has a group of numbers for each row that was read so.
    """

    marks: Mapping[str, tuple[str, ...]] = field(default_factory=dict)
    readings: Mapping[str, tuple[tuple[str, ...], ...]] = field(default_factory=dict)
    standing: Mapping[Key, tuple[Standing, ...]] = field(default_factory=dict)

    def read_so(self, reading: str, claimed: Container[str]) -> tuple[str, ...]:
        """The bottles of a row that was read the same, none of another row's: () for none."""
        groups = self.readings.get(reading, ()) if reading else ()
        return next((each for each in groups if each[0] not in claimed), ())

    def like(self, incoming: Incoming, claimed: Container[str]) -> Standing | None:
        """A bottle that may be the very one: same thing, place, size, opened and printed.

        What a row does not say speaks for no other bottle, and where a day is the same the
        place may have changed. `claimed` are the bottles other rows of the list are.
        """
        line = incoming.line
        if line is None:
            return None
        printed = incoming.printed.day if incoming.printed else None
        opened = incoming.opened.isoformat() if incoming.opened else UNOPENED
        states = [SOMETIME, UNOPENED] if incoming.opened_sometime else [opened]
        dated = bool(incoming.opened or printed)
        places = [None] if dated or not incoming.place else [incoming.place, ""]
        for state in states:
            for place in places:
                for bottle in self.standing.get((line.key, state, printed, place), ()):
                    if bottle.number not in claimed and _same_size(incoming, bottle):
                        return bottle
        return None


NOTHING_HERE = Here()


def standing_by_key(bottles: Iterable[Standing]) -> dict[Key, tuple[Standing, ...]]:
    """Bottles by everything a row may say of them, so that no list is searched through."""
    found: dict[Key, list[Standing]] = {}
    # those of a list first: a row is sooner one of them than a bottle of no list
    for bottle in sorted(bottles, key=lambda each: not each.listed):
        for key in _keys(bottle):
            found.setdefault(key, []).append(bottle)
    return {key: tuple(each) for key, each in found.items()}


def _same_size(incoming: Incoming, bottle: Standing) -> bool:
    # a size that was taken from what is left changes as that does
    size = incoming.size
    return size is None or size == incoming.left or not bottle.size or size.micro == bottle.size


def reading_mark(incoming: Incoming | None) -> str:
    """Sixteen signs that stand for what a row was read as; "" for one that is not whole.

    A day saved as text and as a real date are two texts and one reading.
    """
    if incoming is None or incoming.line is None or incoming.left is None:
        return ""
    printed = incoming.printed.readings if incoming.printed else ()
    size = incoming.size.micro if incoming.size is not None else None
    said = (
        incoming.line.key, incoming.left.micro, size, incoming.count,
        incoming.opened, incoming.opened_sometime, incoming.received,
        incoming.made, printed, incoming.place, incoming.not_found, incoming.assay,
        incoming.lot.casefold(), incoming.note.casefold(),
    )  # fmt: skip
    return hashlib.sha256("\x1f".join(map(str, said)).encode()).hexdigest()[:_LENGTH]
