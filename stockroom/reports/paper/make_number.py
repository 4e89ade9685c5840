"""The number a make has on a printed copy: it may be another make's in tomorrow's plan."""

from __future__ import annotations

from stockroom.reports.words import TIED


def number_line(number: str, thing: str) -> dict[str, str]:
    """A line of a copy that holds which make had the number.

    It says nothing, so it is never held against the copy before: all of it is in its key.
    """
    return {f"{number_start(number)}{_plain(thing)}": ""}


def number_start(number: str) -> str:
    """What the key of that line begins with, whatever the make was."""
    return f"number {number}: "


def another_words(number: str, thing: str, key: str, copy: str) -> str:
    """That the number was another make's on a copy, whose line had that key; "" where it was not.

    "M14 was hydrogen peroxide 0.100 mol/dm³ on copy 0009; makes are numbered anew in each plan".
    """
    was = key.removeprefix(number_start(number))
    if was == _plain(thing):
        return ""
    return f"{number} was {was} on copy {copy}; makes are numbered anew in each plan"


def _plain(thing: str) -> str:
    return thing.replace(TIED, " ")
