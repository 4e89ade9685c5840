"""Decay laws of order 0, 1 and 2, and what warmth does to them.

Days are the unit of time; a month of a printed rate is 30.4375 days, the mean
of the calendar. Strengths are in the line's own unit and never rise.
Source: the integrated rate laws of any physical chemistry text, e.g. OpenStax
Chemistry 2e, section 12.4 (CC BY).
"""

from __future__ import annotations

import math
from bisect import bisect_left
from collections.abc import Callable
from dataclasses import dataclass
from datetime import date, timedelta

from stockroom.errors import BadAmount
from stockroom.keeping import hypochlorite
from stockroom.keeping.arrhenius import Response, by_energy, by_factor
from stockroom.keeping.rules import Law

DAYS_PER_MONTH = 30.4375
NAMED = (hypochlorite.NAME,)
"""The laws that bring their own figures."""

FACTORS = (1.0, 20.0)
"""What a typed factor per 10 °C may be: nothing keeps better for standing warm, and 20 at room
temperature is an energy of over 200 kJ/mol. Ours, no source."""

# a century is never: what lasts longer is not dated
_NEVER_DAYS = 36525


@dataclass(frozen=True, slots=True)
class Kinetics:
    """A law with every figure settled for one solution: `rate` per day at the response's own °C.

    Without a `response` warmth is left out of account.
    """

    order: int
    rate: float
    response: Response | None = None


def kinetics(law: Law, made_as: float) -> Kinetics:
    """The figures of a law for a solution made at strength `made_as`, in the line's unit.

    Only a named law looks at `made_as`. Raises: BadAmount for a law that is none.
    """
    if not law.named:
        return Kinetics(law.order, law.rate, response_of(law))
    _check_named(law)
    response = response_of(law)
    assert response is not None
    return Kinetics(2, hypochlorite.rate_per_day(made_as, response.at_c), response)


def response_of(law: Law) -> Response | None:
    """How warmth changes the rate of a law; None where it is left out of account.

    A factor per 10 °C, or an activation energy, and never both. Raises: BadAmount.
    """
    if law.named:
        return hypochlorite.response(hypochlorite.OWN_C if law.at_c is None else law.at_c)
    if law.factor_per_10c is not None and law.ea_kj_mol is not None:
        raise BadAmount(
            f"A factor of {law.factor_per_10c:g} per 10 °C and an Ea of {law.ea_kj_mol:g} kJ/mol"
            " say the same thing twice.",
            "Give one of them.",
        )
    if law.at_c is None:
        return None
    if law.factor_per_10c:
        return by_factor(law.at_c, law.factor_per_10c)
    return by_energy(law.at_c, law.ea_kj_mol) if law.ea_kj_mol else None


def check_law(law: Law) -> Law:
    """The law, when it can be one. Raises: BadAmount saying what is wrong with it."""
    if law.named:
        _check_named(law)
    elif law.order not in (0, 1, 2):
        raise BadAmount(f"No decay law of order {law.order}.", "Use order 0, 1 or 2.")
    elif not 0 <= law.rate < math.inf:
        raise _gains(law.rate)
    for name, figure in (("A factor", law.factor_per_10c), ("An Ea", law.ea_kj_mol)):
        if figure is not None and not figure > 0:
            raise BadAmount(f"{name} of {figure:g} is none.", "Give one above 0.")
        if figure is not None and law.at_c is None and not law.named:
            raise BadAmount(
                f"{name} of {figure:g}, and at how many °C was the rate?", "Give that too."
            )
    response_of(law)
    return law


def _check_named(law: Law) -> None:
    if law.named not in NAMED:
        raise BadAmount(f'No law is called "{law.named}".', f"Known: {', '.join(NAMED)}.")


def _gains(rate: float) -> BadAmount:
    return BadAmount(f"A rate of {rate:g} would gain strength.", "Give a rate of 0 or more.")


