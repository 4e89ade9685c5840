"""What to do when an order should have gone off already, in order of trouble.

Ordered today it may still come in time. Else: a swap the recipe allows, borrowing
what is missing, running without, or the next day the class could have it.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence
from datetime import date

from stockroom.planning.amounts import say
from stockroom.planning.buying.course import Course, Waiting, soonest_arrival, together
from stockroom.planning.buying.on_way import receipts
from stockroom.planning.choosing.shelf import Shelf
from stockroom.planning.decisions import Instead
from stockroom.planning.explode import Need
from stockroom.planning.facts import Facts, Form, Line, Method, Swap
from stockroom.planning.timing import deadline_for, earliest_ready, latest_start

# a class that cannot be held within a term or so is not moved but given up: our choice
_LONGEST_OPEN_DAYS = 60


def ways_round(facts: Facts, course: Course, shelf: Shelf, arrives: date) -> Iterator[Instead]:
    """The ways round a late order of a line that comes on `arrives` when ordered today."""
    missed = [waiting for waiting in course.waiting if waiting.take.start < arrives]
    if not missed:
        yield _in_time(facts, course, arrives)
    by_need: dict[str, list[Waiting]] = {}
    for waiting in missed:
        by_need.setdefault(waiting.take.need.ref, []).append(waiting)
    for ref, parts in by_need.items():
        # a part on its way comes too late as well: the class is helped with all of it or not
        placed = course.late_for.get(ref, [])
        whole = together([*parts, *(part for _, part in placed)])
        numbers = {number for number, _ in placed}
        days = [one.on for one in receipts(facts).get(course.line.key, ()) if one.number in numbers]
        there = max([arrives, *days])
        yield from _for_one(facts, course.line, shelf, whole, there, placed=bool(placed))


def ways_round_waiting(
    facts: Facts, line: Line, shelf: Shelf, late: Sequence[Waiting], arrives: date
) -> Iterator[Instead]:
    """The same for those who wait for an order that was placed, and comes too late for them."""
    for waiting in late:
        yield from _for_one(facts, line, shelf, waiting, arrives, placed=True)


def _in_time(facts: Facts, course: Course, arrives: date) -> Instead:
    first = next((waiting.take for waiting in course.waiting), None)
    comes = f"order today: it comes {arrives}"
    if first is None:
        until = f" until {arrives}" if course.line.level else ""
        return Instead("order today", facts.as_at, f"{comes}; stock is below its level{until}")
    days = facts.calendar.between(arrives, first.start)
    margin = f"{days} open day{'' if days == 1 else 's'} before it is wanted on {first.start}"
    text = f"{comes}, {margin if days else 'the day it is wanted'}"
    return Instead("order today", facts.as_at, text, first.need.booking.number)


def _for_one(
    facts: Facts, line: Line, shelf: Shelf, waiting: Waiting, arrives: date, *, placed: bool = False
) -> Iterator[Instead]:
    need, number = waiting.take.need, waiting.take.need.booking.number
    # what should have been in hand yesterday is looked for today
    by = max(facts.as_at, facts.calendar.on_or_before(waiting.take.start))
    for swap in need.recipe.swaps:
        if swap.line in (need.line.key, line.key):
            much = _enough(facts, waiting, swap, line)
            words = _swapped(facts, shelf, swap, by, placed=placed)
            yield Instead("swap", by, f"take {much}{swap.instead} for {number}{words}", number)
    amount = say(waiting.amount, line.kind)
    yield Instead("borrow", by, f"borrow {amount} of {line.key} by {by} for {number}", number)
    told = max(facts.as_at, facts.calendar.before(need.on, 1))
    without = f"run {number} without {need.line.key}: settle it with who takes the class by {told}"
    yield Instead("run without", told, without, number)
    day = next_day(facts, need, line.key, arrives)
    if day is not None:
        moved = f"hold {number} on {day} at the soonest: it comes {arrives}"
        yield Instead("another day", day, moved, number)


def _enough(facts: Facts, waiting: Waiting, swap: Swap, line: Line) -> str:
    """How much of what is swapped in will do, where the recipe gives a factor."""
    other = facts.lines.get(swap.instead)
    # the factor is of masses: it says nothing of how much of a solution
    if swap.factor and other is not None and line.form is Form.SOLID is other.form:
        return f"{say(round(waiting.amount * swap.factor), line.kind)} of "
    return ""


def _swapped(facts: Facts, shelf: Shelf, swap: Swap, by: date, *, placed: bool) -> str:
    """Whether what is swapped in is here, comes, or must be got; `placed` beside an order sent."""
    other = facts.lines.get(swap.instead)
    words = f" ({swap.note})" if swap.note else ""
    if other is None:
        return f"{words}: allowed, and no line of the stock"
    held = sum(
        shelf.left[bottle.number]
        for bottle in shelf.of_line(other.key)
        if shelf.may_be_used(bottle.number, by)
    )
    if held > 0:
        return f"{words}: {say(held, other.kind)} here, wanted by {by}"
    coming = receipts(facts).get(other.key, [])
    if coming:
        borrowed = f", so borrow it by {by}" if coming[0].on > by else ""
        return f"{words}: none here{borrowed}; {coming[0].number} comes {coming[0].on}"
    comes = soonest_arrival(facts, other)
    # beside an order that was sent off, "ordered today" would be read as of that order
    if placed and other.form is not Form.SUNDRY and comes > by:
        return f"{words}: none here, so borrow it by {by}"
    if other.form is not Form.SUNDRY and comes > by:
        return f"{words}: none here, so borrow it by {by}; ordered today it comes {comes}"
    return f"{words}: none here, get it by {by}"


def next_day(facts: Facts, need: Need, bought: str, arrives: date) -> date | None:
    """The first open day a class could have what is made of a line that comes on a day.

    Never before its own day; None within sixty open days, or when it is not made from it.
    """
    chain = _chain(facts, need.line.key, bought)
    if chain is None:
        return None
    calendar, first = facts.calendar, arrives
    # all but the last are made one after the other, each from when the one before is ready
    for method in reversed(chain[1:]):
        _, ready = earliest_ready(first, method, calendar)
        in_hours = ready[1] + method.minutes <= calendar.open_to
        first = ready[0] if in_hours else calendar.after(ready[0], 1)
    day = calendar.on_or_after(max(first, need.on, facts.as_at))
    for _ in range(_LONGEST_OPEN_DAYS):
        if not chain or _can_be_made(facts, need, chain[0], first, day):
            return day
        day = calendar.after(day, 1)
    return None


def _can_be_made(facts: Facts, need: Need, method: Method, first: date, day: date) -> bool:
    deadline = deadline_for(
        day, need.booking.minute, fresh=need.fresh, method=method,
        calendar=facts.calendar, house=facts.house,
    )  # fmt: skip
    start = latest_start(deadline, method, facts.calendar, first)
    return start is not None and (not need.fresh or start[0] == day)


def _chain(facts: Facts, made: str, bought: str, above: Sequence[str] = ()) -> list[Method] | None:
    """The methods from a line down to the one bought, none when they are the same."""
    if made == bought:
        return []
    method = facts.methods.get(made)
    for ingredient in method.ingredients if method and made not in above else ():
        for key in ingredient.lines:
            below = _chain(facts, key, bought, (*above, made))
            if below is not None and method is not None:
                return [method, *below]
    return None
