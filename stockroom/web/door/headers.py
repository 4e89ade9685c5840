"""What every answer tells the browser it may do with it: nearly nothing, none of it outside."""

from __future__ import annotations

from starlette.datastructures import MutableHeaders
from starlette.types import ASGIApp, Message, Receive, Scope, Send

from stockroom.web.house import House

POLICY = (
    "default-src 'none'; script-src 'self'; style-src 'self'; img-src 'self';"
    " font-src 'self'; connect-src 'self'; form-action 'self'; frame-ancestors 'none';"
    " base-uri 'none'"
)
"""What a page may load and where it may send: this house only, and no script inside a page."""

_PICTURE = "default-src 'none'; style-src 'unsafe-inline'; frame-ancestors 'none'"
# a browser shows a sheet by a program of its own, which a stricter word would stop
_SHEET = "frame-ancestors 'none'; base-uri 'none'; form-action 'none'"

_ALWAYS = {
    "x-content-type-options": "nosniff",
    "referrer-policy": "same-origin",
    "cross-origin-opener-policy": "same-origin",
    "cross-origin-resource-policy": "same-origin",
    "permissions-policy": "camera=(), geolocation=(), microphone=(), payment=(), usb=()",
    "x-frame-options": "DENY",
}
"""Nothing of the machine is asked for by these pages: what scans a label types, like a key."""

TLS_ONLY = "max-age=15724800"
"""Half a year in which a browser asks by TLS only, said where TLS is spoken."""

UNCHANGING = ("/static/", "/face/")
"""What is the same for everybody, and holds nothing of the house."""


class Headers:
    """Puts them on every answer; what a page has set itself stays."""

    def __init__(self, app: ASGIApp, house: House) -> None:
        self.app, self.house = app, house

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """One request."""
        if scope["type"] != "http":
            await self.app(scope, receive, send)
            return

        async def sending(message: Message) -> None:
            if message["type"] == "http.response.start":
                self._add(scope["path"], MutableHeaders(scope=message))
            await send(message)

        await self.app(scope, receive, sending)

    def _add(self, path: str, headers: MutableHeaders) -> None:
        for name, value in _ALWAYS.items():
            headers.setdefault(name, value)
        headers.setdefault("content-security-policy", policy_for(headers.get("content-type", "")))
        # a page of the house is nobody's to keep; the style may be asked for again
        keep = "no-cache" if path.startswith(UNCHANGING) else "no-store"
        headers.setdefault("cache-control", keep)
        if self.house.secure:
            headers.setdefault("strict-transport-security", TLS_ONLY)


def policy_for(content_type: str) -> str:
    """The policy for an answer of that type: a picture opened alone carries its own style."""
    if content_type.startswith("image/svg"):
        return _PICTURE
    return _SHEET if content_type.startswith("application/pdf") else POLICY
