"""The term as a page: what is short, the term at a glance, each solution's life, and each day."""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass
from datetime import date

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.reports.pages.parts import Row
from stockroom.reports.pages.term_choice import Choice, Chosen, Offered
from stockroom.reports.pages.term_days import Days, TermWeek
from stockroom.reports.pages.term_lives import Lives, lives_of
from stockroom.reports.paper.strip import NOTHING_BOOKED, Day, Strip, strip_of
from stockroom.reports.words import amount, counted, day_in_words, named, raised, weekday_and_day


@dataclass(frozen=True, slots=True)
class GlanceWeek:
    """One row of the glance: each day's marks with what they say in words."""

    number: int
    label: str
    monday: date
    days: tuple[tuple[str, str], ...]


@dataclass(frozen=True, slots=True)
class TermPage:
    """The page; `told` is said where nothing is booked, or nothing of what was chosen."""

    title: str
    about: str
    told: str
    choice: Choice
    offered: Offered
    short: tuple[Row, ...]
    weekdays: tuple[str, ...]
    glance: tuple[GlanceWeek, ...]
    key: tuple[tuple[str, str], ...]
    lives: Lives
    weeks: tuple[TermWeek, ...]


def term_page(known: Facts, plan: Plan, closed: Mapping[date, str], choice: Choice) -> TermPage:
    """The term of the facts, as far as the choice leaves it. Raises: UnknownName."""
    chosen = Chosen(known, plan, choice)
    strip = strip_of(known, plan)
    weeks = Days(known, plan, chosen, closed).weeks()
    none = "Nothing booked in the term is of this choice." if strip.told == "" else NOTHING_BOOKED
    return TermPage(
        title=f"The term: {day_in_words(known.start)} to {day_in_words(known.end)}",
        about=_about(plan, chosen, len(weeks)),
        told="" if chosen.bookings else none,
        choice=choice,
        offered=chosen.offered,
        short=tuple(_short(plan, chosen)),
        weekdays=strip.weekdays,
        glance=_glance(strip),
        key=strip.key,
        lives=lives_of(known, plan, chosen),
        weeks=weeks,
    )


def _about(plan: Plan, chosen: Chosen, weeks: int) -> str:
    makes = sum(chosen.make(make) for make in plan.makes)
    short = sum(1 for each in plan.short if _is_shown(each.booking, each.item, chosen))
    told = [f"{counted(len(chosen.bookings), 'booking')} in {counted(weeks, 'week')}"]
    told += [f"{counted(makes, 'make')} still to do"] if makes else []
    told += [f"{short} short"] if short else ["nothing short"]
    return f"{', '.join(told)}."


def _is_shown(booking: str, item: str, chosen: Chosen) -> bool:
    return chosen.booking(booking) and chosen.item(item)


def _short(plan: Plan, chosen: Chosen) -> list[Row]:
    rows = []
    for each in plan.short:
        booking = chosen.bookings.get(each.booking)
        if booking and chosen.item(each.item):
            much = f"{amount(each.amount, each.kind)} {named(each.item, each.strength)}"
            what = f"{much}, for {each.booking} on {weekday_and_day(booking.on)}"
            why = (("why", f"/why?ref={each.ref}"),)
            rows.append(
                (booking.on, Row(what, more=(raised(each.reason),), mark="short", links=why))
            )
    return [row for _, row in sorted(rows, key=lambda one: one[0])]


def _glance(strip: Strip) -> tuple[GlanceWeek, ...]:
    return tuple(
        GlanceWeek(
            week.number,
            week.label,
            week.days[0].on,
            tuple((day.marks, marks_in_words(day)) for day in week.days),
        )
        for week in strip.weeks
    )


def marks_in_words(day: Day) -> str:
    """The marks of a day as they are read out: "2 classes, 1 of them outside staffed hours"."""
    told = []
    if day.classes:
        told.append(counted(day.classes, "class"))
    if day.evenings:
        some = f"{day.evenings} of them " if day.evenings < day.classes else ""
        told.append(f"{some}outside staffed hours")
    if day.starts:
        told.append("something to start or make for a later day")
    if day.closed:
        told.append("closed")
    return ", ".join(told) or "nothing"
