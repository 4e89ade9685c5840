"""Both streams: results to standard output, what to do next to standard error."""

from __future__ import annotations

import json
import shlex
import shutil
import sys
from collections.abc import Callable
from typing import TYPE_CHECKING, Any

from stockroom.cli.shared import Shared
from stockroom.settings import store_at

if TYPE_CHECKING:
    from stockroom.service.answers import Done
    from stockroom.settings import StoreAt

NARROW, USUAL, WIDE = 60, 80, 120


def width() -> int:
    """Columns to write in: the terminal's (or COLUMNS), 80 when unknown, 60 to 120."""
    return min(max(shutil.get_terminal_size((USUAL, 24)).columns, NARROW), WIDE)


def show(shared: Shared, text: Callable[[], str], data: Callable[[], dict[str, Any]]) -> None:
    """Print an answer: as JSON with --json, else as text. Only the one asked for is made."""
    print(json.dumps(data(), ensure_ascii=False, indent=2) if shared.json else text())


def show_done(shared: Shared, done: Done, *, at: StoreAt | None = None) -> None:
    """Print what was done and, on standard error, the command that usually follows.

    `at` is the store that command is for, where it is not the one of this command.
    """
    show(shared, lambda: _done_text(done), done.as_data)
    suggest(shared, done.next, at=at)


def suggest(shared: Shared, command: str, *, at: StoreAt | None = None) -> None:
    """Say on standard error which command to try next; nothing for an empty one.

    It opens the store this command was about: the one given with --store, or `at`, where the
    usual place holds another. A password in a server's address is left out.
    """
    if command:
        tell(f"next: {_opening(shared, command, at)}")


def _opening(shared: Shared, command: str, at: StoreAt | None) -> str:
    place = at or (store_at(shared.store) if shared.store else None)
    program, _, rest = command.partition(" ")
    # a command that names its own store is about that one
    if place is None or rest.startswith("--store "):
        return command
    return f"{program} --store {shlex.quote(str(place))} {rest}"


def tell(line: str) -> None:
    """Say on standard error what is worth knowing and is no part of the answer."""
    print(line, file=sys.stderr)


def _done_text(done: Done) -> str:
    from stockroom.reports.sheet import PRACTICE
    from stockroom.reports.words import raised

    lines = [raised(done.text), *(f"  {raised(detail)}" for detail in done.details)]
    return "\n".join([PRACTICE, *lines] if done.practice else lines)
