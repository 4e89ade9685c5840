"""Strengths counted as a part of the substance: which part, how many, and how it is written."""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.chemistry.counted_as import formula_named, part_of, split
from stockroom.chemistry.formula import molar_mass
from stockroom.errors import BadAmount

# substance, part, how many of it in one mole: counted by hand
COUNTED = [
    ("KNO3", "N", 1),
    ("KNO3", "NO3", 1),
    ("(NH4)2SO4", "N", 2),
    ("(NH4)2SO4", "NH4", 2),
    ("(NH4)2SO4", "SO4", 1),
    ("(NH4)2SO4", "NH3", 2),
    ("NH4NO3", "N", 2),
    ("NH4NO3", "NO3", 1),
    ("NaCl", "Cl2", 0.5),
    ("CaCl2.2H2O", "CaCO3", 1),
    ("KH2PO4", "P2O5", 0.5),
    ("(NH4)2Fe(SO4)2.6H2O", "Fe", 1),
    ("(NH4)2Fe(SO4)2.6H2O", "SO4", 2),
    ("CuSO4.5H2O", "Cu", 1),
    ("CuSO4.5H2O", "H2O", 5),
    ("K3[Fe(CN)6]", "CN", 6),
    ("Al2(SO4)3", "Al2O3", 1),
]


@pytest.mark.parametrize(("substance", "part", "times"), COUNTED)
def test_a_part_is_counted_as_often_as_it_is_there(substance: str, part: str, times: float) -> None:
    grams = part_of(substance, part).grams_per_mole
    assert grams == pytest.approx(times * molar_mass(part), rel=1e-9)


@pytest.mark.parametrize(
    ("substance", "part", "said"),
    [
        ("KNO3", "Cl", "Cl is not in it"),
        ("MgSO4.7H2O", "CaCO3", "CaCO3 is not in it"),
        ("NH4NO3", "NH3", "may be counted in two ways"),
        ("NaCl", "H", "H is not in it"),
    ],
)
def test_what_is_not_in_it_is_refused(substance: str, part: str, said: str) -> None:
    with pytest.raises(BadAmount, match=said):
        part_of(substance, part, name="the salt")


@pytest.mark.parametrize(
    ("words", "formula"),
    [
        ("nitrate", "NO3"),
        ("NO₃⁻", "NO3"),
        ("SO42-", "SO4"),
        ("Pb²⁺", "Pb"),
        ("Cl-", "Cl"),
        ("calcium carbonate", "CaCO3"),
        ("CaCO3", "CaCO3"),
    ],
)
def test_a_part_is_named_in_words_or_by_its_formula(words: str, formula: str) -> None:
    assert formula_named(words) == formula


@pytest.mark.parametrize("words", ["tea", "", "Xx", "NO3 please"])
def test_a_part_nobody_knows_is_refused(words: str) -> None:
    with pytest.raises(BadAmount):
        formula_named(words)


@pytest.mark.parametrize(
    ("text", "found"),
    [
        ("1000 ppm m/v as NO3", ("1000 ppm m/v", "NO3")),
        ("5 mg/dm3 (as N)", ("5 mg/dm3", "N")),
        ("5 mg/dm3 of nitrate", ("5 mg/dm3", "nitrate")),
        ("5 mg/dm3 nitrate", ("5 mg/dm3", "nitrate")),
        ("5 mg/dm3 NO3-N", ("5 mg/dm3", "N")),
        ("200 mg/dm3 as calcium carbonate", ("200 mg/dm3", "calcium carbonate")),
        ("0.1 mol/dm3", None),
    ],
)
def test_what_it_is_counted_as_stands_behind_the_unit(
    text: str, found: tuple[str, str] | None
) -> None:
    assert split(text) == found


@given(st.sampled_from([each for each, _, _ in COUNTED]))
def test_the_whole_is_a_part_of_itself(formula: str) -> None:
    whole = formula.partition(".")[0]
    assert part_of(whole, whole).grams_per_mole == pytest.approx(molar_mass(whole), rel=1e-9)
