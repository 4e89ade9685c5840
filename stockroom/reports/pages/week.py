"""This week as a page: the sheet's own lines, what can be entered beside each, and today first."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from datetime import date, timedelta

from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.reports.pages.parts import Part, Row
from stockroom.reports.pages.week_acts import printed_acts
from stockroom.reports.pages.week_done import Entered, done_rows
from stockroom.reports.pages.week_lines import Lines
from stockroom.reports.pages.week_today import Today
from stockroom.reports.paper.week import Week, monday_of, week_of
from stockroom.reports.paper.week_parts import Class, Rung
from stockroom.reports.words import amount, day_heading, named, raised, weekday_and_day

LATER = 6
"""What is short after the week is named up to so many; the rest the term tells. Our choice."""


@dataclass(frozen=True, slots=True)
class Day:
    """One day: its classes and the lines of its shelves; `told` is said in place of lines."""

    on: date
    name: str
    state: str
    told: str
    minutes: str
    classes: tuple[Class, ...]
    parts: tuple[Part, ...]


@dataclass(frozen=True, slots=True)
class WeekPage:
    """The page. `today` is there only in the week it falls in, above the days that follow.

    `short` is what cannot be had in this week, `later` what cannot after it, of `later_count`.
    `late` is due and its day over. `before`, `this` and `after` are the days other weeks go by.
    """

    title: str
    about: str
    told: str
    monday: date
    before: date
    after: date
    is_this: bool
    short: tuple[Row, ...]
    later: tuple[Row, ...]
    later_count: int
    late: tuple[Part, ...]
    today: Day | None
    days: tuple[Day, ...]
    also: tuple[Row, ...]
    guesses: tuple[Row, ...]
    guess_count: str
    done: tuple[Row, ...]
    done_before: int


def week_page(
    known: Facts,
    plan: Plan,
    monday: date,
    closed: Mapping[date, str],
    entered: tuple[Entered, ...] = (),
) -> WeekPage:
    """The page of the seven days from a Monday; `entered` are the entries of the plan's own day.

    Seen from a weekend, the coming week is this week, and today stands above it.
    """
    sheet = week_of(known, plan, monday, closed)
    is_this = monday == monday_of(None, plan.as_at)
    lines, now = Lines(known, plan), Today(known, plan) if is_this else None
    rungs = _one_by_one(sheet, monday)
    today = _today(known, plan, rungs, closed) if is_this else None
    rest = [rung for rung in rungs if not is_this or rung.on != plan.as_at]
    week = _shorts(plan, monday, monday + timedelta(days=6))
    later = _shorts(plan, monday + timedelta(days=7), date.max)
    done, before = done_rows(known, plan.as_at, entered)
    return WeekPage(
        title=sheet.head.title,
        about=sheet.head.about,
        told=sheet.told,
        monday=monday,
        before=monday - timedelta(days=7),
        after=monday + timedelta(days=7),
        is_this=is_this,
        short=tuple(week),
        later=tuple(later[:LATER]),
        later_count=len(later),
        late=now.late() if now else (),
        today=_day(lines, today, now.parts()) if now and today else None,
        days=tuple(_day(lines, rung) for rung in rest),
        also=tuple(lines.also(sheet.also, without=now.told if now else frozenset())),
        guesses=tuple(_guesses(known, sheet, settled=is_this)),
        guess_count=sheet.guess_count,
        done=done,
        done_before=before,
    )


def _day(lines: Lines, rung: Rung, more: tuple[Part, ...] = ()) -> Day:
    shelves = tuple(Part(shelf.name, lines.shelf(rung.on, shelf)) for shelf in rung.shelves)
    told = "" if more else rung.told
    parts = (*shelves, *more)
    return Day(rung.on, rung.name, rung.state, told, rung.minutes, rung.classes, parts)


def _today(known: Facts, plan: Plan, rungs: list[Rung], closed: Mapping[date, str]) -> Rung | None:
    on = plan.as_at
    bare = None
    if on.weekday() > 4:
        # the sheet is of the coming week by now, and somebody is here all the same
        monday = on - timedelta(days=on.weekday())
        rungs = _one_by_one(week_of(known, plan, monday, closed), monday)
        told = "" if known.calendar.is_open(on) else "Closed."
        bare = Rung(on, "", "", told, "", (), ())
    found = next((rung for rung in rungs if rung.on == on), bare)
    return replace(found, name=f"Today, {day_heading(on)}") if found else None


def _one_by_one(sheet: Week, monday: date) -> list[Rung]:
    """The days of a sheet each by itself, where the sheet says the same of several at once."""
    ends = [*(rung.on for rung in sheet.rungs[1:]), monday + timedelta(days=7)]
    return [day for rung, end in zip(sheet.rungs, ends, strict=True) for day in _split(rung, end)]


def _split(rung: Rung, end: date) -> Iterator[Rung]:
    days = [rung.on + timedelta(days=number) for number in range((end - rung.on).days)]
    if rung.classes or rung.shelves:
        days = days[:1]
    for on in days:
        # the sheet leaves out a weekend on which nothing happens
        if on == rung.on or on.weekday() < 5:
            yield replace(rung, on=on, name=weekday_and_day(on))


def _shorts(plan: Plan, first: date, last: date) -> list[Row]:
    needs = {need.ref: need for need in plan.needs}
    rows = []
    for each in plan.short:
        on = needs[each.ref].booking.on if each.ref in needs else plan.as_at
        if first <= on <= last:
            much = f"{amount(each.amount, each.kind)} {named(each.item, each.strength)}"
            what = f"{much}, for {each.booking} on {weekday_and_day(on)}"
            why = ("why", f"/why?ref={each.ref}")
            rows.append((on, Row(what, more=(raised(each.reason),), mark="short", links=(why,))))
    return [row for _, row in sorted(rows, key=lambda one: one[0])]


def _guesses(known: Facts, sheet: Week, *, settled: bool) -> Iterator[Row]:
    """`settled`: a printed date is asked about above already."""
    bottles = {bottle.number: bottle for bottle in known.bottles}
    for guess in sheet.guesses:
        asks = guess.text.startswith("printed ") and not settled
        acts = printed_acts(bottles.get(guess.about)) if asks else ()
        yield Row(f"{guess.about}: {guess.text}", acts=acts)
