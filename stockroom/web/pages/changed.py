"""What changed since the plan was kept last, and keeping it anew."""

from __future__ import annotations

from fastapi import APIRouter
from starlette.responses import Response

from stockroom.errors import BadInput, NotAllowed
from stockroom.reports.pages.changed import changed_page_of
from stockroom.service.printed_plans import changed, keep_once
from stockroom.web.door.session import with_initials
from stockroom.web.visit import Reading, Recording, Sent, back_to, values_of

router = APIRouter(include_in_schema=False)


@router.get("/changed")
def changes(visit: Reading) -> Response:
    """Every change since the plan was kept last, each with its cause."""
    try:
        told = changed(visit.path, as_at=visit.today)
    except NotAllowed as none_kept:
        return visit.page("changed.html", None, none_kept=none_kept.message)
    page = changed_page_of(told.comparison, against=told.against, by=told.by)
    return visit.page("changed.html", page, none_kept="")


@router.post("/changed/keep")
def keep(visit: Recording, sent: Sent) -> Response:
    """The term's plan kept under the next number, once for each form sent in."""
    values = values_of(sent)
    if visit.looks_elsewhere:
        told = f"You are looking from {visit.today.isoformat()}, which is not today."
        raise NotAllowed(told, "Go back to today, then keep the plan.")
    by = values.get("by", "").strip() or visit.session.initials
    if not by:
        raise BadInput("Nobody's initials stand beside this.", "Write yours, then keep the plan.")
    visit.request.state.session = with_initials(visit.session, by[:8])
    token = values.get("once", "")
    keep_once(visit.path, token, as_at=visit.today, by=by[:8])
    return back_to("/changed", said=token)
