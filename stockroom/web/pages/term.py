"""The term: bookings, makes and lives by day, with what is short; all, or what was chosen."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Query
from starlette.responses import Response

from stockroom.reports.pages.term import term_page
from stockroom.reports.pages.term_choice import Choice
from stockroom.service.term import term_seen
from stockroom.web.forms.table import BY_NAME
from stockroom.web.visit import Reading

router = APIRouter(include_in_schema=False)

Asked = Annotated[str, Query(max_length=200)]


@router.get("/term")
def term(visit: Reading, department: Asked = "", recipe: Asked = "", item: Asked = "") -> Response:
    """The whole term, or what one department, recipe or item has to do with."""
    seen = term_seen(visit.path, as_at=visit.today)
    choice = Choice(department.strip(), recipe.strip(), item.strip())
    page = term_page(seen.known, seen.plan, seen.closed, choice)
    return visit.page("term.html", page, forms=BY_NAME)
