from __future__ import annotations

import json
from dataclasses import replace
from datetime import date
from typing import TYPE_CHECKING, cast

import pytest
from sample_plan import NEEDS, PLAN, HandReadiness, cubic

from stockroom.measure.amounts import Kind
from stockroom.planning.decisions import Draw
from stockroom.reports import json_plan

if TYPE_CHECKING:
    from stockroom.planning.ready import Readiness

# the contract: what scripts may rely on
KEYS = {
    "needs": "booking recipe on item strength amount unit outcome from make reasons "
    "ref dept closeness",
    "makes": "id item strength volume unit earliest latest on ready for sources cautions reasons",
    "past": "bottle item condition good_until decided_by matters_for",
    "usage": "item form amount unit",
    "orders": "item pack packs need_by order_by arrives late_by_open_days cost shares reasons",
    "short": "booking item amount unit reason",
}


@pytest.mark.parametrize(("part", "keys"), KEYS.items())
def test_every_object_has_the_keys_of_the_contract(part: str, keys: str) -> None:
    for each in json_plan.plan_json(PLAN)[part]:
        assert set(keys.split()) <= set(each)


def test_the_plan_says_its_day_its_period_and_that_it_is_practice() -> None:
    data = json_plan.plan_json(PLAN)
    assert data["as_at"] == "2027-01-04"
    assert data["period"] == {"from": "2027-01-04", "to": "2027-03-26"}
    assert data["practice"] is True


def test_the_plan_is_plain_json() -> None:
    data = json_plan.plan_json(PLAN)
    assert json.loads(json.dumps(data)) == data


def test_amounts_keep_six_figures_and_every_whole_one() -> None:
    needs = (replace(NEEDS[0], amount=cubic(1234567.4)), replace(NEEDS[0], amount=6_612))
    data = json_plan.plan_json(replace(PLAN, needs=needs))
    assert [need["amount"] for need in data["needs"]] == [1234567, 6.612]


def test_from_names_bottles_only_and_a_make_stands_apart() -> None:
    later = Draw(cubic(5), Kind.VOLUME, item="hydrogen peroxide", make="M03")
    need = replace(NEEDS[1], draws=(later,))
    (data,) = json_plan.plan_json(replace(PLAN, needs=(need,)))["needs"]
    assert (data["from"], data["make"]) == ([], "M03")


def test_a_need_without_a_make_says_null() -> None:
    assert json_plan.plan_json(PLAN)["needs"][0]["make"] is None


def test_a_source_still_to_be_made_names_item_and_make() -> None:
    later = Draw(cubic(5), Kind.VOLUME, item="sulfuric acid 2.00 mol/dm3", make="M01")
    make = replace(PLAN.makes[0], sources=(later,))
    (data,) = json_plan.plan_json(replace(PLAN, makes=(make,)))["makes"]
    wanted = {"item": "sulfuric acid 2.00 mol/dm3", "make": "M01", "amount": 5, "unit": "cm3"}
    assert data["sources"] == [wanted]


def test_cost_is_a_number_of_pounds_and_shares_add_to_it() -> None:
    (order,) = json_plan.plan_json(PLAN)["orders"]
    assert order["cost"] == 14.50
    assert sum(order["shares"].values()) == pytest.approx(order["cost"])


def test_a_guess_is_about_a_bottle_or_an_item() -> None:
    first, second = json_plan.plan_json(PLAN)["guesses"]
    assert first == {"bottle": "B01", "text": "expected, not titrated"}
    assert second == {"item": "ethanol", "text": "lead time taken as 10"}


def test_partial_answers_hold_the_same_objects_as_the_plan() -> None:
    whole = json_plan.plan_json(PLAN)
    assert json_plan.fresh_json(PLAN)["makes"] == whole["makes"]
    assert json_plan.past_json(PLAN, date(2027, 1, 4))["past"] == whole["past"]
    assert json_plan.usage_json(PLAN)["usage"] == whole["usage"]
    assert json_plan.buying_json(PLAN)["orders"] == whole["orders"]


def test_ready_answers_yes_or_no_with_the_needs_of_the_plan() -> None:
    readiness = cast("Readiness", HandReadiness())
    data = json_plan.ready_json(readiness, as_at=PLAN.as_at, practice=True)
    assert (data["ready"], data["practice"]) == (False, True)
    assert data["needs"] == json_plan.plan_json(PLAN)["needs"][:2]


def test_why_gives_its_reasons_as_a_list() -> None:
    data = json_plan.why_json("K01.1", ("a", "b"), as_at=PLAN.as_at, practice=False)
    assert data["reasons"] == ["a", "b"]
