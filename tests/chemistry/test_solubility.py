from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.solubility import molar_at_saturation, solubility, substances
from stockroom.errors import MissingFigure


def test_limewater_is_about_a_fiftieth_molar() -> None:
    # "saturated is about 0.02 mol/dm³": common practice, from memory (c)
    found = solubility(20, "calcium hydroxide")
    assert found.density is not None
    assert molar_at_saturation(found, found.density) == pytest.approx(0.022, abs=0.002)


# g in 100 g of water. Rows from memory (c); the second figure of each was recomputed with
# the Pitzer model of PHREEQC, which is independent of them (b)
@pytest.mark.parametrize(
    ("name", "celsius", "recomputed", "within"),
    [
        ("NaCl", 20, 35.72, 0.01),
        ("NaCl", 60, 37.18, 0.01),
        ("KCl", 20, 34.10, 0.01),
        ("KCl", 60, 45.60, 0.01),
        ("KCl", 100, 55.50, 0.02),
        ("MgSO4", 20, 33.88, 0.01),
        ("Na2SO4", 20, 19.56, 0.01),
        ("Na2SO4", 30, 39.32, 0.05),
        ("Ca(OH)2", 25, 0.149, 0.12),
    ],
)
def test_a_row_agrees_with_an_independent_model(
    name: str, celsius: float, recomputed: float, within: float
) -> None:
    assert solubility(celsius, name).grams == pytest.approx(recomputed, rel=within)


def test_saturated_salt_is_26_per_cent() -> None:
    # 35.9 g in 135.9 g: worked out from the row (b)
    assert solubility(20, "common salt").percent_ww == pytest.approx(26.4, abs=0.05)


def test_between_two_rows_the_figure_lies_in_between() -> None:
    assert solubility(25, "potassium nitrate").grams == pytest.approx((31.6 + 45.3) / 2)


@pytest.mark.parametrize("celsius", [-1, 31, 100])
def test_beyond_its_rows_it_is_refused_with_the_range(celsius: float) -> None:
    # sodium carbonate changes its hydrate at 32 °C, where its table ends
    with pytest.raises(MissingFigure, match=r"held from 0 to 30 °C .*from memory") as caught:
        solubility(celsius, "sodium carbonate")
    assert f"{celsius:g} °C" in caught.value.message


def test_a_substance_nobody_holds_names_what_to_look_up() -> None:
    with pytest.raises(MissingFigure, match="I need g in 100 g of water") as caught:
        solubility(20, "unobtainium nitrate")
    assert "Look it up" in caught.value.hint


def test_only_the_slightly_soluble_take_the_density_of_water() -> None:
    assert solubility(20, "limewater").density == pytest.approx(0.9982)
    assert solubility(20, "potassium nitrate").density is None


@given(st.sampled_from(substances()), st.floats(0, 30), st.floats(0, 30))
def test_solubility_between_rows_never_leaves_them(name: str, one: float, other: float) -> None:
    low, high = sorted((one, other))
    ends = sorted(solubility(float(at), name).grams for at in (0, 10, 20, 30))
    assert ends[0] <= solubility(low, name).grams <= ends[-1]
    # all of these dissolve better warm, but for the bases of the alkaline earths
    if name != "calcium hydroxide":
        assert solubility(low, name).grams <= solubility(high, name).grams + 1e-9
