"""What passes the replay because the plan says so, what never does, and what is shown of it."""

from __future__ import annotations

from dataclasses import fields, replace
from datetime import date
from pathlib import Path
from random import Random
from typing import TYPE_CHECKING, Any

import pytest
from houses import day
from replay_house import FACTS, PLAN, RARE, check, make

import stockroom.service.replayed
from stockroom.errors import BrokenPlan, Refused
from stockroom.measure.workdays import Calendar
from stockroom.planning.decisions import Plan
from stockroom.planning.facts import Closeness, Facts, Placed, Recipe
from stockroom.planning.plan import whole_plan
from stockroom.planning.replaying.replay import Broken, replay
from stockroom.service.replayed import replayed_plan

if TYPE_CHECKING:
    from conftest import Stockroom


def test_a_make_of_the_day_itself_passes_only_where_the_plan_says_why() -> None:
    late = make("tenth", on=day("02-02"), ready=day("02-02"), good_until=day("03-14"))
    assert Broken.DAY_BEFORE in {fault.rule for fault in replay(FACTS, late)}
    words = "not done by 2027-02-01 as the house has it: it is too late for that"
    row = (replace(a, reasons=(words,)) if a.ref == "K4.1" else a for a in late.needs)
    assert replay(FACTS, replace(late, needs=tuple(row))) == ()


def test_a_house_that_asks_for_no_day_before_needs_no_reason() -> None:
    late = make("tenth", on=day("02-02"), ready=day("02-02"), good_until=day("03-14"))
    easy = replace(FACTS, house=replace(FACTS.house, finish_day_before=False))
    assert replay(easy, late) == ()


def test_what_is_on_its_way_is_as_good_as_an_order_from_the_day_it_comes() -> None:
    def coming(expected: str, packs: int = 1) -> Facts:
        on_way = Placed("P1", RARE.key, 25_000_000, "pack", packs, 900, day("01-04"), day(expected))
        return replace(FACTS, placed=(on_way,))

    bare = replace(PLAN, orders=())
    assert replay(coming("01-20"), bare) == ()
    assert {f.rule for f in replay(coming("01-20", 0), bare)} == {Broken.ORDERED}
    assert {f.rule for f in replay(coming("01-30"), bare)} == {Broken.IN_TIME}
    # expected on the Saturday before, it counts from the Monday
    assert replay(coming("01-23"), bare) == ()


def test_a_closed_day_for_a_titration_passes_only_where_none_is_open_and_it_says_so() -> None:
    strict = replace(
        FACTS, recipes={key: found_that_day(one) for key, one in FACTS.recipes.items()}
    )
    shut = replace(strict, calendar=Calendar(((day("02-11"), day("02-11")),)))
    said = "not titrated when made; it counts from 2027-02-11 only, and all of that is closed"
    late: dict[str, Any] = {"not_before": day("02-11"), "by": day("02-10"), "best": day("02-10")}
    rules = {Broken.EXACT, Broken.CHECK_DAY}
    assert not rules & of_second_class(shut, check(reason=said, **late))
    assert rules <= of_second_class(shut, check(**late))
    assert rules <= of_second_class(strict, check(reason=said, **late))


def found_that_day(one: Recipe) -> Recipe:
    """The recipe, where an exact strength counts on the day it is found only."""
    row = (
        replace(asked, found_within_days=0) if asked.closeness is Closeness.EXACT else asked
        for asked in one.requirements
    )
    return replace(one, requirements=tuple(row))


def of_second_class(facts: Facts, made: Plan) -> set[Broken]:
    """The rules broken at what K5 gets, and at the checks."""
    faults = replay(facts, made)
    return {fault.rule for fault in faults if fault.where.startswith(("K5", "titrate"))}


ODD: list[Any] = ["", "?", 0, -1, 10**15, None, (), date(2027, 2, 14), date(1999, 1, 1), True]


def test_a_plan_of_nonsense_is_full_of_faults_and_never_raises() -> None:
    """Whole rows are lost, doubled and put in another's place: what is wrong is told."""
    luck = Random(4)
    rows = [f.name for f in fields(Plan) if isinstance(getattr(PLAN, f.name), tuple)]
    other: dict[str, Any]
    for _ in range(300):
        spoilt = PLAN
        for name in luck.sample(rows, 3):
            row = list(getattr(spoilt, name))
            luck.shuffle(row)
            row = row[: luck.randint(0, len(row))] + luck.choices(row, k=2) if row else row
            other = {name: tuple(_spoilt(luck, one) for one in row)}
            spoilt = replace(spoilt, **other)
        replay(FACTS, spoilt)


def _spoilt(luck: Random, one: Any) -> Any:
    name = luck.choice([f.name for f in fields(one)])
    kind = type(getattr(one, name))
    fit = [odd for odd in ODD if type(odd) is kind]
    return replace(one, **{name: luck.choice(fit)}) if fit else one


@pytest.fixture
def broken(monkeypatch: pytest.MonkeyPatch) -> None:
    """The planner forgets an order: every plan it makes is one to hold back."""

    def forgetful(known: Facts, *, past_day: date | None = None) -> Plan:
        return replace(whole_plan(known, past_day=past_day), orders=())

    # what a test before this one asked may still be known
    stockroom.service.replayed.forget_plans()
    monkeypatch.setattr(stockroom.service.replayed, "whole_plan", forgetful)


def test_a_good_plan_is_handed_on_as_it_is() -> None:
    good = replace(FACTS, bottles=tuple(b for b in FACTS.bottles if b.number[0] != "X"))
    assert replayed_plan(good) == PLAN


@pytest.mark.usefixtures("broken")
def test_a_broken_plan_is_refused_with_the_rule_the_place_and_the_day() -> None:
    good = replace(FACTS, bottles=tuple(b for b in FACTS.bottles if b.number[0] != "X"))
    with pytest.raises(BrokenPlan) as refused:
        replayed_plan(good)
    message = refused.value.message
    assert "K3.1: " in message
    assert str(Broken.ORDERED) in message
    assert "Nothing of it is shown" in message
    assert "--as-at 2027-01-04" in refused.value.hint
    assert (issubclass(BrokenPlan, Refused), refused.value.exit_code) == (True, 1)


@pytest.mark.usefixtures("broken")
@pytest.mark.parametrize("words", ["plan", "plan --json", "fresh", "past", "buying", "usage",
                                   "ready 2027-01-26", "why K08"])  # fmt: skip
def test_no_command_shows_anything_of_a_broken_plan(
    words: str, stockroom: Stockroom, practice: Path
) -> None:
    result = stockroom(*words.split(), "--as-at", "2027-01-04", store=practice)
    assert (result.code, result.out) == (1, "")
    assert "breaks a rule" in result.err
    assert "report it" in result.err
