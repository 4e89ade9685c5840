"""The one line at the top of every page: a number to go to, a draw, or words to look for."""

from __future__ import annotations

from typing import Annotated
from urllib.parse import quote, urlencode

from fastapi import APIRouter, HTTPException, Query
from starlette.responses import RedirectResponse, Response

from stockroom.errors import BadInput, UnknownName
from stockroom.service.line_box import Meant, meant_by
from stockroom.web.door.roles import Role
from stockroom.web.forms.sending import Trouble
from stockroom.web.forms.table import BY_NAME
from stockroom.web.pages.enter import answered
from stockroom.web.refusals import status_of
from stockroom.web.visit import Reading, Sent, Visit, back_to, own_path, values_of

router = APIRouter(include_in_schema=False)

LONGEST = 200
"""Signs of the line. Our choice."""

_PAGES = {
    "bottle": "/bottle/",
    "booking": "/day/",
    "day": "/day/",
    "recipe": "/recipe/",
    "planned": "/why?ref=",
    "words": "/shelf?what=",
}


@router.post("/line")
def line(visit: Reading, sent: Sent) -> Response:
    """What was typed into the line: gone to, or the draw saved."""
    values = values_of(sent)
    meant = _meant(visit, values.get("line", ""), own_path(values.get("back", "/week")))
    if isinstance(meant, Response):
        return meant
    if meant.kind != "draw":
        return RedirectResponse(_address(meant), 303)
    form = BY_NAME["draw"]
    if not visit.may(form.role):
        raise HTTPException(403, f"{form.title} needs the role {form.role.words}.")
    drawn = {"bottle": meant.value, "amount": meant.amount, "booking": meant.booking}
    kept = {name: values.get(name, "") for name in ("once", "back")}
    return answered(visit, form, drawn | kept | {"by": visit.session.initials})


@router.get("/line")
def came_back(visit: Reading, said: Annotated[str, Query(max_length=LONGEST)] = "") -> Response:
    """Back to a page after a draw that was refused at first: this week, with what was said."""
    return back_to("/week", said)


@router.get("/go")
def go(visit: Reading, what: Annotated[str, Query(max_length=LONGEST)] = "") -> Response:
    """The same for a link, which never writes: a draw is the form, filled in."""
    meant = _meant(visit, what, "/week")
    if isinstance(meant, Response):
        return meant
    if meant.kind == "draw" and visit.may(Role.RECORD):
        asked = {"bottle": meant.value, "amount": meant.amount, "booking": meant.booking}
        return RedirectResponse(f"/do/draw?{urlencode(asked)}", 303)
    return RedirectResponse(_address(meant), 303)


def _meant(visit: Visit, text: str, back: str) -> Meant | Response:
    """What the line means; nothing typed stays where one was, and what is refused is there again.

    `back` is where a draw mended in the line comes back to.
    """
    if not text.strip():
        return back_to(back)
    try:
        if len(text) > LONGEST or not text.strip().isprintable():
            told = f"{text[:30]!r}… is no number and no name."
            raise BadInput(told, f"Type at most {LONGEST} signs: S13, or S13 100 cm3.")
        return meant_by(visit.path, text)
    except (BadInput, UnknownName) as error:
        trouble = Trouble("line", error.message, error.hint, status_of(error))
        # a sign that cannot be printed cannot be seen to be taken out either
        typed = "".join(one for one in text if one.isprintable())
        return visit.page(
            "line.html", trouble, status=trouble.status, typed_line=typed, top_back=back
        )


def _address(meant: Meant) -> str:
    return _PAGES.get(meant.kind, "/bottle/") + quote(meant.value, safe="")
