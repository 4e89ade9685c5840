"""The three strengths of a bottle, kept apart: nominal, found, expected."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.keeping.laws import strength_after, warmth
from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Origin, Rule, RuleKind


@dataclass(frozen=True, slots=True)
class Strengths:
    """What a bottle's strength is on a day, and how that is known.

    `nominal` is the label's; `found` the last result, with its day; `expected`
    carries the found one (else the nominal one) forward by the law. None where
    there is nothing to say. All in the line's unit.
    """

    nominal: float | None
    found: float | None
    found_on: date | None
    expected: float | None

    @property
    def basis(self) -> str:
        """In one word, where `expected` starts from: "found", "nominal" or "unknown"."""
        if self.found is not None:
            return "found"
        return "nominal" if self.nominal is not None else "unknown"


def last_check(record: Record, on: date, *kinds: CheckKind) -> Check | None:
    """The latest passed check of these kinds up to and including `on`, if any."""
    done = [c for c in record.checks if c.kind in kinds and c.on <= on and c.passed]
    # of two on one day the one entered later counts, and max keeps the first it meets
    return max(reversed(done), key=lambda check: check.on) if done else None


def law_of(record: Record, rules: tuple[Rule, ...], on: date) -> Rule | None:
    """The fading rule that speaks of this bottle on that day, if any."""
    return _law_at(record, rules, temperature_on(record, on))


def _law_at(record: Record, rules: tuple[Rule, ...], place: float | None) -> Rule | None:
    for rule in rules:
        if rule.kind is RuleKind.FADES and rule.holds_for(record.nominal, place):
            return rule
    return None


def temperature_on(record: Record, on: date) -> float | None:
    """The °C of the place where the bottle stood that day, if known."""
    here = [stay for stay in record.stays if stay.since <= on]
    return max(here, key=lambda stay: stay.since).temperature_c if here else None


def stretches(record: Record, on: date) -> list[tuple[date, date, float | None]]:
    """(from, to, °C) of every place it has stood in up to a day, in order."""
    stays = sorted((stay for stay in record.stays if stay.since <= on), key=lambda s: s.since)
    # where it stood before the first entry nobody knows, but it aged there all the same
    starts = [date.min, *(stay.since for stay in stays)]
    places = [None, *(stay.temperature_c for stay in stays)]
    return list(zip(starts, [*starts[1:], on], places, strict=True))


def origin_day(record: Record, origin: Origin, on: date) -> date | None:
    """The day a period from this origin is counted from; None when it has not happened.

    A bottle neither received nor made on a known day counts from its first
    passed check up to `on`: somebody who looked at it gave it its date.
    """
    # a solution made here was never received: its day made stands for that too
    known = {
        Origin.OPENED: record.opened,
        Origin.MADE: record.made,
        Origin.RECEIVED: record.received or record.made,
    }[origin]
    if known or record.received or record.made:
        return known
    return record.first_passed(on)


def strengths_on(record: Record, rules: tuple[Rule, ...], on: date) -> Strengths:
    """Nominal, found and expected strength on a day; expected never rises with time.

    A law counted from opening leaves an unopened bottle as strong as its label.
    """
    found = last_check(record, on, CheckKind.FOUND)
    # a result is carried forward even when old: it still beats a printed label
    start = found.strength if found else record.nominal
    found_on = found.on if found else None
    expected = None if start is None else _carried(record, rules, on, start, found_on)
    return Strengths(record.nominal, found.strength if found else None, found_on, expected)


def _carried(
    record: Record, rules: tuple[Rule, ...], on: date, start: float, found_on: date | None
) -> float:
    """Stay by stay, each under the rule for its own place: moving never gives strength back."""
    strength = start
    for first, last, place in stretches(record, on):
        rule = _law_at(record, rules, place)
        since = origin_day(record, rule.origin, on) if rule else None
        # a place without a rule of its own keeps the strength as it is, and says nothing of it
        if rule is None or rule.law is None or since is None:
            continue
        days = (last - max(first, since, found_on or since)).days * warmth(rule.law, place)
        strength = strength_after(strength, rule.law, days)
    return strength
