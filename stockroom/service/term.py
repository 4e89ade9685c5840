"""What the page of the term is made from: facts, plan, and why days of it are closed."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date, timedelta

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.service.closures import why_closed
from stockroom.service.sheets import known_and_planned
from stockroom.settings import StoreAt

_WEEK = timedelta(days=6)


@dataclass(frozen=True, slots=True)
class TermSeen:
    """The facts and the term's plan as at a day, and the closed days of its weeks."""

    known: Facts
    plan: Plan
    closed: Mapping[date, str]


def term_seen(path: StoreAt, *, as_at: date) -> TermSeen:
    """The whole term as at a day. Raises: StoreTrouble."""
    known, plan = known_and_planned(path, as_at=as_at)
    closed = why_closed(path, known.start - _WEEK, known.end + _WEEK)
    return TermSeen(known, plan, closed)
