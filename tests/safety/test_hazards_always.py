"""Laws of classification: stronger is never less severe, and the order of a list says nothing."""

from __future__ import annotations

from hypothesis import given
from hypothesis import strategies as st
from limits_held import classed

from stockroom.safety.classes import CLASSES
from stockroom.safety.clp import Classification, classify, severity
from stockroom.safety.limits import Ingredient
from stockroom.safety.pictograms import PICTOGRAMS, class_behind, pictograms_of
from stockroom.safety.precautions import MOST, PRECAUTIONS, precautions_for
from stockroom.safety.statements import HAZARD, NEEDLESS_BESIDE, without_duplicates

HELD = [
    "sodium hydroxide", "hydrochloric acid", "nitric acid", "sulfuric acid", "ethanoic acid",
    "hydrogen peroxide", "ammonia", "phenol", "formaldehyde", "silver nitrate",
    "copper(II) sulfate", "potassium dichromate", "lead(II) nitrate", "sodium hypochlorite",
    "ethanol", "propanone", "nickel(II) sulfate", "sodium chloride", "methanol", "hexane",
]  # fmt: skip
LADDERS = [
    *sorted({each.ladder for each in CLASSES.values()} - {"acute"}),
    *("acute oral", "acute dermal", "acute inhaled"),
]

substances = st.sampled_from(HELD)
percents = st.floats(0, 100, allow_nan=False)


def worst(found: Classification) -> dict[str, int]:
    """How bad it is on each ladder."""
    return {ladder: severity(found, ladder) for ladder in LADDERS}


@given(substances, percents, percents)
def test_stronger_is_never_less_severe(substance: str, one: float, other: float) -> None:
    weak, strong = sorted((one, other))
    before, after = worst(classed((substance, weak))), worst(classed((substance, strong)))
    assert all(before[ladder] <= after[ladder] for ladder in LADDERS)


@given(substances, substances, percents, st.floats(0, 50), st.floats(0, 50))
def test_more_of_one_ingredient_never_makes_a_mixture_less_severe(
    substance: str, other: str, share: float, one: float, two: float
) -> None:
    weak, strong = sorted((one, two))
    beside = (other, share / 2)
    before = worst(classed((substance, weak), beside))
    after = worst(classed((substance, strong), beside))
    assert all(before[ladder] <= after[ladder] for ladder in LADDERS)


@given(st.lists(st.tuples(substances, st.floats(0, 30)), max_size=4, unique_by=lambda p: p[0]))
def test_the_order_of_the_ingredients_says_nothing(parts: list[tuple[str, float]]) -> None:
    one, other = classed(*parts), classed(*reversed(parts))
    assert one.statements + one.supplemental == other.statements + other.supplemental
    assert (one.classes, one.pictograms, one.signal_word) == (
        other.classes,
        other.pictograms,
        other.signal_word,
    )


@given(substances, st.floats(0, 100))
def test_water_changes_nothing(substance: str, percent: float) -> None:
    with_water = classed((substance, percent), ("tap water", 100 - percent))
    assert with_water.statements == classed((substance, percent)).statements


@given(substances, percents)
def test_every_statement_has_its_deciding_limit(substance: str, percent: float) -> None:
    found = classed((substance, percent))
    said = {text.partition(":")[0] for text in found.deciding}
    assert said == set(found.statements) | set(found.supplemental)


@given(st.sets(st.sampled_from(sorted(HAZARD))))
def test_no_needless_statement_is_kept(codes: set[str]) -> None:
    kept = without_duplicates(codes)
    assert not {less for code in kept for less in NEEDLESS_BESIDE.get(code, ())} & set(kept)
    assert without_duplicates(kept) == kept


@given(st.sets(st.sampled_from(sorted(HAZARD))))
def test_a_label_is_never_crowded(codes: set[str]) -> None:
    few = precautions_for(codes)
    assert len(few) <= MOST
    assert set(few) <= set(PRECAUTIONS)


@given(st.sets(st.sampled_from(sorted(CLASSES))))
def test_symbols_keep_their_precedence(names: set[str]) -> None:
    shown = set(pictograms_of(CLASSES[name] for name in names))
    assert shown <= set(PICTOGRAMS)
    assert not ("GHS06" in shown and "GHS07" in shown)
    assert not (shown & {"GHS02", "GHS06"} and "GHS04" in shown)


@given(st.sampled_from(sorted(HAZARD)))
def test_every_statement_marks_some_class(code: str) -> None:
    assert class_behind(code) is not None


@given(st.floats(0.001, 100))
def test_an_unknown_ingredient_is_never_silent(percent: float) -> None:
    assert classify([Ingredient("mystery", percent)]).unknown == ("mystery",)
