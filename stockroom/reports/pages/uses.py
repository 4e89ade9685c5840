"""What leans on a bottle in a plan: the bookings and makes that draw on it, and those it fails."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Line
from stockroom.reports.words import amount, named, raised


@dataclass(frozen=True, slots=True)
class Use:
    """One amount promised from a bottle: `thing` is the booking or make, `ref` its line of a plan.

    `about` says what it is for: the practical, or what is made.
    """

    ref: str
    thing: str
    on: date
    micro: int
    kind: Kind
    about: str

    @property
    def amount(self) -> str:
        """How much, as a person measures it."""
        return amount(self.micro, self.kind)


@dataclass(frozen=True, slots=True)
class Leaning:
    """What is promised from a bottle by day, and the other bookings it matters for as it is."""

    promised: tuple[Use, ...] = ()
    matters_for: tuple[str, ...] = ()

    @property
    def things(self) -> tuple[str, ...]:
        """The bookings and makes it is promised to, each once."""
        return tuple(dict.fromkeys(use.thing for use in self.promised))

    @property
    def total(self) -> str:
        """All that is promised from it; "" for nothing."""
        if not self.promised:
            return ""
        return amount(sum(use.micro for use in self.promised), self.promised[0].kind)


NOTHING = Leaning()
"""Of a bottle that nobody needs."""


def what_of(line: Line) -> str:
    """What a bottle of a line holds, its strength kept on one line."""
    strength = line.strength_text
    item = line.key.removesuffix(strength).rstrip() if strength else line.key
    return named(item, strength if line.key.endswith(strength) else "")


def leaning_on(plan: Plan, since: date | None = None) -> dict[str, Leaning]:
    """What leans on each bottle, by number; with `since`, only what is still to come that day."""
    promised: dict[str, list[Use]] = {}
    for bottle, use in (*_for_bookings(plan), *_for_makes(plan)):
        if since is None or use.on >= since:
            promised.setdefault(bottle, []).append(use)
    matters = {past.bottle: past.matters_for for past in plan.past}
    return {
        bottle: _leaning(promised.get(bottle, []), matters.get(bottle, ()))
        for bottle in dict.fromkeys((*promised, *matters))
    }


def _leaning(promised: list[Use], matters: tuple[str, ...]) -> Leaning:
    served = {use.thing for use in promised}
    return Leaning(
        tuple(sorted(promised, key=lambda use: (use.on, use.ref))),
        tuple(booking for booking in matters if booking not in served),
    )


def _for_bookings(plan: Plan) -> Iterator[tuple[str, Use]]:
    for need in plan.needs:
        for draw in need.draws:
            if draw.bottle:
                booking, title = need.booking, need.recipe_title
                use = Use(need.ref, booking.number, booking.on, draw.amount, draw.kind, title)
                yield draw.bottle, use


def _for_makes(plan: Plan) -> Iterator[tuple[str, Use]]:
    for make in plan.makes:
        for source in make.sources:
            if source.bottle:
                about = raised(f"to make {named(make.item, make.strength)}")
                use = Use(make.id, make.id, make.on, source.amount, source.kind, about)
                yield source.bottle, use
