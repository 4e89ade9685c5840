"""Trying without saving, as a page: what is supposed, what would differ, and where to do it.

Frozen values for `web/templates/try.html`. What may be supposed is a table here; the address of
the page holds all that was typed, so that it can be kept and handed on.
"""

from __future__ import annotations

from collections.abc import Collection, Iterator, Mapping, Sequence
from dataclasses import dataclass

from stockroom.planning.changing.changes import Comparison
from stockroom.reports.changes_text import headed, if_so, totals
from stockroom.reports.pages.links import Piece, linked
from stockroom.reports.words import day_heading, listed, raised

USUAL_ROWS, MORE_ROWS, MOST_ROWS = 3, 3, 20
"""Rows of each kind at first, how many more are added at a time, and at most. Our choice."""


@dataclass(frozen=True, slots=True)
class Ask:
    """One field of a row: its key in the address, its label, how to write it, names to offer."""

    name: str
    label: str
    hint: str = ""
    offers: str = ""


@dataclass(frozen=True, slots=True)
class Supposition:
    """One kind of thing that may be supposed, with the fields of a row of it."""

    name: str
    title: str
    asks: tuple[Ask, ...]


SUPPOSED = (
    Supposition(
        "resized",
        "A class of another size",
        (Ask("groups", "Booking", "as K08", "booking"), Ask("number", "Groups", "as 12")),
    ),
    Supposition(
        "shifted",
        "A class on another day, or at another time",
        (
            Ask("shift", "Booking", "as K08", "booking"),
            Ask("day", "Day", "as 2027-02-11"),
            Ask("time", "Time", "as 14:00"),
        ),
    ),
    Supposition(
        "added",
        "One class more",
        (
            Ask("book", "Recipe", "as R01", "recipe"),
            Ask("on", "Day", "as 2027-02-11"),
            Ask("for", "Groups", "as 12"),
            Ask("at", "Time", "as last time"),
            Ask("dept", "Department", "as last time", "department"),
        ),
    ),
    Supposition("dropped", "A class dropped", (Ask("cancel", "Booking", "as K08", "booking"),)),
    Supposition(
        "missing",
        "A bottle that is not there",
        (Ask("without", "Bottle", "as S03", "bottle"),),
    ),
)
"""All that may be supposed, in the order of the page; every `Ask.name` is there once."""

Pieces = tuple[Piece, ...]
"""Text with its names as links."""

Where = tuple[str, int]
"""A field and its row, from 0."""

Typed = Mapping[str, Sequence[str]]
"""What was typed: each field's values, one a row."""

Troubles = Mapping[Where, tuple[str, str]]
"""What is wrong with a field: the message, and what to do."""


@dataclass(frozen=True, slots=True)
class Cell:
    """One field as it stands: what was typed and, where it was refused, why."""

    id: str
    ask: Ask
    value: str
    message: str = ""
    hint: str = ""


@dataclass(frozen=True, slots=True)
class Block:
    """All rows of one kind; `used` where something is typed in one."""

    name: str
    title: str
    rows: tuple[tuple[Cell, ...], ...]
    used: bool


@dataclass(frozen=True, slots=True)
class Section:
    """Changes under their heading: the number of each, and what differs and why."""

    heading: str
    rows: tuple[tuple[Pieces, Pieces], ...]


@dataclass(frozen=True, slots=True)
class Way:
    """Where to really do what was tried: a form by its name, and what is filled into it."""

    text: str
    form: str
    values: Mapping[str, str]


@dataclass(frozen=True, slots=True)
class Difference:
    """What would change: `first` counts it; without changes there is nothing else."""

    first: str
    about: str
    sections: tuple[Section, ...]
    totals: tuple[tuple[str, str], ...]
    ways: tuple[Way, ...]


def value_at(typed: Typed, name: str, row: int) -> str:
    """What was typed in a field of a row; "" for nothing."""
    values = typed.get(name, ())
    return values[row].strip() if row < len(values) else ""


def rows_shown(typed: Typed, asked: int) -> int:
    """How many rows of each kind to show: as asked, within bounds, and never fewer than typed."""
    filled = [n + 1 for values in typed.values() for n, value in enumerate(values) if value.strip()]
    return min(max(USUAL_ROWS, asked, *filled), MOST_ROWS)


def blocks_of(typed: Typed, rows: int, troubles: Troubles) -> tuple[Block, ...]:
    """The fields with all that was typed, and what is wrong beside it."""
    return tuple(_block(each, typed, rows, troubles) for each in SUPPOSED)


