"""One request: whose it is, on which day, and how it is answered."""

from __future__ import annotations

from collections.abc import Callable
from dataclasses import dataclass
from datetime import date
from typing import Annotated, Any
from urllib.parse import urlencode

from fastapi import Depends, HTTPException, Request
from fastapi.responses import HTMLResponse, RedirectResponse
from starlette.datastructures import FormData

from stockroom.errors import NotAllowed
from stockroom.reports.words import day_heading
from stockroom.service.front import Front, front
from stockroom.settings import StoreAt
from stockroom.web.door.bounds import FIELDS, LARGEST, LONGEST_PATH
from stockroom.web.door.roles import Role
from stockroom.web.door.session import Session, form_token, is_our_form
from stockroom.web.house import House

LONGEST_SAID = 200
"""Signs of what an address tells to be told at the top of a page."""


@dataclass(frozen=True, slots=True)
class Visit:
    """What every page is given. `today` is the day to think of as today."""

    request: Request
    house: House
    session: Session
    front: Front

    @property
    def path(self) -> StoreAt:
        """The store."""
        return self.house.path

    @property
    def today(self) -> date:
        """The day looked from: the one the visitor chose, else the house's."""
        return self.session.as_at or self.front.today

    @property
    def looks_elsewhere(self) -> bool:
        """Whether the day was moved in a house that is no practice: then nothing is entered."""
        return self.today != self.front.today and not self.front.practice

    def check_today(self, then: str, otherwise: str = "") -> None:
        """Pass who looks from today; `then` is what else to do once back ("print it").

        `otherwise` is a sentence on what can be done meanwhile. Raises: NotAllowed.
        """
        if self.looks_elsewhere:
            told = f"You are looking from {day_heading(self.today)}, which is not today."
            raise NotAllowed(told, f"Go back to today, then {then}. {otherwise}".strip())

    @property
    def here(self) -> str:
        """This page's own address within the house, for coming back to."""
        return here(self.request)

    def may(self, role: Role) -> bool:
        """Whether this visitor may do what the role allows."""
        return self.session.role >= role

    def page(self, template: str, page: object, *, status: int = 200, **more: Any) -> HTMLResponse:
        """The page of a template, filled with a value from `reports/pages`."""
        from stockroom.web.showing import shown

        return HTMLResponse(shown(template, self, page, more), status)


def here(request: Request) -> str:
    """A request's own address within the house, without what was told at its top.

    The front page for one that leads elsewhere once it stands in a link.
    """
    query = [(k, v) for k, v in request.query_params.multi_items() if k != "said"]
    return own_path(request.url.path + (f"?{urlencode(query)}" if query else ""))


def visiting(request: Request) -> Visit:
    """The visit of a request. Raises: StoreTrouble."""
    house: House = request.app.state.house
    token = request.query_params.get("said", "")
    # none of ours is longer, so nothing was said by it
    token = token if len(token) <= LONGEST_SAID else ""
    return Visit(request, house, request.state.session, front(house.path, house.given, token))


def _of_role(role: Role) -> Callable[[Request], Visit]:
    def allowed(request: Request) -> Visit:
        # before the store is opened: a stranger costs it nothing
        turn_away(request, role)
        return visiting(request)

    return allowed


def turn_away(request: Request, role: Role) -> None:
    """Turn away whoever has not the role. Raises: 303 to where one comes in, 401 or 403."""
    session: Session = request.state.session
    if session.role >= role:
        return
    api = request.url.path.startswith("/api/")
    if session.role is Role.NOBODY and not api:
        where = here(request) if request.method == "GET" else "/"
        raise HTTPException(303, headers={"location": f"/come-in?{urlencode({'back': where})}"})
    if session.role is Role.NOBODY:
        raise HTTPException(401, "Nobody is known by this cookie: come in first, at /come-in.")
    raise HTTPException(403, f"This needs the role {role.words}; yours is {session.role.words}.")


Reading = Annotated[Visit, Depends(_of_role(Role.READ))]
Recording = Annotated[Visit, Depends(_of_role(Role.RECORD))]
Keeping = Annotated[Visit, Depends(_of_role(Role.KEEP_HOUSE))]
Anybody = Annotated[Visit, Depends(visiting)]
"""The visit, where its role allows what the name says; else turned away."""


async def form_sent(request: Request) -> FormData:
    """The fields of a form that is one of ours. Raises: 403 for one that is not, 400, 413."""
    form = await request.form(max_files=1, max_fields=FIELDS, max_part_size=LARGEST)
    token = form.get("form_token")
    house: House = request.app.state.house
    if not isinstance(token, str) or not is_our_form(house, request.state.session, token):
        raise HTTPException(
            403, "This form is not from this visit: open the page again, then send it."
        )
    if any("\x00" in value for value in values_of(form).values()):
        raise HTTPException(400, "The form holds a sign that cannot be read: type it again.")
    return form


Sent = Annotated[FormData, Depends(form_sent)]
"""What a form of ours sent."""


def token_of(visit: Visit) -> str:
    """The token every form of this visit carries."""
    return form_token(visit.house, visit.session)


def values_of(form: FormData) -> dict[str, str]:
    """The fields of a form that hold text."""
    return {key: value for key, value in form.items() if isinstance(value, str)}


def own_path(path: str) -> str:
    """A path of this house as it was given, and the front page for what leads elsewhere."""
    # two slashes, or one of the other kind, would lead to another host
    ours = path.startswith("/") and path[1:2] not in ("/", "\\") and path.isprintable()
    return path if ours and len(path) <= LONGEST_PATH else "/"


def back_to(path: str, said: str = "") -> RedirectResponse:
    """Back to a page of ours, telling what was done; a path that leads elsewhere goes home."""
    target = own_path(path)
    if said:
        target += ("&" if "?" in target else "?") + urlencode({"said": said})
    return RedirectResponse(target, 303)
