from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

PEROXIDE = ("--of", "hydrogen peroxide")
SULFURIC = ("--of", "sulfuric acid")
ETHANOL = ("--of", "ethanol")
LOCAL_RULES = "Local rules, the supplier's safety data sheet"

# The first seven are worked out by hand.
# The others: the chemistry reference, section 8; its key and how it was come by in the row.
SUMS = [
    (("500 cm3", "0.100 mol/dm3", "--from", "91 vol", *PEROXIDE), 6.16, 2e-3),
    (("500 cm3", "0.100 mol/dm3", "--from", "100 vol"), 5.60, 2e-3),
    (("2.00 L", "2.00 M", "--from", "36 % w/w", "--of", "HCl", "--density", "1.18"), 343, 1e-3),
    (("5.00 L", "2.00 M", "--from", "98 % w/w", *SULFURIC, "--density", "1.84"), 544, 1e-3),
    # the same by the tables, whose densities are 1.1791 and 1.8361
    (("2.00 L", "2.00 M", "--from", "36 % w/w", "--of", "hydrochloric acid"), 343, 2e-3),
    (("5.00 L", "2.00 M", "--from", "98 % w/w", *SULFURIC), 544, 2.5e-3),
    (("1000 cm3", "0.200 M", "--from", "1.06 M"), 188.7, 2e-3),
    # OSX, a+b
    (("5.00 L", "0.100 M", "--from", "1.59 M"), 314, 2e-3),  # 3.21
    (("25 cm3", "0.025 M", "--from", "0.33 M"), 1.894, 1e-3),  # chapter 3 exercise
    # HAR, a+b
    (("2 L", "4 % v/v", "--from", "neat", "--of", "acetic acid"), 80, 1e-9),  # 2.9c
    (("250 cm3", "0.10 M", "--from", "14.8 M", "--of", "NH3"), 1.689, 1e-3),  # 2.10
    # AM, a+b (8-2 and 8-5 recomputed, b)
    (("40 cm3", "1 in 5", "--from", "0.5 M"), 8, 1e-9),
    (("250 cm3", "20.0 % w/v", "--from", "38.0 % w/w", "--of", "HCl", "--density", "1.19"),
     110.6, 1e-3),
    (("1 L", "2.00 M", "--from", "33.0 % w/w", "--of", "HCl", "--density", "1.15"), 192.1, 1e-3),
    (("250 cm3", "0.500 M", "--from", "99.7 % w/w", "--of", "acetic acid", "--density", "1.05"),
     7.170, 1e-3),
    # WEB, a+b
    (("260 cm3", "95 % v/v", "--from", "35 % v/v", "--with", "100 % v/v"), 20, 1e-9),
    (("20 cm3", "70 % v/v", "--from", "50 % v/v", "--with", "100 % v/v"), 12, 1e-9),
    (("1 L", "3.5 % w/v", "--from", "7 % w/v", "--with", "2 % w/v"), 300, 1e-9),
    # section 4, b
    (("1000 cm3", "70 % v/v", "--from", "96 % v/v", *ETHANOL), 729.17, 1e-5),
]  # fmt: skip


@pytest.mark.parametrize(("words", "value", "within"), SUMS)
def test_dilutions_agree_with_the_books(
    stockroom: Stockroom, words: tuple[str, ...], value: float, within: float
) -> None:
    found = stockroom("dilute", *words, "--json").json
    assert found["value"] == pytest.approx(value, rel=within)
    assert found["unit"] == "cm3"


# BP12, BP-A: "75x mL in 1 L gives x M" and the like, a+b, tolerance of a nominal recipe.
@pytest.mark.parametrize(
    ("of", "strength", "cubic"),
    [
        ("ammonia", "25 % w/w", 74.9),
        ("ammonia", "35 % w/w", 55.3),
        ("sulfuric acid", "96 % w/w", 55.5),
        ("hydrochloric acid", "36 % w/w", 85.8),
        ("nitric acid", "71 % w/w", 62.5),
        ("phosphoric acid", "85 % w/w", 67.8),
        ("sodium hydroxide", "50 % w/w", 52.3),
        ("potassium hydroxide", "45 % w/w", 86.0),
        ("acetic acid", "99.5 % w/w", 57.5),
    ],
)
def test_a_litre_of_one_molar_from_the_bottle_by_the_table_alone(
    stockroom: Stockroom, of: str, strength: str, cubic: float
) -> None:
    """OSX-F and HB, a+b: cm³ for 1 dm³ of 1 mol/dm³, without a density being given."""
    of = {"phosphoric acid": "H3PO4", "potassium hydroxide": "KOH"}.get(of, of)
    data = stockroom("dilute", "1 L", "1 M", "--from", strength, "--of", of, "--json").json
    assert data["value"] == pytest.approx(cubic, rel=0.015)


