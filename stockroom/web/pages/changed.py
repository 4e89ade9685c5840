"""What changed since the plan was kept last, and keeping it anew."""

from __future__ import annotations

from collections.abc import Mapping

from fastapi import APIRouter
from starlette.responses import Response

from stockroom.errors import NotAllowed
from stockroom.reports.pages.changed import ChangedPage, changed_page_of
from stockroom.service.answers import Done
from stockroom.service.printed_plans import changed, keep_told
from stockroom.web.forms.field import Form
from stockroom.web.forms.sending import Trouble, remember_initials, send, trouble_of
from stockroom.web.forms.typed import AtField, Typed
from stockroom.web.visit import Reading, Recording, Sent, Visit, back_to, values_of

router = APIRouter(include_in_schema=False)


def _keep(typed: Typed) -> Done:
    return keep_told(typed.path, as_at=typed.today, by=typed.signed())


# of this page alone: the API keeps a plan in its own way
KEEP = Form("keep-plan", "Keep this plan", "The plan is kept as it is now.", (), _keep)
"""The plan kept, under the rules of every form."""


@router.get("/changed")
def changes(visit: Reading) -> Response:
    """Every change since the plan was kept last, each with its cause."""
    return _page(visit, {})


@router.post("/changed/keep")
def keep(visit: Recording, sent: Sent) -> Response:
    """The term's plan kept under the next number; refused, the page with what was typed."""
    values = values_of(sent)
    token = values.get("once", "")
    try:
        remember_initials(visit, values)
        send(visit, KEEP, values, token)
    except AtField as refused:
        return _page(visit, values, trouble_of(KEEP, refused))
    return back_to("/changed", said=token)


def _page(visit: Visit, values: Mapping[str, str], trouble: Trouble | None = None) -> Response:
    page: ChangedPage | None = None
    none_kept = ""
    try:
        told = changed(visit.path, as_at=visit.today)
    except NotAllowed as none:
        none_kept = none.message
    else:
        page = changed_page_of(told.comparison, against=told.against, by=told.by)
    return visit.page(
        "changed.html",
        page,
        status=trouble.status if trouble else 200,
        none_kept=none_kept,
        keep=KEEP,
        values=values,
        trouble=trouble,
    )
