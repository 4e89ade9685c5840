"""The guesses that some of a plan's needs lean on: those of their bottles on their own days."""

from __future__ import annotations

from collections.abc import Iterable, Iterator
from datetime import date

from stockroom.findings import Finding, Lasting
from stockroom.keeping.verdict import verdict
from stockroom.planning.decisions import Answer, Draw, Plan
from stockroom.planning.facts import Closeness, Facts
from stockroom.planning.numbers import natural
from stockroom.planning.tell import leant_on

_ORDER = list(Closeness)


def leaned_on(facts: Facts, plan: Plan, needs: Iterable[Answer]) -> list[Finding]:
    """What these needs take without its being known, each once, by subject.

    A bottle is judged for the last day they draw on it, by themselves or through what is made
    for them; what the term's plan guesses of a line or a result stands as it does there.
    """
    uses: dict[str, list[tuple[date, Closeness]]] = {}
    subjects: set[str] = set()
    for need in needs:
        subjects |= {need.line, need.booking.number}
        subjects |= {one.number for one in plan.on_order if need.booking.number in one.bookings}
        closeness = Closeness(need.closeness) if need.closeness else Closeness.PRESENT
        for on, draw in _draws(plan, need):
            subjects |= {draw.line, draw.bottle, draw.make}
            if draw.bottle:
                uses.setdefault(draw.bottle, []).append((on, closeness))
    told = [*_of_bottles(facts, uses), *_of_the_rest(plan, subjects - {""})]
    return sorted(dict.fromkeys(told), key=lambda f: (natural(f.subject), f.text))


def _draws(plan: Plan, need: Answer) -> Iterator[tuple[date, Draw]]:
    """All a need draws on and the day of it, what goes into its makes too."""
    by_id = {make.id: make for make in plan.makes}
    yield from ((need.booking.on, draw) for draw in need.draws)
    waiting = [need.make]
    while waiting:
        make = by_id.get(waiting.pop())
        if make is not None:
            yield from ((make.on, draw) for draw in make.sources)
            waiting += [draw.make for draw in make.sources if draw.make]


def _of_bottles(facts: Facts, uses: dict[str, list[tuple[date, Closeness]]]) -> Iterator[Finding]:
    bottles = {bottle.number: bottle for bottle in facts.bottles}
    for number, row in uses.items():
        bottle = bottles[number]
        judged = verdict(bottle.record, facts.lines[bottle.line].rules, max(on for on, _ in row))
        closest = min((each for _, each in row), key=_ORDER.index)
        yield from (Finding(number, text) for text in leant_on(facts, bottle, judged, closest))


def _of_the_rest(plan: Plan, subjects: set[str]) -> Iterator[Finding]:
    for each in plan.guesses:
        # a bottle's own are told anew, for the day; these hang on no day
        if each.subject in subjects and isinstance(each, Lasting):
            yield each
