"""Use over the term: planned beside really drawn and a year before, and what went unused."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Query
from starlette.responses import Response

from stockroom.errors import UnknownName
from stockroom.reports.pages.use import Filter, use_page_of
from stockroom.service.use import TermUse, term_use
from stockroom.web.visit import Reading

router = APIRouter(include_in_schema=False)

Asked = Annotated[str, Query(max_length=200)]


@router.get("/use")
def use(visit: Reading, what: Asked = "", dept: Asked = "", term: Asked = "") -> Response:
    """The use of the term named, of all or of what is asked for. Raises: UnknownName."""
    told = term_use(visit.path, as_at=visit.today, term=term.strip(), what=what)
    asked = Filter(_department(told, dept), told.lines)
    page = use_page_of(told.known, told.plan, told.left, asked)
    return visit.page("use.html", page, told=told, what=what.strip(), asked=asked)


def _department(told: TermUse, typed: str) -> str:
    wanted = typed.strip().casefold()
    if not wanted:
        return ""
    for one in told.known.departments:
        if wanted in (one.code.casefold(), one.name.casefold()):
            return one.code
    codes = ", ".join(one.code for one in told.known.departments) or "none is entered"
    raise UnknownName(f"There is no department {typed.strip()!r}.", f"There is: {codes}.")
