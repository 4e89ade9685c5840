from __future__ import annotations

from collections.abc import Callable

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.weighing import batch_to_weigh, least_weighable, relative_error
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
