"""The proof that one family's makes cannot be had for less, or how much is open."""

from __future__ import annotations

from collections.abc import Mapping
from datetime import date

from stockroom.errors import BadInput, NotAllowed
from stockroom.planning.facts import Line
from stockroom.planning.proof import Proved, proof_of
from stockroom.planning.settle import needs_of, settled
from stockroom.service.finding import line_in
from stockroom.service.known import known_from
from stockroom.settings import StoreAt
from stockroom.store.likeness import plain
from stockroom.store.reading import reading

LONGEST_SECONDS = 3600.0
"""Longer than this nobody waits at a desk. Our choice."""


def proof(
    path: StoreAt, name: str, *, seconds: float, as_at: date, cautious: bool = False
) -> Proved:
    """The proof for the stock called so and everything made from it.

    `seconds` of the solver's time, above 0 to an hour. Raises BadInput for another figure;
    UnknownName with the nearest; NotAllowed when the plan makes nothing of it; Refused where
    the solver is not installed.
    """
    if not 0 < seconds <= LONGEST_SECONDS:
        raise BadInput(
            f"--seconds {seconds:g} is no time to give the solver.",
            f"Give it more than 0 and at most {LONGEST_SECONDS:g}.",
        )
    with reading(path) as reader:
        known = known_from(reader, as_at, cautious=cautious)
    made = settled(known, needs_of(known))[1]
    lines = {group.line.key: group.line for group in made.numbers.groups}
    return proof_of(made, _called(known.lines, lines, name), seconds)


def _called(every: Mapping[str, Line], made: Mapping[str, Line], name: str) -> frozenset[str]:
    """The lines made that a name means: one by its whole key, else all of the substance."""
    found = line_in(every, name)
    if found.key in made and plain(name) == plain(found.key):
        return frozenset({found.key})
    alike = frozenset(key for key, line in made.items() if line.substance == found.substance)
    if not alike:
        raise NotAllowed(
            f"The plan makes no {found.item}, so there is nothing to prove.",
            "Name what is made: stockroom fresh lists it.",
        )
    return alike
