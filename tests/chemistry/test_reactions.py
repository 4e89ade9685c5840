"""The titrations held: every equation balances, and gives the ratio it is held with."""

from __future__ import annotations

import re
from collections import Counter

import pytest
from molmass import Formula

from stockroom.chemistry.reactions import TITRATIONS, Titration, titration_of
from stockroom.errors import UnknownName

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


@pytest.mark.parametrize(
    ("text", "name"),
    [
        ("thiosulfate on iodate", "thiosulfate on iodate"),
        ("KMnO4 on Fe2+", "permanganate on iron(II)"),
        ("NaOH / KHP", "sodium hydroxide on potassium hydrogen phthalate"),
        ("hydrochloric acid against sodium carbonate", "hydrochloric acid on sodium carbonate"),
        ("hypo on bleach", "thiosulfate on hypochlorite"),
        ("AgNO3 on NaCl", "silver nitrate on chloride"),
        ("thiosulfate on copper(II) sulfate", "thiosulfate on copper(II)"),
    ],
)
def test_a_titration_answers_to_the_names_of_the_bench(text: str, name: str) -> None:
    assert titration_of(text).name == name


@pytest.mark.parametrize("text", ["iodate on thiosulphite", "tea on milk", "", "NaOH"])
def test_a_titration_nobody_knows_brings_the_nearest(text: str) -> None:
    with pytest.raises(UnknownName, match="No titration"):
        titration_of(text)
