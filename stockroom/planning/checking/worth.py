"""What a good look is worth: the plan once more with that bottle in use, and what is then less.

Only the lines that share bottles or ingredients with it are planned again, since the
others cannot tell the difference.
"""

from __future__ import annotations

from collections import Counter
from collections.abc import Callable, Iterable
from dataclasses import dataclass, replace

from stockroom.keeping.record import Check, CheckKind
from stockroom.planning.decisions import Order, Worth
from stockroom.planning.explode import Need
from stockroom.planning.facts import Facts
from stockroom.planning.making.batch import Batch
from stockroom.planning.wants import Settled, Want

MOST_NEEDS = 500
"""More needs than this are not planned again for one look. Our choice."""


@dataclass(frozen=True, slots=True)
class Replanned:
    """Some needs planned once more: what is made, ordered and left short."""

    batches: list[Batch]
    orders: list[Order]
    short: frozenset[str]


Again = Callable[[Facts, tuple[Need, ...]], Replanned]


def worth_of(
    facts: Facts,
    number: str,
    wants: list[Want],
    batches: list[Batch],
    buying: list[Order],
    hangs: list[Batch],
    again: Again | None,
) -> tuple[Worth, list[str]] | None:
    """What a look at a bottle saves, and the makes it saves or changes; None when nothing.

    Without `again`, or with too much to plan, the batches that hang on it are added up.
    """
    family = _family(facts, next(b.line for b in facts.bottles if b.number == number))
    mine = [want for want in wants if want.need.line.key in family]
    if again is None or len(mine) > MOST_NEEDS:
        return _estimate(hangs)
    with_it = again(_looked_at(facts, number), tuple(want.need for want in mine))
    before = [batch for batch in batches if batch.line.key in family]
    # a line of another family may have an order of its own, for its level alone
    orders = [order for order in buying if order.line in family]
    after = [order for order in with_it.orders if order.line in family]
    changed = _changed(before, with_it.batches)
    gone = [batch for batch in changed if not _still_made(batch, with_it.batches)]
    short = {want.ref for want in mine if want.settled in (Settled.SHORT, Settled.REFUSED)}
    less = _less(orders, after)
    worth = Worth(
        makes=tuple(batch.id for batch in gone),
        minutes=sum(map(_minutes, before)) - sum(map(_minutes, with_it.batches)),
        orders=tuple((order.id, pence) for order, pence in less if pence > 0),
        shares=_shares(orders, after),
        serves=tuple(sorted(short - with_it.short)),
    )
    if not (changed or worth.orders or worth.serves):
        return None
    return worth, [batch.id for batch in changed]


def _estimate(hangs: list[Batch]) -> tuple[Worth, list[str]]:
    once = {batch.id: batch for batch in hangs}
    makes = tuple(sorted(once))
    minutes = sum(map(_minutes, once.values()))
    return Worth(makes=makes, minutes=minutes, estimated=True), list(makes)


def _looked_at(facts: Facts, number: str) -> Facts:
    """The facts as if a look at it had been good today."""
    good = Check(facts.as_at, CheckKind.LOOKED, True)
    row = tuple(
        replace(b, record=replace(b.record, checks=(*b.record.checks, good)))
        if b.number == number
        else b
        for b in facts.bottles
    )
    return replace(facts, bottles=row)


def _family(facts: Facts, line: str) -> frozenset[str]:
    """The lines joined to one by what they are made from, however far; itself among them."""
    beside: dict[str, set[str]] = {}
    for method in facts.methods.values():
        for other in (key for each in method.ingredients for key in each.lines):
            beside.setdefault(method.line, set()).add(other)
            beside.setdefault(other, set()).add(method.line)
    family, ahead = {line}, [line]
    while ahead:
        new = beside.get(ahead.pop(), set()) - family
        family |= new
        ahead += sorted(new)
    return frozenset(family)


def _minutes(batch: Batch) -> int:
    return (batch.method.minutes + batch.method.finish_minutes) * batch.vessels


def _changed(before: list[Batch], after: list[Batch]) -> list[Batch]:
    """The batches of before that are not made just so after: other day, size or sources."""
    left = Counter(map(_face, after))
    row = []
    for batch in before:
        if left[_face(batch)]:
            left[_face(batch)] -= 1
        else:
            row.append(batch)
    return row


def _face(batch: Batch) -> tuple[object, ...]:
    sources = sorted((s.line.key, s.bottle, s.amount) for s in batch.sources)
    return batch.line.key, batch.start, batch.volume, _served(batch), tuple(sources)


def _served(batch: Batch) -> tuple[str, ...]:
    return tuple(need.ref for need in batch.needs)


def _still_made(batch: Batch, after: Iterable[Batch]) -> bool:
    """True when something of it is still made for one of those it serves."""
    served = set(_served(batch))
    return any(b.line.key == batch.line.key and served & set(_served(b)) for b in after)


def _less(before: list[Order], after: list[Order]) -> list[tuple[Order, int]]:
    """By how many pence each order would be smaller."""
    costs = {order.line: order.pence for order in after}
    return [(order, order.pence - costs.get(order.line, 0)) for order in before]


def _shares(before: list[Order], after: list[Order]) -> tuple[tuple[str, int], ...]:
    less: Counter[str] = Counter()
    for order in before:
        less.update(dict(order.shares))
    for order in after:
        less.subtract(dict(order.shares))
    return tuple((who, pence) for who, pence in sorted(less.items()) if pence)
