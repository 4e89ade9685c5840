"""The three strengths of a bottle, kept apart: nominal, found, expected."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass, replace
from datetime import date

from stockroom.chemistry.uncertainty import COVERAGE
from stockroom.keeping import hypochlorite
from stockroom.keeping.caution import ONE_SIDED_95, Caution
from stockroom.keeping.laws import Kinetics, first_below, kinetics, response_of, strength_after
from stockroom.keeping.record import Check, CheckKind, Record, Stay
from stockroom.keeping.rules import Origin, Rule, RuleKind
from stockroom.keeping.temperatures import Stretch


@dataclass(frozen=True, slots=True)
class Strengths:
    """What a bottle's strength is on a day, and how that is known.

    `nominal` is the label's; `found` the last result, with its day and its standard
    uncertainty; `expected` carries the found one (else the nominal one) forward by
    the law. `lowest` to `highest` is the range of what is expected, where the
    uncertainty of what was found is known. In a plan on the safe side `expected` is a
    lower limit, and `usual` what it is in any other plan. None where there is nothing
    to say. All in the line's unit.
    """

    nominal: float | None
    found: float | None
    found_on: date | None
    expected: float | None
    uncertainty: float | None = None
    lowest: float | None = None
    highest: float | None = None
    usual: float | None = None

    @property
    def basis(self) -> str:
        """In one word, where `expected` starts from: "found", "nominal" or "unknown"."""
        if self.found is not None:
            return "found"
        return "nominal" if self.nominal is not None else "unknown"

    @property
    def likely(self) -> float | None:
        """What it is expected to be, in a plan on the safe side too."""
        return self.expected if self.usual is None else self.usual


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
    here = stay_on(record, on)
    return here.temperature_c if here else None


def stay_on(record: Record, on: date) -> Stay | None:
    """Where the bottle stood that day, if anybody wrote it down."""
    here = [stay for stay in record.stays if stay.since <= on]
    return max(here, key=lambda stay: stay.since) if here else None


def stretches(record: Record, on: date) -> list[Stretch]:
    """Every stay up to a day, in order; the first is the time before anybody wrote a place down."""
    stays = sorted((stay for stay in record.stays if stay.since <= on), key=lambda s: s.since)
    ends = [*(stay.since for stay in stays), on]
    # where it stood before the first entry nobody knows, but it aged there all the same
    told = [Stretch(date.min, ends[0])]
    for stay, end in zip(stays, ends[1:], strict=True):
        told.append(Stretch(stay.since, end, stay.temperature_c, stay.log))
    return told


def logged_to(record: Record, on: date) -> date | None:
    """The last day, up to `on`, that a logger tells of where the bottle stood; None without one."""
    stood = stretches(record, on)
    ends = [each.log.last.date() for each in stood if each.log and each.told_days() > 0]
    return min(max(ends), on) if ends else None


def aged(record: Record, rule: Rule, since: date, until: date) -> float:
    """Days at the temperature of a fading rule that do what `since` to `until` did to the bottle.

    Each stay at its logged temperatures, else at its place's; the plain days where the
    rule leaves temperature out of account.
    """
    response = response_of(rule.law) if rule.law else None
    return sum(
        stretch.own_days(response, max(stretch.first, since), stretch.last)
        for stretch in stretches(record, until)
    )


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

    A law counted from opening leaves an unopened bottle as strong as its label. With
    a caution on the record, `expected` is the lower limit it gives.
    """
    if record.caution is not None:
        return _cautious(record, record.caution, rules, on)
    found = last_check(record, on, CheckKind.FOUND)
    start, since = _start(record, found)
    if start is None:
        return Strengths(record.nominal, None, found.on if found else None, None)
    steps = list(_steps(record, rules, on, start, since))
    expected = _carried(start, steps)
    if found is None:
        return Strengths(record.nominal, None, None, expected)
    known = Strengths(record.nominal, start, found.on, expected, found.uncertainty)
    return _ranged(known, start, steps)


