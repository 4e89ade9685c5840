"""The sheets as data: the week and the page for the day, as their commands give them."""

from __future__ import annotations

from datetime import timedelta
from typing import Annotated

from fastapi import APIRouter, Path
from starlette.responses import Response

from stockroom.reports.paper.data import as_data
from stockroom.reports.paper.day import Day as DaySheet
from stockroom.reports.paper.day import day_of
from stockroom.reports.paper.day_text import DAY
from stockroom.reports.paper.week import WEEK, Week, monday_of, week_of
from stockroom.service.closures import why_closed
from stockroom.service.day import day_asked
from stockroom.service.printing import held_against
from stockroom.service.sheets import known_and_planned
from stockroom.web.api.answering import Asking, Data, Day, Question, day, told

router = APIRouter(prefix="/api", tags=["Sheets"])


@router.get("/week", responses=told(Week, "The week by day."))
def week(question: Asking, of: Day = "") -> Response:
    """The week that holds the day `of`, else this one: check, start, make, set out, destroy."""
    monday = monday_of(day(of, "of"), question.today)
    sunday = monday + timedelta(days=6)

    def make() -> Data:
        known, plan = known_and_planned(question.path, as_at=question.today, through=sunday)
        sheet = week_of(known, plan, monday, why_closed(question.path, monday, sunday))
        return dict(as_data(held_against(question.path, WEEK, sheet, monday.isoformat())))

    return question.answer("week", (monday,), make)


@router.get("/day", responses=told(DaySheet, "The next day booked."))
def next_day(question: Asking) -> Response:
    """The page for the next day with a booking: ready or not, what to do when, the strengths."""
    return _day(question, None)


@router.get("/day/{ref}", responses=told(DaySheet, "That day, or that booking."))
def one_day(
    question: Asking,
    ref: Annotated[str, Path(max_length=200, description="A day, as 2027-03-23, or a booking.")],
) -> Response:
    """The page for a day or a booking: ready or not, what to do when, the true strengths."""
    return _day(question, ref)


def _day(question: Question, ref: str | None) -> Response:
    def make() -> Data:
        asked = day_asked(question.path, ref, as_at=question.today)
        sheet = day_of(asked.known, asked.plan, asked.on, asked.booking, asked.closed)
        return dict(as_data(held_against(question.path, DAY, sheet, asked.about)))

    return question.answer("day", (ref,), make)
