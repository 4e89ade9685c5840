"""The calendar as iCalendar bytes, a plain file to bring in. Source: RFC 5545."""

from __future__ import annotations

import re
from datetime import UTC, date, datetime, time, timedelta
from typing import TYPE_CHECKING

from stockroom.reports.files.calendar import Calendar, Entry
from stockroom.reports.files.calendar_work import BOOKING, DESTROY, Work
from stockroom.reports.sheet import CAUTION, PRACTICE
from stockroom.reports.words import TIED

if TYPE_CHECKING:
    import icalendar

EVENING_BEFORE = timedelta(hours=-6)
"""Before an all-day entry, which begins at midnight: 18:00 the day before. Our choice."""

GONE = "Withdrawn: done or no longer needed."
"""What a withdrawn entry says first: a make done and an order placed leave the plan too."""

# controls a text value may not hold (RFC 5545, 3.1: CONTROL); line ends are left to the library
_CONTROLS = re.compile(r"[\x00-\x08\x0b\x0c\x0e-\x1f\x7f]")


def calendar_bytes(calendar: Calendar) -> bytes:
    """The file: every entry free time, the same for the same plan and day."""
    import icalendar

    found = icalendar.Calendar()
    found.add("prodid", "-//stockroom//calendar//EN")
    found.add("version", "2.0")
    name = f"{calendar.head.house}: prep room"
    found.add("x-wr-calname", _text(f"{PRACTICE} {name}" if calendar.head.practice else name))
    for entry in calendar.entries:
        found.add_component(_event(entry, calendar))
    return bytes(found.to_ical())


def _event(entry: Entry, calendar: Calendar) -> icalendar.Event:
    import icalendar

    work, head = entry.work, calendar.head
    event = icalendar.Event()
    event.add("uid", entry.uid)
    # the day it is told as at, not the moment: the same plan gives the same file
    event.add("dtstamp", datetime.combine(head.as_at, time(), UTC))
    event.add("sequence", entry.sequence)
    begins, ends = _span(entry)
    event.add("dtstart", begins)
    event.add("dtend", ends)
    event.add("summary", _text(_summary(entry, practice=head.practice)))
    event.add("description", _text("\n".join((*_gone(entry), *work.more, "", CAUTION))))
    event.add("status", _status(entry))
    event.add("transp", "TRANSPARENT")
    event.add("categories", [work.kind])
    if not entry.withdrawn and work.kind != BOOKING and _ahead(work, head.as_at):
        event.add_component(_alarm(entry))
    return event


def _gone(entry: Entry) -> tuple[str, ...]:
    return (GONE,) if entry.withdrawn else ()


def _ahead(work: Work, as_at: date) -> bool:
    """Whether its alarm is still to ring: that of a whole day rings the evening before it."""
    return work.on >= as_at if work.at is not None else work.on > as_at


def _span(entry: Entry) -> tuple[date, date]:
    """First and end; the end is the first moment, or the first day, that is no longer part."""
    work = entry.work
    if work.at is None:
        return work.on, work.on + timedelta(days=1)
    # without a zone: the hour on the wall of the house, wherever it stands
    begins = datetime.combine(work.on, time()) + timedelta(minutes=work.at)
    return begins, begins + timedelta(minutes=work.lasts)


def _summary(entry: Entry, *, practice: bool) -> str:
    said = f"withdrawn: {entry.work.what}" if entry.withdrawn else entry.work.what
    return f"{PRACTICE} {said}" if practice else said


def _status(entry: Entry) -> str:
    if entry.withdrawn:
        return "CANCELLED"
    return "TENTATIVE" if entry.work.tentative else "CONFIRMED"


def _alarm(entry: Entry) -> icalendar.Alarm:
    import icalendar

    alarm = icalendar.Alarm()
    alarm.add("action", "DISPLAY")
    alarm.add("description", _text(entry.work.what))
    # what must be destroyed is rung for when its time begins, not the evening before
    alarm.add("trigger", timedelta(0) if entry.work.kind == DESTROY else EVENING_BEFORE)
    return alarm


def _text(words: str) -> str:
    plain = words.replace(TIED, " ").replace("\r\n", "\n").replace("\r", "\n")
    # half of a pair has no UTF-8
    return _CONTROLS.sub("", plain).encode("utf-8", "replace").decode("utf-8")
