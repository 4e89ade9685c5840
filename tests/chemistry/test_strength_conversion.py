from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.formula import molar_mass
from stockroom.chemistry.strength import (
    Concentration,
    canonical,
    express,
    hypochlorite_from_chlorine,
)
from stockroom.errors import BadAmount, MissingFigure, StockroomError
from stockroom.measure.parsing import parse_strength
from stockroom.measure.strengths import Strength, StrengthUnit

H2O2 = molar_mass("H2O2")
HCL = molar_mass("HCl")


def molar(text: str, mass: float, density: float | None = None) -> float:
    found = canonical(parse_strength(text), molar_mass=mass, density=density)
    assert found.unit == "mol/dm3"
    return found.value


# OpenStax, Chemistry 2e (CC BY 4.0): the worked example or check named in each row.
@pytest.mark.parametrize(
    ("text", "formula", "density", "printed", "within"),
    [
        ("5.0 % w/w", "C6H12O6", 1.029, 0.29, 0.005),  # chapter 3 exercise, dextrose
        ("175 mg/L", "CaCO3", None, 1.75e-3, 5e-6),  # chapter 3 exercise
        ("37.2 % w/w", "HCl", 1.19, 221 / 0.5 / 36.46, 0.03),  # example 3.23: 221 g in 0.500 dm³
    ],
)
def test_a_strength_comes_to_the_printed_molarity(
    text: str, formula: str, density: float | None, printed: float, within: float
) -> None:
    assert molar(text, molar_mass(formula), density) == pytest.approx(printed, abs=within)


# Physical-property table of hydrochloric acid at 20 °C and 1 atm, encyclopaedia reprint.
@pytest.mark.parametrize(
    ("per_cent", "density", "printed"),
    [
        (10, 1.048, 2.87),
        (20, 1.098, 6.02),
        (30, 1.149, 9.45),
        (32, 1.159, 10.17),
        (34, 1.169, 10.90),
        (36, 1.179, 11.64),
        (38, 1.189, 12.39),
    ],
)
def test_hydrochloric_acid_has_the_tabulated_molarity(
    per_cent: int, density: float, printed: float
) -> None:
    assert molar(f"{per_cent} % w/w", HCL, density) == pytest.approx(printed, abs=0.01)


# Sodium chloride at 20 °C: Poradnik fizykochemiczny, WNT Warsaw 1974, by a university page.
@pytest.mark.parametrize(
    ("per_cent", "density", "printed"), [(1, 1.0053, 0.1720), (10, 1.0707, 1.8317)]
)
def test_sodium_chloride_has_the_tabulated_molarity(
    per_cent: int, density: float, printed: float
) -> None:
    found = molar(f"{per_cent} % w/w", molar_mass("NaCl"), density)
    assert found == pytest.approx(printed, rel=4e-4)


# Peroxide, % w/v and vol: recomputed from the pharmacopoeial definition.
@pytest.mark.parametrize(("vol", "per_cent"), [(10, 3.035), (20, 6.070), (40, 12.14), (100, 30.35)])
def test_peroxide_in_vol_comes_to_the_per_cent(vol: float, per_cent: float) -> None:
    conc = canonical(parse_strength(f"{vol} vol"), molar_mass=H2O2)
    found = express(conc, StrengthUnit.WV, molar_mass=H2O2)
    assert found == pytest.approx(per_cent, rel=1e-3)


def test_fifty_per_cent_peroxide_has_the_worked_molarity() -> None:
    # tutor page: 50 % w/w, 1.19662 g/cm³ is 17.5897 mol/dm³
    assert molar("50 % w/w", H2O2, 1.19662) == pytest.approx(17.5897, rel=1e-4)


def test_ethanol_96_per_cent_by_volume_has_the_tabulated_molarity() -> None:
    # OIML R 22 (1973) at 20 °C: pure ethanol 0.789239 g/cm³; 96 % vol is 16.447 mol/dm³
    conc = canonical(
        parse_strength("96 % v/v"), molar_mass=molar_mass("C2H6O"), pure_density=0.789239
    )
    assert conc.value == pytest.approx(16.447, abs=0.002)


def test_four_per_cent_by_volume_of_two_litres_is_80_cm3() -> None:
    # Harvey, Modern Analytical Chemistry, example 2.9c: 80 cm³ of acetic acid, here at 1.05 g/cm³
    conc = canonical(parse_strength("4 % v/v"), molar_mass=None, pure_density=1.05)
    assert conc.value * 2 / 1.05 == pytest.approx(80)


