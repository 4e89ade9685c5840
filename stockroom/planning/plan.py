"""The plan: explode, net, batch, buy, tell. Same facts, same plan, whatever their order."""

from __future__ import annotations

from dataclasses import replace
from datetime import date
from functools import partial

from stockroom.planning.buying.course import Course, courses
from stockroom.planning.buying.levels import level_queries, levels
from stockroom.planning.buying.money import budgets
from stockroom.planning.buying.on_way import overdue_guesses, overdue_notes, placed_for
from stockroom.planning.buying.orders import coming, orders
from stockroom.planning.buying.usage import drawn_so_far, usage, written_off
from stockroom.planning.buying.year_before import differences, with_year_before
from stockroom.planning.checking.checks import checks
from stockroom.planning.checking.worth import Replanned
from stockroom.planning.decide import answers, lines_to_buy, makes, shorts
from stockroom.planning.decisions import Answer, Order, Outcome, Plan, Use
from stockroom.planning.explode import Need, explode
from stockroom.planning.facts import Drawn, Facts, Firmness
from stockroom.planning.making.batch import Batch
from stockroom.planning.making.make import Made
from stockroom.planning.net import Netted
from stockroom.planning.notes import notes
from stockroom.planning.people import day_loads, watches
from stockroom.planning.settle import needs_of, settled
from stockroom.planning.tell import guesses, past_on
from stockroom.planning.wants import Settled


def plan(facts: Facts, *, past_day: date | None = None) -> Plan:
    """Decide what becomes of every need from `as_at` to the horizon; show the period asked for.

    Bookings before and after that period are planned too, since they draw on
    the same bottles, and then left out: asking about one week gives that
    week's part of the term's plan. Usage covers the whole period, done or to
    come. `past` is told for `past_day`, else for `as_at`.
    """
    return shown(whole_plan(facts, past_day=past_day))


def whole_plan(facts: Facts, *, past_day: date | None = None) -> Plan:
    """The plan with nothing left out yet: what serves bookings outside the period is in it too."""
    needs = needs_of(facts)
    netted, made, runs, buying = _worked_out(facts, needs)
    batches, shelf = made.batches, netted.shelf
    making, told = makes(facts, batches), answers(facts, netted.wants, batches, shelf)
    below = levels(facts, netted.wants, runs, shelf)
    to_check = checks(facts, netted.wants, batches, buying, shelf, partial(_again, netted))
    loads = day_loads(facts, making, to_check)
    watch = watches(needs, _lost(netted))
    used = with_year_before(facts, usage_of_period(facts))
    return Plan(
        as_at=facts.as_at,
        start=facts.start,
        end=facts.end,
        house=facts.house,
        needs=tuple(_with_orders(told, batches, buying, placed_for(netted.wants))),
        makes=tuple(making),
        past=tuple(past_on(facts, netted.wants, past_day or facts.as_at)),
        usage=tuple(used),
        drawn=tuple(drawn_so_far(facts, _in_period(facts))),
        written_off=tuple(written_off(facts)),
        orders=tuple(buying),
        short=tuple(shorts(netted.wants)),
        checks=tuple(to_check),
        levels=tuple(below),
        on_order=tuple(coming(facts, runs, shelf)),
        budgets=tuple(budgets(facts, buying)),
        differences=tuple(differences(used)),
        guesses=(*guesses(facts, netted.wants, shelf), *overdue_guesses(facts)),
        notes=(
            *notes(facts, needs, making, batches, buying, below, shelf, loads, watch),
            *overdue_notes(facts),
            *level_queries(facts),
        ),
        loads=tuple(loads),
        watch=tuple(watch),
        lower_limits=facts.lower_limits,
    )


def _worked_out(
    facts: Facts, needs: tuple[Need, ...], like: Netted | None = None
) -> tuple[Netted, Made, list[Course], list[Order]]:
    netted, made = settled(facts, needs, like)
    runs = courses(facts, made, netted.missed, netted.shelf)
    return netted, made, runs, orders(facts, runs, netted.shelf)


def _again(like: Netted, facts: Facts, needs: tuple[Need, ...]) -> Replanned:
    """Some of the needs once more, with other facts: what is made, ordered and short."""
    netted, made, _, buying = _worked_out(facts, needs, like)
    return Replanned(made.batches, buying, _lost(netted))


def _lost(netted: Netted) -> frozenset[str]:
    """The needs that are short or refused."""
    lost = (Settled.SHORT, Settled.REFUSED)
    return frozenset(want.ref for want in netted.wants if want.settled in lost)


def usage_of_period(facts: Facts) -> list[Use]:
    """What the whole period uses, done or to come; dropped bookings left out."""
    inside = [b for b in facts.bookings if facts.start <= b.on <= facts.end]
    wanted = [b for b in inside if b.firmness is not Firmness.DROPPED]
    return usage(facts, explode(facts, wanted))


def _with_orders(
    row: list[Answer], batches: list[Batch], buying: list[Order], placed: dict[str, str]
) -> list[Answer]:
    """Each need that waits for an order given the order's number: the first it waits for.

    `placed` names the order on its way that serves a need alone.
    """
    # a line has one order at most
    by_line = {order.line: order.id for order in buying}
    bought = {batch.id: lines_to_buy(batch) for batch in batches}
    answers = []
    for answer in row:
        waiting = [answer.line, *bought.get(answer.make, ())]
        if answer.outcome is Outcome.SHORT:
            waiting += answer.waits_for
        orders = [by_line[key] for key in waiting if key in by_line]
        orders = [placed[answer.ref]] if answer.ref in placed else orders
        waits = answer.outcome in (Outcome.BUY, Outcome.SHORT)
        answers.append(replace(answer, order=orders[0]) if waits and orders else answer)
    return answers


def _in_period(facts: Facts) -> list[Drawn]:
    return [draw for draw in facts.drawn if facts.start <= draw.on <= facts.end]


def shown(whole: Plan) -> Plan:
    """Only what serves bookings of the period, and what must be done or ordered for them."""
    needs = tuple(a for a in whole.needs if whole.start <= a.booking.on <= whole.end)
    inside = {answer.booking.number for answer in needs}
    # nothing left out: then what hangs on no booking is not left out either
    if len(needs) == len(whole.needs):
        return whole
    others = {answer.booking.number for answer in whole.needs} - inside
    makes = tuple(m for m in whole.makes if inside & set(m.bookings))
    checks = tuple(c for c in whole.checks if inside & set(c.bookings))
    work = {make.id for make in makes} | {check.subject for check in checks}
    loads = tuple(one for one in whole.loads if work & {*one.makes, *one.checks})
    # nor what is said of their makes, and of days on which only those are made
    others |= {make.id for make in whole.makes} - work
    others |= {one.day.isoformat() for one in whole.loads if one not in loads}
    return replace(
        whole,
        needs=needs,
        makes=makes,
        orders=tuple(o for o in whole.orders if inside & set(o.for_bookings)),
        short=tuple(s for s in whole.short if s.booking in inside),
        checks=checks,
        notes=tuple(n for n in whole.notes if n.subject not in others),
        loads=loads,
        watch=tuple(w for w in whole.watch if w.booking in inside),
    )
