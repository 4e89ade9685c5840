"""What came of one line of a count, as it is told."""

from __future__ import annotations

from dataclasses import dataclass
from enum import StrEnum


class Came(StrEnum):
    """What came of one line."""

    COUNTED = "counted"
    DIFFERS = "differing"
    MISSING = "not found"
    TURNED_UP = "turned up"
    SEEN = "seen"
    UNLISTED = "not on the list"
    ALREADY = "entered already"


@dataclass(frozen=True, slots=True)
class Told:
    """What came of one line: the bottle's number, a sentence, and what goes with it."""

    bottle: str
    came: Came
    text: str
    entry: int | None = None
    details: tuple[str, ...] = ()
