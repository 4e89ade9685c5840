"""Warmth and rates: Arrhenius, the factor per 10 °C and mean kinetic temperature, as published.

a = seen, b = worked out again from seen figures, c = from memory.
"""

from __future__ import annotations

from itertools import pairwise

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadAmount
from stockroom.keeping.arrhenius import (
    MKT_EA,
    MKT_R,
    Response,
    by_energy,
    by_factor,
    ea_between,
    ea_of,
    kinetic_response,
    mean_kinetic,
    mean_kinetic_over,
    q10_of,
    ratio,
    temperature_at,
)

energies = st.floats(5.0, 250.0)
warmths = st.floats(-30.0, 60.0)

# id, °C, weights, mean, mean kinetic at 83.144, 50 and 100 kJ/mol; worked out again (b) from the
# formula of USP 29 <1160> (a, page copy), ±0.0005 °C
KINETIC = [
    ("E1", (20, 30), (1, 1), 25.0, 26.2599, 25.7484, 26.5006),
    ("E2", (15, 25, 35), (1, 1, 1), 25.0, 28.1965, 26.9533, 28.7469),
    ("E3", (20, 40), (23, 1), 20.8333, 22.4479, 21.5351, 23.0745),
    ("E6", (5, 15), (22, 2), 5.8333, 6.4623, 6.1504, 6.6496),
    ("E7", (22, 35), (29, 1), 22.4333, 22.8792, 22.6446, 23.0326),
    ("E8", (17.5, 18.0, 19.5, 21.0, 24.5, 28.0, 22.0), None, 21.5, 22.1883, 21.8878, 22.3443),
]


@pytest.mark.parametrize(("name", "celsius", "weights", "mean", "usual", "low", "high"), KINETIC)
def test_mean_kinetic_temperatures_are_as_worked_out(
    name: str,
    celsius: tuple[float, ...],
    weights: tuple[float, ...] | None,
    mean: float,
    usual: float,
    low: float,
    high: float,
) -> None:
    found = [mean_kinetic(celsius, weights, ea_kj_mol=ea) for ea in (MKT_EA, 50.0, 100.0)]
    assert found == pytest.approx([usual, low, high], abs=5e-4), name
    share = weights or (1,) * len(celsius)
    plain = sum(t * w for t, w in zip(celsius, share, strict=True)) / sum(share)
    assert plain == pytest.approx(mean, abs=5e-4)


@pytest.mark.parametrize(("stepwise", "kinetic"), [(False, 24.8774), (True, 26.2268)])
def test_unequal_times_run_straight_or_in_steps(stepwise: bool, kinetic: float) -> None:
    # E9, both ways, worked out again (b); the trapezoid is Tong and Lock 2015 (a, a repository)
    found = mean_kinetic_over((0, 4, 6, 12, 24), (20, 22, 30, 26, 20), stepwise=stepwise)
    assert found == pytest.approx(kinetic, abs=5e-4)


def test_the_usual_energy_over_its_gas_constant_is_ten_thousand_kelvin() -> None:
    # Source: USP 29 <1160>, a page copy (a): 83.144 and 8.3144e-3
    assert pytest.approx(10_000, abs=0.5) == MKT_EA / MKT_R


@pytest.mark.parametrize(("celsius", "factor"), [(10, 3.336), (20, 3.081), (25, 2.970)])
def test_the_usual_energy_is_about_a_factor_of_three(celsius: float, factor: float) -> None:
    # worked out (b)
    assert q10_of(83.144, celsius) == pytest.approx(factor, abs=1e-3)


@pytest.mark.parametrize(
    ("factor", "energy"), [(2, 51.22), (2.2, 58.26), (2.3, 61.54), (3, 81.18), (4, 102.43)]
)
def test_a_factor_from_20_to_30_comes_to_its_energy(factor: float, energy: float) -> None:
    # worked out (b)
    assert ea_of(factor, 20) == pytest.approx(energy, abs=0.01)


@pytest.mark.parametrize(
    ("factor", "days"),
    # Source: a testing laboratory's page on ageing at 45 °C for 23 °C (a), worked out again (b):
    # its factor-2 column multiplies the rounded 79, and its last 87 should round to 86
    [(2, (79.44,)), (4, (17.29, 34.58, 51.87, 69.15, 86.44))],
)
def test_years_at_room_temperature_are_days_in_the_oven(
    factor: float, days: tuple[float, ...]
) -> None:
    pace = by_factor(23, factor).pace(45)
    aged = [365.0 * year / pace for year in range(1, len(days) + 1)]
    assert aged == pytest.approx(days, abs=0.05)


def test_twelve_months_at_23_are_two_and_a_half_at_45() -> None:
    # the same page prints 2.6 months (a); worked out again 2.6117 (b)
    assert 12 / by_factor(23, 2).pace(45) == pytest.approx(2.6117, abs=5e-4)


