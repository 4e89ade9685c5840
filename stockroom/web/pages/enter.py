"""Everything that can be entered: the list of forms, each form alone, and sending one in."""

from __future__ import annotations

from fastapi import APIRouter, HTTPException
from starlette.responses import Response

from stockroom.web.door.session import with_initials
from stockroom.web.forms.field import Form
from stockroom.web.forms.sending import send, trouble_of
from stockroom.web.forms.table import BY_NAME, subjects
from stockroom.web.forms.typed import AtField
from stockroom.web.visit import Reading, Recording, Sent, Visit, back_to, values_of

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
    values = form.usual() | {key: value for key, value in asked.items() if form.field(key)}
    back = asked.get("back", "/week")
    return visit.page("form.html", form, values=values, back=back, trouble=None)


@router.post("/do/{name}")
def sent_in(visit: Recording, name: str, sent: Sent) -> Response:
    """A form sent in: done, and back to where it was opened; else shown again as it was typed."""
    form, values = _form(visit, name), values_of(sent)
    back, token = values.get("back", "/week"), values.get("once", "")
    if values.get("by", "").strip():
        session = with_initials(visit.session, values["by"][:8])
        visit.request.state.session = session
    try:
        send(visit, form, values, token)
    except AtField as refused:
        trouble = trouble_of(refused)
        more = {"values": values, "back": back, "trouble": trouble}
        return visit.page("form.html", form, status=trouble.status, **more)
    return back_to(back, said=token)


def _form(visit: Visit, name: str) -> Form:
    form = BY_NAME.get(name)
    if form is None:
        raise HTTPException(404, f"Nothing is entered by the name {name}.")
    if not visit.may(form.role):
        raise HTTPException(403, f"{form.title} needs the role {form.role.words}.")
    return form
