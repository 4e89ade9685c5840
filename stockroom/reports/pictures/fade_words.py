"""The fade of a bottle in words, and its picture as bytes."""

from __future__ import annotations

from datetime import date

from stockroom.keeping.course import Mark
from stockroom.reports.fades_text import Scale
from stockroom.reports.paper.head import foot_lines, head_lines
from stockroom.reports.paper.kinds import Kind
from stockroom.reports.pictures.canvas import SIZE
from stockroom.reports.pictures.fade import Fade, Found, Point
from stockroom.reports.sheet import columns, page, section, wrap
from stockroom.reports.words import day


def fade_text(fade: Fade, width: int) -> str:
    """The picture in words: what was found, what is expected each month, what is needed."""
    found, rows, wanted = found_rows(fade), expected_rows(fade), wanted_rows(fade)
    label = f"label {fade.label}" if fade.label else ""
    recheck = f"recheck by {day(fade.recheck)}" if fade.recheck else ""
    told = [label, recheck, fade.no_band]
    return page(
        [
            head_lines(fade.head, width),
            "\n".join(wrap(line, width) for line in told if line),
            section("FOUND", columns(found, width)) if found else "FOUND\n  never",
            section("EXPECTED, an estimate", columns(rows, width)),
            section("NEEDED", columns(wanted, width))
            if wanted
            else "NEEDED\n  by no booking of this line",
            foot_lines(fade.head, width),
        ]
    )


def found_rows(fade: Fade) -> list[tuple[str, str]]:
    """Each day a strength was found, and what it was."""
    scale = Scale(fade.unit, 1.0)
    return [(day(one.on), _result(scale, one)) for one in fade.found]


def expected_rows(fade: Fade) -> list[tuple[str, str]]:
    """From today on, a day about every four weeks, and what is expected then."""
    scale = Scale(fade.unit, 1.0)
    return [(day(point.on), _expected(scale, point)) for point in _monthly(fade)]


def wanted_rows(fade: Fade) -> list[tuple[str, str]]:
    """Each booking that needs a strength of it, and whether it gets it."""
    scale, today = Scale(fade.unit, 1.0), fade.head.as_at
    return [(mark.what, _wanted(scale, mark, today)) for mark in fade.wanted]


def _result(scale: Scale, one: Found) -> str:
    doubt = f", ± {scale.written(one.uncertainty, 2)}" if one.uncertainty is not None else ""
    return f"{scale.written(one.strength)}{doubt}"


def _expected(scale: Scale, point: Point) -> str:
    words = scale.expected(point.expected)
    if point.low is None or point.high is None:
        return words
    low, high = scale.written(point.low, 3), scale.written(point.high, 3)
    return f"{words}; the line of its checks: {low} to {high}, 95 % sure"


def _wanted(scale: Scale, mark: Mark, today: date) -> str:
    need = scale.written(mark.strength, 3)
    below = f"below it on {day(mark.on)}" if mark.on else "never below it in a hundred years"
    below = "below it already" if mark.on and mark.on <= today else below
    if mark.by is None:
        return f"{need}: {below}"
    return f"{need} on {day(mark.by)}: {'' if mark.in_time else 'TOO WEAK by then, '}{below}"


def _monthly(fade: Fade) -> list[Point]:
    """From today on, a point about every four weeks, and the last one."""
    row: list[Point] = []
    for point in (p for p in fade.curve if p.on >= fade.head.as_at):
        if not row or (point.on - row[-1].on).days >= 28 or point == fade.curve[-1]:
            row.append(point)
    return row


def fade_lines(fade: Fade) -> dict[str, str]:
    """What each booking needs, and whether it gets it."""
    return {what: f"{what} {needs}" for what, needs in wanted_rows(fade)}


def fade_picture(
    fade: Fade, size: tuple[float, float] = SIZE, *, form: str = "svg", bare: bool = True
) -> bytes:
    """The picture of it, "svg" or "png"; `size` in mm."""
    from stockroom.reports.pictures.canvas import drawn
    from stockroom.reports.pictures.fade_drawn import draw_fade

    return drawn(fade.head, lambda axes: draw_fade(axes, fade), form, size, bare=bare)


FADE = Kind(
    "picture",
    fade_text,
    fade_lines,
    lambda fade: {"picture": fade_picture(fade, bare=False).decode("utf-8")},
)
