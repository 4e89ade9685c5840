"""Each ingredient brings its usual caution to the step; all common practice, no source."""

from __future__ import annotations

import pytest

from stockroom.safety.cautions import HOUSE_LINE
from stockroom.safety.group_cautions import cautions_for


@pytest.mark.parametrize(
    ("group", "solid", "words"),
    [
        ("acid", False, "Acid into water, slowly and stirring, never water into acid"),
        ("alkali", True, "in small portions"),
        ("alkali", False, "Corrosive"),
        ("hypochlorite", False, "never meets acid"),
        ("flammable", False, "no flame"),
        ("oxidiser", True, "keep off paper"),
        ("peroxide", False, "nothing poured back"),
    ],
)
def test_an_ingredient_brings_its_caution(group: str, solid: bool, words: str) -> None:
    (caution,) = cautions_for([(group, solid)])
    assert words in caution


def test_a_solid_acid_is_not_poured_into_water() -> None:
    assert cautions_for([("acid", True)]) == ()


def test_a_group_without_an_entry_adds_nothing() -> None:
    assert cautions_for([("", False), ("salt", True)]) == ()


def test_a_caution_is_said_once_in_the_order_of_the_ingredients() -> None:
    cautions = cautions_for([("oxidiser", False), ("acid", False), ("oxidiser", False)])
    assert [text.split()[0] for text in cautions] == ["Oxidiser:", "Acid"]


def test_a_vented_cap_and_never_kept_come_last() -> None:
    *_, vented, never = cautions_for([("acid", False)], vented=True, never_kept="explosive")
    assert vented.startswith("Vented cap")
    assert never == "Never kept: explosive"


def test_local_rules_come_first() -> None:
    assert "Local rules" in HOUSE_LINE
    assert "come first" in HOUSE_LINE
