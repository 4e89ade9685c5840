"""Whether a bottle's strength and checks will do for a need, and why not."""

from __future__ import annotations

from datetime import date, timedelta

from stockroom.keeping.rules import RuleKind
from stockroom.keeping.verdict import Verdict
from stockroom.measure.periods import add
from stockroom.planning.amounts import say_strength, strong_enough
from stockroom.planning.facts import (
    TOLERANCE,
    Bottle,
    Closeness,
    Line,
    Requirement,
)
from stockroom.planning.shelf import Judge

# a bottle found at exactly the limit will do, whatever the last binary digit says
_SLACK = 1e-9


def judge_for_need(requirement: Requirement, line: Line, on: date) -> Judge:
    """A judge of bottles for a recipe line on a day: freshness, then strength."""

    def judge(bottle: Bottle, judged: Verdict) -> str:
        return too_old(requirement, bottle, on) or wrong_strength(
            requirement, judged.strengths.expected, line
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


def wrong_strength(requirement: Requirement, strength: float | None, line: Line) -> str:
    """Why a strength will not do for a recipe line; "" if it will."""
    limits = bounds(requirement)
    if limits is None:
        return ""
    if strength is None:
        return "its strength is not known"
    low, high = limits
    if low * (1 - _SLACK) <= strength <= high * (1 + _SLACK):
        return ""
    side = "too weak" if strength < low else "too strong"
    edge = say_strength(line, low if strength < low else high)
    return f"{side}: {say_strength(line, strength)} on the day, limit {edge}"


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
