"""Peroxide-formers: a result resets or condemns, and the schedule follows the class.

Limits as read on university pages (a): Michigan State 25 and 100, MIT 20, in ppm as H2O2.
"""

from __future__ import annotations

import pytest
from hypothesis import given
from hypothesis import strategies as st

from stockroom.errors import BadAmount, BadInput
from stockroom.findings import DO_NOT_TOUCH
from stockroom.safety.peroxide_formers import (
    CLASSES,
    class_of,
    interval,
    outcome,
    read_result,
)


@pytest.mark.parametrize(
    ("mg_kg", "passed", "may_be_moved", "words"),
    [
        (0, True, True, "may go on"),
        (24.9, True, True, "may go on"),
        (25, False, True, "waste"),
        (100, False, True, "waste"),
        (100.1, False, False, "leave it in place"),
    ],
)
def test_a_result_resets_or_condemns(
    mg_kg: float, passed: bool, may_be_moved: bool, words: str
) -> None:
    found = outcome(mg_kg)
    assert (found.passed, found.may_be_moved) == (passed, may_be_moved)
    assert words in found.words


@pytest.mark.parametrize(("mg_kg", "asked"), [(20, False), (20.1, True)])
def test_above_twenty_the_waste_service_is_asked(mg_kg: float, asked: bool) -> None:
    assert any("waste service" in note for note in outcome(mg_kg).notes) is asked


@pytest.mark.parametrize("seen", ["crystals", "cloudy", "stuck cap"])
def test_what_is_seen_overrules_the_number(seen: str) -> None:
    found = outcome(0, seen=seen)
    assert (found.passed, found.may_be_moved) == (False, False)
    assert found.words == f"{seen} seen: do not open or move it; ask"


def test_class_a_is_discarded_all_the_same() -> None:
    assert any("discard" in note for note in outcome(5, "a").notes)


@given(st.floats(0, 1e6), st.floats(0, 1e6))
def test_more_peroxide_is_never_better(one: float, other: float) -> None:
    less, more = outcome(min(one, other)), outcome(max(one, other))
    assert (less.passed, less.may_be_moved) >= (more.passed, more.may_be_moved)


@pytest.mark.parametrize("mg_kg", [-1, float("nan"), float("inf")])
def test_a_number_that_cannot_be_is_refused(mg_kg: float) -> None:
    with pytest.raises(BadAmount, match="of peroxide cannot be"):
        outcome(mg_kg)


# Univ. of Southern California plan (a); two cells, marked c, were run together in the copy read
@pytest.mark.parametrize(
    ("cls", "opened", "stabilised", "months", "due"),
    [
        ("A", True, True, 3, "discard"),
        ("A", True, False, 3, "discard"),
        ("A", False, False, 6, "open or discard"),
        ("A", False, True, 24, "test or discard"),
        ("B", True, True, 12, "test or discard"),
        ("B", True, False, 6, "test or discard"),
        ("B", False, False, 12, "test or discard"),
        ("B", False, True, 24, "test or discard"),
        ("C", False, True, 12, "test or discard"),
        ("C", True, True, 12, "test or discard"),
        ("D", True, False, 6, "test or discard"),
    ],
)
def test_the_schedule_follows_class_opening_and_stabiliser(
    cls: str, opened: bool, stabilised: bool, months: int, due: str
) -> None:
    found = interval(cls, opened=opened, stabilised=stabilised)
    assert (found.months, found.due) == (months, due)


def test_a_monomer_without_stabiliser_is_not_kept() -> None:
    assert "24 h" in interval("C", opened=True, stabilised=False).in_words


@pytest.mark.parametrize("stabilised", [True, False])
@pytest.mark.parametrize("cls", sorted(CLASSES))
def test_opening_never_lengthens_the_time(cls: str, stabilised: bool) -> None:
    closed, opened = (interval(cls, opened=yes, stabilised=stabilised) for yes in (False, True))
    assert opened.months <= closed.months


# members as on the lists of three universities (a); cyclohexanol, cyclopentene,
# 4-methylpentan-2-ol and methyl tert-butyl ether (c)
@pytest.mark.parametrize(
    ("substance", "cls"),
    [
        ("diisopropyl ether", "A"),
        ("cyclohexene", "B"),
        ("propan-2-ol", "B"),
        ("cyclohexanol", "B"),
        ("styrene", "C"),
        ("methyl tert-butyl ether", "D"),
        ("ethanol", ""),
        ("cyclopentene", "B"),
        ("4-methylpentan-2-ol", "B"),
        ("Ethyl  vinyl ether", "B"),
        ("butadiene", "C"),
    ],
)
def test_a_substance_has_the_class_of_the_lists(substance: str, cls: str) -> None:
    assert class_of(substance) == cls


@pytest.mark.parametrize("name", ["butadiene", "chloroprene", "tetrafluoroethylene"])
def test_a_monomer_kept_as_a_liquid_is_of_class_a(name: str) -> None:
    assert (class_of(name), class_of(name, liquid=True)) == ("C", "A")


def test_no_other_class_depends_on_that() -> None:
    assert class_of("styrene", liquid=True) == "C"


def test_a_class_that_is_none_is_refused() -> None:
    with pytest.raises(BadInput, match="'E'"):
        interval("E", opened=True, stabilised=True)


@pytest.mark.parametrize(
    ("text", "mg_kg"),
    [("12 mg/kg", 12), ("12mg/kg", 12), ("12 ppm", 12), ("<5 mg/kg", 5), ("0,5 ppm", 0.5)],
)
def test_a_result_is_read_as_written(text: str, mg_kg: float) -> None:
    assert read_result(text) == mg_kg


@pytest.mark.parametrize("text", ["12", "12 mg/dm3", "a lot", "-3 mg/kg", "", "1.2.3 ppm"])
def test_a_result_in_no_known_unit_is_asked_about(text: str) -> None:
    with pytest.raises(BadAmount):
        read_result(text)


def test_what_is_left_alone_ends_with_the_words_of_every_message() -> None:
    for found in (outcome(101), outcome(1, seen="crystals")):
        assert found.words.endswith(DO_NOT_TOUCH)
