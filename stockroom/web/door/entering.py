"""The session of each request, read from its cookie and written back where it changed."""

from __future__ import annotations

from http.cookies import SimpleCookie

from starlette.datastructures import MutableHeaders
from starlette.requests import HTTPConnection
from starlette.types import ASGIApp, Message, Receive, Scope, Send

from stockroom.web.door.headers import UNCHANGING
from stockroom.web.door.keeper import Keeper
from stockroom.web.door.session import (
    RENEWED,
    Session,
    cookie_name,
    fresh,
    read_with_age,
    written,
)
from stockroom.web.house import House


class Sessions:
    """Puts `request.state.session` before each request; whoever changes it changes the cookie."""

    def __init__(self, app: ASGIApp, keeper: Keeper) -> None:
        self.app, self.keeper = app, keeper

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """One request."""
        # what is the same for everybody asks nobody who they are
        if scope["type"] != "http" or scope["path"].startswith(UNCHANGING):
            await self.app(scope, receive, send)
            return
        house = self.keeper.house
        known, age = self._known(HTTPConnection(scope).cookies.get(cookie_name(house)))
        state = scope.setdefault("state", {})
        state["session"] = known or fresh(house)

        async def sending(message: Message) -> None:
            changed = state["session"] != known or age > RENEWED
            if message["type"] == "http.response.start" and changed:
                cookie = cookie_for(house, state["session"])
                MutableHeaders(scope=message).append("set-cookie", cookie)
            await send(message)

        await self.app(scope, receive, sending)

    def _known(self, cookie: str | None) -> tuple[Session | None, int]:
        found = read_with_age(self.keeper.house, cookie)
        if found is None or not self.keeper.lets_stay(found[0]):
            return None, 0
        return found


def cookie_for(house: House, session: Session) -> str:
    """The header that gives a browser its cookie: for this host only, out of reach of scripts."""
    name = cookie_name(house)
    cookie: SimpleCookie = SimpleCookie()
    cookie[name] = written(house, session)
    cookie[name]["path"] = "/"
    cookie[name]["httponly"] = True
    cookie[name]["samesite"] = "Strict"
    if house.secure:
        cookie[name]["secure"] = True
    return cookie[name].OutputString()
