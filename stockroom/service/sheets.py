"""What the sheets are made from: the facts beside the term's plan. Light, as reading is."""

from __future__ import annotations

from datetime import date

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.service.backup_age import with_backup
from stockroom.service.known import known_from
from stockroom.service.replayed import replayed_plan
from stockroom.settings import StoreAt
from stockroom.store.reading import reading


def known_and_planned(
    path: StoreAt, *, as_at: date, through: date | None = None, cautious: bool = False
) -> tuple[Facts, Plan]:
    """The facts and the whole term's plan as at a day, with the age of the last backup.

    `through` is a day the sheet is about: past the term's end, the plan reaches that far.
    """
    with reading(path) as reader:
        known = known_from(reader, as_at, cautious=cautious)
        if through is not None and through > known.end:
            known = known_from(reader, as_at, known.start, through, cautious=cautious)
    return known, with_backup(path, replayed_plan(known))