def test_the_density_of_the_table_is_named_with_its_source(stockroom: Stockroom) -> None:
    out = stockroom("dilute", "1 L", "1 M", "--from", "36 % w/w", "--of", "HCl").out
    assert "density 1.179 g/cm³" in out
    assert "20 °C: CRC Handbook table of aqueous solutions, from memory" in out


def test_a_density_that_is_given_is_used(stockroom: Stockroom) -> None:
    words = ("dilute", "1 L", "1 M", "--from", "36 % w/w", "--of", "HCl", "--density")
    light = stockroom(*words, "1.0", "--json").json["value"]
    assert stockroom(*words, "1.2", "--json").json["value"] == pytest.approx(light / 1.2, rel=1e-5)


def test_a_solution_is_made_up_to_its_mark(stockroom: Stockroom) -> None:
    out = stockroom("dilute", "1 L", "0.1 M", "--from", "1 M").out
    assert out.startswith("100 cm³ of 1 M, made up to 1 000 cm³\n")
    assert "no volumes are added together" in out


def test_ethanol_is_told_its_water(stockroom: Stockroom) -> None:
    """Reference section 4 (b): 729.17 cm³ and 297.4 cm³ of water, not 270.8."""
    said = stockroom("dilute", "1 L", "70 % v/v", "--from", "96 % v/v", *ETHANOL).said
    answer = "729.2 cm³ of 96 % v/v ethanol and 297.4 cm³ of water, which come to 1 000 cm³"
    assert said.startswith(answer)
    assert "so 270.8 cm³ of water would be wrong" in said
    assert "OIML R 22 formula, 20 °C" in said


@pytest.mark.parametrize("strength", ["93.84 % w/w", "16.447 mol/dm3"])
def test_ethanol_may_be_written_in_any_unit(stockroom: Stockroom, strength: str) -> None:
    """Reference section 4 (b): each of these is 96 % v/v."""
    data = stockroom("dilute", "1 L", "70 % v/v", "--from", strength, *ETHANOL, "--json").json
    assert data["value"] == pytest.approx(729.17, rel=1e-4)


def test_ethanol_without_its_name_is_asked_about(stockroom: Stockroom) -> None:
    words = ("dilute", "1 L", "50 % v/v", "--from", "96 % v/v", "--with", "40 % v/v")
    assert "if it is ethanol they do not: add --of ethanol" in stockroom(*words).out
    assert "lose" in stockroom(*words, *ETHANOL).out


def test_two_ethanols_keep_their_mass(stockroom: Stockroom) -> None:
    words = ("dilute", "500 g", "50 % w/w", "--from", "90 % w/w", "--with", "40 % w/w", *ETHANOL)
    assert stockroom(*words).out.startswith("100 g of 90 % w/w ethanol and 400 g of 40 % w/w")


def test_a_density_given_for_ethanol_is_said_not_to_be_used(stockroom: Stockroom) -> None:
    words = ("dilute", "1 L", "70 % v/v", "--from", "96 % v/v", *ETHANOL, "--density", "0.8")
    assert "density 0.8 g/cm³ is not used" in stockroom(*words).out


def test_a_mix_of_two_says_that_volumes_are_taken_as_additive(stockroom: Stockroom) -> None:
    out = stockroom("dilute", "1 L", "3.5 % w/v", "--from", "7 % w/v", "--with", "2 % w/v").out
    assert out.startswith("300 cm³ of 7 % w/v and 700 cm³ of 2 % w/v, 1 000 cm³ in all\n")
    assert "volumes taken as additive" in out


