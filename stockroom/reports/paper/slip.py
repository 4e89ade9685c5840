"""The class slip: the true strengths for the board, so that a class reckons with the right ones.

Lines that are exact, close or have a tolerance of their own are told. Of rough ones the card's
figure serves a class as well as any; where anything will do there is nothing to tell. Our choice.
"""

from __future__ import annotations

from collections.abc import Iterator
from dataclasses import dataclass
from datetime import date

from stockroom.planning.decisions import Answer, Outcome, Plan
from stockroom.planning.facts import Booking, Closeness, Facts
from stockroom.planning.people import clock
from stockroom.reports.paper.day import bookings_of, instead_of_planned
from stockroom.reports.paper.day_strengths import (
    DILUTED,
    FOUND,
    LABEL,
    UNCHECKED,
    Known,
    requirement_of,
    strengths_of,
)
from stockroom.reports.paper.head import Head, foot_lines, head_lines, head_of, mark
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.sheet import page, wrap
from stockroom.reports.words import day_heading, listed, raised

NOT_CHECKED = "not checked"
NOT_THERE = "not there"
NONE_TOLD = "nothing to reckon with: the card's strengths serve"


@dataclass(frozen=True, slots=True)
class Line:
    """One strength for the board. `today` is a figure, or NOT_CHECKED or NOT_THERE."""

    ref: str
    name: str
    today: str
    how: str


@dataclass(frozen=True, slots=True)
class Slip:
    """One class: its lines, and the names of those left out, for which the card's figure serves.

    `said` stands in place of lines where there are none.
    """

    booking: str
    title: str
    at: str
    room: str
    lines: tuple[Line, ...]
    left_out: tuple[str, ...] = ()
    said: str = ""


@dataclass(frozen=True, slots=True)
class Slips:
    """The slips of a day, or of one booking (`single` its number)."""

    head: Head
    on: date
    day: str
    single: str
    slips: tuple[Slip, ...]


def slip_of(known: Facts, plan: Plan, on: date, number: str = "") -> Slips:
    """The slips of a day, or that of the one booking of that number."""
    bookings = bookings_of(known, on, number)
    slips = tuple(_slip(known, plan, booking) for booking in bookings)
    about = "" if bookings else "nothing booked"
    head = head_of(plan, f"True strengths, {day_heading(on)}", about)
    return Slips(head, on, day_heading(on), number, slips)


def _slip(known: Facts, plan: Plan, booking: Booking) -> Slip:
    title = known.recipes[booking.recipe, booking.version].title
    needs = tuple(need for need in plan.needs if need.booking.number == booking.number)
    matter = tuple(need for need in needs if _matters(known, need))
    lines = tuple(_lines(known, plan, matter))
    rest = [n.item for n in needs if n not in matter and n.closeness == Closeness.ROUGH]
    return Slip(
        booking=booking.number,
        title=raised(title),
        at=clock(booking.minute),
        room=booking.room,
        lines=lines,
        left_out=tuple(dict.fromkeys(rest)),
        said=instead_of_planned(known, plan, booking) or ("" if lines else NONE_TOLD),
    )


def _matters(known: Facts, need: Answer) -> bool:
    wanted = requirement_of(known, need)
    near = wanted.closeness in (Closeness.EXACT, Closeness.CLOSE)
    return bool(known.lines[need.line].strength) and (near or wanted.tolerance is not None)


def _lines(known: Facts, plan: Plan, needs: tuple[Answer, ...]) -> Iterator[Line]:
    for need in needs:
        if need.outcome in (Outcome.SHORT, Outcome.REFUSED):
            yield Line(need.ref, need.item, NOT_THERE, "")
            continue
        told = strengths_of(known, plan, (need,))
        seen = dict.fromkeys((each.today or NOT_CHECKED, how_said(each)) for each in told)
        for today, how in seen or {(NOT_CHECKED, "still to come"): None}:
            yield Line(need.ref, need.item, today, how)


def how_said(told: Known) -> str:
    """How a strength is known, as short as a board has room for."""
    if told.basis == FOUND:
        return f"found {told.how}"
    if told.basis == DILUTED:
        return f"by dilution {told.how}"
    if told.basis == UNCHECKED:
        return told.how
    # never "not found" here: that is said of a bottle nobody can find
    return "expected, by its label" if told.basis == LABEL else "expected"


def slip_text(sheet: Slips, width: int) -> str:
    """The slips as text, a strength a line."""
    parts = [head_lines(sheet.head, width)]
    for slip in sheet.slips:
        where = f", {slip.room}" if slip.room else ""
        lines = [wrap(f"{slip.booking} {slip.title}, {slip.at}{where}", width)]
        lines += [wrap(slip.said, width, indent=2)] if slip.said else []
        for line in slip.lines:
            front = mark(sheet.head, _key(sheet, line))
            lines.append(f"{front} {wrap(line_words(line), width - 2, hang=2)}")
        lines += [wrap(left_words(slip), width, indent=2)] if slip.left_out else []
        parts.append("\n".join(lines))
    return page([*parts, foot_lines(sheet.head, width)])


def line_words(line: Line) -> str:
    """ "potassium permanganate today: 0.0193 mol/dm³, found 20 Nov 2026"."""
    how = f", {line.how}" if line.how else ""
    return f"{line.name} today: {line.today}{how}"


def left_words(slip: Slip) -> str:
    """The lines that are not told, and why."""
    return f"rough, so the card's figure serves: {listed(slip.left_out)}"


def _key(sheet: Slips, line: Line) -> str:
    return line.ref if sheet.single else f"{sheet.on.isoformat()} {line.ref}"


def slip_lines(sheet: Slips) -> dict[str, str]:
    """Each strength of each class, and each class that is not planned."""
    lines = {}
    for slip in sheet.slips:
        if slip.said:
            whose = slip.booking if sheet.single else f"{sheet.on.isoformat()} {slip.booking}"
            lines[whose] = f"{slip.booking} {slip.title}: {slip.said}"
        for line in slip.lines:
            lines[_key(sheet, line)] = f"{slip.booking} {line_words(line)}"
    return lines


def _more(sheet: Slips) -> dict[str, list[str]]:
    return {"left": [left_words(slip) if slip.left_out else "" for slip in sheet.slips]}


SLIP = Kind("slip", slip_text, slip_lines, _more)
