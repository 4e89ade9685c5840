"""Wrong neighbours and tight caps are found, and nothing else is."""

from __future__ import annotations

import pytest
from hypothesis import given, settings
from hypothesis import strategies as st

from stockroom.findings import Danger, DangerKind, Finding, Moves
from stockroom.safety.neighbours import APART, Stands, tight_caps, told_once, wrong_neighbours


def told(*shelf: tuple[str, str], meant_for: str = "", place: str = "A1") -> list[tuple[str, str]]:
    """What is found on bottles of these groups in one place."""
    row = [Stands(bottle, (group,), place, meant_for) for bottle, group in shelf]
    return [(found.subject, found.text) for found in wrong_neighbours(row)]


def test_neighbours_are_named_with_their_place_and_the_reason() -> None:
    # "a": the Univ. of Notre Dame page
    assert told(("B01", "acid"), ("B14", "alkali")) == [
        ("B01", "stands beside B14 in A1: acid beside alkali, heat if they meet: move one"),
        ("B14", "stands beside B01 in A1: acid beside alkali, heat if they meet: move one"),
    ]


def test_bleach_in_the_acid_cupboard_is_found_with_nobody_beside() -> None:
    # common practice, no source
    assert told(("B04", "hypochlorite"), meant_for="acid") == [
        ("B04", "stands in A1, kept for acid: bleach beside acid, chlorine if they meet: move it")
    ]


def test_where_the_place_says_who_is_wrong_that_one_is_moved() -> None:
    bleach, acid = told(("B04", "hypochlorite"), ("B13", "acid"), meant_for="acid")
    assert bleach[1].startswith("stands beside B13 in A1, kept for acid: bleach")
    assert bleach[1].endswith("move it")
    assert acid[1].endswith("move the other")


def test_of_many_neighbours_four_are_named() -> None:
    row = told(("B1", "acid"), *((f"B{n}", "alkali") for n in range(2, 8)))
    assert row[0][1].startswith("stands beside B2, B3, B4, B5 and 2 more in A1")


@pytest.mark.parametrize("pair", sorted(map(sorted, APART)))
def test_it_does_not_matter_which_of_the_two_was_there_first(pair: list[str]) -> None:
    one, other = pair
    assert len(told(("B1", one), ("B2", other))) == len(told(("B2", other), ("B1", one))) == 2


def test_in_two_places_they_are_not_neighbours() -> None:
    assert wrong_neighbours([Stands("B1", ("acid",), "A1"), Stands("B2", ("alkali",), "A2")]) == []


@pytest.mark.parametrize(("group", "beside"), [("acid", "acid"), ("acid", ""), ("salt", "acid")])
def test_good_and_unknown_neighbours_are_passed_over(group: str, beside: str) -> None:
    assert told(("B1", group), ("B2", beside), meant_for=beside) == []


def test_findings_come_in_the_order_of_the_shelf() -> None:
    row = told(("B2", "acid"), ("B3", "salt"), ("B1", "alkali"))
    assert [subject for subject, _ in row] == ["B2", "B1"]


def test_of_two_reasons_both_are_told() -> None:
    row = [Stands("B1", ("alkali", "ammonia"), "A1"), Stands("B2", ("acid",), "A1")]
    row.append(Stands("B3", ("hypochlorite",), "A1"))
    said = [found.text for found in wrong_neighbours(row) if found.subject == "B1"]
    assert [text.split(": ")[0] for text in said] == [
        "stands beside B2 in A1",
        "stands beside B3 in A1",
    ]


def test_a_tight_cap_is_found_only_where_gas_is_made() -> None:
    caps = [("S19", "tight", True), ("S01", "tight", False), ("B01", "vented", True)]
    (found,) = tight_caps([*caps, ("B02", "", True)])
    assert found.subject == "S19"
    assert "vent it" in found.text


# -- as values -------------------------------------------------------------------------


def found(*shelf: tuple[str, str], meant_for: str = "") -> list[Danger]:
    """The dangers of bottles of these groups in one place."""
    return wrong_neighbours([Stands(bottle, (kind,), "A1", meant_for) for bottle, kind in shelf])


