"""Several ingredients together: what adds up, what counts by itself, and what is too little.

Source: Regulation (EC) No 1272/2008, Annex I, as restated in the reference, F2 (c unless
marked); the ingredients here are made up to stand for one rule each.
"""

from __future__ import annotations

import pytest
from limits_held import classed, codes

from stockroom.safety import acute
from stockroom.safety.clp import classify
from stockroom.safety.limits import Basis, Ingredient, Limit, Route


def made_of(*parts: tuple[float, Limit]) -> tuple[str, ...]:
    """The statements of a mixture of made-up ingredients."""
    mixture = [Ingredient(f"no. {n}", percent, (row,)) for n, (percent, row) in enumerate(parts)]
    found = classify(mixture)
    return found.statements + found.supplemental


CORROSIVE = Limit("Skin Corr. 1B", "H314")
STRONG_BASE = Limit("Skin Corr. 1A", "H314", Basis.NOT_ADDITIVE)
IRRITANT = Limit("Skin Irrit. 2", "H315")
EYE = Limit("Eye Irrit. 2", "H319")
DAMAGE = Limit("Eye Dam. 1", "H318")


@pytest.mark.parametrize(
    ("parts", "statements"),
    [
        ([(2.5, CORROSIVE), (2.5, CORROSIVE)], ("H314",)),
        ([(2.0, CORROSIVE), (2.0, CORROSIVE)], ("H315", "H318")),
        ([(1.0, CORROSIVE)], ("H315", "H319")),
        ([(0.9, CORROSIVE)], ()),
        ([(5.0, IRRITANT), (5.0, IRRITANT)], ("H315",)),
        ([(5.0, IRRITANT), (4.0, IRRITANT)], ()),
        # ten times the corrosive and the irritant together: 5 + 5
        ([(0.99, CORROSIVE), (5.0, IRRITANT)], ("H315", "H319")),
        ([(3.0, DAMAGE)], ("H318",)),
        ([(1.5, DAMAGE), (1.5, CORROSIVE)], ("H315", "H318")),
        ([(1.0, DAMAGE)], ("H319",)),
        ([(6.0, EYE), (4.0, EYE)], ("H319",)),
        # F2 no. 6: a strong base counts by itself from 1 %
        ([(1.0, STRONG_BASE)], ("H314",)),
    ],
)
def test_skin_and_eyes_add_up(
    parts: list[tuple[float, Limit]], statements: tuple[str, ...]
) -> None:
    assert made_of(*parts) == statements


def test_two_alkalis_burn_where_neither_would() -> None:
    """1.2 of 2 % and 1.0 of 2 %: 1.1 times the limit."""
    found = classed(("sodium hydroxide", 1.2), ("potassium hydroxide", 1.0))
    assert found.statements == ("H314",)
    assert "together 1.1 times" in found.deciding[0]


def test_the_worst_sub_category_counts_only_with_enough_of_it() -> None:
    worst, lesser = Limit("Skin Corr. 1A", "H314"), Limit("Skin Corr. 1C", "H314")
    mixture = [Ingredient("a", 4.0, (worst,)), Ingredient("c", 4.0, (lesser,))]
    assert "Skin Corr. 1C" in classify(mixture).classes
    assert "Skin Corr. 1A" in classify([Ingredient("a", 5.0, (worst,))]).classes


def oral(category: int, ate: float | None = None) -> Limit:
    """An acute poison by mouth."""
    code = acute.CODES["oral"][category - 1]
    return Limit(f"Acute Tox. {category}", code, route=Route.ORAL, ate=ate)


# F2 no. 11, derived edges (b); 25 and 30 % match a sheet for hydrogen peroxide (a)
@pytest.mark.parametrize(
    ("route", "category", "code", "edge"),
    [
        (Route.ORAL, 4, "H302", 25.0),
        (Route.DUST, 4, "H332", 30.0),
        (Route.DERMAL, 4, "H312", 55.0),
        (Route.ORAL, 3, "H301", 100 / 3),
        (Route.ORAL, 3, "H302", 5.0),
        (Route.DERMAL, 3, "H311", 30.0),
    ],
)
def test_a_single_poison_has_the_edges_that_follow_from_its_category(
    route: Route, category: int, code: str, edge: float
) -> None:
    way_in = {Route.ORAL: "oral", Route.DERMAL: "dermal"}.get(route, "inhaled")
    row = Limit(f"Acute Tox. {category}", acute.CODES[way_in][category - 1], route=route)
    assert code in made_of((edge, row))
    assert code not in made_of((0.94 * edge, row))


@pytest.mark.parametrize("code", ["H302", "H312", "H332"])
def test_without_a_route_the_statement_says_how_a_poison_gets_in(code: str) -> None:
    assert made_of((100.0, Limit("Acute Tox. 4", code))) == (code,)


def test_poisons_add_up_by_their_estimates() -> None:
    """100/ATE = 10/100 + 20/500 gives 714 mg/kg: harmful."""
    parts = [(10.0, oral(3, 100)), (20.0, oral(4, 500))]
    assert made_of(*parts) == ("H302",)
    found = classify([Ingredient(str(n), p, (row,)) for n, (p, row) in enumerate(parts)])
    assert "estimate 714.3 mg/kg" in found.deciding[0]


def test_a_mixture_is_never_a_worse_poison_than_what_is_in_it() -> None:
    pure = classify([Ingredient("poison", 100.0, (oral(2),))])
    assert pure.classes == ("Acute Tox. 2 (oral)",)


