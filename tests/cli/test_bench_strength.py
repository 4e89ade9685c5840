"""`stockroom strength`: every unit both ways, with what was used named under the answer."""

from __future__ import annotations

import shlex
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

PEROXIDE = "hydrogen peroxide"

# text, substance, unit, figures given, value, tolerance. (a) seen, (b) recomputed, (c) memory
SUMS = [
    # peroxide: definition in the pharmacopoeias (b); 24 dm³/mol as school guidance counts (b)
    ("100 vol", PEROXIDE, "mol/dm3", "", 8.923, 1e-3),
    ("100 vol at 24 dm3/mol", PEROXIDE, "mol/dm3", "", 8.333, 1e-3),
    ("100 vol", PEROXIDE, "mol/dm3", "--gas-volume 24", 8.333, 1e-3),
    ("100 vol", PEROXIDE, "mol/dm3", "--gas-volume 22.711", 8.806, 1e-3),
    ("8.3 M", PEROXIDE, "vol at 24 dm3/mol", "", 99.6, 1e-3),
    ("30 % w/v", PEROXIDE, "vol", "", 98.8, 2e-3),
    ("100 vol", PEROXIDE, "% w/w", "--density 1.102", 27.5, 1e-2),
    ("100 vol", PEROXIDE, "% w/w", "", 27.5, 1e-2),
    ("50 % w/w", PEROXIDE, "M", "--density 1.19662", 17.5897, 1e-4),  # tutor's page (a+b)
    # normality: US Army course MD0837 (b)
    ("10.41 M", "HCl", "Eq/L for acid-base", "", 10.41, 1e-4),
    ("0.566 N, 3 equivalents per mol", "H3PO4", "mM", "", 188.7, 1e-3),
    ("0.1 N (KMnO4 to Mn2+)", "KMnO4", "mol/dm3", "", 0.02, 1e-6),
    ("0.02 M", "potassium permanganate", "N (to Mn2+)", "", 0.1, 1e-6),
    # available chlorine: worked out by hand
    ("5.00 % w/v available chlorine", "bleach", "% w/v", "", 5.25, 1e-3),
    ("5.25 % w/v", "bleach", "% w/v available chlorine", "", 5.00, 1e-3),
    ("1000 ppm available chlorine", "bleach", "mM", "", 14.10, 1e-3),
    ("12 % w/w available chlorine", "bleach", "M", "--density 1.2", 2.031, 1e-3),
    # molality and per cents by mass: worked out from the definitions (b)
    ("10 % w/w", "sucrose", "mol/kg", "", 0.3246, 1e-3),
    ("10 % w/w", "NaCl", "mol/kg", "", 1.9013, 1e-3),
    ("1.9013 mol/kg", "NaCl", "M", "--density 1.0707", 1.8321, 1e-3),
    ("24.968 % w/w", "CuSO4.5H2O", "mol/kg", "", 1.1898, 1e-3),
    ("100 ppm m/m", "NaCl", "% w/w", "", 0.01, 1e-6),
    # one part in ten in all: US Army course MD0837 (a)
    ("1 in 10 of 36 % w/w", "HCl", "M", "--density 1.18", 1.165, 1e-3),
    ("1:5", "HCl", "M", '--from "2 M"', 0.4, 1e-6),
    ("1+9 of 100 vol", PEROXIDE, "vol", "", 10, 1e-6),
    ("0.2 M", "HCl", "1 in", '--from "2 M"', 10, 1e-6),
    ("0.2 M", "HCl", "1 in of 2 M", "", 10, 1e-6),
    # density tables: ethanol by OIML R 22 (b), the others CRC 20 °C (a+b)
    ("96 % v/v", "ethanol", "% w/w", "", 93.84, 2e-4),
    ("62.39 % w/w", "ethanol", "% v/v", "", 70, 2e-4),
    ("50 % v/v", "ethanol", "M", "", 8.566, 1e-3),
    ("30 % w/w", "HCl", "M", "", 9.456, 1e-3),
    ("9.456 M", "HCl", "% w/w", "", 30, 1e-3),
    ("40 % w/w", "NaOH", "M", "", 14.300, 1e-3),
    ("3.729 M", "sulfuric acid", "% w/w", "", 30, 1e-3),
    # saturated: solubilities from memory (c)
    ("saturated at 20 °C", "limewater", "M", "", 0.022, 0.1),
    ("saturated", "NaCl", "% w/w", "--temperature 20", 26.4, 5e-3),
    ("saturated at 20 °C", "NaCl", "mol/kg", "", 6.14, 1e-2),
    ("1 in 2 of saturated at 20 °C", "calcium hydroxide", "M", "", 0.011, 0.1),
    # counted as a part: molar masses as in formula.py (b); 1000 mg/dm³ of nitrate is 16.13 mM
    ("1000 ppm m/v as NO3", "potassium nitrate", "mM", "", 16.13, 1e-3),
    ("100 mg/L as N", "KNO3", "mM", "", 7.139, 1e-3),
    ("100 mg/L nitrate-N", "KNO3", "mM", "", 7.139, 1e-3),
    ("0.01 M", "KNO3", "mg/L as nitrate", "", 620.0, 1e-3),
    ("50 ppm m/v as CaCO3", "calcium chloride", "mM", "", 0.4996, 1e-3),
    ("1000 ppm m/v as Cu", "CuSO4.5H2O", "g/dm3", "", 3.929, 1e-3),
    ("1 × 10⁻³ M", "NaOH", "mM", "", 1, 1e-9),
    ("37 % w/w", "HCl", "M", "--density '1,18 g/cm3'", 11.975, 1e-3),
    ("37 % w/w", "HCl", "M", "--density '1180 kg/m³'", 11.975, 1e-3),
    ("100 vol", PEROXIDE, "M", "--gas-volume '24 dm3/mol'", 8.333, 1e-3),
    # neat liquids by volume: Harvey, example 2.9c (a+b), 80 cm³ in 2 dm³
    ("4 % v/v", "ethanoic acid", "g/dm3", "--density 1.05", 42, 1e-6),
]