def _block(kind: Supposition, typed: Typed, rows: int, troubles: Troubles) -> Block:
    cells = tuple(
        tuple(_cell(ask, row, typed, troubles) for ask in kind.asks) for row in range(rows)
    )
    used = any(cell.value or cell.message for row in cells for cell in row)
    return Block(kind.name, kind.title, cells, used)


def _cell(ask: Ask, row: int, typed: Typed, troubles: Troubles) -> Cell:
    message, hint = troubles.get((ask.name, row), ("", ""))
    return Cell(f"{ask.name}-{row + 1}", ask, value_at(typed, ask.name, row), message, hint)


def difference_of(
    comparison: Comparison, *, asked: Sequence[str], typed: Typed, keep: bool = False
) -> Difference:
    """What would change if; `asked` is what was supposed in words, `typed` as it was typed.

    `keep`: bookings are kept though the house is closed.
    """
    some = bool(comparison.open)
    return Difference(
        first=if_so(comparison),
        about=f"as at {day_heading(comparison.after.as_at)}, if {raised('; '.join(asked))}",
        sections=sections_of(comparison),
        totals=tuple(totals(comparison)) if some else (),
        ways=tuple(ways_of(typed, keep=keep)),
    )


def sections_of(comparison: Comparison) -> tuple[Section, ...]:
    """The changes still open under their headings, none of them empty.

    A number leads to its page where it is that of the plan as it stands: what is only supposed
    has none, and the reasons of another make must not be taken for its own.
    """
    booked = {booking.number for booking in comparison.before.bookings}
    return tuple(
        Section(
            heading.capitalize(),
            tuple((_number(number), in_words(told, booked)) for number, told in rows),
        )
        for heading, rows in headed(comparison)
    )


def _number(text: str) -> Pieces:
    pieces = linked(text)
    if pieces[0].href:
        # "M04 (now M05)": the second is of the plan supposed
        return (pieces[0], *(Piece(each.text) for each in pieces[1:]))
    return (Piece(text),)


def in_words(text: str, booked: Collection[str]) -> Pieces:
    """A change in words, with links to days, bottles, recipes, and bookings there really are."""
    return tuple(
        each if _stands(each.text, booked) else Piece(each.text) for each in linked(raised(text))
    )


def _stands(name: str, booked: Collection[str]) -> bool:
    # makes and orders are numbered anew in each plan
    if name.startswith("K"):
        return name.partition(".")[0] in booked
    return not name.startswith(("M", "O"))


def ways_of(typed: Typed, *, keep: bool = False) -> Iterator[Way]:
    """The form for each thing supposed, filled in with it; one for a booking changed twice."""
    kept = {"keep": "yes"} if keep else {}
    for booking, said in _changed(typed).items():
        told = [said[name] for name in ("on", "time") if name in said]
        told += [f"{said['groups']} groups"] if "groups" in said else []
        yield Way(f"Shift {booking}: {listed(told)}", "shift", {"booking": booking} | said | kept)
    for said in _rows(typed, _BOOKED):
        yield Way(f"Book {said['recipe']} on {said.get('on', '')}", "book", said | kept)
    for said in _rows(typed, {"cancel": "booking"}):
        yield Way(f"Drop {said['booking']}", "cancel", said)
    for said in _rows(typed, {"without": "bottle"}):
        yield Way(f"Enter that {said['bottle']} cannot be found", "lost", said)


_BOOKED = {"book": "recipe", "on": "on", "at": "time", "for": "groups", "dept": "department"}


def _changed(typed: Typed) -> dict[str, dict[str, str]]:
    """Bookings with another size, day or time, each once: fields of the form "shift"."""
    found: dict[str, dict[str, str]] = {}
    shifted = _rows(typed, {"shift": "booking", "day": "on", "time": "time"})
    for said in (*shifted, *_rows(typed, {"groups": "booking", "number": "groups"})):
        booking = said.pop("booking").upper()
        found.setdefault(booking, {}).update(said)
    return found


def _rows(typed: Typed, names: Mapping[str, str]) -> Iterator[dict[str, str]]:
    """The rows whose first field is filled, under the names another form has for the fields."""
    first = next(iter(names))
    for row, value in enumerate(typed.get(first, ())):
        if value.strip():
            said = {to: value_at(typed, name, row) for name, to in names.items()}
            yield {key: text for key, text in said.items() if text}
