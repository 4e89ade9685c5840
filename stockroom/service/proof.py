"""The proof that one family's makes cannot be had for less, or how much is open."""

from __future__ import annotations

from datetime import date
from pathlib import Path

from stockroom.errors import BadInput, NotAllowed
from stockroom.planning.proof import Proved, proof_of
from stockroom.planning.settle import needs_of, settled
from stockroom.service.finding import line_in
from stockroom.service.known import known_from
from stockroom.store.reading import reading

LONGEST_SECONDS = 3600.0
"""Longer than this nobody waits at a desk. Our choice."""


def proof(path: Path, name: str, *, seconds: float, as_at: date, cautious: bool = False) -> Proved:
    """The proof for the stock called so and everything made from it.

    `seconds` of the solver's time, above 0 to an hour. Raises BadInput for another figure;
    UnknownName with the nearest of what the plan makes; NotAllowed when it makes nothing;
    Refused where the solver is not installed.
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
    if not lines:
        raise NotAllowed("The plan makes nothing, so there is nothing to prove.", "Book first.")
    return proof_of(made, line_in(lines, name).key, seconds)
