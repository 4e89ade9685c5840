"""The sheets as data: the week and the page for the day, as their commands give them."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Path
from starlette.responses import Response

from stockroom.reports.paper.data import as_data
from stockroom.reports.paper.day import Day as DaySheet
from stockroom.reports.paper.day import day_of
from stockroom.reports.paper.day_text import DAY
from stockroom.reports.paper.week import WEEK, Week, monday_of, week_of
from stockroom.service.day import day_held
from stockroom.service.week import week_held
from stockroom.web.api.answering import Asking, Data, Day, Question, day, told

router = APIRouter(prefix="/api", tags=["Sheets"])


@router.get("/week", responses=told(Week, "The week by day."))
def week(question: Asking, of: Day = "") -> Response:
    """The week that holds the day `of`, else this one: check, start, make, set out, destroy."""
    monday = monday_of(day(of, "of"), question.today)

    def make() -> Data:
        return dict(as_data(week_held(question.path, WEEK, week_of, monday, as_at=question.today)))

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
        held = day_held(question.path, DAY, day_of, ref, as_at=question.today)
        return dict(as_data(held.sheet))

    return question.answer("day", (ref,), make)
