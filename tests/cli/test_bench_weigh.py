"""`stockroom weigh`: the mass, whether it can be weighed, how good that is, and bad input."""

from __future__ import annotations

import subprocess
import sys
from pathlib import Path
from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from conftest import Stockroom

PENTAHYDRATE = ("--of", "sodium thiosulfate pentahydrate")
ANHYDROUS = ("--of", "sodium thiosulfate, anhydrous")
SMALL = ("weigh", "176 cm3", "0.1 % w/v", "--of", "ascorbic acid", "--closeness", "2")

# Every value worked out by hand
SUMS = [
    (("2.00 L", "0.200 mol/dm3", *PENTAHYDRATE), 99.27),
    (("2.00 L", "0.200 mol/dm3", *ANHYDROUS), 63.24),
    (("1.00 L", "0.500 M", "--of", "CuSO4.5H2O"), 124.8),
    (("1.00 L", "0.500 M", "--of", "CuSO4"), 79.8),
    (("500 cm3", "0.500 M", "--of", "Na2CO3"), 26.5),
    (("500 cm3", "0.500 M", "--of", "Na2CO3·10H2O"), 71.5),
    (("1.00 L", "0.400 M", "--of", "NaOH", "--assay", "97"), 16.5),
]


def details(out: str) -> list[str]:
    return [line.strip() for line in out.splitlines()]


@pytest.mark.parametrize(("words", "value"), SUMS)
def test_masses_agree_with_the_trade_side(
    stockroom: Stockroom, words: tuple[str, ...], value: float
) -> None:
    data = stockroom("weigh", *words, "--json").json
    assert data["value"] == pytest.approx(value, rel=2e-3)
    assert data["unit"] == "g"


# OpenStax, Chemistry 2e (OSX), US Army MD0837 (AM), Harvey (HAR); all a+b
@pytest.mark.parametrize(
    ("words", "printed", "within"),
    [
        (("250 cm3", "5.30 M", "--of", "NaCl"), 77.4, 0.05),  # OSX 3.17
        (("250.0 cm3", "0.200 M", "--of", "CaCl2"), 5.55, 0.005),  # OSX 3.17 check
        (("0.500 L", "0.30 M", "--of", "C6H12O6"), 27, 0.5),  # OSX chapter 3
        (("250 cm3", "2.00 M", "--of", "CuSO4.5H2O"), 124.8, 0.1),  # AM
        (("500 cm3", "0.20 M", "--of", "NaOH"), 4.0, 0.05),  # HAR
        (("1 L", "150.0 ppm m/v", "--of", "Cu"), 0.1500, 5e-5),  # HAR
    ],
)
def test_masses_agree_with_printed_examples(
    stockroom: Stockroom, words: tuple[str, ...], printed: float, within: float
) -> None:
    assert stockroom("weigh", *words, "--json").json["value"] == pytest.approx(printed, abs=within)


def test_the_assay_of_the_house_line_is_used_and_said(stockroom: Stockroom) -> None:
    out = stockroom("weigh", "1 L", "0.400 M", "--of", "sodium hydroxide").out
    assert "16.49 g of sodium hydroxide pellets" in out
    assert "assay 97 %" in out


def test_a_salt_on_the_shelf_in_two_forms_is_asked_about(stockroom: Stockroom) -> None:
    result = stockroom("weigh", "1 L", "0.1 M", "--of", "sodium thiosulfate")
    assert result.code == 2
    assert "'sodium thiosulfate': which form is in the bottle?" in result.err


# the masses of 0.1 mol of the hydrate: recomputed from the standard atomic masses
TRADE = [
    ("iron alum", 48.22, "NH4Fe(SO4)2.12H2O"),
    ("Glauber’s salt", 32.22, "Na2SO4.10H2O"),
    ("gypsum", 17.22, "CaSO4.2H2O"),
    ("plaster of Paris", 14.51, "CaSO4.0.5H2O"),
    ("hypo", 24.82, "sodium thiosulfate pentahydrate"),
    ("washing soda", 28.61, "sodium carbonate decahydrate"),
]