def ask(text: str, of: str, to: str, given: str = "") -> tuple[str, ...]:
    return ("strength", text, "--of", of, "--to", to, *shlex.split(given))


@pytest.mark.parametrize(("text", "of", "to", "given", "value", "within"), SUMS)
def test_a_strength_is_turned(
    stockroom: Stockroom, text: str, of: str, to: str, given: str, value: float, within: float
) -> None:
    answer = stockroom(*ask(text, of, to, given), "--json").json
    assert answer["value"] == pytest.approx(value, rel=within)


SAID = [
    ("20 vol", PEROXIDE, "M", "", "vol counted at 22.414 dm³ of oxygen a mole (0 °C, 1 atm)"),
    ("20 vol", PEROXIDE, "M", "--gas-volume 24", "24 dm³ of oxygen a mole (room temperature)"),
    ("2 M", PEROXIDE, "vol", "", "vol counted at 22.414 dm³"),
    ("0.1 N (to Mn2+)", "KMnO4", "M", "", "5 equivalents per mol (MnO4⁻ + 8 H⁺ + 5 e⁻"),
    ("1:10", "HCl", "M", '--from "2 M"', "1:10 read as one part in 10 parts in total"),
    ("500 ppm available chlorine", "bleach", "M", "", "read as mg in 1 dm³"),
    ("37 % w/w", "HCl", "M", "", "density 1.184 g/cm³ (at 20 °C: CRC Handbook"),
    ("12 M", "HCl", "% w/w", "", "from memory"),
    ("1 mol/kg", "NaCl", "% w/w", "", "molality: mol in 1 kg of water"),
    ("saturated at 20 °C", "limewater", "M", "", "0.173 g Ca(OH)2 in 100 g of water at 20 °C"),
    ("28 % w/w", "ammonium hydroxide", "M", "", "counted as NH3"),
    ("96 % v/v", "ethanol", "M", "", "pure liquid: density 0.7892 g/cm³ at 20 °C (OIML"),
    ("37 % w/w", "HCl", "M", "--temperature 30", "30 °C took no part"),
    ("1 M", "HCl", "g/dm3", "--density 1.2", "density 1.2 g/cm³ took no part"),
    ("1 M", "HCl", "g/dm3", "--pure-density 1.2", "--pure-density 1.2 took no part"),
    ("98 % w/w", "H2SO4", "M", "--density 1.2", "! 1.2 g/cm³ given, and the table has 1.836"),
    ("50 M", "HCl", "g/dm3", "", "! is it meant?"),
    ("100 mg/L as N", "KNO3", "mM", "", "counted as N: 14.01 g of it in 101.1 g"),
    ("0.1 M", "copper sulphate pentahydrate", "g/dm3", "", "24.97 g"),
]