def test_a_mix_by_mass_is_exact_and_says_by_how_much_it_shrinks(stockroom: Stockroom) -> None:
    """Worked out here from the tables: 50 % sulfuric acid from 98 % and 10 %."""
    words = ("dilute", "1 L", "50 % w/w", "--from", "98 % w/w", "--with", "10 % w/w", *SULFURIC)
    out = stockroom(*words).out
    grams = 1395.2 * 40 / 88
    assert f"by mass {grams:.1f} g and {1395.2 - grams:.0f} g" in out
    assert f"{grams / 1.8361:.1f} cm³ of 98 % w/w" in out
    assert "volumes do not add: they lose" in out


def test_the_density_given_is_the_first_ones_only(stockroom: Stockroom) -> None:
    words = ("dilute", "1 L", "10 % w/w", "--from", "36 % w/w", "--with", "5 % w/w", "--of", "HCl")
    out = stockroom(*words, "--density", "1.18").out
    assert "36 % w/w: density 1.18 g/cm³ as given" in out
    assert "5 % w/w: density 1.0228 g/cm³" in out


def test_a_mass_to_make_needs_no_density(stockroom: Stockroom) -> None:
    out = stockroom("dilute", "500 g", "10 % w/w", "--from", "36 % w/w").out
    assert out.startswith("138.9 g of 36 % w/w and 361.1 g of water, 500 g in all\n")
    assert "exact, since masses add" in out


def test_one_in_ten_is_told_as_one_part_in_ten(stockroom: Stockroom) -> None:
    out = stockroom("dilute", "500 cm3", "1 in 10", "--from", "2 M", "--of", "NaCl").out
    assert out.startswith("50 cm³ of 2 M sodium chloride, made up to 500 cm³\n")
    assert "one part in 10 parts in total" in out
    assert "it comes to 0.2 mol/dm³" in out


def test_what_has_no_number_can_be_diluted_all_the_same(stockroom: Stockroom) -> None:
    words = ("dilute", "40 cm3", "1 in 5", "--from", "saturated", "--of", "Ca(OH)2")
    assert stockroom(*words).out.startswith("8 cm³ of saturated calcium hydroxide")


def test_a_neat_liquid_goes_by_its_density(stockroom: Stockroom) -> None:
    """Worked out here: 0.1 mol of 74.12 g/mol at 0.81 g/cm³."""
    words = ("dilute", "1 L", "0.1 M", "--from", "neat", "--of", "butan-1-ol", "--density", "0.81")
    data = stockroom(*words, "--json").json
    assert data["value"] == pytest.approx(7.412 / 0.81, rel=1e-3)


def test_a_neat_liquid_of_unknown_density_is_asked_for_it(stockroom: Stockroom) -> None:
    result = stockroom("dilute", "1 L", "0.1 M", "--from", "neat", "--of", "C9H20O")
    assert result.code == 1
    assert "neat C9H20O: I need the density of the pure liquid." in result.err


def test_strong_acid_is_diluted_with_its_caution_and_local_rules_come_first(
    stockroom: Stockroom,
) -> None:
    said = stockroom("dilute", "1 L", "1 M", "--from", "98 % w/w", *SULFURIC).said
    assert "! Acid into water" in said
    assert LOCAL_RULES in said.split("! Acid into water")[1]


def test_two_acids_are_mixed_the_stronger_into_the_weaker(stockroom: Stockroom) -> None:
    words = ("dilute", "1 L", "2 M", "--from", "5 M", "--with", "1 M", *SULFURIC)
    assert "! The stronger into the weaker" in stockroom(*words).out


def test_without_a_caution_nothing_is_said_of_local_rules(stockroom: Stockroom) -> None:
    assert LOCAL_RULES not in stockroom("dilute", "1 L", "0.1 M", "--from", "1 M").out


def test_a_stronger_need_than_the_stock_is_refused_in_its_own_unit(stockroom: Stockroom) -> None:
    result = stockroom("dilute", "500 cm3", "90 vol", "--from", "89.1 vol")
    assert result.code == 1
    assert "Cannot reach 90 vol from 89.1 vol." in result.err


