"""Strengths as printed by others: each row with its source, and how it was come by.

(a) the printed figure was seen, (b) it was recomputed from seen figures, (c) from memory.
OSX is OpenStax, Chemistry 2e (CC BY 4.0), F its appendix F; HB a widely reprinted handbook
table of concentrated reagents; BP the British Pharmacopoeia; AM the US Army course MD0837;
HAR Harvey, Modern Analytical Chemistry; WEB a tutor's page.
"""

from __future__ import annotations

import pytest

from stockroom.chemistry.formula import molar_mass
from stockroom.chemistry.strength import canonical, express
from stockroom.measure.parsing import parse_strength
from stockroom.measure.strengths import StrengthUnit

NH4OH = molar_mass("NH4OH")


def molar(text: str, mass: float, density: float | None = None, of: str = "") -> float:
    return canonical(parse_strength(text), molar_mass=mass, density=density, of=of).value


def turned(text: str, to: StrengthUnit, mass: float, density: float | None = None) -> float:
    conc = canonical(parse_strength(text), molar_mass=mass, density=density)
    return express(conc, to, molar_mass=mass, density=density)


# formula, g/cm³, % w/w, mol/dm³ printed, cm³ for 1 dm³ of 1 mol/dm³ (b). OSX-F (a+b), 0.5 %
CONCENTRATED = [
    ("C2H4O2", 1.05, 99.5, 17.4, 57.5),
    ("NH3", 0.90, 28, 14.8, 67.6),
    ("HCl", 1.18, 36, 11.6, 85.8),
    ("HNO3", 1.42, 71, 16.0, 62.5),
    ("HClO4", 1.67, 70, 11.65, 85.9),
    ("H3PO4", 1.70, 85, 14.7, 67.8),
    ("NaOH", 1.53, 50, 19.1, 52.3),
    ("H2SO4", 1.84, 96, 18.0, 55.5),
]


@pytest.mark.parametrize(("formula", "density", "percent", "printed", "cubic"), CONCENTRATED)
def test_a_concentrated_reagent_has_the_printed_molarity(
    formula: str, density: float, percent: float, printed: float, cubic: float
) -> None:
    found = molar(f"{percent} % w/w", molar_mass(formula), density)
    assert found == pytest.approx(printed, rel=5e-3)
    assert 1000 / found == pytest.approx(cubic, rel=5e-3)


# formula, g/cm³, % w/w, mol/dm³ printed, tolerance. HB (a+b)
HANDBOOK = [
    ("C2H4O2", 1.05, 99.8, 17.4, 5e-3),
    ("HCl", 1.18, 37.2, 12.1, 1e-2),
    ("HCl", 1.19, 37.2, 12.14, 5e-3),
    ("HNO3", 1.41, 69.6, 15.6, 5e-3),
    ("HNO3", 1.42, 70.4, 15.9, 5e-3),
    ("HClO4", 1.67, 70.5, 11.7, 5e-3),
    ("H3PO4", 1.71, 85.5, 14.8, 1e-2),
    ("H2SO4", 1.84, 96, 18.0, 5e-3),
    ("NaOH", 1.53, 50.5, 19.4, 1e-2),
    ("KOH", 1.45, 45, 11.7, 1e-2),
    # pharmacopoeial cross-checks, BP App. I A (a+b)
    ("NH3", 0.91, 25, 13.5, 1.5e-2),
    ("NH3", 0.88, 35, 18, 1.5e-2),
    ("H2SO4", 1.84, 96, 18, 5e-3),
]


@pytest.mark.parametrize(("formula", "density", "percent", "printed", "within"), HANDBOOK)
def test_a_handbook_reagent_has_the_printed_molarity(
    formula: str, density: float, percent: float, printed: float, within: float
) -> None:
    found = molar(f"{percent} % w/w", molar_mass(formula), density)
    assert found == pytest.approx(printed, rel=within)