@pytest.mark.parametrize(("text", "of", "to", "given", "said"), SAID)
def test_what_was_used_is_named(
    stockroom: Stockroom, text: str, of: str, to: str, given: str, said: str
) -> None:
    assert said in stockroom(*ask(text, of, to, given)).out


REFUSED = [
    ("0.1 N", "KMnO4", "M", "", 2, "5 to Mn2+; 3 to MnO2; 1 to MnO4 2-"),
    ("0.1 N", "KMnO4", "M", "", 2, 'potassium permanganate "0.1 N"'),
    ("0.02 M", "KMnO4", "N", "", 2, "5 to Mn2+"),
    ("1 in 10", "HCl", "M", "", 1, '"1 in 10": one part of what?'),
    ("1:1", "HCl", "M", "", 2, "parts of the whole, or parts to parts?"),
    ("saturated", "NaCl", "M", "", 1, "at what temperature?"),
    ("saturated at 60 °C", "Na2CO3", "mol/kg", "", 1, "held from 0 to 30 °C"),
    ("saturated at 20 °C", "starch", "% w/w", "", 1, "I need g in 100 g of water"),
    ("saturated at 40 °C", "NaCl", "M", "", 1, "I need its density"),
    ("45 % w/w", "HCl", "M", "", 1, "only up to 40 % w/w (CRC Handbook"),
    ("25 M", "HCl", "% w/w", "", 1, "the most its density is held for"),
    ("5 % w/w", "glucose", "M", "", 1, "I need the density on the label"),
    ("0.5 M", "glucose", "mol/kg", "", 1, "I need the density on the label"),
    ("5 % v/v", "glucose", "M", "", 1, "density of the pure liquid"),
    ("5 % w/v available chlorine", "NaCl", "M", "", 2, "a strength of bleach"),
    ("100 % vol", PEROXIDE, "M", "", 2, "Do you mean 100 vol"),
    ("100 vol at 30 dm3/mol", PEROXIDE, "M", "", 2, "no gas takes up 30 dm³"),
    ("100 vol", PEROXIDE, "M", "--gas-volume 30", 2, "--gas-volume 30"),
    ("2 M", "HCl", "g/dm3", "--gas-volume 24", 2, "no vol in this sum"),
    ("2 M", "HCl", "g/dm3", '--from "3 M"', 2, "nothing here is a part of it"),
    ("2 M", "HCl", "1 in", "", 1, "one part of what?"),
    ("2 M", "HCl", "1 in of 1 M", "", 2, "no stronger than"),
    ("2 M", "NaCl", "saturated", "", 2, '--to "saturated": I do not know'),
    ("saturated", "NaCl", "% w/w", "--temperature warm", 2, "'warm' is not a temperature"),
    ("2 m", "NaCl", "M", "", 2, "molality or metres?"),
    ("1000 ppm as N", "KNO3", "M", "", 2, 'Write "1000 ppm m/v as N" or "1000 ppm m/m as N"'),
    ("10 mg/L as Cl", "KNO3", "M", "", 2, "Cl is not in it"),
    ("10 mg/L as N", "starch", "M", "", 1, "no formula is held for starch"),
    ("0.1 M as N", "KNO3", "g/dm3", "", 2, "I do not know"),
    ("2 M", "NaCl", "0.5 M", "", 2, '--to "0.5 M": a unit alone is wanted'),
    ("2 M", "NaCl", "M/50", "", 2, "a unit alone is wanted"),
    ("2 M", "NaCl", "%", "", 2, 'Write "% w/v", "% w/w" or "% v/v".'),
    ("2 M", "", "g/dm3", "", 2, '--of "": of what?'),
    ("2 M", "nacl", "g/dm3", "", 2, "NaCl is sodium chloride"),
    ("2 M", "B03", "g/dm3", "", 2, "Is B03 a bottle?"),
    ("5 % w/w", "glucose", "M", "", 1, "Add it as --density."),
    ("0.02 M", "KMnO4", "N", "", 2, 'Say it after the N, as "N (to Mn2+)"'),
    ("0.880", "ammonia", "M", "", 2, "Ammonia of 0.880 g/cm³ is about 34 % w/w"),
    ("880", "NH3", "M", "", 2, 'Write "34 % w/w"'),
    ("0.85", "ammonia", "M", "", 2, "Write the % w/w off the label"),
    ("5 % w/w", "glucose", "M", "--density x", 2, "Write it as 1.18"),
    ("20 vol", PEROXIDE, "M", "--gas-volume 0", 2, "Write it as 24"),
]


