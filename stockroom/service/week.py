"""What the page of a week is made from: facts, plan, closed days, and what was entered today."""

from __future__ import annotations

from collections.abc import Callable, Mapping
from dataclasses import dataclass
from datetime import date, timedelta
from typing import Any, TypeVar

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.service.closures import why_closed
from stockroom.service.printing import Kind, held_against
from stockroom.service.sheets import known_and_planned
from stockroom.settings import StoreAt
from stockroom.store.reading import Row, reading

S = TypeVar("S", bound=Any)

BACK = 2000
"""How many entries back a day is looked for: more are entered by no hand in a day. Our choice."""


@dataclass(frozen=True, slots=True)
class EntryOfDay:
    """One entry: `change` in micro-units of `unit_kind`, signed; `undone_by` 0 for none."""

    entry: int
    bottle: str
    line: str
    kind: str
    change: int
    unit_kind: str
    happened: date
    by: str
    booking: str
    said: str
    puts_right: int
    undone_by: int


@dataclass(frozen=True, slots=True)
class WeekSeen:
    """The facts and the term's plan as at a day, why days are closed, and its entries."""

    known: Facts
    plan: Plan
    closed: Mapping[date, str]
    entered: tuple[EntryOfDay, ...]


def week_seen(path: StoreAt, first: date, last: date, *, as_at: date) -> WeekSeen:
    """All that the page of the days from `first` to `last` shows. Raises: StoreTrouble."""
    known, plan = known_and_planned(path, as_at=as_at, through=last)
    closed = why_closed(path, min(first, as_at), last)
    return WeekSeen(known, plan, closed, entries_of(path, as_at))


def week_held(
    path: StoreAt,
    kind: Kind,
    make: Callable[[Facts, Plan, date, Mapping[date, str]], S],
    monday: date,
    *,
    as_at: date,
) -> S:
    """The sheet `make` makes of the week from `monday`, held against its copy printed last.

    Writes nothing. Raises: StoreTrouble.
    """
    sunday = monday + timedelta(days=6)
    known, plan = known_and_planned(path, as_at=as_at, through=sunday)
    sheet = make(known, plan, monday, why_closed(path, monday, sunday))
    return held_against(path, kind, sheet, monday.isoformat())


def entries_of(path: StoreAt, day: date) -> tuple[EntryOfDay, ...]:
    """The ledger's entries made on a day, in the order they were made; of the last `BACK`."""
    with reading(path) as reader:
        rows = reader.ask(_OF_DAY, day.isoformat(), BACK)
        first = rows[0]["id"] if rows else 0
        undone = reader.pairs("SELECT puts_right, id FROM entry WHERE puts_right >= ?", first)
        return tuple(_told(row, undone) for row in rows)


# the ledger has no order by day, and a million entries are not read for those of one
_OF_DAY = """
    SELECT e.*, b.number AS bottle, l.key AS line, l.kind AS unit_kind
    FROM entry e JOIN bottle b ON b.id = e.bottle_id JOIN line l ON l.id = b.line_id
    WHERE e.entered_on = ? AND e.id > (SELECT COALESCE(MAX(id), 0) FROM entry) - ?
    ORDER BY e.id
"""


def _told(row: Row, undone: dict[int, int]) -> EntryOfDay:
    said = [row["strength_text"], row["reason"], row["note"]]
    if row["passed"] is not None:
        said.insert(0, "passed" if row["passed"] else "did not pass")
    return EntryOfDay(
        entry=row["id"],
        bottle=row["bottle"],
        line=row["line"],
        kind=row["kind"],
        change=row["change"],
        unit_kind=row["unit_kind"],
        happened=date.fromisoformat(row["happened_on"]),
        by=row["by"],
        booking=row["booking"],
        said="; ".join(part for part in said if part),
        puts_right=row["puts_right"] or 0,
        undone_by=undone.get(row["id"], 0),
    )
