"""When a make can start so as to be ready: staffed hours, standing, closed days.

A moment is a day and a minute after midnight. Hands-on work fits inside the
staffed hours of one open day; standing runs through nights and closed days.
"""

from __future__ import annotations

from datetime import date, timedelta

from stockroom.measure.workdays import Calendar
from stockroom.planning.facts import House, Method

Moment = tuple[date, int]
DAY_MINUTES = 24 * 60


def later(moment: Moment, minutes: int) -> Moment:
    """The moment so many minutes on."""
    days, minute = divmod(moment[1] + minutes, DAY_MINUTES)
    return moment[0] + timedelta(days=days), minute


def ready_at(start: Moment, method: Method, calendar: Calendar) -> Moment:
    """When a make begun at `start` (an open day, in hours) is ready for use.

    Hands-on, then standing, then, if the method has it, the finishing work at
    the first moment of staffed time long enough for it.
    """
    stood = later(start, method.minutes + round(method.stands_hours * 60))
    if not method.finish_minutes:
        return stood
    day, minute = stood
    day_open = calendar.on_or_after(day)
    # standing ends when it ends, also on a Sunday night; hands wait for the doors
    minute = max(minute, calendar.open_from) if day_open == day else calendar.open_from
    if minute + method.finish_minutes > calendar.open_to:
        day_open, minute = calendar.after(day_open, 1), calendar.open_from
    return later((day_open, minute), method.finish_minutes)


def latest_start(
    deadline: Moment, method: Method, calendar: Calendar, floor: date
) -> Moment | None:
    """The last moment work can start and still be ready by `deadline`; None before `floor`.

    Never later in the day than leaves the hands-on minutes inside staffed hours;
    None, too, for work longer than a staffed day.
    """
    # hands-on work is not left half done overnight
    if method.minutes > calendar.open_to - calendar.open_from:
        return None
    day = calendar.on_or_before(deadline[0])
    # day by day and not by a sum: closures and a second spell of work leave no formula
    while day >= floor:
        if ready_at((day, calendar.open_from), method, calendar) <= deadline:
            return day, _latest_minute(day, deadline, method, calendar)
        day = calendar.before(day, 1)
    return None


def _latest_minute(day: date, deadline: Moment, method: Method, calendar: Calendar) -> int:
    # by halves, since a later start is never ready sooner
    early, late = calendar.open_from, max(calendar.open_from, calendar.open_to - method.minutes)
    while early < late:
        middle = (early + late + 1) // 2
        if ready_at((day, middle), method, calendar) <= deadline:
            early = middle
        else:
            late = middle - 1
    return early


def earliest_ready(from_day: date, method: Method, calendar: Calendar) -> tuple[date, Moment]:
    """The first open day work can start on or after a day, and when it is then ready."""
    day = calendar.on_or_after(from_day)
    return day, ready_at((day, calendar.open_from), method, calendar)


def deadline_for(
    on: date, minute: int, *, fresh: bool, method: Method, calendar: Calendar, house: House
) -> Moment:
    """The moment a make for a booking must be ready.

    Fresh: by the booking's own time that day. Otherwise, where the house says
    so, hands-on by the close of the open day before and standing by the close
    of the calendar day before, so that mornings belong to the fresh ones.
    """
    if fresh or not house.finish_day_before:
        return on, minute
    day_before = on - timedelta(days=1)
    # nobody need be there while it stands, so a Sunday will do for its last day
    if method.stands_hours and not method.finish_minutes:
        return day_before, calendar.open_to
    return calendar.before(on, 1), calendar.open_to


def hours(number: float) -> str:
    """A standing time in words: \"48 h\", or \"40 min\" under an hour."""
    return f"{number:g} h" if number >= 1 else f"{round(number * 60)} min"