def _start(record: Record, found: Check | None) -> tuple[float | None, date | None]:
    """The strength that is carried forward, and the day it was that; None from the beginning."""
    # a result is carried forward even when old: it still beats a printed label
    if found is not None:
        return found.strength, found.on
    if record.blend is not None:
        return record.blend.strength, record.blend.on
    return record.nominal, None


def _cautious(record: Record, caution: Caution, rules: tuple[Rule, ...], on: date) -> Strengths:
    """As expected, or at a limit of its caution where one is lower: never above the usual."""
    known = strengths_on(replace(record, caution=None), rules, on)
    start, since = _start(record, last_check(record, on, CheckKind.FOUND))
    if start is None or known.expected is None:
        return known
    off = ONE_SIDED_95 * (known.uncertainty or 0.0) if caution.doubted else 0.0
    steps = _steps(record, caution.carried_by or rules, on, start, since)
    low = _carried(max(0.0, start - off), list(steps))
    limits = caution.least(_age_for(record, caution, on))
    return replace(known, expected=min(known.expected, low, *limits), usual=known.expected)


def _age_for(record: Record, caution: Caution, on: date) -> float:
    rule = caution.rule
    since = caution.since or (origin_day(record, rule.origin, on) if rule else None)
    # a sealed bottle under a law from opening has not begun to age
    return aged(record, rule, since, on) if rule and since else 0.0


def _ranged(known: Strengths, start: float, steps: list[tuple[Kinetics, float]]) -> Strengths:
    if known.uncertainty is None:
        return known
    # both ends go through the law: an error in what was found fades with the rest
    off = COVERAGE * known.uncertainty
    low, high = (_carried(max(0.0, start + by), steps) for by in (-off, off))
    return replace(known, lowest=low, highest=high)


def _carried(start: float, steps: list[tuple[Kinetics, float]]) -> float:
    strength = start
    for law, days in steps:
        strength = strength_after(strength, law, days)
    return strength


def _steps(
    record: Record, rules: tuple[Rule, ...], on: date, start: float, known_on: date | None
) -> Iterator[tuple[Kinetics, float]]:
    """Stay by stay the law and its days, each under the rule for its own place.

    Moving never gives strength back. Days are at the law's own temperature.
    """
    made_as = made_at(record, start)
    for stretch in stretches(record, on):
        rule = _law_at(record, rules, stretch.temperature_c)
        since = origin_day(record, rule.origin, on) if rule else None
        # a place without a rule of its own keeps the strength as it is, and says nothing of it
        if rule is None or rule.law is None or since is None:
            continue
        law = kinetics(rule.law, made_as)
        begun = max(stretch.first, since, known_on or since)
        yield law, stretch.own_days(law.response, begun, stretch.last)


def made_at(record: Record, strength: float) -> float:
    """The strength it was made at: the label's, or what was found where that is more."""
    return max(record.nominal or 0.0, strength)


def day_below(record: Record, rules: tuple[Rule, ...], lowest: float, since: date) -> date | None:
    """The first day from `since` on which its expected strength is below `lowest`.

    Through every move and logged temperature known, and then as it stands. What is
    found later than `since` is not looked at. None within 100 years, and where no
    strength is known.
    """
    known = replace(record, checks=tuple(check for check in record.checks if check.on <= since))

    def strength(day: date) -> float:
        expected = strengths_on(known, rules, day).expected
        return lowest if expected is None else expected

    return first_below(strength, lowest, since)


def doubts_of(record: Record, rules: tuple[Rule, ...], on: date) -> tuple[str, ...]:
    """Why the expected strength is only a guess by a law used outside what it was fitted to."""
    rule, here = law_of(record, rules, on), strengths_on(record, rules, on)
    if rule is None or rule.law is None or rule.law.named != hypochlorite.NAME:
        return ()
    begun = [stretch for stretch in stretches(record, on)[1:] if stretch.last > stretch.first]
    warm = [each.temperature_c for each in begun if each.temperature_c is not None]
    return hypochlorite.doubts(
        record.nominal, here.expected, min(warm, default=None), max(warm, default=None)
    )
