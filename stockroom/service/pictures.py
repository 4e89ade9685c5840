"""What pictures are drawn from: a bottle with its record and its course, the house it is of."""

from __future__ import annotations

from datetime import date

from stockroom.errors import NotAllowed
from stockroom.keeping.course import Fading
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Bottle, Facts
from stockroom.planning.pictures.running import Running, running
from stockroom.service.fades import fading_among
from stockroom.service.finding import line_among
from stockroom.service.known import known_of
from stockroom.service.sheets import known_and_planned
from stockroom.settings import StoreAt
from stockroom.store.reading import reading
from stockroom.store.snapshot_bottles import bottle_of


def bottle_fading(
    path: StoreAt, number: str, *, as_at: date, below: tuple[str, ...] = ()
) -> tuple[Facts, Bottle, Fading]:
    """The facts, a bottle as at a day and how it fades; `below` are strengths, as typed.

    Raises: as `fading` does.
    """
    known = known_of(path, as_at)
    with reading(path) as reader:
        found = fading_among(reader, known, number, below=below)
        bottle = bottle_of(reader, found.bottle, as_at, every_log=True)
    # `fading_among` has refused what is not there
    assert bottle is not None
    return known, bottle, found


def line_running(path: StoreAt, name: str, *, as_at: date) -> tuple[Facts, Plan, Running]:
    """The facts, the term's plan, and how the stock of a line runs through it.

    Raises: UnknownName with the nearest lines; NotAllowed for what is mixed for each class.
    """
    known, plan = known_and_planned(path, as_at=as_at)
    line = line_among(known, name)
    if line.never_kept:
        raise NotAllowed(
            f"{line.key} is never kept, so there is no stock of it to draw: {line.never_kept}.",
            "Draw what it is made from.",
        )
    return known, plan, running(known, line.key, plan.orders)
