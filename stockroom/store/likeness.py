"""The names most like one that nobody knows. Light: the reading side uses it too."""

from __future__ import annotations

import re
from collections.abc import Iterable
from functools import lru_cache

from stockroom.errors import UnknownName
from stockroom.measure.reading import tidy


# a folder of tables names the same few hundred things thousands of times
@lru_cache(maxsize=8192)
def plain(text: str) -> str:
    """A name as it is compared: spaces, commas, look-alike characters and capitals settled."""
    # "sodium thiosulfate anhydrous" and "..., anhydrous" are one name; "2,4-" keeps its comma
    return re.sub(r",\s+", " ", tidy(text)).casefold()


def unknown(what: str, text: str, choices: Iterable[str]) -> UnknownName:
    """The error for a name nobody knows, with the three nearest as its hint."""
    near = nearest(text, choices)
    hint = f"Nearest: {'; '.join(near)}." if near else f"There is no {what} at all yet."
    return UnknownName(f'No {what} "{text.strip()}".', hint)


FAR = 70
"""Below this likeness, out of 100, the nearest name is hardly the one meant. Our choice."""


def near(text: str, choices: Iterable[str]) -> bool:
    """Whether any of the choices is like `text` at all."""
    from rapidfuzz import fuzz, process

    found = process.extractOne(plain(text), list(choices), scorer=fuzz.WRatio, processor=plain)
    return found is not None and found[1] >= FAR


def nearest(text: str, choices: Iterable[str]) -> list[str]:
    """The three choices most like `text`, the likest first; ties by the fewest slips, then A-Z."""
    from rapidfuzz import fuzz, process
    from rapidfuzz.distance import OSA

    wanted = plain(text)
    ordered = sorted(set(choices))
    found = process.extract(wanted, ordered, scorer=fuzz.WRatio, processor=plain, limit=None)
    # short numbers all score alike; swapped digits ("B60" for "B06") are a single slip
    ranked = sorted(found, key=lambda hit: (-round(hit[1]), OSA.distance(wanted, plain(hit[0]))))
    return [name for name, _, _ in ranked[:3]]
