"""The house as it is kept: every table its keeper may change, with who changed what, and why."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.planning.facts import Facts, Line
from stockroom.service.database import seeds_folder
from stockroom.service.handover import Kept, kept_of
from stockroom.service.house_rules import Keeping, keeping_of
from stockroom.service.known import known_from
from stockroom.settings import StoreAt
from stockroom.store.reading import reading
from stockroom.store.sources import citations


@dataclass(frozen=True, slots=True)
class HouseKept:
    """The facts, what stands beside them, each term with its days, and sources by their keys."""

    known: Facts
    kept: Kept
    terms: tuple[tuple[str, date, date], ...]
    sources: dict[str, str]


@dataclass(frozen=True, slots=True)
class LineKept:
    """How one line keeps, and the line itself."""

    keeping: Keeping
    line: Line
    usual_lead: int


def house_kept(path: StoreAt, *, as_at: date) -> HouseKept:
    """All of it as at a day; closures that are over are left out. Raises: StoreTrouble."""
    with reading(path) as reader:
        known = known_from(reader, as_at)
        rows = reader.rows("term", "ORDER BY starts_on")
    terms = tuple(
        (row["term"], date.fromisoformat(row["starts_on"]), date.fromisoformat(row["ends_on"]))
        for row in rows
    )
    return HouseKept(known, kept_of(path, as_at), terms, citations(seeds_folder()))


def line_kept(path: StoreAt, line: str, *, as_at: date) -> LineKept:
    """How one line keeps, by any of its names or a bottle of it.

    Raises: UnknownName with the nearest; BadInput for no name.
    """
    keeping = keeping_of(path, line)
    with reading(path) as reader:
        known = known_from(reader, as_at)
    return LineKept(keeping, known.lines[keeping.line], known.house.default_lead)
