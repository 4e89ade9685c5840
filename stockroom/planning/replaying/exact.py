"""Exact strengths of a finished plan: found inside their interval, or titrated in time."""

from __future__ import annotations

from datetime import date, timedelta

from stockroom.keeping.rules import RuleKind
from stockroom.measure.periods import add
from stockroom.planning.decisions import CheckToDo
from stockroom.planning.facts import Facts
from stockroom.planning.replaying.walk import Asked, Walk

_CLOSED = "all of that is closed"
"""How the plan says that a result would count on closed days only, when nobody is there."""


def titrated_in_time(
    laid: Walk, asked: Asked, subject: str, found: date | None, stood: date | None
) -> bool:
    """True when a strength found on a day, or by a titration planned, counts for an exact need.

    `subject` is the bottle or make, `stood` the day it is ready to be titrated. Where every
    day that would count is closed, a titration that says so will do.
    """
    on, oldest = asked.booking.on, counts_from(asked)
    if found is not None and oldest <= found <= on:
        return True
    # what is ready in the evening is titrated the next day
    since = max(oldest, stood + timedelta(days=1)) if stood else oldest
    return any(
        oldest <= check.best <= on or said_closed(laid.facts, check, since, on)
        for check in laid.plan.checks
        if check.subject == subject
        and check.what == "titrate"
        and not check.optional
        and asked.booking.number in check.bookings
    )


def counts_from(asked: Asked) -> date:
    """The first day a strength may be found on and still count for an exact need.

    By the recipe's own interval, else the line's recheck rule, else the day itself.
    """
    on = asked.booking.on
    if asked.requirement.found_within_days is not None:
        return on - timedelta(days=asked.requirement.found_within_days)
    for rule in asked.line.rules:
        if rule.kind is RuleKind.RECHECK and rule.lasts is not None:
            return on - (add(on, rule.lasts) - on)
    return on


def said_closed(facts: Facts, check: CheckToDo, first: date, last: date) -> bool:
    """True when no day from `first` to `last` is open, and the check says so."""
    day = max(first, facts.as_at)
    while day <= last and not facts.calendar.is_open(day):
        day += timedelta(days=1)
    return day > last and _CLOSED in check.reason
