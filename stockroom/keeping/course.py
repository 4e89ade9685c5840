"""The course of one bottle's strength: by which law, how warm it stood, and when it is too weak."""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date

from stockroom.keeping.arrhenius import kinetic_response, temperature_at
from stockroom.keeping.laws import days_to_part, kinetics
from stockroom.keeping.record import Record
from stockroom.keeping.rules import Rule
from stockroom.keeping.strength import (
    Strengths,
    day_below,
    doubts_of,
    law_of,
    made_at,
    origin_day,
    strengths_on,
    stretches,
)
from stockroom.keeping.temperatures import Stretch


@dataclass(frozen=True, slots=True)
class Stood:
    """A stay: place, from and to, its own °C, the days a logger tells of, mean kinetic °C."""

    place: str
    since: date
    until: date
    temperature_c: float | None
    logged_days: float
    kinetic: float | None


@dataclass(frozen=True, slots=True)
class Mark:
    """A strength in the line's unit, and the first day it is below that; None: not in 100 years.

    `what` says whose strength it is, `by` the day it is wanted on.
    """

    what: str
    strength: float
    on: date | None = None
    by: date | None = None

    @property
    def in_time(self) -> bool:
        """True when it is still that strong on the day it is wanted."""
        return self.on is None or self.by is None or self.on > self.by


@dataclass(frozen=True, slots=True)
class Course:
    """How a bottle's strength runs, as at a day.

    `rule` is the fading rule that holds where it stands, `since` the day it counts
    from; None for a bottle that does not fade, or not yet. `kinetic` is the mean
    kinetic temperature since it was last found, else since `since`. `t90` and `half`
    are days from the label's strength (else today's) at the °C of its place.
    """

    strengths: Strengths
    rule: Rule | None
    since: date | None
    stood: tuple[Stood, ...]
    kinetic: float | None
    here_c: float | None
    t90: float | None = None
    half: float | None = None
    marks: tuple[Mark, ...] = ()
    doubts: tuple[str, ...] = ()


@dataclass(frozen=True, slots=True)
class Fading:
    """A bottle and its course. `shown` is the label's unit and how many one of `unit` makes.

    `label` is the strength as it stands on the label, "" for none; `cited` is where the
    law's figures come from.
    """

    bottle: str
    line: str
    unit: str
    shown: tuple[str, float]
    on: date
    course: Course
    label: str = ""
    cited: str = ""
    practice: bool = False


def course(
    record: Record, rules: tuple[Rule, ...], on: date, wanted: Iterable[Mark] = ()
) -> Course:
    """The course of a bottle from what is known on a day; `wanted` are marks without their day.

    Never raises for a bottle without strength or law: there is then less to say.
    """
    strengths, rule = strengths_on(record, rules, on), law_of(record, rules, on)
    since = origin_day(record, rule.origin, on) if rule else None
    stays = stretches(record, on)[1:]
    whole = _since(stays, strengths.found_on or since)
    known = strengths.expected is not None
    t90, half = _lives(record, rule, strengths, stays)
    return Course(
        strengths=strengths,
        rule=rule,
        since=since,
        stood=tuple(_stood(record, stays)),
        kinetic=kinetic_over(whole),
        here_c=stays[-1].temperature_c if stays else None,
        t90=t90,
        half=half,
        marks=tuple(_dated(record, rules, on, mark) for mark in wanted if known),
        doubts=doubts_of(record, rules, on),
    )


def _dated(record: Record, rules: tuple[Rule, ...], on: date, mark: Mark) -> Mark:
    return Mark(mark.what, mark.strength, day_below(record, rules, mark.strength, on), mark.by)


def _lives(
    record: Record, rule: Rule | None, strengths: Strengths, stays: list[Stretch]
) -> tuple[float | None, float | None]:
    start = record.nominal or strengths.expected
    if rule is None or rule.law is None or not start:
        return None, None
    law = kinetics(rule.law, made_at(record, start))
    # without any place it counts at the law's own temperature
    pace = stays[-1].pace(law.response) if stays else 1.0
    parts = (days_to_part(start, part, law) / pace for part in (0.9, 0.5))
    t90, half = (None if math.isinf(days) else days for days in parts)
    return t90, half


def _since(stays: list[Stretch], first: date | None) -> list[Stretch]:
    return [
        Stretch(max(each.first, first or each.first), each.last, each.temperature_c, each.log)
        for each in stays
        if first is None or each.last > first
    ]


def _stood(record: Record, stays: list[Stretch]) -> Iterable[Stood]:
    # the same order as the stretches, which are sorted by the day alone
    places = [stay.place for stay in sorted(record.stays, key=lambda stay: stay.since)]
    for place, stay in zip(places, stays, strict=False):
        if stay.last > stay.first:
            yield Stood(
                place,
                stay.first,
                stay.last,
                stay.temperature_c,
                stay.told_days(),
                kinetic_over([stay]),
            )


def kinetic_over(stays: Iterable[Stretch]) -> float | None:
    """The mean kinetic temperature of these stays, as logged and else as their places are.

    Time of which no temperature is known is left out; None when that is all of it.
    """
    response = kinetic_response()
    paced = days = 0.0
    for stay in stays:
        told = stay.told_days()
        # a place without a temperature counts while it was logged, and then no more
        known = (stay.last - stay.first).days if stay.temperature_c is not None else told
        spent = stay.own_days(response, stay.first, stay.last)
        if stay.temperature_c is None:
            spent -= (stay.last - stay.first).days - told
        paced, days = paced + spent, days + known
    return temperature_at(response, paced / days) if days > 0 and paced > 0 else None
