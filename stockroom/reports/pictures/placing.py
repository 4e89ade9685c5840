"""Where the words of a picture stand: none in the plot, so that none lies over another or a line.

The key is above the plot, what falls on a day is a flag above its day, and a level is named at
its right end. Each takes its room from the axes, so the order of the calls is the order of paper:
`margin`, days, `key`, `flags`, heights, `names`. Our choice of layout.
"""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date
from typing import TYPE_CHECKING

from stockroom.reports.pictures.canvas import FAINT, PAPER, fitted, frame_mm, page_mm, wide_mm

if TYPE_CHECKING:
    from matplotlib.axes import Axes

SIZE_OF_WORDS, LINE = 9.0, 4.3
"""Points of the words, and mm from one line of them to the next."""

MARGIN, EDGE = 62.0, 6.0
"""Mm kept at the right for the names of levels, and at the edge of the paper."""

_BACK = {"facecolor": PAPER, "edgecolor": "none", "pad": 0.6}
# mm between a flag and its line, and between two flags
_ASIDE, _GAP = 0.9, 2.5

# words to the left of their day are taken only to spare this many rows
_LEFT_SIDE = 3

# more of the plot than this is never given up for flags whose lines cross no words
_MOST_OF_PLOT = 0.45


@dataclass(frozen=True, slots=True)
class Flag:
    """Words of one day, above it."""

    on: date
    words: str
    bold: bool = False


@dataclass(frozen=True, slots=True)
class Name:
    """What a level is called; `height` is in the units of the picture's scale."""

    height: float
    words: str
    bold: bool = False


@dataclass(frozen=True, slots=True)
class Set:
    """A flag set: its day at `x`, its words from `start` to `end`, mm; row 0 is the lowest."""

    x: float
    start: float
    end: float
    row: int


def take(axes: Axes, *, top: float = 0.0, right: float = 0.0) -> None:
    """Make the plot smaller by so many mm."""
    wide, high = page_mm(axes)
    box = axes.get_position()
    axes.set_position((box.x0, box.y0, box.width - right / wide, box.height - top / high))


def margin(axes: Axes) -> None:
    """Keep room at the right for the names of levels."""
    take(axes, right=MARGIN)


def key(axes: Axes, left: str, right: str = "") -> None:
    """Two texts above the plot: beside each other where they fit, else one under the other."""
    wide, high = page_mm(axes)
    start = frame_mm(axes)[0]
    room = wide - EDGE - start
    both = wide_mm(left, SIZE_OF_WORDS) + wide_mm(right, SIZE_OF_WORDS) + 8.0 <= room
    rows = [left] if both else [*fitted(left, SIZE_OF_WORDS, room)]
    rows += [] if both else fitted(right, SIZE_OF_WORDS, room)
    for number, words in enumerate(rows):
        _, bottom, _, tall = frame_mm(axes)
        take(axes, top=LINE)
        low = (bottom + tall - LINE) / high
        axes.figure.text(start / wide, low, words, size=SIZE_OF_WORDS, va="bottom")
        if both and right and number == 0:
            edge = (wide - EDGE) / wide
            axes.figure.text(edge, low, right, size=SIZE_OF_WORDS, va="bottom", ha="right")
    take(axes, top=1.5)


# -- flags above their days -------------------------------------------------------------


def flags(axes: Axes, row: list[Flag]) -> None:
    """Each flag above its day, in as many rows as keep their words apart, a thin line down."""
    from matplotlib.lines import Line2D

    wide, high = page_mm(axes)
    start, bottom, across, tall = frame_mm(axes)
    first, last = axes.get_xlim()
    shown = sorted((one for one in row if first <= one.on.toordinal() <= last), key=_by_day)
    at = [start + (one.on.toordinal() - first) / (last - first) * across for one in shown]
    widths = [wide_mm(one.words, SIZE_OF_WORDS, _weight(one.bold)) for one in shown]
    wanted = list(zip(at, widths, strict=True))
    places = set_flags(wanted, EDGE, wide - EDGE)
    if max((one.row for one in places), default=0) * LINE > _MOST_OF_PLOT * tall:
        places = set_flags(wanted, EDGE, wide - EDGE, close=True)
    take(axes, top=(max((one.row for one in places), default=-1) + 1) * LINE + 1.0)
    base = frame_mm(axes)[1] + frame_mm(axes)[3] + 1.0
    for one, place in zip(shown, places, strict=True):
        low = base + place.row * LINE
        axes.figure.text(
            place.start / wide, low / high, one.words, size=SIZE_OF_WORDS,
            weight=_weight(one.bold), va="bottom", bbox=_BACK, zorder=6,
        )  # fmt: skip
        # under everything: where it must pass behind other words, they stay readable
        axes.figure.add_artist(
            Line2D(
                [place.x / wide] * 2,
                [bottom / high, (low + LINE * 0.8) / high],
                color=FAINT,
                linewidth=0.8,
                linestyle=(0, (1, 2)),
                zorder=-0.5,
            )
        )


