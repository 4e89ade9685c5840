"""The bottles a finished plan draws on: in use, good, strong, fresh and full enough on the day."""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date

from stockroom.chemistry.uncertainty import exact_enough
from stockroom.keeping.rules import Purpose
from stockroom.keeping.strength import Strengths
from stockroom.keeping.verdict import Condition, Verdict
from stockroom.planning.facts import (
    EXACT,
    TOLERANCE,
    Bottle,
    Closeness,
    Form,
    Requirement,
)
from stockroom.planning.replaying.age import judged_on, stood_by
from stockroom.planning.replaying.exact import titrated_in_time
from stockroom.planning.replaying.rules import Broken, Fault
from stockroom.planning.replaying.walk import Asked, Taking, Walk

_SLACK = 1e-9
_LAST_DIGITS = 1e-6
_OUT_OF_USE = frozenset(
    {Condition.GONE, Condition.NOT_FOUND, Condition.SET_ASIDE, Condition.NO_DATE}
)


def faults_of_bottles(laid: Walk) -> Iterator[Fault]:
    """What is wrong with what is taken from bottles, in the order of the days."""
    left = {number: bottle.left for number, bottle in laid.bottles.items()}
    for taking in laid.takings:
        number = taking.bottle.number
        before, left[number] = left[number], left[number] - taking.draw.amount
        if left[number] < 0 or taking.draw.amount < 0:
            words = f"{taking.draw.amount} of {number} taken on {taking.on}, {before} left"
            yield Fault(Broken.BALANCE, taking.where, words)
        yield from _one_taking(laid, taking)


def _one_taking(laid: Walk, taking: Taking) -> Iterator[Fault]:
    bottle, where = taking.bottle, taking.where
    line = laid.facts.lines[bottle.line]
    exact = taking.asked is not None and taking.asked.requirement.closeness is Closeness.EXACT
    judged = judged_on(laid, bottle, taking.on, Purpose.EXACT if exact else Purpose.ANY)
    yield from _usable(bottle, judged, taking.on, where)
    stood = stood_by(laid.facts, bottle)
    if stood and taking.on < stood:
        yield Fault(Broken.STOOD, where, f"{bottle.number} stands until {stood}")
    if line.never_kept:
        yield Fault(Broken.NEVER_KEPT, where, f"{bottle.number} {line.item}: {line.never_kept}")
    expected = None if line.form is Form.SOLID else judged.strengths.expected
    if not _same(expected, taking.draw.strength):
        words = f"{bottle.number} told at {taking.draw.strength}, expected {expected}"
        yield Fault(Broken.TOLD, where, words)
    for asked in needs_of(laid, taking):
        yield from _barred_lineage(laid, bottle, asked, where)
    if taking.asked is not None:
        yield from _for_need(laid, taking, taking.asked, judged.strengths)


def _usable(bottle: Bottle, judged: Verdict, on: date, where: str) -> Iterator[Fault]:
    words = f"{bottle.number} {judged.condition} on {on} ({judged.decided_by})"
    if judged.condition in _OUT_OF_USE:
        yield Fault(Broken.OUT_OF_USE, where, words)
    past = judged.usable_until is not None and judged.usable_until < on
    if judged.condition is Condition.PAST or past:
        yield Fault(Broken.SAFETY if judged.safety else Broken.AGE, where, words)


def _for_need(laid: Walk, taking: Taking, asked: Asked, strengths: Strengths) -> Iterator[Fault]:
    bottle, requirement, where = taking.bottle, asked.requirement, taking.where
    if bottle.line != asked.line.key:
        yield Fault(Broken.KIND, where, f"{bottle.number} holds {bottle.line!r}")
    made = bottle.record.made
    if asked.fresh and made != taking.on:
        yield Fault(Broken.FRESH, where, f"{bottle.number} made {made}, wanted fresh")
    if made and too_old(requirement, made, taking.on):
        yield Fault(Broken.FRESH, where, f"{bottle.number} made {made}, used {taking.on}")
    wrong = wrong_strength(requirement, strengths)
    if wrong:
        yield Fault(Broken.STRENGTH, where, f"{bottle.number} {wrong}")
    if asked.exact:
        yield from _exact(laid, taking, asked, strengths)


