"""The table of neighbours: every pair reasoned, and held against an older transport table.

Source of the cross-check: IMDG general segregation table, older edition (former 7.2.1.16),
as read on two shipping pages (a): 0 no rule, 1 away from, 2 separated from. It knows no acid
from an alkali, so it is only a check from below.
"""

from __future__ import annotations

from itertools import combinations

import pytest

from stockroom.safety.neighbours import (
    GROUPS,
    RULINGS,
    Stands,
    kinds_of,
    not_checked,
    wrong_neighbours,
)

CLASSES = "2.1 3 4.1 4.3 5.1 6.1 8".split()
OLDER_TABLE = """
2.1 0 2 1 0 2 0 1
3   2 0 0 1 2 0 0
4.1 1 0 0 0 1 0 1
4.3 0 1 0 0 2 0 1
5.1 2 2 1 2 0 1 2
6.1 0 0 0 0 1 0 0
8   1 0 1 1 2 0 0
"""
# our groups by transport class: hydrogen peroxide and permanganate are both 5.1
CLASS_OF = {
    "gas": "2.1", "flammable": "3", "metal powder": "4.1", "water-reactive": "4.3",
    "oxidiser": "5.1", "peroxide": "5.1", "toxic": "6.1", "cyanide": "6.1",
    "acid": "8", "alkali": "8", "hypochlorite": "8", "organic acid": "8",
}  # fmt: skip
# what transport parts and a prep room does not: by tray inside one cupboard, or no reaction
LET_STAND = {
    frozenset(pair.split("+"))
    for pair in "oxidiser+toxic peroxide+toxic gas+metal powder gas+acid gas+alkali"
    " gas+hypochlorite gas+organic acid gas+peroxide oxidiser+alkali oxidiser+hypochlorite"
    " peroxide+acid".replace("metal powder", "metal_powder")
    .replace("organic acid", "organic_acid")
    .split()
}
LET_STAND = {frozenset(name.replace("_", " ") for name in pair) for pair in LET_STAND}


def older(one: str, other: str) -> int:
    """What the older table says of two transport classes."""
    rows = {row.split()[0]: row.split()[1:] for row in OLDER_TABLE.strip().splitlines()}
    return int(rows[one][CLASSES.index(other)])


@pytest.mark.parametrize(("one", "other"), list(combinations(CLASSES, 2)))
def test_the_older_table_reads_the_same_both_ways(one: str, other: str) -> None:
    assert older(one, other) == older(other, one)


@pytest.mark.parametrize(("one", "other"), list(combinations(sorted(CLASS_OF), 2)))
def test_what_transport_parts_we_part_or_say_why_not(one: str, other: str) -> None:
    pair = frozenset({one, other})
    if older(CLASS_OF[one], CLASS_OF[other]):
        assert pair in RULINGS or pair in LET_STAND
    assert not (pair in RULINGS and pair in LET_STAND)


def test_every_pair_has_its_reason_its_source_and_its_mark() -> None:
    for pair, ruling in RULINGS.items():
        assert len(pair) == 2
        assert ruling.reason
        assert ruling.source
        assert ruling.how in {"a", "c"}


@pytest.mark.parametrize(
    ("one", "other", "reason"),
    [
        ("oxidiser", "flammable", "fire"),
        ("acid", "hypochlorite", "chlorine"),
        ("acid", "alkali", "heat"),
        ("acid", "cyanide", "hydrogen cyanide"),
        ("acid", "sulfide", "hydrogen sulfide"),
        ("acid", "thiocyanate", "toxic gas"),
        ("organic acid", "azide", "toxic"),
        ("oxidiser", "organic acid", "fire"),
        ("nitric acid", "organic acid", "explosion"),
        ("water-reactive", "acid", "violent"),
        ("water-reactive", "alkali", "hydrogen"),
        ("oxidiser", "peroxide former", "fire"),
        ("hypochlorite", "ammonia", "chloramines"),
        ("hypochlorite", "ammonium salt", "chloramines"),
        ("hypochlorite", "thiocyanate", "toxic gas"),
        ("acid", "sulfite", "sulfur dioxide"),
        ("organic acid", "sulfite", "sulfur dioxide"),
        ("acid", "fluoride", "hydrogen fluoride"),
        ("acid", "hexacyanoferrate", "hydrogen cyanide"),
        ("oxidising acid", "oxidiser", "explosive gas"),
        ("chlorate", "ammonium salt", "explosive"),
        ("halogen", "ammonia", "explosive"),
        ("alkali metal", "chlorinated solvent", "explosion"),
    ],
)
def test_what_must_stand_apart_is_told_with_its_reason(one: str, other: str, reason: str) -> None:
    (found,) = wrong_neighbours([Stands("B1", (one,), "A1", other)])
    assert reason in found.text


def test_a_substance_may_react_as_more_than_its_group() -> None:
    assert kinds_of("nitric acid", "acid") == ("acid", "nitric acid")
    assert kinds_of("ethanoic acid", "flammable") == ("flammable", "organic acid")
    assert kinds_of("cyclohexene", "flammable") == ("flammable",)
    assert kinds_of("benzyl alcohol", "general") == ("general", "peroxide former")


@pytest.mark.parametrize(
    ("substance", "group", "also"),
    [
        ("sodium disulfite", "general", "sulfite"),
        ("sodium fluoride", "toxic", "fluoride"),
        ("iodine", "oxidiser", "halogen"),
        ("ammonium chloride", "general", "ammonium salt"),
        ("potassium chlorate", "oxidiser", "chlorate"),
        ("dichloromethane", "toxic", "chlorinated solvent"),
    ],
)
def test_what_its_group_does_not_say_its_name_does(substance: str, group: str, also: str) -> None:
    assert kinds_of(substance, group) == (group, also)


def test_a_group_nobody_has_a_rule_for_is_not_checked() -> None:
    shelf = [("B2", "radioactive", "acid"), ("B1", "acid", "radioactive")]
    (found,) = not_checked(shelf)
    assert (found.subject, '"radioactive"' in found.text) == ("B2, B1", True)
    assert "not checked" in found.text


def test_groups_with_rules_and_plain_places_are_passed_over() -> None:
    assert not_checked([("B1", group, "dark") for group in GROUPS] + [("B2", "", "solid")]) == []


def test_one_reason_is_told_once() -> None:
    # an acid cupboard, and an acid in it
    shelf = [Stands("B1", ("alkali",), "A1", "acid"), Stands("B2", ("acid",), "A1", "acid")]
    assert [found.subject for found in wrong_neighbours(shelf)] == ["B1", "B2"]
