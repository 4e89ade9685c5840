"""The paper pictures are drawn on: sizes in mm, our typeface, black and greys, the same bytes.

matplotlib is imported inside the functions, and without its `pyplot`, which keeps what it drew.
"""

from __future__ import annotations

import io
from collections.abc import Callable, Iterator
from contextlib import contextmanager
from datetime import date, timedelta
from functools import cache
from typing import TYPE_CHECKING, Any

from stockroom.reports.paper.head import Head
from stockroom.reports.sheet import PRACTICE
from stockroom.reports.shipped import FACE, font_folder
from stockroom.reports.words import day, day_and_month

if TYPE_CHECKING:
    from matplotlib.axes import Axes
    from matplotlib.figure import Figure

INK, FAINT, PALE, PAPER = "#000000", "#595959", "#e6e6e6", "#ffffff"
"""All there is: ink, a grey that still prints as a line, a grey to lay under things, paper."""

SIZE = (260.0, 150.0)
"""A picture that fills an A4 page laid on its side, mm."""

DOTS = 150
"""Dots to the inch of a PNG."""

_MM, _POINT = 1 / 25.4, 72 / 25.4
_FACES = ("Regular", "Bold")
_LEFT, _RIGHT = 17.0, 6.0
_LARGE = 100.0
# mm that the name of a day under the plot needs
_TICK = 13.0
# dots of a PNG are set to whole ones, and letters grow by up to so much
_HINTED = 1.04

Draw = Callable[["Axes"], None]


def drawn(
    head: Head, draw: Draw, form: str, size: tuple[float, float] = SIZE, *, bare: bool = True
) -> bytes:
    """A picture as "svg" or "png"; the same facts give the same bytes.

    `bare` ones carry title, house and caution themselves; those of a page leave that to it.
    """
    from matplotlib.figure import Figure

    with _our_style():
        dots = DOTS if form == "png" else 72
        figure = Figure(figsize=(size[0] * _MM, size[1] * _MM), facecolor=PAPER, dpi=dots)
        above, below = _framed(figure, head, size) if bare else (1.5, 13.0)
        axes = figure.add_axes(
            (
                _LEFT / size[0],
                below / size[1],
                (size[0] - _LEFT - _RIGHT) / size[0],
                (size[1] - above - below) / size[1],
            )
        )
        for side in ("top", "right"):
            axes.spines[side].set_visible(False)
        # what lies under the plot, the lines of days, shows through
        axes.patch.set_visible(False)
        draw(axes)
        return _written(figure, form)


def page_mm(axes: Axes) -> tuple[float, float]:
    """How wide and high the whole picture is, mm."""
    wide, high = axes.figure.get_size_inches()  # type: ignore[union-attr]
    return float(wide) / _MM, float(high) / _MM


def frame_mm(axes: Axes) -> tuple[float, float, float, float]:
    """Where the plot is, mm from the left and the foot of the picture, its width and height."""
    (wide, high), box = page_mm(axes), axes.get_position()
    return box.x0 * wide, box.y0 * high, box.width * wide, box.height * high


@contextmanager
def _our_style() -> Iterator[None]:
    import warnings

    import matplotlib

    style: dict[str, Any] = {
        "font.family": _families(),
        "font.size": 10.0,
        # a name may have a dollar in it, and is no formula
        "text.parse_math": False,
        "svg.fonttype": "path",
        "svg.hashsalt": "stockroom",
        "hatch.linewidth": 0.7,
        "axes.linewidth": 0.8,
    }
    # pyplot's own settings of the machine take no part
    with matplotlib.rc_context(), warnings.catch_warnings():
        matplotlib.rcdefaults()
        matplotlib.rcParams.update(style)  # type: ignore[arg-type]
        # a name in letters no face has is drawn with boxes: no reason to print nothing
        warnings.filterwarnings("ignore", message="Glyph .* missing")
        yield


@cache
def _families() -> list[str]:
    from matplotlib import font_manager

    folder = font_folder()
    for name in _FACES if folder else ():
        font_manager.fontManager.addfont(f"{folder}/SourceSansPro-{name}.ttf")
    return [FACE, "DejaVu Sans"] if folder else ["DejaVu Sans"]


def _written(figure: Figure, form: str) -> bytes:
    out = io.BytesIO()
    if form == "svg":
        from matplotlib.backends.backend_svg import FigureCanvasSVG

        canvas: Any = FigureCanvasSVG(figure)
        canvas.print_svg(out, metadata={"Date": None, "Creator": None})
        return out.getvalue()
    from matplotlib.backends.backend_agg import FigureCanvasAgg

    canvas = FigureCanvasAgg(figure)
    canvas.print_png(out, metadata={"Software": None})
    return out.getvalue()


# -- title and foot of a bare picture ---------------------------------------------------


