"""What the sheets are made from: the facts beside the term's plan. Light, as reading is."""

from __future__ import annotations

from datetime import date

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.service.backup_age import with_backup
from stockroom.service.kept import keeping, kept
from stockroom.service.known import known_of
from stockroom.service.replayed import replayed_plan
from stockroom.settings import StoreAt


def known_and_planned(
    path: StoreAt, *, as_at: date, through: date | None = None, cautious: bool = False
) -> tuple[Facts, Plan]:
    """The facts and the whole term's plan as at a day, with the age of the last backup.

    `through` is a day the sheet is about: past the term's end, the plan reaches that far.
    """
    term = known_of(path, as_at, cautious=cautious)
    start, end = None, None
    if through is not None and through > term.end:
        start, end = term.start, through

    def make() -> tuple[Facts, Plan]:
        known = term
        # where it is kept, the facts may be older than the mark they would be kept under
        if end is not None or keeping():
            known = known_of(path, as_at, start, end, cautious=cautious)
        return known, with_backup(path, replayed_plan(known))

    return kept(path, "sheets", (as_at, start, end, cautious), make)
