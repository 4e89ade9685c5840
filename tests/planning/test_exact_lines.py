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

from stockroom.findings import Lasting
from stockroom.keeping.record import Check, CheckKind
from stockroom.keeping.rules import Law, Rule, RuleKind
from stockroom.measure.periods import Period
from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.facts import Balance, Closeness, Facts, Glass, House, Line
from stockroom.planning.plan import plan

TENTH = solution(0.1, "tenth", rules=(Rule(RuleKind.RECHECK, Period(30, "days")),))
SALT = solid()
FLASK = Glass("1 L flask", "flask", cm3(1000), "B")
CYLINDER = Glass("cylinder", "cylinder", cm3(1000), "B", cm3(10))
BALANCE = Balance("BAL1", g(0.01))


def held(
    uncertainty: float | None,
    closeness: Closeness = Closeness.EXACT,
    line: Line = TENTH,
    **more: Any,
) -> Plan:
    check = Check(day("01-04"), CheckKind.FOUND, True, 0.1, uncertainty)
    bottle = made_bottle("S01", line, cm3(500), checks=(check,))
    need = wants(line, cm3(100), closeness=closeness, **more)
    booking = booked("K01", "01-05")
    return plan(house([line], recipes=[recipe(need)], bookings=[booking], bottles=[bottle]))


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


def test_what_is_told_is_what_was_found_and_not_what_is_left_of_it() -> None:
    # a day later 0.0998 is expected, and nobody found that
    fading = replace(TENTH, rules=(*TENTH.rules, Rule(RuleKind.FADES, law=Law(1, 0.002))))
    told = " ".join(held(0.0003, line=fading).needs[0].reasons)
    assert "found 0.1000 ± 0.0006 mol/dm³: not exact enough" in told


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


def test_in_two_flasks_each_is_weighed_for() -> None:
    # worked out apart: 5 g to 500 cm³ twice; 0.082 % of a mass, and 0.020, 0.010 and 0.048 %
    # of a volume make 0.098 %, and twice that is told
    glass = (Glass("500 cm³ flask", "flask", cm3(500), "A"),)
    told = said(to_make(glassware=glass, house=House(largest_vessel=cm3(500))))
    assert "in 2 vessels" in told
    assert "made to 0.1000 ± 0.0002 mol/dm³ with BAL1 and a class A flask" in told


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


def test_a_make_for_a_close_line_says_how_good_it_will_be_too() -> None:
    known = to_make()
    need = wants(TENTH, cm3(1000), closeness=Closeness.CLOSE)
    told = said(replace(known, recipes={("R01", 1): recipe(need)}))
    assert "made to 0.10000 ± 0.00015 mol/dm³ with BAL1 and a class B flask" in told
    assert "titration" not in told


# -- a dilution, in the label's own unit ----------------------------------------------

STRONG = replace(solution(8.0, "peroxide"), strength_text="90 vol")
PEROXIDE = replace(solution(0.8, "weak peroxide"), strength_text="9 vol")
BULB = Glass("100 cm³ bulb pipette", "pipette", cm3(100), "B")


def dilution(uncertainty: float | None = None, *, found: bool = True) -> str:
    """What is said of a litre of 9 vol by a bulb pipette and a flask from 90 vol."""
    checks = (Check(day("01-04"), CheckKind.FOUND, True, 8.0, uncertainty),) if found else ()
    known = house(
        [STRONG, PEROXIDE],
        recipes=[recipe(wants(PEROXIDE, cm3(1000)))],
        bookings=[booked("K01", "01-08")],
        methods=[made_from(PEROXIDE, STRONG)],
        bottles=[bought_bottle("B01", STRONG, cm3(500), checks=checks)],
    )
    return said(replace(known, glassware=(FLASK, BULB)))


@pytest.mark.parametrize("found", [True, False])
def test_a_stock_of_unknown_uncertainty_is_taken_as_it_stands_and_said(found: bool) -> None:
    # worked out apart: 0.15/√6, 0.03 and 100 × 2.1e-4 × 4/√3 cm³ of 100 cm³ are 0.084 %,
    # with the 0.061 % of the flask 0.104 %, and twice that is told
    told = dilution(found=found)
    assert "made to 9.000 ± 0.019 vol with a class B pipette and a class B flask" in told
    assert "taking B01 as it stands" in told


def test_what_is_known_of_the_stock_counts() -> None:
    # 1 % of the stock and 0.104 % of the glass are 1.005 %
    told = dilution(0.08)
    assert "made to 9.00 ± 0.18 vol" in told
    assert "as it stands" not in told


# -- a result without its uncertainty is a guess --------------------------------------


def guessed(plan_made: Plan) -> list[tuple[str, str]]:
    return [(guess.subject, guess.text) for guess in plan_made.guesses]


TAKEN = ("S01", "its found strength has no uncertainty: taken as exact enough")


def test_a_result_without_an_uncertainty_that_serves_an_exact_line_is_a_guess() -> None:
    assert guessed(held(None)) == [TAKEN]
    assert all(isinstance(guess, Lasting) for guess in held(None).guesses)


def test_a_bottle_that_serves_two_of_them_is_told_once() -> None:
    need = wants(TENTH, cm3(100), closeness=Closeness.EXACT)
    check = Check(day("01-04"), CheckKind.FOUND, True, 0.1)
    bottle = made_bottle("S01", TENTH, cm3(500), checks=(check,))
    bookings = [booked("K01", "01-05"), booked("K02", "01-06")]
    known = house([TENTH], recipes=[recipe(need)], bookings=bookings, bottles=[bottle])
    assert guessed(plan(known)) == [TAKEN]


@pytest.mark.parametrize(
    "made", [held(0.0001), held(None, Closeness.CLOSE)], ids=["with one", "close"]
)
def test_known_well_enough_or_not_wanted_exact_it_is_no_guess(made: Plan) -> None:
    assert guessed(made) == []


def test_a_result_too_old_to_serve_is_titrated_again_and_not_leaned_on() -> None:
    check = Check(day("2026-11-01"), CheckKind.FOUND, True, 0.1)
    bottle = made_bottle("S01", TENTH, cm3(500), "2026-10-01", checks=(check,))
    need = wants(TENTH, cm3(100), closeness=Closeness.EXACT)
    bookings = [booked("K01", "01-05")]
    made = plan(house([TENTH], recipes=[recipe(need)], bookings=bookings, bottles=[bottle]))
    assert [check.subject for check in made.checks] == ["S01"]
    assert TAKEN not in guessed(made)