@pytest.mark.parametrize(
    ("words", "said"),
    [
        (("1 L", "2 M", "--from", "2.00 M", "--of", "HCl"), "1 000 cm³ of 2.00 M hydrochloric"),
        (("1 L", "70 % v/v", "--from", "70 % v/v", *ETHANOL), "1 000 cm³ of 70 % v/v ethanol"),
        (("500 g", "5 % w/w", "--from", "5 % w/w", "--of", "NaCl"), "500 g of 5 % w/w sodium"),
        (("1 L", "1 M", "--from", "2 M", "--with", "1 M", "--of", "HCl"), "1 000 cm³ of 1 M"),
        (("1 L", "36.46 g/dm3", "--from", "1 M", "--of", "HCl"), "1 000 cm³ of 1 M"),
    ],
)
def test_what_is_that_strong_already_is_used_as_it_stands(
    stockroom: Stockroom, words: tuple[str, ...], said: str
) -> None:
    out = stockroom("dilute", *words).said
    assert out.startswith(said)
    assert out.endswith("as it stands: it is that strong already")


@pytest.mark.parametrize("water", ["water", "Deionised water", "0 M", "0.0 mol/dm3", "0 % w/w"])
def test_water_is_no_second_solution(stockroom: Stockroom, water: str) -> None:
    words = ("dilute", "500 cm3", "1 M", "--from", "2 M", "--of", "HCl")
    assert stockroom(*words, "--with", water).out == stockroom(*words).out


def test_strong_acids_are_mixed_by_their_densities(stockroom: Stockroom) -> None:
    """Worked out here by mass: 294.2 g/dm³ wanted, of 1765.4 and 98.08, at the table's densities.

    With volumes taken as additive it would be 58.8 cm³ and 441.2 cm³, which make 487 cm³.
    """
    words = ("dilute", "500 cm3", "3 M", "--from", "18 M", "--with", "1 M", *SULFURIC, "--json")
    found = stockroom(*words).json
    strong, weak = (each["value"] for each in found["amounts"][:2])
    assert strong * 18 + weak * 1 == pytest.approx(500 * 3, rel=1e-3)
    assert strong + weak == pytest.approx(513.3, abs=0.5)


def test_dilute_acids_are_mixed_as_volumes(stockroom: Stockroom) -> None:
    words = ("dilute", "1 L", "1.5 M", "--from", "2 M", "--with", "1 M", "--of", "HCl")
    assert "500 cm³ of 2 M hydrochloric acid and 500 cm³ of 1 M" in stockroom(*words).said


def test_strong_ones_of_no_known_density_are_warned_of(stockroom: Stockroom) -> None:
    words = ("dilute", "1 L", "3 M", "--from", "5 M", "--with", "1 M", "--of", "CaCl2")
    assert "! Volumes taken as additive, and these are strong" in stockroom(*words).out


def test_too_little_to_measure_is_diluted_in_steps(stockroom: Stockroom) -> None:
    found = stockroom("dilute", "1 L", "0.001 M", "--from", "12 M", "--of", "HCl", "--json").json
    assert any("is too little to measure; with usual glass" in each for each in found["details"])
    first, made, *rest = (each["value"] for each in found["ways"][0])
    held = first / made
    for taken, total in zip(rest[::2], rest[1::2], strict=True):
        held *= taken / total
    assert 12 * held == pytest.approx(0.001, rel=0.05)


def test_the_house_measures_with_its_own_glass(stockroom: Stockroom, practice: Path) -> None:
    words = ("dilute", "500 cm3", "0.100 mol/dm3", "--from", "91 vol", *PEROXIDE)
    assert "6.2 cm³ (10 cm³ graduated pipette): within" in stockroom(*words, store=practice).out
    near = stockroom(*words, "--closeness", "0.5", store=practice).out
    assert "6.158 cm³ cannot be measured to ±0.5 % into 500 cm³" in near


def test_every_amount_is_data(stockroom: Stockroom) -> None:
    """Reference section 4 (b): 729.17 cm³ and 297.4 cm³, 588.7 g and 296.8 g."""
    found = stockroom("dilute", "1 L", "70 % v/v", "--from", "96 % v/v", *ETHANOL, "--json").json
    told = [(each["what"], round(each["value"], 1), each["unit"]) for each in found["amounts"]]
    assert told == [
        ("96 % v/v ethanol", 729.2, "cm3"),
        ("water", 297.4, "cm3"),
        ("96 % v/v ethanol", 588.7, "g"),
        ("water", 296.8, "g"),
        ("come to", 1000.0, "cm3"),
    ]
    assert found["value"] == found["amounts"][0]["value"]