@pytest.mark.parametrize(("text", "of", "to", "given", "code", "says"), REFUSED)
def test_what_is_doubtful_is_refused_with_what_to_read_off(
    stockroom: Stockroom, text: str, of: str, to: str, given: str, code: int, says: str
) -> None:
    result = stockroom(*ask(text, of, to, given))
    assert (result.code, result.out) == (code, "")
    assert says in result.err


@pytest.mark.parametrize("density", ["1.16", "1.2"])
def test_a_density_near_the_tables_is_not_doubted(stockroom: Stockroom, density: str) -> None:
    # 36 % w/w is 1.179 g/cm³; a label at another temperature is no slip
    assert "!" not in stockroom(*ask("36 % w/w", "HCl", "M", f"--density {density}")).out


def test_the_figure_given_stands_before_the_table(stockroom: Stockroom) -> None:
    words = ask("36 % w/w", "HCl", "M", "--density 1.2")
    assert stockroom(*words, "--json").json["value"] == pytest.approx(11.85, rel=1e-3)


@pytest.fixture
def house(stockroom: Stockroom, tmp_path: Path) -> Path:
    """A store of one's own with one acid, its label and its other name."""
    store = tmp_path / "house.sqlite"
    by = ("--by", "T1")
    acid = ("substance=muriatic acid", "formula=HCl", "other_names=spirits of salt", "source=x")
    line = ("item=muriatic acid", "strength=36 % w/w", "substance=muriatic acid", "form=liquid")
    assert stockroom("new", store=store).code == 0
    assert stockroom("add", "substances", *acid, *by, store=store).err == ""
    words = ("add", "lines", *line, "density_g_cm3=1.20", "source=x", *by)
    assert stockroom(*words, store=store).code == 0
    return store


@pytest.mark.parametrize("name", ["muriatic acid", "spirits of salt"])
def test_ones_own_line_stands_before_the_table(
    stockroom: Stockroom, house: Path, name: str
) -> None:
    # 36 % at 1.20 g/cm³ of one's own label is 11.85 mol/dm³, and 11.64 by the table
    out = stockroom(*ask("36 % w/w", name, "M"), store=house).out
    assert f"36 % w/w {name} is 11.85 M" in out
    assert "that of your own line" in out


def test_a_damaged_store_does_not_stop_a_sum(stockroom: Stockroom, tmp_path: Path) -> None:
    store = tmp_path / "house.sqlite"
    store.write_text("no store at all")
    assert "1.785" in stockroom(*ask("20 vol", PEROXIDE, "M"), store=store).out


def test_a_substance_of_the_starter_tables_is_known(stockroom: Stockroom) -> None:
    # zinc nitrate is in no table of the practice college
    assert "18.94 g" in stockroom(*ask("0.1 M", "zinc nitrate", "g/dm3")).out


@pytest.mark.parametrize(
    ("text", "of", "one", "other"),
    [
        ("12.5", PEROXIDE, "vol", "% w/w"),
        ("0.35", "NaOH", "mol/kg", "mol/dm3"),
        ("7.25", "sulfuric acid", "N for acid-base", "% w/w"),
        ("3.5", "bleach", "% w/v available chlorine", "mol/dm3"),
        ("42", "ethanol", "% v/v", "mol/kg"),
    ],
)
def test_there_and_back_again_is_the_same(
    stockroom: Stockroom, text: str, of: str, one: str, other: str
) -> None:
    there = stockroom(*ask(f"{text} {one}", of, other), "--json").json["value"]
    back = stockroom(*ask(f"{there!r} {other}", of, one), "--json").json["value"]
    # the JSON answer is rounded to six figures
    assert back == pytest.approx(float(text), rel=1e-5)


def test_the_per_cent_of_the_bleach_trade_is_of_chlorine(stockroom: Stockroom) -> None:
    # 10 g/dm³ of available chlorine to 1 %: Adam and Gordon 1999; 125 / 70.906 recomputed
    found = stockroom("strength", "12.5 % trade", "--of", "bleach", "--to", "mol/dm3", "--json")
    assert found.json["value"] == pytest.approx(1.763, abs=0.001)
    told = stockroom("strength", "12.5 % trade", "--of", "bleach", "--to", "% w/v").out
    assert "available chlorine" in told
    assert told.startswith("12.5 % trade sodium hypochlorite is 13.1")
