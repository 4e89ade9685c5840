"""A kept plan as data and back, and its digest: what stands in the store for years.

By name and not by place, so that a plan kept before a field was added can still be read.
"""

from __future__ import annotations

import hashlib
import json
from collections.abc import Iterable
from dataclasses import fields
from datetime import date
from enum import StrEnum
from typing import Any, TypeVar

from stockroom.measure.amounts import Kind
from stockroom.planning.changing.kept import (
    KeptBooking,
    KeptCheck,
    KeptMake,
    KeptNeed,
    KeptOrder,
    KeptPlan,
    KeptSource,
)
from stockroom.planning.decisions import Outcome
from stockroom.planning.facts import Firmness

Value = TypeVar("Value", KeptBooking, KeptCheck, KeptMake, KeptNeed, KeptOrder, KeptSource)

UNREADABLE = (ValueError, TypeError, KeyError, AttributeError, RecursionError)
"""What `read` raises for a text that is no kept plan."""

_DAYS = frozenset("as_at start end on ready finish_on need_by order_by best by".split())
_PLAIN: dict[str, type] = {"int": int, "str": str, "bool": bool}
_WORDS: dict[str, type[StrEnum]] = {"kind": Kind, "outcome": Outcome, "firmness": Firmness}


def written(kept: KeptPlan) -> str:
    """The plan as one text, the same for the same plan on every machine."""
    return _text(_plain(kept))


def read(text: str) -> KeptPlan:
    """The plan that was written so. Raises: one of `UNREADABLE` for another text."""
    data = json.loads(text)
    return KeptPlan(
        as_at=date.fromisoformat(data["as_at"]),
        start=date.fromisoformat(data["start"]),
        end=date.fromisoformat(data["end"]),
        cautious=bool(data["cautious"]),
        bookings=_several(KeptBooking, data["bookings"]),
        needs=_several(KeptNeed, data["needs"]),
        makes=_several(KeptMake, data["makes"]),
        orders=_several(KeptOrder, data["orders"]),
        checks=_several(KeptCheck, data["checks"]),
    )


def digest(kept: KeptPlan) -> str:
    """A short text that differs where the decisions do.

    The day looked from is left out: a plan that only grew a day older decides the same.
    """
    plain = _plain(kept)
    for name in ("as_at", "start", "end"):
        del plain[name]
    return hashlib.sha256(_text(plain).encode()).hexdigest()


def days_written(days: dict[str, tuple[date, ...]]) -> str:
    """The days of each line's makes as text, for the column that every later plan reads."""
    return _text({line: [day.isoformat() for day in days[line]] for line in days})


def _text(plain: Any) -> str:
    return json.dumps(plain, ensure_ascii=False, sort_keys=True, separators=(",", ":"))


def _plain(value: Any) -> Any:
    if isinstance(value, date):
        return value.isoformat()
    if isinstance(value, StrEnum):
        return value.value
    if isinstance(value, tuple):
        return [_plain(each) for each in value]
    if value is None or isinstance(value, str | int):
        return value
    return {each.name: _plain(getattr(value, each.name)) for each in fields(value)}


def _several(kind: type[Value], rows: Iterable[dict[str, Any]]) -> tuple[Value, ...]:
    known = {each.name: _PLAIN.get(str(each.type)) for each in fields(kind)}
    return tuple(
        kind(**{name: _value(name, of, row[name]) for name, of in known.items() if name in row})
        for row in rows
    )


def _value(name: str, of: type | None, plain: Any) -> Any:
    # an amount that is a word would be found out only where two are compared
    if of is not None and type(plain) is not of:
        raise TypeError(f"{name} {plain!r} is no {of.__name__}")
    # of an order, "by" would be a day; of nothing here is it initials
    if name in _DAYS:
        return date.fromisoformat(plain) if plain else None
    if name in _WORDS:
        return _WORDS[name](plain)
    if name == "sources":
        return _several(KeptSource, plain)
    return tuple(plain) if isinstance(plain, list) else plain
