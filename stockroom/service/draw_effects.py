"""Who goes short by what was just taken: the plan before held against the plan after."""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from stockroom.errors import StockroomError
from stockroom.measure.amounts import Amount
from stockroom.measure.by_eye import ByEye
from stockroom.measure.formats import format_amount
from stockroom.planning.decisions import Short
from stockroom.service.answers import Done
from stockroom.service.drawing import draw
from stockroom.service.estimates import Weighed
from stockroom.service.known import known_from
from stockroom.service.replayed import replayed_plan
from stockroom.settings import StoreAt
from stockroom.store.engine import joined, reader_in
from stockroom.store.reading import Reader

_TOLD = 6
"""Needs that are named; more are counted. Our choice."""


def draw_and_tell(
    path: StoreAt,
    bottle: str,
    amount: Amount | ByEye | Weighed,
    *,
    booking: str | None = None,
    on: date | None,
    today: date,
    by: str,
) -> Done:
    """Draw as `drawing.draw`, and say which bookings are short by it. Raises: as `draw`.

    It makes the plan twice, so it is for somebody who reads the answer.
    """
    with joined(path) as session:
        before = _short(reader_in(session), today)
        done = draw(path, bottle, amount, booking=booking, on=on, today=today, by=by)
        session.flush()
        after = _short(reader_in(session), today)
    told = _newly(before, after) if before is not None and after is not None else ()
    return replace(done, details=(*done.details, *told))


def _short(reader: Reader, today: date) -> dict[str, Short] | None:
    """What the plan has as short, by its need; None where no plan can be made."""
    try:
        return {each.ref: each for each in replayed_plan(known_from(reader, today)).short}
    except StockroomError:
        # what was drawn is drawn, whatever the plan makes of it
        return None


def _newly(before: dict[str, Short], after: dict[str, Short]) -> tuple[str, ...]:
    told = []
    for ref, short in after.items():
        was = before[ref].amount if ref in before else 0
        if short.amount > was:
            lacks = format_amount(Amount(short.kind, short.amount))
            what = " ".join(filter(None, (short.item, short.strength)))
            told.append(f"{short.booking} is now short of {lacks} of {what}: see why {ref}.")
    more = len(told) - _TOLD
    return (*told[:_TOLD], *((f"And {more} more are short now.",) if more > 0 else ()))