def _exact(laid: Walk, taking: Taking, asked: Asked, strengths: Strengths) -> Iterator[Fault]:
    number, found, spread = taking.bottle.number, strengths.found, strengths.uncertainty
    closeness = asked.requirement.tolerance or EXACT
    if found and spread and exact_enough(found, spread, closeness):
        words = f"{number} found {found} ± {spread}: not known so closely"
        yield Fault(Broken.EXACT, taking.where, words)
    stood = stood_by(laid.facts, taking.bottle)
    if not titrated_in_time(laid, asked, number, strengths.found_on, stood):
        words = f"{number} found {strengths.found_on}, and no titration is planned in time"
        yield Fault(Broken.EXACT, taking.where, words)


# -- rules said again, short -----------------------------------------------------------


def limits(requirement: Requirement) -> tuple[float, float] | None:
    """The least and the greatest strength that will do, in the line's unit; None: any."""
    low, high = requirement.lowest, requirement.highest
    if low is None or high is None or requirement.closeness is Closeness.PRESENT:
        return None
    part = requirement.may_differ or requirement.tolerance or TOLERANCE[requirement.closeness]
    # a range was written with its tolerance in it
    return (low, high) if high > low or not part else (low * (1 - part), high * (1 + part))


def wrong_strength(requirement: Requirement, strengths: Strengths) -> str:
    """Why a strength will not do for a recipe line, in words; "" if it will.

    In a plan on lower limits the upper bound is held against the usual strength.
    """
    bounds, expected = limits(requirement), strengths.expected
    if bounds is None:
        return ""
    most = expected if strengths.usual is None else strengths.usual
    if expected is None or most is None:
        return f"of unknown strength, wanted {bounds[0]:g} to {bounds[1]:g}"
    if expected < bounds[0] * (1 - _SLACK) or most > bounds[1] * (1 + _SLACK):
        return f"at {expected:g} to {most:g} on the day, wanted {bounds[0]:g} to {bounds[1]:g}"
    return ""


def too_old(requirement: Requirement, made: date, on: date) -> bool:
    """True when it is older on the day than the recipe allows."""
    freshest = requirement.freshest_days
    return freshest is not None and (on - made).days > freshest


def needs_of(laid: Walk, taking: Taking) -> list[Asked]:
    """Whoever gets some of what is taken, straight or through what is made of it."""
    if taking.asked is not None:
        return [taking.asked]
    return laid.served[taking.make.id] if taking.make is not None else []


def barred_in(laid: Walk, asked: Asked, substance: str) -> str:
    """Why a recipe bars a substance; "" where it does not, or asks for it by name itself."""
    if not asked.recipe.bars:
        return ""
    lines = (laid.facts.lines.get(one.line) for one in asked.recipe.requirements)
    if substance in {line.substance for line in lines if line is not None}:
        return ""
    return next((bar.reason for bar in asked.recipe.bars if bar.substance == substance), "")


def _barred_lineage(laid: Walk, bottle: Bottle, asked: Asked, where: str) -> Iterator[Fault]:
    for number in (bottle.number, *bottle.lineage) if asked.recipe.bars else ():
        inside = laid.bottles.get(number)
        substance = laid.facts.lines[inside.line].substance if inside else ""
        reason = barred_in(laid, asked, substance)
        if reason:
            words = f"{substance} of {number} reaches {asked.ref}: {reason}"
            yield Fault(Broken.BARRED, where, words)


def _same(one: float | None, other: float | None) -> bool:
    if one is None or other is None:
        return one is other
    return abs(one - other) <= _LAST_DIGITS * max(abs(one), abs(other))
