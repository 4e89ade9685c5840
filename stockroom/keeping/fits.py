"""Straight lines through results over time, and how far their means can be trusted.

A strength falling by a law of order 0, 1 or 2 is a straight line once it is
straightened: C, ln C or 1/C against time. Times may be in any one unit; a life
comes out in the same.
Source: the ordinary least-squares line and the confidence limit of its mean, as in
any statistics text; the life from it as in ICH Q1E (2003), section 2 and appendix B.
"""

from __future__ import annotations

import math
from collections.abc import Sequence
from dataclasses import dataclass
from enum import StrEnum

from stockroom.errors import BadAmount, MissingFigure

CONFIDENCE = 0.95
"""Every limit is a 95 % one unless said otherwise. Source: ICH Q1E (2003), section 2."""

# two routes to one height differ in the last bits
_EDGE = 1e-12


class Side(StrEnum):
    """The side on which a limit lies, of a line or of what is allowed."""

    LOWER = "lower"
    UPPER = "upper"


@dataclass(frozen=True, slots=True)
class Fit:
    """A straight line, y = mean + slope · (t - centre), and the scatter about it.

    `scatter` is the residual standard deviation with `df` degrees of freedom. The
    variance of the mean at t is scatter² · (v_mean + v_slope · (t - centre)²), which
    holds for a line alone and for one that shares its slope or its scatter with others.
    """

    centre: float
    mean: float
    slope: float
    scatter: float
    df: int
    v_mean: float
    v_slope: float

    @property
    def start(self) -> float:
        """The height of the line at t = 0."""
        return self.at(0.0)

    def at(self, t: float) -> float:
        """The height of the line at t."""
        return self.mean + self.slope * (t - self.centre)

    def spread(self, t: float) -> float:
        """The standard error of the mean at t."""
        return self.scatter * math.sqrt(self.v_mean + self.v_slope * (t - self.centre) ** 2)

    def limit(self, t: float, side: Side, reach: float) -> float:
        """The limit of the mean at t on one side, `reach` standard errors out."""
        away = reach * self.spread(t)
        return self.at(t) - away if side is Side.LOWER else self.at(t) + away


@dataclass(frozen=True, slots=True)
class Sums:
    """What a line needs of its points: count, means, and sums about the means."""

    n: int
    centre: float
    mean: float
    sxx: float
    sxy: float
    syy: float

    @property
    def slope(self) -> float:
        """The slope of the line through these points alone."""
        return self.sxy / self.sxx

    @property
    def residual(self) -> float:
        """The sum of squares about that line; never below nothing by rounding."""
        return max(0.0, self.syy - self.sxy * self.sxy / self.sxx)


def sums_of(times: Sequence[float], values: Sequence[float]) -> Sums:
    """The sums of points given as equally many times and values, two or more.

    Raises: BadAmount for a figure that is no number; MissingFigure when all times are one.
    """
    for figure in (*times, *values):
        if not math.isfinite(figure):
            raise BadAmount(f"{figure} is no point of a line.", "Give finite numbers.")
    if len(times) != len(values):
        raise BadAmount(
            f"{len(times)} times and {len(values)} values are no points.", "Give one of each."
        )
    if len(set(times)) < 2:
        when = f"at {times[0]:g}" if times else "none"
        raise MissingFigure(
            f"A line needs results of two different times; these are all {when}.",
            "Find the strength again on a later day.",
        )
    n, centre, mean = len(times), math.fsum(times) / len(times), math.fsum(values) / len(values)
    dt, dy = [t - centre for t in times], [y - mean for y in values]
    products = (zip(dt, dt, strict=True), zip(dt, dy, strict=True), zip(dy, dy, strict=True))
    sxx, sxy, syy = (math.fsum(a * b for a, b in pairs) for pairs in products)
    return Sums(n, centre, mean, sxx, sxy, syy)


def fit_line(times: Sequence[float], values: Sequence[float]) -> Fit:
    """The least-squares line through three or more points, with n - 2 degrees of freedom.

    Raises: as `sums_of`; MissingFigure for fewer than three points.

    >>> line = fit_line([0, 1, 2, 3], [10.0, 9.1, 7.9, 7.0])
    >>> round(line.start, 2), round(line.slope, 2), line.df
    (10.03, -1.02, 2)
    """
    sums = sums_of(times, values)
    if sums.n < 3:
        raise MissingFigure(
            f"{sums.n} points leave no scatter to judge a line by.", "Find one more strength."
        )
    return line_of(sums, slope=sums.slope, sse=sums.residual, df=sums.n - 2, sxx=sums.sxx)


