"""Exact lines: a strength must be known well enough, and a make says how good it will be."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest
from houses import booking as booked
from houses import (
    bought_bottle,
    cm3,
    day,
    g,
    house,
    made_bottle,
    made_from,
    recipe,
    solid,
    solution,
    wants,
)

from stockroom.keeping.record import Check, CheckKind
from stockroom.keeping.rules import Rule, RuleKind
from stockroom.measure.periods import Period
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.facts import Balance, Closeness, Facts, Glass
from stockroom.planning.plan import plan

TENTH = solution(0.1, "tenth", rules=(Rule(RuleKind.RECHECK, Period(30, "days")),))
SALT = solid()
FLASK = Glass("1 L flask", "flask", cm3(1000), "B")
CYLINDER = Glass("cylinder", "cylinder", cm3(1000), "B", cm3(10))
BALANCE = Balance("BAL1", g(0.01))


def held(uncertainty: float | None, closeness: Closeness = Closeness.EXACT, **more: Any) -> Plan:
    check = Check(day("01-04"), CheckKind.FOUND, True, 0.1, uncertainty)
    bottle = made_bottle("S01", TENTH, cm3(500), checks=(check,))
    need = wants(TENTH, cm3(100), closeness=closeness, **more)
    booking = booked("K01", "01-05")
    return plan(house([TENTH], recipes=[recipe(need)], bookings=[booking], bottles=[bottle]))


@pytest.mark.parametrize("uncertainty", [None, 0.0001, 0.00025])
def test_a_strength_known_to_half_a_per_cent_serves_an_exact_line(
    uncertainty: float | None,
) -> None:
    assert held(uncertainty).needs[0].outcome is Outcome.HAVE


def test_a_strength_known_less_well_does_not() -> None:
    answer = held(0.0003).needs[0]
    assert answer.outcome is not Outcome.HAVE
    told = " ".join(answer.reasons)
    assert "0.1000 ± 0.0006 mol/dm³: not exact enough" in told


def test_a_close_line_takes_what_is_known_less_well() -> None:
    assert held(0.0003, Closeness.CLOSE).needs[0].outcome is Outcome.HAVE


def test_a_stated_tolerance_says_how_well_it_must_be_known() -> None:
    assert held(0.0003, tolerance=0.01).needs[0].outcome is Outcome.HAVE
    assert held(0.0001, tolerance=0.001).needs[0].outcome is not Outcome.HAVE


def to_make(**more: Any) -> Facts:
    known = house(
        [TENTH, SALT],
        recipes=[recipe(wants(TENTH, cm3(1000), closeness=Closeness.EXACT))],
        bookings=[booked("K01", "01-08")],
        methods=[made_from(TENTH, SALT, titrated=True)],
        bottles=[bought_bottle("B01", SALT, g(500))],
    )
    usual = {"balances": (BALANCE,), "glassware": (FLASK, CYLINDER)}
    return replace(known, **(usual | more))


def said(facts: Facts) -> str:
    return " ".join(plan(facts).makes[0].reasons)


def test_a_make_for_an_exact_line_says_how_good_it_will_be() -> None:
    # worked out apart: √2 × 0.005/√3 g of 10 g; 0.80/√6, 0.16 and 1000 × 2.1e-4 × 4/√3 cm³
    # of 1000 cm³: 0.041 % and 0.061 % make 0.073 %, and twice that is told
    assert "made to 0.10000 ± 0.00015 mol/dm³ with BAL1 and a class B flask" in said(to_make())


def test_a_cylinder_is_not_exact_enough() -> None:
    told = said(to_make(glassware=(CYLINDER,)))
    assert "not exact enough with BAL1 and a class B measuring cylinder" in told
    assert "the titration finds it" in told


def test_glass_that_is_away_is_not_counted_on() -> None:
    away = replace(FLASK, away=((day("01-01"), day("01-31")),))
    assert "measuring cylinder" in said(to_make(glassware=(away, CYLINDER)))


@pytest.mark.parametrize(
    "more",
    [
        {"glassware": ()},
        {"balances": ()},
        {"glassware": (Glass("odd", "flask", cm3(999)),)},
    ],
)
def test_nothing_is_said_where_nothing_is_known(more: dict[str, object]) -> None:
    assert "±" not in said(to_make(**more))


def test_a_make_for_a_close_line_says_nothing_of_it() -> None:
    known = to_make()
    need = wants(TENTH, cm3(1000), closeness=Closeness.CLOSE)
    close = replace(known, recipes={("R01", 1): recipe(need)})
    assert "±" not in said(close)