# the cautions by number: nos. 2, 9, 11 and 12, each for the bottle that is opened
CAUTIONED = [
    (("2 M", "--from", "36 % w/w", "--of", "HCl"), "Acid into water"),
    (("2 M", "--from", "36 % w/w", "--of", "HCl"), "fume cupboard"),
    (("2 M", "--from", "35 % w/w", "--of", "ammonia"), "fume cupboard"),
    (("0.1 M", "--from", "neat", "--of", "ethanoic acid"), "burns skin and catches fire"),
    (("70 % v/v", "--from", "96 % v/v", "--of", "ethanol"), "no flame"),
    (("2 M", "--from", "50 % w/w", "--of", "NaOH"), "Into water in portions"),
    (("1 % w/v", "--from", "12 % w/v", "--of", "bleach"), "never with acid"),
]


@pytest.mark.parametrize(("words", "said"), CAUTIONED)
def test_the_caution_is_that_of_the_bottle_opened(
    stockroom: Stockroom, words: tuple[str, ...], said: str
) -> None:
    assert any(
        said in each for each in stockroom("dilute", "1 L", *words, "--json").json["cautions"]
    )


@pytest.mark.parametrize("of", ["HCl", "ammonia", "NaOH"])
def test_a_dilute_one_brings_no_caution_of_the_concentrated(stockroom: Stockroom, of: str) -> None:
    assert (
        stockroom("dilute", "1 L", "0.1 M", "--from", "1 M", "--of", of, "--json").json["cautions"]
        == []
    )


# what cannot be done: the words, the exit code, and what is said
REFUSED = [
    (("1 L", "3.5 % w/v", "--from", "7 % w/v", "--with", "5 % w/v"), 1, "it must lie between"),
    (("1 L", "97 % v/v", "--from", "96 % v/v", *ETHANOL), 1, "Cannot reach 97 % v/v from 96 % v/v"),
    (("1 L", "95 % v/v", "--from", "35 % v/v", "--with", "90 % v/v", *ETHANOL), 1,
     "Cannot reach 95 % v/v from 35 % v/v and 90 % v/v"),
    (("500 g", "5 % w/w", "--from", "2 % w/w"), 1, "Cannot reach 5 % w/w"),
    (("1 L", "30 % w/w", "--from", "60 % w/w", "--of", "NaOH"), 1, "only up to 50 % w/w"),
    (("500 cm3", "10 % w/w", "--from", "36 % w/w"), 1, "density on the label"),
    (("500 cm3", "10 % w/w", "--from", "36 % w/w", "--with", "5 % w/w"), 1, "need its density"),
    (("500 cm3", "0.1 M", "--from", "7 % w/v"), 1, "cannot be compared without a molar mass"),
    (("1 L", "1 in 10", "--from", "2 M", "--with", "1 M"), 2, "a part of one source"),
    (("100 g", "1 in 10", "--from", "2 M"), 2, "a part of one source"),
    (("0 g", "1 % w/w", "--from", "2 % w/w"), 2, "0 g is nothing to make"),
    (("5 items", "1 % w/w", "--from", "2 % w/w"), 2, "5 items is not a volume"),
    (("1 L", "1 M"), 2, "1 M is diluted from what?"),
    (("1 L", "1 M", "--from", "0 M"), 2, "nothing at all"),
    (("1 L", "30 M", "--from", "neat", *ETHANOL), 2, "pure ethanol is 17.13 mol/dm³"),
    (("1 L", "1 M", "--from", "36 %", "--of", "HCl"), 2, "Which: g in 100 cm³"),
    (("1 L", "1 M", "--from", "water", "--of", "HCl"), 2, "1 M is diluted from what?"),
    (("1 L", "1 M", "--from", "2 M", "--closeness", "100"), 2, "not above 0 and below 100"),
    (("1 L", "5 M", "--from", "2 mol/dm3"), 1, "Cannot reach 5 M from 2 mol/dm³."),
]  # fmt: skip


@pytest.mark.parametrize(("words", "code", "said"), REFUSED)
def test_what_cannot_be_done_is_refused_with_the_reason(
    stockroom: Stockroom, words: tuple[str, ...], code: int, said: str
) -> None:
    result = stockroom("dilute", *words)
    assert (result.code, result.out) == (code, "")
    assert said in result.err


