"""How large a request may be, and how long it may take to be sent."""

from __future__ import annotations

import asyncio
import time

from starlette.datastructures import Headers
from starlette.exceptions import HTTPException
from starlette.requests import Request
from starlette.types import ASGIApp, Message, Receive, Scope, Send

from stockroom.web.refusals import answer

LARGEST = 64 * 1024
"""Bytes of a form or of a question to the API. Our choice: the longest form has a twentieth."""

LARGEST_FILE = 8 * 1024 * 1024
"""Bytes sent to a page that takes a file: a spreadsheet of ten thousand rows. Our choice."""

FILES_AT = ("/bring-in",)
"""The pages that take a file; what is answered about one is a form like others."""

LONGEST_QUERY = 8 * 1024
"""Bytes after the question mark of an address."""

LONGEST_PATH = 2 * 1024
"""Bytes of an address before it."""

FIELDS = 200
"""Fields of a form."""

SENT_WITHIN = 60.0
"""Seconds in which all of a request must have come. Our choice."""


class Bounds:
    """Refuses what is too long, by what it says of itself, and again while it comes."""

    def __init__(self, app: ASGIApp) -> None:
        self.app = app

    async def __call__(self, scope: Scope, receive: Receive, send: Send) -> None:
        """One request."""
        if scope["type"] != "http":
            await self.app(scope, receive, send)
            return
        most = largest_at(scope["path"])
        refused = _refused_at_once(scope, most)
        if refused:
            await answer(Request(scope), *refused)(scope, receive, send)
            return
        await self.app(scope, _counted(receive, most), send)


def largest_at(path: str) -> int:
    """Bytes a request to that page may have."""
    return LARGEST_FILE if path in FILES_AT else LARGEST


def _refused_at_once(scope: Scope, most: int) -> tuple[int, str, str] | None:
    query, path = scope["query_string"], scope.get("raw_path") or scope["path"].encode()
    if len(query) > LONGEST_QUERY or len(path) > LONGEST_PATH:
        length = len(query) + len(path)
        return 414, f"The address is {length} signs long.", "Say it shorter."
    # no name of ours has it, and a database server takes it for a fault
    if "\x00" in scope["path"] or b"%00" in query or b"\x00" in query:
        return 400, "The address holds a sign that cannot be read.", "Open the page by a link."
    said = Headers(scope=scope).get("content-length", "")
    if said.isdecimal() and int(said) > most:
        return 413, _too_large(most), "Nothing was read or saved."
    return None


def _counted(receive: Receive, most: int) -> Receive:
    """What is received, stopped where it grows too large or comes too slowly."""
    came, until = 0, time.monotonic() + SENT_WITHIN
    whole = False

    async def receiving() -> Message:
        nonlocal came, whole
        # once all has come, the next message only tells that the reader went away
        if whole:
            return await receive()
        try:
            message = await asyncio.wait_for(receive(), max(until - time.monotonic(), 0.01))
        except TimeoutError as late:
            raise HTTPException(408, "It took too long to be sent: nothing was saved.") from late
        came += len(message.get("body", b""))
        whole = not message.get("more_body", False)
        if came > most:
            raise HTTPException(413, _too_large(most))
        return message

    return receiving


def _too_large(most: int) -> str:
    return f"More was sent than the {most // 1024} KiB that are taken here."
