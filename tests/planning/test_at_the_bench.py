"""What a class is told of what it gets: cautions of use and waste, and how a strength is known."""

from __future__ import annotations

from dataclasses import replace
from typing import Any

import pytest
from houses import (
    booking,
    bought_bottle,
    cm3,
    day,
    days,
    found,
    house,
    made_bottle,
    made_from,
    make_of,
    recipe,
    solution,
    wants,
)

from stockroom.keeping.rules import Law, Origin, Rule, RuleKind
from stockroom.keeping.verdict import Condition
from stockroom.measure.amounts import Kind
from stockroom.planning.amounts import per_cent_by_mass
from stockroom.planning.decisions import Make
from stockroom.planning.facts import Closeness, Facts, Form, Line
from stockroom.planning.plan import plan
from stockroom.planning.ready import readiness
from stockroom.planning.whys.why import why
from stockroom.safety.cautions import PAST_TESTING

TENTH = solution(0.1)


def liquid(name: str, group: str, strength_text: str = "", **more: Any) -> Line:
    """A bought liquid of a storage group."""
    return Line(
        f"{name} {strength_text}".strip(), name, name, Form.LIQUID, Kind.VOLUME,
        strength_text=strength_text, storage_group=group, **more,
    )  # fmt: skip


CYCLOHEXENE = liquid("cyclohexene", "flammable")
HEXANE = liquid("hexane", "flammable")


def cautions(*lines: Line, **words: str) -> list[str]:
    """The cautions of a class that gets these straight from bottles, after the recipe's own."""
    known = house(
        lines, recipes=[recipe(*(wants(one, cm3(10)) for one in lines), **words)],
        bookings=[booking("K1", "01-12")],
        bottles=[bought_bottle(f"B{n}", one, cm3(500)) for n, one in enumerate(lines, 1)],
    )  # fmt: skip
    told = readiness(known, plan(known), ("K1",), "K1", day("01-12")).cautions
    return [line for line in told if not line.startswith("R01 ")]


# -- using it, and clearing it away ---------------------------------------------------


def test_a_flammable_peroxide_former_is_told_to_the_class() -> None:
    assert cautions(CYCLOHEXENE) == [
        f"at the bench (cyclohexene): {PAST_TESTING.text}",
        "at the bench (cyclohexene): Flammable: no flame in the room.",
    ]


def test_one_caution_names_all_it_is_of() -> None:
    told = cautions(CYCLOHEXENE, HEXANE)
    assert told[1] == "at the bench (cyclohexene; hexane): Flammable: no flame in the room."


def test_what_the_recipe_has_said_is_not_said_again() -> None:
    assert cautions(HEXANE, handling="No flames: hot-water bath.") == []


def test_waste_comes_last() -> None:
    told = cautions(liquid("silver nitrate", "oxidiser"), HEXANE)
    assert [line.split(" (")[0] for line in told] == [
        "at the bench",
        "clearing away",
        "clearing away",
    ]


def test_what_is_harmless_needs_no_words() -> None:
    assert cautions(TENTH) == []


# -- ethanoic acid, strong and weak ---------------------------------------------------


@pytest.mark.parametrize(
    ("text", "strength", "percent"),
    [("25 % w/w", 4.3, 25.0), ("1.00 mol/dm3", 1.0, 6.0), ("10 % w/v", 100.0, 10.0)],
)
def test_a_label_is_read_as_a_per_cent_by_mass(text: str, strength: float, percent: float) -> None:
    unit = "g/dm3" if "w/v" in text else "mol/dm3"
    line = liquid("acid", "acid", text, strength=strength, unit=unit, molar_mass=60.0)
    assert per_cent_by_mass(line) == pytest.approx(percent)


def test_of_what_has_no_strength_no_per_cent_is_told() -> None:
    assert per_cent_by_mass(HEXANE) is None
    assert per_cent_by_mass(liquid("acid", "acid", "1 M", strength=1.0, unit="mol/dm3")) is None


@pytest.mark.parametrize(("text", "glacial"), [("25 % w/w", False), ("99.5 % w/w", True)])
def test_only_glacial_ethanoic_acid_freezes_and_burns(text: str, glacial: bool) -> None:
    acid = liquid("ethanoic acid", "flammable", text, strength=4.3, unit="mol/dm3")
    told = " ".join(cautions(acid))
    assert ("freezes" in told, "flame" in told) == (glacial, glacial)


def acid_made(text: str) -> Make:
    """A make of dilute ethanoic acid from a bottle of this label, with no words of the house."""
    acid = liquid("ethanoic acid", "flammable", text, strength=4.3, unit="mol/dm3")
    weak = solution(0.1, "ethanoic acid", storage_group="flammable", molar_mass=60.0)
    known = house(
        [acid, weak], methods=[made_from(weak, acid)], recipes=[recipe(wants(weak, cm3(100)))],
        bookings=[booking("K1", "01-12")], bottles=[bought_bottle("B1", acid, cm3(500))],
    )  # fmt: skip
    return make_of(plan(known), weak)