def test_a_bottle_counts_at_what_it_is_expected_to_hold(
    stockroom: Stockroom, practice: Path
) -> None:
    # B01, found 91 vol on 2026-12-08, 1 % a month: 89.5 vol on 2027-01-26; scenario T09
    words = ("dilute", "528 cm3", "0.100 mol/dm3", "--from", "B01", "--as-at", "2027-01-26")
    data = stockroom(*words, "--json", store=practice).json
    assert data["value"] == pytest.approx(6.61, abs=0.01)
    assert data["practice"] is True


def test_a_bottle_is_mixed_with_a_strength(stockroom: Stockroom, practice: Path) -> None:
    words = ("dilute", "528 cm3", "0.100 mol/dm3", "--from", "b01", "--with", "0.01 M")
    data = stockroom(*words, "--as-at", "2027-01-26", "--json", store=practice).json
    # 89.5 vol is 7.986 mol/dm³, so 528 × 0.09 / 7.976
    assert data["value"] == pytest.approx(5.96, abs=0.01)
    assert "volumes taken as additive: near enough for dilute solutions" in data["details"]
    assert any("expected on 2027-01-26 from its found" in detail for detail in data["details"])


def test_a_bought_liquid_counts_by_its_label_and_says_so(
    stockroom: Stockroom, practice: Path
) -> None:
    out = stockroom("dilute", "1 L", "70 % v/v", "--from", "B30", store=practice).out
    assert "729.2 cm³ of B30 ethanol and 297.4 cm³ of water" in out
    assert "B30: 96 % v/v by its label, not found" in out


def test_a_bought_liquid_without_a_strength_is_neat(stockroom: Stockroom, practice: Path) -> None:
    out = stockroom("dilute", "100 cm3", "5 % v/v", "--from", "B37", store=practice).out
    assert "5 cm³ of B37 butan-1-ol, made up to 100 cm³" in out
    assert "neat; sound" in out


def test_two_substances_are_not_mixed(stockroom: Stockroom, practice: Path) -> None:
    words = ("dilute", "1 L", "0.1 M", "--from", "B01", "--with", "B30")
    result = stockroom(*words, store=practice)
    assert result.code == 1
    assert "hydrogen peroxide and ethanol are different substances." in result.err


def test_a_bottle_is_not_what_of_says_it_is_not(stockroom: Stockroom, practice: Path) -> None:
    words = ("dilute", "1 L", "0.1 M", "--from", "B01", "--of")
    result = stockroom(*words, "NaOH", store=practice)
    assert (result.code, result.out) == (2, "")
    assert "B01 holds hydrogen peroxide, and --of says sodium hydroxide." in result.err
    assert stockroom(*words, "H2O2", store=practice).code == 0


def test_a_day_before_every_bottle_says_so(stockroom: Stockroom, practice: Path) -> None:
    words = ("dilute", "1 L", "0.1 M", "--from", "B01", "--as-at", "2000-01-01")
    assert "None was here by that day" in stockroom(*words, store=practice).err


def test_a_bottle_past_its_safety_date_is_left_alone(stockroom: Stockroom, practice: Path) -> None:
    """Cyclohexene opened 2026-09-02: test or discard within six months."""
    words = ("dilute", "1 L", "1 % v/v", "--from", "B29", "--as-at", "2027-05-01")
    result = stockroom(*words, store=practice)
    assert result.code == 1
    assert "past its safety date 2027-03-02" in result.err
    assert "Do not open or move it" in result.err


def test_a_number_nobody_has_is_answered_with_the_nearest(
    stockroom: Stockroom, practice: Path
) -> None:
    result = stockroom("dilute", "1 L", "0.1 M", "--from", "B99", store=practice)
    assert result.code == 2
    assert "'B99'" in result.err


@pytest.mark.parametrize(("source", "glacial"), [("25 % w/w", False), ("99.5 % w/w", True)])
def test_only_glacial_ethanoic_acid_is_said_to_freeze_and_burn(
    stockroom: Stockroom, practice: Path, source: str, glacial: bool
) -> None:
    words = ("dilute", "100 cm3", "1 mol/dm3", "--from", source, "--of", "ethanoic acid")
    said = stockroom(*words, store=practice).said
    assert ("freezes" in said, "no flame" in said) == (glacial, glacial)
