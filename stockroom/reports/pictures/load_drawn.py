"""The term's load drawn: bars hatched by what is done, the limit, days over it, closed days."""

from __future__ import annotations

from datetime import date
from typing import TYPE_CHECKING

from stockroom.reports.pictures.canvas import (
    FAINT,
    INK,
    PALE,
    PAPER,
    as_at_line,
    day_axis,
    short_day,
)
from stockroom.reports.pictures.load import runs

if TYPE_CHECKING:
    from matplotlib.axes import Axes

    from stockroom.reports.pictures.load import Load

MAKING, TITRATING = "////", "...."
"""The hatches of the two kinds of work."""


def draw_load(axes: Axes, load: Load) -> None:
    """Draw it: one bar a day, titrating on top of making, words over what is over."""
    day_axis(axes, load.first, load.last)
    most = max([load.limit, *(one.minutes for one in load.days), 30])
    # room for the words over a full day
    axes.set_ylim(0, most * (1.6 if any(one.over for one in load.days) else 1.25))
    axes.set_ylabel("hands-on minutes")
    _closed_days(axes, load)
    for what, hatch, made in (("making", MAKING, True), ("titrating", TITRATING, False)):
        for one in load.days:
            high, low = (one.makes, 0) if made else (one.checks, one.makes)
            if high:
                axes.bar(
                    one.on.toordinal(), high, 0.82, bottom=low,
                    facecolor=PAPER, edgecolor=INK, hatch=hatch, linewidth=0.8, zorder=2,
                )  # fmt: skip
        _key(axes, what, hatch, made=made)
    if load.limit:
        _limit(axes, load)
    _over(axes, load)
    as_at_line(axes, load.head.as_at)


def _closed_days(axes: Axes, load: Load) -> None:
    for on in range(load.first.toordinal(), load.last.toordinal() + 1):
        if date.fromordinal(on).weekday() > 4:
            axes.axvspan(on - 0.5, on + 0.5, facecolor="#f4f4f4", linewidth=0, zorder=0)
    for run in runs(load.closed):
        for closed in run:
            on = closed.toordinal()
            axes.axvspan(
                on - 0.5, on + 0.5,
                facecolor=PALE, edgecolor=FAINT, hatch="xx", linewidth=0, zorder=0,
            )  # fmt: skip
        axes.text(
            (run[0].toordinal() + run[-1].toordinal()) / 2, 0.98, "closed",
            rotation=90, ha="center", va="top", size=9, zorder=4,
            transform=axes.get_xaxis_transform(),
            bbox={"facecolor": PAPER, "edgecolor": "none", "pad": 1.0},
        )  # fmt: skip


def _key(axes: Axes, what: str, hatch: str, *, made: bool) -> None:
    """A small patch of the hatch with its word, above the bars."""
    from matplotlib.patches import Rectangle

    left = 0.0 if made else 0.13
    patch = Rectangle(
        (left, 1.02), 0.03, 0.04, transform=axes.transAxes, clip_on=False,
        facecolor=PAPER, edgecolor=INK, hatch=hatch, linewidth=0.8,
    )  # fmt: skip
    axes.add_patch(patch)
    axes.text(left + 0.036, 1.04, what, transform=axes.transAxes, va="center")


def _limit(axes: Axes, load: Load) -> None:
    axes.axhline(load.limit, color=INK, linewidth=1.6, linestyle=(0, (6, 3)), zorder=3)
    # above the bars: wherever on the line it stood, a full day could stand under it
    axes.text(
        1.0, 1.04, f"dashed: the limit, {load.limit} minutes", ha="right", va="center",
        transform=axes.transAxes, weight="bold",
    )  # fmt: skip


def _over(axes: Axes, load: Load) -> None:
    # upright words: two full days may stand side by side
    for one in load.days:
        if one.over:
            axes.text(
                one.on.toordinal(), one.minutes, f" {short_day(one.on)}: {one.over} min over",
                rotation=90, ha="center", va="bottom", size=9, weight="bold", zorder=4,
            )  # fmt: skip
