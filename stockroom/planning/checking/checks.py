"""Step 7: the titrations and looks the plan leans on, each once, late enough and open.

Exact needs want a strength found inside its interval on the day; a bottle used
past its recheck date wants one before then (`titrations.py`); a look may
bring back a bottle whose replacement would otherwise be made (`looks.py`).
Nothing nobody needs is asked for.
"""

from __future__ import annotations

from stockroom.planning.checking.looks import doubts, looks
from stockroom.planning.checking.titrations import titrations
from stockroom.planning.checking.worth import Again
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.decisions import CheckToDo, Order
from stockroom.planning.facts import Facts
from stockroom.planning.making.batch import Batch
from stockroom.planning.wants import Want


def checks(
    facts: Facts,
    wants: list[Want],
    batches: list[Batch],
    buying: list[Order],
    shelf: Shelf,
    again: Again | None = None,
) -> list[CheckToDo]:
    """Every check to do, by the day it must be done, then by subject.

    `again` plans needs once more with other facts: what a look is worth is found with it.
    """
    found = [
        *titrations(facts, wants, batches, shelf),
        *looks(facts, wants, batches, buying, shelf, again),
        *doubts(facts, wants, shelf),
    ]
    return sorted(found, key=lambda c: (c.by, c.subject, c.what))
