"""Lives that warmth shortens and cold lengthens, by where a bottle really stood."""

from __future__ import annotations

from datetime import date

from stockroom.keeping.arrhenius import by_factor
from stockroom.keeping.record import Record
from stockroom.keeping.rules import Rule
from stockroom.keeping.strength import logged_to, stretches, temperature_on


def where_it_stood(record: Record, on: date) -> str:
    """How warm it stood, in words: logged, where a logger wrote, else its place's own °C."""
    here, logged = temperature_on(record, on), logged_to(record, on)
    place = "" if here is None else f"at {here:g} °C"
    warmths = {each.temperature_c for each in stretches(record, on)[1:] if each.first < each.last}
    if place and len(warmths | {here}) > 1:
        place = f"where it stood, now {place}"
    # the days to come are not logged yet, and the reader must see what was
    told = f"as logged to {logged.isoformat()}" if logged else ""
    return ", else ".join(part for part in (told, place) if part)


def warmed_until(record: Record, rule: Rule, on: date, since: date, until: date) -> date:
    """The last good day where it stood: each stay uses its life up at its own pace.

    A life used up in a warm place is not given back by moving to a cold one. What a
    logger wrote of the place counts before the place's own temperature.
    """
    if rule.at_c is None or not rule.factor_per_10c:
        return until
    response = by_factor(rule.at_c, rule.factor_per_10c)
    left = float((until - since).days)
    *past, here = stretches(record, on)
    for stretch in past:
        begun = max(stretch.first, since)
        used = stretch.own_days(response, begun, stretch.last)
        if used > left:
            return stretch.reach(response, begun, left)
        left -= used
    # where it stands now it is taken to stay
    return here.reach(response, max(here.first, since), left)
