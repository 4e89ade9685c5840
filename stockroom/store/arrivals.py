"""What arrived of a line before: for whoever puts the next of it away."""

from __future__ import annotations

from typing import TypeVar

from sqlalchemy import exists, text
from sqlalchemy.orm import aliased
from sqlmodel import Session, col, select
from sqlmodel.sql.expression import SelectOfScalar

from stockroom.store.kinds import STANDING, EntryKind
from stockroom.store.tables import Bottle, Entry, Line, Place
from stockroom.store.unnamed import NAMED

Value = TypeVar("Value")


def last_size(session: Session, line: Line) -> int | None:
    """What one bottle held when the line arrived last, micro-units; None where it never did."""
    size = select(Bottle.size).join(Entry, col(Entry.bottle_id) == col(Bottle.id))
    return session.exec(_last(size, line)).first()


def put_away_at(session: Session, line: Line) -> str:
    """The place the line was put away at when it arrived last; "" where it was nowhere."""
    place = (
        select(Place.place)
        .join(Entry, col(Entry.place_id) == col(Place.id))
        .join(Bottle, col(Bottle.id) == col(Entry.bottle_id))
    )
    return session.exec(_last(place, line)).first() or ""


def _last(asked: SelectOfScalar[Value], line: Line) -> SelectOfScalar[Value]:
    """The same asked of the last arrival of a line that still stands."""
    # a jar that turned up and was named from evidence was not bought, nor put away by anybody
    named = aliased(Entry)
    by_evidence = exists().where(
        col(named.bottle_id) == col(Entry.bottle_id),
        col(named.kind) == EntryKind.SET_ASIDE.value,
        col(named.reason) == NAMED,
    )
    arrived = (Entry.kind == EntryKind.ARRIVED.value, Bottle.line_id == line.id)
    return (
        asked.where(*arrived, text(STANDING), ~by_evidence)
        .order_by(col(Entry.happened_on).desc(), col(Entry.id).desc())
        .limit(1)
    )
