"""Along the shelf: what stands where, found by place, by condition, or by any name of a thing."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Query
from starlette.responses import Response

from stockroom.reports.pages.shelf import (
    CONDITIONS,
    Asked,
    nearest_in,
    nothing_found,
    order_of,
    shelf_page,
)
from stockroom.service.shelf_planned import NoneOfThatName, shelf_planned
from stockroom.service.typed import day_or_none
from stockroom.web.visit import Reading

router = APIRouter(include_in_schema=False)

Text = Annotated[str, Query(max_length=200)]


@router.get("/shelf")
def shelf(
    visit: Reading,
    what: Text = "",
    place: Text = "",
    condition: Text = "",
    on: Text = "",
    known_on: Text = "",
    order: Text = "",
    page: Annotated[int, Query(ge=1, le=100_000)] = 1,
) -> Response:
    """The bottles that fit the filter, a page of them at a time; a name nobody knows is 404."""
    asked = Asked(what.strip(), place, condition, on, known_on, order_of(order))
    day, known = day_or_none(on or None, "on"), day_or_none(known_on or None, "known_on")
    try:
        found = shelf_planned(
            visit.path, asked.what, place, today=visit.today, on=day, known_on=known
        )
    except NoneOfThatName as trouble:
        nothing = nothing_found(asked, trouble.places, trouble.message, nearest_in(trouble.hint))
        return visit.page("shelf.html", nothing, status=404, conditions=CONDITIONS)
    told = shelf_page(found.shelf, asked, found.places, found.place, found.plan, page)
    return visit.page("shelf.html", told, conditions=CONDITIONS)
