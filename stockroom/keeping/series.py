"""The strengths found of a bottle, set against how far it had aged when they were."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.keeping.record import CheckKind, Record
from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.keeping.strength import aged, law_of, origin_day

PLAIN = Rule(RuleKind.FADES, origin=Origin.RECEIVED, law=Law(1, 0.0), source="no rule of fading")
"""Stands in where a line has no rule of fading: first order, by the calendar."""


@dataclass(frozen=True, slots=True)
class Series:
    """The strengths found of one bottle, each with its day and its age then, oldest first.

    `since` is the day ages are counted from. An age is in days at the temperature of the
    law of `rule`, by the calendar where that leaves warmth out of account.
    """

    bottle: str
    rule: Rule
    since: date
    days: tuple[date, ...]
    ages: tuple[float, ...]
    strengths: tuple[float, ...]
    uncertainties: tuple[float | None, ...] = ()

    @property
    def distinct(self) -> int:
        """On how many different days it was checked."""
        return len(set(self.days))


def series_of(
    bottle: str, record: Record, rule: Rule, until: date, since: date | None = None
) -> Series | None:
    """The strengths found of a bottle up to a day, against its age; None without any.

    With `since` (it was topped up, or a slip came before), only those from that day on,
    aged from it. What was found before its age begins, as of a bottle still sealed, says
    nothing about fading and is left out.
    """
    counted = since or origin_day(record, rule.origin, until)
    if counted is None:
        return None
    found = [
        (check.on, check.strength, check.uncertainty)
        for check in sorted(record.checks, key=lambda check: check.on)
        if check.kind is CheckKind.FOUND and check.passed and check.strength is not None
    ]
    kept = [one for one in found if counted <= one[0] <= until]
    if not kept:
        return None
    days, strengths, uncertainties = zip(*kept, strict=True)
    ages = tuple(aged(record, rule, counted, day) for day in days)
    return Series(bottle, rule, counted, days, ages, strengths, uncertainties)


def rule_for(record: Record, rules: tuple[Rule, ...], on: date) -> Rule:
    """The rule of fading a bottle ages by where it stands; `PLAIN` where there is none."""
    return law_of(record, rules, on) or PLAIN


def order_of(rule: Rule) -> int:
    """The order a rule of fading says, 1 where it says none."""
    return rule.law.order if rule.law else 1