def _by_day(flag: Flag) -> tuple[date, str]:
    return flag.on, flag.words


def _weight(bold: bool) -> str:
    return "bold" if bold else "normal"


def set_flags(
    wanted: list[tuple[float, float]], left: float, right: float, *, close: bool = False
) -> list[Set]:
    """Places for flags (day, width of words), mm: no two words touch; few lines cross words.

    Set from the right, beside their day: words run to the right, so those further left pass
    above. Words wider than the paper start at its left edge. `close` takes the fewest rows,
    and lets lines pass behind words.
    """
    found: list[Set] = []
    for x, width in reversed(wanted):
        sides = [x + _ASIDE] if x + _ASIDE + width <= right else []
        sides += [x - _ASIDE - width] if x - _ASIDE - width >= left else []
        sides = sides or [max(left, right - width)]
        tries = [
            Set(x, start, start + width, row) for row in range(len(found) + 1) for start in sides
        ]
        free = [one for one in tries if not any(_touch(one, other) for other in found)]
        found.append(min(free, key=lambda one: _cost(one, found, close=close)))
    return found[::-1]


def _cost(one: Set, found: list[Set], *, close: bool) -> tuple[int, int]:
    crossed = _crossed(one, found)
    if close:
        return one.row, crossed
    return crossed, one.row + _LEFT_SIDE * (one.start < one.x)


def _touch(one: Set, other: Set) -> bool:
    return one.row == other.row and one.start < other.end + _GAP and other.start < one.end + _GAP


def _crossed(one: Set, found: list[Set]) -> int:
    """How often its line passes through words, or the line of another through its own."""
    return sum(
        (other.row > one.row and one.start - _ASIDE < other.x < one.end + _ASIDE)
        + (other.row < one.row and other.start - _ASIDE < one.x < other.end + _ASIDE)
        for other in found
    )


# -- names at the right -----------------------------------------------------------------


def names(axes: Axes, row: list[Name]) -> None:
    """Each level named in the margin at its height, moved as far as keeps the words apart."""
    wide, high = page_mm(axes)
    start, bottom, across, tall = frame_mm(axes)
    low, top = axes.get_ylim()
    row = sorted(row, key=lambda one: (one.height, one.words))
    points, blocks = _fitting(row, tall)
    line = LINE * points / SIZE_OF_WORDS
    at = [bottom + (one.height - low) / (top - low) * tall for one in row]
    deep = [len(lines) * line for lines in blocks]
    edge = start + across
    for one, middle, y, lines in zip(row, at, apart(at, deep, bottom, tall), blocks, strict=True):
        centre = y + len(lines) * line / 2
        _lead(axes, (edge, middle), (edge + 6.0, centre))
        for number, words in enumerate(lines):
            axes.figure.text(
                (edge + 7.0) / wide, (y + (len(lines) - number - 0.5) * line) / high, words,
                size=points, weight=_weight(one.bold), va="center_baseline", bbox=_BACK, zorder=6,
            )  # fmt: skip


def _fitting(row: list[Name], tall: float) -> tuple[float, list[list[str]]]:
    """The size at which they all have room, and their lines."""
    points = SIZE_OF_WORDS
    while True:
        room = MARGIN - 7.0 - EDGE
        blocks = [fitted(one.words, points, room, _weight(one.bold)) for one in row]
        deep = sum(map(len, blocks)) * LINE * points / SIZE_OF_WORDS
        if deep <= tall or points <= 5.0:
            return points, blocks
        points -= 0.5


def apart(at: list[float], deep: list[float], bottom: float, tall: float) -> list[float]:
    """The feet of blocks as near their heights as keeps them apart, low ones first, mm."""
    feet: list[float] = []
    for middle, block in zip(at, deep, strict=True):
        floor = feet[-1] + deep[len(feet) - 1] if feet else bottom
        feet.append(max(floor, middle - block / 2))
    ceiling = bottom + tall
    for number in reversed(range(len(feet))):
        feet[number] = min(feet[number], ceiling - deep[number])
        ceiling = feet[number]
    return feet


def _lead(axes: Axes, start: tuple[float, float], end: tuple[float, float]) -> None:
    from matplotlib.lines import Line2D

    wide, high = page_mm(axes)
    ends = [start[0] / wide, end[0] / wide], [start[1] / high, end[1] / high]
    axes.figure.add_artist(Line2D(*ends, color=FAINT, linewidth=0.6))
