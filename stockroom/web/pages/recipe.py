"""Recipes: the list with its search, and one of them in any of its versions."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, Path, Query
from starlette.responses import Response

from stockroom.reports.pages.recipe import recipe_page, recipes_page
from stockroom.service.recipe import recipe_asked, recipes_known
from stockroom.web.forms.table import BY_NAME
from stockroom.web.visit import Reading

router = APIRouter(include_in_schema=False)


@router.get("/recipe")
def recipes(visit: Reading, what: Annotated[str, Query(max_length=200)] = "") -> Response:
    """Every recipe, or those whose title or lines hold all the words."""
    known = recipes_known(visit.path, as_at=visit.today)
    return visit.page("recipes.html", recipes_page(known, what))


@router.get("/recipe/{code}")
def recipe(
    visit: Reading,
    code: Annotated[str, Path(max_length=200)],
    version: Annotated[int | None, Query(ge=1, le=9999)] = None,
) -> Response:
    """One recipe in the version asked for, else the newest."""
    asked = recipe_asked(visit.path, code, version, as_at=visit.today)
    page = recipe_page(asked.known, asked.plan, asked.recipe, asked.spare)
    return visit.page("recipe.html", page, book=BY_NAME.get("book"))
