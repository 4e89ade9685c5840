"""What a recipe bars is refused with its reason; a swap is allowed only as it is written."""

from __future__ import annotations

from stockroom.planning.facts import Bar, Recipe, Swap
from stockroom.safety.bars import barred_by, offer

R03 = Recipe(
    "R03", 1, "permanganate titration", (),
    bars=(
        Bar("hydrochloric acid", "chloride is oxidised"),
        Bar("nitric acid", "oxidises iron"),
    ),
    swaps=(
        Swap("ammonium iron(II) sulfate", "iron(II) sulfate", 0.709, "no smell of ammonia"),
        Swap("sulfuric acid 1 mol/dm3", "hydrochloric acid 1 mol/dm3", None, "written by mistake"),
    ),
)  # fmt: skip
IRON = ("ammonium iron(II) sulfate", "iron(II) sulfate")


def test_a_barred_substance_is_named_with_its_reason() -> None:
    assert barred_by(R03, "nitric acid") == "oxidises iron"


def test_what_is_not_barred_gives_no_reason() -> None:
    assert barred_by(R03, "sulfuric acid") == ""


def test_a_substance_the_recipe_itself_asks_for_is_let_through() -> None:
    assert barred_by(R03, "nitric acid", own=("nitric acid",)) == ""


def test_an_allowed_swap_says_its_factor_and_note() -> None:
    # Source: 278.02 / 392.14 g/mol, the two heptahydrate and hexahydrate salts: 0.709
    assert offer(R03, *IRON, IRON) == (True, "allowed, mass × 0.709: no smell of ammonia")


def test_a_swap_without_a_factor_says_none() -> None:
    plain = Recipe("R12", 1, "flames", (), swaps=(Swap("a", "b", None, "fainter"),))
    assert offer(plain, "a", "b", ("a", "b")) == (True, "allowed: fainter")


def test_a_swap_is_known_by_its_substance_too() -> None:
    lines = ("ammonium iron(II) sulfate 0.1 mol/dm3", "iron(II) sulfate 0.1 mol/dm3")
    assert offer(R03, *lines, IRON)[0]


def test_a_swap_for_one_line_is_no_swap_for_another() -> None:
    offered = ("potassium iodide", IRON[1])
    assert not offer(R03, *offered, offered)[0]


def test_a_swap_does_not_work_the_other_way_round() -> None:
    assert not offer(R03, *IRON[::-1], IRON[::-1])[0]


def test_a_bar_wins_over_a_swap() -> None:
    lines = ("sulfuric acid 1 mol/dm3", "hydrochloric acid 1 mol/dm3")
    good, why = offer(R03, *lines, ("sulfuric acid", "hydrochloric acid"))
    assert (good, why) == (False, "barred: chloride is oxidised")


def test_what_nobody_wrote_down_is_refused() -> None:
    good, why = offer(R03, "potassium iodide", "sodium iodide", ("iodide", "sodium iodide"))
    assert (good, why) == (False, "not written in the recipe as an allowed swap")


def test_another_recipes_swap_is_not_offered() -> None:
    other = Recipe("R14", 1, "precipitates", ())
    assert not offer(other, *IRON, IRON)[0]