# The handbook's wrong rows (HB, a; recomputed, b): printed 23.6, 9.5 and 14.5
@pytest.mark.parametrize(
    ("mass", "density", "percent", "right", "printed"),
    [
        (molar_mass("CH2O2"), 1.13, 90, 22.10, 23.6),
        (molar_mass("HClO4"), 1.67, 61.3, 10.19, 9.5),
        (molar_mass("NH3"), 0.90, 28.0, 14.80, 14.5),
    ],
)
def test_a_wrong_row_of_the_handbook_is_not_reproduced(
    mass: float, density: float, percent: float, right: float, printed: float
) -> None:
    found = molar(f"{percent} % w/w", mass, density)
    assert found == pytest.approx(right, rel=1e-3)
    assert found != pytest.approx(printed, rel=1e-2)


def test_ammonia_by_nh3_and_by_nh4oh_are_one_solution() -> None:
    # 28 % NH3 is 57.6 % NH4OH (b); HB prints 56.6 %, which is 14.53 mol/dm³
    as_nh3 = molar("28.0 % w/w", molar_mass("NH3"), 0.90)
    assert molar("57.6 % w/w", NH4OH, 0.90) == pytest.approx(as_nh3, rel=1e-3)
    assert molar("56.6 % w/w", NH4OH, 0.90) == pytest.approx(14.53, abs=0.01)


# text, formula, mol/dm³, tolerance
BY_VOLUME = [
    ("10.7 g/dm3", "KIO3", 0.05, 1e-3),  # BP 2012 (a+b)
    ("5.5670 g/dm3", "KBrO3", 1 / 30, 1e-3),  # WEB, a BP recipe (a+b)
    ("25 g/dm3", "Na2S2O3·5H2O", 0.1007, 1e-3),  # BP App. I A (a+b), nominal 0.1
    ("12.7 g/dm3", "I2", 0.05, 2e-3),  # WEB, a BP recipe (a+b)
    ("3.95 g/dm3", "KMnO4", 0.0250, 1e-3),  # WEB, a teaching supplier's sheet (a+b)
    ("42 g/dm3", "NaOH", 1.05, 1e-3),  # BP 2013 (a+b), 5 % more on purpose
    ("175 mg/L", "CaCO3", 1.75e-3, 3e-3),  # OSX chapter 3 exercise (a+b)
    ("434.4 g/L", "HCl", 11.9, 5e-3),  # OSX chapter 3 exercise: 868.8 g in 2.00 L (a+b)
    ("181.6 mg/L", "KMnO4", 1.15e-3, 5e-3),  # OSX chapter 3 exercise: 0.0908 g in 0.500 L (a+b)
    ("50.4 g/L", "C2H4O2", 0.839, 1e-3),  # OSX 3.16: 25.2 g in 0.500 L (a+b)
]


@pytest.mark.parametrize(("text", "formula", "printed", "within"), BY_VOLUME)
def test_a_mass_per_volume_comes_to_the_printed_molarity(
    text: str, formula: str, printed: float, within: float
) -> None:
    assert molar(text, molar_mass(formula)) == pytest.approx(printed, rel=within)


# text, unit, what one counts in that unit, formula, g/cm³, printed, tolerance
TURNED = [
    ("5.3 mM", StrengthUnit.GRAMS, 0.01, "C6H12O6", None, 95, 0.5),  # OSX, mg/dL (a+b)
    ("70.0 % w/w", StrengthUnit.GRAMS, 1000, "HNO3", 1.42, 0.994, 1e-3),  # AM, g/mL (a+b)
    ("70.0 % w/w", StrengthUnit.WV, 1, "HNO3", 1.42, 99.4, 0.1),  # AM, g/dL (a+b)
    ("70.0 % w/w", StrengthUnit.MOLAR, 1, "HNO3", 1.42, 15.78, 0.01),  # AM (b)
    ("33.0 % w/w", StrengthUnit.MOLAR, 1, "HCl", 1.15, 10.41, 0.01),  # AM exercise 8-2 (b)
    ("99.7 % w/w", StrengthUnit.MOLAR, 1, "C2H4O2", 1.05, 17.43, 0.02),  # AM exercise 8-5 (b)
    ("26.0 % w/w", StrengthUnit.WV, 1, "NH4OH", 0.960, 24.96, 0.05),  # AM 8-4, as NH4OH (b)
    ("15 ppb m/v", StrengthUnit.PPM_MV, 1, "HgCl2", None, 0.015, 1e-9),  # OSX 3.25 (a+b)
    ("9.6 ppm m/m", StrengthUnit.PPM_MM, 1e-3, "Pb", 1.0, 9600, 50),  # OSX 3.25 check, ppb (a+b)
    ("150.0 ppm m/v", StrengthUnit.GRAMS, 1, "Cu", None, 0.1500, 5e-5),  # HAR (a+b)
    ("0.9 % m/v", StrengthUnit.GRAMS, 0.1, "NaCl", None, 90, 1e-9),  # OSX text (a)
]


