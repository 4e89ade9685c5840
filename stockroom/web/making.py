"""Sheets and pictures are made one at a time: nobody promises that what draws them bears more.

One lock for Typst and Matplotlib in each worker. Whoever waits too long is told so, or those
who wait would in the end keep everybody else out.
"""

from __future__ import annotations

import threading
from collections.abc import Iterator
from contextlib import contextmanager
from typing import TYPE_CHECKING, Any

from fastapi import HTTPException

if TYPE_CHECKING:
    from stockroom.reports.paper.kinds import Kind

PATIENCE = 20.0
"""Seconds somebody waits for what is being drawn before them. Our choice."""

_ALONE = threading.Lock()


@contextmanager
def alone(patience: float = PATIENCE) -> Iterator[None]:
    """The block runs while no other one of its kind does. Raises: 503 after so many seconds."""
    if not _ALONE.acquire(timeout=patience):
        raise HTTPException(
            503,
            "Many sheets are being drawn at this moment: ask again in a minute.",
            headers={"retry-after": "60"},
        )
    try:
        yield
    finally:
        _ALONE.release()


def pages_of(kind: Kind[Any], sheet: Any, *, form: str, paper: str) -> list[bytes]:
    """A sheet typeset: a PDF whole, a picture one to a page. Raises: 503."""
    with alone():
        return drawn(kind, sheet, form=form, paper=paper)


def drawn(kind: Kind[Any], sheet: Any, *, form: str, paper: str) -> list[bytes]:
    """The same, for whoever is `alone` already."""
    from stockroom.reports.typesetting import typeset

    return typeset(kind.name, kind.data(sheet), form=form, paper=paper, on=sheet.head.as_at)
