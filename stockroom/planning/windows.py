"""The earliest day a make may start and still be good on the day it is wanted."""

from __future__ import annotations

from datetime import date, timedelta
from functools import lru_cache

from stockroom.keeping.record import Record
from stockroom.keeping.rules import Purpose, Rule, RuleKind
from stockroom.keeping.strength import strengths_on
from stockroom.keeping.verdict import limits_of
from stockroom.planning.choosing.fitness import bounds, wrong_strength
from stockroom.planning.facts import Facts, Line, Requirement


def earliest_start(
    facts: Facts, line: Line, requirement: Requirement | None, wanted: date, last: date
) -> date:
    """The first open day from today on that still leaves the make good on the day `wanted`.

    The line's own life, the recipe's freshest age and fading must all allow it
    (`requirement` None: for an ingredient, only the life). Never later than
    `last`, the latest start already found.
    """
    first = facts.calendar.on_or_after(facts.as_at)
    low, high = 0, (last - first).days
    # the older a batch the less it will do, so the answer splits the days in two
    while low < high:
        middle = (low + high) // 2
        if will_do(line, requirement, first + timedelta(days=middle), wanted):
            high = middle
        else:
            low = middle + 1
    return min(facts.calendar.on_or_after(first + timedelta(days=low)), last)


def good_until(line: Line, made: date) -> date | None:
    """The last good day of a batch of a line made on a day; None when no rule limits it."""
    # whatever its rules say: never kept is used the day it is mixed
    if line.never_kept:
        return made
    return _good_until(line.rules, line.strength, made)


@lru_cache(maxsize=4096)
def _good_until(rules: tuple[Rule, ...], strength: float | None, made: date) -> date | None:
    record = Record(made=made, nominal=strength)
    # a recheck ends what is known of its strength and not its use
    limits = limits_of(record, rules, made, Purpose.ANY)
    return min((x.until for x in limits if not x.known_until), default=None)


def held(line: Line, made: date, on: date) -> float | None:
    """The strength a batch made on a day is expected to hold on another, in the line's unit."""
    # most lines never fade, and need no sum
    if not any(rule.kind is RuleKind.FADES for rule in line.rules) and line.caution is None:
        return line.strength
    record = Record(made=made, nominal=line.strength, caution=line.caution)
    return strengths_on(record, line.rules, on).expected


def will_do(line: Line, requirement: Requirement | None, made: date, wanted: date) -> bool:
    """True when a batch of a line made on a day will still do on the day it is wanted.

    Life, the recipe's freshest age and fading are looked at; `requirement` None
    (an ingredient) asks for the life only.
    """
    until = good_until(line, made)
    if until is not None and until < wanted:
        return False
    if requirement is None:
        return True
    freshest = requirement.freshest_days
    if freshest is not None and (wanted - made).days > freshest:
        return False
    if bounds(requirement) is None:
        return True
    record = Record(made=made, nominal=line.strength, caution=line.caution)
    strengths = strengths_on(record, line.rules, wanted)
    return not wrong_strength(requirement, strengths.expected, line, strengths.usual)
