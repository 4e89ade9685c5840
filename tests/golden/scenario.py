"""Short questions to a plan, so that a golden test reads like the case it tells."""

from __future__ import annotations

from datetime import date

from stockroom.measure.amounts import PER_UNIT
from stockroom.planning.decisions import Answer, CheckToDo, Make, Order, PastBottle, Plan, Short

FIRST_DAY = date(2027, 1, 4)


def need(plan: Plan, booking: str, line: str) -> Answer:
    """The one need of a booking whose line begins so."""
    found = [a for a in plan.needs if a.booking.number == booking and a.line.startswith(line)]
    assert len(found) == 1, f"{booking} {line}: {len(found)} needs"
    return found[0]


def amount(answer: Answer | Short) -> float:
    """Its amount in g, cm³ or items."""
    return answer.amount / PER_UNIT[answer.kind]


def drawn_from(answer: Answer) -> dict[str, float]:
    """Bottle to amount in g or cm³."""
    return {draw.bottle: draw.amount / PER_UNIT[draw.kind] for draw in answer.draws}


def makes_of(plan: Plan, line: str) -> list[Make]:
    """Every make of a line, by day."""
    return [make for make in plan.makes if make.line == line]


def make_for(plan: Plan, line: str, booking: str) -> Make:
    """The one make of a line that serves a booking."""
    found = [make for make in makes_of(plan, line) if booking in make.bookings]
    assert len(found) == 1, f"{line} for {booking}: {len(found)} makes"
    return found[0]


def sources(make: Make) -> dict[str, float]:
    """Bottle or item to amount in g or cm³."""
    return {s.bottle or s.item: s.amount / PER_UNIT[s.kind] for s in make.sources}


def order(plan: Plan, line: str) -> Order | None:
    """The order of a line, if there is one."""
    return next((o for o in plan.orders if o.line == line), None)


def check(plan: Plan, subject: str) -> CheckToDo:
    """The one check of a bottle or make."""
    found = [c for c in plan.checks if c.subject == subject]
    assert len(found) == 1, f"{subject}: {len(found)} checks"
    return found[0]


def past(plan: Plan, bottle: str) -> PastBottle:
    """What is told of a bottle that is not sound."""
    return next(p for p in plan.past if p.bottle == bottle)


def use(plan: Plan, form: str, item: str, strength: str = "") -> float:
    """The term's use of an item in a form, in g or cm³."""
    found = [
        u
        for u in plan.usage
        if (u.form, u.item) == (form, item) and u.strength.startswith(strength)
    ]
    assert len(found) == 1, f"{form} {item} {strength}: {len(found)} uses"
    return found[0].amount / PER_UNIT[found[0].kind]
