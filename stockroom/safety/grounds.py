"""What a statement rests on: how the figure behind it is known, and whose it is.

A row of limits has its own mark and source; where it has no limit of its own a general
rule stands beside it, with a mark and a source too. The weakest of them is the mark of
the statement. Source of the marks of the rules: the project's reference on hazards, F2.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass

SEEN, WORKED_OUT, MEMORY = "a", "b", "c"
HOUSE = "house"
"""A row that the house entered itself: it answers for it, whatever it leans on."""
OURS = "ours"
"""Chosen here, on the safer side; nobody published it."""
SHEET = "sheet"
"""Typed off the supplier's safety data sheet."""

MARKS: dict[str, str] = {
    SEEN: "seen",
    WORKED_OUT: "worked out",
    HOUSE: "the house's own",
    MEMORY: "from memory",
    OURS: "no source, the safer side",
    SHEET: "the supplier's sheet",
}
"""Each mark in words."""

_BEST_FIRST = (SEEN, WORKED_OUT, HOUSE, MEMORY, OURS)


@dataclass(frozen=True, slots=True)
class Ground:
    """One figure a statement rests on: how it is known, and the key of its source."""

    how: str
    source: str


RULE = Ground(MEMORY, "clp-rules")
"""A general rule for mixtures, Annex I."""
RULE_SEEN = Ground(SEEN, "clp-rules-seen")
"""The same, of those that were read: 5 % of what burns, STOT RE, aspiration, EUH071."""
SAFER_SIDE = Ground(OURS, "safer-side")
"""Carried over into a mixture by nobody's rule."""


@dataclass(frozen=True, slots=True)
class RestsOn:
    """A statement that is kept, with one of the figures behind it."""

    statement: str
    how: str
    source: str


def distinct(grounds: Iterable[Ground]) -> tuple[Ground, ...]:
    """Each ground once, in the order given."""
    return tuple(dict.fromkeys(grounds))


def weakest(hows: Iterable[str]) -> str:
    """The mark that is known least well; one nobody wrote counts as memory, and so does none.

    >>> weakest(["a", "c"]), weakest(["a"]), weakest([])
    ('c', 'a', 'c')
    """
    # a mark misspelt in a table must never make a statement look better known than it is
    ranks = [_BEST_FIRST.index(how if how in _BEST_FIRST else MEMORY) for how in hows]
    return _BEST_FIRST[max(ranks)] if ranks else MEMORY
