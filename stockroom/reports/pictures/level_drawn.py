"""The stock of a line drawn: steps without orders and with them, its level, orders and days."""

from __future__ import annotations

from datetime import date
from typing import TYPE_CHECKING

from stockroom.measure.amounts import BASE_UNIT
from stockroom.measure.formats import unit_mark
from stockroom.planning.amounts import say
from stockroom.reports.pictures.canvas import INK, day_axis
from stockroom.reports.pictures.level import in_units, out_words
from stockroom.reports.pictures.placing import Flag, Name, flags, key, margin, names
from stockroom.reports.words import TIED, day_seen_from

if TYPE_CHECKING:
    from matplotlib.axes import Axes

    from stockroom.reports.pictures.level import Stock


def draw_level(axes: Axes, stock: Stock) -> None:
    """Draw it; the two lines are told apart by stroke, and both are named at their ends."""
    margin(axes)
    day_axis(axes, stock.first, stock.last)
    marked = "▼ order by   ▲ comes" if stock.due else "nothing is on order or to be ordered"
    key(axes, marked, stock.note)
    flags(axes, _days(stock))
    most = max(
        [stock.level or 0, *(max(at.left, at.with_orders) for at in stock.days), 1],
    )
    # with nothing there the scale is still one of whole units
    axes.set_ylim(0, max(in_units(stock, most), 1.0) * 1.1)
    axes.set_ylabel(f"left, {unit_mark(BASE_UNIT[stock.kind])}")
    days = [at.on.toordinal() for at in stock.days] + [stock.last.toordinal()]
    if stock.ordered:
        _steps(axes, stock, days, [at.with_orders for at in stock.days], orders=True)
    _steps(axes, stock, days, [at.left for at in stock.days], orders=False)
    if stock.level is not None:
        high = in_units(stock, stock.level)
        axes.axhline(high, color=INK, linewidth=1.0, linestyle=(0, (1, 1.5)), zorder=2)
    for one in stock.due:
        if one.order_by is not None:
            _mark(axes, one.order_by, "v")
        if one.comes <= stock.last:
            _mark(axes, one.comes, "^")
    names(axes, _names(stock))


def _steps(axes: Axes, stock: Stock, days: list[int], row: list[int], *, orders: bool) -> None:
    heights = [in_units(stock, micro) for micro in row]
    axes.step(
        days, [*heights, heights[-1]], where="post", color=INK,
        linewidth=1.4 if orders else 2.4, linestyle=(0, (4, 2)) if orders else "-",
        zorder=3 if orders else 4,
    )  # fmt: skip


def _mark(axes: Axes, on: date, shape: str) -> None:
    axes.plot(
        [on.toordinal()], [0.02], marker=shape, markersize=9, color=INK, zorder=7,
        transform=axes.get_xaxis_transform(), clip_on=False,
    )  # fmt: skip


def _names(stock: Stock) -> list[Name]:
    end = stock.days[-1]
    solid = "without further orders" if stock.ordered else "left"
    row = [Name(in_units(stock, end.left), f"{solid}: {_say(stock, end.left)}", bold=True)]
    if stock.ordered:
        dashed = f"dashed, with all that comes: {_say(stock, end.with_orders)}"
        row.append(Name(in_units(stock, end.with_orders), dashed))
    if stock.level is not None:
        words = f"its level: {_say(stock, stock.level)}"
        row.append(Name(in_units(stock, stock.level), words))
    return row


def _say(stock: Stock, micro: int) -> str:
    # never a number at the end of one line and its unit on the next
    return say(micro, stock.kind).replace(" ", TIED)


def _days(stock: Stock) -> list[Flag]:
    """What falls on a day; a day outside the picture is told under its title."""
    now = stock.head.as_at
    days: dict[tuple[date, str], list[str]] = {}
    for one in stock.due:
        if one.order_by is not None:
            days.setdefault((one.order_by, "order by"), []).append(one.id)
        days.setdefault((one.comes, "comes"), []).append(f"{one.id} ({one.pack})")
    row = [
        Flag(on, f"{_listed(row)} {verb} {day_seen_from(on, now)}")
        for (on, verb), row in days.items()
    ]
    falls: dict[date, list[str]] = {}
    for on, words in ((stock.falls_below, "below its level"), (stock.runs_out, out_words(stock))):
        if on is not None:
            falls.setdefault(on, []).append(words)
    for on, told in falls.items():
        words = ", ".join(told)
        already = on <= now
        words = f"already {words}" if already else f"{words} from {day_seen_from(on, now)}"
        row.append(Flag(on, words, bold=True))
    return row


def _listed(row: list[str]) -> str:
    return ", ".join(row) if len(row) <= 3 else f"{row[0]}, {row[1]} and {len(row) - 2} more"
