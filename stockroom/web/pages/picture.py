"""Pictures: how a bottle fades, how full the days are, how the stock of a line runs down."""

from __future__ import annotations

from enum import StrEnum
from typing import Annotated

from fastapi import APIRouter, HTTPException, Path, Query
from starlette.responses import Response

from stockroom.errors import NotAllowed
from stockroom.reports.pictures.fade import fade_of
from stockroom.reports.pictures.fade_words import fade_picture
from stockroom.reports.pictures.level import level_of, level_picture
from stockroom.reports.pictures.load import load_of, load_picture
from stockroom.service.pictures import bottle_fading, line_running
from stockroom.service.sheets import known_and_planned
from stockroom.web.making import alone
from stockroom.web.visit import Reading

router = APIRouter(prefix="/picture", include_in_schema=False)


class Form(StrEnum):
    """What a picture is written as."""

    SVG = "svg"
    PNG = "png"


_TYPES = {Form.SVG: "image/svg+xml", Form.PNG: "image/png"}

Name = Annotated[str, Path(max_length=200)]


@router.get("/fade/{bottle}.{form}")
def fade(visit: Reading, bottle: Name, form: Form) -> Response:
    """How a bottle fades; 404 where there is no strength that could."""
    try:
        picture = fade_of(*bottle_fading(visit.path, bottle, as_at=visit.today))
    except NotAllowed as nothing:
        raise HTTPException(404, nothing.message) from nothing
    with alone():
        return _drawn(fade_picture(picture, form=form), form)


@router.get("/load.{form}")
def load(visit: Reading, form: Form) -> Response:
    """How full the days of the term are."""
    picture = load_of(*known_and_planned(visit.path, as_at=visit.today))
    with alone():
        return _drawn(load_picture(picture, form=form, bare=True), form)


@router.get("/level.{form}")
def level(
    visit: Reading, form: Form, of: Annotated[str, Query(min_length=1, max_length=200)]
) -> Response:
    """How the stock of a line runs through the term; 404 for what is never kept."""
    try:
        picture = level_of(*line_running(visit.path, of, as_at=visit.today))
    except NotAllowed as nothing:
        raise HTTPException(404, nothing.message) from nothing
    with alone():
        return _drawn(level_picture(picture, form=form), form)


def _drawn(picture: bytes, form: Form) -> Response:
    # what is drawn is of this moment: the next entry makes it another picture
    return Response(picture, media_type=_TYPES[form], headers={"cache-control": "no-store"})
