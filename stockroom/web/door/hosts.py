"""Which host a request is for, and which page sent it: only this house, and only its own pages."""

from __future__ import annotations

import ipaddress

from starlette.datastructures import Headers
from starlette.requests import Request
from starlette.types import ASGIApp, Receive, Scope, Send

from stockroom.web.house import House
from stockroom.web.refusals import answer

SAFE = frozenset({"GET", "HEAD", "OPTIONS"})
"""The methods that change nothing."""


class Hosts:
    """Refuses a request for a name that is not the house's.

    Another site may make its own name lead here, and would then read the answers as its own.
    """

    def __init__(self, app: ASGIApp, house: House) -> None:
        self.app, self.house = app, house

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """One request."""
        if scope["type"] == "http" and not is_ours(self.house, Headers(scope=scope).get("host")):
            refused = answer(
                Request(scope),
                421,
                "These pages are not to be had under that name.",
                "Use the address stockroom serve prints; --name adds another name to it.",
            )
            await refused(scope, receive, send)
            return
        await self.app(scope, receive, send)


class OwnPages:
    """Refuses what would change something and was sent by a page of another site.

    The token in every form says the same; this also stands where there is no form.
    """

    def __init__(self, app: ASGIApp) -> None:
        self.app = app

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """One request."""
        if scope["type"] != "http" or scope["method"] in SAFE:
            await self.app(scope, receive, send)
            return
        headers, request = Headers(scope=scope), Request(scope)
        if is_foreign(scope["scheme"], headers):
            told = "This was sent by a page of another site, and nothing was saved."
            refused = answer(request, 403, told, "Open the page here, then send it.")
        elif scope["path"].startswith("/api/") and not _is_json(headers):
            given = headers.get("content-type", "nothing")[:80]
            told = f"application/json is read here, not {given}."
            refused = answer(request, 415, told, "Send content-type: application/json.")
        else:
            await self.app(scope, receive, send)
            return
        await refused(scope, receive, send)


def is_ours(house: House, host: str | None) -> bool:
    """Whether a Host header names this house, with any port: a tunnel may lead here by another."""
    name, port = _apart((host or "").lower())
    if port and not port.isdecimal():
        return False
    return name in house.names or (house.door is not None and _in_figures(name))


def is_foreign(scheme: str, headers: Headers) -> bool:
    """Whether a browser says that the request comes from anywhere but a page of this very host."""
    # another port of this machine is another program: "same-site" is not enough
    if headers.get("sec-fetch-site", "none") not in ("same-origin", "none"):
        return True
    origin = headers.get("origin")
    return origin is not None and origin.lower() != f"{scheme}://{headers.get('host', '').lower()}"


def _is_json(headers: Headers) -> bool:
    kind = headers.get("content-type", "").partition(";")[0].strip().lower()
    return kind == "application/json"


def _apart(host: str) -> tuple[str, str]:
    """A host and its port; an address of the long kind keeps its brackets."""
    if host.startswith("["):
        inside, closed, rest = host.partition("]")
        return inside + closed, rest.removeprefix(":")
    name, _, port = host.partition(":")
    # a name may end in a dot, which says that it is whole
    return name.removesuffix("."), port


def _in_figures(name: str) -> bool:
    # an address in figures leads nowhere but to where it says
    try:
        ipaddress.ip_address(name.removeprefix("[").removesuffix("]"))
    except ValueError:
        return False
    return True
