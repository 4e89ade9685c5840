"""Try it without saving: what would change if; asked by the address alone, and never written."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Query
from starlette.responses import Response

from stockroom.errors import StockroomError
from stockroom.reports.pages.what_if import (
    MORE_ROWS,
    MOST_ROWS,
    Difference,
    blocks_of,
    difference_of,
    rows_shown,
)
from stockroom.service.what_if import Asked, what_if
from stockroom.web.refusals import status_of
from stockroom.web.trying import Trying, in_our_words, typed_in
from stockroom.web.visit import Reading, Visit

router = APIRouter(include_in_schema=False)

Tick = Annotated[str, Query(max_length=10)]


@router.get("/try")
def trying(
    visit: Reading,
    cautious: Tick = "",
    keep_closed: Tick = "",
    rows: Annotated[str, Query(max_length=10)] = "",
) -> Response:
    """The fields, and what would change if anything is asked. Raises: BadInput for too much."""
    tried = Trying(typed_in(visit.request.query_params))
    asked = tried.asked(cautious=bool(cautious), keep_closed=bool(keep_closed))
    told, whole, status = None, None, 200
    if tried.troubles:
        status = 422
    elif _anything(asked):
        try:
            told = _difference(visit, tried, asked)
        except StockroomError as error:
            status = status_of(error)
            whole = None if tried.blame(error) else in_our_words(error)
    count = rows_shown(tried.typed, int(rows) if rows.isdecimal() else 0)
    more: dict[str, object] = {"told": told, "whole": whole, "rows": count}
    more |= {"cautious": cautious, "keep_closed": keep_closed}
    more |= {"more_rows": min(count + MORE_ROWS, MOST_ROWS)}
    blocks = blocks_of(tried.typed, count, tried.troubles)
    return visit.page("try.html", blocks, status=status, **more)


def _anything(asked: Asked) -> bool:
    things = (asked.groups, asked.shifts, asked.without, asked.cancels, asked.extras)
    return asked.cautious or any(things)


def _difference(visit: Visit, tried: Trying, asked: Asked) -> Difference:
    supposed = what_if(visit.path, asked, as_at=visit.today)
    return difference_of(
        supposed.comparison, asked=supposed.asked, typed=tried.typed, keep=asked.keep_closed
    )
