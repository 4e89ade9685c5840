"""The fade of a bottle drawn: found points, the expected line, its band, what is needed."""

from __future__ import annotations

from datetime import date
from itertools import pairwise
from typing import TYPE_CHECKING

from stockroom.measure.formats import format_number
from stockroom.reports.pictures.canvas import FAINT, INK, PALE, PAPER, day_axis
from stockroom.reports.pictures.placing import Flag, Name, flags, key, margin, names
from stockroom.reports.words import day_seen_from

if TYPE_CHECKING:
    from matplotlib.axes import Axes

    from stockroom.keeping.course import Mark
    from stockroom.reports.pictures.fade import Fade, Point

# two standard uncertainties to each side, about 95 %
_REACH = 1.960

# strengths nearer than this part of the scale are told as one
_NEAR = 0.15

_KEY = "● found   ▼ needed on its day, ▽ too weak by then   × first day below"


def draw_fade(axes: Axes, fade: Fade) -> None:
    """Draw it: days named above the plot, strengths at its right end."""
    margin(axes)
    day_axis(axes, fade.curve[0].on, fade.curve[-1].on)
    low, high = _heights(axes, fade)
    booked = together([m for m in fade.wanted if m.by is not None], (high - low) * _NEAR)
    asked = together([m for m in fade.wanted if m.by is None], (high - low) * _NEAR)
    banded = any(p.low is not None and p.high is not None for p in fade.curve)
    told = "grey: where the line of its own checks lies, 95 % sure" if banded else fade.no_band
    key(axes, _KEY, told)
    flags(axes, _days(fade, [*booked, *asked]))
    axes.set_ylabel(f"strength, {fade.unit}")
    _band(axes, fade)
    if fade.nominal is not None:
        axes.axhline(fade.nominal, color=INK, linewidth=1.0, linestyle=(0, (6, 3)), zorder=2)
    _expected(axes, fade)
    _found(axes, fade)
    for marks in (*booked, *asked):
        _needs(axes, fade, marks)
    row = [Name(fade.curve[-1].expected, "expected, an estimate", bold=True)]
    row += [Name(fade.nominal, f"label {fade.label}")] if fade.nominal is not None else []
    row += [
        Name((marks[0].strength + marks[-1].strength) / 2, need_words(marks, fade.unit))
        for marks in (*booked, *asked)
    ]
    names(axes, row)


def _heights(axes: Axes, fade: Fade) -> tuple[float, float]:
    row = [p.expected for p in fade.curve] + [one.strength for one in fade.found]
    row += [mark.strength for mark in fade.wanted]
    row += [fade.nominal] if fade.nominal is not None else []
    row += [end for p in fade.curve for end in (p.low, p.high) if end is not None]
    low, high = min(row), max(row)
    room = max(high - low, 0.05 * high)
    ends = max(0.0, low - 0.1 * room), high + 0.08 * room
    axes.set_ylim(*ends)
    return ends


def _band(axes: Axes, fade: Fade) -> None:
    known = [p for p in fade.curve if p.low is not None and p.high is not None]
    if not known:
        return
    days = [p.on.toordinal() for p in known]
    lows, highs = [p.low or 0.0 for p in known], [p.high or 0.0 for p in known]
    axes.fill_between(days, lows, highs, facecolor=PALE, linewidth=0, zorder=1)
    for ends in (lows, highs):
        axes.plot(days, ends, color=FAINT, linewidth=0.8, zorder=2)


def _expected(axes: Axes, fade: Fade) -> None:
    """The expected line, broken where a result moved it: a step in what is known, no fading."""
    runs = stretches(fade)
    for run in runs:
        days, row = zip(*run, strict=True)
        axes.plot(days, row, color=INK, linewidth=2.2, zorder=4)
    for before, after in pairwise(runs):
        (on, above), (_, below) = before[-1], after[0]
        axes.plot(
            [on, on], [above, below], color=INK, linewidth=1.1, linestyle=(0, (1, 2)), zorder=4,
        )  # fmt: skip


