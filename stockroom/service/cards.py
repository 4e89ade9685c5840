"""The makes a person asks the cards of, and the hazards of all that goes in and comes out."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date

from stockroom.errors import StockroomError
from stockroom.planning.decisions import Make, Plan
from stockroom.planning.facts import Facts
from stockroom.safety.clp import Classification
from stockroom.safety.hazards import Hazards
from stockroom.service.hazard_names import House, house_of
from stockroom.service.hazards import of_bottle, of_kept_line
from stockroom.service.sheets import known_and_planned
from stockroom.settings import StoreAt
from stockroom.store.likeness import unknown
from stockroom.store.printed_copies import copy_with
from stockroom.store.reading import reading


@dataclass(frozen=True, slots=True)
class Asked:
    """The facts, the plan, and the makes asked for in the order of their days."""

    known: Facts
    plan: Plan
    makes: tuple[Make, ...]


def makes_named(path: StoreAt, names: Sequence[str], *, as_at: date) -> Asked:
    """The makes of these numbers, or for these bookings.

    Raises: UnknownName with the nearest for a name that is neither.
    """
    known, plan = known_and_planned(path, as_at=as_at)
    typed = {name.strip().upper() for name in names}
    days = [booking.on for booking in known.bookings if booking.number in typed]
    if days and max(days) > known.end:
        known, plan = known_and_planned(path, as_at=as_at, through=max(days))
    found = [make for name in names for make in _named(known, plan, name)]
    wanted = {make.id for make in found}
    return Asked(known, plan, tuple(make for make in plan.makes if make.id in wanted))


def _named(known: Facts, plan: Plan, name: str) -> list[Make]:
    typed = name.strip().upper()
    found = [make for make in plan.makes if typed in (make.id, *make.bookings)]
    if not found and typed not in {booking.number for booking in known.bookings}:
        numbers = [*(make.id for make in plan.makes), *(each.number for each in known.bookings)]
        raise unknown("make or booking", name, numbers)
    return found


def makes_between(path: StoreAt, first: date, last: date, *, as_at: date) -> Asked:
    """The makes worked on between two days, both counted: begun, or gone on with."""
    known, plan = known_and_planned(path, as_at=as_at, through=last)
    makes = [make for make in plan.makes if any(first <= each <= last for each in _days(make))]
    return Asked(known, plan, tuple(makes))


def _days(make: Make) -> tuple[date, date]:
    return make.on, make.finish_on or max(make.on, make.ready)


def copy_numbering(path: StoreAt, start: str) -> tuple[str, str] | None:
    """The card or labels printed last with a line whose key begins so: copy number and key."""
    with reading(path) as reader:
        return copy_with(reader, ("card", "label"), start)


def hazards_for(path: StoreAt, plan: Plan, makes: Sequence[Make]) -> dict[str, Hazards]:
    """The hazards of every bottle and line these makes take from, and of what they make.

    By bottle number or line key. Never raises for one of them: what cannot be worked out
    is "not entered".
    """
    draws = [draw for make in makes for draw in make.sources]
    numbers = {draw.bottle for draw in draws if draw.bottle}
    lines = {make.line for make in makes} | {draw.line for draw in draws if not draw.bottle}
    return hazards_held(path, numbers, lines, as_at=plan.as_at)


def hazards_held(
    path: StoreAt, numbers: Iterable[str], lines: Iterable[str], *, as_at: date
) -> dict[str, Hazards]:
    """The hazards of bottles by number, and of lines by key. Never raises for one of them."""
    with reading(path) as reader:
        house = house_of(reader, as_at)
        found = {key: _of_line(house, key) for key in sorted(lines)}
        return found | {number: _of_bottle(house, number) for number in sorted(numbers)}


def _of_line(house: House, key: str) -> Hazards:
    try:
        return of_kept_line(house, house.recipes.lines[key])
    except StockroomError as trouble:
        return _not_entered(key, trouble)


def _of_bottle(house: House, number: str) -> Hazards:
    try:
        bottle = house.bottle(number)
        if bottle is not None:
            return of_bottle(house, bottle)
    except StockroomError as trouble:
        return _not_entered(number, trouble)
    return Hazards(number, "", Classification(unknown=(number,), entered=False))


def _not_entered(what: str, trouble: StockroomError) -> Hazards:
    lacking = Classification(notes=(trouble.message,), unknown=(what,), entered=False)
    return Hazards(what, "", lacking)