@pytest.mark.parametrize(("of", "value", "said"), TRADE)
def test_a_name_of_the_trade_is_weighed_as_its_hydrate(
    stockroom: Stockroom, of: str, value: float, said: str
) -> None:
    words = ("weigh", "1 L", "0.1 M", "--of", of)
    assert stockroom(*words, "--json").json["value"] == pytest.approx(value, abs=0.01)
    assert said in stockroom(*words).out


@pytest.mark.parametrize(
    ("of", "hydrate"),
    [
        ("zinc nitrate", "Zn(NO3)2.6H2O"),
        ("copper nitrate", "Cu(NO3)2.3H2O"),
        ("sodium sulfate", "Na2SO4.10H2O"),
    ],
)
def test_what_is_mostly_bought_as_a_hydrate_is_asked_about(
    stockroom: Stockroom, of: str, hydrate: str
) -> None:
    result = stockroom("weigh", "1 L", "0.1 M", "--of", of)
    assert result.code == 2
    assert "which form is in the bottle?" in result.err
    assert f'Write --of "{hydrate}"' in result.err


def test_a_bottle_is_weighed_from_by_its_number(stockroom: Stockroom, practice: Path) -> None:
    words = ("weigh", "1 L", "0.4 M", "--of", "b17", "--store", str(practice))
    out = stockroom(*words).out
    assert "16.49 g of sodium hydroxide pellets" in out
    assert "assay 97 %" in out


def test_a_bottle_of_a_solution_is_not_weighed_from(stockroom: Stockroom, practice: Path) -> None:
    result = stockroom("weigh", "1 L", "0.4 M", "--of", "B01", "--store", str(practice))
    assert result.code == 1
    assert "B01 holds hydrogen peroxide 100 vol" in result.err
    assert "--from B01" in result.err


def test_a_bottle_that_is_not_there_is_no_formula(stockroom: Stockroom, practice: Path) -> None:
    words = ("weigh", "1 L", "0.1 M", "--of", "B999")
    assert "No bottle 'B999'" in stockroom(*words, "--store", str(practice)).err
    assert "B999 looks like a bottle number" in stockroom(*words).err


def test_chips_are_one_way_to_buy_a_substance(stockroom: Stockroom) -> None:
    out = stockroom("weigh", "1 L", "0.1 M", "--of", "calcium carbonate").out
    assert out.startswith("10.01 g of calcium carbonate, ")


def test_a_comma_in_a_name_may_be_left_out(stockroom: Stockroom) -> None:
    """T24: a litre of 1.00 thiosulfate takes 158.1 g of the anhydrous form, however it is named."""
    for name in ("sodium thiosulfate, anhydrous", "Sodium thiosulfate anhydrous"):
        assert "158.1" in stockroom("weigh", "1 L", "1.00 mol/dm3", "--of", name).out


def test_too_little_to_weigh_brings_two_offers(stockroom: Stockroom) -> None:
    # 0.176 g at 2 % on a 0.01 g balance: a usual case of the trade
    out = stockroom(*SMALL, "--step", "0.01").out
    assert "too little for the balance (0.01 g): one step is ±5.7 %" in out
    assert "either 0.5 g made up to 500 cm³" in out
    assert "or 0.5 g made up to 50 cm³, and 17.6 cm³ of that to 176 cm³" in out


def test_enough_to_weigh_brings_no_offer(stockroom: Stockroom) -> None:
    # 0.352 g at 10 % on the same: worked out by hand
    fair = ("weigh", "352 cm3", "0.1 % w/v", "--of", "ascorbic acid", "--step", "0.01")
    out = stockroom(*fair, "--closeness", "10").out
    assert "±2.8 %" in out
    assert "either" not in out


def test_with_no_balance_entered_the_mass_stands_with_a_note(stockroom: Stockroom) -> None:
    # a usual case of the trade
    out = stockroom("weigh", "1 L", "1 M", "--of", "NaCl").out
    assert "58.44 g" in out
    assert "no balance entered" in out


def test_the_house_weighs_with_what_is_in_on_the_day(stockroom: Stockroom, practice: Path) -> None:
    # a usual case of the trade; BAL2 is away 1 to 12 February in the scenario
    there = stockroom(*SMALL, "--as-at", "2027-01-29", store=practice).out
    away = stockroom(*SMALL, "--as-at", "2027-02-03", store=practice).out
    assert "one step of BAL2, 0.001 g, is ±0.57 % of it" in there
    assert "too little for BAL1 (0.01 g)" in away
    assert "BAL2 (0.001 g) is away 2027-02-01 to 2027-02-12: weigh the dry solid before" in away


