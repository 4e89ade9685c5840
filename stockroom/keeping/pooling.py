"""May the results of several batches be read as one line? The tests of ICH Q1E.

First whether the slopes are alike, then whether the lines start alike, each at the
0.25 level; the batch that falls out soonest decides. The caps ICH Q1E puts on reading
a line beyond its last result (sections 2.4 and 2.5) are for drugs on sale and are not
applied here.
Source: ICH Q1E (2003), appendix B; sums of squares as in LeBlond, Griffith and Aubuchon,
J. Valid. Technol. 17(3):47-68 (2011).
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Mapping, Sequence
from dataclasses import dataclass
from enum import StrEnum

from stockroom.errors import MissingFigure
from stockroom.keeping.fits import CONFIDENCE, Fit, Sums, line_of, shelf_life, sums_of

LEVEL = 0.25
"""Below this p, batches are not read as one. Source: ICH Q1E (2003), appendix B."""


class Model(StrEnum):
    """How the lines of several batches hang together; the name says whose scatter is used."""

    COMMON = "one line for all"
    INTERCEPTS = "own starts, one slope"
    POOLED = "own lines, one scatter"
    """Separate lines with the pooled residual variance (LeBlond; the full model of Minitab)."""
    OWN = "own lines, own scatter"
    """Separate lines, each with its own residual variance (the default of JMP)."""


@dataclass(frozen=True, slots=True)
class Batch:
    """The results of one batch: equally many times and values, of two times or more."""

    name: str
    times: tuple[float, ...]
    values: tuple[float, ...]


@dataclass(frozen=True, slots=True)
class Test:
    """An F test: the ratio, its degrees of freedom, its p.

    The denominator is the mean square about separate lines, in both tests. `nested` is
    the ratio with that of the model just before it instead, which others print.
    """

    __test__ = False  # a name pytest would else collect

    f: float
    df1: int
    df2: int
    p: float
    nested: float

    @property
    def alike(self) -> bool:
        """True when it speaks for reading the batches as one in this."""
        return self.p >= LEVEL


@dataclass(frozen=True, slots=True)
class Pooled:
    """Several batches with what the tests said; `model` is the one they chose.

    `intercepts` is reported even where the slopes already parted the lines.
    """

    batches: tuple[Batch, ...]
    slopes: Test | None
    intercepts: Test | None
    model: Model

    def fits(self, model: Model | None = None) -> dict[str, Fit]:
        """The line of each batch by name, under the chosen model or another.

        Raises: MissingFigure where a batch of two results would need a scatter of its own.
        """
        return _fits(self.batches, model or self.model)


def pool(batches: Iterable[Batch]) -> Pooled:
    """Test the batches and choose: one line, own starts, or own lines with one scatter.

    Raises: BadAmount, MissingFigure as `sums_of`; MissingFigure without a result to spare
    beyond two a batch, or without any scatter.
    """
    kept = tuple(batches)
    squares = _squares(kept)
    k, n = len(kept), squares.n
    if n <= 2 * k:
        raise MissingFigure(
            f"{n} results of {k} batches leave no scatter to compare them by.",
            "Find one more strength of any of them.",
        )
    if k == 1:
        return Pooled(kept, None, None, Model.COMMON)
    slopes = _test(squares.slopes - squares.own, k - 1, squares.own, n - 2 * k)
    extra = squares.common - squares.slopes
    intercepts = _test(extra, k - 1, squares.own, n - 2 * k, squares.slopes / (n - k - 1))
    if not slopes.alike:
        return Pooled(kept, slopes, intercepts, Model.POOLED)
    model = Model.COMMON if intercepts.alike else Model.INTERCEPTS
    return Pooled(kept, slopes, intercepts, model)


def p_of(f: float, df1: int, df2: int) -> float:
    """How often chance alone gives a ratio of F or more.

    >>> round(p_of(2.72, 4, 30), 3)
    0.048
    """
    # here and not at the top: only a fit needs it
    from scipy.special import fdtrc

    return float(fdtrc(df1, df2, f))


def lives(
    fits: Mapping[str, Fit],
    *,
    lowest: float | None = None,
    highest: float | None = None,
    two_sided: bool = False,
    confidence: float = CONFIDENCE,
) -> dict[str, float]:
    """The life of every batch, as `shelf_life` gives it."""
    return {
        name: shelf_life(
            fit, lowest=lowest, highest=highest, two_sided=two_sided, confidence=confidence
        )
        for name, fit in fits.items()
    }


def worst(found: Mapping[str, float]) -> tuple[str, float]:
    """The batch that falls out soonest, and its life; of two alike the first given."""
    return min(found.items(), key=lambda pair: pair[1])


@dataclass(frozen=True, slots=True)
class _Squares:
    """Residual sums of squares: about separate lines, about one slope, about one line."""

    n: int
    own: float
    slopes: float
    common: float


def _squares(batches: Sequence[Batch]) -> _Squares:
    each = [sums_of(batch.times, batch.values) for batch in batches]
    within = _within(each)
    common = _all(batches)
    return _Squares(
        common.n,
        math.fsum(sums.residual for sums in each),
        within.residual,
        common.residual,
    )


def _all(batches: Sequence[Batch]) -> Sums:
    times = [t for batch in batches for t in batch.times]
    return sums_of(times, [y for batch in batches for y in batch.values])


def _within(each: Sequence[Sums]) -> Sums:
    """Sums about each batch's own means, added up: what a common slope is found from."""
    sxx, sxy, syy = (
        math.fsum(column) for column in zip(*((s.sxx, s.sxy, s.syy) for s in each), strict=True)
    )
    return Sums(sum(s.n for s in each), 0.0, 0.0, sxx, sxy, syy)


def _fits(batches: Sequence[Batch], model: Model) -> dict[str, Fit]:
    each = {batch.name: sums_of(batch.times, batch.values) for batch in batches}
    n, k = sum(sums.n for sums in each.values()), len(each)
    if model is Model.COMMON:
        common = _all(batches)
        line = line_of(common, slope=common.slope, sse=common.residual, df=n - 2, sxx=common.sxx)
        return dict.fromkeys(each, line)
    if model is Model.INTERCEPTS:
        one = _within(list(each.values()))
        shared = {"slope": one.slope, "sse": one.residual, "sxx": one.sxx}
        return {name: line_of(sums, **shared, df=n - k - 1) for name, sums in each.items()}
    pooled = math.fsum(sums.residual for sums in each.values())
    return {
        name: _separate(name, sums, (pooled, n - 2 * k) if model is Model.POOLED else None)
        for name, sums in each.items()
    }


def _separate(name: str, sums: Sums, pooled: tuple[float, int] | None) -> Fit:
    sse, df = pooled or (sums.residual, sums.n - 2)
    if df < 1:
        raise MissingFigure(
            f"{name} has {sums.n} results, which leave it no scatter of its own.",
            "Find one more strength of it.",
        )
    return line_of(sums, slope=sums.slope, sse=sse, df=df, sxx=sums.sxx)


def _test(extra: float, df1: int, own: float, df2: int, before: float | None = None) -> Test:
    if own <= 0:
        raise MissingFigure(
            f"All {df2 + 2 * df1 + 2} results lie on their lines exactly: no scatter to judge by.",
            "Give the strengths with one more figure.",
        )
    gained = max(0.0, extra) / df1
    f = gained / (own / df2)
    return Test(f, df1, df2, p_of(f, df1, df2), gained / (before or own / df2))
