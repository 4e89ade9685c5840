"""The calendar of the term: its entries held against those put out last, and read on a screen.

An entry keeps its identifier while it is about the same work: a batch that is moved, grows or
serves one class more updates what stands in the reader's calendar and adds nothing. What is
no longer planned stays in the file as withdrawn until its day is over.
"""

from __future__ import annotations

import hashlib
import json
import re
from collections.abc import Mapping
from dataclasses import dataclass, replace
from datetime import date
from enum import StrEnum

from stockroom.measure.days import format_time
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.reports.files.calendar_work import COMING, ORDER, Work, work_of
from stockroom.reports.paper.head import Head, foot_lines, head_lines, head_of
from stockroom.reports.sheet import page, section, wrap
from stockroom.reports.words import day_heading

ABOUT = "All-day entries with an alarm the evening before; bookings and destroying by the clock."
NONE = "Nothing is booked and nothing is to be done: no entry."


class State(StrEnum):
    """An entry against the file written last."""

    NEW = "new"
    SAME = "same"
    CHANGED = "changed"
    WITHDRAWN = "withdrawn"


@dataclass(frozen=True, slots=True)
class Entry:
    """One entry: its identifier, how often it has changed, and what it says."""

    uid: str
    sequence: int
    state: State
    work: Work

    @property
    def withdrawn(self) -> bool:
        """True for what is no longer planned."""
        return self.state is State.WITHDRAWN


@dataclass(frozen=True, slots=True)
class Calendar:
    """The entries by day. `over` are those remembered from days before: they are not written."""

    head: Head
    entries: tuple[Entry, ...]
    over: tuple[Entry, ...] = ()


def calendar_of(
    known: Facts, plan: Plan, before: Mapping[str, str] | None = None, number: str = ""
) -> Calendar:
    """The calendar of the plan; `before` is what `calendar_lines` gave for file no. `number`."""
    kept = [each for uid, text in (before or {}).items() if (each := _read(uid, text))]
    works = work_of(known, plan)
    given = _given(works, kept, plan.as_at)
    taken = {each.uid for each in kept}
    entries = []
    for place, work in enumerate(works):
        if place in given:
            entries.append(_again(given[place], work, plan.as_at))
        else:
            uid = _born(plan.house.name, work, taken)
            taken.add(uid)
            entries.append(Entry(uid, 0, State.NEW, work))
    used = {each.uid for each in given.values()}
    left = [each for each in kept if each.uid not in used]
    gone = [_withdrawn(each) for each in left if _stands(each, plan.as_at)]
    over = tuple(each for each in left if not _stands(each, plan.as_at))
    row = sorted((*entries, *gone), key=lambda e: (e.work.on, e.withdrawn, _hour(e.work), e.uid))
    since = f" Held against file {number}." if number else ""
    head = head_of(plan, "The calendar of the term", f"{ABOUT}{since}")
    return Calendar(head, tuple(row), over)


def _hour(work: Work) -> tuple[int, str, str]:
    return -1 if work.at is None else work.at, work.kind, work.what


# -- which entry of the last file it is ---------------------------------------------------


def _given(works: list[Work], kept: list[Entry], as_at: date) -> dict[int, Entry]:
    """For each piece of work, by its place, the entry it was before; each is given once.

    Same bookings before some of them, more of them before fewer, a near day before a far one.
    A day that is over keeps its entries, made or not; only an order or a delivery that is late
    takes its own along.
    """
    rows: dict[tuple[str, str], list[Entry]] = {}
    for each in kept:
        moves = each.work.on >= as_at or each.work.kind in (ORDER, COMING)
        if moves:
            rows.setdefault(each.work.what_it_is, []).append(each)
    pairs = [
        (_likeness(work, each.work), number, each.uid, each)
        for number, work in enumerate(works)
        for each in rows.get(work.what_it_is, ())
        if _meets(work, each.work)
    ]
    given: dict[int, Entry] = {}
    used: set[str] = set()
    for _, number, uid, each in sorted(pairs, key=lambda pair: pair[:3]):
        if number not in given and uid not in used:
            given[number] = each
            used.add(uid)
    return given


def _meets(work: Work, other: Work) -> bool:
    return work.bookings == other.bookings or bool({*work.bookings} & {*other.bookings})


def _likeness(work: Work, other: Work) -> tuple[bool, int, int]:
    shared = {*work.bookings} & {*other.bookings}
    return work.bookings != other.bookings, -len(shared), abs((work.on - other.on).days)


def _stands(left: Entry, as_at: date) -> bool:
    """Whether what is no longer planned still has to be taken out of the reader's calendar.

    An order or a delivery that was late stands on a day that is over, and is withdrawn once.
    """
    waited = left.work.kind in (ORDER, COMING) and not left.withdrawn
    return waited or left.work.on >= as_at


