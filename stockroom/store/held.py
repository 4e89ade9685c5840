"""Connections that stay open between pieces of work, for a process that writes many times.

Opening a file and closing it again costs more than an entry does: the last to close a
store writes its journal back. So a walk or a page that serves holds the file open.
"""

from __future__ import annotations

import threading
from collections.abc import Callable
from pathlib import Path
from typing import TYPE_CHECKING

if TYPE_CHECKING:
    # the reading half asks for the mark of a file too, and stays light
    from sqlalchemy import Connection


class _Held(threading.local):
    """What this thread holds open, each with the mark of the file it was opened on."""

    def __init__(self) -> None:
        self.open: dict[Path, tuple[Connection, tuple[int, int]]] = {}


_HELD = _Held()


def hold(path: Path, opened: Callable[[], Connection]) -> bool:
    """Begin to hold a store open; False when this thread does so already."""
    if path in _HELD.open:
        return False
    _HELD.open[path] = opened(), mark_of(path)
    return True


def held(path: Path, opened: Callable[[], Connection]) -> Connection | None:
    """The connection this thread holds on the store at a path, None when it holds none."""
    found = _HELD.open.get(path)
    if found is None:
        return None
    # another file was put there meanwhile: what is written to the old one would be lost with it
    if found[1] != mark_of(path):
        found[0].close()
        found = _HELD.open[path] = opened(), mark_of(path)
    return found[0]


def let_go(path: Path) -> None:
    """Close what this thread holds on the store at a path."""
    found = _HELD.open.pop(path, None)
    if found is not None:
        found[0].close()


def mark_of(path: Path) -> tuple[int, int]:
    """What tells the file at a path from one that takes its name later: disc and number."""
    stat = path.stat()
    return stat.st_dev, stat.st_ino
