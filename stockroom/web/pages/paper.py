"""Paper: every sheet and file listed, looked at without a number, and printed under one.

To look writes nothing, so it may be asked for by anybody who may read, and again and again. A
numbered copy is kept by the store, so it is sent for as a form.
"""

from __future__ import annotations

from collections.abc import Mapping
from dataclasses import dataclass, field
from typing import Annotated
from urllib.parse import urlencode

from fastapi import APIRouter, HTTPException, Query
from starlette.responses import Response

from stockroom.web.forms.sending import Trouble, trouble_of
from stockroom.web.forms.typed import AtField, Typed
from stockroom.web.making import pages_of
from stockroom.web.paper.files import BY_FILE, FILES, TYPES, File, calendar_now
from stockroom.web.paper.sheet import Ready, Sheet, printed, ready
from stockroom.web.paper.sheets import BY_NAME, SHEETS
from stockroom.web.visit import Reading, Recording, Sent, Visit, values_of

router = APIRouter(include_in_schema=False)

WIDTH = 80
"""Columns of a sheet as text."""


@dataclass(frozen=True, slots=True)
class Look:
    """A sheet before it is printed: as it was asked for, as text, or why it cannot be."""

    sheet: Sheet
    values: Mapping[str, str]
    ready: Ready | None = None
    text: str = ""
    trouble: Trouble | None = None
    query: str = field(default="")


@router.get("/paper")
def listed(visit: Reading) -> Response:
    """All sheets and files, each with what it asks for."""
    return visit.page("papers.html", SHEETS, files=FILES)


@router.get("/paper/{name}.{ending}")
def looked_at(
    visit: Reading, name: str, ending: str, page: Annotated[int, Query(ge=1, le=500)] = 1
) -> Response:
    """A sheet without a number, a PDF whole or a page as a picture; or a file for a program."""
    file = BY_FILE.get(f"{name}.{ending}")
    if file is not None:
        return _file(visit, file)
    if ending not in ("pdf", "svg", "png"):
        raise HTTPException(404, f"{name[:80]}.{ending[:20]}: no paper or file has that name.")
    made = _ready(visit, _sheet(name), _asked(visit))
    drawn = pages_of(made.kind, made.sheet, form=ending, paper=made.paper)
    if page > len(drawn):
        raise HTTPException(404, f"Page {page}: this has {len(drawn)}.")
    return _sent(drawn[page - 1], name, ending)


@router.get("/paper/{name}")
def before_printing(visit: Reading, name: str) -> Response:
    """A sheet as it would be printed: its first page, its text, what is worth knowing."""
    sheet, values = _sheet(name), _asked(visit)
    if not sheet.is_asked(values):
        return visit.page("paper.html", Look(sheet, values))
    try:
        return visit.page("paper.html", _look(visit, sheet, values))
    except AtField as refused:
        trouble = trouble_of(sheet.form, refused)
        return visit.page("paper.html", Look(sheet, values, trouble=trouble), status=trouble.status)


@router.post("/paper/{name}")
def copied(visit: Recording, name: str, sent: Sent) -> Response:
    """A numbered copy as PDF, its lines kept; the calendar likewise, its entries kept.

    Sent twice it is printed twice, each copy with its own number: the first answer may never
    have arrived.
    """
    values = values_of(sent)
    if name == "calendar":
        return _calendar_kept(visit)
    made = _ready(visit, _sheet(name), values)
    number, pdf = printed(visit, made)
    return _sent(pdf, f"{name}-copy-{number}", "pdf", save=True)


def _ready(visit: Visit, sheet: Sheet, values: Mapping[str, str]) -> Ready:
    """The sheet where there is no field to stand beside. Raises: what was refused."""
    try:
        return ready(visit, sheet, values)
    except AtField as refused:
        raise refused.error from refused


def _look(visit: Visit, sheet: Sheet, values: Mapping[str, str]) -> Look:
    made = ready(visit, sheet, values)
    asked = {key: value for key, value in values.items() if value and sheet.form.field(key)}
    text = made.kind.text(made.sheet, WIDTH)
    return Look(sheet, values, made, text, query=f"?{urlencode(asked)}" if asked else "")


def _file(visit: Visit, file: File) -> Response:
    values = _asked(visit)
    typed = Typed(file.form, values, visit.path, visit.today, visit.session.initials)
    try:
        content = file.make(typed)
    except AtField as refused:
        raise refused.error from refused
    return _sent(content, file.name, file.ending, save=file.ending != "txt")


def _calendar_kept(visit: Visit) -> Response:
    visit.check_today("take it")
    file = BY_FILE["calendar.ics"]
    typed = Typed(file.form, {}, visit.path, visit.today, visit.session.initials)
    content, keep = calendar_now(typed)
    keep()
    return _sent(content, file.name, file.ending, save=True)


def _sheet(name: str) -> Sheet:
    sheet = BY_NAME.get(name)
    if sheet is None:
        names = ", ".join(BY_NAME)
        raise HTTPException(404, f"{name[:80]}: no sheet has that name. There are {names}.")
    return sheet


def _asked(visit: Visit) -> dict[str, str]:
    return dict(visit.request.query_params)


def _sent(content: bytes, name: str, ending: str, *, save: bool = False) -> Response:
    """A file under a name of ours: from the tables and a copy's number, never from the request."""
    how = "attachment" if save else "inline"
    headers = {"content-disposition": f'{how}; filename="{name}.{ending}"'}
    return Response(content, media_type=TYPES[ending], headers=headers)
