"""Near misses: short or refused, late, past when needed, unchecked, set aside, not found."""

from __future__ import annotations

from collections.abc import Sequence
from dataclasses import dataclass

from stockroom.keeping.verdict import Condition
from stockroom.planning.decisions import Outcome, PastBottle, Plan
from stockroom.reports.words import amount, counted, listed, named, raised

SHORT, LATE, PAST = "short or refused", "orders late or overdue", "not good when needed"
CHECK, ASIDE = "checks overdue", "set aside or not found"


@dataclass(frozen=True, slots=True)
class Miss:
    """One kind of near miss, and each case of it in words."""

    what: str
    told: tuple[str, ...]


def misses_of(plan: Plan) -> tuple[Miss, ...]:
    """Every kind that has a case, worst first; no bottle stands under two of them."""
    aside = [b for b in plan.past if b.condition in (Condition.SET_ASIDE, Condition.NOT_FOUND)]
    unchecked = [b for b in plan.past if b.condition is Condition.WATCH]
    rest = [b for b in plan.past if b not in aside and b not in unchecked and b.matters_for]
    rows = (
        (SHORT, _short(plan)),
        (LATE, _late(plan)),
        (PAST, [_bottle(one) for one in rest]),
        (CHECK, [_bottle(one) for one in unchecked]),
        (ASIDE, [_bottle(one) for one in aside]),
    )
    return tuple(Miss(what, tuple(told)) for what, told in rows if told)


def misses_in_words(misses: Sequence[Miss]) -> str:
    """The sentence on near misses: how many of each kind."""
    if not misses:
        return "Nothing is short, late, past when needed, unchecked, set aside or not found."
    counts = {miss.what: len(miss.told) for miss in misses}
    told = [
        (SHORT, counted(counts.get(SHORT, 0), "need") + " short or refused"),
        (LATE, counted(counts.get(LATE, 0), "order") + " late or overdue"),
        (PAST, counted(counts.get(PAST, 0), "bottle") + " not good when needed"),
        (CHECK, counted(counts.get(CHECK, 0), "check") + " overdue"),
        (ASIDE, counted(counts.get(ASIDE, 0), "bottle") + " set aside or not found"),
    ]
    return f"Near misses: {', '.join(words for what, words in told if what in counts)}."


def _short(plan: Plan) -> list[str]:
    refused = [
        f"{each.ref} {named(each.item, each.strength)}: refused, {each.reasons[0]}"
        if each.reasons
        else f"{each.ref} {named(each.item, each.strength)}: refused"
        for each in plan.needs
        if each.outcome is Outcome.REFUSED
    ]
    known = {each.ref for each in plan.needs if each.outcome is Outcome.REFUSED}
    short = [
        f"{one.ref} {named(one.item, one.strength)}: {amount(one.amount, one.kind)} short, "
        f"{one.reason}"
        for one in plan.short
        if one.ref not in known
    ]
    return [*short, *refused]


def _late(plan: Plan) -> list[str]:
    late = [
        f"{order.item}: order by {order.order_by}, late by {counted(order.late, 'open day')}"
        for order in plan.orders
        if order.late > 0
    ]
    overdue = [
        f"{one.number} {one.item}: expected {one.expected}, "
        f"{counted(one.overdue, 'open day')} overdue"
        for one in plan.on_order
        if one.overdue
    ]
    return [*late, *overdue]


def _bottle(one: PastBottle) -> str:
    matters = f"; matters for {listed(one.matters_for)}" if one.matters_for else ""
    return raised(f"{one.bottle} {one.item}, {one.condition.value}: {one.decided_by}{matters}")
