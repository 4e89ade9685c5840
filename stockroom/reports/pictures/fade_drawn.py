"""The fade of a bottle drawn: found points, the expected line, its band, what is needed."""

from __future__ import annotations

from datetime import date
from typing import TYPE_CHECKING

from stockroom.measure.formats import format_number
from stockroom.reports.pictures.canvas import FAINT, INK, PALE, PAPER, day_axis, short_day

if TYPE_CHECKING:
    from matplotlib.axes import Axes

    from stockroom.keeping.course import Mark
    from stockroom.reports.pictures.fade import Fade

# two standard uncertainties to each side, about 95 %
_REACH = 1.960


def draw_fade(axes: Axes, fade: Fade) -> None:
    """Draw it, every line named where it runs."""
    day_axis(axes, fade.curve[0].on, fade.curve[-1].on)
    _heights(axes, fade)
    axes.set_ylabel(f"strength, {fade.unit}")
    _band(axes, fade)
    _label(axes, fade)
    days = [point.on.toordinal() for point in fade.curve]
    axes.plot(days, [p.expected for p in fade.curve], color=INK, linewidth=2.2, zorder=4)
    _found(axes, fade)
    _needs(axes, fade)
    _upright(axes, fade.head.as_at, "today", at=0.99)
    if fade.recheck:
        _upright(axes, fade.recheck, f"recheck by {short_day(fade.recheck)}", at=0.99)
    _named(axes, fade)


def _heights(axes: Axes, fade: Fade) -> None:
    row = [p.expected for p in fade.curve] + [one.strength for one in fade.found]
    row += [mark.strength for mark in fade.wanted]
    row += [fade.nominal] if fade.nominal is not None else []
    row += [end for p in fade.curve for end in (p.low, p.high) if end is not None]
    low, high = min(row), max(row)
    room = max(high - low, 0.05 * high)
    axes.set_ylim(max(0.0, low - 0.28 * room), high + 0.18 * room)


def _band(axes: Axes, fade: Fade) -> None:
    known = [p for p in fade.curve if p.low is not None and p.high is not None]
    if not known:
        axes.text(1.0, 1.04, fade.no_band, transform=axes.transAxes, ha="right", va="center")
        return
    days = [p.on.toordinal() for p in known]
    lows, highs = [p.low or 0.0 for p in known], [p.high or 0.0 for p in known]
    axes.fill_between(days, lows, highs, facecolor=PALE, linewidth=0, zorder=1)
    for ends in (lows, highs):
        axes.plot(days, ends, color=FAINT, linewidth=0.8, zorder=2)
    axes.text(
        1.0, 1.04, "grey: where the line of its own checks lies, 95 % sure",
        transform=axes.transAxes, ha="right", va="center",
    )  # fmt: skip


def _label(axes: Axes, fade: Fade) -> None:
    if fade.nominal is not None:
        axes.axhline(fade.nominal, color=INK, linewidth=1.0, linestyle=(0, (6, 3)), zorder=2)
        axes.annotate(
            f"label {fade.label}", (0.005, fade.nominal),
            xycoords=axes.get_yaxis_transform(), xytext=(0, 3), textcoords="offset points",
            va="bottom", zorder=5,
        )  # fmt: skip


def _found(axes: Axes, fade: Fade) -> None:
    for one in fade.found:
        on = one.on.toordinal()
        if one.uncertainty is not None:
            axes.errorbar(
                [on], [one.strength], yerr=[_REACH * one.uncertainty],
                color=INK, capsize=4, linewidth=1.2, zorder=5,
            )  # fmt: skip
        axes.plot([on], [one.strength], marker="o", markersize=8, color=INK, zorder=6)
    # many checks: the first and the last are told, the others can be read
    told = fade.found if len(fade.found) <= 4 else (fade.found[0], fade.found[-1])
    for one in told:
        axes.annotate(
            f"found {format_number(one.strength, 4)}", (one.on.toordinal(), one.strength),
            xytext=(7, 4), textcoords="offset points", ha="left", va="bottom",
            size=9, weight="bold", zorder=7,
        )  # fmt: skip


def _needs(axes: Axes, fade: Fade) -> None:
    first, last = fade.curve[0].on, fade.curve[-1].on
    for strength, marks in _by_strength(fade.wanted):
        dated = [m for m in marks if m.by is not None and first <= m.by <= last]
        axes.axhline(strength, color=INK, linewidth=1.0, linestyle=(0, (1, 1.5)), zorder=3)
        for mark in dated:
            assert mark.by is not None
            axes.plot(
                [mark.by.toordinal()], [strength], color=INK, marker="v",
                markersize=9, markeredgewidth=1.4,
                markeredgecolor=INK, markerfacecolor=INK if mark.in_time else PAPER, zorder=6,
            )  # fmt: skip
        _need(axes, fade, strength, _need_words(strength, marks, fade.unit))
        below = marks[0].on
        if below is not None and first < below <= last:
            axes.plot([below.toordinal()], [strength], marker="x", markersize=10,
                      markeredgewidth=2.2, color=INK, zorder=7)  # fmt: skip
            _upright(axes, below, f"below {format_number(strength, 3)} from {short_day(below)}")


def _need(axes: Axes, fade: Fade, strength: float, words: str) -> None:
    """Its words, where the expected line does not run: right above it, else left below."""
    low, high = axes.get_ylim()
    clear = strength - fade.curve[-1].expected > 0.12 * (high - low)
    axes.annotate(
        words, (0.995 if clear else 0.005, strength), xycoords=axes.get_yaxis_transform(),
        xytext=(0, 7 if clear else -3), textcoords="offset points", size=9, zorder=7,
        ha="right" if clear else "left", va="bottom" if clear else "top",
    )  # fmt: skip


def _by_strength(wanted: tuple[Mark, ...]) -> list[tuple[float, list[Mark]]]:
    found: dict[float, list[Mark]] = {}
    for mark in wanted:
        found.setdefault(mark.strength, []).append(mark)
    return sorted(found.items())


def _need_words(strength: float, marks: list[Mark], unit: str) -> str:
    booked = [mark for mark in marks if mark.by is not None]
    names = [f"{mark.what}{'' if mark.in_time else ' (too weak by then)'}" for mark in booked[:4]]
    if len(booked) > 4:
        names.append(f"{len(booked) - 4} more")
    level = f"{format_number(strength, 3)} {unit}"
    return f"{level} needed: {', '.join(names)}" if names else f"{level} asked about"


def _upright(axes: Axes, on: date, words: str, *, at: float = 0.02) -> None:
    """A thin upright line with its words along it."""
    place = on.toordinal()
    axes.axvline(place, color=FAINT, linewidth=0.8, linestyle=(0, (1, 2)), zorder=2)
    axes.text(
        place, at, f"{words} ", rotation=90, ha="right", va="top" if at > 0.4 else "bottom",
        size=9, zorder=7, transform=axes.get_xaxis_transform(),
    )  # fmt: skip


def _named(axes: Axes, fade: Fade) -> None:
    ahead = [p for p in fade.curve if p.on >= fade.head.as_at]
    at = ahead[len(ahead) // 2]
    axes.annotate(
        "expected, an estimate", (at.on.toordinal(), at.expected), xytext=(4, 6),
        textcoords="offset points", ha="left", va="bottom", weight="bold", zorder=7,
    )  # fmt: skip
    axes.text(0.0, 1.04, "● found   ▼ needed on its day, ▽ too weak by then   × first day below",
              transform=axes.transAxes, va="center")  # fmt: skip
