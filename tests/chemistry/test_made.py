"""How good a made strength is: the doubts of balance, glass and bottle, and the laws they keep."""

from __future__ import annotations

import math

import periodictable
import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.atomic_weights import (
    LIMITS,
    element_counts,
    molar_mass_doubt,
    molar_mass_standard,
)
from stockroom.chemistry.formula import molar_mass
from stockroom.chemistry.glassware import ware
from stockroom.chemistry.made import assay_input, by_what, made, mass_input, volume_input
from stockroom.chemistry.steps import Step
from stockroom.chemistry.uncertainty import Input, exact_enough, normal
from stockroom.chemistry.weighing import Scale
from stockroom.errors import BadAmount, MissingFigure

CENTIGRAM = Scale("BAL1", 0.01)
ANALYTICAL = Scale("BAL3", 0.0001)
FLASK_B = ware("flask", 100, "B")


# EURACHEM/CITAC QUAM:2012, example A1 (a+b): 100.28 mg, ±0.01 %, a class A flask at ±4 °C
def test_quam_a1_is_made_from_its_steps() -> None:
    balance = mass_input(0.10028, 0.0001, linearity_g=0.0, repeatability_g=0.00005)
    assay = assay_input(0.9999, 0.0001)
    flask = volume_input(100, ware("flask", 100, "A"))
    assert flask.standard == pytest.approx(0.06647305, abs=1e-7)
    found = made(1002.69972, [Step(0.10028, 100, None, ware("flask", 100, "A"))], [balance, assay])
    assert found.standard == pytest.approx(0.835199, abs=1e-4)
    assert found.together("volume") == pytest.approx(0.66653, abs=1e-4)


# QUAM:2012, example A2 (a+b)
def test_a_balances_linearity_counts_twice() -> None:
    assert mass_input(0.3888, 0.0001, linearity_g=0.00015).standard == pytest.approx(
        0.0001225, abs=1e-6
    )


def test_a_balance_with_no_sheet_counts_its_display() -> None:
    # USP <41>'s floor of 0.41 of a step (c) is the display's rounding at tare and gross
    assert mass_input(1.0, 0.01).standard == pytest.approx(0.41 * 0.01, rel=0.005)


# QUAM:2012, example A2 (a+b): limits of the atomic weights as it has them, g/mol
def test_the_molar_mass_of_phthalate_is_known_as_in_quam_a2() -> None:
    limits = {"C": 0.0008, "H": 0.00007, "O": 0.0003, "K": 0.0001}
    counts = element_counts("C8H5KO4")
    assert molar_mass_standard(counts, limits) == pytest.approx(0.0037653, abs=1e-6)


# the abridged values of another library: a half-width is never far above its rounded figure
@pytest.mark.parametrize("symbol", sorted(LIMITS))
def test_the_limits_agree_with_a_second_opinion(symbol: str) -> None:
    second = getattr(periodictable, symbol)._mass_unc
    assert LIMITS[symbol] <= 1.01 * second
    assert LIMITS[symbol] >= second / 10


@pytest.mark.parametrize(
    ("formula", "counts"),
    [
        ("CuSO4·5H2O", {"Cu": 1, "S": 1, "O": 9, "H": 10}),
        ("(NH4)2Fe(SO4)2.6H2O", {"N": 2, "H": 20, "Fe": 1, "S": 2, "O": 14}),
        ("Na₂S₂O₃", {"Na": 2, "S": 2, "O": 3}),
        ("NaCl", {"Na": 1, "Cl": 1}),
    ],
)
def test_atoms_are_counted_water_and_all(formula: str, counts: dict[str, int]) -> None:
    assert dict(element_counts(formula)) == counts


def test_a_molar_mass_is_seldom_worth_a_thought() -> None:
    # reference: natural intervals, HCl ±155 ppm
    assert molar_mass_doubt("HCl").standard / molar_mass("HCl") == pytest.approx(9e-5, rel=0.05)


@pytest.mark.parametrize("formula", ["2H2O", "EtOH", ""])
def test_a_formula_that_is_none_is_refused(formula: str) -> None:
    with pytest.raises(BadAmount):
        molar_mass_doubt(formula)