def line_of(sums: Sums, *, slope: float, sse: float, df: int, sxx: float) -> Fit:
    """A line through the middle of its own points, with a slope and a scatter it may share."""
    scatter = math.sqrt(sse / df)
    return Fit(sums.centre, sums.mean, slope, scatter, df, 1.0 / sums.n, 1.0 / sxx)


def reach_of(df: int, confidence: float = CONFIDENCE, *, two_sided: bool = False) -> float:
    """How many standard errors out a limit lies: Student's t for so many degrees of freedom."""
    # here and not at the top: a plain plan fits nothing and must not wait for it
    from scipy.special import stdtrit

    return float(stdtrit(df, (1.0 + confidence) / 2.0 if two_sided else confidence))


def slope_interval(fit: Fit, confidence: float = CONFIDENCE) -> tuple[float, float]:
    """The two-sided interval of the slope, the lower end first."""
    away = reach_of(fit.df, confidence, two_sided=True) * fit.scatter * math.sqrt(fit.v_slope)
    return fit.slope - away, fit.slope + away


def crossing(fit: Fit, bound: float, side: Side, reach: float) -> float:
    """The first t from 0 on at which the limit on `side` meets a bound; inf if it never does.

    0 when the limit is not inside the bound to begin with. LOWER asks that values stay
    above the bound, UPPER that they stay below it.
    Source: (b·u + d)² = reach²·s²·(v_mean + v_slope·u²) with u = t - centre, solved for u;
    for a single batch this is the quadratic of ICH Q1E's method written about the mean time.
    """
    up = 1.0 if side is Side.LOWER else -1.0
    inside, slope = up * (fit.mean - bound), up * fit.slope
    away = (reach * fit.scatter) ** 2
    first = -fit.centre
    # a start inside by rounding alone has no root after it that is safe to look for
    if inside + slope * first <= reach * fit.spread(0.0) + _EDGE * max(abs(bound), abs(fit.mean)):
        return 0.0
    # from inside, the nearer limit is met before the farther, so the first root is the one
    roots = _roots(slope**2 - away * fit.v_slope, inside * slope, inside**2 - away * fit.v_mean)
    return min((root - first for root in roots if root > first), default=math.inf)


def _roots(square: float, half: float, free: float) -> list[float]:
    """The roots of square·u² + 2·half·u + free, without loss where two terms nearly cancel."""
    # a line that starts inside always has them; without scatter, rounding may say just below
    under = max(0.0, half * half - square * free)
    larger = -(half + math.copysign(math.sqrt(under), half))
    roots = [larger / square] if square else []
    return [*roots, free / larger] if larger else roots


def shelf_life(
    fit: Fit,
    *,
    lowest: float | None = None,
    highest: float | None = None,
    two_sided: bool = False,
    confidence: float = CONFIDENCE,
) -> float:
    """How long the mean is known to keep within its bounds: the earliest crossing, else inf.

    One-sided at 95 % unless `two_sided`, for what may go either way.
    Source: ICH Q1E (2003), section 2 and appendix B.
    """
    reach = reach_of(fit.df, confidence, two_sided=two_sided)
    bounds = ((lowest, Side.LOWER), (highest, Side.UPPER))
    lives = [crossing(fit, x, side, reach) for x, side in bounds if x is not None]
    return min(lives, default=math.inf)


def straightened(strength: float, order: int) -> float:
    """A strength as the law of its order makes a straight line of it: C, ln C or 1/C.

    Raises: BadAmount for a strength of nothing under order 1 or 2, or another order.
    """
    if order not in (0, 1, 2):
        raise BadAmount(f"No decay law of order {order}.", "Use order 0, 1 or 2.")
    if order and strength <= 0:
        raise BadAmount(
            f"A strength of {strength:g} fits no law of order {order}.",
            "Leave that result out, or use order 0.",
        )
    if order == 0:
        return strength
    return math.log(strength) if order == 1 else 1.0 / strength


def strength_at(height: float, order: int) -> float:
    """The strength that a height of the straight line stands for; inf where 1/C is not above 0."""
    if order == 0:
        return max(0.0, height)
    if order == 1:
        return math.exp(height)
    return 1.0 / height if height > 0 else math.inf


def weak_side(order: int) -> Side:
    """The side of the straightened line on which strength is lost: 1/C rises as C falls."""
    return Side.UPPER if order == 2 else Side.LOWER
