"""What a bottle or a make of a finished plan is like on a day: its verdict, life and strength.

Each is asked of `keeping` once and kept on the walk, since a plan asks of the same bottle
again and again.
"""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import replace
from datetime import date, timedelta

from stockroom.keeping.record import Record
from stockroom.keeping.rules import Purpose, RuleKind
from stockroom.keeping.strength import Strengths, strengths_on
from stockroom.keeping.verdict import Limit, Verdict, judge, limits_of
from stockroom.planning.decisions import Make
from stockroom.planning.facts import Bottle, Facts, Line
from stockroom.planning.replaying.walk import Walk


def judged_on(laid: Walk, bottle: Bottle, on: date, purpose: Purpose) -> Verdict:
    """The verdict on a bottle on a day, opened as the plan opens it."""
    record, limits = _limits(laid, bottle, purpose)
    return judge(record, list(limits), _strengths(laid, bottle, record, on), on)


def _limits(laid: Walk, bottle: Bottle, purpose: Purpose) -> tuple[Record, Sequence[Limit]]:
    key = (bottle.number, purpose)
    if key not in laid.limits:
        opened = laid.opened.get(bottle.number)
        record = replace(bottle.record, opened=opened) if opened else bottle.record
        # nothing is entered of the days to come, so every one of them has the same limits
        day = max(laid.facts.as_at, opened or laid.facts.as_at)
        rules = laid.facts.lines[bottle.line].rules
        laid.limits[key] = record, limits_of(record, rules, day, purpose)
    return laid.limits[key]


def _strengths(laid: Walk, bottle: Bottle, record: Record, on: date) -> Strengths:
    key = (bottle.number, on)
    if key not in laid.strengths:
        rules = laid.facts.lines[bottle.line].rules
        laid.strengths[key] = strengths_on(record, rules, on)
    return laid.strengths[key]


def stood_by(facts: Facts, bottle: Bottle) -> date | None:
    """The day a bottle has stood long enough; standing under half a day does not count."""
    method = facts.methods.get(bottle.line)
    if method is None or bottle.record.made is None or not bottle.made_here:
        return bottle.record.ready_on
    return bottle.record.made + timedelta(days=round(method.stands_hours / 24))


def good_until(laid: Walk, line: Line, made: date) -> date | None:
    """The last good day of a batch made on a day: that day itself where it is never kept.

    None when no rule limits it. A recheck ends what is known of it and not its use.
    """
    if line.never_kept:
        return made
    key = (line.key, made)
    if key not in laid.lives:
        record = Record(made=made, nominal=line.strength)
        found = limits_of(record, line.rules, made, Purpose.ANY)
        last = min((limit.until for limit in found if not limit.known_until), default=None)
        laid.lives[key] = last
    return laid.lives[key]


def faded(laid: Walk, line: Line, make: Make, on: date) -> Strengths:
    """The strengths of a make on a day, from its nominal one carried by the law."""
    fades = line.caution is not None or any(r.kind is RuleKind.FADES for r in line.rules)
    if not fades:
        return Strengths(line.strength, None, None, line.strength)
    key = (line.key, make.on, on)
    if key not in laid.faded:
        record = Record(made=make.on, nominal=line.strength, caution=line.caution)
        laid.faded[key] = strengths_on(record, line.rules, on)
    return laid.faded[key]
