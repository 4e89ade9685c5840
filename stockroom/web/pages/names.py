"""Names offered while somebody types: data for a list under a field, never a page."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Query
from starlette.responses import JSONResponse

from stockroom.service.names_like import names_like
from stockroom.web.visit import Reading

router = APIRouter(include_in_schema=False)


@router.get("/names")
def names(
    visit: Reading,
    kind: Annotated[str, Query(max_length=20)] = "all",
    of: Annotated[str, Query(max_length=100)] = "",
) -> JSONResponse:
    """Up to twelve names of a kind like what was typed, the likest first."""
    found = names_like(visit.path, kind, of, today=visit.today)
    return JSONResponse([{"value": each.value, "words": each.words} for each in found])
