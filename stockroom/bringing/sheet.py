"""A table of text as a file held it, whatever the file was."""

from __future__ import annotations

from dataclasses import dataclass

MOST_BYTES = 50_000_000
MOST_ROWS = 100_000
MOST_COLUMNS = 200
"""A list of bottles larger than this is another kind of file. Ours, no source."""


@dataclass(frozen=True, slots=True)
class Sheet:
    """Rows of cells as text, line 1 of the file first; `told` says how it was read.

    `name` is the sheet's in a workbook. `epoch` is the first year of its day numbers, 1900
    or 1904, None where the file does not say.
    """

    rows: tuple[tuple[str, ...], ...]
    told: str
    name: str = ""
    epoch: int | None = None


def trimmed(rows: list[list[str]]) -> tuple[tuple[str, ...], ...]:
    """The rows without the empty ones at the end, nor empty cells at the end of a row."""
    kept = []
    for row in rows:
        cells = [cell.strip() for cell in row]
        while cells and not cells[-1]:
            cells.pop()
        kept.append(tuple(cells))
    while kept and not kept[-1]:
        kept.pop()
    return tuple(kept)