def test_much_unknown_leaves_less_to_thin_the_poison() -> None:
    """22 % of ATE 500 alone is 2 273 mg/kg; with half unknown, (100 − 50)/ATE: 1 136."""
    assert made_of((22.0, oral(4))) == ()
    found = classify([Ingredient("poison", 22.0, (oral(4),)), Ingredient("mystery", 50.0)])
    assert found.statements == ("H302",)


@pytest.mark.parametrize(
    ("hazard_class", "code", "edge"),
    [
        ("Muta. 1B", "H340", 0.1), ("Muta. 2", "H341", 1), ("Carc. 1A", "H350", 0.1),
        ("Carc. 2", "H351", 1), ("Repr. 1B", "H360FD", 0.3), ("Repr. 2", "H361d", 3),
        ("Lact.", "H362", 0.3), ("Skin Sens. 1", "H317", 1), ("Skin Sens. 1A", "H317", 0.1),
        ("Resp. Sens. 1", "H334", 1), ("STOT SE 1", "H370", 10), ("STOT SE 1", "H371", 1),
        ("STOT SE 2", "H371", 10), ("STOT RE 1", "H372", 10), ("STOT RE 1", "H373", 1),
        ("STOT RE 2", "H373", 10), ("STOT SE 3", "H335", 20), ("STOT SE 3", "H336", 20),
        ("Asp. Tox. 1", "H304", 10),
    ],
)  # fmt: skip
def test_lasting_harm_begins_at_its_general_limit(
    hazard_class: str, code: str, edge: float
) -> None:
    lesser = {"H371": "H370", "H373": "H372"}.get(code, code)
    written = lesser if hazard_class.endswith(" 1") else code
    row = Limit(hazard_class, written)
    assert code in made_of((edge, row))
    assert code not in made_of((0.94 * edge, row))


def test_lasting_harm_is_not_added_up() -> None:
    row = Limit("Carc. 2", "H351")
    assert made_of((0.6, row), (0.6, row)) == ()


def test_two_harms_marked_alike_are_both_said() -> None:
    unborn, fertility = Limit("Repr. 1B", "H360D"), Limit("Repr. 1A", "H360F")
    assert made_of((1.0, unborn), (1.0, fertility)) == ("H360D", "H360F")


def test_a_lesser_harm_of_the_same_kind_is_not_said_beside_the_greater() -> None:
    assert made_of((1.0, Limit("Repr. 1B", "H360D")), (5.0, Limit("Repr. 2", "H361f"))) == (
        "H360D",
    )


def test_a_sensitiser_too_weak_to_class_is_named() -> None:
    """EUH208 from a tenth of the limit."""
    found = classed(("amylase", 0.5))
    assert (found.statements, found.supplemental) == ((), ("EUH208",))
    assert found.allergens == ("amylase",)
    assert classed(("amylase", 0.05)).supplemental == ()
    assert classed(("amylase", 1.0)).supplemental == ()


# F2 nos. 17 and 18, worked by hand from 25/M, 2.5/M, 0.25/M and 25
@pytest.mark.parametrize(
    ("parts", "statements"),
    [
        ([(25.0, Limit("Aquatic Acute 1", "H400"))], ("H400",)),
        ([(0.25, Limit("Aquatic Acute 1", "H400", m_factor=100))], ("H400",)),
        ([(25.0, Limit("Aquatic Chronic 1", "H410"))], ("H410",)),
        ([(2.5, Limit("Aquatic Chronic 1", "H410"))], ("H411",)),
        ([(0.25, Limit("Aquatic Chronic 1", "H410"))], ("H412",)),
        ([(25.0, Limit("Aquatic Chronic 2", "H411"))], ("H411",)),
        ([(2.5, Limit("Aquatic Chronic 2", "H411"))], ("H412",)),
        ([(25.0, Limit("Aquatic Chronic 3", "H412"))], ("H412",)),
        ([(25.0, Limit("Aquatic Chronic 4", "H413"))], ("H413",)),
        # 10 × 1 + 15 = 25
        ([(1.0, Limit("Aquatic Chronic 1", "H410")), (15.0, Limit("Aquatic Chronic 2", "H411"))],
         ("H411",)),
    ],
)  # fmt: skip
def test_harm_to_water_life_adds_up(
    parts: list[tuple[float, Limit]], statements: tuple[str, ...]
) -> None:
    assert made_of(*parts) == statements


def test_a_specific_limit_displaces_the_general_one_of_its_class() -> None:
    """Below 10 % hydrochloric acid is classed as nothing, though 5 % corrosive would be (a)."""
    assert codes(("hydrochloric acid", 6)) == ()


def test_a_graver_class_without_a_limit_of_its_own_stays() -> None:
    """Lead's limit for H361f (2.5 %, c) does not take the general 0.3 % from its H360Df."""
    assert "H360Df" in codes(("lead(II) nitrate", 0.4))


def test_corrosive_to_the_lungs_goes_with_poison_breathed_in() -> None:
    """Nitric acid, sheet for 26 to 65 % (a): H331 and EUH071; a weak one has neither."""
    strong, weak = codes(("nitric acid", 30)), codes(("nitric acid", 6))
    assert {"H331", "EUH071"} <= set(strong)
    assert not {"H331", "H332", "EUH071"} & set(weak)
