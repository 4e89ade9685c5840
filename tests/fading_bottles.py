"""A bottle of iodine with as many checks as a test asks for, and the picture of its fade."""

from __future__ import annotations

from dataclasses import replace
from datetime import date, timedelta

from houses import MONDAY, house, solution

from stockroom.keeping.course import Fading, Mark, course
from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.planning.facts import Bottle
from stockroom.reports.pictures.fade import Fade, fade_of

MADE = date(2026, 10, 5)
FADES = Rule(RuleKind.FADES, origin=Origin.MADE, law=Law(1, 0.002), source="test")
FOUND = ((10, 0.0992), (30, 0.0940), (50, 0.0911), (70, 0.0866))


def fade(record: Record, rules: tuple[Rule, ...] = (FADES,), *marks: Mark) -> Fade:
    line = replace(solution(0.1, "iodine"), rules=rules)
    bottle = Bottle("S01", line.key, 1, 1, record)
    runs = course(record, rules, MONDAY, marks)
    fading = Fading("S01", line.key, line.unit, (line.unit, 1.0), MONDAY, runs, "0.1 mol/dm3")
    return fade_of(house([line]), bottle, fading)


def checked(count: int, doubt: float | None = None) -> Record:
    checks = [
        Check(MADE + timedelta(days=n), CheckKind.FOUND, strength=c, uncertainty=doubt)
        for n, c in FOUND[:count]
    ]
    return Record(made=MADE, nominal=0.1, checks=tuple(checks))
