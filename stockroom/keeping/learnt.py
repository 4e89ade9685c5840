"""What the checks of a bottle, or of all bottles of a line, teach about how it fades.

The strengths found are straightened by the order of a law and fitted against the age in
days, at the law's own temperature where it has one. Nothing here changes a rule.
Source: the fits and tests of ICH Q1E (2003), in `fits.py` and `pooling.py`.
"""

from __future__ import annotations

import math
from collections.abc import Iterable, Sequence
from dataclasses import dataclass, replace
from datetime import date, timedelta

from stockroom.errors import BadAmount, MissingFigure, NotAllowed
from stockroom.findings import Finding
from stockroom.keeping.arrhenius import R, kelvin
from stockroom.keeping.fits import (
    Fit,
    fit_line,
    reach_of,
    slope_interval,
    straightened,
    strength_at,
    weak_side,
)
from stockroom.keeping.laws import DAYS_PER_MONTH, response_of, strength_after
from stockroom.keeping.pooling import Batch, Pooled, lives, pool, worst
from stockroom.keeping.rules import Law, Rule
from stockroom.keeping.series import Series

ENOUGH_DAYS = 3
"""Checks on fewer days leave no scatter to judge a single bottle's line by."""

TWO_SIDED_95 = 1.960
"""Standard uncertainties to each side that hold 95 % of a normal distribution."""

# as long again as the checks span, and four weeks at least: common practice, no source
_WAIT_DAYS = 28

# results alike to nine figures were copied, not measured: ours, no source
_EXACT = 1e-9


@dataclass(frozen=True, slots=True)
class Rate:
    """A rate per day in the law's own unit, with its two-sided 95 % interval.

    `most` is the one-sided 95 % upper limit: it is that sure to fade no faster.
    """

    value: float
    low: float
    high: float
    most: float

    @property
    def clear(self) -> bool:
        """True when the interval leaves out no loss at all."""
        return self.low > 0


@dataclass(frozen=True, slots=True)
class Learnt:
    """What was learnt: the line of each bottle by its number, straightened by `order`.

    `pooled` is None for a single bottle. `rule` gives ages their origin and their
    temperature; `left_out` names the bottles not used, with the reason.
    """

    order: int
    rule: Rule
    series: tuple[Series, ...]
    fits: dict[str, Fit]
    pooled: Pooled | None = None
    left_out: tuple[Finding, ...] = ()

    @property
    def model(self) -> str:
        """How the lines hang together, in words."""
        return self.pooled.model if self.pooled else "one bottle"

    def life(self, lowest: float, fits: dict[str, Fit] | None = None) -> tuple[str, float]:
        """The bottle that falls below `lowest` first, and in how many days; inf for never.

        Counted at the lower one-sided 95 % limit of the mean; 0 when that starts below.
        `fits` asks it of other lines than the chosen ones.
        """
        bound, falls = straightened(lowest, self.order), self.order != 2
        found = lives(
            fits or self.fits,
            lowest=bound if falls else None,
            highest=None if falls else bound,
        )
        return worst(found)

    def rate(self, bottle: str) -> Rate:
        """The rate of a bottle's line."""
        return rate_of(self.fits[bottle], self.order)

    def law(self, rate: float) -> Law:
        """A law of this order with a rate, at the temperature the ages were counted at."""
        own = self.rule.law
        assert own is not None
        response = response_of(own)
        if not own.named or response is None:
            return replace(own, order=self.order, rate=rate)
        # a named law answers to warmth in a way of its own; near its °C that is an energy
        here = kelvin(response.at_c)
        energy = R * (response.theta + response.power * here) / 1000.0
        return Law(self.order, rate, response.at_c, ea_kj_mol=energy)

    def lower_limit(self, bottle: str, age: float) -> float:
        """The strength at an age that the mean of a bottle's line is above, 95 % sure."""
        fit = self.fits[bottle]
        return strength_at(fit.limit(age, weak_side(self.order), reach_of(fit.df)), self.order)


def learn_bottle(series: Series, order: int) -> Learnt:
    """The line of one bottle, checked on three days or more.

    Raises: MissingFigure for too few days, too few figures or no scatter; NotAllowed where
    strength does not fall; BadAmount for a strength of nothing under order 1 or 2.
    """
    _check_days(series)
    fit = fit_line(series.ages, _heights(series, order))
    learnt = Learnt(order, series.rule, (series,), {series.bottle: fit})
    _check_tells(learnt)
    return learnt


def learn_line(every: Iterable[Series], order: int) -> Learnt:
    """One line for all bottles, own starts, or own lines: whichever the tests allow.

    A bottle checked on one day only tells nothing of fading and is left out, named; with
    one bottle left it is that one's line. Raises: as `learn_bottle`.
    """
    given = list(every)
    used = [one for one in given if len(set(one.ages)) > 1]
    if len(used) < 2:
        best = max(given, key=lambda one: (one.distinct, len(one.days)))
        learnt = learn_bottle(best, order)
    else:
        _check_results(used)
        pooled = pool(Batch(one.bottle, one.ages, _heights(one, order)) for one in used)
        learnt = Learnt(order, used[0].rule, tuple(used), pooled.fits(), pooled)
        _check_tells(learnt)
    taught = [one.bottle for one in learnt.series]
    left_out = [one.bottle for one in given if one.bottle not in taught]
    return replace(
        learnt, left_out=tuple(Finding(one, "checked on one day only") for one in left_out)
    )


