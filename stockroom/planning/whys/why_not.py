"""Why not? What a plan did not choose, judged as the planner judges, on the shelf as planned.

Another bottle, line, make, day or amount in place of the one a need, a booking, a make,
an order or a bottle has. Makes are asked about in `why_not_make.py`, orders in
`why_not_order.py`.
"""

from __future__ import annotations

from collections.abc import Iterable
from datetime import date
from typing import TypeVar

from stockroom.keeping.rules import Purpose
from stockroom.measure.amounts import Amount
from stockroom.planning.amounts import say
from stockroom.planning.choosing.fitness import judge_for_dilution
from stockroom.planning.decisions import Answer, Make, Order, Plan
from stockroom.planning.facts import Bottle, Facts, Line
from stockroom.planning.whys.in_short import folded
from stockroom.planning.whys.not_bottle import bottle_for_need, make_for_need
from stockroom.planning.whys.not_line import ruling, rulings, same_substance
from stockroom.planning.whys.not_make import another_amount, another_day
from stockroom.planning.whys.not_order import (
    of_supplier,
    other_amount,
    other_bottle,
    other_day,
    other_line,
)
from stockroom.planning.whys.not_source import another_line, another_source
from stockroom.planning.whys.of_things import checks_of
from stockroom.planning.whys.planned_shelf import PlannedShelf

Other = Bottle | Line | Make | date | Amount | str
"""What may be asked about in the place of what was chosen; a text is a supplier of an order."""

_Thing = TypeVar("_Thing")


def why_not(facts: Facts, plan: Plan, ref: str, other: Other) -> tuple[str, ...]:
    """Why `other` does not stand in the place it is asked for, or that it would do as well.

    Five lines or fewer. Empty when `ref` is no need, booking, make, order or bottle.
    The plan must reach over every booking from `as_at` on.
    """
    wanted = ref.strip().lower()
    for make in plan.makes:
        if make.id.lower() == wanted:
            return folded(_for_make(PlannedShelf(facts, plan), make, other))
    for order in plan.orders:
        if order.id.lower() == wanted:
            return folded(_for_order(PlannedShelf(facts, plan), order, other))
    needs = [a for a in plan.needs if wanted in (a.ref.lower(), a.booking.number.lower())]
    if needs:
        return folded(_for_needs(PlannedShelf(facts, plan), needs, other))
    planned = PlannedShelf(facts, plan)
    bottle = planned.bottle(wanted)
    return folded(_for_bottle(planned, bottle, other)) if bottle else ()


# -- a need, or the needs of a booking ---------------------------------------------------


def _for_needs(planned: PlannedShelf, needs: list[Answer], other: Other) -> Iterable[str]:
    if isinstance(other, Bottle):
        return _bottle_for_needs(planned, needs, other)
    if isinstance(other, Line):
        own = [answer.ref for answer in needs if answer.line == other.key]
        if own:
            return [f"{other.key} is what {', '.join(own)} asks for"]
        return [*same_substance(planned.facts, needs, other)] or rulings(
            planned.facts, needs, other
        )
    if isinstance(other, Make):
        return _make_for_needs(planned, needs, other)
    if isinstance(other, date):
        return _day_for_needs(planned, needs, other)
    if isinstance(other, Amount):
        return _amount_for_needs(planned, needs, other)
    return [f"{_called(needs)} is no order, and has no supplier"]


def _bottle_for_needs(planned: PlannedShelf, needs: list[Answer], other: Bottle) -> Iterable[str]:
    asked = [answer for answer in needs if answer.line == other.line]
    if asked:
        return [row for answer in asked for row in bottle_for_need(planned, answer, other)]
    makes = _first_only(make for answer in needs for make in planned.makes_under(answer))
    taking = [make for make in makes if planned.ingredient(make, other.line)]
    if taking:
        return [row for make in taking for row in another_source(planned, make, other)]
    diluted = [answer for answer in needs if _could_be_made_from(planned.facts, answer, other)]
    if diluted:
        return [_no_make_of(planned, answer, other) for answer in diluted]
    return _no_place(planned, needs, other)


def _could_be_made_from(facts: Facts, answer: Answer, other: Bottle) -> bool:
    method = facts.methods.get(answer.line)
    return any(other.line in part.lines for part in (method.ingredients if method else ()))


def _no_make_of(planned: PlannedShelf, answer: Answer, other: Bottle) -> str:
    head = f"{other.number} was not used for {answer.ref}, which would be made from it"
    held = ", ".join(draw.bottle for draw in answer.draws if draw.bottle)
    if held:
        return f"{head}: {held} serves it as it stands"
    return f"{head}: {_unfit_for_making(planned, answer, other) or f'it is {answer.outcome}'}"


def _unfit_for_making(planned: PlannedShelf, answer: Answer, other: Bottle) -> str:
    line, product = planned.facts.lines[other.line], planned.facts.lines[answer.line]
    parts = planned.facts.methods[answer.line].ingredients
    per_dm3 = next((part.per_dm3 for part in parts if line.key in part.lines), None)
    judge = judge_for_dilution(line, product, per_dm3)
    shelf = planned.without(answer.ref)
    return shelf.unfit(other.number, answer.booking.on, Purpose.ANY, judge)


def _no_place(planned: PlannedShelf, needs: list[Answer], other: Bottle) -> Iterable[str]:
    """A bottle of another line: barred, an allowed swap, or simply something else."""
    line = planned.facts.lines[other.line]
    ruled = [ruling(planned.facts, answer, line) for answer in needs]
    told = [words for good, words in ruled if good or "refused: barred" in words]
    if told:
        return [f"{other.number} is {line.key}", *dict.fromkeys(told)]
    asked = needs[0].ref if len(needs) == 1 else needs[0].booking.number
    wants = f"wants {needs[0].line}" if len(needs) == 1 else "has no line of that"
    recipe = needs[0].booking.recipe
    return [
        f"{other.number} was not used for {asked}: it is {line.key}, and {asked} {wants}",
        f"nor is anything for {asked} made from it, or the swap written in {recipe} as allowed",
    ]


