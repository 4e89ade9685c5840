"""How a bottle keeps which row of which list it was brought in from. Light."""

from __future__ import annotations

import re

_SOURCE = re.compile(
    r"brought in: .*\[(?P<mark>[0-9a-f]+/[0-9]+)(?: (?P<reading>[0-9a-f]+))?\]", re.DOTALL
)


def source_of(file: str, row: int, mark: str, reading: str) -> str:
    """What a bottle keeps of the list it came from: the file, the row, and its two marks.

    `mark` is of the row's text, `reading` of what it was read as.
    """
    return f"brought in: {file}, row {row} [{mark} {reading}]"


def marks_in(source: str) -> tuple[str, str]:
    """The two marks of the row a bottle was brought in from; "" and "" for any other bottle."""
    found = _SOURCE.fullmatch(source)
    return (found["mark"], found["reading"] or "") if found else ("", "")