@pytest.mark.parametrize(("text", "glacial"), [("25 % w/w", False), ("99.5 % w/w", True)])
def test_a_make_from_weak_ethanoic_acid_needs_no_flame_put_out(text: str, glacial: bool) -> None:
    told = " ".join(acid_made(text).cautions)
    assert ("freezes" in told, "no flame" in told) == (glacial, glacial)


def test_what_the_house_says_of_a_cap_leaves_the_rest_to_be_said() -> None:
    bleach = solution(1.0, "bleach", storage_group="hypochlorite", vented_cap=True)
    strong = solution(2.0, "strong bleach", storage_group="hypochlorite")
    method = made_from(bleach, strong, cautions=("Vented cap", "never with acid (chlorine)"))
    known = house(
        [bleach, strong], methods=[method], recipes=[recipe(wants(bleach, cm3(100)))],
        bookings=[booking("K1", "01-12")], bottles=[bought_bottle("B1", strong, cm3(500))],
    )  # fmt: skip
    *_, rest = make_of(plan(known), bleach).cautions
    assert rest.startswith("Cool and dark, never filled to the brim, nothing poured back, no metal")


# -- known by dilution ----------------------------------------------------------------

BY_DILUTION = "by dilution of S9, found 2026-12-04"


def diluted(line: Line = TENTH, closeness: Closeness = Closeness.CLOSE, **record: Any) -> Facts:
    bottle = replace(made_bottle("S1", line, cm3(500), **record), known_by=BY_DILUTION)
    return house(
        [line], recipes=[recipe(wants(line, cm3(100), closeness=closeness))],
        bookings=[booking("K1", "01-12")], bottles=[bottle],
    )  # fmt: skip


def test_what_is_known_by_dilution_says_so_wherever_its_strength_stands() -> None:
    known = diluted()
    made = plan(known)
    assert f"({BY_DILUTION})" in " ".join(made.needs[0].reasons)
    (strength,) = readiness(known, made, ("K1",), "K1", day("01-12")).strengths
    assert strength == f"salt solution 0.1 mol/dm³: S1, {BY_DILUTION}"
    assert f"label 0.1 mol/dm3; {BY_DILUTION}; expected" in " ".join(why(known, made, "S1"))


def test_for_a_close_line_the_factor_carried_is_no_guess() -> None:
    assert plan(diluted()).guesses == ()


def test_an_exact_line_is_not_served_by_the_check_of_another_bottle() -> None:
    recheck = replace(TENTH, rules=(Rule(RuleKind.RECHECK, days(28)),))
    made = plan(diluted(recheck, Closeness.EXACT))
    assert [check.what for check in made.checks] == ["titrate"]
    assert [guess.text for guess in made.guesses] == [
        f"0.1 mol/dm3 {BY_DILUTION}: never titrated itself"
    ]


def test_a_result_of_its_own_comes_before_the_dilution() -> None:
    made = plan(diluted(checks=(found("01-04", 0.1),)))
    assert "(found 2027-01-04)" in " ".join(made.needs[0].reasons)


def test_what_fades_is_carried_forward_from_the_dilution() -> None:
    fading = replace(TENTH, rules=(Rule(RuleKind.FADES, law=Law(1, 0.002)),))
    (guess,) = plan(diluted(fading)).guesses
    assert guess.text.endswith(f"by its rule of fading, {BY_DILUTION}: never titrated")


# -- what may be looked at ------------------------------------------------------------


def looks(line: Line, **record: Any) -> list[tuple[Condition, bool]]:
    bottle = bought_bottle("B1", line, cm3(100), "2026-01-04", **record)
    told = plan(house([line], bottles=[bottle])).past
    return [(each.condition, each.look_would_do) for each in told]


LOOK = Rule(RuleKind.LOOK, days(30), Origin.RECEIVED)
TEST = Rule(RuleKind.TEST, days(30), Origin.RECEIVED, safety=True)


@pytest.mark.parametrize(
    ("line", "record", "told"),
    [
        (replace(TENTH, rules=(LOOK,)), {}, (Condition.PAST, True)),
        (TENTH, {"set_aside": "turned up"}, (Condition.SET_ASIDE, True)),
        (replace(HEXANE, rules=(TEST,)), {}, (Condition.PAST, False)),
        # condemned by its test, and set aside for it
        (CYCLOHEXENE, {"set_aside": "30 mg/kg: condemned"}, (Condition.SET_ASIDE, False)),
        (liquid("unknown", ""), {"set_aside": "label gone"}, (Condition.SET_ASIDE, False)),
    ],
)
def test_a_look_is_suggested_only_where_it_helps_and_harms_nobody(
    line: Line, record: dict[str, Any], told: tuple[Condition, bool]
) -> None:
    assert looks(line, **record) == [told]
