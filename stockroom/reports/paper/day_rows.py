"""What is to be done on the day, at what time: the list down the middle of its page."""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import replace
from itertools import groupby

from stockroom.measure.amounts import Kind
from stockroom.measure.days import format_time
from stockroom.planning.decisions import Make, Plan
from stockroom.planning.facts import Booking, Facts
from stockroom.planning.making.make_card import goes_of
from stockroom.planning.people import clock, longest_stay, must_be_here
from stockroom.planning.ready import Readiness
from stockroom.reports.paper.day_class import BEGIN, DESTROY_FIRST, END, HERE, WORK, Lesson, Row
from stockroom.reports.paper.day_times import TOO_LATE, Times, times_of
from stockroom.reports.words import amount, named, raised
from stockroom.safety.cautions import Step, cautions_about
from stockroom.safety.formed import formed_of


def rows_of(
    known: Facts, plan: Plan, bookings: tuple[Booking, ...], answer: Readiness
) -> tuple[Row, ...]:
    """The list of these bookings, all of one day, in the order of the clock."""
    times = times_of(known, plan, answer.on)
    somebody = _somebody(known, plan, bookings, answer, times)
    rows = [*somebody, *_work_rows(known, bookings, answer, times)]
    for booking in bookings:
        needs = tuple(n for n in answer.needs if n.booking.number == booking.number)
        rows += Lesson(known, plan, booking, needs, times).rows()
    # sorting keeps the order of the bookings where all else is equal
    return tuple(_merged(sorted(rows, key=lambda row: (row.minute, row.step))))


def _merged(rows: list[Row]) -> Iterator[Row]:
    """The same with classes that begin, or end, at one time in one line."""
    for _, group in groupby(rows, key=lambda row: (row.minute, row.step, row.where)):
        same = list(group)
        first = same[0]
        if len(same) == 1 or first.step not in (BEGIN, END):
            yield from same
            continue
        names = ", ".join(row.booking for row in same)
        end = first.step == END
        yield replace(
            first,
            key=f"{'end' if end else 'begin'} {first.at}",
            what=_together("END", same) if end else f"START {names}",
            booking=names,
            cautions=tuple(dict.fromkeys(each for row in same for each in row.cautions)),
        )


def _together(word: str, same: list[Row]) -> str:
    """The line of classes that end at once: what has to be destroyed is said by booking."""
    names = ", ".join(row.booking for row in same)
    first = [row.booking for row in same if DESTROY_FIRST in row.what]
    if not first:
        return f"{word} {names}: clear away"
    return f"{word} {names}: {DESTROY_FIRST} ({', '.join(first)}), then clear away"


# -- made or checked that day -----------------------------------------------------------


def _work_rows(
    known: Facts, bookings: tuple[Booking, ...], answer: Readiness, times: Times
) -> Iterator[Row]:
    if not bookings:
        return
    on = answer.on
    opens = known.calendar.open_from
    for check in answer.checks:
        if check.best == on:
            what = f"{check.what} {check.subject}, {raised(check.item)}: {raised(check.reason)}"
            yield Row(f"check {check.subject}", opens, WORK, format_time(opens), what)
    for make in answer.makes:
        if make.finish_on == on and make.on < on:
            what = f"finish {_made(make)}, begun {make.on}"
            yield Row(f"finish {raised(make.line)}", opens, WORK, format_time(opens), what, make.id)
    begun = {make.id: times.makes.get(make.id, opens) for make in answer.makes if make.on == on}
    for make in sorted((m for m in answer.makes if m.id in begun), key=lambda m: begun[m.id]):
        minute = begun[make.id]
        late = f"; {TOO_LATE}" if make.id in times.too_late else ""
        fresh = " (fresh)" if make.fresh else ""
        yield Row(
            key=f"make {_whom(make)} {raised(make.line)}",
            minute=minute,
            step=WORK,
            at=format_time(minute),
            what=f"begin {_made(make)}{fresh}, {make.minutes} min by hand{late}",
            ref=make.id,
            booking=_whom(make),
            cautions=tuple(raised(each) for each in make.cautions),
        )


def _made(make: Make) -> str:
    return f"{named(make.item, make.strength)}, {amount(make.volume, Kind.VOLUME)}"


def _whom(make: Make) -> str:
    return ", ".join(make.bookings)


def _somebody(
    known: Facts, plan: Plan, bookings: tuple[Booking, ...], answer: Readiness, times: Times
) -> Iterator[Row]:
    """When someone must be there outside staffed hours, stretches that meet put together."""
    kept = {each.booking for each in plan.watch}
    # of the whole day, since whoever takes one of its classes is told who stays longest
    gaps = {
        each.number: must_be_here(
            known, each, set_out=times.set_out[each.number], never_kept=each.number in kept
        )
        for each in known.bookings
        if each.number in times.set_out
    }
    longest = longest_stay(gaps, bookings[0].number) if len(bookings) == 1 else ""
    joined: list[tuple[int, int]] = []
    for first, last in sorted(gap for booking in bookings for gap in gaps[booking.number]):
        if joined and first <= joined[-1][1]:
            joined[-1] = (joined[-1][0], max(joined[-1][1], last))
        else:
            joined.append((first, last))
    things = [goes_of(known.lines[need.line]) for need in answer.needs]
    things += formed_of(things)
    alone = tuple(each.text for each in cautions_about(things, steps=(Step.BEGIN,)))
    for first, last in joined:
        told = f"; {longest}" if longest and last == joined[-1][1] else ""
        what = f"someone must be here from {clock(first)} to {clock(last)}: not staffed{told}"
        yield Row(f"here {clock(first)}", first, HERE, clock(first), what, cautions=alone)
