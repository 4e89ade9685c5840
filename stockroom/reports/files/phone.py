"""Ten lines for a phone, read the evening before: is it ready, and is anything odd?

No table, nothing wider than a small screen: what does not fit is counted and left to the sheet.
"""

from __future__ import annotations

import textwrap
from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date

from stockroom.planning.decisions import Answer, Outcome, Plan
from stockroom.planning.facts import Booking, Facts
from stockroom.planning.people import clock
from stockroom.planning.ready import Readiness, buys_of, readiness
from stockroom.reports.paper.day import bookings_of, instead_of_planned, planned_for
from stockroom.reports.paper.day_notes import amounts_tied, different_of
from stockroom.reports.paper.day_rows import rows_of
from stockroom.reports.paper.day_strengths import (
    DILUTED,
    FOUND,
    LABEL,
    Known,
    differs,
    percent_off,
    strengths_of,
)
from stockroom.reports.sheet import PRACTICE
from stockroom.reports.words import TIED, counted, day_and_month, day_heading, listed

LINES, WIDTH = 10, 38
"""The most lines, and the most characters in one: a small screen, by the trade's own wish."""

MAKES_NAMED = 2
"""Makes still to do that are named; more are counted. Our choice."""


@dataclass(frozen=True, slots=True)
class Phone:
    """The text: its lines, none longer than WIDTH, and how much more stands on the sheet.

    `to_do` of what is left out are things to do, `more` is other news.
    """

    on: date
    booking: str
    ready: bool
    lines: tuple[str, ...]
    to_do: int = 0
    more: int = 0


def phone_of(known: Facts, plan: Plan, on: date, number: str = "") -> Phone:
    """The text for a day, or for the one booking of that number."""
    bookings = bookings_of(known, on, number)
    planned = planned_for(known, plan, bookings)
    answer = readiness(known, plan, tuple(b.number for b in planned), "", on)
    ready = bool(planned) and answer.ready
    verdict = _verdict(known, plan, bookings, planned, answer)
    practice = f"  {PRACTICE}" if plan.house.practice else ""
    top = [*_cut(_what(known, on, bookings), 2), *_cut(f"{verdict}{practice}", 2)]
    told = [(_lines(text), done) for text, done in _news(known, plan, planned, answer)]
    lines, to_do, more = _fitted(top, told, len(answer.to_do) if planned else 0)
    return Phone(on, number, ready, tuple(lines), to_do, more)


def phone_text(phone: Phone) -> str:
    """The lines, as they are sent."""
    return "\n".join(phone.lines)


def _what(known: Facts, on: date, bookings: tuple[Booking, ...]) -> str:
    day = day_heading(on).removesuffix(f" {on.year}")
    shut = not known.calendar.is_open(on)
    if not bookings:
        return f"{day}{', closed' if shut else ''}: nothing booked"
    # before all that may be cut off, since a class on such a day is out of the ordinary
    day += ", closed," if shut else ""
    if len(bookings) > 1:
        return f"{day} {clock(bookings[0].minute)}: {counted(len(bookings), 'booking')}"
    (only,) = bookings
    title = known.recipes[only.recipe, only.version].title
    return f"{day} {clock(only.minute)} {only.number} {title}"


def _verdict(
    known: Facts,
    plan: Plan,
    bookings: tuple[Booking, ...],
    planned: tuple[Booking, ...],
    answer: Readiness,
) -> str:
    if planned:
        return "Ready: YES" if answer.ready else f"Ready: NO, NOT YET: {len(answer.to_do)} to do"
    if not bookings:
        return "Ready: nothing to do"
    return f"Ready: NO, {instead_of_planned(known, plan, bookings[0])}"


# -- what is worth telling, the worst first ---------------------------------------------------


def _news(
    known: Facts, plan: Plan, planned: tuple[Booking, ...], answer: Readiness
) -> Iterator[tuple[str, int]]:
    """Each piece of news, with how many of the things to do it tells."""
    if not planned:
        return
    several = len(planned) > 1
    lacking = [n for n in answer.needs if n.outcome in (Outcome.SHORT, Outcome.REFUSED)]
    for need in lacking:
        whose = f" for {need.booking.number}" if several else ""
        yield f"Missing: {need.item} {need.strength}{whose}", 1
    for words in (*_hours(known, plan, planned, answer), *_strengths_of(known, plan, answer)):
        yield words, 0
    yield from _to_do(plan, answer)
    for words in _other(known, plan, answer.needs):
        yield words, 0
    ready = [n for n in answer.needs if n.outcome is Outcome.HAVE]
    if lacking and ready:
        yield f"Other {len(ready)} ready", 0


