"""The server: checked, announced, and run until somebody stops it."""

from __future__ import annotations

import secrets
from collections.abc import Callable
from datetime import date

from stockroom.service.front import front
from stockroom.settings import StoreAt
from stockroom.web.app import house_app
from stockroom.web.house import House


def serve_house(
    path: StoreAt, *, given: date | None, port: int, say: Callable[[str], None]
) -> None:
    """Serve the store at `path` on this machine only. Raises: StoreTrouble where there is none."""
    import uvicorn

    # asked once before anybody comes: a store that is not there is told here
    told = front(path, given)
    house = House(path, secrets.token_bytes(32), given)
    say(f"{told.name or path}: http://127.0.0.1:{port}/ (Ctrl-C ends it)")
    uvicorn.run(house_app(house), host="127.0.0.1", port=port, log_level="warning")
