"""Wrong neighbours and tight caps are found, and nothing else is."""

from __future__ import annotations

import pytest

from stockroom.safety.neighbours import APART, tight_caps, wrong_neighbours


def test_bleach_in_the_acid_cupboard_is_found() -> None:
    # common practice, no source
    (found,) = wrong_neighbours([("B04", "hypochlorite", "acid")])
    assert (found.subject, found.text) == (
        "B04",
        "bleach beside acid: chlorine if they meet: move it",
    )


@pytest.mark.parametrize("pair", sorted(map(sorted, APART)))
def test_it_does_not_matter_which_of_the_two_was_there_first(pair: list[str]) -> None:
    one, other = pair
    assert len(wrong_neighbours([("B1", one, other), ("B2", other, one)])) == 2


@pytest.mark.parametrize(("group", "beside"), [("acid", "acid"), ("acid", ""), ("salt", "acid")])
def test_good_and_unknown_neighbours_are_passed_over(group: str, beside: str) -> None:
    assert wrong_neighbours([("B1", group, beside)]) == []


def test_findings_come_in_the_order_of_the_shelf() -> None:
    shelf = [("B2", "acid", "alkali"), ("B3", "acid", "acid"), ("B1", "alkali", "acid")]
    assert [found.subject for found in wrong_neighbours(shelf)] == ["B2", "B1"]


def test_a_tight_cap_is_found_only_where_gas_is_made() -> None:
    caps = [("S19", "tight", True), ("S01", "tight", False), ("B01", "vented", True)]
    (found,) = tight_caps([*caps, ("B02", "", True)])
    assert found.subject == "S19"
    assert "vent it" in found.text