def _framed(figure: Figure, head: Head, size: tuple[float, float]) -> tuple[float, float]:
    """Draw what stands above and below; mm taken at the top and at the bottom."""
    wide, high = size
    room = wide - 12.0
    top = 5.0
    for line, points, weight in _titles(head, room):
        figure.text(6 / wide, 1 - top / high, line, size=points, weight=weight, va="top")
        top += points * 1.3 / _POINT
    foot = 4.0
    words = f"as at {day(head.as_at)}. {head.caution}"
    for line in reversed(fitted(words, 7.5, room, "normal")):
        figure.text(6 / wide, foot / high, line, size=7.5, va="bottom")
        foot += 7.5 * 1.3 / _POINT
    if head.practice:
        _overprinted(figure)
    return top + 2.0, foot + 12.0


def _titles(head: Head, room: float) -> list[tuple[str, float, str]]:
    """The lines above, their points and weight; long ones step down in size, then wrap."""
    house = f"{head.house}   {PRACTICE}" if head.practice else head.house
    for points in (18.0, 14.0, 11.0):
        small, middle = min(9.0, points * 0.75), min(11.0, points * 0.85)
        rows = [
            (line, size, weight)
            for text, size, weight in (
                (house, small, "bold" if head.practice else "normal"),
                (head.title, points, "bold"),
                (head.about, middle, "normal"),
            )
            for line in (fitted(text, size, room, weight) if text else [])
        ]
        if len(rows) <= 4:
            break
    return rows


def _overprinted(figure: Figure) -> None:
    from matplotlib.font_manager import FontProperties
    from matplotlib.patches import PathPatch
    from matplotlib.textpath import TextPath
    from matplotlib.transforms import Affine2D

    face = FontProperties(family=_families(), weight="bold", size=96)
    path = TextPath((0, 0), PRACTICE, prop=face)
    box, scale = path.get_extents(), figure.dpi / 72
    centre = Affine2D().translate(-(box.x0 + box.x1) / 2, -(box.y0 + box.y1) / 2)
    middle = figure.bbox.width / 2, figure.bbox.height * 0.48
    placed = centre.rotate_deg(24).scale(scale).translate(*middle)
    # an outline in grey, so that nothing under it is hidden
    outline = PathPatch(path, fill=False, edgecolor="#a0a0a0", linewidth=0.8, transform=placed)
    figure.add_artist(outline)


def fitted(text: str, points: float, width_mm: float, weight: str = "normal") -> list[str]:
    """A text in lines no wider than so many mm; a word longer than a line is broken."""
    lines, line = [], ""
    for word in text.split(" "):
        longer = f"{line} {word}".strip()
        if wide_mm(longer, points, weight) <= width_mm:
            line = longer
            continue
        lines += [line] if line else []
        line = word
        while wide_mm(line, points, weight) > width_mm and len(line) > 1:
            cut = _cut(line, points, width_mm, weight)
            lines.append(line[:cut])
            line = line[cut:]
    return [*lines, line] if line else lines


def _cut(word: str, points: float, width_mm: float, weight: str) -> int:
    fits, over = 1, len(word)
    while over - fits > 1:
        middle = (fits + over) // 2
        if wide_mm(word[:middle], points, weight) > width_mm:
            over = middle
        else:
            fits = middle
    return fits


def wide_mm(text: str, points: float, weight: str = "normal") -> float:
    """How wide a line of text is printed at most, mm; asked while a picture is drawn.

    The sum of its letters, so that a text of any length is measured at once.
    """
    return sum(_letter(one, weight) for one in text) * points * _HINTED / _POINT


@cache
def _letter(letter: str, weight: str) -> float:
    """How far a letter takes the line on, in parts of the size of the type."""
    from matplotlib.font_manager import FontProperties
    from matplotlib.textpath import TextPath

    face = FontProperties(family=_families(), weight=weight, size=_LARGE)
    # between two letters, for a space has no shape of its own
    ends = [TextPath((0, 0), text, prop=face).vertices[:, 0].max() for text in (f"{letter}I", "I")]
    return float(ends[0] - ends[1]) / _LARGE


# -- days along the foot ----------------------------------------------------------------


def day_axis(axes: Axes, first: date, last: date) -> None:
    """Days from left to right, half a day of room at each end, a tick on each Monday.

    A day is its ordinal number; with many weeks only every second, fourth... is named.
    """
    start, end = first.toordinal(), last.toordinal()
    axes.set_xlim(start - 0.7, end + 0.7)
    mondays = [on for on in range(start, end + 1) if (on - 1) % 7 == 0]
    step, across = 1, frame_mm(axes)[2]
    while len(mondays) / step > across / _TICK:
        step *= 2
    # a stretch within one week has no Monday to name
    ticks = mondays[::step] or [start]
    names = [_short(date.fromordinal(on), first) for on in ticks]
    axes.set_xticks(ticks, names)
    axes.set_xticks(mondays, minor=True)
    axes.tick_params(axis="x", length=5, width=0.8)


def _short(on: date, first: date) -> str:
    name = day_and_month(on)
    # the year where it changes, and at the start
    turned = on.year != (on - timedelta(days=7)).year or on - first < timedelta(days=7)
    return f"{name}\n{on.year}" if turned else name