def test_the_house_offers_its_own_flasks_and_pipettes(stockroom: Stockroom, practice: Path) -> None:
    out = stockroom(*SMALL, "--as-at", "2027-02-03", store=practice).out
    assert "either 0.5 g (BAL1) made up to 500 cm³ (500 cm³ flask): within ±1.1 %" in out
    assert "or 0.5 g (BAL1) made up to 50 cm³ (50 cm³ flask), and 25 cm³ of that" in out
    assert "practice" in stockroom(*SMALL, "--json", store=practice).json


def test_all_balances_away_is_said(stockroom: Stockroom, own: Path) -> None:
    for name in ("BAL1", "BAL2"):
        row = (f"balance={name}", "away_from=2027-03-01", "away_to=2027-03-05", "source=invented")
        assert stockroom("add", "balances", *row, store=own).code == 0
    out = stockroom(*SMALL, "--as-at", "2027-03-03", store=own).out
    assert "0.176 g" in out
    assert "No balance that day." in out


def test_a_pipette_that_is_away_is_named_and_not_used(stockroom: Stockroom, own: Path) -> None:
    # a usual case of the trade
    row = ("glass=1 cm³ graduated pipette", "away_from=2027-03-01", "away_to=2027-03-05")
    assert stockroom("add", "glassware", *row, "source=invented", store=own).code == 0
    words = ("weigh", "250 cm3", "0.01 M", "--of", "butan-1-ol", "--as-at", "2027-03-03")
    out = stockroom(*words, store=own).out
    assert "1 cm³ graduated pipette is away 2027-03-01 to 2027-03-05" in out
    assert "(1 cm³ graduated pipette) made up" not in out


def test_glass_of_no_standard_size_is_left_out_and_said(stockroom: Stockroom, own: Path) -> None:
    row = ("glass=odd flask", "kind=flask", "size_cm3=300", "source=invented")
    assert stockroom("add", "glassware", *row, store=own).code == 0
    out = stockroom(*SMALL, "--as-at", "2027-02-03", store=own).out
    assert "odd flask is left out: flask 300 cm³: ISO 1042:1998 has none of that size." in out


@pytest.mark.parametrize(
    ("flask", "shown"),
    [
        ("A", "0.10000 ± 0.00014 mol/dm³ (k = 2): class A flask, 0.001 g balance"),
        ("B", "0.1000 ± 0.0002 mol/dm³ (k = 2): class B flask, 0.001 g balance"),
    ],
)
def test_the_mass_comes_with_its_uncertainty(stockroom: Stockroom, flask: str, shown: str) -> None:
    words = ("weigh", "100 cm3", "0.1 M", "--of", "KHC8H4O4", "--step", "0.001", "--flask", flask)
    assert shown in details(stockroom(*words).out)


def test_a_measuring_cylinder_is_not_exact_enough(stockroom: Stockroom) -> None:
    words = ("weigh", "1 L", "0.1 M", "--of", "Na2CO3", "--step", "0.01", "--closeness", "0.5")
    exact = stockroom(*words, "--flask", "A").out
    rough = stockroom(*words, "--flask", "cylinder").out
    assert "not exact enough" not in exact
    assert "not exact enough for ±0.5 % with a class B measuring cylinder" in rough


def test_the_limits_of_the_assay_count(stockroom: Stockroom) -> None:
    words = ("weigh", "1 L", "0.1 M", "--of", "Na2CO3", "--step", "0.0001", "--assay")
    wide = stockroom(*words, "99 ± 1").out
    assert "most from assay 0.58 %" in wide
    assert "10.71 g" in wide


def test_a_neat_liquid_is_given_by_mass_and_by_volume(stockroom: Stockroom) -> None:
    # recomputed: 0.025 mol of C4H10O (74.12 g/mol) at 0.81 g/cm³
    words = ("weigh", "250 cm3", "0.1 M", "--of", "butan-1-ol", "--density", "0.81")
    data = stockroom(*words, "--json").json
    assert (data["value"], data["unit"]) == (pytest.approx(1.853, abs=0.001), "g")
    assert "1.853 g, or 2.288 cm³ of butan-1-ol" in data["text"]


