"""Figures and orders of choice that stand in small print: spare, alike bottles, derived methods."""

from __future__ import annotations

import pytest
from houses import booking, cm3, house, made_bottle, planned, recipe, solid, solution, wants

from stockroom.planning.decisions import Outcome, Plan
from stockroom.planning.derive import with_derived
from stockroom.planning.facts import Method, Per

DYE = solution(0.5, "dye")


def test_usage_tells_the_spare_apart() -> None:
    """4 groups × 50 cm³ with 10 % is 220 cm³, 20 of it spare."""
    plan = planned(
        [DYE],
        recipes=[recipe(wants(DYE, cm3(50), per=Per.GROUP))],
        bookings=[booking("K1", "01-19", groups=4, spare=100)],
        bottles=[made_bottle("S1", DYE, cm3(500))],
    )
    [use] = [use for use in plan.usage if use.form == "solution"]
    assert (use.amount, use.spare) == (cm3(220), cm3(20))


def two_bottles(apart: float) -> Plan:
    """150 cm³ wanted from 100 + 100 cm³ whose strengths lie so far apart (as a fraction)."""
    return planned(
        [DYE],
        recipes=[recipe(wants(DYE, cm3(150)))],
        bookings=[booking("K1", "01-19")],
        bottles=[
            made_bottle("S1", DYE, cm3(100)),
            made_bottle("S2", DYE, cm3(100), nominal=0.5 * (1 + apart)),
        ],
    )


@pytest.mark.parametrize(("apart", "outcome"), [(0.0005, Outcome.HAVE), (0.005, Outcome.SHORT)])
def test_bottles_are_put_together_only_when_their_strengths_agree(
    apart: float, outcome: Outcome
) -> None:
    assert [need.outcome for need in two_bottles(apart).needs] == [outcome]


def test_a_derived_method_takes_a_stronger_solution_while_held_then_the_solid() -> None:
    strong = solution(1.0, "dye", substance="dye")
    salt = solid("dye")
    facts = with_derived(house([DYE, strong, salt], methods=[Method(DYE.key, ())]))
    [ingredient] = facts.methods[DYE.key].ingredients
    assert ingredient.lines == (strong.key, salt.key)
    assert ingredient.only_if_held == {strong.key}


def test_a_derived_method_with_nothing_to_come_from_is_no_method() -> None:
    facts = with_derived(house([DYE], methods=[Method(DYE.key, ())]))
    assert DYE.key not in facts.methods
