"""Text with its names as links: numbers of bottles, bookings, makes, orders, recipes, and days."""

from __future__ import annotations

import re
from collections.abc import Iterator
from dataclasses import dataclass

# numbers have two digits or more, so that O2 is a gas and M/50 a strength; P with three is a
# precautionary statement (P280), and no house has a hundred orders open
_NAME = re.compile(
    r"(?<![\w/.·-])(?:"
    r"(?P<need>K\d{2,}[a-z]*\.\d+)"
    r"|(?P<day>\d{4}-(?:0[1-9]|1[0-2])-(?:0[1-9]|[12]\d|3[01]))"
    r"|(?P<bottle>[BS]\d{2,}[a-z]{0,2})"
    r"|(?P<booking>K\d{2,}[a-z]{0,2})"
    r"|(?P<recipe>R\d{2,})"
    r"|(?P<planned>[MO]\d{2,}|P\d{2})"
    r")(?![\w/-]|\.\d)"
)

_PLACES = {
    "need": "/why?ref=",
    "day": "/day/",
    "bottle": "/bottle/",
    "booking": "/day/",
    "recipe": "/recipe/",
    "planned": "/why?ref=",
}


@dataclass(frozen=True, slots=True)
class Piece:
    """A stretch of text; `href` is the page about it, "" where it is plain."""

    text: str
    href: str = ""


def linked(text: str, *, days: bool = True) -> tuple[Piece, ...]:
    """The text in pieces that join to it again, those that name something with its page.

    A need ("K15.2"), a make and an order lead to their reasons, a booking and an ISO day to the
    page before it, a bottle and a recipe to their own. Whether there is one is not asked. Without
    `days` those stay plain, where a page has so many that nobody would see the rest.
    """
    return tuple(_pieces(text, days=days))


def href_of(name: str) -> str:
    """The page about one name, "" for a text that is no name or is more than one."""
    found = _NAME.fullmatch(name.strip())
    return _href(found) if found else ""


def _pieces(text: str, *, days: bool) -> Iterator[Piece]:
    done = 0
    for found in _NAME.finditer(text):
        if found["day"] and not days:
            continue
        if found.start() > done:
            yield Piece(text[done : found.start()])
        yield Piece(found[0], _href(found))
        done = found.end()
    if done < len(text):
        yield Piece(text[done:])


def _href(found: re.Match[str]) -> str:
    return _PLACES[found.lastgroup or ""] + found[0]
