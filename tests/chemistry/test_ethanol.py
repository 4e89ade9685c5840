from __future__ import annotations

import math

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.densities.oiml import ethanol_density
from stockroom.chemistry.ethanol import (
    MOLAR_MASS,
    density_from_vol,
    dilute,
    is_ethanol,
    mass_from_vol,
    molar_from_vol,
    vol_from_mass,
    vol_from_molar,
)
from stockroom.chemistry.formula import molar_mass
from stockroom.errors import BadAmount, NotAllowed


# OIML R 22 (1973) at 20 °C, recomputed from the seen coefficients (b): % mass, kg/m³, % vol.
@pytest.mark.parametrize(
    ("mass", "dense", "vol"),
    [
        (0, 998.20, 0),
        (10, 981.85, 12.44),
        (20, 968.61, 24.55),
        (40, 935.15, 47.39),
        (50, 913.77, 57.89),
        (70, 867.61, 76.95),
        (90, 817.88, 93.27),
        (100, 789.24, 100),
    ],
)
def test_per_cent_by_mass_has_the_density_and_the_volume(
    mass: float, dense: float, vol: float
) -> None:
    assert ethanol_density(mass) * 1000 == pytest.approx(dense, abs=0.01)
    assert vol_from_mass(mass) == pytest.approx(vol, abs=0.01)


# The same (b): % vol, % mass, kg/m³, mol/dm³.
@pytest.mark.parametrize(
    ("vol", "mass", "dense", "molar"),
    [
        (10, 8.01, 984.71, 1.713),
        (20, 16.21, 973.56, 3.426),
        (40, 33.30, 948.05, 6.853),
        (50, 42.43, 930.14, 8.566),
        (70, 62.39, 885.56, 11.992),
        (90, 85.66, 829.18, 15.419),
        (95, 92.41, 811.38, 16.275),
        (96, 93.84, 807.42, 16.447),
    ],
)
def test_per_cent_by_volume_has_the_mass_the_density_and_the_molarity(
    vol: float, mass: float, dense: float, molar: float
) -> None:
    assert mass_from_vol(vol) == pytest.approx(mass, abs=0.01)
    assert density_from_vol(vol) * 1000 == pytest.approx(dense, abs=0.01)
    assert molar_from_vol(vol) == pytest.approx(molar, abs=0.001)


# US Bureau of Standards table of ethanol and water, g/cm³ (c), older than the formula and
# independent of it; it lies 0.0001 higher throughout.
@pytest.mark.parametrize(
    ("mass", "celsius", "dense"),
    [
        (10, 10, 0.98393),
        (10, 40, 0.97475),
        (30, 10, 0.95977),
        (30, 25, 0.95067),
        (30, 40, 0.94055),
        (50, 10, 0.92162),
        (50, 25, 0.90985),
        (50, 40, 0.89750),
        (100, 10, 0.79784),
        (100, 25, 0.78506),
        (100, 40, 0.77203),
    ],
)
def test_the_formula_holds_at_other_temperatures(mass: float, celsius: float, dense: float) -> None:
    assert ethanol_density(mass, celsius) == pytest.approx(dense, abs=1.5e-4)


# Density of water, kg/m³, common handbook values (c).
@pytest.mark.parametrize(
    ("celsius", "dense"), [(0, 999.84), (4, 999.97), (10, 999.70), (25, 997.05), (40, 992.22)]
)
def test_without_ethanol_the_formula_is_that_of_water(celsius: float, dense: float) -> None:
    assert ethanol_density(0, celsius) * 1000 == pytest.approx(dense, abs=0.015)


def test_a_litre_of_70_from_96_takes_more_water_than_subtraction_says() -> None:
    """Reference section 4 (b), 0.2 cm³: 729.17 cm³ (588.74 g), 296.8 g = 297.4 cm³ of water."""
    made = dilute(1000, 70, 96)
    assert made.stock_cm3 == pytest.approx(729.17, abs=0.01)
    assert made.stock_g == pytest.approx(588.74, abs=0.01)
    assert made.water_g == pytest.approx(296.8, abs=0.05)
    assert made.water_cm3 == pytest.approx(297.4, abs=0.2)
    assert made.lost_cm3 == pytest.approx(26.5, abs=0.2)


def test_undiluted_takes_no_water() -> None:
    made = dilute(500, 96, 96)
    assert made.stock_cm3 == 500
    assert made.water_cm3 == pytest.approx(0, abs=1e-9)


def test_a_stronger_ethanol_than_the_stock_is_refused() -> None:
    with pytest.raises(NotAllowed, match="Cannot reach 97 % v/v from 96 % v/v"):
        dilute(100, 97, 96)


@pytest.mark.parametrize("percent", [-1.0, 100.5, math.nan])
def test_a_per_cent_that_is_none_is_refused(percent: float) -> None:
    for sum_of in (mass_from_vol, molar_from_vol, density_from_vol, vol_from_mass):
        with pytest.raises(BadAmount, match="from 0 to 100"):
            sum_of(percent)


def test_stronger_than_pure_is_refused() -> None:
    with pytest.raises(BadAmount, match=r"pure ethanol is 17\.13 mol/dm³"):
        vol_from_molar(18)


@pytest.mark.parametrize("celsius", [-21, 41, math.nan])
def test_a_temperature_outside_the_formula_is_refused(celsius: float) -> None:
    with pytest.raises(BadAmount, match="runs from -20 to 40"):
        ethanol_density(50, celsius)


@pytest.mark.parametrize("volume", [0.0, -5.0, math.nan])
def test_a_volume_not_above_0_is_refused(volume: float) -> None:
    with pytest.raises(BadAmount, match="volume"):
        dilute(volume, 70, 96)


def test_its_molar_mass_is_that_of_its_formula() -> None:
    assert pytest.approx(molar_mass("C2H6O"), rel=1e-5) == MOLAR_MASS


def test_it_is_known_by_name_and_formula() -> None:
    assert is_ethanol("Ethanol")
    assert is_ethanol("C2H5OH")
    assert not is_ethanol("methanol")


PERCENTS = st.floats(0, 100)


@given(PERCENTS)
def test_mass_to_volume_and_back_is_the_same(percent: float) -> None:
    assert mass_from_vol(vol_from_mass(percent)) == pytest.approx(percent, rel=1e-9, abs=1e-9)


@given(PERCENTS)
def test_molarity_to_volume_and_back_is_the_same(percent: float) -> None:
    assert vol_from_molar(molar_from_vol(percent)) == pytest.approx(percent, rel=1e-9, abs=1e-12)


@given(st.floats(0, 99), st.floats(0.01, 1))
def test_more_by_mass_is_more_by_volume_and_lighter(percent: float, step: float) -> None:
    assert vol_from_mass(percent + step) > vol_from_mass(percent)
    assert ethanol_density(percent + step) < ethanol_density(percent)


@given(st.floats(1, 5000), st.floats(1, 100), st.floats(0.01, 1))
def test_ethanol_and_mass_are_kept_and_volume_is_lost(
    volume: float, stock: float, share: float
) -> None:
    wanted = stock * share
    made = dilute(volume, wanted, stock)
    assert made.stock_cm3 * stock == pytest.approx(volume * wanted, rel=1e-9)
    assert made.stock_g + made.water_g == pytest.approx(volume * density_from_vol(wanted))
    # below 30 % mixing with water swells it, by 1.5 cm³ in a litre at the most
    assert made.lost_cm3 >= -1.6e-3 * volume
