"""The eighteen cautions of the trade stand at their step, and are not said twice.

Facts behind those marked a were read on pages of makers, universities and a chemistry weekly;
the others are common practice, no source.
"""

from __future__ import annotations

import pytest

from stockroom.safety.cautions import (
    CAUTIONS,
    HOUSE_LINE,
    MAKING,
    PAST_TESTING,
    Goes,
    Step,
    cautions_about,
)
from stockroom.safety.formed import formed_of


def numbers(*things: Goes) -> set[int]:
    """The numbers of the cautions that speak of these."""
    return {each.number for each in cautions_about(things)}


def test_all_eighteen_are_held() -> None:
    assert {each.number for each in (*CAUTIONS, PAST_TESTING)} == set(range(1, 19))


@pytest.mark.parametrize(
    ("thing", "number", "step", "words"),
    [
        (Goes("sulfuric acid", "acid", strong=True), 2, Step.MIX, "Acid into water"),
        (Goes("sodium hydroxide", "alkali", solid=True), 3, Step.MIX, "small portions"),
        (Goes("hydrogen peroxide", "peroxide"), 4, Step.KEEP, "Vented cap"),
        (Goes("sodium hypochlorite", "hypochlorite"), 4, Step.KEEP, "nothing poured back"),
        (Goes("sodium hypochlorite", "hypochlorite"), 5, Step.MIX, "chloramines"),
        (Goes("ammoniacal silver"), 6, Step.MIX, "never kept"),
        (Goes("cyclohexene", "flammable"), 7, Step.OPEN, "do not open or move it; ask"),
        (Goes("nitric acid", "acid"), 8, Step.WASTE, "two thirds"),
        (Goes("ammonia", "alkali", strong=True), 9, Step.OPEN, "fume cupboard"),
        (Goes("hydrochloric acid", "acid", strong=True), 9, Step.OPEN, "pressure"),
        (Goes("bromine", "oxidiser"), 10, Step.OPEN, "thiosulfate"),
        (Goes("sodium thiosulfate"), 10, Step.USE, "sulfur dioxide"),
        (Goes("sodium disulfite", solid=True), 10, Step.USE, "asthma"),
        (Goes("ethanoic acid", "flammable", strong=True), 11, Step.OPEN, "freezes"),
        (Goes("ethanol", "flammable"), 12, Step.MIX, "no flame"),
        (Goes("ethanol", "flammable"), 12, Step.USE, "splint"),
        (Goes("silver nitrate", "oxidiser"), 13, Step.WASTE, "Collect the residues"),
        (Goes("dichloromethane", "toxic"), 13, Step.WASTE, "Collect the residues"),
        (Goes("hydrochloric acid", "acid"), 14, Step.LABEL, "new label"),
        (Goes("unknown"), 15, Step.BEGIN, "Never taste"),
        (Goes("phenol", "toxic"), 17, Step.BEGIN, "Not alone"),
        (Goes("starch", "general"), 18, Step.KEEP, "pour it away"),
    ],
)
def test_a_caution_stands_at_its_step(thing: Goes, number: int, step: Step, words: str) -> None:
    found = [c for c in cautions_about([thing]) if c.number == number and c.step is step]
    assert any(words in caution.text for caution in found)


def test_the_lines_for_every_page_stand_at_its_foot() -> None:
    held = {each.number: each.text for each in CAUTIONS}
    assert held[1] == HOUSE_LINE
    assert "estimate" in held[16]
    assert not {1, 16} & numbers(Goes("sulfuric acid", "acid", strong=True))


@pytest.mark.parametrize(
    ("thing", "number"),
    [
        (Goes("hydrochloric acid", "acid"), 9),
        (Goes("sodium hydroxide", "alkali"), 3),
        (Goes("starch", "general", solid=True), 18),
        (Goes("ethanoic acid", "flammable"), 11),
        (Goes("sodium chloride", "general"), 17),
    ],
)
def test_a_caution_is_not_said_of_another_form_or_strength(thing: Goes, number: int) -> None:
    assert number not in numbers(thing)


BLEACH = Goes("sodium hypochlorite", "hypochlorite")


def test_what_the_house_has_said_is_not_said_again() -> None:
    said = (
        "Never with acid (chlorine) nor with ammonia (chloramines)",
        "Vented cap, dark and cold, not to the brim, nothing returned, nothing metal",
    )
    assert not {4, 5} & {each.number for each in cautions_about([BLEACH], said=said)}


def test_of_a_caution_of_several_parts_only_what_was_said_is_left_out() -> None:
    said = ("Vented cap; never return any to the bottle, no metal scoops",)
    (left,) = (each for each in cautions_about([BLEACH], said=said) if each.number == 4)
    assert left.text == "Cool and dark, never filled to the brim."


def test_the_parts_of_a_caution_are_its_text() -> None:
    parted = [each for each in CAUTIONS if each.parts]
    assert [each.number for each in parted] == [4, 6]
    assert all(words in each.text.casefold() for each in parted for _, words in each.parts)


def test_silver_and_ammonia_are_known_by_what_they_give() -> None:
    silver, ammonia = Goes("silver nitrate", "oxidiser"), Goes("ammonia", "alkali")
    assert [each.substance for each in formed_of([silver, ammonia])] == ["ammoniacal silver"]
    assert formed_of([silver]) == formed_of([ammonia]) == ()
    said = ("Mix just before use; destroy it; rinse all; nothing dries.",)
    [left] = cautions_about(formed_of([ammonia, silver]), said=said, steps=(Step.MIX,))
    assert left.text.endswith("explosive on standing, cold or warm.")


@pytest.mark.parametrize(("percent", "said"), [(89.9, set()), (90.0, {11, 12}), (99.5, {11, 12})])
def test_weak_ethanoic_acid_neither_freezes_nor_burns(percent: float, said: set[int]) -> None:
    acid = Goes("ethanoic acid", "flammable", strong=True, percent=percent)
    assert numbers(acid) & {11, 12} == said


def test_at_the_bench_the_class_hears_of_flames_and_of_peroxides() -> None:
    found = cautions_about([Goes("cyclohexene", "flammable")], steps=(Step.USE, Step.WASTE))
    assert [(each.step, each.number) for each in found] == [(Step.USE, 7), (Step.USE, 12)]


def test_a_caution_of_two_steps_is_said_once() -> None:
    found = [each for each in cautions_about([Goes("bromine")]) if each.number == 10]
    assert [each.step for each in found] == [Step.OPEN]


def test_a_make_shows_the_steps_of_making_alone() -> None:
    found = cautions_about([Goes("silver nitrate", "oxidiser")], steps=MAKING)
    assert all(caution.step in MAKING for caution in found)


def test_they_come_in_the_order_of_the_work_and_once() -> None:
    acid = Goes("hydrochloric acid", "acid", strong=True)
    steps = [list(Step).index(each.step) for each in cautions_about([acid, acid])]
    assert steps == sorted(steps)
    assert len(cautions_about([acid, acid])) == len(cautions_about([acid]))
