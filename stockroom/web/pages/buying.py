"""Term's buying: what to order by when and why, what is on its way, and whose money it is."""

from __future__ import annotations

from fastapi import APIRouter
from starlette.responses import Response

from stockroom.reports.pages.buying import buying_page_of
from stockroom.service.plan import term_plan
from stockroom.web.visit import Reading

router = APIRouter(include_in_schema=False)


@router.get("/buying")
def buying(visit: Reading) -> Response:
    """What to order this term, as planned on the day looked from."""
    plan = term_plan(visit.path, as_at=visit.today)
    return visit.page("buying.html", buying_page_of(plan))
