"""One bottle: everything known of it, and every event that can happen to it as a short form."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Path, Query
from starlette.responses import Response

from stockroom.reports.diary_text import diary_rows
from stockroom.reports.pages.bottle import BottlePage, bottle_page
from stockroom.reports.pages.bottle_forms import NAMED_OTHERWISE
from stockroom.service.bottle import bottle_seen
from stockroom.web.forms.field import Form
from stockroom.web.forms.table import BY_NAME
from stockroom.web.visit import Reading, Visit

router = APIRouter(include_in_schema=False)


@router.get("/bottle/{number}")
def bottle(
    visit: Reading,
    number: Annotated[str, Path(max_length=200)],
    page: Annotated[int, Query(ge=1, le=100_000)] = 1,
) -> Response:
    """A bottle by its number; `page` is which page of its story."""
    found = bottle_seen(visit.path, number, as_at=visit.today)
    told = bottle_page(
        found.known,
        found.plan,
        found.seen,
        list(diary_rows(found.diary.entries)),
        found.fading,
        found.hazards,
        found.made_from,
        found.made_into,
        page,
    )
    first, rest = _forms(visit, told.forms.first), _forms(visit, told.forms.rest)
    return visit.page(
        "bottle.html",
        told,
        first=first,
        rest=rest,
        cautions=_not_said_again(told, [*first, *rest]),
        named=NAMED_OTHERWISE,
    )


def _not_said_again(told: BottlePage, forms: list[Form]) -> list[str]:
    """The cautions of what is in it, those left out that stand in a form anyway."""
    every = told.hazards.cautions if told.hazards else ()
    said = " ".join(form.caution for form in forms)
    return [each for each in every if each.partition(": ")[2] not in said]


def _forms(visit: Visit, names: tuple[str, ...]) -> list[Form]:
    if visit.looks_elsewhere:
        return []
    return [form for name in names if visit.may((form := BY_NAME[name]).role)]
