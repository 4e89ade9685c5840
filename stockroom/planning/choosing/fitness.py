"""Whether a bottle's strength and checks will do for a need, and why not."""

from __future__ import annotations

from datetime import date, timedelta

from stockroom.chemistry.uncertainty import exact_enough
from stockroom.keeping.rules import RuleKind
from stockroom.keeping.strength import Strengths
from stockroom.keeping.verdict import Verdict
from stockroom.measure.periods import add
from stockroom.planning.amounts import say_strength, strong_enough
from stockroom.planning.choosing.shelf import Judge
from stockroom.planning.facts import (
    EXACT,
    TOLERANCE,
    Bottle,
    Closeness,
    Line,
    Requirement,
)

# a bottle found at exactly the limit will do, whatever the last binary digit says
_SLACK = 1e-9


def judge_for_need(requirement: Requirement, line: Line, on: date) -> Judge:
    """A judge of bottles for a recipe line on a day: freshness, then strength."""

    def judge(bottle: Bottle, judged: Verdict) -> str:
        strengths = judged.strengths
        return (
            too_old(requirement, bottle, on)
            or wrong_strength(requirement, strengths.expected, line, strengths.usual)
            or not_exact(requirement, strengths, line)
        )

    return judge


def judge_for_dilution(line: Line, product: Line, per_dm3: int | None) -> Judge:
    """A judge of bottles to make `product` from: strong enough, where that matters."""

    def judge(_: Bottle, judged: Verdict) -> str:
        strength = judged.strengths.expected
        # where the recipe gives an amount, strength was weighed up by whoever wrote it
        if per_dm3 is not None or strong_enough(line, strength, product):
            return ""
        held, wanted = say_strength(line, strength), say_strength(product, product.strength)
        return f"too weak: {held}, and {wanted} is to be made"

    return judge


def too_old(requirement: Requirement, bottle: Bottle, on: date) -> str:
    """Why the bottle is not fresh enough for the recipe line on the day; "" if it is."""
    made = bottle.record.made
    # a bought bottle has no day made, and is never fresh
    if requirement.fresh and made != on:
        return "must be made the same morning"
    if requirement.freshest_days is None or made is None:
        return ""
    age = (on - made).days
    if age <= requirement.freshest_days:
        return ""
    return f"{age} d old, and the recipe wants {requirement.freshest_days} d at most"


def bounds(requirement: Requirement) -> tuple[float, float] | None:
    """The lowest and highest strength that will do, in the line's unit; None: any.

    A stated range is taken as it stands. A plain strength gets its closeness or
    stated tolerance on both sides; an exact one may differ by `may_differ` when
    the true strength is printed for the class.
    """
    low, high = requirement.lowest, requirement.highest
    if low is None or high is None or requirement.closeness is Closeness.PRESENT:
        return None
    # whoever wrote a range has thought of the tolerance; it is not widened again
    if high > low:
        return low, high
    part = requirement.may_differ or requirement.tolerance or TOLERANCE[requirement.closeness]
    return (low * (1 - part), high * (1 + part)) if part else (low, high)


def wrong_strength(
    requirement: Requirement, strength: float | None, line: Line, at_most: float | None = None
) -> str:
    """Why a strength will not do for a recipe line; "" if it will.

    `at_most` is what it may really be where `strength` is a lower limit: doubting a
    bottle must not make one that is too strong look right.
    """
    limits = bounds(requirement)
    if limits is None:
        return ""
    if strength is None:
        return "its strength is not known"
    low, high = limits
    if strength < low * (1 - _SLACK):
        told = f"too weak: {say_strength(line, strength)} on the day"
        return f"{told}, limit {say_strength(line, low)}"
    most = strength if at_most is None else at_most
    if most <= high * (1 + _SLACK):
        return ""
    return f"too strong: {say_strength(line, most)} on the day, limit {say_strength(line, high)}"


def exactness(requirement: Requirement) -> float:
    """How closely an exact line wants its strength known, as a fraction."""
    return requirement.tolerance or EXACT


def not_exact(requirement: Requirement, strengths: Strengths, line: Line) -> str:
    """Why what was found is not known well enough for an exact line; "" if it is.

    Held against the result itself, which is what was known so well; whether that much is
    left is for `wrong_strength`. One without an uncertainty is taken at its word.
    """
    found, spread = strengths.found, strengths.uncertainty
    if requirement.closeness is not Closeness.EXACT or not found or not spread:
        return ""
    words = exact_enough(found, spread, exactness(requirement), unit=line.unit)
    return f"found {words}" if words else ""


def found_valid_from(requirement: Requirement, line: Line, on: date) -> date:
    """The earliest day a strength may have been found to count for an exact need on `on`.

    The recipe's own interval where it states one, else the line's recheck rule,
    else the day itself.
    """
    if requirement.found_within_days is not None:
        return on - timedelta(days=requirement.found_within_days)
    for rule in line.rules:
        if rule.kind is RuleKind.RECHECK and rule.lasts is not None:
            return on - (add(on, rule.lasts) - on)
    return on
