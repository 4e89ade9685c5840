"""The page for the day: is all well, what to do at what time, how strong, what is otherwise.

For whoever takes the class. Four bookings and fewer share one list; more go booking by booking,
with the yes or no of the whole day before them.
"""

from __future__ import annotations

from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Booking, Facts, Firmness, Per
from stockroom.planning.numbers import natural
from stockroom.planning.people import clock
from stockroom.planning.ready import Readiness, readiness
from stockroom.reports.paper.day_class import Row
from stockroom.reports.paper.day_notes import (
    Cover,
    amounts_tied,
    cover_of,
    different_of,
    guessed_of,
    waste_of,
)
from stockroom.reports.paper.day_rows import rows_of
from stockroom.reports.paper.day_strengths import Known, strengths_of
from stockroom.reports.paper.head import Head, head_of
from stockroom.reports.words import counted, day_heading, raised

TOGETHER = 4
"""Bookings that share one list; more go booking by booking. Our choice: they fill a side."""

NOTHING_BOOKED = "nothing booked"


@dataclass(frozen=True, slots=True)
class Standing:
    """One booking of the day in a line; `planned` is "" or what it is instead of planned."""

    booking: str
    minute: int
    at: str
    title: str
    room: str
    groups: str
    planned: str = ""
    verdict: str = ""


@dataclass(frozen=True, slots=True)
class Part:
    """What stands together: a whole day of few bookings, or one booking of many."""

    title: str
    verdict: str
    ready: bool
    to_do: tuple[str, ...]
    rows: tuple[Row, ...]
    strengths: tuple[Known, ...]
    different: tuple[str, ...]
    guessed: tuple[str, ...]
    waste: tuple[str, ...]
    covered: tuple[Cover, ...]


@dataclass(frozen=True, slots=True)
class Day:
    """The page; `single` is the number of the booking it is about, "" for a whole day.

    `verdict` is its first line: YES, or NO, NOT YET with the count, or what there is instead.
    """

    head: Head
    on: date
    single: str
    verdict: str
    ready: bool
    bookings: tuple[Standing, ...]
    parts: tuple[Part, ...]


def bookings_of(known: Facts, on: date, number: str = "") -> tuple[Booking, ...]:
    """The bookings of a day, or the one of that number, in the order of the clock."""
    mine = [b for b in known.bookings if b.on == on and number in ("", b.number)]
    return tuple(sorted(mine, key=lambda b: (b.minute, natural(b.number))))


def planned_for(known: Facts, plan: Plan, bookings: Iterable[Booking]) -> tuple[Booking, ...]:
    """Those of them that the plan answers for: still to come, and neither done nor dropped."""
    return tuple(booking for booking in bookings if not instead_of_planned(known, plan, booking))


def instead_of_planned(known: Facts, plan: Plan, booking: Booking) -> str:
    """What a booking is instead of planned: dropped, over, not planned yet; "" where it is."""
    if booking.firmness in (Firmness.DONE, Firmness.DROPPED):
        return f"{booking.firmness}: not planned"
    if booking.on < plan.as_at:
        return f"over as at {plan.as_at}: not planned"
    recipe = known.recipes[booking.recipe, booking.version]
    answered = any(need.booking.number == booking.number for need in plan.needs)
    return "" if answered or not recipe.requirements else "not planned yet"


def day_of(known: Facts, plan: Plan, on: date, number: str = "", closed: str = "") -> Day:
    """The page of a day, or of the one booking of that number on its day.

    `closed` is why the house is shut that day, where somebody wrote it down.
    """
    bookings = bookings_of(known, on, number)
    planned = planned_for(known, plan, bookings)
    answers = {b.number: _answer(known, plan, (b,), on) for b in planned}
    whole = _answer(known, plan, planned, on)
    standing = tuple(_standing(known, plan, b, answers.get(b.number)) for b in bookings)
    title = day_heading(on)
    if number and standing:
        title = f"{number}, {day_heading(on)}, {standing[0].at}"
    groups = [planned] if len(planned) <= TOGETHER else [(b,) for b in planned]
    parts = tuple(_part(known, plan, group, on) for group in groups if group)
    return Day(
        head=head_of(plan, title, "" if known.calendar.is_open(on) else closed_words(closed)),
        on=on,
        single=number,
        verdict=_verdict(whole, standing, planned),
        ready=bool(planned) and whole.ready,
        bookings=standing,
        parts=parts,
    )


def closed_words(reason: str) -> str:
    """That the house is shut, and why: "Closed: half-term."."""
    return f"Closed: {reason.rstrip('.')}." if reason else "Closed."


def _answer(known: Facts, plan: Plan, bookings: tuple[Booking, ...], on: date) -> Readiness:
    return readiness(known, plan, tuple(b.number for b in bookings), "", on)


def _standing(known: Facts, plan: Plan, booking: Booking, answer: Readiness | None) -> Standing:
    title = known.recipes[booking.recipe, booking.version].title
    pencilled = ", pencilled" if booking.firmness is Firmness.PENCILLED else ""
    return Standing(
        booking=booking.number,
        minute=booking.minute,
        at=clock(booking.minute),
        title=f"{raised(title)}{pencilled}",
        room=booking.room,
        groups=counted(booking.groups, _noun(known, booking)),
        planned=instead_of_planned(known, plan, booking),
        verdict=verdict_words(answer) if answer else "",
    )


def _noun(known: Facts, booking: Booking) -> str:
    """What a booking counts: performances where its recipe is written for them, else groups."""
    wanted = known.recipes[booking.recipe, booking.version].requirements
    performed = any(each.per is Per.PERFORMANCE for each in wanted)
    return "performance" if performed else "group"


def _verdict(whole: Readiness, standing: tuple[Standing, ...], planned: tuple[Booking, ...]) -> str:
    if planned:
        return verdict_words(whole)
    if not standing:
        return NOTHING_BOOKED.capitalize()
    if len(standing) == 1:
        return f"{standing[0].booking} {standing[0].planned}".replace(
            "not planned yet", "Not planned yet"
        )
    return "Not planned: " + "; ".join(f"{each.booking} {each.planned}" for each in standing)


def verdict_words(answer: Readiness) -> str:
    """YES, or NO, NOT YET with the count: NO is the word of every sheet and command."""
    return "YES" if answer.ready else f"NO, NOT YET: {counted(len(answer.to_do), 'thing')} to do"


def _part(known: Facts, plan: Plan, bookings: tuple[Booking, ...], on: date) -> Part:
    answer = _answer(known, plan, bookings, on)
    strengths = strengths_of(known, plan, answer.needs)
    first = bookings[0]
    recipe = known.recipes[first.recipe, first.version]
    title = f"{clock(first.minute)}  {first.number} {recipe.title}, {first.room}".rstrip(", ")
    return Part(
        title=raised(title) if len(bookings) == 1 else "",
        verdict=verdict_words(answer),
        ready=answer.ready,
        to_do=tuple(amounts_tied(each) for each in answer.to_do),
        rows=rows_of(known, plan, bookings, answer),
        strengths=strengths,
        different=different_of(known, plan, answer.needs, strengths),
        guessed=guessed_of(plan, answer.needs, known),
        waste=waste_of(known, bookings),
        covered=cover_of(known, bookings),
    )
