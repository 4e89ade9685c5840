"""Templates filled: escaped unless said otherwise, and a name that is missing is an error."""

from __future__ import annotations

import secrets
from functools import cache
from pathlib import Path
from typing import TYPE_CHECKING, Any

from fastapi.responses import HTMLResponse
from jinja2 import Environment, FileSystemLoader, StrictUndefined

from stockroom.errors import StockroomError
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


def refusal_page(
    request: Request, status: int, message: str, hint: str, *, inside: bool
) -> HTMLResponse:
    """The page for what cannot be shown, with the line and the pages at its top.

    Plain for whoever is not `inside`, and where the store itself may be the trouble.
    """
    told = {"message": message, "hint": hint, "status": status}
    visit = _visit_of(request) if inside and status < 500 else None
    if visit is not None:
        # not back here, where there is nothing
        return visit.page("refused_inside.html", told, status=status, top_back="/week")
    return HTMLResponse(templates().get_template("refused.html").render(page=told), status)


def _visit_of(request: Request) -> Visit | None:
    from stockroom.web.visit import visiting

    session = getattr(request.state, "session", None)
    if session is None or session.role is Role.NOBODY:
        return None
    try:
        return visiting(request)
    except StockroomError:
        return None


def _form_named(name: str) -> Form:
    from stockroom.web.forms.table import BY_NAME

    return BY_NAME[name]
