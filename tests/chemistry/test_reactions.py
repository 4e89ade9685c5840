"""The titrations held: every equation balances, and gives the ratio it is held with."""

from __future__ import annotations

import re
from collections import Counter

import pytest
from hypothesis import given
from hypothesis import strategies as st
from molmass import Formula

from stockroom.chemistry.reaction_forms import moles_in, without_water
from stockroom.chemistry.reaction_names import names_it, titration_of
from stockroom.chemistry.reactions import TITRATIONS, Titration
from stockroom.errors import BadInput, UnknownName

NAMES = [each.name for each in TITRATIONS]


def side(text: str) -> list[tuple[int, str]]:
    terms = (re.fullmatch(r"(?:(\d+) )?(\S+)", term.strip()) for term in text.split(" + "))
    return [(int(term[1] or 1), term[2]) for term in terms if term]


def atoms(text: str) -> Counter[str]:
    found: Counter[str] = Counter()
    for times, formula in side(text):
        for symbol, item in Formula(formula).composition().items():
            found[symbol] += times * int(item.count)
    return found


def balances(equation: str) -> bool:
    left, right = equation.split(" -> ")
    return atoms(left) == atoms(right)


def ratio(reaction: Titration) -> float:
    left = {formula: times for times, formula in side(reaction.equation.split(" -> ")[0])}
    return left[reaction.titrand_formula] / left[reaction.titrant_formula]


@pytest.mark.parametrize("reaction", TITRATIONS, ids=NAMES)
def test_an_equation_balances(reaction: Titration) -> None:
    assert balances(reaction.equation)


def test_an_equation_that_does_not_balance_would_be_noticed() -> None:
    assert not balances("2 NaOH + HCl -> NaCl + H2O")


@pytest.mark.parametrize("reaction", TITRATIONS, ids=NAMES)
def test_the_ratio_is_that_of_its_equation(reaction: Titration) -> None:
    assert reaction.per_titrant == pytest.approx(ratio(reaction), rel=1e-12)


def test_no_titration_is_held_twice() -> None:
    assert len(set(NAMES)) == len(NAMES)


def test_the_other_way_round_has_the_ratio_turned_over() -> None:
    there, back = titration_of("HCl on sodium carbonate"), titration_of("sodium carbonate on HCl")
    assert (there.per_titrant, back.per_titrant) == (1 / 2, 2)
    assert back.equation == "Na2CO3 + 2 HCl -> 2 NaCl + H2O + CO2"
    assert back.titrant == "sodium carbonate"


@pytest.mark.parametrize("burette", ["bleach", "hydrogen peroxide", "copper(II)", "dichromate"])
def test_what_would_oxidise_thiosulfate_further_is_never_run_into_it(burette: str) -> None:
    with pytest.raises(UnknownName, match="the other way round is: thiosulfate on"):
        titration_of(f"{burette} on thiosulfate")


@pytest.mark.parametrize("text", ["chalk on HCl", "H2S on iodine"])
def test_a_gas_and_what_does_not_dissolve_are_never_in_the_burette(text: str) -> None:
    with pytest.raises(UnknownName, match="the other way round is"):
        titration_of(text)


@pytest.mark.parametrize(
    ("text", "name"),
    [
        ("thiosulfate on iodate", "thiosulfate on iodate"),
        ("KMnO4 on Fe2+", "permanganate on iron(II)"),
        ("NaOH / KHP", "sodium hydroxide on potassium hydrogen phthalate"),
        ("hydrochloric acid against sodium carbonate", "hydrochloric acid on sodium carbonate"),
        ("hypo on bleach", "thiosulfate on hypochlorite"),
        ("AgNO3 on NaCl", "silver nitrate on chloride"),
        ("AgNO3 on KCl", "silver nitrate on chloride"),
        ("thiosulfate on copper(II) sulfate", "thiosulfate on copper(II)"),
        ("dichromate on FAS", "dichromate on iron(II)"),
        ("KMnO4 on Mohr's salt", "permanganate on iron(II)"),
        ("I2 vs vitamin C", "iodine on ascorbic acid"),
        ("HCl on washing soda", "hydrochloric acid on sodium carbonate"),
        ("HCl on Na2CO3·10H2O", "hydrochloric acid on sodium carbonate"),
        ("Ce4+ on FeSO4.7H2O", "cerium(IV) on iron(II)"),
        ("EDTA on CaCO3", "EDTA on calcium"),
        ("KMnO4 on H2C2O4.2H2O", "permanganate on oxalic acid"),
        ("KMnO4 on Na2C2O4", "permanganate on oxalate"),
        ("NaOH on KHC8H4O4", "sodium hydroxide on potassium hydrogen phthalate"),
        ("sulphuric acid on KOH", "sulfuric acid on potassium hydroxide"),
        ("ethanedioic acid on NaOH", "oxalic acid on sodium hydroxide"),
        ("NaOH on H3PO4 (second end-point)",
         "sodium hydroxide on phosphoric acid, second end point"),
        ("HCl on Na2CO3 to the first end point",
         "hydrochloric acid on sodium carbonate, first end point"),
    ],
)  # fmt: skip
def test_a_titration_answers_to_the_names_of_the_bench(text: str, name: str) -> None:
    assert titration_of(text).name == name


