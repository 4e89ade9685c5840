"""The plan: explode, net, batch, buy, tell. Same facts, same plan, whatever their order."""

from __future__ import annotations

from dataclasses import replace
from datetime import date

from stockroom.planning.batch import Batch
from stockroom.planning.buy import courses, levels, orders
from stockroom.planning.checks import checks
from stockroom.planning.decide import answers, lines_to_buy, makes, shorts
from stockroom.planning.decisions import Answer, Order, Outcome, Plan, Use
from stockroom.planning.explode import Need, explode, standing
from stockroom.planning.facts import Drawn, Facts, Firmness
from stockroom.planning.make import Made, make_up
from stockroom.planning.net import Netted, net
from stockroom.planning.notes import notes
from stockroom.planning.tell import guesses, past_on
from stockroom.planning.usage import drawn_so_far, usage


def plan(facts: Facts, *, past_day: date | None = None) -> Plan:
    """Decide what becomes of every need from `as_at` to the horizon; show the period asked for.

    Bookings before and after that period are planned too, since they draw on
    the same bottles, and then left out: asking about one week gives that
    week's part of the term's plan. Usage covers the whole period, done or to
    come. `past` is told for `past_day`, else for `as_at`.
    """
    needs = explode(facts, standing(facts.bookings, facts.as_at, facts.horizon or facts.end))
    netted, made = _settled(facts, needs)
    buying = orders(facts, courses(facts, made, netted.missed, netted.shelf), netted.shelf)
    batches, shelf = made.batches, netted.shelf
    making = makes(facts, batches)
    below = levels(facts, netted.wants, shelf)
    whole = Plan(
        as_at=facts.as_at,
        start=facts.start,
        end=facts.end,
        house=facts.house,
        needs=tuple(_with_orders(answers(facts, netted.wants, batches, shelf), batches, buying)),
        makes=tuple(making),
        past=tuple(past_on(facts, netted.wants, past_day or facts.as_at)),
        usage=tuple(usage_of_period(facts)),
        drawn=tuple(drawn_so_far(facts, _in_period(facts))),
        orders=tuple(buying),
        short=tuple(shorts(netted.wants)),
        checks=tuple(checks(facts, netted.wants, batches, buying, shelf)),
        levels=tuple(below),
        guesses=tuple(guesses(facts, netted.wants, shelf)),
        notes=tuple(notes(facts, needs, making, buying, below, shelf)),
        lower_limits=facts.lower_limits,
    )
    return _shown(whole)


def _settled(facts: Facts, needs: tuple[Need, ...]) -> tuple[Netted, Made]:
    """Netted and made up; to the exact need where anything more asks for more than there is."""
    exact: frozenset[str] = frozenset()
    while True:
        netted = net(facts, needs)
        made = make_up(facts, netted.wants, netted.shelf, exact)
        # only the chains that ran dry are made exact: the others keep their round figures
        if made.outgrown <= exact:
            return netted, made
        exact |= made.outgrown


def usage_of_period(facts: Facts) -> list[Use]:
    """What the whole period uses, done or to come; dropped bookings left out."""
    inside = [b for b in facts.bookings if facts.start <= b.on <= facts.end]
    wanted = [b for b in inside if b.firmness is not Firmness.DROPPED]
    return usage(facts, explode(facts, wanted))


def _with_orders(row: list[Answer], batches: list[Batch], buying: list[Order]) -> list[Answer]:
    """Each need that waits for an order given the order's number: the first it waits for."""
    # a line has one order at most
    by_line = {order.line: order.id for order in buying}
    bought = {batch.id: lines_to_buy(batch) for batch in batches}
    answers = []
    for answer in row:
        waiting = [answer.line, *bought.get(answer.make, ())]
        if answer.outcome is Outcome.SHORT:
            waiting += answer.waits_for
        orders = [by_line[key] for key in waiting if key in by_line]
        waits = answer.outcome in (Outcome.BUY, Outcome.SHORT)
        answers.append(replace(answer, order=orders[0]) if waits and orders else answer)
    return answers


def _in_period(facts: Facts) -> list[Drawn]:
    return [draw for draw in facts.drawn if facts.start <= draw.on <= facts.end]


def _shown(whole: Plan) -> Plan:
    """Only what serves bookings of the period, and what must be done or ordered for them."""
    needs = tuple(a for a in whole.needs if whole.start <= a.booking.on <= whole.end)
    shown = {answer.booking.number for answer in needs}
    # nothing left out: then what hangs on no booking is not left out either
    if len(needs) == len(whole.needs):
        return whole
    others = {answer.booking.number for answer in whole.needs} - shown
    return replace(
        whole,
        needs=needs,
        makes=tuple(m for m in whole.makes if shown & set(m.bookings)),
        orders=tuple(o for o in whole.orders if shown & set(o.for_bookings)),
        short=tuple(s for s in whole.short if s.booking in shown),
        checks=tuple(c for c in whole.checks if shown & set(c.bookings)),
        notes=tuple(n for n in whole.notes if n.subject not in others),
    )