# a usual case of the trade: 343 cm³ of 36 % w/w acid of 1.18 g/cm³ for 2.00 dm³ of 2.00 mol/dm³
def test_a_liquid_reagent_counts_at_its_label_and_keeps_its_caution(stockroom: Stockroom) -> None:
    words = ("weigh", "2.00 L", "2.00 M", "--of", "hydrochloric acid", "--density", "1.18")
    lines = details(stockroom(*words).out)
    assert "or 343.3 cm³ of hydrochloric acid 36 % w/w" in lines[0]
    assert any(line.startswith("! Acid into water") for line in lines[1:3])
    assert any(line.startswith("Local rules, the supplier's safety data") for line in lines)


def test_a_liquid_too_little_for_any_pipette_takes_steps(
    stockroom: Stockroom, practice: Path
) -> None:
    words = ("weigh", "250 cm3", "0.01 M", "--of", "butan-1-ol", "--closeness", "2")
    out = stockroom(*words, store=practice).out
    assert "0.2288 cm³ cannot be measured to ±2 % into 250 cm³" in out
    assert "either 0.92 cm³ (1 cm³ graduated pipette) made up to 1 000 cm³ (1 L flask)" in out


def test_a_liquid_measured_to_the_nearest_mark_says_what_that_makes(
    stockroom: Stockroom, practice: Path
) -> None:
    # 104.2 cm³ of 96 % for 250 cm³ of 40 % v/v: three burettes of 34.7 come to 39.97
    out = stockroom("weigh", "250 cm3", "40 % v/v", "--of", "ethanol", store=practice).out
    assert "3 × 34.7 cm³ (50 cm³ burette)" in out
    assert "39.97 ± 0.12 % v/v (k = 2)" in out


# USP <41> (a+b): s = 0.15 mg gives 0.30 g; the floor is 820 steps
def test_the_pharmacopoeias_least_mass_when_asked(stockroom: Stockroom) -> None:
    words = ("weigh", "250 cm3", "0.001 M", "--of", "Na2CO3", "--step", "0.0001")
    assert "either" not in stockroom(*words).out
    asked = stockroom(*words, "--minimum", "usp", "--repeatability", "0.00015").said
    assert "too little for the balance (0.0001 g)" in asked
    assert "the least on the balance is 0.3 g" in asked
    assert "either 0.3 g made up to" in asked


def test_the_pharmacopoeias_floor_needs_no_repeatability(stockroom: Stockroom) -> None:
    words = ("weigh", "1 L", "0.1 M", "--of", "Na2CO3", "--step", "0.001", "--minimum", "USP")
    assert "s not given) the least on the balance is 0.82 g" in stockroom(*words).said


def test_what_cannot_be_designed_is_said(stockroom: Stockroom, practice: Path) -> None:
    words = ("weigh", "100 cm3", "0.0000001 M", "--of", "KIO3", "--closeness", "0.1")
    assert "no way found in four steps" in stockroom(*words, store=practice).out


# a usual case of the trade: saturated limewater is about 0.02 mol/dm³ (c)
def test_what_will_not_dissolve_is_refused(stockroom: Stockroom) -> None:
    result = stockroom("weigh", "1 L", "0.5 M", "--of", "calcium hydroxide")
    assert result.code == 1
    assert "0.5 mol/dm³ calcium hydroxide will not dissolve" in result.err
    assert "about 0.023 mol/dm³" in result.err


def test_what_may_not_dissolve_is_warned_of(stockroom: Stockroom) -> None:
    # the printed sum is right all the same (US Army MD0837, a+b)
    result = stockroom("weigh", "250 cm3", "2.00 M", "--of", "CuSO4.5H2O")
    assert result.code == 0
    assert "! It may not dissolve: saturated at 20 °C is about 1.3 mol/dm³" in result.out


def test_what_is_kept_as_a_solution_is_sent_to_be_diluted(stockroom: Stockroom) -> None:
    result = stockroom("weigh", "500 cm3", "0.1 M", "--of", "hydrogen peroxide")
    assert result.code == 1
    assert 'stockroom dilute "500 cm³" "0.1 M" --from "100 vol"' in result.err