def _again(before: Entry, work: Work, as_at: date) -> Entry:
    late = work.kind in (ORDER, COMING) and work.on == as_at
    if late and before.work.on < as_at and not before.withdrawn:
        # it was told on its day; to move it every morning would hide how long it has waited
        work = replace(work, on=before.work.on)
    if before.work == work and not before.withdrawn:
        return replace(before, state=State.SAME)
    return Entry(before.uid, before.sequence + 1, State.CHANGED, work)


def _withdrawn(before: Entry) -> Entry:
    # what was withdrawn before says nothing new
    more = 0 if before.withdrawn else 1
    return replace(before, sequence=before.sequence + more, state=State.WITHDRAWN)


def _born(house: str, work: Work, taken: set[str]) -> str:
    """An identifier made from what it is: house, kind, thing and its first booking; no day.

    A store has no number of its own, so the name of the house tells stores apart.
    """
    first = min(work.bookings, key=_by_number, default="")
    stem = json.dumps([house, *work.what_it_is, first], ensure_ascii=False)
    for count in range(1, len(taken) + 2):
        digest = hashlib.sha256(f"{stem} {count}".encode("utf-8", "replace")).hexdigest()
        uid = f"{digest[:32]}@stockroom"
        if uid not in taken:
            return uid
    raise AssertionError("more identifiers taken than there are")


def _by_number(booking: str) -> tuple[int, str]:
    digits = re.sub(r"\D", "", booking)
    return int(digits or 0), booking


# -- what is remembered of it ----------------------------------------------------------------


def calendar_lines(calendar: Calendar) -> dict[str, str]:
    """Each entry under its identifier, as text `calendar_of` reads back."""
    return {each.uid: _written(each) for each in (*calendar.entries, *calendar.over)}


def _written(entry: Entry) -> str:
    work = entry.work
    said = {
        "sequence": entry.sequence, "withdrawn": entry.withdrawn, "kind": work.kind,
        "thing": work.thing, "bookings": work.bookings, "on": work.on.isoformat(),
        "what": work.what, "more": work.more, "at": work.at, "lasts": work.lasts,
        "tentative": work.tentative,
    }  # fmt: skip
    return json.dumps(said, ensure_ascii=False)


def _read(uid: str, text: str) -> Entry | None:
    """The entry as it was kept; None for one that cannot be read: it is then entered anew."""
    try:
        said = json.loads(text)
        work = Work(
            said["kind"], said["thing"], tuple(said["bookings"]), date.fromisoformat(said["on"]),
            said["what"], tuple(said["more"]), said["at"], said["lasts"], said["tentative"],
        )  # fmt: skip
        state = State.WITHDRAWN if said["withdrawn"] else State.SAME
        return Entry(uid, int(said["sequence"]), state, work)
    except (ValueError, KeyError, TypeError):
        return None


# -- as text ---------------------------------------------------------------------------------


def calendar_text(calendar: Calendar, width: int) -> str:
    """The entries by day, as a file of them would hold them."""
    days: dict[date, list[str]] = {}
    for each in calendar.entries:
        days.setdefault(each.work.on, []).append(wrap(_said(each), width, indent=2, hang=6))
    parts = [section(day_heading(on), lines) for on, lines in sorted(days.items())]
    told = counts(calendar) if calendar.entries else NONE
    return page([head_lines(calendar.head, width), told, *parts, foot_lines(calendar.head, width)])


def counts(calendar: Calendar) -> str:
    """How many entries are planned, and how they stand to the file before; the others apart.

    "88 entries: 6 new, 71 same, 11 changed; 4 withdrawn; 16 over, left out". Over are those
    of files before whose day has passed: they stay in the reader's calendar as they were.
    """
    planned = [each for each in calendar.entries if not each.withdrawn]
    told = [(state, sum(each.state is state for each in planned)) for state in State]
    parts = ", ".join(f"{count} {state}" for state, count in told if count)
    many = "1 entry" if len(planned) == 1 else f"{len(planned)} entries"
    gone, over = len(calendar.entries) - len(planned), len(calendar.over)
    rest = [f"{gone} withdrawn" if gone else "", f"{over} over, left out" if over else ""]
    said = f"{many}: {parts}" if planned else "no entry"
    return "; ".join(each for each in (said, *rest) if each)


def _said(entry: Entry) -> str:
    work = entry.work
    mark = "" if entry.state in (State.SAME, State.NEW) else f"[{entry.state}] "
    hours = f"{span(work)}  " if work.at is not None else ""
    tentative = " (pencilled)" if work.tentative else ""
    return f"{mark}{hours}{work.what}{tentative}"


def span(work: Work) -> str:
    """The hours of an entry that has them: "14:00 to 15:40"."""
    begins = work.at or 0
    return f"{format_time(begins)} to {format_time((begins + work.lasts) % 1440)}"
