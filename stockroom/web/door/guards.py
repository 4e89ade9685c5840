"""What every request passes on its way in, from the outermost to the session."""

from __future__ import annotations

import logging

from fastapi import FastAPI
from starlette.requests import Request
from starlette.types import ASGIApp, Message, Receive, Scope, Send

from stockroom.web.door.arriving import Arriving
from stockroom.web.door.bounds import Bounds
from stockroom.web.door.entering import Sessions
from stockroom.web.door.headers import Headers
from stockroom.web.door.hosts import Hosts, OwnPages
from stockroom.web.door.keeper import Keeper
from stockroom.web.house import House
from stockroom.web.refusals import answer

log = logging.getLogger("stockroom.door")

LOOKING = ("GET", "HEAD", "OPTIONS")

_FAULT = "This is a fault in stockroom itself"
_WHERE = "What went wrong stands where stockroom serve runs."
LOOKED = f"{_FAULT}, and nothing was saved.", f"Try it once more. {_WHERE}"
SENT = f"{_FAULT}.", f"It may not have been saved: look before you send it again. {_WHERE}"
"""What a fault is told as: of what was sent nobody knows how far it came."""


class Faults:
    """Answers a fault of the program in words; what it was goes to the server's own record."""

    def __init__(self, app: ASGIApp) -> None:
        self.app = app

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """One request. Raises: the fault, once it is answered, for the server to write down."""
        begun = False

        async def sending(message: Message) -> None:
            nonlocal begun
            begun = True
            await send(message)

        try:
            await self.app(scope, receive, sending)
        except Exception:
            if scope["type"] == "http" and not begun:
                looks = scope["method"] in LOOKING
                await answer(Request(scope), 500, *(LOOKED if looks else SENT))(
                    scope, receive, send
                )
            raise


def guard(app: FastAPI, house: House) -> None:
    """Put the door before every page of the application."""
    keeper = Keeper(house)
    app.state.keeper = keeper
    # the one added last is passed first
    app.add_middleware(Sessions, keeper=keeper)
    app.add_middleware(Arriving, house=house)
    app.add_middleware(OwnPages)
    app.add_middleware(Bounds)
    app.add_middleware(Hosts, house=house)
    app.add_middleware(Faults)
    app.add_middleware(Headers, house=house)
