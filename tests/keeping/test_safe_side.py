"""The limits a bottle carries through a plan on the safe side."""

from __future__ import annotations

from dataclasses import replace
from datetime import timedelta

import pytest
from houses import day
from hypothesis import given
from hypothesis import strategies as st

from stockroom.keeping.caution import Basis, Caution, Lower
from stockroom.keeping.fits import Fit
from stockroom.keeping.record import Check, CheckKind, Record
from stockroom.keeping.rules import Law, Rule, RuleKind
from stockroom.keeping.safe_side import Witness, safe_side

MADE, ON = day("2026-10-05"), day("01-04")
FADES = Rule(RuleKind.FADES, law=Law(1, 0.001))

# a line known best at 100 days: read on from a young age, its limit first rises
MIDDLE = Lower(Fit(100.0, 0.9, -0.0002, 0.05, 4, 0.2, 1e-4), order=0, reach=2.0)


def bottle(*results: tuple[int, float]) -> Record:
    checks = tuple(
        Check(MADE + timedelta(age), CheckKind.FOUND, True, strength) for age, strength in results
    )
    return Record(made=MADE, nominal=1.0, checks=checks)


STEADY = bottle((0, 1.0), (28, 0.93), (56, 0.872), (84, 0.81))
FEW = bottle((0, 1.0), (70, 0.84))


def test_a_limit_that_first_rises_gives_nothing_back() -> None:
    caution = Caution(Basis.LINE, limits=(MIDDLE,))
    assert MIDDLE.at(80) > MIDDLE.at(0)
    assert caution.least(80) == [MIDDLE.at(0)]


def test_before_its_last_check_a_limit_says_what_it_says_then() -> None:
    caution = Caution(Basis.OWN, limits=(MIDDLE,), from_age=120.0)
    assert caution.least(3) == [MIDDLE.at(120)]


def test_two_checks_take_their_place_among_their_line() -> None:
    held = {"S02": STEADY, "S05": FEW}
    sides = safe_side((FADES,), held, [Witness(n, r) for n, r in held.items()], ON)
    assert sides.bottles["S02"].basis is Basis.OWN
    assert (sides.bottles["S05"].basis, sides.bottles["S05"].from_age) == (Basis.LINE, 70.0)
    assert sides.bottles["S05"].limits


def test_what_is_to_be_made_fades_as_fast_as_its_line_may() -> None:
    fresh = safe_side((FADES,), {}, [Witness("S02", STEADY)], ON).fresh
    assert fresh
    assert fresh.carried_by
    (rule,) = fresh.carried_by
    assert rule.law
    # 0.19 in 84 days is 0.0025 a day
    assert 0.0025 < rule.law.rate < 0.003
    assert fresh.limits == ()


def test_nothing_found_leaves_nothing_to_be_cautious_with() -> None:
    sides = safe_side((FADES,), {"S09": bottle()}, [Witness("S09", bottle())], ON)
    assert (sides.bottles, sides.fresh) == ({}, None)


def test_other_rules_of_the_line_stay_as_they_are() -> None:
    never = Rule(RuleKind.NEVER)
    fresh = safe_side((never, FADES), {}, [Witness("S02", STEADY)], ON).fresh
    assert fresh
    assert fresh.carried_by
    assert fresh.carried_by[0] == never
    assert fresh.carried_by[1] != FADES


def test_without_a_rule_of_fading_one_is_put_beside_the_others() -> None:
    never = Rule(RuleKind.NEVER)
    fresh = safe_side((never,), {}, [Witness("S02", STEADY)], ON).fresh
    assert fresh
    assert [rule.kind for rule in fresh.carried_by or ()] == [RuleKind.NEVER, RuleKind.FADES]


ages = st.floats(0, 400)


@given(
    st.floats(0, 200), st.floats(0.2, 2), st.floats(-0.01, 0), st.floats(0, 0.2),
    st.sampled_from([0, 1, 2]), ages, ages, ages,
)  # fmt: skip
def test_a_limit_never_rises(
    centre: float, mean: float, slope: float, scatter: float, order: int, since: float,
    one: float, other: float,
) -> None:  # fmt: skip
    # 1/C rises as strength falls
    fit = Fit(centre, mean, slope, scatter, 4, 0.2, 1e-4)
    fit = replace(fit, slope=-slope) if order == 2 else fit
    caution = Caution(Basis.OWN, limits=(Lower(fit, order, 2.1),), from_age=since)
    young, old = (caution.least(age)[0] for age in sorted((one, other)))
    assert old <= young or old == pytest.approx(young, rel=1e-12)