def test_what_a_sheet_decides_by_stands_beside_the_sentence() -> None:
    bleach, acid = found(("B04", "hypochlorite"), ("B13", "acid"), meant_for="acid")
    why = "bleach beside acid: chlorine if they meet"
    assert (bleach.kind, bleach.others, bleach.why) == (DangerKind.BESIDE, ("B13",), why)
    assert (bleach.moves, acid.moves) == (Moves.IT, Moves.OTHER)
    alone = found(("B04", "hypochlorite"), meant_for="acid")
    assert [(one.others, one.moves) for one in alone] == [((), Moves.IT)]
    (tight,) = tight_caps([("S19", "tight", True)])
    assert tight.kind is DangerKind.TIGHT


def test_all_neighbours_stand_there_though_four_are_named() -> None:
    row = found(("B1", "acid"), *((f"B{n}", "alkali") for n in range(2, 8)))
    assert row[0].others == ("B2", "B3", "B4", "B5", "B6", "B7")


def test_of_two_that_stand_wrongly_one_is_told() -> None:
    assert [each.subject for each in told_once(found(("B1", "acid"), ("B2", "alkali")))] == ["B1"]


def test_what_has_to_go_is_told_and_not_what_may_stay() -> None:
    # one acid beside three bleaches has the most of them, and stands where it belongs
    shelf = (("B0", "acid"), ("B1", "hypochlorite"), ("B2", "hypochlorite"), ("B3", "hypochlorite"))
    row = told_once(found(*shelf, meant_for="acid"))
    assert [(each.subject, each.moves) for each in row] == [
        (number, Moves.IT) for number in ("B1", "B2", "B3")
    ]


def test_whoever_has_most_tells_for_the_others() -> None:
    row = told_once(found(("B1", "alkali"), ("B2", "alkali"), ("B3", "acid")))
    assert [each.subject for each in row] == ["B3"]


def test_of_two_that_both_have_to_go_both_are_told() -> None:
    row = [
        Danger(one, "x", DangerKind.BESIDE, (other,), "fire", Moves.IT)
        for one, other in (("B1", "B2"), ("B2", "B1"))
    ]
    assert told_once(row) == row


def test_who_is_not_named_by_another_speaks_for_himself() -> None:
    row = told_once(found(("B1", "acid"), *((f"B{n}", "alkali") for n in range(2, 8))))
    assert [each.subject for each in row] == ["B1", "B6", "B7"]


def test_of_a_pair_with_two_reasons_both_are_told() -> None:
    one = Stands("B1", ("acid", "cyanide"), "A1")
    row = told_once(wrong_neighbours([one, Stands("B2", ("alkali", "acid"), "A1")]))
    assert {each.why.split(":")[0] for each in row} == {"acid beside alkali", "cyanide beside acid"}
    assert len(row) == 2


def test_other_findings_stay_where_they_were() -> None:
    strange = Finding("B9", "neighbours not checked")
    tight = tight_caps([("S19", "tight", True)])
    acid, alkali = found(("B1", "acid"), ("B2", "alkali"))
    assert told_once([strange, acid, alkali, *tight]) == [strange, acid, *tight]


@settings(max_examples=40)
@given(
    shelf=st.lists(
        st.sampled_from(("acid", "alkali", "oxidiser", "flammable", "cyanide")), max_size=9
    ),
    meant_for=st.sampled_from(("", "acid", "flammable")),
)
def test_no_wrong_pair_goes_untold(shelf: list[str], meant_for: str) -> None:
    every = found(*((f"B{n}", kind) for n, kind in enumerate(shelf)), meant_for=meant_for)
    row = told_once(every)
    named = {(each.subject, other, each.why) for each in row for other in each.others[:4]}
    for each in every:
        assert each in row or all(
            {(each.subject, other, each.why), (other, each.subject, each.why)} & named
            for other in each.others
        )
        assert each.moves is not Moves.IT or each in row
