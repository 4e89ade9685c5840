"""Five lines or fewer, none longer than two rows of a terminal: the law of every `why`."""

from __future__ import annotations

import textwrap
from collections.abc import Iterable

# what fits on a phone beside a bench, and what a person reads at all
LINES = 5
COLUMNS = 100
ROWS = 2
"""A line is told whole in two rows of a hundred columns. Our choice."""


def folded(lines: Iterable[str]) -> tuple[str, ...]:
    """At most five lines of at most two rows each.

    What is over is joined to the fifth; where that grows too long, the shortest
    neighbours are put together instead. What fits nowhere is counted, never dropped unsaid.
    """
    row = [line for line in lines if line]
    if len(row) > LINES and not fits("; ".join(row[LINES - 1 :])):
        row = _paired(row)
    if len(row) > LINES:
        row = [*row[: LINES - 1], "; ".join(row[LINES - 1 :])]
    return tuple(in_two(line) for line in row)


def fits(line: str) -> bool:
    """True when a line takes two rows or fewer, broken between words."""
    if len(line) > COLUMNS * ROWS:
        return False
    return len(line) <= COLUMNS or len(_broken(line)) <= ROWS


def in_two(line: str) -> str:
    """A line cut to two rows: its last parts are left off and counted, "and 3 more"."""
    if fits(line):
        return line
    for mark in ("; ", ", "):
        parts = line.split(mark)
        for kept in range(len(parts) - 1, 0, -1):
            short = f"{mark.join(parts[:kept])} and {len(parts) - kept} more"
            if fits(short):
                return short
    # one long sentence without a stop: its first two rows, and a sign that it goes on
    return " ".join(_broken(line[: COLUMNS * ROWS])[:ROWS])[: COLUMNS * ROWS - 12].rstrip() + " …"


def _broken(line: str) -> list[str]:
    return textwrap.wrap(line, COLUMNS, break_on_hyphens=False)


def _paired(row: list[str]) -> list[str]:
    """Neighbours joined, the shortest first, until there are five or no two fit together."""
    row = list(row)
    while len(row) > LINES:
        # the first line names what is asked about, and stays alone
        pairs = [(len(row[n]) + len(row[n + 1]), n) for n in range(1, len(row) - 1)]
        fitting = [(size, n) for size, n in pairs if fits(f"{row[n]}; {row[n + 1]}")]
        if not fitting:
            return row
        _, first = min(fitting)
        row[first : first + 2] = [f"{row[first]}; {row[first + 1]}"]
    return row
