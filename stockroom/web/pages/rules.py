"""The house rules: all of them, one line's, and the forms that change or add to them."""

from __future__ import annotations

from typing import Annotated

from fastapi import APIRouter, HTTPException, Path, Query
from starlette.responses import Response

from stockroom.reports.pages.rules import rules_page
from stockroom.reports.pages.rules_cells import cells_of
from stockroom.reports.pages.rules_line import line_page
from stockroom.service.rules import house_kept, line_kept
from stockroom.web.forms.field import LONGEST, Form
from stockroom.web.forms.house import add_form, change_form, rule_form
from stockroom.web.forms.sending import Trouble, remember_initials, send, trouble_of
from stockroom.web.forms.typed import AtField
from stockroom.web.visit import Keeping, Reading, Sent, Visit, back_to, own_path, values_of

router = APIRouter(include_in_schema=False)

Words = Annotated[str, Query(max_length=200)]
Table = Annotated[str, Path(max_length=40)]
Key = Annotated[str, Query(max_length=300)]


@router.get("/rules")
def rules(visit: Reading, line: Words = "", what: Words = "") -> Response:
    """Everything that is settled for the house, or how one line keeps."""
    if line.strip():
        kept = line_kept(visit.path, line, as_at=visit.today)
        page = line_page(kept.keeping, kept.line, kept.usual_lead)
        return visit.page("rules_line.html", page, rule_form=rule_form)
    house = house_kept(visit.path, as_at=visit.today)
    return visit.page("rules.html", rules_page(house.known, house.kept, house.terms, what))


@router.get("/rules/add/{table}")
def adding(visit: Keeping, table: Table) -> Response:
    """The form for a row of a table, with whatever the address already says filled in."""
    form, asked = add_form(table), visit.request.query_params
    values = form.usual() | {key: text[:LONGEST] for key, text in asked.items() if form.field(key)}
    return _shown(visit, form, f"/rules/add/{table}", values, asked.get("back", _section(table)))


@router.post("/rules/add/{table}")
def added(visit: Keeping, table: Table, sent: Sent) -> Response:
    """A row added; else the form again as it was typed."""
    return _sent(visit, add_form(table), f"/rules/add/{table}", values_of(sent))


@router.get("/rules/change/{table}")
def changing(visit: Keeping, table: Table, key: Key) -> Response:
    """The form for a row's cells, with what stands there now."""
    form = _change_form(visit, table, key)
    back = visit.request.query_params.get("back", _section(table))
    action = f"/rules/change/{table}"
    return _shown(visit, form, action, form.usual() | {"key": key}, back, fixed={"key": key})


@router.post("/rules/change/{table}")
def changed(visit: Keeping, table: Table, sent: Sent) -> Response:
    """A row corrected; else the form again as it was typed."""
    values = values_of(sent)
    key = values.get("key", "")
    form = _change_form(visit, table, key)
    return _sent(visit, form, f"/rules/change/{table}", values, fixed={"key": key})


def _change_form(visit: Visit, table: str, key: str) -> Form:
    cells = cells_of(table, key, house_kept(visit.path, as_at=visit.today).known)
    if not cells:
        raise HTTPException(404, f'No row of {table} that may be changed is called "{key}".')
    return change_form(table, key, cells)


def _section(table: str) -> str:
    if table.startswith("recipe"):
        return "/recipe"
    return "/rules#settings" if table == "house" else f"/rules#{table}"


def _sent(
    visit: Visit,
    form: Form,
    action: str,
    values: dict[str, str],
    fixed: dict[str, str] | None = None,
) -> Response:
    token, back = values.get("once", ""), values.get("back", "/rules")
    try:
        remember_initials(visit, values)
        send(visit, form, values, token)
    except AtField as refused:
        trouble = trouble_of(form, refused)
        return _shown(visit, form, action, values, back, fixed=fixed, trouble=trouble)
    # what was done is told at the top, so the page is not opened further down
    return back_to(back.partition("#")[0], said=token)


def _shown(
    visit: Visit,
    form: Form,
    action: str,
    values: dict[str, str],
    back: str,
    *,
    fixed: dict[str, str] | None = None,
    trouble: Trouble | None = None,
) -> Response:
    status = trouble.status if trouble else 200
    more = {"action": action, "values": values, "back": own_path(back), "fixed": fixed or {}}
    return visit.page("rules_form.html", form, status=status, trouble=trouble, **more)
