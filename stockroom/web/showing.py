"""Templates filled: escaped unless said otherwise, and a name that is missing is an error."""

from __future__ import annotations

import secrets
from functools import cache
from pathlib import Path
from typing import TYPE_CHECKING, Any

from fastapi.responses import HTMLResponse
from jinja2 import Environment, FileSystemLoader, StrictUndefined

from stockroom.reports.pages.links import linked
from stockroom.reports.sheet import CAUTION
from stockroom.reports.words import day_heading, raised
from stockroom.web.door.roles import Role
from stockroom.web.forms.field import Form
from stockroom.web.hints import hinted

if TYPE_CHECKING:
    from starlette.requests import Request

    from stockroom.web.visit import Visit

TEMPLATES = Path(__file__).parent / "templates"

PAGES = (
    ("/week", "This week"),
    ("/term", "The term"),
    ("/day", "Before the day"),
    ("/shelf", "Along the shelf"),
    ("/recipe", "Recipes"),
    ("/buying", "Term's buying"),
    ("/use", "Use over the term"),
    ("/try", "Try it"),
    ("/enter", "Enter"),
    ("/paper", "Paper"),
    ("/rules", "House rules"),
    ("/bring-in", "Bring in"),
)
"""The pages named at the top of each, in their order."""


@cache
def templates() -> Environment:
    """The templates, read once. What is filled in is escaped, so that a name is never markup."""
    made = Environment(
        loader=FileSystemLoader(TEMPLATES),
        autoescape=True,
        undefined=StrictUndefined,
        trim_blocks=True,
        lstrip_blocks=True,
    )
    made.filters |= {"raised": raised, "day": day_heading, "linked": linked, "hinted": hinted}
    made.globals |= {"pages": PAGES, "caution": CAUTION, "Role": Role, "form_named": _form_named}
    return made


def shown(template: str, visit: Visit, page: object, more: dict[str, Any]) -> str:
    """A page's HTML."""
    from stockroom.web.visit import token_of

    return (
        templates()
        .get_template(template)
        .render(
            page=page,
            visit=visit,
            form_token=token_of(visit),
            once_token=lambda: secrets.token_urlsafe(18),
            **more,
        )
    )


def refusal_page(request: Request, status: int, message: str, hint: str) -> HTMLResponse:
    """The page for what cannot be shown; plain, since the store itself may be the trouble."""
    page = templates().get_template("refused.html")
    return HTMLResponse(page.render(status=status, message=message, hint=hint), status)


def _form_named(name: str) -> Form:
    from stockroom.web.forms.table import BY_NAME

    return BY_NAME[name]
