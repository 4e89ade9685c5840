"""What the two technicians of the simulated year can do, as data: it travels, and it prints."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, field
from datetime import date, timedelta
from pathlib import Path
from typing import Any

from stockroom.measure.amounts import Amount, Kind
from stockroom.measure.by_eye import parse_drawn
from stockroom.measure.strengths import Strength, StrengthUnit
from stockroom.service import bookings, checks, making, pouring, stock
from stockroom.service.answers import Done


@dataclass(frozen=True, slots=True)
class Act:
    """One thing done. `micro` of the kind named is how much, `ago` how many days before today.

    `words` are whatever else it wants said, by name.
    """

    verb: str
    bottle: str = ""
    micro: int = 0
    kind: str = ""
    ago: int = 0
    words: dict[str, str] = field(default_factory=dict)

    def __str__(self) -> str:
        """The act in a few words, for whoever reads what led to a fault."""
        said = " ".join(f"{name}={word}" for name, word in self.words.items())
        much = f" {self.micro} µ{self.kind}" if self.micro else ""
        late = f" ({self.ago} d ago)" if self.ago else ""
        return f"{self.verb} {self.bottle}{much} {said}{late}".strip()

    @property
    def amount(self) -> Amount:
        """How much, as an amount."""
        return Amount(Kind(self.kind), self.micro)


def perform(path: Path, act: Act, today: date, by: str) -> Done:
    """Do it through the real service. Raises: as that does."""
    said: dict[str, Any] = {"today": today, "by": by}
    if act.verb in _OF_BOOKINGS:
        return _OF_BOOKINGS[act.verb](path, act, said)
    said["on"] = today - timedelta(days=act.ago) if act.ago else None
    return _AT_THE_SHELF[act.verb](path, act, said)


Does = Callable[[Path, Act, dict[str, Any]], Done]

_AT_THE_SHELF: dict[str, Does] = {
    "arrive": lambda path, act, said: stock.arrive(
        path,
        act.words["line"],
        act.amount,
        printed=act.words["printed"],
        place=act.words["place"],
        count=int(act.words["count"]),
        **said,
    ),
    "open": lambda path, act, said: stock.open_bottle(path, act.bottle, **said),
    "draw": lambda path, act, said: stock.draw(
        path, act.bottle, act.amount, booking=act.words.get("booking"), **said
    ),
    "judge": lambda path, act, said: stock.draw(
        path, act.bottle, parse_drawn(act.words["eye"]), **said
    ),
    "spill": lambda path, act, said: stock.spill(
        path, act.bottle, act.amount, note="knocked over", **said
    ),
    "lend": lambda path, act, said: stock.lend(
        path, act.bottle, act.amount, to="the physics store", **said
    ),
    "lend back": lambda path, act, said: stock.lend_back(
        path, act.bottle, act.amount, whom="the physics store", **said
    ),
    "move": lambda path, act, said: stock.move(path, act.bottle, act.words["place"], **said),
    "count": lambda path, act, said: stock.count(path, act.bottle, act.amount, **said),
    "discard": lambda path, act, said: stock.discard(
        path, act.bottle, how="usual route", why="past", **said
    ),
    "put right": lambda path, act, said: stock.put_right(
        path, int(act.words["entry"]), "slip of the pen", **said
    ),
    "make": lambda path, act, said: making.make_up(
        path, act.words["line"], act.amount, sources=[], place=act.words["place"], sure=True, **said
    ),
    "decant": lambda path, act, said: pouring.decant(
        path, act.bottle, act.amount, place=act.words["place"], **said
    ),
    "mix": lambda path, act, said: pouring.mix(
        path, act.bottle, act.words["with"], act.amount, place=act.words["place"], **said
    ),
    "found": lambda path, act, said: checks.found(
        path, act.bottle, _molar(act.words["strength"]), **said
    ),
    "look": lambda path, act, said: checks.look(
        path, act.bottle, passed=act.words["passed"] == "yes", **said
    ),
    "lost": lambda path, act, said: checks.lost(path, act.bottle, **said),
    "turned up": lambda path, act, said: checks.turned_up(
        path, act.bottle, act.words["place"], **said
    ),
    "spoil": lambda path, act, said: checks.spoil(path, act.bottle, "cloudy", **said),
}

_OF_BOOKINGS: dict[str, Does] = {
    "book": lambda path, act, said: bookings.book(
        path,
        None,
        act.words["recipe"],
        date.fromisoformat(act.words["on"]),
        int(act.words["minute"]),
        int(act.words["groups"]),
        act.words["department"],
        **said,
    ),
    "shift": lambda path, act, said: bookings.shift(
        path, act.words["booking"], on=date.fromisoformat(act.words["on"]), **said
    ),
    "cancel": lambda path, act, said: bookings.cancel(
        path, act.words["booking"], why="staff away", **said
    ),
    "take back": lambda path, act, said: bookings.take_back(
        path, act.words["booking"], why="on after all", **said
    ),
}


def _molar(text: str) -> Strength:
    return Strength(float(text.split()[0]), StrengthUnit.MOLAR, text)
