"""The day each line kept to a level falls below it, where no order already says so."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from dataclasses import replace
from datetime import date

from stockroom.findings import Finding
from stockroom.keeping.verdict import USABLE
from stockroom.planning.amounts import say
from stockroom.planning.buying.course import Course, lapse_days, left_on
from stockroom.planning.buying.on_way import OnWay
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.decisions import Level
from stockroom.planning.facts import Facts, Line
from stockroom.planning.wants import Want


def levels(
    facts: Facts, wants: Iterable[Want], runs: Iterable[Course], shelf: Shelf
) -> list[Level]:
    """The day each line kept to a level falls below it, where no order already says so.

    A line made here falls on the day of a booking, by exact needs, or on the day a bottle
    is past; a bought one that nobody draws on may stand below its level already. What is on
    its way counts: it has been seen to.
    """
    by_line: dict[str, list[Want]] = {}
    for root in wants:
        for part in root.tree():
            by_line.setdefault(part.line, []).append(part)
    coming = OnWay(facts)
    found = []
    for line in facts.lines.values():
        takes = by_line.get(line.key, [])
        # a bought line that is drawn on has its order to say so
        if line.level is not None and (not takes or line.key in facts.methods):
            level = _fall(facts, line, line.level, takes, shelf, coming)
            found += [level] if level else []
    found += [level for course in runs for level in _past_the_needs(course)]
    told = [replace(level, not_counted=_not_counted(facts, level.line, shelf)) for level in found]
    return sorted(told, key=lambda level: (level.on, level.line))


def _not_counted(facts: Facts, line: str, shelf: Shelf) -> tuple[str, ...]:
    # whoever sees the bottle stand there would not believe that nothing is left
    judged = [(b, shelf.verdict_planned(b.number, facts.as_at)) for b in shelf.of_line(line)]
    return tuple(
        f"{bottle.number} {each.condition}"
        for bottle, each in judged
        if bottle.left and each.condition not in USABLE
    )


def _past_the_needs(course: Course) -> Iterator[Level]:
    """A bought line that falls below only once its needs are served, by a bottle going past."""
    line, on = course.line, course.falls_below
    ends_below = line.level is not None and course.left_at_last < line.level
    if course.trigger is None and ends_below and on is not None and line.level is not None:
        yield Level(
            line.key, line.item, on, course.left_below, line.level, line.kind, course.runs_out
        )


def _fall(
    facts: Facts, line: Line, level: int, takes: list[Want], shelf: Shelf, coming: OnWay
) -> Level | None:
    """The first day below the level, and the first with nothing usable left."""
    fell: tuple[date, int] | None = None
    for on, left in _course(facts, line, takes, shelf, coming):
        if left < level and fell is None:
            fell = (on, left)
        if left <= 0 and fell is not None:
            return Level(line.key, line.item, *fell, level, line.kind, runs_out=on)
    return Level(line.key, line.item, *fell, level, line.kind) if fell else None


def _course(
    facts: Facts, line: Line, takes: list[Want], shelf: Shelf, coming: OnWay
) -> Iterator[tuple[date, int]]:
    """What is left, day by day, as needs draw on it and its bottles go past."""
    drawn: dict[str, int] = {}
    lapses, more = lapse_days(facts, line, shelf), coming.unpromised(line.key)
    if not takes:
        yield facts.as_at, left_on(shelf, line, facts.as_at, drawn) + more
    for want in sorted(takes, key=lambda want: want.need.rank[1:]):
        while lapses and lapses[0] <= want.need.on:
            day = lapses.pop(0)
            yield day, left_on(shelf, line, day, drawn) + more
        for promise in want.promises:
            drawn[promise.bottle] = drawn.get(promise.bottle, 0) + promise.amount
        yield want.need.on, left_on(shelf, line, want.need.on, drawn) + more
    for day in lapses:
        yield day, left_on(shelf, line, day, drawn) + more


def level_queries(facts: Facts) -> list[Finding]:
    """A question for each line whose level is above the largest pack it is sold in."""
    row = []
    for line in facts.lines.values():
        largest = max((pack.size for pack in line.packs), default=0)
        # one full pack would stand below it from the first day
        if line.level is not None and 0 < largest < line.level:
            level, size = say(line.level, line.kind), say(largest, line.kind)
            text = f"its level of {level} is above its largest pack of {size}: is that meant?"
            row.append(Finding(line.key, text))
    return sorted(row, key=lambda finding: finding.subject)