def warmth(law: Law, temperature_c: float | None) -> float:
    """How many times faster than at the law's own temperature; 1 where either is unknown.

    factor ** ((T − T₀) / 10), or exp[(Ea/R)(1/T₀ − 1/T)] for an activation energy.
    """
    response = response_of(law) if temperature_c is not None else None
    return 1.0 if response is None or temperature_c is None else response.pace(temperature_c)


def strength_after(
    start: float, law: Law | Kinetics, days: float, *, made_as: float | None = None
) -> float:
    """Strength left after `days` (≥ 0) at the law's own temperature; never below zero.

    `made_as` is the strength it was made at, `start` when left out; only a named
    law looks at it. Raises BadAmount for a rate that would gain strength.
    """
    of = _settled(law, start, made_as)
    if of.rate < 0:
        raise _gains(of.rate)
    # asked about a day before it was found, nothing is given back
    if days <= 0 or of.rate == 0 or start <= 0:
        return start
    if of.order == 0:
        return max(0.0, start - of.rate * days)
    if of.order == 1:
        return start * math.exp(-of.rate * days)
    if of.order == 2:
        return start / (1.0 + start * of.rate * days)
    raise BadAmount(f"No decay law of order {of.order}.", "Use order 0, 1 or 2.")


def days_until(
    start: float, lowest: float, law: Law | Kinetics, *, made_as: float | None = None
) -> float:
    """Days at the law's temperature until strength has fallen to `lowest`; inf if it never does.

    `strength_after` undone: (C₀ − C)/k, ln(C₀/C)/k and (1/C − 1/C₀)/k for order 0, 1 and 2.
    """
    of = _settled(law, start, made_as)
    if lowest >= start:
        return 0.0
    # a first- or second-order law never quite reaches nothing
    if of.rate <= 0 or (lowest <= 0 and of.order != 0):
        return math.inf
    if of.order == 0:
        return (start - max(lowest, 0.0)) / of.rate
    if of.order == 1:
        return math.log(start / lowest) / of.rate
    return (1.0 / lowest - 1.0 / start) / of.rate


def days_to_part(
    start: float, part: float, law: Law | Kinetics, *, made_as: float | None = None
) -> float:
    """Days at the law's temperature until only `part` of the strength is left.

    0.9 gives t90, 0.5 the half-life; inf if it never does. t90 of order 0, 1 and 2 is
    C₀/10k, ln(10/9)/k and 1/(9 k C₀). Raises: BadAmount unless `part` is from 0 to 1.
    """
    if not 0 <= part <= 1:
        raise BadAmount(f"A part of {part:g} is not from 0 to 1.", "Give 0.9 for t90.")
    return days_until(start, part * start, law, made_as=made_as)


def _settled(law: Law | Kinetics, start: float, made_as: float | None) -> Kinetics:
    if isinstance(law, Kinetics):
        return law
    return kinetics(law, start if made_as is None else made_as)


def falls_below(
    start: float, lowest: float, law: Law, since: date, temperature_c: float | None
) -> date | None:
    """The first day on which strength stands below `lowest`; None within 100 years.

    A strength already too low gives `since` itself. For a bottle that has stood in
    several places see `strength.day_below`.
    """
    of, pace = kinetics(law, start), warmth(law, temperature_c)
    return first_below(
        lambda day: strength_after(start, of, (day - since).days * pace), lowest, since
    )


def first_below(strength: Callable[[date], float], lowest: float, since: date) -> date | None:
    """The first day from `since` on which a strength that never rises is below `lowest`.

    None within 100 years. That day it is below, and the day before it was not yet:
    the strength of each day itself is asked, so no rounding moves the day.
    """
    last = min(_NEVER_DAYS, (date.max - since).days)
    days = bisect_left(
        range(last + 1), True, key=lambda count: strength(since + timedelta(count)) < lowest
    )
    return since + timedelta(days=days) if days <= last else None
