"""What a new booking changes in what is to be ordered: the plan as it was against as it is."""

from __future__ import annotations

from collections.abc import Callable
from datetime import date

from stockroom.measure.days import spell_day
from stockroom.planning.buying.packs import NO_PACK
from stockroom.planning.decisions import Order
from stockroom.service.answers import Done
from stockroom.service.plans_told import with_plans
from stockroom.settings import StoreAt

_Key = tuple[str, str]
_Packs = tuple[int, date]
_NONE: _Packs = (0, date.max)


def with_orders(path: StoreAt, change: Callable[[], Done], *, today: date) -> Done:
    """Carry out a change, and tell what it wants ordered more, less or sooner. Raises: as that."""
    return with_plans(
        path, change, lambda before, after: orders_told(before.orders, after.orders), today=today
    )


def orders_told(before: tuple[Order, ...], after: tuple[Order, ...]) -> tuple[str, ...]:
    """In what two plans' orders differ, a sentence for each kind of pack; none for nothing."""
    was, now = _packs(before), _packs(after)
    rows = (
        _told(key, was.get(key, _NONE), now.get(key, _NONE)) for key in dict.fromkeys((*now, *was))
    )
    return tuple(row for row in rows if row)


def _told(key: _Key, was: _Packs, now: _Packs) -> str:
    item, pack = key
    more, first = now[0] - was[0], spell_day(now[1]) if now[0] else ""
    if more > 0 and pack == NO_PACK.text:
        # how much one buys of it at a time, nobody has entered
        return f"Order more of {item}, by {first}: {pack}."
    if more > 0:
        return f"Order {more} × {pack} more of {item}, by {first}."
    if more < 0:
        return f"Order {-more} × {pack} less of {item}."
    return f"Order {item}, {pack}, sooner: by {first}." if now[1] < was[1] else ""


def _packs(orders: tuple[Order, ...]) -> dict[_Key, _Packs]:
    """How many of each pack, and the first day they are to be ordered by."""
    found: dict[_Key, _Packs] = {}
    for order in orders:
        key = (order.item, order.pack)
        packs, by = found.get(key, (0, order.order_by))
        found[key] = (packs + order.packs, min(by, order.order_by))
    return found
