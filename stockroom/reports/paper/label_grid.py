"""Sizes of labels, and how they stand on a sheet of them: all in mm, all as typed.

Nobody's sheets are known here by name: count, size, margins and gaps say all there is.
"""

from __future__ import annotations

import re
from dataclasses import dataclass

from stockroom.errors import BadInput

PAPER_MM = {"A4": (210.0, 297.0), "Letter": (215.9, 279.4)}
"""Width and height of the papers. Source: ISO 216; ANSI/ASME Y14.1 (8.5 by 11 inches)."""

FULL, STRIP, SHORT = (70.0, 37.0), (50.0, 15.0), (50.0, 20.0)
"""The sizes usually printed. Our choice; the first two fit their sheets three and four across."""

EDGE = 4.0
"""mm along the edge of the paper that many printers leave blank. Our choice."""

SLACK = 0.05
"""mm by which sums of typed figures may be over: they are rounded."""

_PAIR = r"([0-9]+(?:\.[0-9]+)?)"
_SIZE = re.compile(rf"{_PAIR} ?[x×] ?{_PAIR}(?: ?mm)?", re.IGNORECASE)
_TWO = re.compile(rf"{_PAIR} ?, ?{_PAIR}(?: ?mm)?")
_COUNT = re.compile(r"([0-9]{1,2}) ?[x×] ?([0-9]{1,2})", re.IGNORECASE)


@dataclass(frozen=True, slots=True)
class Grid:
    """A sheet of labels: how many across and down, where the first begins, the gaps between.

    `start` is the place of the first label to print, 1 for a fresh sheet, counted across first.
    """

    across: int
    down: int
    left: float
    top: float
    gap_across: float = 0.0
    gap_down: float = 0.0
    start: int = 1

    @property
    def places(self) -> int:
        """How many labels a sheet has."""
        return self.across * self.down


def size_of(text: str | None, usual: tuple[float, float]) -> tuple[float, float]:
    """A typed size, "70x37", else the usual one. Not smaller than the usual, nor above 200 mm.

    Raises: BadInput for one that cannot be read, or that the words do not fit on.
    """
    if text is None:
        return usual
    found = _SIZE.fullmatch(text.strip())
    if not found:
        raise BadInput(f"--size {text}: width and height in mm?", "Write it so: --size 70x37.")
    wide, high = float(found[1]), float(found[2])
    if wide < usual[0] or high < usual[1]:
        raise BadInput(
            f"--size {text}: too small for what stands on it.",
            f"At least {usual[0]:g}x{usual[1]:g} mm for this label.",
        )
    for side, name in ((wide, "wide"), (high, "high")):
        if side > _LARGEST:
            raise BadInput(
                f"--size {text}: {side:g} mm {name} is no label.",
                f"At most {_LARGEST:g} mm each way.",
            )
    return wide, high


_LARGEST = 200.0


def grid_of(sheet: str | None, margin: str | None, gap: str | None, start: int) -> Grid | None:
    """The sheet meant by "3x8" with its margins (left,top) and gaps (across,down), None for none.

    Raises: BadInput for what cannot be read, or was given without --sheet.
    """
    if sheet is None:
        if margin or gap or start != 1:
            raise BadInput(
                "--margin, --gap and --start are of a sheet of labels.", "Add --sheet 3x8."
            )
        return None
    found = _COUNT.fullmatch(sheet.strip())
    if not found or 0 in (int(found[1]), int(found[2])):
        raise BadInput(f"--sheet {sheet}: how many across and down?", "Write it so: --sheet 3x8.")
    grid = Grid(
        int(found[1]),
        int(found[2]),
        *_two(margin, "--margin", "left,top"),
        *_two(gap, "--gap", "across,down"),
        start,
    )
    if not 1 <= start <= grid.places:
        raise BadInput(
            f"--start {start}: a sheet {sheet} has places 1 to {grid.places}.",
            "Count across first, from the top left.",
        )
    return grid


def check_fits(grid: Grid, size: tuple[float, float], paper: str) -> None:
    """Nothing if the sheet fits on the paper. Raises: BadInput with what it wants."""
    wide, high = PAPER_MM[paper]
    across, along = _reach(grid, size)
    if across > wide + SLACK or along > high + SLACK:
        raise BadInput(
            f"{grid.across}x{grid.down} labels of {size[0]:g}x{size[1]:g} mm want"
            f" {across:g} x {along:g} mm; {paper} has {wide:g} x {high:g} mm.",
            "Give fewer, smaller ones, or --margin and --gap as they are on the sheet.",
        )


def from_edge(grid: Grid, size: tuple[float, float], paper: str) -> float:
    """How far the outermost labels are from the nearest edge of the paper, in mm."""
    wide, high = PAPER_MM[paper]
    across, along = _reach(grid, size)
    return min(grid.left, grid.top, wide - across, high - along)


def _reach(grid: Grid, size: tuple[float, float]) -> tuple[float, float]:
    """Where the last label across and the last one down end, in mm."""
    across = grid.left + grid.across * size[0] + (grid.across - 1) * grid.gap_across
    along = grid.top + grid.down * size[1] + (grid.down - 1) * grid.gap_down
    return across, along


def _two(text: str | None, option: str, said: str) -> tuple[float, float]:
    if text is None:
        return 0.0, 0.0
    found = _TWO.fullmatch(text.strip())
    if not found:
        raise BadInput(f"{option} {text}: {said} in mm?", f"Write it so: {option} 7.5,12.")
    return float(found[1]), float(found[2])
