"""Both streams: results to standard output, what to do next to standard error."""

from __future__ import annotations

import json
import shutil
import sys
from collections.abc import Callable
from typing import TYPE_CHECKING, Any

from stockroom.cli.shared import Shared

if TYPE_CHECKING:
    from stockroom.service.answers import Done

NARROW, USUAL, WIDE = 60, 80, 120


def width() -> int:
    """Columns to write in: the terminal's (or COLUMNS), 80 when unknown, 60 to 120."""
    return min(max(shutil.get_terminal_size((USUAL, 24)).columns, NARROW), WIDE)


def show(shared: Shared, text: Callable[[], str], data: Callable[[], dict[str, Any]]) -> None:
    """Print an answer: as JSON with --json, else as text. Only the one asked for is made."""
    print(json.dumps(data(), ensure_ascii=False, indent=2) if shared.json else text())


def show_done(shared: Shared, done: Done) -> None:
    """Print what was done and, on standard error, the command that usually follows."""
    show(shared, lambda: _done_text(done), lambda: _done_json(done))
    suggest(done.next)


def suggest(command: str) -> None:
    """Say on standard error which command to try next; nothing for an empty one."""
    if command:
        tell(f"next: {command}")


def tell(line: str) -> None:
    """Say on standard error what is worth knowing and is no part of the answer."""
    print(line, file=sys.stderr)


def _done_text(done: Done) -> str:
    from stockroom.reports.sheet import PRACTICE
    from stockroom.reports.words import raised

    lines = [raised(done.text), *(f"  {raised(detail)}" for detail in done.details)]
    return "\n".join([PRACTICE, *lines] if done.practice else lines)


def _done_json(done: Done) -> dict[str, Any]:
    return {
        "text": done.text,
        "bottle": done.bottle or None,
        "entry": done.entry,
        "practice": done.practice,
        "details": list(done.details),
    }
