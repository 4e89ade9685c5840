"""The cautions of a line's bottles: a lower limit for each, from the best there is to go by.

In this order: the bottle's own checks, on three days or more; the checks of its line;
the uncertainty of what was found. A fit that tells nothing (too few checks, a line that
rises) is passed over, and a bottle with none of the three is left as it is.
"""

from __future__ import annotations

from collections.abc import Iterable, Mapping
from dataclasses import dataclass, replace
from datetime import date

from stockroom.errors import StockroomError
from stockroom.keeping.caution import Basis, Caution, Lower
from stockroom.keeping.fits import Fit, reach_of
from stockroom.keeping.learnt import Learnt, learn_bottle, learn_line
from stockroom.keeping.record import CheckKind, Record
from stockroom.keeping.rules import Rule
from stockroom.keeping.series import PLAIN, Series, order_of, rule_for, series_of
from stockroom.keeping.strength import last_check


@dataclass(frozen=True, slots=True)
class Witness:
    """One bottle whose checks may teach, gone or not; `since` the day it was last topped up."""

    number: str
    record: Record
    since: date | None = None


@dataclass(frozen=True, slots=True)
class SafeSide:
    """A caution for each bottle that has one, and one for what is still to be made."""

    bottles: dict[str, Caution]
    fresh: Caution | None = None


def safe_side(
    rules: tuple[Rule, ...], held: Mapping[str, Record], witnesses: Iterable[Witness], on: date
) -> SafeSide:
    """The cautions of one line's bottles on the shelf, from the checks of all it ever had.

    Every fit is done once. What is still to be made starts at its label's strength and
    fades as fast as the line may.
    """
    every = series_by_rule(witnesses, rules, on)
    lines = {rule: learnt for rule, row in every.items() if (learnt := _line(row))}
    own = {one.bottle: one for row in every.values() for one in row if one.bottle in held}
    cautions = {
        number: _caution(record, rules, lines.get(rule_for(record, rules, on)), own.get(number), on)
        for number, record in held.items()
    }
    fresh = lines.get(rule_for(Record(made=on), rules, on))
    return SafeSide(
        {number: caution for number, caution in cautions.items() if caution},
        Caution(Basis.LINE, carried_by=_fastest(rules, fresh)) if fresh else None,
    )


def series_by_rule(
    witnesses: Iterable[Witness], rules: tuple[Rule, ...], on: date
) -> dict[Rule, list[Series]]:
    """The series of all bottles that were ever checked, by the rule of fading each ages under."""
    found: dict[Rule, list[Series]] = {}
    for one in witnesses:
        rule = rule_for(one.record, rules, on)
        series = series_of(one.number, one.record, rule, on, one.since)
        if series:
            found.setdefault(rule, []).append(series)
    return found


def _line(every: list[Series]) -> Learnt | None:
    try:
        return learn_line(every, order_of(every[0].rule))
    except StockroomError:
        # nothing to be learnt is no fault of the plan: the next best takes its place
        return None


def _bottle(series: Series | None) -> Learnt | None:
    try:
        return learn_bottle(series, order_of(series.rule)) if series else None
    except StockroomError:
        return None


def _caution(
    record: Record, rules: tuple[Rule, ...], line: Learnt | None, series: Series | None, on: date
) -> Caution | None:
    own = _bottle(series)
    if own and series:
        return _limited(Basis.OWN, own, series)
    if line and series and series.bottle in line.fits:
        return _limited(Basis.LINE, line, series)
    found = last_check(record, on, CheckKind.FOUND)
    if line:
        # with a result of its own it starts there; without one, as the worst of its line
        limits = () if found else tuple(dict.fromkeys(_lower(f, line) for f in line.fits.values()))
        fastest = _fastest(rules, line)
        return Caution(Basis.LINE, line.rule, limits, carried_by=fastest, doubted=True)
    return Caution(Basis.DOUBT, doubted=True) if found and found.uncertainty else None


def _limited(basis: Basis, learnt: Learnt, series: Series) -> Caution:
    limits = (_lower(learnt.fits[series.bottle], learnt),)
    return Caution(basis, series.rule, limits, series.ages[-1], series.since)


def _lower(fit: Fit, learnt: Learnt) -> Lower:
    return Lower(fit, learnt.order, reach_of(fit.df))


def _fastest(rules: tuple[Rule, ...], line: Learnt) -> tuple[Rule, ...]:
    """The rules with the fading of one at the upper 95 % limit of its rate."""
    law = line.law(max(line.rate(bottle).most for bottle in line.fits))
    fading = replace(line.rule, law=law)
    if line.rule == PLAIN:
        return (*rules, fading)
    return tuple(fading if rule == line.rule else rule for rule in rules)
