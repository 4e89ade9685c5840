"""The plan half way: who gets what, and the batches, before anything is told of it."""

from __future__ import annotations

from stockroom.planning.explode import Need, explode, standing
from stockroom.planning.facts import Facts
from stockroom.planning.making.make import Made, make_up
from stockroom.planning.net import Netted, net


def needs_of(facts: Facts) -> tuple[Need, ...]:
    """Every need of the bookings that stand, from the plan's day to its horizon."""
    return explode(facts, standing(facts.bookings, facts.as_at, facts.horizon or facts.end))


def settled(
    facts: Facts, needs: tuple[Need, ...], like: Netted | None = None
) -> tuple[Netted, Made]:
    """Netted and made up; to the exact need where anything more asks for more than there is.

    `like` is an earlier netting of much the same facts, to learn from.
    """
    exact: frozenset[str] = frozenset()
    while True:
        like = netted = net(facts, needs, like)
        made = make_up(facts, netted.wants, netted.shelf, exact)
        # only the chains that ran dry are made exact: the others keep their round figures
        if made.outgrown <= exact:
            return netted, made
        exact |= made.outgrown
