"""The fade of one bottle: what was found, what is expected day by day, what its bookings need."""

from __future__ import annotations

from dataclasses import dataclass
from datetime import date, timedelta

from stockroom.errors import NotAllowed, StockroomError
from stockroom.keeping.course import Fading, Mark
from stockroom.keeping.fits import Side, reach_of, strength_at
from stockroom.keeping.learnt import ENOUGH_DAYS, Learnt, learn_bottle
from stockroom.keeping.record import CheckKind, Record
from stockroom.keeping.rules import Rule
from stockroom.keeping.series import Series, order_of, rule_for, series_of
from stockroom.keeping.strength import aged, strengths_on
from stockroom.keeping.verdict import verdict
from stockroom.planning.facts import Bottle, Facts
from stockroom.reports.fades_text import Scale
from stockroom.reports.paper.head import Head, head_for
from stockroom.reports.words import TIED, day, raised

POINTS = 240
"""At most so many points of a curve: more than a printed line shows."""

AHEAD, MOST_AHEAD = 60, 730
"""Days drawn past today, at least and at most."""


@dataclass(frozen=True, slots=True)
class Found:
    """A strength found on a day, with its standard uncertainty where known."""

    on: date
    strength: float
    uncertainty: float | None = None


@dataclass(frozen=True, slots=True)
class Point:
    """The strength expected on a day, and its 95 % band where the checks give one."""

    on: date
    expected: float
    low: float | None = None
    high: float | None = None


@dataclass(frozen=True, slots=True)
class Fade:
    """Everything in `unit`, as the bottle is written. `no_band` says why there is no band.

    `curve` starts afresh at each result. `wanted` are the strengths its bookings need, with
    their day, and those asked about; `on` of one is the first day the bottle is below it.
    """

    head: Head
    bottle: str
    unit: str
    nominal: float | None
    label: str
    found: tuple[Found, ...]
    curve: tuple[Point, ...]
    wanted: tuple[Mark, ...]
    recheck: date | None
    no_band: str
    law: str


def fade_of(known: Facts, bottle: Bottle, fading: Fading) -> Fade:
    """The picture's values. Raises: NotAllowed for a bottle of which no strength is known."""
    record, rules, today = bottle.record, known.lines[bottle.line].rules, fading.on
    if fading.course.strengths.expected is None:
        raise NotAllowed(
            f"{bottle.number} {bottle.line}: no strength on its label and none found, "
            "so there is nothing to draw.",
            f"Once titrated: stockroom found {bottle.number} STRENGTH",
        )
    scale = fading.shown[1]
    results = _results(record, today, scale)
    wanted = tuple(
        Mark(mark.what, mark.strength * scale, mark.on, mark.by)
        for mark in fading.course.marks
        if mark.by is not None or not mark.what.endswith("of its label")
    )
    recheck = verdict(record, rules, today).recheck_by
    band, no_band = _band(bottle.number, record, rules, today)
    days = _days(_first(record, fading, results), _last(today, wanted, recheck), record, today)
    return Fade(
        head=head_for(
            known.house.name,
            f"Strength of {bottle.number} {raised(bottle.line)}",
            today,
            about=_about(fading, wanted),
            practice=known.house.practice,
        ),
        bottle=bottle.number,
        unit=Scale(*fading.shown).unit,
        nominal=None if record.nominal is None else record.nominal * scale,
        label=_label(fading, record),
        found=results,
        curve=tuple(_curve(record, rules, days, scale, band)),
        wanted=wanted,
        recheck=recheck,
        no_band=no_band,
        law=_law(fading),
    )


def _results(record: Record, today: date, scale: float) -> tuple[Found, ...]:
    checks = sorted(record.checks, key=lambda check: check.on)
    return tuple(
        Found(
            check.on,
            check.strength * scale,
            None if check.uncertainty is None else check.uncertainty * scale,
        )
        for check in checks
        if check.kind is CheckKind.FOUND and check.strength is not None and check.on <= today
    )