@pytest.mark.parametrize(
    ("text", "to", "counted_in", "formula", "density", "printed", "within"), TURNED
)
def test_a_strength_comes_to_the_printed_figure(
    text: str,
    to: StrengthUnit,
    counted_in: float,
    formula: str,
    density: float | None,
    printed: float,
    within: float,
) -> None:
    found = turned(text, to, molar_mass(formula), density)
    assert found / counted_in == pytest.approx(printed, abs=within)


# % w/w, g/cm³, formula, g wanted, cm³ printed, tolerance
VOLUMES_FOR_A_MASS = [
    (37.2, 1.19, "HCl", 125, 282, 0.5),  # OSX 3.23 check (a+b)
    (37.2, 1.19, "HCl", 221, 500, 1.0),  # OSX 3.23 (a+b)
    (95.0, 1.84, "H2SO4", 98.1, 56.1, 0.1),  # AM (a+b)
    (38.0, 1.19, "HCl", 50.0, 111, 0.5),  # AM: 250 mL of 20.0 g/dL (a+b)
]


@pytest.mark.parametrize(
    ("percent", "density", "formula", "grams", "cubic", "within"), VOLUMES_FOR_A_MASS
)
def test_a_mass_of_acid_stands_in_the_printed_volume(
    percent: float, density: float, formula: str, grams: float, cubic: float, within: float
) -> None:
    held = turned(f"{percent} % w/w", StrengthUnit.GRAMS, molar_mass(formula), density)
    assert 1000 * grams / held == pytest.approx(cubic, abs=within)


# cm³ of the concentrated reagent for so many cm³ of so many Eq/L: AM exercises (b), 0.1 %
EQUIVALENTS = [
    ("33.0 % w/w", 1.15, molar_mass("HCl"), "HCl", "2.00 Eq/L for acid-base", 1000, 192.1),
    ("85.0 % w/w", 1.69, molar_mass("H3PO4"), "H3PO4", "1.00 Eq/L, 3 eq per mol", 500, 11.37),
    ("26.0 % w/w", 0.960, NH4OH, "NH4OH", "4.00 Eq/L for acid-base", 750, 421),
]


@pytest.mark.parametrize(
    ("stock", "density", "mass", "formula", "wanted", "cubic", "taken"), EQUIVALENTS
)
def test_so_many_equivalents_take_the_printed_volume(
    stock: str,
    density: float,
    mass: float,
    formula: str,
    wanted: str,
    cubic: float,
    taken: float,
) -> None:
    part = molar(wanted, mass, of=formula) / molar(stock, mass, density)
    assert cubic * part == pytest.approx(taken, rel=1.2e-3)


def test_phosphoric_acid_diluted_has_the_printed_equivalents() -> None:
    # AM exercise 8-10 (b): 12.5 cm³ of 87.0 %, 1.70 g/cm³, to 1 dm³; 3 equivalents per mol
    diluted = molar("87.0 % w/w", molar_mass("H3PO4"), 1.70) * 12.5 / 1000
    assert diluted * 3 == pytest.approx(0.566, rel=1.2e-3)


# vol against % w/v and % w/w at the densities of the 18 °C table (c); b, % w/w to 1 %
@pytest.mark.parametrize(
    ("vol", "wv", "ww", "density"),
    [
        (10, 3.035, 3.01, 1.009),
        (20, 6.070, 5.95, 1.020),
        (30, 9.105, 8.83, 1.031),
        (40, 12.14, 11.66, 1.041),
        (100, 30.35, 27.5, 1.102),
        (110, 33.39, 30.0, 1.112),
        (130, 39.46, 34.9, 1.132),
    ],
)
def test_vol_comes_to_the_tabulated_per_cents(
    vol: float, wv: float, ww: float, density: float
) -> None:
    mass = molar_mass("H2O2")
    assert turned(f"{vol} vol", StrengthUnit.WV, mass) == pytest.approx(wv, rel=1e-3)
    assert turned(f"{vol} vol", StrengthUnit.WW, mass, density) == pytest.approx(ww, rel=1e-2)


