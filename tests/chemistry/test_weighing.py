from __future__ import annotations

from collections.abc import Callable

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.weighing import (
    batch_to_weigh,
    least_by_pharmacopoeia,
    least_weighable,
    relative_error,
)
from stockroom.errors import BadAmount

MASSES = st.floats(1e-4, 100)


# Common practice, no source: one step of the display over the closeness.
@pytest.mark.parametrize(
    ("step", "closeness", "least"),
    [(0.01, 0.02, 0.50), (0.01, 0.05, 0.2), (0.001, 0.005, 0.2), (0.01, 0.10, 0.1)],
)
def test_the_least_mass_is_the_step_over_the_closeness(
    step: float, closeness: float, least: float
) -> None:
    assert least_weighable(step, closeness) == pytest.approx(least)


def test_15_mg_is_too_little_for_a_balance_of_10_mg() -> None:
    # common practice, no source
    assert least_weighable(0.01, 0.05) > 0.015


# A graduated pipette of 1 cm³ reads to 0.01 cm³: common practice, no source.
@pytest.mark.parametrize(("closeness", "passes"), [(0.05, True), (0.02, False)])
def test_0_35_cm3_from_a_graduated_pipette(closeness: float, passes: bool) -> None:
    assert (least_weighable(0.01, closeness) <= 0.35) is passes


# Recomputed: one step of 0.01 g over the mass.
@pytest.mark.parametrize(("mass", "error"), [(0.176, 0.057), (0.352, 0.028)])
def test_the_error_of_a_small_mass(mass: float, error: float) -> None:
    assert relative_error(0.01, mass) == pytest.approx(error, abs=5e-4)


def test_too_little_to_weigh_becomes_a_larger_batch() -> None:
    # 0.10 % w/v in 176 cm³ at ±2 % on 0.01 g: 0.50 g in 500 cm³
    assert batch_to_weigh(0.176, 176, 0.50) == pytest.approx((0.50, 500))


def test_enough_to_weigh_stays_as_it_is() -> None:
    assert batch_to_weigh(0.352, 352, 0.2) == (0.352, 352)


# USP <41>: s in g, step in g, least mass in g; its own example a+b, the others b, all exact.
@pytest.mark.parametrize(
    ("spread", "step", "least"),
    [
        pytest.param(0.00015, 0.0, 0.30000, id="USP's own example"),
        pytest.param(None, 1.0, 820.0, id="the floor is 820 steps"),
        pytest.param(0.00003, 0.0001, 0.082, id="floor applies"),
        pytest.param(0.000006, 0.00001, 0.012, id="floor does not apply"),
        pytest.param(0.0003, 0.001, 0.820, id="floor applies to a milligram"),
        pytest.param(0.004, 0.01, 8.2, id="a teaching top-pan balance"),
    ],
)
def test_the_least_mass_by_the_pharmacopoeia(
    spread: float | None, step: float, least: float
) -> None:
    found = least_by_pharmacopoeia(repeatability_g=spread, step_g=step)
    assert found == pytest.approx(least, rel=1e-12)


def test_the_rule_before_2013_is_not_the_one_in_force() -> None:
    # USP <41>, a+b: 3·s within 0.1 % gave 1000 steps
    assert least_by_pharmacopoeia(step_g=0.001) < 1000 * 0.001


def test_without_a_spread_or_a_step_there_is_nothing_to_go_by() -> None:
    with pytest.raises(BadAmount, match="repeatability None, balance step 0 g"):
        least_by_pharmacopoeia()


@pytest.mark.parametrize("spread", [0.0, -0.001, float("nan")])
def test_a_spread_not_above_0_is_refused(spread: float) -> None:
    with pytest.raises(BadAmount, match="repeatability"):
        least_by_pharmacopoeia(repeatability_g=spread, step_g=0.001)


@pytest.mark.parametrize("figure", [0.0, -1.0, float("nan")])
def test_a_figure_not_above_0_is_refused(figure: float) -> None:
    sums: list[Callable[[], object]] = [
        lambda: least_weighable(figure, 0.05),
        lambda: least_weighable(0.01, figure),
        lambda: batch_to_weigh(figure, 100, 0.2),
        lambda: relative_error(0.01, figure),
    ]
    for sum_of in sums:
        with pytest.raises(BadAmount):
            sum_of()


@given(MASSES, st.floats(1, 5000), MASSES)
def test_a_larger_batch_keeps_its_strength(mass: float, volume: float, least: float) -> None:
    grams, cubic = batch_to_weigh(mass, volume, least)
    assert grams >= least
    assert cubic >= volume
    assert grams / cubic == pytest.approx(mass / volume, rel=1e-9)


@given(st.sampled_from([0.1, 0.01, 0.001]), st.floats(0.005, 0.5))
def test_the_least_mass_is_just_close_enough(step: float, closeness: float) -> None:
    assert relative_error(step, least_weighable(step, closeness)) == pytest.approx(closeness)


@given(st.floats(1e-6, 0.1), st.sampled_from([0.1, 0.01, 0.001, 0.0001]))
def test_the_pharmacopoeia_is_stricter_than_a_tenth_of_a_per_cent_of_a_step(
    spread: float, step: float
) -> None:
    least = least_by_pharmacopoeia(repeatability_g=spread, step_g=step)
    assert 2 * spread / least <= 0.0010 * (1 + 1e-9)
    assert least >= 820 * step * (1 - 1e-9)
