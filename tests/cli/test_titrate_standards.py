"""titrate: what is known of the flask or the burette, in the form and the unit it had."""

from __future__ import annotations

from typing import TYPE_CHECKING

import pytest

if TYPE_CHECKING:
    from pathlib import Path

    from conftest import Stockroom

# titration, titre, what was weighed; found mol/dm³: recomputed by hand from the formulas
WEIGHED = [
    ("HCl on borax", 20.00, "0.3814 g of Na2B4O7.10H2O", 0.1000),
    ("KMnO4 on iron(II)", 25.00, "0.9803 g of ammonium iron(II) sulfate hexahydrate", 0.0200),
    ("KMnO4 on iron(II)", 25.00, "0.9803 g of FAS", 0.0200),
    ("KMnO4 on Mohr's salt", 25.00, "139.6 mg of iron wire", 0.0200),
    ("NaOH on oxalic", 20.00, "0.1261 g of H2C2O4.2H2O", 0.1000),
    ("thiosulfate on copper", 25.00, "0.6243 g of CuSO4.5H2O", 0.1000),
    ("iodine on thiosulfate", 25.00, "0.6205 g of sodium thiosulfate pentahydrate", 0.0500),
    ("HCl on sodium carbonate", 20.00, "0.2861 g of sodium carbonate decahydrate", 0.1000),
    ("HCl on washing soda", 20.00, "0.1060 g of pure Na2CO3 (dried)", 0.1000),
    ("NaOH on citric acid", 25.00, "0.1751 g of citric acid monohydrate", 0.1000),
    ("AgNO3 on KCl", 20.00, "0.1491 g of KCl", 0.1000),
    # two of chloride in each
    ("AgNO3 on chloride", 20.00, "0.2443 g of barium chloride dihydrate", 0.1000),
    ("KMnO4 on oxalate", 20.00, "0.1271 g of potassium tetroxalate", 0.0200),
    ("thiosulfate on iodate", 20.00, "0.0650 g KH(IO3)2", 0.1000),
    ("EDTA on calcium", 20.00, "0.02002 g of calcium carbonate", 0.0100),
    ("iodine on vitamin C", 20.00, "0.1761 g", 0.0500),
    ("HCl on Tris", 20.00, "0.2423 g", 0.1000),
    ("NaOH on aspirin", 20.00, "0.3603 g", 0.1000),
]


@pytest.mark.parametrize(("reaction", "titre", "weighed", "found"), WEIGHED)
def test_a_standard_counts_in_the_form_that_was_weighed(
    stockroom: Stockroom, reaction: str, titre: float, weighed: str, found: float
) -> None:
    said = stockroom("titrate", reaction, str(titre), "--standard", weighed, "--json").json
    assert said["value"] == pytest.approx(found, rel=1e-3)


def test_what_was_weighed_is_printed_with_its_molar_mass_and_assay(stockroom: Stockroom) -> None:
    borax = ("titrate", "HCl on borax", "20.00", "--standard", "0.3814 g of borax")
    said = stockroom(*borax, "--assay", "99.5")
    assert (
        "0.3814 g of sodium tetraborate decahydrate, Na2B4O7.10H2O, 381.372 g/mol, assay 99.5 %,"
        " weighed to 0.0001 g"
    ) in said.said
    found = stockroom(*borax, "--assay", "99.5", "--json").json
    assert found["standard"] == {
        "name": "sodium tetraborate decahydrate",
        "formula": "Na2B4O7.10H2O",
        "g_per_mol": 381.372,
        "assay_percent": 99.5,
    }
    assert found["value"] == pytest.approx(0.0995, abs=5e-5)


def test_a_bottle_of_the_shelf_may_be_the_standard(stockroom: Stockroom, own: Path) -> None:
    mohr = ("titrate", "KMnO4 on iron(II)", "25.00", "--standard", "0.9803 g of B11")
    said = stockroom(*mohr, store=own).said
    assert "0.9803 g of B11 ammonium iron(II) sulfate hexahydrate, 392.138 g/mol" in said
    wrong = stockroom(*mohr[:-1], "0.9803 g of B10", store=own)
    assert '"0.9803 g of B10": potassium permanganate (KMnO4) is not the iron(II)' in wrong.err