# a litre is weighed of no gas: these are poured from the bottle they are bought in
@pytest.mark.parametrize("of", ["HCl", "H2SO4", "HNO3", "NH3", "hydrochloric acid"])
def test_what_is_bought_as_a_liquid_is_poured(stockroom: Stockroom, of: str) -> None:
    found = stockroom("weigh", "1 L", "0.1 M", "--of", of, "--json").json
    assert [each["unit"] for each in found["amounts"]] == ["g", "cm3", "cm3"]
    assert found["cautions"]


@pytest.mark.parametrize(
    ("of", "name"),
    [
        ("KMnO4", "potassium permanganate"),
        ("CuSO4·5H2O", "copper(II) sulfate pentahydrate"),
        ("Na₂CO₃ 10H₂O", "sodium carbonate decahydrate"),
        ("anhydrous sodium carbonate", "sodium carbonate, anhydrous"),
        ("sodium thiosulphate pentahydrate", "sodium thiosulfate pentahydrate"),
    ],
)
def test_what_is_weighed_is_named_in_words(stockroom: Stockroom, of: str, name: str) -> None:
    assert f" of {name}, made up to" in stockroom("weigh", "1 L", "0.1 M", "--of", of).out


def test_a_formula_counts_as_pure_and_says_so(stockroom: Stockroom) -> None:
    out = stockroom("weigh", "1 L", "1 M", "--of", "NaOH").said
    assert "a formula counts as pure; as bought, sodium hydroxide pellets: 97 %" in out


def test_a_mass_of_solution_is_made_by_mass(stockroom: Stockroom) -> None:
    """Worked out here: 1 mol of CuSO4 (159.6 g) in 1 kg of water, as the pentahydrate."""
    found = stockroom("weigh", "500 g", "1 mol/kg", "--of", "CuSO4.5H2O", "--json").json
    salt, water = (each["value"] for each in found["amounts"][:2])
    assert salt == pytest.approx(500 * 249.68 / 1159.6, rel=1e-3)
    assert water == pytest.approx(500 - salt, rel=1e-6)
    out = stockroom("weigh", "500 g", "10 % w/w", "--of", "NaCl").out
    assert out.startswith("50 g of sodium chloride and 450 g of water, 500 g in all\n")


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (("500 g", "1 M", "--of", "NaCl"), "is so much in a volume"),
        (("500 g", "10 % w/w", "--of", "HCl"), 'stockroom dilute "500 g" "10 % w/w"'),
        (("500 g", "99 % w/w", "--of", "sodium hydroxide"), "are more than the 500 g to make"),
        (("0 g", "9 % w/w", "--of", "NaCl"), "must be above 0"),
    ],
)
def test_a_mass_that_cannot_be_made_is_refused(
    stockroom: Stockroom, words: tuple[str, ...], said: str
) -> None:
    result = stockroom("weigh", *words)
    assert (result.code > 0, result.out) == (True, "")
    assert said in result.err


def test_iodine_is_dissolved_with_iodide(stockroom: Stockroom) -> None:
    # 0.05 mol/dm³ is what the trade titrates with, and water alone takes 0.0011
    out = stockroom("weigh", "1 L", "0.05 M", "--of", "iodine").said
    assert out.startswith("12.69 g of iodine")
    assert "! In water alone 0.0011 mol/dm³ at most: dissolve it first in a little water" in out


def test_a_standard_counted_as_nitrogen_is_told_as_such(stockroom: Stockroom) -> None:
    # 1000 mg of N in 14.007 × 101.10 g/mol of KNO3: 7.218 g
    out = stockroom("weigh", "1 L", "1000 ppm m/v as N", "--of", "KNO3", "--step", "0.001").out
    assert out.startswith("7.218 g of potassium nitrate")
    assert "1 000.0 ± 1.2 ppm m/v as N (k = 2)" in out


def test_the_steps_are_data(stockroom: Stockroom, practice: Path) -> None:
    found = stockroom(*SMALL, "--as-at", "2027-02-03", "--json", store=practice).json
    weighed, made = found["ways"][0]
    assert (weighed["what"], weighed["value"], weighed["unit"]) == ("take, by BAL1", 0.5, "g")
    assert (made["what"], made["value"]) == ("make up to, in 500 cm³ flask", 500)
    assert len(found["ways"]) == 3


