"""The stock of a line drawn: steps without orders and with them, its level, orders and days."""

from __future__ import annotations

from datetime import date
from typing import TYPE_CHECKING

from stockroom.measure.amounts import BASE_UNIT
from stockroom.measure.formats import unit_mark
from stockroom.planning.amounts import say
from stockroom.reports.pictures.canvas import FAINT, INK, PAPER, day_axis, short_day
from stockroom.reports.pictures.level import in_units

if TYPE_CHECKING:
    from matplotlib.axes import Axes

    from stockroom.reports.pictures.level import Stock


def draw_level(axes: Axes, stock: Stock) -> None:
    """Draw it; the two lines are told apart by stroke, and both are named above."""
    day_axis(axes, stock.first, stock.last)
    most = max(
        [stock.level or 0, *(max(at.left, at.with_orders) for at in stock.days), 1],
    )
    axes.set_ylim(0, in_units(stock, most) * 1.3)
    axes.set_ylabel(f"left, {unit_mark(BASE_UNIT[stock.kind])}")
    days = [at.on.toordinal() for at in stock.days] + [stock.last.toordinal()]
    if stock.ordered:
        _steps(axes, stock, days, [at.with_orders for at in stock.days], orders=True)
    _steps(axes, stock, days, [at.left for at in stock.days], orders=False)
    _level(axes, stock)
    _falls(axes, stock)
    _due(axes, stock)
    words = "solid: without further orders"
    words += "   dashed: with all that comes" if stock.ordered else ""
    marked = "▼ order by   ▲ comes" if stock.ordered else "nothing is on order or to be ordered"
    axes.text(0.0, 1.04, words, transform=axes.transAxes, va="center")
    axes.text(1.0, 1.04, marked, transform=axes.transAxes, ha="right", va="center")


def _steps(axes: Axes, stock: Stock, days: list[int], row: list[int], *, orders: bool) -> None:
    heights = [in_units(stock, micro) for micro in row]
    axes.step(
        days, [*heights, heights[-1]], where="post", color=INK,
        linewidth=1.4 if orders else 2.4, linestyle=(0, (4, 2)) if orders else "-",
        zorder=3 if orders else 4,
    )  # fmt: skip


def _level(axes: Axes, stock: Stock) -> None:
    if stock.level is None:
        return
    high = in_units(stock, stock.level)
    axes.axhline(high, color=INK, linewidth=1.0, linestyle=(0, (1, 1.5)), zorder=2)
    axes.annotate(
        f"its level {say(stock.level, stock.kind)}", (0.995, high),
        xycoords=axes.get_yaxis_transform(), xytext=(0, 3), textcoords="offset points",
        ha="right", va="bottom", zorder=6, bbox={"facecolor": PAPER, "edgecolor": "none", "pad": 1},
    )  # fmt: skip


def _falls(axes: Axes, stock: Stock) -> None:
    told = ((stock.falls_below, "below its level"), (stock.runs_out, "does not suffice"))
    days: dict[date, list[str]] = {}
    for on, words in told:
        if on is not None:
            days.setdefault(on, []).append(words)
    for on, row in days.items():
        # a day outside is told under the title
        if stock.first <= on <= stock.last:
            _upright(axes, on, f"{', '.join(row)} from {short_day(on)}", weight="bold")


def _due(axes: Axes, stock: Stock) -> None:
    for one in stock.due:
        if one.order_by is not None:
            _mark(axes, one.order_by, "v", f"{one.id} order by {short_day(one.order_by)}")
        if one.comes <= stock.last:
            _mark(axes, one.comes, "^", f"{one.id} comes {short_day(one.comes)}: {one.pack}")


def _mark(axes: Axes, on: date, shape: str, words: str) -> None:
    axes.plot(
        [on.toordinal()], [0.02], marker=shape, markersize=10, color=INK, zorder=7,
        transform=axes.get_xaxis_transform(), clip_on=False,
    )  # fmt: skip
    axes.text(
        on.toordinal() + 0.3, 0.055, words, rotation=90, ha="left", va="bottom", size=9, zorder=7,
        transform=axes.get_xaxis_transform(),
        bbox={"facecolor": PAPER, "edgecolor": "none", "pad": 0.8},
    )  # fmt: skip


def _upright(axes: Axes, on: date, words: str, weight: str) -> None:
    axes.axvline(on.toordinal(), color=FAINT, linewidth=0.8, linestyle=(0, (1, 2)), zorder=1)
    axes.text(
        on.toordinal(), 0.99, f"{words} ", rotation=90, ha="right", va="top", size=9,
        weight=weight, zorder=6, transform=axes.get_xaxis_transform(),
    )  # fmt: skip
