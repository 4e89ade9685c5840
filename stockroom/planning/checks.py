"""Step 7: the titrations and looks the plan leans on, each once, late enough and open.

Exact needs want a strength found inside its interval on the day; a bottle used
past its recheck date wants one before then; a look may bring back a bottle
whose replacement would otherwise be made. Nothing nobody needs is asked for.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import replace
from datetime import date

from stockroom.keeping.rules import Purpose
from stockroom.planning.batch import Batch
from stockroom.planning.decisions import CheckToDo, Order
from stockroom.planning.explode import Need
from stockroom.planning.facts import Closeness, Facts, Line
from stockroom.planning.fitness import found_valid_from
from stockroom.planning.shelf import Shelf
from stockroom.planning.tell import parent_set_aside
from stockroom.planning.timing import ready_at
from stockroom.planning.wants import Settled, Want

_TITRATE, _LOOK = "titrate", "look"


def checks(
    facts: Facts, wants: list[Want], batches: list[Batch], buying: list[Order], shelf: Shelf
) -> list[CheckToDo]:
    """Every check to do, by the day it must be done, then by subject."""
    found = [
        *_exact_from_bottles(facts, wants, shelf),
        *_exact_from_batches(facts, batches),
        *_rechecks(facts, wants, shelf),
        *_looks(facts, wants, batches, buying, shelf),
        *_doubts(facts, wants, shelf),
    ]
    return sorted(found, key=lambda c: (c.by, c.subject, c.what))


def titration_days(
    facts: Facts, line: Line, needs: list[Need], found_on: date | None
) -> list[tuple[date, date, list[Need]]]:
    """The fewest titrations for these exact needs: (not before, by, the needs served).

    A strength found on `found_on` serves what it still covers. Each titration
    is as late as its first need allows, so that it covers as many after it as
    it can.
    """
    row: list[tuple[date, date, list[Need]]] = []
    last = found_on
    for need in sorted(needs, key=lambda n: n.rank[1:]):
        oldest = found_valid_from(need.requirement, line, need.on)
        # the same rule as covering points by the fewest stretches: late, and only when needed
        if last is not None and last >= oldest:
            if row:
                # one already planned serves this need too, if it is not done too early
                first, by, served = row[-1]
                row[-1] = (max(first, oldest), by, [*served, need])
            continue
        row.append((max(oldest, facts.as_at), need.on, [need]))
        last = _best(facts, need.on, row[-1][0])
    return row


def _best(facts: Facts, by: date, not_before: date) -> date:
    """The open day before, if the window holds one; else the day itself."""
    # on the day itself a bad result leaves no time for anything else
    return max(facts.calendar.before(by, 1), not_before)


def _exact_from_bottles(facts: Facts, wants: list[Want], shelf: Shelf) -> Iterable[CheckToDo]:
    by_bottle: dict[str, list[Need]] = {}
    for want in wants:
        if want.settled is Settled.HELD and want.purpose is Purpose.EXACT:
            for promise in want.promises:
                by_bottle.setdefault(promise.bottle, []).append(want.need)
    for number, needs in sorted(by_bottle.items()):
        line = facts.lines[shelf.bottle[number].line]
        found = shelf.verdict(number, facts.as_at).strengths.found_on
        for first, by, served in titration_days(facts, line, needs, found):
            why = f"found {found}" if found else "never found"
            # what has not stood its time would be titrated too soon
            first = max(first, shelf.ready_on(number) or first)
            todo = _check(facts, number, line, _TITRATE, first, by, served, f"{why}; exact")
            yield _the_day_before(facts, todo)


def _exact_from_batches(facts: Facts, batches: list[Batch]) -> Iterable[CheckToDo]:
    for batch in batches:
        needs = [
            want.need
            for want in batch.wants
            if want.under is None and want.need.requirement.closeness is Closeness.EXACT
        ]
        if not needs:
            continue
        ready = ready_at(batch.start, batch.method, facts.calendar)[0]
        # a make titrated when finished has its first strength from then, without being asked
        found = ready if batch.method.titrated else None
        for first, by, served in titration_days(facts, batch.line, needs, found):
            since = f"found {found} when finished" if found else "not titrated when made"
            start, why = max(first, ready), f"{since}; exact"
            todo = _check(facts, batch.id, batch.line, _TITRATE, start, by, served, why)
            yield _the_day_before(facts, todo)


def _rechecks(facts: Facts, wants: list[Want], shelf: Shelf) -> Iterable[CheckToDo]:
    exact = {p.bottle for w in wants if w.purpose is Purpose.EXACT for p in w.promises}
    needs = {want.ref: want.need for want in wants}
    for number, promises in sorted(shelf.promises.items()):
        # its titration is asked for already, and more strictly
        if number in exact:
            continue
        line = facts.lines[shelf.bottle[number].line]
        due = shelf.verdict_planned(number, facts.as_at).recheck_by
        due = due or max((_due(shelf, number, p.on) for p in promises), default=None)
        late = sorted(p.on for p in promises if due and p.on > due)
        if not due or not late:
            continue
        before_use = facts.calendar.on_or_before(late[0])
        # in time if it can be, so that it is never to watch; else before it is used
        by = facts.calendar.on_or_before(due) if due >= facts.as_at else before_use
        served = [needs[p.for_ref] for p in promises if p.on > due and p.for_ref in needs]
        why = f"its recheck {'falls' if due >= facts.as_at else 'fell'} due {due}"
        if by != due and due >= facts.as_at:
            why += ", a closed day"
        yield _check(facts, number, line, _TITRATE, facts.as_at, by, served, why)


def _due(shelf: Shelf, number: str, on: date) -> date:
    return shelf.verdict_planned(number, on).recheck_by or date.max


def _looks(
    facts: Facts, wants: list[Want], batches: list[Batch], buying: list[Order], shelf: Shelf
) -> Iterable[CheckToDo]:
    """Bottles only a look keeps out of use, where something else is made or bought instead."""
    made_in = {id(want): batch for batch in batches for want in batch.wants}
    hit: dict[str, list[Want]] = {}
    for root in wants:
        for want in root.tree():
            for number, _ in want.passed_over:
                if shelf.verdict(number, facts.as_at).look_would_do and shelf.left[number]:
                    hit.setdefault(number, []).append(want)
    for number, stuck in sorted(hit.items()):
        line = facts.lines[shelf.bottle[number].line]
        days = [_start(want, made_in) for want in stuck]
        by = facts.calendar.on_or_before(min(days))
        needs = list({want.ref: want.need for want in stuck}.values())
        saved = {b.id: b for w in stuck for b in [_batch_of(w, made_in)] if b}
        why = "a good look would bring it back into use"
        if saved:
            why += f" and save or change {', '.join(sorted(saved))}"
        behind = {source.line.key for batch in saved.values() for source in batch.sources}
        behind &= {order.line for order in buying}
        if behind:
            why += f", perhaps the order of {', '.join(sorted(behind))} too"
        todo = _check(facts, number, line, _LOOK, facts.as_at, by, needs, why)
        # the plan stands without it: nobody is kept waiting for a look
        yield replace(todo, optional=True)


def _doubts(facts: Facts, wants: list[Want], shelf: Shelf) -> Iterable[CheckToDo]:
    """Bottles the plan draws on that were made from one since set aside: look before use."""
    needs = {want.ref: want.need for want in wants}
    for number, promises in sorted(shelf.promises.items()):
        bottle = shelf.bottle[number]
        doubt = parent_set_aside(facts, bottle) if promises else ""
        if doubt:
            by = facts.calendar.on_or_before(min(promise.on for promise in promises))
            served = [needs[p.for_ref] for p in promises if p.for_ref in needs]
            line = facts.lines[bottle.line]
            yield _check(facts, number, line, _LOOK, facts.as_at, by, served, doubt)


def _batch_of(want: Want, made_in: dict[int, Batch]) -> Batch | None:
    return made_in.get(id(want)) or (made_in.get(id(want.under)) if want.under else None)


def _start(want: Want, made_in: dict[int, Batch]) -> date:
    batch = _batch_of(want, made_in)
    return batch.start[0] if batch else want.need.on


def _check(
    facts: Facts,
    subject: str,
    line: Line,
    what: str,
    first: date,
    by: date,
    needs: list[Need],
    reason: str,
) -> CheckToDo:
    # what should have been done last week is asked for today
    by = max(by, facts.as_at)
    bookings = tuple(dict.fromkeys(need.booking.number for need in needs))
    return CheckToDo(subject, line.key, what, max(first, facts.as_at), by, by, bookings, reason)


def _the_day_before(facts: Facts, todo: CheckToDo) -> CheckToDo:
    """Best done the open day before it is wanted, so that the class slip can be printed."""
    return replace(todo, best=_best(facts, todo.by, todo.not_before))
