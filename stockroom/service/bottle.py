"""Everything about one bottle, for its page: as it stands, its story, who needs it."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.errors import NotAllowed, StockroomError, UnknownName
from stockroom.keeping.course import Fading
from stockroom.keeping.verdict import verdict
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.planning.on_shelf import OnShelf
from stockroom.planning.tell import inherited_doubt
from stockroom.safety.clp import Classification
from stockroom.safety.hazards import Hazards
from stockroom.service.fades import fading_among
from stockroom.service.hazards import hazards_of
from stockroom.service.sheets import known_and_planned
from stockroom.settings import StoreAt
from stockroom.store.diary import Diary, diary_of
from stockroom.store.reading import Reader, reading
from stockroom.store.snapshot_bottles import bottle_of

Kin = tuple[tuple[str, str], ...]
"""Bottles by number, each with the line it holds."""


@dataclass(frozen=True, slots=True)
class BottleSeen:
    """One bottle as at a day, beside the facts and the plan of its house.

    `fading` is None for what has no strength that could fade, and for a bottle that is gone.
    `made_from` and `made_into` are the bottles next to it in its lineage, gone ones too.
    """

    known: Facts
    plan: Plan
    seen: OnShelf
    diary: Diary
    hazards: Hazards
    fading: Fading | None
    made_from: Kin
    made_into: Kin


def bottle_seen(path: StoreAt, number: str, *, as_at: date) -> BottleSeen:
    """A bottle by its number, in capitals or not, gone or not.

    Raises: UnknownName with the nearest three, and for one that was not there yet that day.
    """
    diary = diary_of(path, number)
    with reading(path) as reader:
        bottle = bottle_of(reader, diary.bottle, as_at, every_log=True)
        made_from = _kin(reader, diary.bottle, "bottle_id", "parent_id")
        made_into = _kin(reader, diary.bottle, "parent_id", "bottle_id")
    if bottle is None:
        raise UnknownName(f"{diary.bottle} was not there yet on {as_at}.", "Look on a later day.")
    known, plan = known_and_planned(path, as_at=as_at)
    line = known.lines[bottle.line]
    judged = verdict(bottle.record, line.rules, as_at)
    return BottleSeen(
        known=known,
        plan=plan,
        seen=OnShelf(bottle, line, judged, inherited_doubt(known, bottle)),
        diary=diary,
        hazards=_hazards(path, bottle.number, line.key, as_at),
        fading=_fading(path, bottle.number, known),
        made_from=made_from,
        made_into=made_into,
    )


def _fading(path: StoreAt, number: str, known: Facts) -> Fading | None:
    try:
        with reading(path) as reader:
            return fading_among(reader, known, number)
    except NotAllowed:
        return None


def _hazards(path: StoreAt, number: str, line: str, as_at: date) -> Hazards:
    """The hazards, or "not entered" with the reason where they cannot be worked out."""
    try:
        return hazards_of(path, number, as_at=as_at)
    except StockroomError as trouble:
        lacking = Classification(notes=(trouble.message,), unknown=(line,), entered=False)
        return Hazards(line, "", lacking, line=line)


def _kin(reader: Reader, number: str, own: str, other: str) -> Kin:
    """The bottles on the `other` side of a parent row from this one; both are columns of ours."""
    rows = reader.ask(
        "SELECT kin.number, line.key FROM parent"
        f" JOIN bottle AS own ON own.id = parent.{own}"
        f" JOIN bottle AS kin ON kin.id = parent.{other}"
        " JOIN line ON line.id = kin.line_id WHERE own.number = ? ORDER BY kin.id",
        number,
    )
    return tuple((str(kin), str(key)) for kin, key in rows)