@pytest.mark.parametrize("reaction", TITRATIONS, ids=NAMES)
def test_a_titration_answers_to_its_own_name_and_formulas(reaction: Titration) -> None:
    ending = f", {reaction.end_point}" if reaction.end_point else ""
    assert titration_of(reaction.name) == reaction
    formulas = f"{reaction.titrant_formula} on {reaction.titrand_formula}{ending}"
    assert titration_of(formulas) == reaction


def test_two_end_points_are_asked_about() -> None:
    with pytest.raises(BadInput, match="to which end point") as asked:
        titration_of("NaOH on phosphoric acid")
    assert "first end point" in asked.value.hint
    assert "second end point" in asked.value.hint


@pytest.mark.parametrize("text", ["iodate on thiosulphide", "tea on milk", "", "NaOH"])
def test_a_titration_nobody_knows_brings_what_is_held(text: str) -> None:
    with pytest.raises(UnknownName, match="No titration"):
        titration_of(text)


def test_a_flask_nobody_knows_brings_those_of_that_burette() -> None:
    with pytest.raises(UnknownName) as unknown:
        titration_of("AgNO3 on barium chloride")
    assert unknown.value.hint == (
        "With silver nitrate in the burette: chloride, bromide, iodide, thiocyanate."
    )


# titration, equivalents in a mole of titrant and of titrand: by their electrons and protons
EQUIVALENTS = [
    ("KMnO4 on iron(II)", 5, 1),
    ("KMnO4 on oxalate", 5, 2),
    ("KMnO4 on peroxide", 5, 2),
    ("dichromate on iron(II)", 6, 1),
    ("iron(II) on dichromate", 1, 6),
    ("thiosulfate on iodate", 1, 6),
    ("thiosulfate on copper(II)", 1, 1),
    ("iodine on thiosulfate", 2, 1),
    ("iodine on arsenic(III) oxide", 2, 4),
    ("HCl on borax", 1, 2),
    ("H2SO4 on NaOH", 2, 1),
    ("NaOH on citric acid", 1, 3),
    ("NaOH on phosphoric acid, second end point", 1, 2),
    ("HCl on sodium carbonate, first end point", 1, 1),
    ("AgNO3 on chloride", 1, 1),
]


@pytest.mark.parametrize(("text", "titrant", "titrand"), EQUIVALENTS)
def test_a_reaction_settles_the_equivalents_of_both(
    text: str, titrant: float, titrand: float
) -> None:
    found = titration_of(text)
    assert found.burette.equivalents == pytest.approx(titrant)
    assert found.flask.equivalents == pytest.approx(titrand)


def test_the_normality_of_edta_is_not_settled() -> None:
    assert titration_of("EDTA on zinc").burette.equivalents is None
    assert titration_of("zinc on EDTA").flask.equivalents is None


@pytest.mark.parametrize(
    ("formula", "named", "moles"),
    [
        ("(NH4)2Fe(SO4)2.6H2O", "iron(II) FeSO4", 1),
        ("(NH4)2SO4.FeSO4.6H2O", "iron(II) FeSO4", 1),
        ("Fe", "iron(II) FeSO4", 1),
        ("Fe2(SO4)3", "iron(II) FeSO4", None),
        ("KH(IO3)2", "iodate KIO3", 2),
        ("BaCl2·2H2O", "chloride NaCl", 2),
        ("KHC2O4.H2C2O4.2H2O", "oxalate Na2C2O4", 2),
        ("Na2C2O4", "oxalic acid H2C2O4", None),
        ("Na2B4O5(OH)4.8H2O", "borax Na2B4O7", 1),
        ("H2O", "borax Na2B4O7", None),
        ("not a formula", "borax Na2B4O7", None),
        ("", "borax Na2B4O7", None),
    ],
)
def test_a_form_holds_so_many_moles_of_what_counts(
    formula: str, named: str, moles: float | None
) -> None:
    assert moles_in(formula, *named.rsplit(" ", 1)) == moles


@given(st.sampled_from(TITRATIONS), st.integers(1, 12))
def test_water_of_crystallisation_never_counts(held: Titration, waters: int) -> None:
    assert moles_in(f"{held.titrand_formula}.{waters}H2O", held.titrand, held.titrand_formula) == 1
    assert without_water(f"{held.titrand_formula}·{waters}H2O") == held.titrand_formula


def test_a_name_is_of_one_mole_alone() -> None:
    # a mole of barium chloride is two of chloride: titrated as one it would come out wrong
    assert not names_it("BaCl2", titration_of("AgNO3 on NaCl").flask)