def rate_of(fit: Fit, order: int) -> Rate:
    """The rate a line stands for: how far it falls in a day, or rises under order 2."""
    low, high = slope_interval(fit)
    more = reach_of(fit.df) * fit.scatter * fit.v_slope**0.5
    if order == 2:
        return Rate(fit.slope, low, high, fit.slope + more)
    return Rate(-fit.slope, -high, -low, more - fit.slope)


def monthly_loss(start: float, law: Law) -> float:
    """The part of its strength lost in the first month of 30.4375 days, 0 to 1."""
    return 1.0 - strength_after(start, law, DAYS_PER_MONTH) / start


def _heights(series: Series, order: int) -> tuple[float, ...]:
    for on, strength in zip(series.days, series.strengths, strict=True):
        if order and strength <= 0:
            raise BadAmount(
                f"{series.bottle} was found at {strength:g} on {on}, and no law of order {order}"
                " comes to nothing.",
                "A slip? stockroom put-right. Else ask with --order 0.",
            )
    return tuple(straightened(strength, order) for strength in series.strengths)


# -- refusals, each with what to do -----------------------------------------------------


def _check_days(series: Series) -> None:
    if series.distinct >= ENOUGH_DAYS and len(set(series.ages)) > 1:
        return
    raise MissingFigure(
        f"{_so_far(series)}; a rate with its limits wants {ENOUGH_DAYS} different days.",
        f"Titrate {series.bottle} {_more(series)} {_next_check(series)}.",
    )


def _more(series: Series) -> str:
    wanted = ENOUGH_DAYS - series.distinct
    return "once more after" if wanted < 2 else f"on {wanted} more days, the first after"


def _so_far(series: Series) -> str:
    count, bottle = len(series.days), series.bottle
    if count == 1:
        return f"One check of {bottle} so far ({series.days[0]})"
    if series.distinct == 1:
        return f"All {count} checks of {bottle} are of {series.days[0]}"
    words = f"{count} checks of {bottle} so far ({series.days[0]} to {series.days[-1]})"
    if count > 2 or series.strengths[0] <= 0:
        return f"{words}, on {series.distinct} days"
    return words + _between(series)


def _between(series: Series) -> str:
    """The loss between two checks: no line to fit, but their own uncertainties bound it."""
    first, last = series.strengths
    months = (series.days[1] - series.days[0]).days / DAYS_PER_MONTH
    monthly = 100 * (1 - last / first) / months
    doubts = [u / x for u, x in zip(series.uncertainties, (first, last), strict=False) if u and x]
    words = f", {monthly:.2g} % a month between them"
    if len(doubts) < 2:
        return words
    off = TWO_SIDED_95 * 100 * last / first * math.hypot(*doubts) / months
    return f"{words} ({monthly - off:.2g} to {monthly + off:.2g} by their uncertainties)"


def _next_check(series: Series) -> date:
    span = (series.days[-1] - series.days[0]).days
    return series.days[-1] + timedelta(days=max(_WAIT_DAYS, span))


def _check_results(used: Sequence[Series]) -> None:
    results = sum(len(one.days) for one in used)
    if results > 2 * len(used):
        return
    latest = max(used, key=lambda one: (one.days[-1], one.bottle))
    raise MissingFigure(
        f"{results} checks of {len(used)} bottles, two of each: no scatter to judge a line by.",
        f"Titrate {latest.bottle} once more after {_next_check(latest)}.",
    )


def _check_tells(learnt: Learnt) -> None:
    """Pass when the strengths scatter about lines that fall."""
    strengths = [strength for one in learnt.series for strength in one.strengths]
    if len(set(strengths)) == 1:
        raise NotAllowed(
            f"{', '.join(learnt.fits)}: found at {strengths[0]:g} each time, so nothing has faded.",
            "Keep the rule it has; a check later in its life may show more.",
        )
    for fit in learnt.fits.values():
        if fit.scatter <= _EXACT * abs(fit.mean):
            raise MissingFigure(
                f"{', '.join(learnt.fits)}: {len(strengths)} results lie on a line exactly, "
                "and nothing shows how far to trust it.",
                "Enter each as it was titrated, with one more figure.",
            )
    for bottle in learnt.fits:
        _check_falls(learnt, bottle)


def _check_falls(learnt: Learnt, bottle: str) -> None:
    rate = learnt.rate(bottle)
    if rate.value > 0:
        return
    # with a slope shared by all, it is not this bottle's doing
    shared = len({fit.slope for fit in learnt.fits.values()}) == 1
    whose = ", ".join(learnt.fits) if shared else bottle
    if rate.high < 0:
        raise NotAllowed(
            f"{whose}: stronger from check to check, and keeping makes nothing stronger.",
            "Water lost, a top-up, a slip in the titrant? Leave older checks out: --since DATE.",
        )
    raise NotAllowed(
        f"{whose}: no loss to be seen, the line of the checks rises within its scatter.",
        "Keep the rule it has; a check later in its life may show more.",
    )