def _make_for_needs(planned: PlannedShelf, needs: list[Answer], other: Make) -> Iterable[str]:
    asked = [answer for answer in needs if answer.line == other.line]
    if asked:
        return [row for answer in asked for row in make_for_need(planned, answer, other)]
    return [f"{other.id} makes {other.line}, which {_called(needs)} does not ask for"]


def _day_for_needs(planned: PlannedShelf, needs: list[Answer], day: date) -> Iterable[str]:
    makes = _first_only(make for answer in needs for make in planned.makes_under(answer)[:1])
    booking = needs[0].booking
    if len(needs) == 1 and makes:
        return another_day(planned, makes[0], day)
    shift = f"stockroom shift {booking.number} --on {day} moves it"
    return [f"{booking.number} is booked for {booking.on}: the day is yours to choose; {shift}"]


def _amount_for_needs(planned: PlannedShelf, needs: list[Answer], other: Amount) -> Iterable[str]:
    alike = [answer for answer in needs if answer.kind is other.kind]
    if not alike:
        return [f"{_called(needs)} wants {say(needs[0].amount, needs[0].kind)}, no {other.kind}"]
    return [_amount_for_need(planned, answer, other) for answer in alike]


def _amount_for_need(planned: PlannedShelf, answer: Answer, other: Amount) -> str:
    said, apart = say(other.micro, other.kind), say(abs(other.micro - answer.amount), answer.kind)
    how = planned.needs[answer.ref].sum_in_words if answer.ref in planned.needs else ""
    if other.micro == answer.amount:
        return f"{said} is what {answer.ref} gets: {how}"
    side = "too little" if other.micro < answer.amount else "more than is wanted"
    return f"{said} is {apart} {side} for {answer.ref}: {how}"


def _called(needs: list[Answer]) -> str:
    return needs[0].ref if len(needs) == 1 else needs[0].booking.number


# -- a make, an order, a bottle -------------------------------------------------------------


def _for_make(planned: PlannedShelf, make: Make, other: Other) -> Iterable[str]:
    if isinstance(other, date):
        return another_day(planned, make, other)
    if isinstance(other, Amount):
        return another_amount(planned, make, other)
    if isinstance(other, Bottle):
        if other.line != make.line:
            return another_source(planned, make, other)
        served = [a for a in planned.plan.needs if a.make == make.id]
        rows = [row for answer in served for row in bottle_for_need(planned, answer, other)]
        return rows or [f"{make.id} is wanted for other makes: {other.number} is {other.line}"]
    if isinstance(other, Make):
        served = [a for a in planned.plan.needs if a.make == make.id]
        rows = list(_make_for_needs(planned, served, other)) if served else []
        return rows or [f"{other.id} makes {other.line}, and {make.id} {make.line}"]
    if isinstance(other, Line):
        return another_line(planned, make, other)
    return [f"{make.id} is no order, and has no supplier"]


def _for_order(planned: PlannedShelf, order: Order, other: Other) -> Iterable[str]:
    if isinstance(other, date):
        return other_day(planned, order, other)
    if isinstance(other, Amount):
        return other_amount(planned, order, other)
    if isinstance(other, Bottle):
        return other_bottle(planned, order, other)
    if isinstance(other, Line):
        return other_line(planned, order, other)
    if isinstance(other, str):
        return of_supplier(planned, order, other)
    return [f"{other.id} is a make, and {order.id} an order of {order.line}: nobody makes it here"]


def _for_bottle(planned: PlannedShelf, bottle: Bottle, other: Other) -> Iterable[str]:
    """What draws on a bottle, asked about another; or another day for its check."""
    if isinstance(other, date):
        return _check_day(planned, bottle, other)
    needs = [a for a in planned.plan.needs if _draws(planned.promised(a), bottle)]
    makes = [m for m in planned.plan.makes if _draws(m.sources, bottle)]
    if not needs and not makes:
        return [f"nothing in this plan draws on {bottle.number}, so nothing takes its place"]
    rows = [row for answer in needs for row in _for_needs(planned, [answer], other)]
    if isinstance(other, Bottle):
        rows += [row for make in makes for row in another_source(planned, make, other)]
    names = ", ".join([*(a.ref for a in needs), *(m.id for m in makes)])
    return rows or [f"{bottle.number} serves {names}: ask about one of those"]


def _check_day(planned: PlannedShelf, bottle: Bottle, day: date) -> Iterable[str]:
    checks = [check for check in planned.plan.checks if check.subject == bottle.number]
    if not checks:
        return [f"no check of {bottle.number} is planned: {day} or any day is free for one"]
    rows = []
    for check in checks:
        if day < check.not_before:
            why = f"too early: a result before {check.not_before} does not count"
        elif day > check.by:
            why = f"too late: it is wanted by {check.by} for {', '.join(check.bookings)}"
        elif not planned.facts.calendar.is_open(day):
            why = "a closed day"
        else:
            why = f"would do; {check.best} is best, the open day before it is wanted"
        rows.append(f"{check.what} {bottle.number} on {day}: {why}")
    return [*rows, *checks_of(planned.plan, bottle.number)]


def _draws(draws: Iterable[object], bottle: Bottle) -> bool:
    return any(getattr(draw, "bottle", "") == bottle.number for draw in draws)


def _first_only(things: Iterable[_Thing]) -> list[_Thing]:
    row: list[_Thing] = []
    for thing in things:
        if thing not in row:
            row.append(thing)
    return row
