"""What stands on the shelves on a day: bottles with their lines and verdicts, in shelf order."""

from __future__ import annotations

from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from datetime import date

from stockroom.findings import Finding
from stockroom.keeping.verdict import Verdict, verdict
from stockroom.planning.facts import Bottle, Line, Place
from stockroom.planning.numbers import natural


@dataclass(frozen=True, slots=True)
class OnShelf:
    """One bottle, what it holds, and what it is like that day.

    `doubt` says which bottle it was made from is set aside, "" for none.
    """

    bottle: Bottle
    line: Line
    verdict: Verdict
    doubt: str = ""


@dataclass(frozen=True, slots=True)
class Shelf:
    """The answer to "what stands there" and to "where is it".

    `asked` is what was asked for in the words of the store ("A1 acids cupboard"), "" for
    everything; `known_on` is there when only what was entered by that day counts.
    `neighbours` is told of whole places only. A `forecast` is of a day still to come.
    """

    asked: str
    on: date
    rows: tuple[OnShelf, ...]
    house: str
    practice: bool
    known_on: date | None = None
    neighbours: tuple[Finding, ...] = ()
    forecast: bool = False


def on_shelf(
    bottles: Iterable[Bottle],
    lines: Mapping[str, Line],
    places: Sequence[Place],
    on: date,
    every: Sequence[Bottle] = (),
) -> tuple[OnShelf, ...]:
    """The bottles with their verdicts that day, in shelf order.

    Doubts come from `every` bottle there is; without them none is told.
    """
    return tuple(
        OnShelf(
            one,
            lines[one.line],
            verdict(one.record, lines[one.line].rules, on),
            set_aside_above(one, every),
        )
        for one in in_shelf_order(bottles, [place.name for place in places])
    )


def set_aside_above(bottle: Bottle, bottles: Iterable[Bottle]) -> str:
    """Which bottle it was made from has been set aside since, and why; "" if none."""
    # most are made from nothing here, and then the bottles need not be gone through
    if not bottle.lineage:
        return ""
    apart = {one.number: one.record.set_aside for one in bottles if one.record.set_aside}
    number = next((number for number in bottle.lineage if number in apart), "")
    return f"made from {number}, since set aside ({apart[number]})" if number else ""


def in_shelf_order(bottles: Iterable[Bottle], places: Sequence[str]) -> list[Bottle]:
    """By place, as the house lists its places, then by number; without a place at the end."""
    order = {place: rank for rank, place in enumerate(places)}
    # a place the list leaves out comes after those it names, and none at all last
    last = len(order)

    def key(bottle: Bottle) -> tuple[int, str, tuple[str, int, str]]:
        rank = order.get(bottle.place, last if bottle.place else last + 1)
        return rank, bottle.place, natural(bottle.number)

    return sorted(bottles, key=key)