def test_an_element_nobody_has_limits_for_is_named() -> None:
    with pytest.raises(MissingFigure, match='"Tm"'):
        molar_mass_doubt("Tm2O3")


def test_a_cylinder_is_not_exact_where_a_flask_is() -> None:
    # 0.1 mol/dm³ thiosulfate: 6.2 g in 250 cm³ on a 0.01 g balance
    flask, cylinder = (
        made(0.1, [Step(6.2, 250, CENTIGRAM, ware(kind, 250, "B"))])
        for kind in ("flask", "cylinder")
    )
    assert exact_enough(0.1, flask.standard, 0.005) == ""
    said = exact_enough(0.1, cylinder.standard, 0.005, how="with a measuring cylinder")
    assert said.endswith("not exact enough with a measuring cylinder")


def test_the_instruments_that_decide_are_named() -> None:
    step = Step(2.48, 100, CENTIGRAM, FLASK_B)
    assert by_what([step]) == "class B flask, 0.01 g balance"
    diluted = Step(10, 250, ware("pipette", 10, "A"), ware("cylinder", 250))
    assert by_what([step, diluted]) == (
        "class B measuring cylinder, class A pipette, class B flask, 0.01 g balance"
    )


def test_a_step_nobody_knows_the_tools_of_counts_as_exact() -> None:
    assert made(0.1, [Step(2.48, 100)]).standard == 0


def test_each_step_has_its_own_lines() -> None:
    steps = [
        Step(2.48, 100, CENTIGRAM, FLASK_B),
        Step(10, 250, ware("pipette", 10), ware("flask", 250)),
    ]
    names = {name for name, _ in made(0.1, steps).components}
    assert {"mass 1: balance", "volume 1: flask", "taken 2: pipette", "volume 2: flask"} <= names


def test_two_fillings_of_one_pipette_share_its_fault() -> None:
    once = volume_input(50, ware("pipette", 50, "B"))
    twice = volume_input(50, ware("pipette", 25, "B"), fills=2)
    # the same 25 cm³ pipette is off the same way both times
    assert twice.doubts[0].standard == pytest.approx(2 * 0.06 / math.sqrt(6))
    assert twice.standard > once.standard


@pytest.mark.parametrize("strength", [0.0, -0.1, float("nan")])
def test_a_strength_not_above_0_has_no_budget(strength: float) -> None:
    with pytest.raises(BadAmount, match="strength"):
        made(strength, [Step(1.0, 100, CENTIGRAM, FLASK_B)])


GRAMS = st.floats(0.05, 100)
STRENGTHS = st.floats(1e-4, 10)


@given(STRENGTHS, GRAMS, st.sampled_from([25, 50, 100, 250, 500, 1000]))
def test_a_class_a_flask_is_never_the_worse(strength: float, grams: float, size: int) -> None:
    better, worse = (
        made(strength, [Step(grams, size, CENTIGRAM, ware("flask", size, each))]) for each in "AB"
    )
    assert better.standard < worse.standard


@given(STRENGTHS, GRAMS, st.floats(1e-5, 0.05))
def test_a_less_certain_assay_never_makes_it_surer(
    strength: float, grams: float, limit: float
) -> None:
    step = [Step(grams, 100, ANALYTICAL, FLASK_B)]
    sure, less = (made(strength, step, [assay_input(0.99, each)]) for each in (0.0, limit))
    assert less.standard >= sure.standard


@given(STRENGTHS, GRAMS, st.sampled_from([1, 5, 10, 25]), st.sampled_from([100, 250, 500]))
def test_diluting_never_makes_a_strength_surer(
    strength: float, grams: float, taken: int, size: int
) -> None:
    weighed = Step(grams, 100, CENTIGRAM, FLASK_B)
    diluted = Step(taken, size, ware("pipette", taken), ware("flask", size))
    before, after = made(strength, [weighed]), made(strength, [weighed, diluted])
    assert after.relative > before.relative


def test_a_stock_brings_its_own_uncertainty_along() -> None:
    stock = Input("stock", 1.0, (normal("", 0.01),))
    diluted = Step(25, 250, ware("pipette", 25, "A"), ware("flask", 250, "A"))
    found = made(0.1, [diluted], [stock])
    assert found.together("stock") == pytest.approx(0.001)
    assert found.relative == pytest.approx(0.01, rel=0.02)
