"""This week: what to look at, make, titrate, set out and order, and each ticked off as done."""

from __future__ import annotations

from dataclasses import asdict
from datetime import date, timedelta
from typing import Annotated

from fastapi import APIRouter, Query
from starlette.responses import Response

from stockroom.reports.pages.week import WeekPage, week_page
from stockroom.reports.pages.week_done import Entered
from stockroom.reports.paper.week import monday_of
from stockroom.service.kept import kept
from stockroom.service.typed import day_or_none
from stockroom.service.week import week_seen
from stockroom.settings import StoreAt
from stockroom.web.forms.table import BY_NAME
from stockroom.web.visit import Reading

router = APIRouter(include_in_schema=False)


@router.get("/week")
def week(visit: Reading, of: Annotated[str, Query(max_length=40)] = "") -> Response:
    """The week that holds the day `of`, else this week."""
    today = visit.today
    monday = monday_of(day_or_none(of.strip() or None, "of"), today)
    # the page asked for most of all, and by everybody
    page = kept(visit.path, "week page", (monday, today), lambda: _page(visit.path, monday, today))
    return visit.page("week.html", page, forms=BY_NAME)


def _page(path: StoreAt, monday: date, today: date) -> WeekPage:
    seen = week_seen(path, monday, monday + timedelta(days=6), as_at=today)
    entered = tuple(Entered(**asdict(each)) for each in seen.entered)
    return week_page(seen.known, seen.plan, monday, seen.closed, entered)
