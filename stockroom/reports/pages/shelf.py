"""The page along the shelf: bottles filtered and in order, a page of them at a time."""

from __future__ import annotations

from collections.abc import Iterable, Sequence
from dataclasses import dataclass
from datetime import date
from enum import StrEnum

from stockroom.errors import BadInput
from stockroom.findings import Danger, Finding
from stockroom.keeping.verdict import USABLE, Condition
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Place
from stockroom.planning.on_shelf import OnShelf, Shelf
from stockroom.reports.pages.uses import NOTHING, Leaning, leaning_on, what_of
from stockroom.reports.shelf_text import left_of, until_words
from stockroom.reports.words import counted, day_heading, days_in_words, raised

ROWS = 200
"""Bottles on one page at most. Our choice: more than anybody reads through."""

NOT_SOUND = "not sound"
"""The choice for everything that wants somebody's attention."""

CONDITIONS = (*(each.value for each in Condition if each is not Condition.GONE), NOT_SOUND)
"""What may be chosen among; a bottle that is gone is found by its number only."""


class Order(StrEnum):
    """How the rows are sorted."""

    PLACE = "place"
    UNTIL = "until"


@dataclass(frozen=True, slots=True)
class Asked:
    """What the form holds, as it was typed: it stands there again. "" is no filter."""

    what: str = ""
    place: str = ""
    condition: str = ""
    on: str = ""
    known_on: str = ""
    order: Order = Order.PLACE

    def query(self, **other: str | int) -> dict[str, str]:
        """The same for an address, `other` in the place of its own; what is empty is left out."""
        told = {
            "what": self.what,
            "place": self.place,
            "condition": self.condition,
            "on": self.on,
            "known_on": self.known_on,
            "order": "" if self.order is Order.PLACE else self.order.value,
        }
        return {key: str(value) for key, value in {**told, **other}.items() if value}


@dataclass(frozen=True, slots=True)
class ShelfRow:
    """One bottle. `until` says how long it is good and what decided that; `leaning` who needs it.

    `acts` are the names of forms that are likely while somebody walks along.
    """

    number: str
    what: str
    left: str
    place: str
    condition: str
    until: str
    leaning: Leaning
    acts: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Beside:
    """What must not stand as it does: which bottle, why, and whether it can hurt somebody."""

    bottle: str
    text: str
    danger: bool


@dataclass(frozen=True, slots=True)
class ShelfPage:
    """One page of the bottles found. `first` and `last` count from 1; `of` fit, of `every` found.

    `nearest` are the names offered where nothing was found by the one asked for; `trouble`
    is then why. `planned` is false for a day of which no plan is told.
    """

    title: str
    about: str
    asked: Asked
    places: tuple[Place, ...]
    rows: tuple[ShelfRow, ...] = ()
    first: int = 0
    last: int = 0
    of: int = 0
    every: int = 0
    number: int = 1
    pages: int = 1
    beside: tuple[Beside, ...] = ()
    walk: str = ""
    planned: bool = True
    trouble: str = ""
    nearest: tuple[str, ...] = ()


def order_of(text: str) -> Order:
    """The order of that name; by place for none. Raises: BadInput."""
    if text in ("", *Order):
        return Order(text or Order.PLACE)
    raise BadInput(f'"{text}" is no order of the shelf.', f"One of: {', '.join(Order)}.")


def shelf_page(
    shelf: Shelf,
    asked: Asked,
    places: Sequence[Place],
    place: Place | None,
    plan: Plan | None,
    number: int = 1,
) -> ShelfPage:
    """The page of that number, or the last there is. Raises: BadInput for no such condition."""
    _check_condition(asked.condition)
    fits = [row for row in shelf.rows if _fits(row, asked.condition)]
    if asked.order is Order.UNTIL:
        fits.sort(key=lambda row: row.verdict.good_until or date.max)
    pages = max(1, -(-len(fits) // ROWS))
    number = min(number, pages)
    shown = fits[(number - 1) * ROWS : number * ROWS]
    leaning = leaning_on(plan, shelf.on) if plan else {}
    return ShelfPage(
        title=_title(asked, place),
        about=_about(shelf, len(fits), place if asked.what else None),
        asked=asked,
        places=tuple(places),
        rows=tuple(_row(row, leaning) for row in shown),
        first=(number - 1) * ROWS + 1 if shown else 0,
        last=(number - 1) * ROWS + len(shown),
        of=len(fits),
        every=len(shelf.rows),
        number=number,
        pages=pages,
        beside=tuple(_beside(shelf.neighbours)),
        walk=place.name if place else "",
        planned=plan is not None,
    )


def nothing_found(
    asked: Asked, places: Sequence[Place], message: str, nearest: Iterable[str]
) -> ShelfPage:
    """The page for a name nobody knows: the form as it was typed, and the names most like it."""
    return ShelfPage(
        title="Along the shelf",
        about="",
        asked=asked,
        places=tuple(places),
        trouble=message,
        nearest=tuple(nearest),
    )


def nearest_in(hint: str) -> tuple[str, ...]:
    """The names an unknown one's hint offers: "Nearest: B06; B60; B16." has three."""
    told = hint.strip().removesuffix(".")
    if not told.startswith("Nearest: "):
        return ()
    return tuple(told.removeprefix("Nearest: ").split("; "))


def _check_condition(condition: str) -> None:
    if condition and condition not in CONDITIONS:
        raise BadInput(
            f'"{condition}" is no condition of a bottle.', f"One of: {', '.join(CONDITIONS)}."
        )


def _fits(row: OnShelf, condition: str) -> bool:
    found = row.verdict.condition
    if not condition:
        return True
    if condition == NOT_SOUND:
        return found not in (Condition.SOUND, Condition.GONE)
    return found == condition


def _title(asked: Asked, place: Place | None) -> str:
    title = "Along the shelf"
    if place is not None:
        title += f": {place.name} {place.title}".rstrip()
    return f"{title}: {asked.what}" if asked.what else title


def _about(shelf: Shelf, fits: int, place: Place | None) -> str:
    found = len(shelf.rows)
    words = counted(found, "bottle") if fits == found else f"{fits} of {counted(found, 'bottle')}"
    there = f" in {place.name}" if place else ""
    asked = f"{shelf.asked}{there}: " if shelf.asked else "All shelves: "
    known = f", as it was known on {day_heading(shelf.known_on)}" if shelf.known_on else ""
    ahead = " (a forecast: if nothing happens until then)" if shelf.forecast else ""
    return f"{asked}{words} on {day_heading(shelf.on)}{known}{ahead}"


def _row(row: OnShelf, leaning: dict[str, Leaning]) -> ShelfRow:
    bottle, condition = row.bottle, row.verdict.condition
    remark = f'; "{bottle.remark}"' if bottle.remark else ""
    return ShelfRow(
        number=bottle.number,
        what=what_of(row.line),
        left=left_of(row),
        place=bottle.place,
        condition=condition.value,
        until=raised(days_in_words(until_words(row))) + remark,
        leaning=leaning.get(bottle.number, NOTHING),
        acts=_acts(condition),
    )


def _acts(condition: Condition) -> tuple[str, ...]:
    if condition is Condition.GONE:
        return ()
    if condition is Condition.NOT_FOUND:
        return ("turned-up",)
    return ("draw", "count") if condition in USABLE else ("count",)


def _beside(findings: Iterable[Finding]) -> Iterable[Beside]:
    # what can hurt comes first; within each the order of the shelf is kept
    told = sorted(findings, key=lambda each: not isinstance(each, Danger))
    return (Beside(x.subject, raised(x.text), isinstance(x, Danger)) for x in told)
