"""Each statement says how the limit behind it is known and whose it is; the weakest mark counts.

Marks of the rows as in the reference, F1; of the general rules as in F2: from memory, save the
5 % of what burns, STOT RE, aspiration and EUH071, which were seen.
"""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st
from limits_held import classed

from stockroom.safety.clp import Classification, classify
from stockroom.safety.grounds import MARKS, weakest
from stockroom.safety.limits import Basis, Ingredient, Limit, Route


def behind(found: Classification, code: str) -> list[str]:
    """What a statement rests on: "a clp-teachers", one for each figure."""
    return [f"{each.how} {each.source}" for each in found.rests_on if each.statement == code]


@pytest.mark.parametrize(
    ("substance", "percent", "code", "grounds"),
    [
        ("sodium hydroxide", 2, "H314", ["a clp-teachers"]),
        ("potassium hydroxide", 2, "H314", ["c clp-memory"]),
        ("hydrochloric acid", 12, "H335", ["a clp-teachers"]),
        # 5 % burns, by a rule that was seen
        ("silver nitrate", 6, "H314", ["a clp-datapages", "a clp-rules-seen"]),
        ("nitric acid", 3, "H315", ["a clp-teachers", "c clp-rules"]),
        ("nitric acid", 3, "H318", ["a clp-teachers", "c clp-rules"]),
        ("hydrogen peroxide", 27, "H302", ["a clp-insurer", "c clp-rules"]),
        ("hydrogen peroxide", 27, "H272", ["a clp-transport"]),
        ("sodium hypochlorite", 5, "EUH031", ["a clp-insurer"]),
        ("sodium hypochlorite", 5, "H411", ["a clp-insurer", "c clp-rules"]),
        # the pure substance has its own class
        ("propanone", 100, "H319", ["a clp-schools"]),
        ("propanone", 100, "H225", ["a clp-schools"]),
        ("propanone", 30, "H319", ["a clp-schools", "c clp-rules"]),
        ("propanone", 30, "H225", ["a clp-schools", "ours safer-side"]),
        ("propanone", 30, "EUH066", ["a clp-schools", "ours safer-side"]),
        ("ethanol", 70, "H225", ["c flash-memory"]),
    ],
)
def test_a_statement_rests_on_its_row_and_on_the_rule_that_gave_its_limit(
    substance: str, percent: float, code: str, grounds: list[str]
) -> None:
    assert behind(classed((substance, percent)), code) == grounds


def row(name: str, code: str, basis: Basis = Basis.HARMONISED, **more: object) -> Limit:
    """A row that was seen, so that whatever else stands behind the statement is the rule's."""
    return Limit(name, code, basis, how="a", source="x", **more)  # type: ignore[arg-type]


@pytest.mark.parametrize(
    ("limit", "percent", "rule"),
    [
        (row("STOT RE 1", "H372"), 10, "a clp-rules-seen"),
        (row("STOT RE 1", "H372"), 5, "a clp-rules-seen"),
        (row("STOT SE 1", "H370"), 10, "c clp-rules"),
        (row("Asp. Tox. 1", "H304"), 10, "a clp-rules-seen"),
        (row("Skin Corr. 1B", "H314"), 5, "a clp-rules-seen"),
        (row("Skin Corr. 1A", "H314", Basis.NOT_ADDITIVE), 1, "c clp-rules"),
        (row("Carc. 2", "H351"), 1, "c clp-rules"),
        (row("STOT SE 3", "H336"), 20, "c clp-rules"),
        (row("Acute Tox. 4", "H302", route=Route.ORAL), 30, "c clp-rules"),
        (row("Aquatic Chronic 2", "H411"), 30, "c clp-rules"),
    ],
)
def test_each_general_rule_has_its_mark(limit: Limit, percent: float, rule: str) -> None:
    found = classify([Ingredient("it", percent, (limit,))])
    (code,) = found.statements
    assert behind(found, code) == ["a x", rule]


def test_that_several_add_up_is_a_rule_of_its_own() -> None:
    """Both limits are published; that shares of them are summed is from memory."""
    limit = row("Skin Corr. 1B", "H314", Basis.SPECIFIC, from_percent=2.0)
    found = classify(Ingredient(name, 1.5, (limit,)) for name in ("one", "other"))
    assert behind(found, "H314") == ["a x", "c clp-rules"]


def test_corrosive_to_the_lungs_rests_on_a_rule_that_was_seen() -> None:
    assert "a clp-rules-seen" in behind(classed(("nitric acid", 30)), "EUH071")


def test_a_named_allergen_rests_on_its_row() -> None:
    assert behind(classed(("amylase", 0.5)), "EUH208")[-1] == "c clp-rules"


def test_what_gave_no_statement_was_weighed_too() -> None:
    found = classed(("sucrose", 50))
    assert (found.rests_on, [each.how for each in found.weighed]) == ((), ["c"])


HELD = "nitric acid|phenol|silver nitrate|ethanol|propanone|sodium hypochlorite|nickel(II) sulfate"


@given(st.sampled_from(HELD.split("|")), st.floats(0, 100))
def test_every_statement_that_is_kept_rests_on_something(substance: str, percent: float) -> None:
    found = classed((substance, percent))
    said = [*found.statements, *found.supplemental]
    assert list(dict.fromkeys(each.statement for each in found.rests_on)) == said
    assert all(each.how in MARKS and each.source for each in found.rests_on)


@pytest.mark.parametrize(
    ("hows", "mark"),
    [("a", "a"), ("ab", "b"), ("bc", "c"), (["a", "house"], "house"), (["house", "c"], "c"),
     (["c", "ours"], "ours"), ([""], "c"), ([], "c")],
)  # fmt: skip
def test_the_weakest_mark_counts(hows: list[str], mark: str) -> None:
    assert weakest(hows) == mark