def test_without_a_molar_mass_the_strength_is_in_grams() -> None:
    conc = canonical(parse_strength("0.50 % w/v"), molar_mass=None)
    assert conc == Concentration(5.0, "g/dm3")


def test_a_molar_strength_needs_no_molar_mass() -> None:
    assert canonical(parse_strength("M/50"), molar_mass=None) == Concentration(0.02, "mol/dm3")


def test_saline_of_0_9_per_cent_is_9_grams_per_dm3() -> None:
    # OpenStax, Chemistry 2e, text: 0.9 g in 100 cm³
    conc = canonical(parse_strength("0.9 % m/v"), molar_mass=None)
    assert conc.value == pytest.approx(9.0)


@pytest.mark.parametrize("text", ["98 % w/w", "9.6 ppm m/m"])
def test_per_cent_by_mass_asks_for_the_density_on_the_label(text: str) -> None:
    with pytest.raises(MissingFigure) as caught:
        canonical(parse_strength(text), molar_mass=98.08, of="sulfuric acid")
    assert "I need the density on the label to turn % into mol/dm³" in caught.value.message
    assert f'sulfuric acid "{text}"' in caught.value.message


def test_per_cent_by_volume_asks_for_the_density_of_the_pure_liquid() -> None:
    with pytest.raises(MissingFigure, match="density of the pure liquid"):
        canonical(parse_strength("96 % v/v"), molar_mass=46.07, density=0.81)


def test_grams_ask_for_the_molar_mass() -> None:
    with pytest.raises(MissingFigure, match="molar mass"):
        express(Concentration(5, "g/dm3"), StrengthUnit.MOLAR, molar_mass=None)


@pytest.mark.parametrize("text", ["1 in 10", "saturated"])
def test_a_share_or_saturated_has_no_strength_of_its_own(text: str) -> None:
    with pytest.raises(MissingFigure, match=text):
        canonical(parse_strength(text), molar_mass=74.09)


def test_normality_has_no_strength_without_its_reaction() -> None:
    with pytest.raises(BadAmount, match=r'"0\.1 N"'):
        canonical(Strength(0.1, StrengthUnit.NORMAL, "0.1 N"), molar_mass=98.08)


@pytest.mark.parametrize("mass", [None, 36.46, 33.8])
def test_vol_of_anything_but_peroxide_is_refused(mass: float | None) -> None:
    with pytest.raises(BadAmount, match='"20 vol": vol is a strength of hydrogen peroxide'):
        canonical(parse_strength("20 vol"), molar_mass=mass)


def test_a_per_cent_above_the_whole_is_refused() -> None:
    with pytest.raises(BadAmount, match="196 % w/w"):
        express(Concentration(20, "mol/dm3"), StrengthUnit.WW, molar_mass=98.0, density=1.0)


@pytest.mark.parametrize("density", [0.0, -1.0, float("nan")])
def test_a_density_not_above_0_is_refused(density: float) -> None:
    with pytest.raises(BadAmount, match="density"):
        canonical(parse_strength("37 % w/w"), molar_mass=36.46, density=density)


def test_available_chlorine_stands_for_more_hypochlorite() -> None:
    # 5.00 % available chlorine is 5.25 % w/v NaOCl: recomputed from the molar masses
    assert hypochlorite_from_chlorine(5.00) == pytest.approx(5.25, abs=0.005)
    ratio = molar_mass("NaOCl") / molar_mass("Cl2")
    assert hypochlorite_from_chlorine(1) == pytest.approx(ratio, rel=1e-5)


CONVERTIBLE = [
    unit
    for unit in StrengthUnit
    if unit not in (StrengthUnit.NORMAL, StrengthUnit.PARTS, StrengthUnit.SATURATED)
]


@given(st.sampled_from(CONVERTIBLE), st.floats(1e-4, 20))
def test_there_and_back_is_the_same_in_every_unit(unit: StrengthUnit, value: float) -> None:
    strength = Strength(value, unit, f"{value} {unit}")
    conc = canonical(strength, molar_mass=H2O2, density=1.2, pure_density=1.45)
    back = express(conc, unit, molar_mass=H2O2, density=1.2, pure_density=1.45)
    assert back == pytest.approx(value, rel=1e-9)


@given(st.sampled_from(list(StrengthUnit)), st.floats(0, 100), st.booleans())
def test_a_missing_figure_is_always_a_refusal_with_a_hint(
    unit: StrengthUnit, value: float, known: bool
) -> None:
    try:
        canonical(Strength(value, unit, "as typed"), molar_mass=50.0 if known else None)
    except StockroomError as error:
        hint = error.hint
    else:
        hint = "none needed"
    assert hint
