"""A link from another site, or a label scanned: the browser is asked for the cookie again."""

from __future__ import annotations

from starlette.datastructures import Headers
from starlette.requests import HTTPConnection, Request
from starlette.responses import HTMLResponse
from starlette.types import ASGIApp, Receive, Scope, Send

from stockroom.web.door.session import cookie_name
from stockroom.web.house import House
from stockroom.web.showing import templates
from stockroom.web.visit import here


class Arriving:
    """Lets whoever follows a link from elsewhere take one step within the house first.

    A browser keeps our cookie back on such a step, as it is told to. Answered at once, the
    visitor would count as a stranger, and the stranger's cookie would take the place of theirs.
    """

    def __init__(self, app: ASGIApp, house: House) -> None:
        self.app, self.house = app, house

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """One request."""
        if scope["type"] != "http" or not _from_elsewhere(scope, self.house):
            await self.app(scope, receive, send)
            return
        page = templates().get_template("arriving.html").render(address=here(Request(scope)))
        await HTMLResponse(page)(scope, receive, send)


def _from_elsewhere(scope: Scope, house: House) -> bool:
    headers = Headers(scope=scope)
    page = scope["method"] == "GET" and headers.get("sec-fetch-mode") == "navigate"
    if not page or headers.get("sec-fetch-site") != "cross-site":
        return False
    # sent on from here already, whatever the browser calls it: never in a circle
    ours = f"{scope['scheme']}://{headers.get('host', '')}/"
    known = cookie_name(house) in HTTPConnection(scope).cookies
    return not known and not headers.get("referer", "").startswith(ours)
