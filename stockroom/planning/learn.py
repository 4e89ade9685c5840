"""What a bottle or a line has taught by its checks, with what that means for its keeping."""

from __future__ import annotations

import math
from collections.abc import Iterable
from dataclasses import dataclass
from datetime import date

from stockroom.errors import MissingFigure
from stockroom.findings import Finding
from stockroom.keeping.arrhenius import Response, q10_of
from stockroom.keeping.caution import Basis, Caution, Lower
from stockroom.keeping.fits import reach_of, strength_at
from stockroom.keeping.laws import first_below, response_of
from stockroom.keeping.learnt import Learnt, Rate, learn_bottle, learn_line, monthly_loss
from stockroom.keeping.pooling import Model
from stockroom.keeping.record import Record
from stockroom.keeping.rules import Origin
from stockroom.keeping.safe_side import Witness, series_by_rule
from stockroom.keeping.series import PLAIN, Series, order_of, rule_for, series_of
from stockroom.keeping.strength import aged, stretches
from stockroom.measure.formats import format_number
from stockroom.planning.facts import Line

PART = 0.90
"""How much of the label's strength must be left, where nobody says. Common practice, no source."""

PARTS = (0.95, 0.90, 0.80)
"""What else is told: a close need, a tenth lost, a rough need."""


@dataclass(frozen=True, slots=True)
class Question:
    """What is asked: of one bottle (`number`) or of all of a line, as at a day.

    `order` None takes that of the house's rule, else 1. `part` of the label's strength
    must be left. `since` leaves out what was found of the bottle before that day.
    """

    as_at: date
    number: str = ""
    order: int | None = None
    part: float = PART
    since: date | None = None


@dataclass(frozen=True, slots=True)
class Taught:
    """One bottle still there: what its line says of it on the day, in the line's unit.

    `at_least` is the lower one-sided 95 % limit of the mean, `below_on` the first day
    that is under the strength needed.
    """

    bottle: str
    checks: int
    last: date
    expected: float
    at_least: float
    below_on: date | None


@dataclass(frozen=True, slots=True)
class Lesson:
    """The answer. Lives are days, by the lower one-sided 95 % limit of the mean.

    `start` is the strength a loss is a part of: the label's, else what the checks say it
    began at. `decides` is the bottle that falls below `lowest` first. `own_scatter` is the
    same life and bottle when separate lines each keep their own scatter. `at_c` is
    the °C the rate is for, None when not known. `by_law` is true when ages were counted
    at the °C of the law, and not by the calendar.
    """

    about: str
    line: Line
    question: Question
    learnt: Learnt
    origin: Origin
    start: float
    lowest: float
    decides: str
    life: float
    other_lives: tuple[tuple[float, float], ...]
    own_scatter: tuple[str, float] | None
    at_c: float | None
    by_law: bool
    bottles: tuple[Taught, ...]
    left_out: tuple[Finding, ...]

    @property
    def rate(self) -> Rate:
        """The rate of the bottle that decides."""
        return self.learnt.rate(self.decides)

    @property
    def checked_to(self) -> float:
        """The greatest age, in days, at which anything was found."""
        return max(age for one in self.learnt.series for age in one.ages)

    @property
    def checks(self) -> int:
        """How many strengths it was learnt from."""
        return sum(len(one.days) for one in self.learnt.series)

    def monthly(self, rate: float) -> float:
        """Per cent of `start` lost in the first month at a rate; 0 for none or a gain."""
        return 100.0 * monthly_loss(self.start, self.learnt.law(max(0.0, rate)))


def lesson(line: Line, witnesses: Iterable[Witness], question: Question) -> Lesson:
    """What the checks of a line's bottles teach, or those of the one bottle asked about.

    Raises: MissingFigure when nothing was found yet, and as `learn_bottle`.
    """
    known = {one.number: one for one in witnesses}
    learnt, left_out = _learnt(line, known, question)
    records = {one.bottle: known[one.bottle].record for one in learnt.series}
    first = learnt.series[0].bottle
    start = line.strength or strength_at(learnt.fits[first].start, learnt.order)
    lowest = question.part * start
    decides, life = learnt.life(lowest)
    return Lesson(
        about=question.number or line.key,
        line=line,
        question=question,
        learnt=learnt,
        origin=_origin(learnt, records[first]),
        start=start,
        lowest=lowest,
        decides=decides,
        life=life,
        other_lives=tuple((p, learnt.life(p * start)[1]) for p in PARTS if p != question.part),
        own_scatter=_own_scatter(learnt, lowest),
        at_c=_temperature(learnt, records),
        by_law=_response(learnt) is not None,
        bottles=tuple(_taught(learnt, records, question.as_at, lowest)),
        left_out=(*learnt.left_out, *left_out),
    )


def fading_cells(found: Lesson) -> dict[str, str]:
    """The fitted rate as the cells of a rule of fading, as they would be typed."""
    law, unit = found.learnt.law(found.rate.value), found.line.unit
    cells = {
        "order": str(law.order),
        "rate": format_number(law.rate, 4),
        # a first-order rate is a share in a time, whatever the strength is counted in
        "rate_of": unit if law.order != 1 else "",
        "rate_per": "day",
        "counted_from": found.origin.value,
        "at_c": "" if found.at_c is None else f"{found.at_c:g}",
        "ea_kj_mol": "" if law.ea_kj_mol is None else f"{law.ea_kj_mol:.4g}",
    }
    told = {column: cell for column, cell in (cells | _which(found)).items() if cell}
    own = found.learnt.rule.law
    # unsaid, the °C of the old rate would stay beside the new one
    stale = found.at_c is None and own is not None and own.at_c is not None
    return told | ({"at_c": ""} if stale else {})


