"""Coming in and leaving; and, once in, the initials and the day to look from."""

from __future__ import annotations

import logging
from dataclasses import replace
from datetime import date
from math import ceil
from typing import Annotated, Any

from fastapi import APIRouter, Query, Request
from fastapi.responses import HTMLResponse
from starlette.responses import Response

from stockroom.errors import BadDate, BadInput, StockroomError
from stockroom.service.typed import day_or_none
from stockroom.web.door.keeper import Keeper
from stockroom.web.door.roles import Role
from stockroom.web.door.session import (
    LONGEST_INITIALS,
    Session,
    come_in,
    form_token,
    fresh,
    with_initials,
)
from stockroom.web.forms.sending import Trouble
from stockroom.web.house import House
from stockroom.web.showing import templates
from stockroom.web.visit import Reading, Sent, back_to, own_path, values_of

router = APIRouter(include_in_schema=False)
log = logging.getLogger("stockroom.door")

EARLIEST, LATEST = date(2000, 1, 1), date(2199, 12, 31)
"""The days one may look from: within them every sum of days comes out. Our choice."""


@router.get("/come-in")
def door(request: Request, back: Annotated[str, Query(max_length=2000)] = "/") -> Response:
    """The door: a passphrase and initials; or, to whoever is in already, the way out."""
    return _page(request, {"back": back})


@router.post("/come-in")
def knock(request: Request, sent: Sent) -> Response:
    """Let in whoever says a passphrase of the house, with a new session and its role."""
    values, keeper = values_of(sent), _keeper(request)
    if request.state.session.role is not Role.NOBODY:
        return back_to(values.get("back", "/"))
    typed = values.get("initials", "").strip()
    try:
        initials = _initials(typed) if typed else ""
    except BadInput as error:
        return _page(request, values, _trouble("initials", error, 422))
    if not values.get("passphrase"):
        # nobody tried anything: it does not count as a try
        told = BadInput("No passphrase is given.", "Whoever keeps the house knows it.")
        return _page(request, values, _trouble("passphrase", told, 422))
    address = request.client.host if request.client else ""
    seconds = keeper.pace.wait(address)
    if seconds:
        return _too_often(request, values, address, seconds)
    found = keeper.role_by(values.get("passphrase", ""))
    if found is None:
        log.warning("a wrong passphrase from %s", address)
        told = BadInput("That is no passphrase of this house.", "Whoever keeps the house knows it.")
        return _page(request, values, _trouble("passphrase", told, 403))
    role, generation = found
    keeper.pace.came_in(address)
    if role > Role.READ and not initials:
        # who only reads enters nothing, and is not asked who it is
        told = BadInput("No initials are given.", "Write yours: they stand with what you enter.")
        return _page(request, values, _trouble("initials", told, 422))
    log.warning("%s came in from %s with the role %s", initials or "-", address, role.words)
    request.state.session = come_in(role, generation, initials)
    return back_to(values.get("back", "/"))


@router.post("/leave")
def leave(request: Request, sent: Sent) -> Response:
    """End the session, also for whoever has a copy of its cookie."""
    keeper = _keeper(request)
    keeper.leave(request.state.session)
    request.state.session = fresh(keeper.house)
    return back_to("/come-in" if keeper.house.door else "/")


@router.get("/visit")
def visit_page(visit: Reading, back: Annotated[str, Query(max_length=2000)] = "/") -> Response:
    """The initials and the day, on a page of their own."""
    return visit.page("visit.html", None, values={}, trouble=None, back=own_path(back))


@router.post("/initials")
def set_initials(visit: Reading, sent: Sent) -> Response:
    """Say once whose initials stand beside what is entered."""
    values = values_of(sent)
    try:
        initials = _initials(values.get("initials", ""))
    except BadInput as error:
        return _again(visit, values, _trouble("initials", error, 422))
    visit.request.state.session = with_initials(visit.session, initials)
    return back_to(values.get("back", "/"))


@router.post("/as-at")
def set_day(visit: Reading, sent: Sent) -> Response:
    """Look from another day; nothing typed comes back to today."""
    values = values_of(sent)
    try:
        day = _day(values.get("as_at", ""))
    except BadInput as error:
        return _again(visit, values, _trouble("as_at", error, 422))
    # the usual day is no day chosen: tomorrow it is another
    chosen = None if day == visit.front.today else day
    visit.request.state.session = replace(visit.session, as_at=chosen)
    return back_to(values.get("back", "/"))


def _day(typed: str) -> date | None:
    day = day_or_none(typed.strip()[:60] or None, "The day")
    if day is not None and not EARLIEST <= day <= LATEST:
        raise BadDate(
            f"{day} is further off than anything here.",
            f"Give a day from {EARLIEST} to {LATEST}.",
        )
    return day


def _initials(typed: str) -> str:
    initials = typed.strip()
    if not initials or len(initials) > LONGEST_INITIALS or not initials.isprintable():
        shown = f"{initials[:20]!r} are no initials" if initials else "No initials are given"
        raise BadInput(
            f"{shown}.", f"Write yours, 1 to {LONGEST_INITIALS} signs: they stand with every entry."
        )
    return initials


def _too_often(request: Request, values: dict[str, str], address: str, seconds: float) -> Response:
    wait = ceil(seconds)
    log.warning("too many tries to come in, the last from %s", address)
    told = BadInput(
        "Somebody tried too often to come in.", f"Wait {wait} seconds, then try once more."
    )
    page = _page(request, values, _trouble("passphrase", told, 429))
    page.headers["retry-after"] = str(wait)
    return page


def _trouble(field: str, error: StockroomError, status: int) -> Trouble:
    return Trouble(field, error.message, error.hint, status)


def _again(visit: Reading, values: dict[str, str], trouble: Trouble) -> Response:
    back = own_path(values.get("back", "/"))
    more: dict[str, Any] = {"values": values, "trouble": trouble, "back": back}
    return visit.page("visit.html", None, status=trouble.status, **more)


def _page(request: Request, values: dict[str, str], trouble: Trouble | None = None) -> HTMLResponse:
    """The door as a page: it opens no store, and says nothing of the house to a stranger."""
    house: House = request.app.state.house
    session: Session = request.state.session
    page = templates().get_template("come_in.html")
    told = page.render(
        session=session,
        shared=house.door is not None,
        form_token=form_token(house, session),
        back=own_path(values.get("back", "/")),
        initials=values.get("initials", session.initials),
        trouble=trouble,
        longest=LONGEST_INITIALS,
    )
    return HTMLResponse(told, trouble.status if trouble else 200)


def _keeper(request: Request) -> Keeper:
    keeper: Keeper = request.app.state.keeper
    return keeper
