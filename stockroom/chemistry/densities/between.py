"""A smooth curve through the rows of a table that never leaves the span of two neighbours."""

from __future__ import annotations

from bisect import bisect_right
from collections.abc import Sequence


def slopes(xs: Sequence[float], ys: Sequence[float]) -> tuple[float, ...]:
    """The slope at each row: that of the parabola through it and its two neighbours.

    Held back to three times the flatter neighbouring chord, and 0 where the table turns,
    so that the curve rises and falls with its rows and nowhere else. At least three rows,
    `xs` rising.
    Source: Fritsch & Carlson, SIAM J. Numer. Anal. 17 (1980) 238, from memory.
    """
    chords = [(ys[n + 1] - ys[n]) / (xs[n + 1] - xs[n]) for n in range(len(xs) - 1)]
    inner = [
        _held(_weighed(xs, chords, n), chords[n - 1], chords[n]) for n in range(1, len(chords))
    ]
    # at the ends the parabola through the first (last) three rows
    first = _held(2 * chords[0] - inner[0], chords[0], chords[0])
    last = _held(2 * chords[-1] - inner[-1], chords[-1], chords[-1])
    return (first, *inner, last)


def value_at(x: float, xs: Sequence[float], ys: Sequence[float], rises: Sequence[float]) -> float:
    """The curve's value at `x`, from `xs[0]` to `xs[-1]`; `rises` are its `slopes`.

    On a row it is the row's own figure to the last bit.
    """
    n = max(0, min(bisect_right(xs, x) - 1, len(xs) - 2))
    step = xs[n + 1] - xs[n]
    t = (x - xs[n]) / step
    here, there = (1 - t) * (1 - t), t * t
    return (
        ys[n] * (1 + 2 * t) * here
        + ys[n + 1] * (3 - 2 * t) * there
        + step * (rises[n] * t * here - rises[n + 1] * (1 - t) * there)
    )


def _weighed(xs: Sequence[float], chords: Sequence[float], n: int) -> float:
    before, after = xs[n] - xs[n - 1], xs[n + 1] - xs[n]
    return (after * chords[n - 1] + before * chords[n]) / (before + after)


def _held(slope: float, before: float, after: float) -> float:
    if before * after <= 0:
        return 0.0
    limit = 3 * min(abs(before), abs(after))
    # a parabola may point the other way beside a sharp bend
    return max(0.0, min(slope, limit)) if before > 0 else min(0.0, max(slope, -limit))