def _label(fading: Fading, record: Record) -> str:
    if record.nominal is None:
        return ""
    # as it stands there, with the figures somebody wrote
    return raised(fading.label) or Scale(*fading.shown).written(record.nominal).replace(TIED, " ")


def _law(fading: Fading) -> str:
    found = fading.course
    if found.rule is None:
        return "no law of fading is entered for this line: its strength is taken to stay"
    if found.since is None:
        return f"not {found.rule.origin} yet, so as strong as its label"
    return ""


def _about(fading: Fading, wanted: tuple[Mark, ...]) -> str:
    scale = Scale(*fading.shown)
    known = fading.course.strengths
    assert known.expected is not None
    words = f"expected today {scale.expected(known.expected)}"
    if _law(fading):
        return f"{words}; {_law(fading)}"
    weak = sorted((m.by, m.what) for m in wanted if m.by is not None and not m.in_time)
    if weak:
        return f"{words}; TOO WEAK for {', '.join(f'{what} on {day(by)}' for by, what in weak[:3])}"
    if any(mark.by for mark in wanted):
        return f"{words}; strong enough for all its bookings"
    return f"{words}; no booking takes this line"


# -- the days drawn ---------------------------------------------------------------------


def _first(record: Record, fading: Fading, results: tuple[Found, ...]) -> date:
    known = (fading.course.since, record.made, record.opened, record.received)
    days = [*(on for on in known if on), *(one.on for one in results)]
    # with no day at all, only what is ahead can be drawn
    return min([on for on in days if on <= fading.on], default=fading.on)


def _last(today: date, wanted: tuple[Mark, ...], recheck: date | None) -> date:
    days = [today + timedelta(days=AHEAD), *(m.by for m in wanted if m.by)]
    days += [m.on for m in wanted if m.on] + ([recheck] if recheck else [])
    farthest = today + timedelta(days=MOST_AHEAD)
    return max(on for on in days if on <= farthest) + timedelta(days=7)


def _days(first: date, last: date, record: Record, today: date) -> list[date]:
    span = (last - first).days
    step = max(1, -(-span // POINTS))
    days = {first + timedelta(days=n) for n in range(0, span + 1, step)} | {today, last}
    # the day of a result and the one before: there the line starts afresh
    for check in record.checks:
        days |= {check.on, check.on - timedelta(days=1)}
    return sorted(on for on in days if first <= on <= last)


def _curve(
    record: Record,
    rules: tuple[Rule, ...],
    days: list[date],
    scale: float,
    band: tuple[Learnt, Series] | None,
) -> list[Point]:
    row = []
    for on in days:
        expected = strengths_on(record, rules, on).likely
        if expected is None:
            continue
        low = high = None
        if band and on >= band[1].since:
            low, high = _limits(record, *band, on)
        scaled = (None if one is None else one * scale for one in (low, high))
        row.append(Point(on, expected * scale, *scaled))
    return row


# -- the band ---------------------------------------------------------------------------


def _band(
    number: str, record: Record, rules: tuple[Rule, ...], today: date
) -> tuple[tuple[Learnt, Series] | None, str]:
    """The line of its own checks, or why there is none."""
    rule = rule_for(record, rules, today)
    series = series_of(number, record, rule, today)
    if series is None or series.distinct < ENOUGH_DAYS:
        return None, "no band: fewer than three checks"
    try:
        return (learn_bottle(series, order_of(rule)), series), ""
    except StockroomError as trouble:
        return None, f"no band: {trouble}"


def _limits(
    record: Record, learnt: Learnt, series: Series, on: date
) -> tuple[float | None, float | None]:
    """The two-sided 95 % limits of the mean at a day; None where the fit runs off."""
    fit = learnt.fits[series.bottle]
    age = aged(record, series.rule, series.since, on)
    reach = reach_of(fit.df, two_sided=True)
    ends = [strength_at(fit.limit(age, side, reach), learnt.order) for side in Side]
    low, high = sorted(ends)
    return (low, high) if high != float("inf") else (None, None)