def _hours(
    known: Facts, plan: Plan, planned: tuple[Booking, ...], answer: Readiness
) -> Iterator[str]:
    """What has a time: somebody there, what is never kept, what is soaked the day before."""
    for row in rows_of(known, plan, planned, answer):
        if row.key.startswith("here "):
            yield f"{row.what[0].upper()}{row.what[1:]}"
    for watch in plan.watch:
        if watch.booking in {booking.number for booking in planned}:
            mixed, gone = clock(watch.not_before), clock(watch.destroy_by)
            yield f"{watch.booking}: mix from {mixed}, destroyed by {gone}, ticked"


def _to_do(plan: Plan, answer: Readiness) -> Iterator[tuple[str, int]]:
    for check in answer.checks:
        by = day_and_month(check.by)
        yield f"{check.what.capitalize()} {check.subject} by {by}: {check.item}", 1
    for words in buys_of(plan, answer.needs):
        yield f"{words[:1].upper()}{words[1:]}", 1
    makes = answer.makes
    if len(makes) > MAKES_NAMED:
        first, last = day_and_month(makes[0].on), day_and_month(max(make.on for make in makes))
        when = first if first == last else f"{first} to {last}"
        yield f"{len(makes)} makes still to do, {when}", len(makes)
        return
    for make in makes:
        yield f"Make {day_and_month(make.on)}: {make.item} {make.strength}", 1


def _other(known: Facts, plan: Plan, needs: tuple[Answer, ...]) -> Iterator[str]:
    for words in different_of(known, plan, needs, ()):
        # what is missing has been said, and first
        if " goes without " not in words:
            yield words


def _strengths_of(known: Facts, plan: Plan, answer: Readiness) -> Iterator[str]:
    return _strengths(strengths_of(known, plan, answer.needs))


def _strengths(strengths: tuple[Known, ...]) -> Iterator[str]:
    """What is not checked, and what is other than the card; else that nothing is."""
    unchecked = [told.item for told in strengths if not told.today]
    if unchecked:
        yield f"Not checked: {listed(dict.fromkeys(unchecked))}"
    other = [told for told in strengths if differs(told)]
    for told in other:
        yield f"{told.item} {percent_off(told.off or 0.0)}: {told.today} {told.basis}"
    # a card that asks for a range is told what of it there is
    ranged = [told for told in strengths if told.today and told.off is None and told.card]
    for told in ranged:
        yield f"{told.item} {told.today}, {told.basis}"
    rest = [told for told in strengths if told not in ranged]
    if rest and not unchecked and not other:
        yield f"{'Others' if ranged else 'Strengths'} as card{_how_known(rest)}"


def _how_known(strengths: list[Known]) -> str:
    """How it is known that they are the card's: nothing where all were found."""
    if all(told.basis in (FOUND, DILUTED) for told in strengths):
        return ""
    labels = sum(told.basis == LABEL for told in strengths)
    return f"; {labels} by label only" if labels else ", expected"


# -- fitted to the screen ------------------------------------------------------------------------


def _fitted(
    top: list[str], told: list[tuple[list[str], int]], to_do: int
) -> tuple[list[str], int, int]:
    """As much of what is told as fits whole; how many to do, and how much else, is left out."""
    lines, to_tell = list(top), to_do
    for place, (each, done) in enumerate(told):
        left = told[place:]
        # the last one needs no room kept for the line that counts what is left
        kept = 0 if len(left) == 1 else 1
        if len(lines) + len(each) + kept > LINES:
            other = sum(not number for _, number in left)
            return [*lines, _left_words(to_tell, other)], to_tell, other
        lines += each
        to_tell = max(0, to_tell - done)
    return lines, 0, 0


def _left_words(to_do: int, other: int) -> str:
    """What is left out: "and 10 to do, 3 more on the sheet"."""
    if not to_do:
        return f"and {other} more on the sheet"
    return f"and {to_do} to do{f', {other} more' if other else ''} on the sheet"


def _lines(text: str) -> list[str]:
    return _cut(text, 3)


def _cut(text: str, most: int) -> list[str]:
    """A text in at most so many lines; what is cut off ends with "…"."""
    whole = textwrap.wrap(amounts_tied(text), WIDTH, break_on_hyphens=False)
    lines = [line.replace(TIED, " ") for line in whole]
    if len(lines) <= most:
        return lines
    return [*lines[: most - 1], textwrap.shorten(lines[most - 1], WIDTH - 1, placeholder="") + "…"]
