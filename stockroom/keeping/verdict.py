"""The verdict on one bottle on one day: its condition, until when, and what decides.

Each kind of rule that sets a date has one function here, looked up in
`_DATED`; the earliest last good day wins and is named. Last good days are
included: good until 31 March is usable all that day.
"""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass, replace
from datetime import date, timedelta
from enum import StrEnum

from stockroom.findings import DO_NOT_TOUCH
from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Origin, Purpose, Rule, RuleKind
from stockroom.keeping.strength import (
    Strengths,
    last_check,
    logged_to,
    origin_day,
    strengths_on,
    temperature_on,
)
from stockroom.keeping.warming import warmed_until, where_it_stood
from stockroom.measure.periods import add, format_period

WEAK_BELOW = 0.80
"""A bottle is weak below this part of its label strength: outside even "rough"."""


class Condition(StrEnum):
    """What a bottle is like on a day. The words are a house choice."""

    SOUND = "sound"
    WATCH = "watch"
    WEAK = "weak"
    PAST = "past"
    NO_DATE = "no date"
    SET_ASIDE = "set aside"
    NOT_FOUND = "not found"
    GONE = "gone"


USABLE = frozenset({Condition.SOUND, Condition.WATCH, Condition.WEAK})
"""Conditions the planner may count at all, if the strength suffices."""


@dataclass(frozen=True, slots=True)
class Limit:
    """The last good day one rule gives, in words, and what it does when over.

    `known_until` marks a recheck: past it the strength is not known, which is
    *watch*; any other limit makes the bottle *past*.
    """

    until: date
    because: str
    safety: bool = False
    known_until: bool = False
    by_look: bool = False


@dataclass(frozen=True, slots=True)
class Verdict:
    """Condition on the day, last good day if one is set, what decided, and the strengths.

    `good_until` is the date named by `decided_by`: for a bottle gone past, the
    day it was good until; for a sound one the nearest limit ahead.
    `recheck_by` is the last day its strength counts as known, if it is rechecked;
    `usable_until` the last day before any limit that is not a recheck.
    """

    condition: Condition
    good_until: date | None
    decided_by: str
    strengths: Strengths
    recheck_by: date | None = None
    usable_until: date | None = None
    safety: bool = False
    look_would_do: bool = False
    """True when only a look stands between this bottle and being sound."""

    @property
    def until_word(self) -> str:
        """What the day of `good_until` is called: past a recheck a bottle is not known, not bad."""
        known_only = self.good_until is not None and self.good_until == self.recheck_by
        return "recheck by" if known_only and self.good_until != self.usable_until else "good until"

    @property
    def warning(self) -> str:
        """What must be said of a bottle past its safety date; "" of any other."""
        here = self.condition not in USABLE and self.condition is not Condition.GONE
        return DO_NOT_TOUCH if self.safety and here else ""


def verdict(
    record: Record, rules: tuple[Rule, ...], on: date, purpose: Purpose = Purpose.ANY
) -> Verdict:
    """Judge one bottle on one day, for a purpose.

    Order: gone, not found, set aside, no date, past, watch, weak, sound. Never
    raises; a bottle without limits is sound with no date.
    """
    return judge(record, limits_of(record, rules, on, purpose), strengths_on(record, rules, on), on)


def judge(record: Record, limits: list[Limit], strengths: Strengths, on: date) -> Verdict:
    """The verdict from limits and strengths already worked out, for whoever asks many times."""
    unusable = _out_of_use(record, on)
    if unusable:
        # a look cannot bring back what a limit of its own has ended
        over = [limit for limit in limits if limit.until < on]
        looks = unusable[0] is Condition.NO_DATE and not over
        # standing apart makes a bottle past its safety date no safer
        safety = any(limit.safety for limit in over)
        return Verdict(
            unusable[0], None, unusable[1], strengths, safety=safety, look_would_do=looks
        )
    return _judged(record, strengths, limits, on)


def _judged(record: Record, strengths: Strengths, limits: list[Limit], on: date) -> Verdict:
    hard = [limit for limit in limits if not limit.known_until]
    over = [limit for limit in limits if limit.until < on]
    # what ended its use before what ended our knowledge of it
    deciding = _deciding([x for x in over if not x.known_until] or over or limits)
    condition, until, because = Condition.SOUND, deciding.until, deciding.because
    # weak comes after: a bottle past is not used, however strong
    if over:
        condition = Condition.WATCH if deciding.known_until else Condition.PAST
    elif _is_weak(strengths):
        condition, because = Condition.WEAK, _weak_words(record, strengths, on)
    return Verdict(
        condition=condition,
        good_until=None if until == date.max else until,
        decided_by=because,
        strengths=strengths,
        recheck_by=min((x.until for x in limits if x.known_until), default=None),
        usable_until=min((x.until for x in hard), default=None),
        # a date of another kind that ended its use earlier makes it no safer
        safety=deciding.safety or any(limit.safety for limit in over),
        look_would_do=condition is Condition.PAST
        and all(x.by_look for x in over if not x.known_until),
    )


