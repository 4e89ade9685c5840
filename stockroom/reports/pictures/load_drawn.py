"""The term's load drawn: bars hatched by what is done, the limit, days over it, closed days."""

from __future__ import annotations

from datetime import date
from typing import TYPE_CHECKING

from stockroom.reports.pictures.canvas import (
    FAINT,
    INK,
    PALE,
    PAPER,
    day_axis,
    frame_mm,
    page_mm,
    wide_mm,
)
from stockroom.reports.pictures.load import runs
from stockroom.reports.pictures.placing import LINE, SIZE_OF_WORDS, Flag, flags, key
from stockroom.reports.words import day_seen_from

if TYPE_CHECKING:
    from matplotlib.axes import Axes

    from stockroom.reports.pictures.load import Load

MAKING, TITRATING, CLOSED = "////", "....", "xx"
"""The hatches of the two kinds of work, and of days with nobody there."""


def draw_load(axes: Axes, load: Load) -> None:
    """Draw it: one bar a day, titrating on top of making, words above what is over."""
    day_axis(axes, load.first, load.last)
    limit = f"dashed: the limit, {load.limit} minutes" if load.limit else ""
    key(axes, limit or " ")
    _patches(axes, load)
    flags(axes, _days(load))
    most = max([load.limit, *(one.minutes for one in load.days), 30])
    axes.set_ylim(0, most * 1.1)
    axes.set_ylabel("hands-on minutes")
    _closed_days(axes, load)
    for hatch, made in ((MAKING, True), (TITRATING, False)):
        for one in load.days:
            high, low = (one.makes, 0) if made else (one.checks, one.makes)
            if high:
                axes.bar(
                    one.on.toordinal(), high, 0.82, bottom=low,
                    facecolor=PAPER, edgecolor=INK, hatch=hatch, linewidth=0.8, zorder=2,
                )  # fmt: skip
    if load.limit:
        axes.axhline(load.limit, color=INK, linewidth=1.6, linestyle=(0, (6, 3)), zorder=3)


def _closed_days(axes: Axes, load: Load) -> None:
    for on in range(load.first.toordinal(), load.last.toordinal() + 1):
        if date.fromordinal(on).weekday() > 4:
            axes.axvspan(on - 0.5, on + 0.5, facecolor="#f4f4f4", linewidth=0, zorder=0)
    for run in runs(load.closed):
        for closed in run:
            on = closed.toordinal()
            axes.axvspan(
                on - 0.5, on + 0.5,
                facecolor=PALE, edgecolor=FAINT, hatch=CLOSED, linewidth=0, zorder=0,
            )  # fmt: skip


def _patches(axes: Axes, load: Load) -> None:
    """Small patches of the hatches with their words, at the right of the key's first line."""
    from matplotlib.patches import Rectangle

    kinds = [("making", MAKING, PAPER, INK), ("titrating", TITRATING, PAPER, INK)]
    kinds += [("closed", CLOSED, PALE, FAINT)] if load.closed else []
    wide, high = page_mm(axes)
    start, bottom, across, tall = frame_mm(axes)
    low, x = bottom + tall + 1.5, start + across
    for what, hatch, face, edge in reversed(kinds):
        x -= wide_mm(what, SIZE_OF_WORDS)
        axes.figure.text(x / wide, low / high, what, size=SIZE_OF_WORDS, va="bottom")
        x -= 9.5
        axes.figure.add_artist(
            Rectangle(
                (x / wide, (low + 0.4) / high),
                8 / wide,
                (LINE - 1) / high,
                facecolor=face,
                edgecolor=edge,
                hatch=hatch,
                linewidth=0.8,
            )
        )
        x -= 5.0


def _days(load: Load) -> list[Flag]:
    """Each day over the limit, and the day looked from."""
    row = [Flag(load.head.as_at, f"today, {day_seen_from(load.head.as_at, load.head.as_at)}")]
    return row + [
        Flag(one.on, f"{day_seen_from(one.on, load.head.as_at)}: {one.over} min over", bold=True)
        for one in load.days
        if one.over
    ]
