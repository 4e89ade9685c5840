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
    percent_by_mass,
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
    assert "I need the density on the label to go between % and mol/dm³" in caught.value.message
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
        canonical(parse_strength("0.1 N"), molar_mass=98.08)


def test_normality_finds_its_reaction_by_the_name_of_the_substance() -> None:
    found = canonical(parse_strength("0.1 N for acid-base"), molar_mass=None, of="sulfuric acid")
    assert found == Concentration(0.05, "mol/dm3")


# Molality is mol in 1 kg of water, by definition. Sodium chloride of 1 and 10 % w/w as above:
# 10 g in 990 g of water and 100 g in 900 g, so b = 1000 w / (M (100 - w)), recomputed (b).
@pytest.mark.parametrize(
    ("per_cent", "density", "molal"), [(1, 1.0053, 0.17284), (10, 1.0707, 1.90127)]
)
def test_molality_is_per_kilogram_of_water(per_cent: int, density: float, molal: float) -> None:
    mass = molar_mass("NaCl")
    conc = canonical(parse_strength(f"{per_cent} % w/w"), molar_mass=mass, density=density)
    found = express(conc, StrengthUnit.MOLAL, molar_mass=mass, density=density)
    assert found == pytest.approx(molal, rel=2e-4)


def test_a_hydrates_own_water_is_water_in_molality() -> None:
    # 24.968 g of CuSO4·5H2O (0.1 mol) in 75.032 g of water: the crystal brings 0.1·5·18.015 g (b)
    hydrate, dry = molar_mass("CuSO4·5H2O"), molar_mass("CuSO4")
    conc = canonical(parse_strength("24.968 % w/w"), molar_mass=hydrate, density=1.2)
    found = express(conc, StrengthUnit.MOLAL, molar_mass=hydrate, density=1.2, dry_mass=dry)
    assert found == pytest.approx(0.1 / (0.075032 + 0.0090077), rel=1e-4)


def test_more_solute_than_solution_leaves_no_molality() -> None:
    with pytest.raises(BadAmount, match="leave no water"):
        express(Concentration(20, "mol/dm3"), StrengthUnit.MOLAL, molar_mass=98.0, density=1.0)


@pytest.mark.parametrize(
    ("text", "percent"), [("5 % w/w", 5), ("50 ppm m/m", 0.005), ("1.90127 mol/kg", 10)]
)
def test_strengths_by_mass_turn_into_one_another_without_a_density(
    text: str, percent: float
) -> None:
    found = percent_by_mass(parse_strength(text), molar_mass=molar_mass("NaCl"))
    assert found == pytest.approx(percent, rel=2e-4)


def test_molality_asks_for_the_molar_mass_and_the_density() -> None:
    for mass, missing in ((None, "molar mass"), (58.44, "density on the label")):
        with pytest.raises(MissingFigure, match=missing):
            canonical(parse_strength("1 mol/kg"), molar_mass=mass)


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


@pytest.mark.parametrize(
    ("formula", "moles"),
    [("NaOCl", 1), ("NaOCl·5H2O", 1), ("KOCl", 1), ("Cl2", 1), ("Ca(OCl)2", 2)],
)
def test_available_chlorine_counts_each_hypochlorite_as_one_chlorine(
    formula: str, moles: int
) -> None:
    # recomputed: 5 % w/v is 50 g/dm³ of Cl2, 70.906 g/mol (b)
    found = molar("5 % w/v available chlorine", molar_mass(formula))
    assert found == pytest.approx(50 / 70.906 / moles, rel=1e-4)


def test_bleach_by_mass_of_chlorine_wants_its_density() -> None:
    # recomputed: 10 % w/w at 1.20 g/cm³ is 120 g/dm³ of Cl2 (b)
    text = "10 % w/w available chlorine"
    assert molar(text, molar_mass("NaOCl"), 1.20) == pytest.approx(120 / 70.906, rel=1e-4)
    with pytest.raises(MissingFigure, match="density on the label"):
        molar(text, molar_mass("NaOCl"))


@pytest.mark.parametrize("formula", ["KCl", "HCl", "Na2SO4"])
def test_available_chlorine_of_anything_but_bleach_is_refused(formula: str) -> None:
    with pytest.raises(BadAmount, match="a strength of bleach"):
        molar("5 % w/v available chlorine", molar_mass(formula))


def test_available_chlorine_stands_for_more_hypochlorite() -> None:
    # 5.00 % available chlorine is 5.25 % w/v NaOCl: recomputed from the molar masses
    assert hypochlorite_from_chlorine(5.00) == pytest.approx(5.25, abs=0.005)
    ratio = molar_mass("NaOCl") / molar_mass("Cl2")
    assert hypochlorite_from_chlorine(1) == pytest.approx(ratio, rel=1e-5)


# of two substances, so that every unit is tried: mass in g/mol, density in g/cm³, and the
# units that only one of them has
PEROXIDE = (H2O2, (StrengthUnit.CHLORINE, StrengthUnit.CHLORINE_WW))
BLEACH = (molar_mass("NaOCl"), (StrengthUnit.VOL,))
WORDS = (StrengthUnit.PARTS, StrengthUnit.SATURATED)


@st.composite
def pairs(draw: st.DrawFn) -> tuple[float, StrengthUnit, StrengthUnit]:
    mass, foreign = draw(st.sampled_from([PEROXIDE, BLEACH]))
    units = [unit for unit in StrengthUnit if unit not in (*WORDS, *foreign)]
    return mass, draw(st.sampled_from(units)), draw(st.sampled_from(units))


def turned(value: float, mass: float, one: StrengthUnit, other: StrengthUnit) -> float:
    reaction, gas = "2 equivalents per mol", 24.0
    strength = Strength(value, one, f"{value} {one}", reaction=reaction, gas_volume=gas)
    conc = canonical(strength, molar_mass=mass, density=1.2, pure_density=1.45)
    return express(
        conc,
        other,
        molar_mass=mass,
        density=1.2,
        pure_density=1.45,
        reaction=reaction,
        gas_volume=gas,
    )


@given(pairs(), st.floats(1e-4, 4))
def test_there_and_back_is_the_same_for_every_pair_of_units(
    pair: tuple[float, StrengthUnit, StrengthUnit], value: float
) -> None:
    there = turned(value, *pair)
    assert turned(there, pair[0], pair[2], pair[1]) == pytest.approx(value, rel=1e-9)


@given(pairs(), st.floats(1e-4, 4), st.floats(1.001, 2))
def test_stronger_in_one_unit_is_stronger_in_every_other(
    pair: tuple[float, StrengthUnit, StrengthUnit], value: float, times: float
) -> None:
    assert turned(value * times, *pair) > turned(value, *pair)


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
