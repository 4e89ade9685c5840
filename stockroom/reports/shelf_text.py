"""What stands where: number, place, mark and word, how much of how much, what, until when."""

from __future__ import annotations

from typing import Any

from stockroom.keeping.verdict import Condition
from stockroom.measure.amounts import Amount
from stockroom.planning.amounts import say, say_left
from stockroom.planning.on_shelf import OnShelf, Shelf
from stockroom.reports.sheet import PRACTICE, columns, page, section, wrap
from stockroom.reports.words import TIED, counted, day, marked


def shelf_text(shelf: Shelf, width: int) -> str:
    """The bottles one a row, and at the foot of a place what must not stand together."""
    known = f", as it was known on {day(shelf.known_on)}" if shelf.known_on else ""
    ahead = " (a forecast: if nothing happens until then)" if shelf.forecast else ""
    asked = f"{shelf.asked}: " if shelf.asked else "All shelves: "
    about = f"{asked}{counted(len(shelf.rows), 'bottle')} on {day(shelf.on)}{known}{ahead}"
    heads = [PRACTICE] if shelf.practice else []
    rows = columns([_cells(row) for row in shelf.rows], width)
    beside = [wrap(f"{x.subject}: {x.text}", width, indent=2) for x in shelf.neighbours]
    return page(
        [
            "\n".join([*heads, wrap(about, width)]),
            "\n".join(rows) or "Nothing of it stands on a shelf.",
            section("MUST NOT STAND TOGETHER, AND CAPS", beside),
        ]
    )


def _cells(row: OnShelf) -> tuple[str, ...]:
    bottle = row.bottle
    return (
        bottle.number,
        bottle.place or "-",
        marked(row.verdict.condition),
        left_of(row),
        f"{bottle.line}; {until_words(row)}{_remark(row)}",
    )


def left_of(row: OnShelf) -> str:
    """What is left of what it holds when full: "about 120 of 500 cm³"; "empty"."""
    bottle = row.bottle
    if not bottle.left:
        return "empty"
    left = say_left(bottle, row.line)
    if not bottle.size:
        return left.replace(" ", TIED)
    full = say(bottle.size, row.line.kind)
    # the unit once, where it is the same for both
    number = left.removesuffix(full[full.rindex(" ") :])
    return f"{number} of {full}".replace(" ", TIED)


def until_words(row: OnShelf) -> str:
    """Until when it is good, what decided that, and what is to be said of it."""
    found = row.verdict
    until = f"{found.until_word} {day(found.good_until)}, " if found.good_until else ""
    warned = f" ({found.warning})" if found.warning else ""
    doubt = f"; {row.doubt}" if row.doubt else ""
    return f"{until}decided by: {found.decided_by}{warned}{doubt}"


def _remark(row: OnShelf) -> str:
    # where nothing on the shelf says what a thing is, its looks are all there is
    return f'; "{row.bottle.remark}"' if row.bottle.remark else ""


def shelf_json(shelf: Shelf) -> dict[str, Any]:
    """The same as data: amounts are numbers in `unit`, days are ISO text."""
    return {
        "practice": shelf.practice,
        "asked": shelf.asked,
        "on": shelf.on.isoformat(),
        "forecast": shelf.forecast,
        "known_on": shelf.known_on.isoformat() if shelf.known_on else None,
        "bottles": [_bottle(row) for row in shelf.rows],
        "neighbours": [{"bottle": x.subject, "text": x.text} for x in shelf.neighbours],
    }


def _bottle(row: OnShelf) -> dict[str, Any]:
    bottle, found = row.bottle, row.verdict
    left = Amount(row.line.kind, bottle.left)
    return {
        "bottle": bottle.number,
        "item": bottle.line,
        "place": bottle.place,
        "left": left.number,
        "size": Amount(row.line.kind, bottle.size).number,
        "unit": left.unit,
        "about": bottle.about,
        "condition": found.condition.value,
        "good_until": found.good_until.isoformat() if found.good_until else None,
        "decided_by": found.decided_by,
        "warning": found.warning,
        "doubt": row.doubt,
        "remark": bottle.remark,
        "gone": found.condition is Condition.GONE,
    }
