"""Decay laws of order 0, 1 and 2, and what warmth does to them.

Days are the unit of time; a month of a printed rate is 30.4375 days, the mean
of the calendar. Strengths are in the line's own unit and never rise.
Source: the integrated rate laws of any physical chemistry text, e.g. OpenStax
Chemistry 2e, section 12.4 (CC BY).
"""

from __future__ import annotations

import math
from datetime import date, timedelta

from stockroom.errors import BadAmount
from stockroom.keeping.rules import Law

DAYS_PER_MONTH = 30.4375


def warmth(law: Law, temperature_c: float | None) -> float:
    """How many times faster than at the law's own temperature; 1 where either is unknown.

    factor ** ((T − T₀) / 10), the rule of a constant factor per 10 °C.
    """
    if temperature_c is None or law.at_c is None or law.factor_per_10c is None:
        return 1.0
    return float(law.factor_per_10c ** ((temperature_c - law.at_c) / 10.0))


def strength_after(start: float, law: Law, days: float) -> float:
    """Strength left after `days` (≥ 0) at the law's own temperature; never below zero.

    Raises BadAmount for a rate that would gain strength.
    """
    if law.rate < 0:
        raise BadAmount(f"A rate of {law.rate:g} would gain strength.", "Give a rate of 0 or more.")
    # asked about a day before it was found, nothing is given back
    if days <= 0 or law.rate == 0 or start <= 0:
        return start
    if law.order == 0:
        return max(0.0, start - law.rate * days)
    if law.order == 1:
        return start * math.exp(-law.rate * days)
    if law.order == 2:
        return 1.0 / (1.0 / start + law.rate * days)
    raise BadAmount(f"No decay law of order {law.order}.", "Use order 0, 1 or 2.")


def days_until(start: float, lowest: float, law: Law) -> float:
    """Days at the law's temperature until strength has fallen to `lowest`; inf if it never does."""
    if lowest >= start:
        return 0.0
    # a first- or second-order law never quite reaches nothing
    if law.rate <= 0 or (lowest <= 0 and law.order != 0):
        return math.inf
    if law.order == 0:
        return (start - lowest) / law.rate
    if law.order == 1:
        return math.log(start / lowest) / law.rate
    return (1.0 / lowest - 1.0 / start) / law.rate


def falls_below(
    start: float, lowest: float, law: Law, since: date, temperature_c: float | None
) -> date | None:
    """The first day on which strength stands below `lowest`; None within 100 years.

    A strength already too low gives `since` itself.
    """
    days = days_until(start, lowest, law) / warmth(law, temperature_c)
    if start < lowest:
        return since
    # a century is never, and dates beyond the year 9999 do not exist
    if days > 36525:
        return None
    # at exactly `days` it still stands at `lowest`, so the next whole day is the first below
    return since + timedelta(days=math.floor(days) + 1)
