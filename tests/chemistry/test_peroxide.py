from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.peroxide import (
    MOLAR_MASS,
    VM,
    ask_vol,
    convention,
    molar_to_vol,
    vol_to_molar,
)

# vol, mol/dm³, g/dm³ of hydrogen peroxide. Recomputed from the pharmacopoeial definition
# (gas at 0 °C and 1 atm; British and Indian Pharmacopoeias) with 22.414 dm³/mol.
TABLE = [
    (10, 0.8923, 30.35),
    (20, 1.7846, 60.70),
    (30, 2.6769, 91.05),
    (40, 3.5692, 121.41),
    (100, 8.9230, 303.5),
    (110, 9.8153, 333.9),
    (130, 11.600, 394.6),
]


@pytest.mark.parametrize(("vol", "molar", "grams"), TABLE)
def test_volume_strength_gives_the_tabulated_strength(
    vol: float, molar: float, grams: float
) -> None:
    assert vol_to_molar(vol) == pytest.approx(molar, rel=1e-3)
    assert vol_to_molar(vol) * MOLAR_MASS == pytest.approx(grams, rel=1e-3)


@pytest.mark.parametrize(("vol", "molar", "grams"), TABLE)
def test_strength_gives_the_tabulated_volume_strength(
    vol: float, molar: float, grams: float
) -> None:
    assert molar_to_vol(molar) == pytest.approx(vol, rel=1e-3)


def test_thirty_vol_is_as_a_tutor_page_prints_it() -> None:
    # tutor page: 30 vol is 2.678 mol/dm³ and 91.1 g/dm³ (with M = 34)
    assert vol_to_molar(30) == pytest.approx(2.678, rel=1e-3)


def test_ninety_one_vol_is_8_12_molar() -> None:
    # recomputed from the pharmacopoeial definition
    assert vol_to_molar(91) == pytest.approx(8.12, abs=0.005)


def test_the_molar_volume_is_the_ideal_gas_at_0_degrees_and_1_atmosphere() -> None:
    # CODATA constants by way of scipy: 22.413969545 dm³/mol
    assert pytest.approx(22.413969545, rel=1e-5) == VM


@pytest.mark.parametrize(("per_cent", "vol"), [(5.0, 16.5), (7.0, 23.1), (2.5, 8.2), (3.5, 11.5)])
def test_pharmacopoeial_limits_in_vol(per_cent: float, vol: float) -> None:
    # limits of the 6 % (British Pharmacopoeia) and 3 % (USP 28-31) solutions, % w/v; vol recomputed
    assert molar_to_vol(per_cent * 10 / MOLAR_MASS) == pytest.approx(vol, abs=0.06)


# The same table's last column, counted at 24.0 dm³/mol: vol, mol/dm³, % w/v (b).
@pytest.mark.parametrize(
    ("vol", "molar", "per_cent"),
    [
        (10, 0.833, 2.83),
        (20, 1.667, 5.67),
        (30, 2.500, 8.50),
        (40, 3.333, 11.34),
        (100, 8.333, 28.35),
        (110, 9.167, 31.18),
        (130, 10.83, 36.85),
    ],
)
def test_at_24_dm3_a_mole_the_same_label_means_less(
    vol: float, molar: float, per_cent: float
) -> None:
    assert vol_to_molar(vol, 24) == pytest.approx(molar, rel=1e-3)
    assert vol_to_molar(vol, 24) * MOLAR_MASS / 10 == pytest.approx(per_cent, rel=2e-3)


# UK school safety sheet on peroxide, 2018 (a): its bands agree with 24 dm³/mol and no other.
@pytest.mark.parametrize(("molar", "vol"), [(8.3, 100), (2.3, 28), (1.5, 18)])
def test_a_school_sheets_bands_are_counted_at_room_temperature(molar: float, vol: float) -> None:
    assert molar_to_vol(molar, 24) == pytest.approx(vol, rel=0.015)
    assert molar_to_vol(molar) < 0.94 * vol


def test_at_1_bar_100_vol_is_8_806_molar() -> None:
    # recomputed with CODATA's molar volume at 0 °C and 100 kPa, 22.711 dm³/mol (b)
    assert vol_to_molar(100, 22.711) == pytest.approx(8.806, abs=0.001)


@pytest.mark.parametrize(
    ("gas", "said"),
    [
        (None, "22.414 dm³ of oxygen a mole (0 °C, 1 atm)"),
        (22.4, "22.4 dm³ of oxygen a mole (0 °C, 1 atm)"),
        (22.711, "22.711 dm³ of oxygen a mole (0 °C, 1 bar)"),
        (24, "24 dm³ of oxygen a mole (room temperature)"),
        (23.5, "23.5 dm³ of oxygen a mole"),
    ],
)
def test_the_convention_is_named(gas: float | None, said: str) -> None:
    assert convention(gas) == f"vol counted at {said}"


@pytest.mark.parametrize("text", ["100 %", "100", "100%"])
def test_a_bare_hundred_per_cent_asks_for_vol(text: str) -> None:
    message = ask_vol(text).message
    assert f'"{text}": Do you mean 100 vol (about 30 % w/v)?' in message


def test_a_peroxide_label_without_a_number_is_asked_about() -> None:
    assert "how strong is the peroxide?" in ask_vol("%").message


@given(st.floats(1e-3, 500), st.floats(22, 25))
def test_vol_there_and_back_is_the_same(vol: float, gas: float) -> None:
    assert molar_to_vol(vol_to_molar(vol, gas), gas) == pytest.approx(vol, rel=1e-9)
