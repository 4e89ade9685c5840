"""The three strengths of a bottle, kept apart: nominal, found, expected."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date

from stockroom.keeping.laws import equivalent_days, strength_after
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
    return max(done, key=lambda check: check.on) if done else None


def law_of(record: Record, rules: tuple[Rule, ...], on: date) -> Rule | None:
    """The fading rule that speaks of this bottle on that day, if any."""
    place = temperature_on(record, on)
    for rule in rules:
        if rule.kind is RuleKind.FADES and rule.holds_for(record.nominal, place):
            return rule
    return None


def temperature_on(record: Record, on: date) -> float | None:
    """The °C of the place where the bottle stood that day, if known."""
    here = [stay for stay in record.stays if stay.since <= on]
    return max(here, key=lambda stay: stay.since).temperature_c if here else None


def origin_day(record: Record, origin: Origin) -> date | None:
    """The day a period from this origin is counted from; None when it has not happened."""
    if origin is Origin.OPENED:
        return record.opened
    if origin is Origin.MADE:
        return record.made
    return record.received or record.made


def strengths_on(record: Record, rules: tuple[Rule, ...], on: date) -> Strengths:
    """Nominal, found and expected strength on a day; expected never rises with time.

    A law counted from opening leaves an unopened bottle as strong as its label.
    """
    found = last_check(record, on, CheckKind.FOUND)
    start = found.strength if found else record.nominal
    found_on = found.on if found else None
    expected = None if start is None else _carried(record, rules, on, start, found_on)
    return Strengths(record.nominal, found.strength if found else None, found_on, expected)


def _carried(
    record: Record, rules: tuple[Rule, ...], on: date, start: float, found_on: date | None
) -> float:
    rule = law_of(record, rules, on)
    if rule is None or rule.law is None:
        return start
    since = origin_day(record, rule.origin)
    if since is None:
        return start
    begun = max(since, found_on) if found_on else since
    return strength_after(start, rule.law, equivalent_days(rule.law, record.stays, begun, on))
