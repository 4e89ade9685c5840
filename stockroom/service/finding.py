"""Finding a stock line by any of its names among the facts, for the reading side."""

from __future__ import annotations

from collections.abc import Mapping

from stockroom.planning.facts import Facts, Line
from stockroom.store.likeness import plain, unknown


def line_among(known: Facts, text: str) -> Line:
    """The first line, by key, whose key, item or substance is `text`, else holds it.

    Raises UnknownName with the nearest three.
    """
    return line_in(known.lines, text)


def line_in(held: Mapping[str, Line], text: str) -> Line:
    """The same, among lines by key."""
    wanted = plain(text)
    lines = [held[key] for key in sorted(held)]
    # from the exact to the vague: a whole name never loses to a part of another
    by_key = [line for line in lines if wanted == plain(line.key)]
    by_name = [line for line in lines if wanted in (plain(line.item), plain(line.substance))]
    by_part = [line for line in lines if wanted in plain(line.key)]
    for found in (by_key, by_name, by_part):
        if found:
            return found[0]
    raise unknown("stock line", text, held)
