"""The hours of a finished plan: open days, staffed hours, standing, ready in time.

A make carries days and no hours, so each is taken to begin as early as it can: on its
day, at opening, once all it is made from is ready. What is too late even so is too late.
"""

from __future__ import annotations

from collections.abc import Iterator
from datetime import date, timedelta

from stockroom.planning.decisions import Make
from stockroom.planning.facts import Facts, Method
from stockroom.planning.replaying.rules import Broken, Fault
from stockroom.planning.replaying.walk import Asked, Walk

Moment = tuple[date, int]
_DAY = 24 * 60
_SAID = "not done by"
"""How the plan begins to say that something is not done the open day before."""


def faults_of_times(laid: Walk) -> Iterator[Fault]:
    """What is wrong with the days and hours of makes, in the order of the makes."""
    begins: dict[str, Moment] = {}
    for make in laid.plan.makes:
        method = laid.facts.methods.get(make.line)
        if make.line not in laid.facts.lines or method is None:
            continue
        yield from _days(laid.facts, make, method)
        begin = _begin(laid, make.id, begins, frozenset())
        yield from _hours(laid.facts, make, method, begin)
        ready = ready_after(begin, method, laid.facts)
        yield from _ready(laid, make, method, ready)


def _days(facts: Facts, make: Make, method: Method) -> Iterator[Fault]:
    if make.on < facts.as_at:
        yield Fault(Broken.NOT_YET, make.id, f"made on {make.on}, and today is {facts.as_at}")
    finishing = make.finish_on if method.finish_minutes else None
    for day in filter(None, (make.on, finishing)):
        if not facts.calendar.is_open(day):
            yield Fault(Broken.OPEN, make.id, f"hands-on work on {day}, a closed day")
    if bool(method.finish_minutes) is not (make.finish_on is not None):
        yield Fault(Broken.READY, make.id, f"finished on {make.finish_on}")
    if make.ready < (make.finish_on or make.on):
        yield Fault(Broken.READY, make.id, f"ready {make.ready}, before work on it ends")


def _begin(laid: Walk, number: str, known: dict[str, Moment], seen: frozenset[str]) -> Moment:
    """The first moment a make can begin on its day: at opening, or once its sources are ready."""
    make, calendar = laid.makes[number], laid.facts.calendar
    if number not in known:
        begin = (make.on, calendar.open_from)
        for source in make.sources:
            method = laid.facts.methods.get(source.line)
            if source.make in laid.makes and method is not None and source.make not in seen:
                first = _begin(laid, source.make, known, seen | {number})
                begin = max(begin, ready_after(first, method, laid.facts))
        known[number] = begin
    return known[number]


def ready_after(begin: Moment, method: Method, facts: Facts) -> Moment:
    """When a make begun then is ready: hands-on, standing, and the work that finishes it."""
    calendar = facts.calendar
    day, minute = _on(begin, method.minutes + round(method.stands_hours * 60))
    if not method.finish_minutes:
        return day, minute
    opens = calendar.on_or_after(day)
    # it stands through nights and closed days, and whoever finishes it waits for the doors
    minute = max(minute, calendar.open_from) if opens == day else calendar.open_from
    if minute + method.finish_minutes > calendar.open_to:
        opens, minute = calendar.after(opens, 1), calendar.open_from
    return _on((opens, minute), method.finish_minutes)


def _hours(facts: Facts, make: Make, method: Method, begin: Moment) -> Iterator[Fault]:
    longest = facts.calendar.open_to - facts.calendar.open_from
    if begin[0] > make.on:
        yield Fault(Broken.READY, make.id, f"made on {make.on}, its sources are ready {begin[0]}")
    elif max(method.minutes, method.finish_minutes) > longest:
        words = f"{method.minutes} and {method.finish_minutes} min of work in a day of {longest}"
        yield Fault(Broken.HOURS, make.id, words)
    elif begin[1] + method.minutes > facts.calendar.open_to:
        yield Fault(Broken.HOURS, make.id, f"cannot be done in staffed hours on {make.on}")


def _ready(laid: Walk, make: Make, method: Method, ready: Moment) -> Iterator[Fault]:
    if make.ready < ready[0]:
        words = f"said to be ready {make.ready}, and cannot be before {ready[0]}"
        yield Fault(Broken.READY, make.id, words)
    latest = max(ready, (make.ready, 0))
    for giving in laid.givings.get(make.id, []):
        if giving.asked is None:
            if make.ready > giving.on:
                words = f"{make.id} is ready {make.ready}, used {giving.on}"
                yield Fault(Broken.READY, giving.where, words)
            continue
        yield from _for_need(laid, make, method, latest, giving.asked)


def _for_need(
    laid: Walk, make: Make, method: Method, ready: Moment, asked: Asked
) -> Iterator[Fault]:
    own_time = (asked.booking.on, asked.booking.minute)
    said = any(words.startswith(_SAID) for words in laid.answers[asked.ref].reasons)
    if ready > own_time:
        words = f"{make.id} is ready {_said(ready)}, wanted {_said(own_time)}"
        yield Fault(Broken.READY, asked.ref, words)
    elif ready > _day_before(laid.facts, method, asked) and not said:
        words = f"{make.id} is ready {_said(ready)}, the day itself, and nothing says why"
        yield Fault(Broken.DAY_BEFORE, asked.ref, words)


def _day_before(facts: Facts, method: Method, asked: Asked) -> Moment:
    """The moment the house wants it done by: its own time, where it is fresh."""
    on, calendar = asked.booking.on, facts.calendar
    if asked.fresh or not facts.house.finish_day_before:
        return on, asked.booking.minute
    # nobody need be there while it stands
    alone = bool(method.stands_hours) and not method.finish_minutes
    return (on - timedelta(days=1) if alone else calendar.before(on, 1)), calendar.open_to


def _on(moment: Moment, minutes: int) -> Moment:
    days, minute = divmod(moment[1] + minutes, _DAY)
    return moment[0] + timedelta(days=days), minute


def _said(moment: Moment) -> str:
    return f"{moment[0]} {moment[1] // 60:02d}:{moment[1] % 60:02d}"
