"""What the term's report is made from: the plan, and what left the bottles unused."""

from __future__ import annotations

from datetime import date
from typing import NoReturn

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.service.backup_age import with_backup
from stockroom.service.known import known_from
from stockroom.service.replayed import replayed_plan
from stockroom.settings import StoreAt
from stockroom.store.left_bottles import LeftBottle, left_bottles
from stockroom.store.likeness import plain, unknown
from stockroom.store.reading import Reader, Row, reading


def term_told(
    path: StoreAt, *, as_at: date, term: str = "", cautious: bool = False
) -> tuple[Facts, Plan, tuple[LeftBottle, ...]]:
    """The facts, the whole term's plan as at a day, and what went unused up to that day.

    The term named; else the one begun last, since it is told of when it is over too.
    Raises: UnknownName with the nearest names of terms.
    """
    with reading(path) as reader:
        first, last = _span(reader, as_at, term)
        known = known_from(reader, as_at, first, last, cautious=cautious)
        gone = left_bottles(reader, known.start, min(as_at, known.end))
    return known, with_backup(path, replayed_plan(known)), gone


def term_entered(path: StoreAt) -> bool:
    """Whether any term is entered, so that there is one to report on."""
    with reading(path) as reader:
        return bool(reader.rows("term", ""))


def _span(reader: Reader, as_at: date, term: str) -> tuple[date | None, date | None]:
    """First and last day of a term; nothing where none is begun, and the plan's own is taken."""
    rows = reader.rows("term", "ORDER BY starts_on, id")
    if term:
        rows = [row for row in rows if plain(row["term"]) == plain(term)] or _none(term, rows)
    else:
        rows = [row for row in rows if row["starts_on"] <= as_at.isoformat()]
    if not rows:
        return None, None
    return date.fromisoformat(rows[-1]["starts_on"]), date.fromisoformat(rows[-1]["ends_on"])


def _none(term: str, rows: list[Row]) -> NoReturn:
    raise unknown("term", term, (row["term"] for row in rows))