def stretches(fade: Fade) -> list[list[tuple[int, float]]]:
    """The expected line in pieces, day number and strength; each but the last ends at a result.

    What was expected the day before a result is drawn up to the result's own day.
    """
    results = {one.on for one in fade.found}
    runs: list[list[tuple[int, float]]] = [[]]
    last: Point | None = None
    for point in fade.curve:
        if last is not None and point.on in results:
            runs[-1].append((point.on.toordinal(), last.expected))
            runs.append([])
        runs[-1].append((point.on.toordinal(), point.expected))
        last = point
    return runs


def _found(axes: Axes, fade: Fade) -> None:
    for one in fade.found:
        on = one.on.toordinal()
        if one.uncertainty is not None:
            axes.errorbar(
                [on], [one.strength], yerr=[_REACH * one.uncertainty],
                color=INK, capsize=4, linewidth=1.2, zorder=5,
            )  # fmt: skip
        axes.plot([on], [one.strength], marker="o", markersize=8, color=INK, zorder=6)


def _needs(axes: Axes, fade: Fade, marks: list[Mark]) -> None:
    """The lines of strengths told as one, the lowest and the highest, and what is marked there."""
    for strength in {marks[0].strength, marks[-1].strength}:
        axes.axhline(strength, color=INK, linewidth=1.0, linestyle=(0, (1, 1.5)), zorder=3)
    first, last = fade.curve[0].on, fade.curve[-1].on
    for mark in marks:
        if mark.by is not None and first <= mark.by <= last:
            axes.plot(
                [mark.by.toordinal()], [mark.strength], color=INK, marker="v",
                markersize=9, markeredgewidth=1.4,
                markeredgecolor=INK, markerfacecolor=INK if mark.in_time else PAPER, zorder=6,
            )  # fmt: skip
    for mark in (marks[0], marks[-1]):
        if mark.on is not None and first < mark.on <= last:
            axes.plot([mark.on.toordinal()], [mark.strength], marker="x", markersize=10,
                      markeredgewidth=2.2, color=INK, zorder=7)  # fmt: skip


# -- the words --------------------------------------------------------------------------


def _days(fade: Fade, groups: list[list[Mark]]) -> list[Flag]:
    """What falls on a day; of many results, and of strengths told as one, the first and last."""
    now = fade.head.as_at
    row = [Flag(now, f"today, {day_seen_from(now, now)}")]
    row += (
        [Flag(fade.recheck, f"recheck by {day_seen_from(fade.recheck, now)}")]
        if fade.recheck
        else []
    )
    told = fade.found if len(fade.found) <= 4 else (fade.found[0], fade.found[-1])
    row += [
        Flag(
            one.on,
            f"found {format_number(one.strength, 4)} on {day_seen_from(one.on, now)}",
            bold=True,
        )
        for one in told
    ]
    below: dict[date, set[float]] = {}
    for marks in groups:
        for mark in (marks[0], marks[-1]):
            if mark.on is not None and fade.curve[0].on < mark.on:
                below.setdefault(mark.on, set()).add(mark.strength)
    for on, strengths in below.items():
        words = " and ".join(format_number(one, 3) for one in sorted(strengths))
        row.append(Flag(on, f"below {words} from {day_seen_from(on, now)}"))
    return row


def together(wanted: list[Mark], near: float) -> list[list[Mark]]:
    """Marks in groups of nearly one strength, weakest first; no group spans more than `near`."""
    groups: list[list[Mark]] = []
    for mark in sorted(wanted, key=lambda mark: (mark.strength, mark.by or date.max, mark.what)):
        if groups and mark.strength - groups[-1][0].strength <= near:
            groups[-1].append(mark)
        else:
            groups.append([mark])
    return groups


def need_words(marks: list[Mark], unit: str) -> str:
    """What a group of needs is called: "90 to 92 vol needed: K15, K26 and 18 more"."""
    low, high = (format_number(one.strength, 3) for one in (marks[0], marks[-1]))
    level = f"{low} {unit}" if low == high else f"{low} to {high} {unit}"
    if marks[0].by is None:
        return f"{level} asked about"
    weak = sum(not mark.in_time for mark in marks)
    told = [mark.what for mark in marks[:2]] if len(marks) > 3 else [mark.what for mark in marks]
    more = f" and {len(marks) - len(told)} more" if len(marks) > len(told) else ""
    words = f"{level} needed: {', '.join(told)}{more}"
    count = "" if weak == len(marks) else f"{weak} "
    return f"{words} ({count}too weak by then)" if weak else words
