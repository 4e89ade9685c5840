"""The session of each request, read from its cookie and written back where it changed."""

from __future__ import annotations

from http.cookies import SimpleCookie

from starlette.datastructures import MutableHeaders
from starlette.requests import HTTPConnection
from starlette.types import ASGIApp, Message, Receive, Scope, Send

from stockroom.web.door.session import cookie_name, fresh, read, written
from stockroom.web.house import House


class Sessions:
    """Puts `request.state.session` before each request; whoever changes it changes the cookie."""

    def __init__(self, app: ASGIApp, house: House) -> None:
        self.app, self.house = app, house

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """One request."""
        if scope["type"] != "http":
            await self.app(scope, receive, send)
            return
        name = cookie_name(self.house)
        known = read(self.house, HTTPConnection(scope).cookies.get(name))
        session = known or fresh(self.house)
        state = scope.setdefault("state", {})
        state["session"] = session

        async def sending(message: Message) -> None:
            if message["type"] == "http.response.start" and state["session"] != known:
                MutableHeaders(scope=message).append("set-cookie", self._cookie(name, state))
            await send(message)

        await self.app(scope, receive, sending)

    def _cookie(self, name: str, state: dict[str, object]) -> str:
        from stockroom.web.door.session import Session

        session = state["session"]
        assert isinstance(session, Session)
        cookie: SimpleCookie = SimpleCookie()
        cookie[name] = written(self.house, session)
        cookie[name]["path"] = "/"
        cookie[name]["httponly"] = True
        cookie[name]["samesite"] = "Strict"
        if self.house.secure:
            cookie[name]["secure"] = True
        return cookie[name].OutputString()
