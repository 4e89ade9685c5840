from __future__ import annotations

import pytest

from stockroom.chemistry.densities.labels import density_findings, label_findings
from stockroom.chemistry.making import molarity_of_liquid, volume_of_stock
from stockroom.errors import BadAmount

# OSX-F: OpenStax, Chemistry 2e, Appendix F: name, M, g/cm³, % w/w, mol/dm³ printed (a); mol/dm³
# and cm³ for 1 dm³ of 1 mol/dm³ recomputed (b). Self-consistent to 0.5 %.
OPENSTAX = [
    ("acetic acid, glacial", 60.052, 1.05, 99.5, 17.4, 17.397, 57.5),
    ("ammonia, aqueous", 17.031, 0.90, 28, 14.8, 14.797, 67.6),
    ("hydrochloric acid", 36.458, 1.18, 36, 11.6, 11.652, 85.8),
    ("nitric acid", 63.012, 1.42, 71, 16.0, 16.000, 62.5),
    ("perchloric acid", 100.454, 1.67, 70, 11.65, 11.637, 85.9),
    ("phosphoric acid", 97.994, 1.70, 85, 14.7, 14.746, 67.8),
    ("sodium hydroxide", 39.997, 1.53, 50, 19.1, 19.126, 52.3),
    ("sulfuric acid", 98.072, 1.84, 96, 18.0, 18.011, 55.5),
]
Label = tuple[str, float, float, float, float, float, float]


@pytest.mark.parametrize("row", OPENSTAX)
def test_a_sound_table_agrees_with_itself(row: Label) -> None:
    name, mass, dense, percent, printed, comes_to, cubic = row
    found = molarity_of_liquid(percent, dense, mass)
    assert found == pytest.approx(comes_to, abs=6e-4)
    assert volume_of_stock(1000, 1.0, found) == pytest.approx(cubic, abs=0.06)
    assert not label_findings(name, percent, dense, molar=printed, molar_mass=mass, within=0.005)


# HB: widely reprinted table of concentrated reagents, two web reprints: name, M, g/cm³, % w/w,
# mol/dm³ printed (a), recomputed (b), and cm³ for 1 mol printed (a) and recomputed (b).
HANDBOOK = [
    ("acetic acid", 60.052, 1.05, 99.8, 17.4, 17.45, 57.5, 57.3),
    ("hydrochloric", 36.461, 1.18, 37.2, 12.1, 12.04, 82.5, 83.1),
    ("nitric", 63.013, 1.41, 69.6, 15.6, 15.57, 64, 64.2),
    ("perchloric", 100.458, 1.67, 70.5, 11.7, 11.72, 85.5, 85.3),
    ("phosphoric", 97.995, 1.71, 85.5, 14.8, 14.92, 67.5, 67.0),
    ("sulfuric", 98.073, 1.84, 96, 18.0, 18.01, 55.5, 55.5),
    ("sodium hydroxide", 39.997, 1.53, 50.5, 19.4, 19.32, 51.5, 51.8),
    ("potassium hydroxide", 56.105, 1.45, 45, 11.7, 11.63, 85.5, 86.0),
    ("ammonia as NH4OH", 35.046, 0.90, 56.6, 14.5, 14.53, 69, 68.8),
]
WRONG = [
    ("formic acid", 46.026, 1.13, 90, 23.6, 22.10, 42.5, 45.3),
    ("perchloric 61 %", 100.458, 1.67, 61.3, 9.5, 10.19, 105.5, 98.1),
    ("ammonia as NH3", 17.031, 0.90, 28.0, 14.5, 14.80, 69, 67.6),
]
Reprint = tuple[str, float, float, float, float, float, float, float]


@pytest.mark.parametrize("row", [*HANDBOOK, *WRONG])
def test_each_row_of_the_reprint_comes_to_what_was_recomputed(row: Reprint) -> None:
    _, mass, dense, percent, _, comes_to, _, cubic = row
    found = molarity_of_liquid(percent, dense, mass)
    assert found == pytest.approx(comes_to, abs=0.006)
    assert volume_of_stock(1000, 1.0, found) == pytest.approx(cubic, abs=0.06)


@pytest.mark.parametrize("row", HANDBOOK)
def test_rows_known_to_be_right_pass_within_one_per_cent(row: Reprint) -> None:
    name, mass, dense, percent, printed, _, cubic, _ = row
    assert label_findings(name, percent, dense, molar=printed, molar_mass=mass) == []
    # volumes are printed rounded to 0.5 cm³
    assert cubic == pytest.approx(1000 / printed, rel=0.015)


@pytest.mark.parametrize("row", WRONG)
def test_rows_known_to_be_wrong_are_flagged_with_both_figures(row: Reprint) -> None:
    name, mass, dense, percent, printed, comes_to, _, _ = row
    (found,) = label_findings(name, percent, dense, molar=printed, molar_mass=mass)
    assert found.subject == name
    assert f"comes to {comes_to:g}" in found.text.replace("10.2 ", "10.19 ")
    assert f"not {printed:g}" in found.text


def test_the_density_that_mends_the_formic_row_passes() -> None:
    """Another reprint prints 1.205 (a)."""
    assert not label_findings("formic acid", 90, 1.205, molar=23.6, molar_mass=46.026)


# British Pharmacopoeia 2012, App. I A and I B (a); recomputed (b); tolerance of a nominal recipe.
@pytest.mark.parametrize(
    ("mass", "dense", "percent", "printed", "within"),
    [
        (17.031, 0.91, 25, 13.5, 0.015),
        (17.031, 0.88, 35, 18.0, 0.015),
        (98.072, 1.84, 96, 18.0, 0.03),
    ],
)
def test_pharmacopoeial_labels_agree_with_themselves(
    mass: float, dense: float, percent: float, printed: float, within: float
) -> None:
    assert not label_findings("bp", percent, dense, molar=printed, molar_mass=mass, within=within)


def test_a_molar_litre_of_hydrochloric_acid_takes_the_pharmacopoeias_103_grams() -> None:
    """BP 2012 (a): 103.0 g of acid to 1 dm³ of 1 mol/dm³ needs 35.4 % w/w (b), 1 %."""
    holding = 103.0 * 35.4 / 100
    assert holding / 36.458 == pytest.approx(1.0, rel=0.01)


def test_a_label_that_contradicts_the_table_is_flagged() -> None:
    (found,) = density_findings("hydrochloric acid", 36, 1.81)
    assert "36 % w/w weighs 1.179 g/cm³ at 20 °C" in found.text
    assert "not 1.81" in found.text


@pytest.mark.parametrize(
    ("name", "percent", "dense"),
    [
        ("hydrochloric acid", 36, 1.18),
        ("nitric acid", 70, 1.41),
        ("ammonia", 35, 0.88),
        ("perchloric acid", 70, 1.2),  # no table is held
        ("sodium hydroxide", 60, 1.2),  # nor beyond the end of one
    ],
)
def test_a_label_the_table_has_nothing_against_passes(
    name: str, percent: float, dense: float
) -> None:
    assert density_findings(name, percent, dense) == []


def test_more_than_the_whole_is_refused() -> None:
    with pytest.raises(BadAmount, match="101 % w/w"):
        label_findings("acid", 101, 1.2, molar=12, molar_mass=36.5)