# Ph. Eur. and BP on strength in vol, from memory (c), 2.5 %; densities of the 18 °C table (c)
@pytest.mark.parametrize(
    ("text", "density", "vol"),
    [
        ("3 % m/v", None, 10),
        ("30 % m/m", 1.1122, 110),
        ("27 % w/w", 1.100, 100),
        ("27.5 % w/w", 1.102, 100),
    ],
)
def test_pharmacopoeial_peroxide_is_about_so_many_vol(
    text: str, density: float | None, vol: float
) -> None:
    found = turned(text, StrengthUnit.VOL, molar_mass("H2O2"), density)
    assert found == pytest.approx(vol, rel=0.025)


def test_thirty_per_cent_is_two_strengths_of_peroxide() -> None:
    # "100 vol, 30 % w/w" is printed in a school text (a); by volume it is 98.8, by mass 110 (b)
    mass = molar_mass("H2O2")
    assert turned("30 % w/v", StrengthUnit.VOL, mass) == pytest.approx(98.8, abs=0.1)
    assert turned("30 % w/w", StrengthUnit.VOL, mass, 1.1122) == pytest.approx(110, abs=0.2)


# UK product summaries (a, c): so many % v/v of a 35 % w/w stock at 1.1327 g/cm³ (c), 2 %
@pytest.mark.parametrize(
    ("part", "wv", "vol"), [("15.0 in 100", 5.95, 19.6), ("22.5 in 100", 8.92, 29.4)]
)
def test_a_part_of_strong_peroxide_makes_the_named_solution(
    part: str, wv: float, vol: float
) -> None:
    mass = molar_mass("H2O2")
    stock = canonical(parse_strength("35 % w/w"), molar_mass=mass, density=1.1327)
    made = f"{stock.value / parse_strength(part).value} mol/dm3"
    assert turned(made, StrengthUnit.WV, mass) == pytest.approx(wv, rel=2e-3)
    assert turned(made, StrengthUnit.VOL, mass) == pytest.approx(vol, rel=2e-3)


# Titration factors: as volumes of equal normality are equal, the mg of substance to 1 cm³ of
# its titrant are the g in 1 dm³ of its own solution of the same normality
@pytest.mark.parametrize(
    ("text", "formula", "printed"),
    [
        ("0.1 N for acid-base", "NaOH", 4.00),  # 0.1 M HCl, BP 2013 (a+b)
        ("1 N for acid-base, to CO2", "Na2CO3", 53.00),  # 1 M HCl, BP 2012 (a+b)
        ("0.1 N with permanganate", "H2O2", 1.701),  # 0.02 M KMnO4: BP, IP, USP (a+b)
        ("0.1 N with iodine", "Na2S2O3", 15.81),  # 0.1 N I2, USP 35 (a+b)
        ("0.1 N with thiosulfate", "KIO3", 3.566),  # 0.1 M thiosulfate, BP 2012 (a+b)
        ("0.1 N with thiosulfate", "KBrO3", 2.783),  # the same, BP App. I A (a+b)
        ("0.1 N (to Mn2+)", "KMnO4", 0.02 * 158.034),  # 0.1 N is 0.02 M: BP, USP (a)
    ],
)
def test_a_normal_solution_holds_the_printed_mass(text: str, formula: str, printed: float) -> None:
    mass = molar_mass(formula)
    assert molar(text, mass, of=formula) * mass == pytest.approx(printed, rel=5e-4)


def test_parts_are_of_the_total() -> None:
    # AM exercise 6-4 (a+b): 40 mL of a 1:5 dilution holds 8 mL; 1:2 three times over is 1:8
    assert 40 / parse_strength("1:5").value == 8
    assert parse_strength("1:2").value ** 3 == parse_strength("1:8").value
