"""Looks of the plan: one that would bring a bottle back, one before a bottle in doubt is used."""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace
from datetime import date

from stockroom.planning.checking.worth import Again, worth_of
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.decisions import CheckToDo, Order, Worth
from stockroom.planning.explode import Need
from stockroom.planning.facts import Facts
from stockroom.planning.making.batch import Batch
from stockroom.planning.tell import parent_set_aside
from stockroom.planning.wants import Want

PLANNED_AGAIN = 4
"""How many looks are priced by planning again; those due later are estimated. Our choice."""


def looks(
    facts: Facts,
    wants: list[Want],
    batches: list[Batch],
    buying: list[Order],
    shelf: Shelf,
    again: Again | None,
) -> list[CheckToDo]:
    """Bottles only a look keeps out of use, where something else is made or bought instead.

    One that would change nothing is not asked for.
    """
    made_in = {id(want): batch for batch in batches for want in batch.wants}
    hit: dict[str, list[Want]] = {}
    for root in wants:
        for want in root.tree():
            for number, _ in want.passed_over:
                if shelf.verdict(number, facts.as_at).look_would_do and shelf.left[number]:
                    hit.setdefault(number, []).append(want)
    found: list[CheckToDo] = []
    # those due first are priced exactly: they are the ones to decide about now
    for number, stuck in sorted(hit.items(), key=lambda each: (_due(each[1], made_in), each[0])):
        planner = again if len(found) < PLANNED_AGAIN else None
        saved = [b for want in stuck for b in [_batch_of(want, made_in)] if b]
        worth = worth_of(facts, number, wants, batches, buying, saved, planner)
        if worth is not None:
            found.append(_look(facts, number, stuck, made_in, worth, buying))
    return found


def _look(
    facts: Facts,
    number: str,
    stuck: list[Want],
    made_in: dict[int, Batch],
    worth: tuple[Worth, list[str]],
    buying: list[Order],
) -> CheckToDo:
    saves, changed = worth
    line = next(b.line for b in facts.bottles if b.number == number)
    by = max(facts.calendar.on_or_before(_due(stuck, made_in)), _today(facts))
    needs = list({want.ref: want.need for want in stuck}.values())
    # an order not needed is one not sent: looked at before its order-by day it saves it all
    named = {order.id: order for order in buying}
    send = [named[order].order_by for order, _ in saves.orders]
    best = max(min([by, *(facts.calendar.on_or_before(day) for day in send)]), _today(facts))
    why = "a good look would bring it back into use" + _changes(changed, saves, named)
    todo = _check(facts, number, line, by, needs, f"{why}{worth_in_words(saves)}")
    # the plan stands without it: nobody is kept waiting for a look
    return replace(todo, best=best, optional=True, worth=saves)


def _changes(changed: list[str], saves: Worth, named: dict[str, Order]) -> str:
    told = [f" and save or change {', '.join(changed)}"] if changed else []
    told += [f" and the order of {named[order].line}" for order, _ in saves.orders]
    return "".join(told)


def worth_in_words(worth: Worth) -> str:
    """What a look saves: ": saves M14, 10 min, and £24.90 of O02"; "" when nothing is counted."""
    told = [*worth.makes]
    if worth.minutes > 0:
        told.append(f"{worth.minutes} min")
    for order, pence in worth.orders:
        told.append(f"£{pence / 100:.2f} of {order}")
    if worth.serves:
        told.append(f"the shortage of {', '.join(worth.serves)}")
    shares = [f"{who} £{pence / 100:.2f}" for who, pence in worth.shares]
    paid = f" ({', '.join(shares)})" if len(shares) > 1 else ""
    saves = "saves about" if worth.estimated else "saves"
    row = [f"{saves} {_listed(told)}{paid}"] if told else []
    # diluting a stock that is there may take a make more than one batch from the solid
    row += [f"takes {-worth.minutes} min more"] if worth.minutes < 0 else []
    return f": {', and '.join(row)}" if row else ""


def _listed(words: list[str]) -> str:
    if len(words) < 3:
        return " and ".join(words)
    return f"{', '.join(words[:-1])}, and {words[-1]}"


def doubts(facts: Facts, wants: list[Want], shelf: Shelf) -> Iterable[CheckToDo]:
    """Bottles the plan draws on that were made from one since set aside: look before use."""
    needs = {want.ref: want.need for want in wants}
    for number, promises in sorted(shelf.promises.items()):
        bottle = shelf.bottle[number]
        doubt = parent_set_aside(facts, bottle) if promises else ""
        if doubt:
            first = min(promise.on for promise in promises)
            by = max(facts.calendar.on_or_before(first), _today(facts))
            served = [needs[p.for_ref] for p in promises if p.for_ref in needs]
            todo = _check(facts, number, bottle.line, by, served, doubt)
            # the open day before, so that there is time to make another
            yield replace(todo, best=max(facts.calendar.before(first, 1), _today(facts)))


def _today(facts: Facts) -> date:
    """What should have been done last week is asked for on the first day somebody is in."""
    return facts.calendar.on_or_after(facts.as_at)


def _due(stuck: list[Want], made_in: dict[int, Batch]) -> date:
    return min(_start(want, made_in) for want in stuck)


def _batch_of(want: Want, made_in: dict[int, Batch]) -> Batch | None:
    return made_in.get(id(want)) or (made_in.get(id(want.under)) if want.under else None)


def _start(want: Want, made_in: dict[int, Batch]) -> date:
    batch = _batch_of(want, made_in)
    return batch.start[0] if batch else want.need.on


def _check(
    facts: Facts, subject: str, line: str, by: date, needs: list[Need], reason: str
) -> CheckToDo:
    return CheckToDo(
        subject=subject,
        item=line,
        what="look",
        not_before=facts.as_at,
        by=by,
        best=by,
        bookings=tuple(dict.fromkeys(need.booking.number for need in needs)),
        reason=reason,
        opens=_today(facts),
    )
