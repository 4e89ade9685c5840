"""Everything that can be entered: the list of forms, each form alone, and sending one in."""

from __future__ import annotations

from collections.abc import Mapping
from urllib.parse import unquote, urlsplit

from fastapi import APIRouter, HTTPException
from starlette.responses import Response

from stockroom.errors import StockroomError, UnknownName
from stockroom.reports.diary_text import diary_rows
from stockroom.reports.pages.entry import EntryTold, entry_told
from stockroom.service.bottle import bottle_seen
from stockroom.service.diary import entry_story
from stockroom.web.forms.field import LONGEST, Form
from stockroom.web.forms.sending import Trouble, remember_initials, send, trouble_of
from stockroom.web.forms.table import BY_NAME, subjects
from stockroom.web.forms.typed import AtField
from stockroom.web.visit import Reading, Recording, Sent, Visit, back_to, own_path, values_of

router = APIRouter(include_in_schema=False)


@router.get("/enter")
def enter(visit: Reading) -> Response:
    """Every form under its heading."""
    return visit.page("enter.html", subjects())


@router.get("/do/{name}")
def alone(visit: Recording, name: str) -> Response:
    """One form, with whatever the address already says filled in."""
    form = _form(visit, name)
    asked = visit.request.query_params
    given = {key: value[:LONGEST] for key, value in asked.items() if form.field(key)}
    return form_page(visit, form, form.usual() | given, asked.get("back", "/week"))


@router.post("/do/{name}")
def sent_in(visit: Recording, name: str, sent: Sent) -> Response:
    """A form sent in: done, and back to where it was opened; else shown again as it was typed."""
    return answered(visit, _form(visit, name), values_of(sent))


def answered(visit: Visit, form: Form, values: Mapping[str, str]) -> Response:
    """Do what a form asks and go back; a refusal shows it again, with everything typed kept."""
    back, token = values.get("back", "/week"), values.get("once", "")
    try:
        remember_initials(visit, values)
        send(visit, form, values, token)
    except AtField as refused:
        return form_page(visit, form, values, back, trouble_of(form, refused))
    return back_to(_still_there(visit, back), said=token)


def _still_there(visit: Visit, back: str) -> str:
    """The page to go back to; this week in place of a bottle whose beginning was put right."""
    address = urlsplit(back)
    number = unquote(address.path.removeprefix("/bottle/"))
    if number == address.path:
        return back
    try:
        bottle_seen(visit.path, number, as_at=visit.today)
    except UnknownName:
        return "/week"
    return back


def form_page(
    visit: Visit,
    form: Form,
    values: Mapping[str, str],
    back: str,
    trouble: Trouble | None = None,
) -> Response:
    """A form on a page of its own, with why it was refused where it was."""
    told: tuple[EntryTold, ...] = ()
    try:
        told = _entry_told(visit, form, values)
    except StockroomError as error:
        trouble = trouble or trouble_of(form, AtField("entry", error))
    return visit.page(
        "form.html",
        form,
        status=trouble.status if trouble else 200,
        values=values,
        back=own_path(back),
        trouble=trouble,
        told=told,
    )


def _entry_told(visit: Visit, form: Form, values: Mapping[str, str]) -> tuple[EntryTold, ...]:
    """What the entry says that is about to be put right, where its number is known."""
    entry = values.get("entry", "").strip() if form.name == "put-right" else ""
    if not (entry.isascii() and entry.isdigit() and len(entry) < 20):
        return ()
    diary = entry_story(visit.path, int(entry)).diary
    return entry_told(diary.bottle, diary.line, diary_rows(diary.entries))


def _form(visit: Visit, name: str) -> Form:
    form = BY_NAME.get(name)
    if form is None:
        raise HTTPException(404, f"Nothing is entered by the name {name[:60]}.")
    if not visit.may(form.role):
        raise HTTPException(403, f"{form.title} needs the role {form.role.words}.")
    return form