def limits_of(
    record: Record, rules: tuple[Rule, ...], on: date, purpose: Purpose = Purpose.ANY
) -> list[Limit]:
    """Every dated limit that speaks of this bottle, in the order of the rules."""
    place = temperature_on(record, on)
    # the maker's date counts beside the house's own and is not moved by it
    limits = [_printed(record)] if record.printed and record.printed.day else []
    if record.bound is not None:
        limits.append(Limit(record.bound.until, record.bound.because, record.bound.safety))
    for rule in rules:
        asked = rule.purpose is Purpose.ANY or rule.purpose is purpose
        dated = _DATED.get(rule.kind)
        if dated and asked and rule.holds_for(record.nominal, place):
            limit = dated(record, rule, on)
            limits += [limit] if limit else []
    return limits


def _out_of_use(record: Record, on: date) -> tuple[Condition, str] | None:
    # what has left the house comes first: the rest is history
    if record.gone:
        return Condition.GONE, "discarded"
    if record.not_found:
        return Condition.NOT_FOUND, "not found when last looked for"
    if record.set_aside:
        return Condition.SET_ASIDE, record.set_aside
    if record.undated_on(on):
        return Condition.NO_DATE, "no date on it: needs a look"
    return None


def _deciding(limits: list[Limit]) -> Limit:
    if not limits:
        return Limit(date.max, "no limit set")
    # the words break a tie, so that the rules' order in the table does not
    return min(limits, key=lambda limit: (limit.until, limit.known_until, limit.because))


def _printed(record: Record) -> Limit:
    assert record.printed is not None and record.printed.day is not None
    words = f'printed "{record.printed.text}"'
    if record.printed.ambiguous:
        words += f", read as {_day(record.printed.day)} until somebody says"
    return Limit(record.printed.day, words)


def _life(record: Record, rule: Rule, on: date) -> Limit | None:
    since = origin_day(record, rule.origin, on)
    if since is None or rule.lasts is None:
        return None
    guessed = rule.origin is Origin.OPENED and record.opened_guessed
    words = f"{rule.origin} {_day(since)}{' (guessed)' if guessed else ''}"
    return _counted(record, rule, on, since, words)


def _same_day(record: Record, rule: Rule, on: date) -> Limit | None:
    made = record.made
    return Limit(made, f"made {_day(made)}, same day only", rule.safety) if made else None


def _recheck(record: Record, rule: Rule, on: date) -> Limit | None:
    found = last_check(record, on, CheckKind.FOUND)
    return _from_check(record, rule, on, found, known=True)


def _look(record: Record, rule: Rule, on: date) -> Limit | None:
    # a titration is at least as good as a look: the house counts from either
    seen = last_check(record, on, CheckKind.LOOKED, CheckKind.FOUND)
    limit = _from_check(record, rule, on, seen)
    return limit and replace(limit, by_look=True)


def _never(record: Record, rule: Rule, on: date) -> Limit | None:
    # used on the day it is mixed or not at all; with no day known it is past already
    since = record.made or record.received or record.opened
    until = since or on - timedelta(days=1)
    return Limit(until, f"made {_day(since)}, never kept" if since else "never kept", safety=True)


def _test(record: Record, rule: Rule, on: date) -> Limit | None:
    tested = last_check(record, on, CheckKind.TESTED)
    if not tested and not (record.received or record.made or record.opened):
        # a look dates other things, but how old a peroxide-former is it cannot say
        words = "nothing says when it was opened, test or discard"
        return Limit(on - timedelta(days=1), words, safety=True)
    limit = _from_check(record, rule, on, tested)
    return limit and Limit(limit.until, f"{limit.because}, test or discard", safety=True)


def _from_check(
    record: Record, rule: Rule, on: date, check: Check | None, *, known: bool = False
) -> Limit | None:
    since = check.on if check else origin_day(record, rule.origin, on)
    if since is None or rule.lasts is None:
        return None
    how = f"{check.kind if check else rule.origin} {_day(since)}"
    return _counted(record, rule, on, since, how if check else f"{how}, not checked since", known)


def _counted(
    record: Record, rule: Rule, on: date, since: date, words: str, known: bool = False
) -> Limit:
    assert rule.lasts is not None
    until = add(since, rule.lasts)
    words = f"{words} + {format_period(rule.lasts)}"
    where, warmed = where_it_stood(record, on), warmed_until(record, rule, on, since, until)
    if warmed != until and where:
        words += f" at {rule.at_c:g} °C, {(warmed - since).days} d {where}"
    return Limit(warmed, words, rule.safety, known_until=known)


_DATED: dict[RuleKind, Callable[[Record, Rule, date], Limit | None]] = {
    RuleKind.LIFE: _life,
    RuleKind.SAME_DAY: _same_day,
    RuleKind.RECHECK: _recheck,
    RuleKind.LOOK: _look,
    RuleKind.TEST: _test,
    RuleKind.NEVER: _never,
}


def _is_weak(strengths: Strengths) -> bool:
    if not strengths.nominal or strengths.expected is None:
        return False
    return strengths.expected < WEAK_BELOW * strengths.nominal


def _weak_words(record: Record, strengths: Strengths, on: date) -> str:
    assert strengths.expected is not None and strengths.nominal
    part = 100 * strengths.expected / strengths.nominal
    # on the safe side it is a limit, and not what is expected
    known = "expected at" if strengths.usual is None else "to be counted on for only"
    words = f"{known} {part:.0f} % of its label strength"
    logged = logged_to(record, on)
    return f"{words}, temperatures as logged to {_day(logged)}" if logged else words


def _day(day: date) -> str:
    return day.isoformat()
