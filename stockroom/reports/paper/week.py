"""The week sheet: days as rungs, on each the shelves of what is to be done, for the bench."""

from __future__ import annotations

from collections.abc import Iterator, Mapping
from dataclasses import dataclass, replace
from datetime import date, timedelta

from stockroom.measure.days import MONTHS
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Facts
from stockroom.reports.paper.changes import Made
from stockroom.reports.paper.day import closed_words
from stockroom.reports.paper.head import Head, head_of
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.paper.week_also import also_of, checks_on, guesses_of
from stockroom.reports.paper.week_classes import Classes
from stockroom.reports.paper.week_makes import Makes
from stockroom.reports.paper.week_parts import (
    CHECK,
    DESTROY,
    MAKE,
    SET_OUT,
    SHELVES,
    START,
    TIDY,
    Also,
    Job,
    Rung,
    Shelf,
    tied,
)
from stockroom.reports.paper.week_text import week_lines, week_since, week_text
from stockroom.reports.words import counted, raised, weekday_and_day

NOTHING = "Nothing to do."
NO_WORK = "Nothing is booked in this week: nothing to make or set out."
TIMES = "A time beside a make is the latest to begin it."


@dataclass(frozen=True, slots=True)
class Week:
    """A week from its Monday: `told` is said in place of rungs where there is nothing at all.

    `guesses` are those its bookings lean on, `guess_count` how many in words. `made` are the
    bottles made here in it, of which the sheet says nothing but what they changed.
    """

    head: Head
    told: str
    rungs: tuple[Rung, ...]
    also: tuple[Also, ...]
    guesses: tuple[Also, ...]
    guess_count: str
    made: tuple[Made, ...] = ()


def monday_of(asked: date | None, as_at: date) -> date:
    """The Monday of the week asked for; else of the week of `as_at`, at a weekend of the next."""
    # who prints on a Saturday looks ahead. Our choice
    meant = asked or (as_at + timedelta(days=2) if as_at.weekday() > 4 else as_at)
    return meant - timedelta(days=meant.weekday())


def week_of(known: Facts, plan: Plan, monday: date, closed: Mapping[date, str]) -> Week:
    """The sheet of the seven days from a Monday; `closed` is why the house is shut, where known.

    A weekend is shown only where something happens on it. Days before `as_at` are over: their
    bookings are named and no work is listed.
    """
    week = _Week(known, plan, closed)
    days = [monday + timedelta(days=number) for number in range(7)]
    rungs = [week.rung(on) for on in days]
    shown = [one for one in rungs if one.on.weekday() < 5 or one.classes or one.shelves]
    guesses = guesses_of(known, plan, monday, days[-1])
    last = shown[-1].on
    open_jobs = any(one.shelves or one.classes for one in shown)
    return Week(
        head=head_of(plan, _title(known, monday, last), _about(shown)),
        told="" if open_jobs else NO_WORK,
        rungs=_together(shown),
        also=also_of(known, plan, monday, days[-1]),
        guesses=guesses,
        guess_count=counted(len(guesses), "guess") if guesses else "nothing guessed",
        made=tuple(_made(known, monday, days[-1])),
    )


def _made(known: Facts, first: date, last: date) -> Iterator[Made]:
    for bottle in known.bottles:
        on = bottle.record.made
        if bottle.made_here and on and first <= on <= last:
            yield Made(bottle.number, on, raised(bottle.line), bottle.meant_for)


def _title(known: Facts, monday: date, last: date) -> str:
    first = known.start - timedelta(days=known.start.weekday())
    number = (monday - first).days // 7 + 1
    name = f"Week {number}: " if number > 0 else "Week of "
    month, to = MONTHS[monday.month - 1], MONTHS[last.month - 1]
    begins = f"{monday.day}" if month == to else f"{monday.day} {month}"
    return f"{name}{begins} to {last.day} {to} {last.year}"


def _about(rungs: list[Rung]) -> str:
    classes = sum(len(rung.classes) for rung in rungs)
    shelves = [shelf for rung in rungs for shelf in rung.shelves]
    jobs = [(shelf.name, job) for shelf in shelves for job in shelf.jobs]
    makes = sum(bool(job.ref) for name, job in jobs if name in (START, MAKE))
    checks = sum(name == CHECK for name, _ in jobs)
    timed = any(job.ref and job.time for name, job in jobs if name == MAKE)
    told = [counted(classes, "booking") if classes else "No bookings"]
    told += [counted(makes, "make")] if makes else []
    told += [counted(checks, "check")] if checks else []
    return f"{', '.join(told)}. {TIMES}" if timed else f"{', '.join(told)}."


def _together(rungs: list[Rung]) -> tuple[Rung, ...]:
    """Days in a row of which the same is said, and nothing else, as one rung."""
    row: list[Rung] = []
    first: list[Rung] = []
    for rung in rungs:
        quiet = rung.told and not rung.classes and not rung.shelves
        if quiet and row and (row[-1].state, row[-1].told) == (rung.state, rung.told):
            row[-1] = replace(row[-1], name=tied(f"{first[-1].name} to {rung.name}"))
        else:
            row.append(rung)
            first.append(rung)
    return tuple(row)


class _Week:
    def __init__(self, known: Facts, plan: Plan, closed: Mapping[date, str]) -> None:
        self.known, self.plan, self.closed = known, plan, closed
        self.classes, self.makes = Classes(known, plan), Makes(known, plan)
        self.minutes = {load.day: load.minutes for load in plan.loads}

    def rung(self, on: date) -> Rung:
        """One day with its classes and the shelves that hold anything."""
        over = on < self.plan.as_at
        is_open = self.known.calendar.is_open(on)
        state = "over" if over else "" if is_open else "closed"
        jobs = {} if over else self._jobs(on)
        shelves = tuple(Shelf(name, tuple(jobs[name])) for name in SHELVES if jobs.get(name))
        classes = tuple(self.classes.heading(booking) for booking in self.classes.on(on))
        minutes = self.minutes.get(on, 0)
        return Rung(
            on=on,
            name=weekday_and_day(on),
            state=state,
            told=self._told(on, state, busy=bool(shelves or classes)),
            minutes=tied(f"{minutes} min hands-on") if minutes and not over else "",
            classes=classes,
            shelves=shelves,
        )

    def _told(self, on: date, state: str, *, busy: bool) -> str:
        if state == "over":
            return "Over."
        if state == "closed":
            return closed_words(self.closed.get(on, ""))
        return "" if busy else NOTHING

    def _jobs(self, on: date) -> dict[str, list[Job]]:
        bookings = self.classes.on(on)
        mixing, destroying = self.classes.never_kept(on)
        return {
            CHECK: checks_on(self.plan, on),
            START: [*self.makes.started(on), *self.classes.for_tomorrow(on)],
            MAKE: [*self.makes.of_day(on), *mixing],
            SET_OUT: [job for booking in bookings for job in self.classes.set_out(booking)],
            DESTROY: destroying,
            TIDY: [
                *(job for booking in bookings for job in self.classes.cleared(booking)),
                *self.makes.left_over(on),
            ],
        }


WEEK = Kind("week", week_text, week_lines, by_cause=week_since)