@pytest.mark.parametrize(("kcal", "kj"), [(24.8, 103.8), (20.8, 87.0)])
def test_energies_in_kcal_come_to_those_in_kj(kcal: float, kj: float) -> None:
    # Source: Lister 1956, Can. J. Chem., abstract (a), in kJ (b): a warning of what --ea takes
    assert kcal * 4.184 == pytest.approx(kj, abs=0.1)


def test_the_ratio_over_36_degrees_has_its_energy_and_factor() -> None:
    # catalase half-lives 7.6 h at 35 °C and 0.0014 h at 70 °C (a, an abstract that prints them
    # the wrong way round): factor 11.7, Ea 216 kJ/mol (b)
    times = 7.6 / 0.0014
    energy = ea_between(times, 35, 70)
    assert energy == pytest.approx(216, rel=0.01)
    assert q10_of(energy, 35, 70) == pytest.approx(11.7, rel=0.01)


@given(energies, warmths, st.floats(0.5, 40.0))
def test_energy_and_factor_undo_each_other(energy: float, cold: float, apart: float) -> None:
    assert ea_of(q10_of(energy, cold), cold) == pytest.approx(energy, rel=1e-9)
    there = ea_of(q10_of(energy, cold, cold + apart), cold, cold + apart)
    assert there == pytest.approx(energy, rel=1e-9)


@given(energies, warmths, st.floats(1.0, 40.0))
def test_the_factor_over_a_stretch_gives_the_ratio_of_the_energy(
    energy: float, cold: float, apart: float
) -> None:
    factor = q10_of(energy, cold, cold + apart)
    assert factor ** (apart / 10) == pytest.approx(ratio(energy, cold, cold + apart), rel=1e-9)
    found = ea_between(ratio(energy, cold, cold + apart), cold, cold + apart)
    assert found == pytest.approx(energy, rel=1e-9)


@given(energies, warmths, warmths, warmths)
def test_ratios_multiply(energy: float, one: float, two: float, three: float) -> None:
    through = ratio(energy, one, two) * ratio(energy, two, three)
    assert through == pytest.approx(ratio(energy, one, three), rel=1e-9)


@given(warmths, st.integers(1, 20), energies)
def test_one_temperature_throughout_is_its_own_kinetic_mean(
    celsius: float, count: int, energy: float
) -> None:
    assert mean_kinetic([celsius] * count, ea_kj_mol=energy) == pytest.approx(celsius, abs=1e-9)


@given(st.lists(warmths, min_size=1, max_size=12), st.data())
def test_the_kinetic_mean_is_never_below_the_plain_one_nor_moved_by_order(
    celsius: list[float], data: st.DataObject
) -> None:
    kinetic = mean_kinetic(celsius)
    assert kinetic >= sum(celsius) / len(celsius) - 1e-9
    assert mean_kinetic(data.draw(st.permutations(celsius))) == pytest.approx(kinetic, abs=1e-9)


@given(st.lists(warmths, min_size=2, max_size=12), st.lists(energies, min_size=2, max_size=5))
def test_a_higher_energy_never_lowers_the_kinetic_mean(
    celsius: list[float], several: list[float]
) -> None:
    means = [mean_kinetic(celsius, ea_kj_mol=energy) for energy in sorted(several)]
    assert all(low <= high + 1e-9 for low, high in pairwise(means))


@given(warmths, energies)
def test_a_pace_tells_its_temperature(celsius: float, energy: float) -> None:
    response = kinetic_response(energy)
    assert temperature_at(response, response.pace(celsius)) == pytest.approx(celsius, abs=1e-9)


def test_at_its_own_temperature_a_pace_is_one() -> None:
    for response in (by_factor(20, 3.5), by_energy(20, 80), Response(20, 0.1, 9_000, 1.0)):
        assert response.pace(20.0) == 1.0


@pytest.mark.parametrize("celsius", [-273.15, -300.0, float("nan")])
def test_what_is_no_temperature_is_refused(celsius: float) -> None:
    with pytest.raises(BadAmount, match=f"{celsius:g} °C is not a temperature"):
        ratio(80, 20, celsius)


def test_an_energy_typed_in_joules_is_asked_about() -> None:
    with pytest.raises(BadAmount, match="83144 kJ/mol is not between 0 and 1000"):
        q10_of(83_144, 20)


@pytest.mark.parametrize("factor", [0.0, -2.0])
def test_a_factor_of_nothing_is_refused(factor: float) -> None:
    with pytest.raises(BadAmount, match=f"A factor of {factor:g} is none"):
        ea_of(factor, 20)


@pytest.mark.parametrize(("celsius", "weights"), [((), None), ((20,), (0,)), ((20, 30), (1,))])
def test_a_mean_of_nothing_is_refused(
    celsius: tuple[float, ...], weights: tuple[float, ...] | None
) -> None:
    with pytest.raises(BadAmount, match=f"{len(celsius)} temperatures with"):
        mean_kinetic(celsius, weights)


def test_times_that_run_backwards_have_no_mean() -> None:
    with pytest.raises(BadAmount, match="3 temperatures at 3 times"):
        mean_kinetic_over((0, 2, 1), (20, 21, 22))
