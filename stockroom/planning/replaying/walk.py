"""A finished plan laid out by its days: what is taken from where, given to whom, still to come.

Read from the facts and the decisions alone. What a need asks for is worked out again
here, so that a slip of the planner's own sums is seen.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from dataclasses import dataclass, field
from datetime import date

from stockroom.keeping.record import Record
from stockroom.keeping.rules import Purpose
from stockroom.keeping.strength import Strengths
from stockroom.keeping.verdict import Limit
from stockroom.planning.decisions import Answer, Draw, Make, Outcome, Plan
from stockroom.planning.facts import (
    Booking,
    Bottle,
    Closeness,
    Facts,
    Firmness,
    Form,
    Line,
    Per,
    Recipe,
    Requirement,
)
from stockroom.planning.replaying.rules import Broken, Fault

UNMET = (Outcome.SHORT, Outcome.REFUSED)


@dataclass(frozen=True, slots=True)
class Asked:
    """What a booking asks for by one recipe line, and what the ledger says it had of it.

    `had` is bottle and micro-units, in the order drawn; `missing` what is still to be found.
    """

    ref: str
    booking: Booking
    recipe: Recipe
    requirement: Requirement
    line: Line
    amount: int
    missing: int
    had: tuple[tuple[str, int], ...] = ()

    @property
    def fresh(self) -> bool:
        """True when it must be made the same morning."""
        return self.requirement.fresh or bool(self.line.never_kept)

    @property
    def exact(self) -> bool:
        """True when its strength must have been found: a solid is weighed, and has none."""
        exact = self.requirement.closeness is Closeness.EXACT
        return exact and self.line.form in (Form.SOLUTION, Form.LIQUID)


@dataclass(frozen=True, slots=True)
class Taking:
    """So much taken from a bottle on a day: for a need (`asked`) or for a make."""

    bottle: Bottle
    draw: Draw
    on: date
    where: str
    asked: Asked | None = None
    make: Make | None = None


@dataclass(frozen=True, slots=True)
class Giving:
    """So much given by a make on a day: to a need (`asked`) or to another make."""

    amount: int
    on: date
    where: str
    asked: Asked | None = None
    make: Make | None = None


@dataclass(frozen=True, slots=True)
class ToCome:
    """So much of a line that somebody has still to buy, and the day it is used."""

    line: Line
    amount: int
    on: date
    where: str


@dataclass(slots=True)
class Walk:
    """The plan by its days. `takings` are in the order of the days; `lost` names what is not there.

    `served` has, by make, the needs it serves itself or through other makes; `opened` the
    day each sealed bottle is opened. The last four keep what was already asked of `keeping`:
    limits and strengths by bottle, last good days and strengths of makes by line.
    """

    facts: Facts
    plan: Plan
    asked: dict[str, Asked] = field(default_factory=dict)
    bottles: dict[str, Bottle] = field(default_factory=dict)
    makes: dict[str, Make] = field(default_factory=dict)
    answers: dict[str, Answer] = field(default_factory=dict)
    takings: list[Taking] = field(default_factory=list)
    givings: dict[str, list[Giving]] = field(default_factory=dict)
    to_come: list[ToCome] = field(default_factory=list)
    served: dict[str, list[Asked]] = field(default_factory=dict)
    opened: dict[str, date] = field(default_factory=dict)
    lost: list[Fault] = field(default_factory=list)
    limits: dict[tuple[str, Purpose], tuple[Record, Sequence[Limit]]] = field(default_factory=dict)
    strengths: dict[tuple[str, date], Strengths] = field(default_factory=dict)
    lives: dict[tuple[str, date], date | None] = field(default_factory=dict)
    faded: dict[tuple[str, date, date], Strengths] = field(default_factory=dict)


def walk(facts: Facts, plan: Plan) -> Walk:
    """Lay a plan out by its days."""
    laid = Walk(facts, plan, asked=_asked(facts, plan))
    laid.bottles = {bottle.number: bottle for bottle in facts.bottles}
    laid.makes = {make.id: make for make in plan.makes}
    laid.answers = {answer.ref: answer for answer in plan.needs}
    for answer in plan.needs:
        _lay_answer(laid, answer)
    for make in plan.makes:
        _lay_make(laid, make)
    laid.takings.sort(key=lambda taking: taking.on)
    for taking in laid.takings:
        bottle = taking.bottle
        if not bottle.made_here and bottle.record.opened is None:
            laid.opened.setdefault(bottle.number, taking.on)
    laid.served = {make.id: _served(laid, make.id, frozenset()) for make in plan.makes}
    return laid


def planned_draws(answer: Answer, asked: Asked) -> tuple[Draw, ...]:
    """The draws of a need still to be made: all but those the ledger has."""
    return answer.draws[len(asked.had) :]


def _lay_answer(laid: Walk, answer: Answer) -> None:
    asked = laid.asked.get(answer.ref)
    if asked is None:
        return
    on, draws = asked.booking.on, planned_draws(answer, asked)
    for draw in draws:
        bottle = laid.bottles.get(draw.bottle)
        if bottle is None:
            laid.lost.append(Fault(Broken.NAMED, answer.ref, f"no bottle {draw.bottle!r}"))
        else:
            laid.takings.append(Taking(bottle, draw, on, answer.ref, asked=asked))
    if answer.make and answer.make not in laid.makes:
        laid.lost.append(Fault(Broken.NAMED, answer.ref, f"no make {answer.make!r}"))
    elif answer.make:
        given = Giving(asked.missing, on, answer.ref, asked=asked)
        laid.givings.setdefault(answer.make, []).append(given)
    elif answer.outcome is Outcome.BUY and asked.line.form is not Form.SUNDRY:
        rest = asked.missing - sum(draw.amount for draw in draws)
        laid.to_come.append(ToCome(asked.line, rest, on, answer.ref))


def _lay_make(laid: Walk, make: Make) -> None:
    for draw in make.sources:
        line, bottle = laid.facts.lines.get(draw.line), laid.bottles.get(draw.bottle)
        if line is None or (draw.bottle and bottle is None):
            name = draw.bottle or draw.line
            laid.lost.append(Fault(Broken.NAMED, make.id, f"nothing called {name!r}"))
        elif bottle is not None:
            laid.takings.append(Taking(bottle, draw, make.on, make.id, make=make))
        elif not draw.make:
            laid.to_come.append(ToCome(line, draw.amount, make.on, make.id))
        elif draw.make in laid.makes:
            given = Giving(draw.amount, make.on, make.id, make=make)
            laid.givings.setdefault(draw.make, []).append(given)
        else:
            laid.lost.append(Fault(Broken.NAMED, make.id, f"no make {draw.make!r}"))


def _served(laid: Walk, make: str, seen: frozenset[str]) -> list[Asked]:
    found: dict[str, Asked] = {}
    # a make that is made from itself is a fault, and told as one; here it must only end
    for giving in laid.givings.get(make, []) if make not in seen else ():
        if giving.asked is not None:
            found[giving.asked.ref] = giving.asked
        elif giving.make is not None:
            below = _served(laid, giving.make.id, seen | {make})
            found |= {asked.ref: asked for asked in below}
    return list(found.values())


# -- what the bookings ask for, worked out again ----------------------------------------


def _asked(facts: Facts, plan: Plan) -> dict[str, Asked]:
    last = facts.horizon or facts.end
    standing = (Firmness.FIRM, Firmness.PENCILLED)
    pools = _ledger(facts)
    found: dict[str, Asked] = {}
    for booking in facts.bookings:
        shown = max(plan.start, facts.as_at) <= booking.on <= min(plan.end, last)
        if shown and booking.firmness in standing:
            found |= {asked.ref: asked for asked in _of_booking(facts, booking, pools)}
    return found


def _ledger(facts: Facts) -> dict[tuple[str, str], list[tuple[str, int]]]:
    """Bottle and amount of every draw entered for a booking, by booking and line."""
    pools: dict[tuple[str, str], list[tuple[str, int]]] = {}
    for drawn in facts.drawn:
        if drawn.booking:
            pools.setdefault((drawn.booking, drawn.line), []).append((drawn.bottle, drawn.amount))
    return pools


def _of_booking(
    facts: Facts, booking: Booking, pools: dict[tuple[str, str], list[tuple[str, int]]]
) -> Iterator[Asked]:
    recipe = facts.recipes[booking.recipe, booking.version]
    for one in recipe.requirements:
        line = facts.lines[one.line]
        times = booking.groups if one.per in (Per.GROUP, Per.PERFORMANCE) else 1
        plain = one.amount * times
        spare = booking.spare if one.spare else 0
        # rounded up in whole numbers: a thousandth too little is too little
        amount = -((-plain * (1000 + spare)) // 1000)
        had = _fill(pools.get((booking.number, line.key), []), amount)
        drawn = sum(share for _, share in had)
        missing = 0 if drawn and drawn >= plain else max(0, amount - drawn)
        ref = f"{booking.number}.{one.number}"
        yield Asked(ref, booking, recipe, one, line, amount, missing, tuple(had))


def _fill(pool: list[tuple[str, int]], amount: int) -> list[tuple[str, int]]:
    """What of the draws entered fills this much; the rest waits for the next line of the kind."""
    had = []
    while pool and amount > 0:
        bottle, drawn = pool[0]
        share = min(drawn, amount)
        had.append((bottle, share))
        amount -= share
        pool[:1] = [(bottle, drawn - share)] if drawn > share else []
    return had