def test_a_line_of_the_house_brings_its_own_assay(stockroom: Stockroom, tmp_path: Path) -> None:
    store = tmp_path / "house.sqlite"
    assert stockroom("new", "--starter", store=store).code == 0
    cells = ("item=house phthalate", "substance=potassium hydrogen phthalate", "form=solid")
    added = stockroom("add", "lines", *cells, "assay_percent=98", "--by", "T1", store=store)
    assert added.code == 0, added.err
    words = ("titrate", "NaOH on KHP", "20.00", "--standard", "0.4084 g of house phthalate")
    assert stockroom(*words, "--json", store=store).json["value"] == pytest.approx(0.098, abs=5e-5)


def test_iodine_is_no_bottle(stockroom: Stockroom, own: Path) -> None:
    words = ("titrate", "thiosulfate on iodine", "25.00", "--standard", "0.3173 g of I2", "--json")
    assert stockroom(*words, store=own).json["value"] == pytest.approx(0.1, abs=1e-4)


@pytest.mark.parametrize(
    ("reaction", "standard", "told"),
    [
        ("NaOH on KHP", "0.2 g of sodium chloride",
         '"0.2 g of sodium chloride": sodium chloride (NaCl) is not the potassium hydrogen'),
        ("NaOH on oxalic acid", "0.2 g of sodium oxalate", "is not the oxalic acid"),
        ("HCl on borax", "0.3814 g", "which form of borax? sodium tetraborate decahydrate."),
        ("KMnO4 on iron(II)", "0.9803 g",
         'Write "0.9803 g of ammonium iron(II) sulfate hexahydrate".'),
        ("thiosulfate on copper", "0.6243 g", "copper(II)? copper(II) sulfate pentahydrate,"),
        ("HCl on soda", "0.2 g of sodium carbonate",
         'Write "0.2 g of sodium carbonate decahydrate".'),
        ("NaOH on HCl", "1 g", 'Write "1 g of HCl".'),
        ("NaOH on HCl", "1 g of tea", 'Or give its formula, as "1 g of HCl".'),
        ("NaOH on HCl", "1 g of", "of what?"),
        ("NaOH on HCl", "0 g of HCl", "is not a mass above 0"),
        ("thiosulfate on bleach", "1 g of bleach", "is a solution"),
        ("thiosulfate on iodine", "0.3 g of B99", "No bottle 'B99'"),
    ],
)  # fmt: skip
def test_a_standard_that_is_none_or_in_no_form_is_refused(
    stockroom: Stockroom, own: Path, reaction: str, standard: str, told: str
) -> None:
    result = stockroom("titrate", reaction, "20.00", "--standard", standard, store=own)
    assert result.code == 2
    assert told in result.err


MADE_UP = ("--standard", "0.3562 g of sodium oxalate in 250 cm3", "--sample", "10 cm3")


def test_a_standard_may_be_made_up_and_pipetted(stockroom: Stockroom) -> None:
    # a textbook's problem, from memory; recomputed
    words = ("titrate", "KMnO4 on oxalate", "48.36", "--blank", "0.03", *MADE_UP)
    said = stockroom(*words, "--json").json
    assert said["value"] == pytest.approx(8.800e-4, abs=1e-7)
    doubts = {part["from"] for part in said["budget"]}
    assert {"mass: balance", "made up to: flask", "aliquot: pipette"} <= doubts
    assert "made up to 250 cm³, of which 10 cm³" in stockroom(*words).said