def in_short(found: Lesson) -> str:
    """What was learnt, for the record: "4 checks: 1.1 % a month at 20 °C, 0.69 to 1.6"."""
    rates = (found.rate.low, found.rate.value, found.rate.high)
    low, value, high = (format_number(found.monthly(rate), 2) for rate in rates)
    checks = f"{found.checks} check{'' if found.checks == 1 else 's'}"
    at = "" if found.at_c is None else f" at {found.at_c:g} °C"
    return f"{checks}: {value} % a month{at}, {low} to {high}"


def life_cells(found: Lesson) -> dict[str, str]:
    """The keeping time found as the cells of a rule of life; empty below a day and for ever.

    Empty too where it was counted from a day given and not from what a rule counts from.
    """
    if not 1 <= found.life < math.inf or found.question.since:
        return {}
    places = {column: cell for column, cell in _which(found).items() if column.endswith("_c")}
    # rounded down: on its last day the limit must still hold
    lasts = {"lasts": f"{math.floor(found.life)} d", "counted_from": found.origin.value}
    return lasts | _life_warmth(found) | places


def _life_warmth(found: Lesson) -> dict[str, str]:
    """The °C the life is for, with how much faster it is over in the warm: a factor only."""
    law = found.learnt.law(found.rate.value)
    if not found.by_law or found.at_c is None:
        return {}
    factor = law.factor_per_10c
    if factor is None and law.ea_kj_mol is not None:
        factor = q10_of(law.ea_kj_mol, found.at_c)
    cells = {"at_c": f"{found.at_c:g}", "factor_per_10c": format_number(factor or 1.0, 3)}
    return cells if factor else {}


def _which(found: Lesson) -> dict[str, str]:
    """The band and place of the rule it would stand in for, where the line has several."""
    rule, unit = found.learnt.rule, found.line.unit
    bounds = {"stronger_than": rule.above, "up_to_strength": rule.upto}
    places = {"colder_than_c": rule.colder_than, "warmer_than_c": rule.warmer_than}
    # seven figures are as near as a rule tells two strengths apart
    cells = {column: f"{x:.7g} {unit}" for column, x in bounds.items() if x is not None}
    return cells | {column: f"{x:g}" for column, x in places.items() if x is not None}


def _learnt(
    line: Line, known: dict[str, Witness], question: Question
) -> tuple[Learnt, list[Finding]]:
    if question.number:
        series = _series(line, known[question.number], question)
        return learn_bottle(series, _order(question, series)), []
    groups = series_by_rule(known.values(), line.rules, question.as_at)
    if not groups:
        raise MissingFigure(
            f"No strength of {line.key} has been found yet in a bottle whose age is known.",
            'Titrate one, and enter it: stockroom found S02 "0.0987 mol/dm3".',
        )
    # bottles kept cold and warm may have a rule each: the best checked tells the tale
    most = max(groups.values(), key=lambda row: sum(len(one.days) for one in row))
    others = [one.bottle for row in groups.values() if row is not most for one in row]
    left_out = [Finding(number, "kept under another rule of fading") for number in others]
    return learn_line(most, _order(question, most[0])), left_out


def _series(line: Line, witness: Witness, question: Question) -> Series:
    rule = rule_for(witness.record, line.rules, question.as_at)
    since = question.since or witness.since
    series = series_of(witness.number, witness.record, rule, question.as_at, since)
    if series:
        return series
    counted = f"since {since}" if since else f"since it was {rule.origin}"
    raise MissingFigure(
        f"No strength of {witness.number} has been found yet {counted}.",
        f'Titrate it, and enter it: stockroom found {witness.number} "0.0987 mol/dm3".',
    )


def _order(question: Question, series: Series) -> int:
    return order_of(series.rule) if question.order is None else question.order


def _own_scatter(learnt: Learnt, lowest: float) -> tuple[str, float] | None:
    if learnt.pooled is None or learnt.pooled.model is not Model.POOLED:
        return None
    try:
        return learnt.life(lowest, learnt.pooled.fits(Model.OWN))
    except MissingFigure:
        # a bottle of two checks has no scatter of its own
        return None


def _origin(learnt: Learnt, record: Record) -> Origin:
    if learnt.rule == PLAIN:
        return Origin.MADE if record.made else Origin.RECEIVED
    return learnt.rule.origin


def _response(learnt: Learnt) -> Response | None:
    return response_of(learnt.rule.law) if learnt.rule.law else None


def _temperature(learnt: Learnt, records: dict[str, Record]) -> float | None:
    response = _response(learnt)
    if response:
        return response.at_c
    stood = {
        stretch.temperature_c
        for one in learnt.series
        for stretch in stretches(records[one.bottle], one.days[-1])
        if max(stretch.first, one.since) < stretch.last
    }
    # in two places, or in one nobody knows the warmth of: the rate is for neither
    return stood.pop() if len(stood) == 1 else None


def _taught(
    learnt: Learnt, records: dict[str, Record], as_at: date, lowest: float
) -> Iterable[Taught]:
    for one in learnt.series:
        record = records[one.bottle]
        if not record.gone:
            yield _told(learnt, one, record, as_at, lowest)


def _told(learnt: Learnt, one: Series, record: Record, as_at: date, lowest: float) -> Taught:
    fit = learnt.fits[one.bottle]
    lower = Lower(fit, learnt.order, reach_of(fit.df))
    caution = Caution(Basis.OWN, one.rule, (lower,), one.ages[-1])

    def age(day: date) -> float:
        return aged(record, one.rule, one.since, day)

    def least(day: date) -> float:
        return min(caution.least(age(day)))

    expected = strength_at(fit.at(age(as_at)), learnt.order)
    below = first_below(least, lowest, one.days[-1])
    return Taught(one.bottle, len(one.days), one.days[-1], expected, least(as_at), below)
