"""This week: what to look at, make, titrate, set out and order, and each ticked off as done."""

from __future__ import annotations

from datetime import timedelta

from fastapi import APIRouter
from starlette.responses import Response

from stockroom.reports.paper.week import monday_of, week_of
from stockroom.service.closures import why_closed
from stockroom.service.sheets import known_and_planned
from stockroom.service.typed import day_or_none
from stockroom.web.visit import Reading

router = APIRouter(include_in_schema=False)


@router.get("/week")
def week(visit: Reading, of: str = "") -> Response:
    """The week that holds the day `of`, else this week."""
    monday = monday_of(day_or_none(of or None, "of"), visit.today)
    sunday = monday + timedelta(days=6)
    known, plan = known_and_planned(visit.path, as_at=visit.today, through=sunday)
    sheet = week_of(known, plan, monday, why_closed(visit.path, monday, sunday))
    return visit.page("week.html", sheet)
