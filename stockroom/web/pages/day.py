"""Before the day: is all well, what differs, how strong, what at what time."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Path, Query
from starlette.responses import Response

from stockroom.reports.pages.day import day_page
from stockroom.reports.paper.day import day_of
from stockroom.reports.paper.day_text import DAY
from stockroom.service.day import day_held
from stockroom.web.visit import Reading, Visit

router = APIRouter(include_in_schema=False)

Ref = Annotated[str, Query(max_length=200)]


@router.get("/day")
def next_day(visit: Reading, of: Ref = "") -> Response:
    """The day or booking `of`, else the next day with a booking."""
    return _shown(visit, of.strip() or None)


@router.get("/day/{ref}")
def one_day(visit: Reading, ref: Annotated[str, Path(max_length=200)]) -> Response:
    """A day, or a booking on its day. 404 for a number nobody gave, 422 for no day."""
    return _shown(visit, ref)


def _shown(visit: Visit, ref: str | None) -> Response:
    held = day_held(visit.path, DAY, day_of, ref, as_at=visit.today)
    page = day_page(held.asked.known, held.asked.plan, held.sheet, held.hazards)
    return visit.page("day.html", page)
