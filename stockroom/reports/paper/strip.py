"""The wall strip: one row a week, for the door of the prep room. No detail."""

from __future__ import annotations

from collections import Counter
from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date, timedelta

from stockroom.planning.decisions import Make, Plan
from stockroom.planning.facts import Booking, Facts, Firmness
from stockroom.reports.paper.head import Head, foot_lines, head_lines, head_of, mark
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.sheet import page
from stockroom.reports.words import WEEKDAYS, counted, day_and_month, day_heading

WEEKEND = 5
"""The weekday a weekend begins on, Monday being 0."""

CLASS, EVENING, CLOSED, START = "#", "*", "/", "o"
KEY = (
    (CLASS, "a class; two marks are two, and more than four are counted: 6×"),
    (EVENING, "outside staffed hours: someone must be here"),
    (START, "something to start or make for a later day"),
    (CLOSED, "closed"),
)
"""The marks of the strip, and what each says."""

MOST = 4
"""Marks of a kind drawn one by one; of more there is a count before one. Our choice."""

NOTHING_BOOKED = "Nothing is booked this term."


@dataclass(frozen=True, slots=True)
class Day:
    """One day: classes, those outside staffed hours among them, makes for later, or closed."""

    on: date
    classes: int = 0
    evenings: int = 0
    starts: int = 0
    closed: bool = False

    @property
    def marks(self) -> str:
        """The day in marks: "##o", "6×#"; "." for an open day with nothing on it."""
        if self.closed and not self.classes:
            return CLOSED + (START if self.starts else "")
        plain = _so_many(CLASS, self.classes - self.evenings) + _so_many(EVENING, self.evenings)
        return (plain + (START if self.starts else "")) or "."


@dataclass(frozen=True, slots=True)
class Week:
    """One row: its number in the term, its Monday, Monday to Friday, and a weekend in use."""

    number: int
    label: str
    days: tuple[Day, ...]
    marks: tuple[str, ...]


@dataclass(frozen=True, slots=True)
class Strip:
    """The whole term; `weekdays` are the columns: Monday to Friday, and a weekend in use.

    `told` says what there is to say of a term with nothing in it, "" else.
    """

    head: Head
    weekdays: tuple[str, ...]
    weeks: tuple[Week, ...]
    told: str = ""
    key: tuple[tuple[str, str], ...] = KEY


def strip_of(known: Facts, plan: Plan) -> Strip:
    """The strip of the plan's term, whole weeks from the Monday it begins in."""
    meant = [b for b in known.bookings if b.firmness is not Firmness.DROPPED]
    meant = [b for b in meant if known.start <= b.on <= known.end]
    days = {booking.number: booking.on for booking in known.bookings}
    starts = Counter(make.on for make in plan.makes if _for_later(make, days))
    # something started on a Saturday is looked for on the wall too
    used = [*(b.on for b in meant), *(on for on in starts if known.start <= on <= known.end)]
    columns = 7 if any(on.weekday() >= WEEKEND for on in used) else WEEKEND
    first = known.start - timedelta(days=known.start.weekday())
    count = (known.end - first).days // 7 + 1
    mondays = [first + timedelta(weeks=number) for number in range(count)]
    weeks = tuple(
        _week(known, meant, starts, number, monday, columns)
        for number, monday in enumerate(mondays, 1)
    )
    about = f"{counted(len(meant), 'booking')} in {counted(count, 'week')}"
    head = head_of(plan, "The term at a glance", about)
    return Strip(head, WEEKDAYS[:columns], weeks, "" if meant else NOTHING_BOOKED)


def _so_many(sign: str, count: int) -> str:
    # a row of ten squares is counted by nobody from the door
    return sign * count if count <= MOST else f"{count}×{sign}"


def _for_later(make: Make, days: Mapping[str, date]) -> bool:
    """Whether nothing is served by it on the day its work starts."""
    return make.on not in {days[number] for number in make.bookings if number in days}


def _week(
    known: Facts,
    meant: list[Booking],
    starts: Counter[date],
    number: int,
    monday: date,
    columns: int,
) -> Week:
    days = []
    for weekday in range(columns):
        on = monday + timedelta(days=weekday)
        classes = [booking for booking in meant if booking.on == on]
        evenings = sum(not _staffed(known, booking) for booking in classes)
        closed = not known.calendar.is_open(on)
        days.append(Day(on, len(classes), evenings, starts[on], closed))
    label = day_and_month(monday)
    return Week(number, label, tuple(days), tuple(d.marks for d in days))


def _staffed(known: Facts, booking: Booking) -> bool:
    ends = booking.minute + booking.lasts_minutes
    within = known.calendar.open_from <= booking.minute and ends <= known.calendar.open_to
    return within and known.calendar.is_open(booking.on)


def strip_text(strip: Strip, width: int) -> str:
    """The strip as text: a row a week, then what the marks say."""
    widest = max((len(m) for week in strip.weeks for m in week.marks), default=1)
    cell = max(widest, 3) + 1
    rows = ["week          " + "".join(name.ljust(cell) for name in strip.weekdays).rstrip()]
    for week in strip.weeks:
        marks = "".join(each.ljust(cell) for each in week.marks)
        front = f"{_changed(strip.head, week)}wk {week.number:>2}  {week.label:<7}"
        rows.append(f"{front}{marks}".rstrip())
    told = [f"  {sign}  {words}" for sign, words in strip.key]
    parts = [head_lines(strip.head, width), strip.told, "\n".join(rows), "\n".join(told)]
    return page([*parts, foot_lines(strip.head, width)])


def strip_lines(strip: Strip) -> dict[str, str]:
    """Each day with its marks."""
    days = [(week, day) for week in strip.weeks for day in week.days]
    return {
        day.on.isoformat(): f"week {week.number}, {day_heading(day.on)}: {day.marks}"
        for week, day in days
    }


def _changed(head: Head, week: Week) -> str:
    return ">" if any(mark(head, day.on.isoformat()) == ">" for day in week.days) else " "


STRIP = Kind("strip", strip_text, strip_lines)
