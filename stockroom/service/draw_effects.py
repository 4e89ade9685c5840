"""Who goes short by what was just taken: the plan before held against the plan after."""

from __future__ import annotations

from datetime import date

from stockroom.measure.amounts import Amount
from stockroom.measure.by_eye import ByEye
from stockroom.measure.formats import format_amount
from stockroom.planning.decisions import Plan, Short
from stockroom.service.answers import Done
from stockroom.service.drawing import draw
from stockroom.service.estimates import Weighed
from stockroom.service.plans_told import with_plans
from stockroom.settings import StoreAt

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
    """Draw as `drawing.draw`, and say which bookings are short by it. Raises: as `draw`."""
    return with_plans(
        path,
        lambda: draw(path, bottle, amount, booking=booking, on=on, today=today, by=by),
        lambda before, after: _newly(_short(before), _short(after)),
        today=today,
    )


def _short(plan: Plan) -> dict[str, Short]:
    return {each.ref: each for each in plan.short}


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