@pytest.mark.parametrize(
    ("words", "told"),
    [
        (MADE_UP[:2], "how much of the 250 cm3 was in the flask?"),
        (("--standard", "0.3562 g", "--sample", "10 cm3"), "it holds one"),
        ((*MADE_UP[:3], "300 cm3"), "more than there is"),
        ((*MADE_UP, "--dilution", "10 cm3 to 100 cm3"), "that is for a sample"),
        ((*MADE_UP, "--uncertainty", "0.1 M"), "no strength was given"),
        (("--standard", "25 cm3 of 0.1 M in 250 cm3"), "the flask holds one"),
        (("--standard", "25 cm3 of 0.1 M", "--assay", "99"), "nothing was weighed"),
        (("--titrant", "0.1 M", "--sample", "25 cm3", "--assay", "99"), "nothing was weighed"),
    ],
)
def test_what_does_not_belong_to_a_standard_is_refused(
    stockroom: Stockroom, words: tuple[str, ...], told: str
) -> None:
    result = stockroom("titrate", "KMnO4 on oxalate", "48.36", *words)
    assert (result.code, told in result.err) == (2, True), result.err


@pytest.mark.parametrize(
    ("titrant", "found", "told"),
    [
        ("0.1 N", 0.1, "0.1 N is 0.02 mol/dm³: in this reaction a mole of permanganate has 5"),
        ("N/10", 0.1, "N/10 is 0.02 mol/dm³"),
        ("0.1 N KMnO4", 0.1, "has 5 equivalents"),
        ("0.1 N (to Mn2+)", 0.1, "5 equivalents per mol (MnO4⁻"),
        # a label that means another change is taken at its word, and that is said
        ("0.1 N (to MnO2)", 1 / 6, "3 equivalents per mol (MnO4⁻"),
        ("0.02 mol/dm3 of KMnO4", 0.1, "taken as exact"),
        ("0.02 M potassium permanganate", 0.1, "taken as exact"),
        ("3.161 g/dm3", 0.1, "counted as potassium permanganate, KMnO4, 158.034 g/mol"),
    ],
)
def test_a_normality_is_settled_by_the_reaction(
    stockroom: Stockroom, titrant: str, found: float, told: str
) -> None:
    words = ("titrate", "KMnO4 on iron(II)", "25.00", "--sample", "25 cm3", "--titrant", titrant)
    assert stockroom(*words, "--json").json["value"] == pytest.approx(found, rel=1e-3)
    assert told in stockroom(*words).said


@pytest.mark.parametrize(
    ("reaction", "standard", "found"),
    [
        ("thiosulfate on iodate", "25 cm3 of 0.1 N", 0.1),
        ("thiosulfate on iodate", "25 cm3 of 3.567 g/dm3 KIO3", 0.1),
        ("KMnO4 on FAS", "25 cm3 of 39.21 g/dm3 of Mohr's salt", 0.02),
        ("HCl on borax", "25 cm3 of 0.1 N", 0.1),
        # in moles it does not matter which of the two carbonates was dissolved
        ("HCl on soda", "25 cm3 of 0.05 mol/dm3 sodium carbonate", 0.1),
        ("AgNO3 on chloride", "25 cm3 of 0.05 M BaCl2", 0.1),
    ],
)
def test_a_pipetted_standard_may_say_what_it_is_of(
    stockroom: Stockroom, reaction: str, standard: str, found: float
) -> None:
    said = stockroom("titrate", reaction, "25.00", "--standard", standard, "--json").json
    assert said["value"] == pytest.approx(found, rel=1e-3)


@pytest.mark.parametrize(
    ("reaction", "titrant", "told"),
    [
        ("thiosulfate on iodine", "24.82 g/dm3", "which form of thiosulfate?"),
        ("EDTA on calcium", "0.02 N", "normality depends on the reaction"),
        ("NaOH on HCl", "0.1 M KOH", "is not the sodium hydroxide"),
        ("NaOH on HCl", "0 M", "is nothing at all"),
        ("NaOH on HCl", "0.1 M tea", 'Or give its formula, as "0.1 M of NaOH".'),
        ("NaOH on HCl", "0.1", "0.1 of what?"),
    ],
)
def test_a_strength_that_says_too_little_is_asked_about(
    stockroom: Stockroom, reaction: str, titrant: str, told: str
) -> None:
    words = ("titrate", reaction, "20.00", "--sample", "25 cm3", "--titrant", titrant)
    result = stockroom(*words)
    assert (result.code, told in result.err) == (2, True), result.err