def test_nothing_to_measure_with_is_said(stockroom: Stockroom, tmp_path: Path) -> None:
    store = tmp_path / "house.sqlite"
    flask = ("glass=1 L flask", "kind=flask", "size_cm3=1000", "class=B")
    assert stockroom("new", "--starter", store=store).code == 0
    assert stockroom("add", "glassware", *flask, "--by", "T1", store=store).code == 0
    out = stockroom("weigh", "1 L", "0.1 M", "--of", "sulfuric acid", store=store).said
    assert "nothing entered to measure it with: stockroom add glassware" in out
    assert "no way found" not in out


@pytest.mark.parametrize(
    ("text", "said"),
    [
        ("≥97 %", "assay 97 %: the least by its label"),
        ("min. 97", "assay 97 %: the least by its label"),
        (">= 97%", "assay 97 %: the least by its label"),
        ("97 ± 1 %", "assay 97 ± 1 %"),
        ("97 +/- 0.5", "assay 97 ± 0.5 %"),
        ("99,5 %", "assay 99.5 %"),
    ],
)
def test_an_assay_is_read_as_labels_print_it(stockroom: Stockroom, text: str, said: str) -> None:
    out = stockroom("weigh", "1 L", "0.4 M", "--of", "NaOH", "--assay", text).out
    assert said in details(out)


BAD = [
    (("--assay", "0.97"), "Write a per cent, as 97."),
    (("--assay", "1,000"), "One thousand or one?"),
    (("--step", "1 kg"), "'1 kg' is not a number above 0"),
    (("--closeness", "nan"), "Write it as 5."),
    (("--flask", "C"), "'C' is not A, B or cylinder"),
    (("--flask", "A"), "flask 300 cm³: ISO 1042:1998 has none of that size."),
    (("--minimum", "bp"), "'bp' is no rule I know"),
    (("--repeatability", "0.001"), "0.001 g is for a pharmacopoeia's rule"),
    (("--minimum", "usp", "--repeatability", "-1"), "'-1'"),
    (("--closeness", "100"), "100 % is not above 0 and below 100"),
    (("--closeness", "0"), "'0' is not a number above 0"),
    (("--step", "nil"), "'nil'"),
    (("--assay", "99 ± x"), "'x'"),
    (("--assay", "101"), "assay 101 %"),
    (("--assay", "5 ± 9"), "assay 5 ± 9 %"),
    (("--density", "1180"), "not between 0.5 and 20"),
]


@pytest.mark.parametrize(("words", "said"), BAD)
def test_bad_input_is_refused_with_what_was_typed(
    stockroom: Stockroom, words: tuple[str, ...], said: str
) -> None:
    result = stockroom("weigh", "300 cm3", "0.1 M", "--of", "NaCl", *words)
    assert result.code == 2, result
    assert said in result.err


@pytest.mark.parametrize("volume", ["5 g", "0 cm3", "-5 cm3", "500"])
def test_a_volume_that_is_none_is_refused(stockroom: Stockroom, volume: str) -> None:
    assert stockroom("weigh", volume, "0.1 M", "--of", "NaCl").code == 2


def test_a_cylinder_larger_than_any_is_refused(stockroom: Stockroom) -> None:
    result = stockroom("weigh", "3 L", "0.1 M", "--of", "NaCl", "--flask", "cylinder")
    assert result.code == 2
    assert "3 000 cm³: no measuring cylinder" in result.err


def test_a_weighing_loads_no_library_of_numbers(practice: Path) -> None:
    program = (
        "import sys\nfrom stockroom.cli.main import run\n"
        "try:\n    run(sys.argv[1:])\nexcept SystemExit:\n    pass\n"
        "print([n for n in ('numpy', 'uncertainties', 'pint', 'scipy') if n in sys.modules])"
    )
    words = ["--store", str(practice), *SMALL]
    ran = subprocess.run([sys.executable, "-c", program, *words], capture_output=True, check=True)
    assert ran.stdout.decode("utf-8", "replace").splitlines()[-1] == "[]"
