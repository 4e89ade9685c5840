"""Why: the reasons behind any line, or why not another in its place."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Query
from starlette.responses import Response

from stockroom.errors import BadInput
from stockroom.reports.pages.why import WhyPage, why_page, why_refused
from stockroom.service.plan import why as reasons_for
from stockroom.web.refusals import status_of
from stockroom.web.visit import Reading

router = APIRouter(include_in_schema=False)

Asked = Annotated[str, Query(max_length=200)]


@router.get("/why")
def why(visit: Reading, ref: Asked = "", instead: Asked = "") -> Response:
    """The reasons for `ref`; with `instead`, why that does not stand in its place."""
    ref, instead = ref.strip(), instead.strip()
    if not ref:
        return visit.page("why.html", WhyPage(ref, instead))
    try:
        lines = reasons_for(visit.path, ref, as_at=visit.today, instead=instead or None)
    except BadInput as error:
        page = why_refused(ref, instead, error)
        return visit.page("why.html", page, status=status_of(error))
    return visit.page("why.html", why_page(ref, instead, lines))
