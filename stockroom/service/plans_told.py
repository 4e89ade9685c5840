"""A change carried out, and what it does to the plan: the one before against the one after."""

from __future__ import annotations

from collections.abc import Callable
from datetime import date

from stockroom.errors import StockroomError
from stockroom.planning.decisions import Plan
from stockroom.service.answers import Done
from stockroom.service.known import known_from
from stockroom.service.replayed import replayed_plan
from stockroom.service.sheets import known_and_planned
from stockroom.settings import StoreAt
from stockroom.store.engine import joined, reader_in


def with_plans(
    path: StoreAt,
    change: Callable[[], Done],
    told: Callable[[Plan, Plan], tuple[str, ...]],
    *,
    today: date,
) -> Done:
    """Carry out a change, and add what `told` says of the plans. Raises: as the change does.

    Nothing is added where the plan cannot be made, since what was saved is saved. It makes a
    plan within the writing, so it is for somebody who reads the answer.
    """
    with joined(path) as session:
        before = _or_none(lambda: known_and_planned(path, as_at=today)[1])
        done = change()
        session.flush()
        # on the writer's own connection, which sees what is not saved yet; whoever asks for the
        # plan next has the same facts, and need not wait for it again
        after = _or_none(lambda: replayed_plan(known_from(reader_in(session), today)))
    if before is None or after is None:
        return done
    return done.telling(told(before, after))


def _or_none(make: Callable[[], Plan]) -> Plan | None:
    try:
        return make()
    except StockroomError:
        return None
